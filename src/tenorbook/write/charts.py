"""Native charts, in the look of the sheets."""

from collections.abc import Mapping
from datetime import date
from typing import Any

from tenorbook.tables.sheet import Chart, Series
from tenorbook.write.cells import serial
from tenorbook.write.look import ACCENT, FONT, INK, QUIET, RULE, SECOND

WIDTH = 560
HEIGHT = 330
"""Size of a chart in pixels."""

_COLORS = (ACCENT, SECOND, "#7A8F99", "#9DBFA6")


def insert_chart(
    writer: Any,
    target: Any,
    ranges: Mapping[tuple[str, str, str], str],
    chart: Chart,
    position: tuple[int, int],
) -> None:
    """Puts a chart on a sheet.

    Args:
        writer: XlsxWriter's workbook.
        target: XlsxWriter's worksheet.
        ranges: (sheet, table, column) -> the cells of the column.
        chart: what to draw.
        position: the sheet row of its upper edge, counted from 0, and its number in its row of charts.
    """
    drawn = writer.add_chart(_KINDS[chart.kind])
    for series, color in zip(chart.series, _COLORS, strict=False):
        drawn.add_series(_series(chart, series, color, ranges))
    _style(drawn, chart)
    row, number = position
    drawn.set_size({"width": WIDTH, "height": HEIGHT})
    target.insert_chart(row, 0, drawn, {"x_offset": 4 + number * (WIDTH + 16), "y_offset": 4})


def _time_axis(chart: Chart) -> dict[str, Any]:
    """A line over months: its axis is labelled in years, about ten of them."""
    if chart.kind != "line":
        return {}
    years = max(1, round(len(chart.categories.values) / 12 / 10))
    return {"date_axis": True, "major_unit": years, "major_unit_type": "years"}


_KINDS = {
    "line": {"type": "area"},
    "stacked column": {"type": "column", "subtype": "stacked"},
}


def _series(
    chart: Chart, series: Series, color: str, ranges: Mapping[tuple[str, str, str], str]
) -> dict[str, Any]:
    """One series; its values go along for programs that draw without reading the cells."""
    categories = chart.categories
    return {
        "name": series.name,
        "categories": "=" + ranges[categories.sheet, categories.table, categories.column],
        "categories_data": _cached(categories),
        "values": "=" + ranges[series.sheet, series.table, series.column],
        "values_data": _cached(series),
        "fill": {"color": color, "transparency": 55 if chart.kind == "line" else 0},
        "border": {"color": color, "width": 1.25},
        "gap": 60,
    }


def _cached(series: Series) -> list[float | str]:
    return [serial(value) if isinstance(value, date) else value for value in series.values]


def _style(drawn: Any, chart: Chart) -> None:
    font = {"name": FONT, "size": 9, "color": QUIET}
    drawn.set_title(
        {"name": chart.title, "name_font": {"name": FONT, "size": 11, "color": INK}, "overlay": False}
    )
    drawn.set_x_axis(
        {
            "num_font": font,
            "line": {"color": RULE},
            "num_format": "yyyy" if chart.kind == "line" else "0",
            **_time_axis(chart),
            "major_tick_mark": "none",
        }
    )
    drawn.set_y_axis(
        {
            "num_font": font,
            "num_format": "#,##0",
            "line": {"none": True},
            "major_gridlines": {"visible": True, "line": {"color": RULE, "width": 0.5}},
            "min": 0,
        }
    )
    if len(chart.series) > 1:
        drawn.set_legend({"position": "bottom", "font": font})
    else:
        drawn.set_legend({"none": True})
    drawn.set_chartarea({"border": {"color": RULE}})
