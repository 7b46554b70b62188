"""Native charts, in the look of the sheets."""

from collections.abc import Mapping
from datetime import date
from math import ceil
from typing import Any

from tenorbook.tables.sheet import Chart, Charts, Series
from tenorbook.write.cells import serial
from tenorbook.write.design import Design
from tenorbook.write.heights import Heights
from tenorbook.write.layout import CHART_ROWS
from tenorbook.write.look import RULE

_GAP = 12
"""Between charts, in pixels."""

_PIXELS_PER_POINT = 96 / 72
_WIDEST = 480
"""Of a chart, in pixels."""

_MOST_LABELS = 12
"""Under the columns of a chart."""

_KINDS = {
    "area": {"type": "area"},
    "column": {"type": "column"},
    "stacked column": {"type": "column", "subtype": "stacked"},
}

Ranges = Mapping[tuple[str, str, str], str]
"""(sheet, table, column) -> the cells of the column."""


class ChartMaker:
    """Puts charts on the sheets of one workbook.

    Args:
        writer: XlsxWriter's workbook.
        design: the chosen look.
        ranges: the cells of every column of every table.
    """

    def __init__(self, writer: Any, design: Design, ranges: Ranges) -> None:
        self._writer, self._design, self._ranges = writer, design, ranges

    def insert(self, target: Any, charts: Charts, row: int, width: float, heights: Heights) -> None:
        """A row of charts, side by side.

        Args:
            target: XlsxWriter's worksheet.
            charts: what to draw.
            row: the sheet row of their upper edge, counted from 1.
            width: all that they may take, in pixels.
            heights: of the sheet's rows.
        """
        each = min(int(width / len(charts.charts)) - _GAP, _WIDEST)
        height = int(CHART_ROWS * heights.usual * _PIXELS_PER_POINT) - 4
        for number, chart in enumerate(charts.charts):
            drawn = self._drawn(chart)
            drawn.set_size({"width": each, "height": height})
            target.insert_chart(row - 1, 0, drawn, {"x_offset": 2 + number * (each + _GAP), "y_offset": 2})

    def _drawn(self, chart: Chart) -> Any:
        drawn = self._writer.add_chart(dict(_KINDS[chart.kind]))
        for series, color in zip(chart.series, (self._design.accent, self._design.second), strict=False):
            drawn.add_series(self._series(chart, series, color))
        self._style(drawn, chart)
        return drawn

    def _series(self, chart: Chart, series: Series, color: str) -> dict[str, Any]:
        """One series; its values go along for programs that draw without reading the cells."""
        categories = chart.categories
        return {
            "name": series.name,
            "categories": "=" + self._ranges[categories.sheet, categories.table, categories.column],
            "categories_data": _cached(categories),
            "values": "=" + self._ranges[series.sheet, series.table, series.column],
            "values_data": _cached(series),
            "fill": {"color": color, "transparency": 60 if chart.kind == "area" else 0},
            "border": {"color": color, "width": 1},
            "gap": 60,
        }

    def _style(self, drawn: Any, chart: Chart) -> None:
        font = {"name": self._design.font, "size": 8, "color": self._design.quiet, "bold": False}
        title = {"name": self._design.font, "size": 10, "color": self._design.ink, "bold": True}
        drawn.set_title({"name": chart.title, "name_font": title, "overlay": False})
        drawn.set_x_axis(
            {"num_font": font, "line": {"color": RULE}, "major_tick_mark": "none", **_category_axis(chart)}
        )
        drawn.set_y_axis(
            {
                "name": chart.unit,
                "name_font": font,
                "num_font": font,
                "num_format": _axis_format(chart),
                "line": {"none": True},
                "major_tick_mark": "none",
                "major_gridlines": {"visible": True, "line": {"color": RULE, "width": 0.5}},
                "min": 0,
            }
        )
        legend = {"position": "bottom", "font": font} if len(chart.series) > 1 else {"none": True}
        drawn.set_legend(legend)
        drawn.set_chartarea({"border": {"none": True}, "fill": {"none": True}})
        drawn.set_plotarea({"fill": {"none": True}})


def _axis_format(chart: Chart) -> str:
    """Thousands or millions, with a decimal where the axis ends low."""
    highest = max((float(v) for s in chart.series for v in s.values if isinstance(v, float | int)), default=0)
    places = ".0" if chart.thousands and highest / 1000**chart.thousands < 4 else ""
    return "#,##0" + places + "," * chart.thousands


def _category_axis(chart: Chart) -> dict[str, Any]:
    """An area over months: its axis is labelled in years, six or so of them; of many columns not each is."""
    if chart.kind != "area":
        return {"interval_unit": ceil(len(chart.categories.values) / _MOST_LABELS)}
    years = max(1, round(len(chart.categories.values) / 12 / 6))
    return {"date_axis": True, "major_unit": years, "major_unit_type": "years", "num_format": "yyyy"}


def _cached(series: Series) -> list[float | str]:
    return [serial(value) if isinstance(value, date) else value for value in series.values]
