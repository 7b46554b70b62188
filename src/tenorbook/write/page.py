"""View and print set-up of a sheet: frozen header, filters, widths, paper, what is printed where."""

from typing import Any

from tenorbook.write.design import Design
from tenorbook.write.heights import Heights
from tenorbook.write.layout import SheetPlace, TablePlace
from tenorbook.write.paging import MARGIN, SIDE_MARGIN, Paging

_PAPERS = {"A4": 9, "Letter": 1}
"""Papers, by the numbers that workbooks give them."""

_POINTS_PER_INCH = 72
_INTO_MARGIN = 0.5
"""How far from the paper's edge the printed header and footer stand, as a share of the margin."""

_LONGEST_LINE = 250
"""Most characters of a printed header or footer; spreadsheet programs take 255 in all."""


def set_up_view(target: Any, place: SheetPlace, heights: Heights, design: Design) -> None:
    """Column widths, no grid lines, the frozen table header, and its filter buttons."""
    for number, width in enumerate(place.widths):
        target.set_column(number, number, widened(width, design))
    target.hide_gridlines(2)
    target.set_default_row(heights.usual)
    target.outline_row_level = int(any(table.table.subtotals for table in place.tables.values()))
    frozen = _frozen(place)
    if frozen:
        target.freeze_panes(frozen.header_row, 0)
    for table in place.tables.values():
        if table.table.filtered:
            first = table.header_row - 1
            target.autofilter(first, 0, max(table.last_body_row - 1, first), len(table.table.columns) - 1)


def widened(width: float, design: Design) -> float:
    """A column's width in the chosen typeface and size."""
    return round(width * design.widen * design.text_size / 10, 2)


def pixels(place: SheetPlace, design: Design) -> float:
    """How wide the printed columns of a sheet are on the screen."""
    columns = place.widths[: place.sheet.printed.columns]
    return sum(int(widened(width, design) * 7 + 5) for width in columns)


def set_up_page(target: Any, place: SheetPlace, heights: Heights, design: Design) -> None:
    """Landscape, as wide as the page; broken where a reader would break it; header rows repeated."""
    target.set_landscape()
    target.set_paper(_PAPERS[design.paper])
    side, edge = SIDE_MARGIN / _POINTS_PER_INCH, MARGIN / _POINTS_PER_INCH
    target.set_margins(left=side, right=side, top=edge, bottom=edge)
    target.center_horizontally()
    frozen = _frozen(place)
    widths = [widened(width, design) for width in place.widths]
    paging = Paging(place, heights, widths, design.paper, frozen.header_row if frozen else 0)
    if paging.whole:
        target.fit_to_pages(1, 1)
    else:
        target.fit_to_pages(1, 0)
        target.set_h_pagebreaks(paging.breaks())
        if frozen:
            target.repeat_rows(frozen.header_row - 1)
    if paging.restricted:
        target.print_area(0, 0, paging.last_row - 1, paging.columns - 1)
    options = {"margin": edge * _INTO_MARGIN}
    target.set_header(_margin_line(place.sheet.title, place.sheet.print_header, design), options)
    footer = design.footer or place.sheet.print_footer
    target.set_footer(_margin_line(footer, "", design, page=True), options)


def _frozen(place: SheetPlace) -> TablePlace | None:
    return next((table for table in place.tables.values() if table.table.frozen), None)


def _margin_line(left: str, right: str, design: Design, page: bool = False) -> str:
    """A printed header or footer; `&` starts a command there, so that a plain one is doubled."""
    room = 180 if page else (_LONGEST_LINE - 80) // 2
    right = "Page &P of &N" if page else _plain(right, room)
    font = f'&"{design.font}"&8'
    return f"&L{font}{_plain(left, room)}&R{font}{right}"


def _plain(text: str, room: int) -> str:
    return " " + " ".join(text.split())[:room].replace("&", "&&") if text else ""
