"""View and print set-up of a sheet: frozen header, widths, landscape A4, page x of y."""

from typing import Any

from tenorbook.write.layout import SheetPlace, TablePlace

A4 = 9
"""The paper, by the number workbooks give it."""

LONGEST_LINE = 250
"""Most characters of a printed header or footer; spreadsheet programs take 255 in all."""


def set_up_view(target: Any, place: SheetPlace) -> None:
    """Column widths, no grid lines, and the frozen table header."""
    for number, width in enumerate(place.widths):
        target.set_column(number, number, width)
    target.hide_gridlines(2)
    target.set_zoom(100)
    frozen = _frozen(place)
    if frozen:
        target.freeze_panes(frozen.header_row, 0)


def set_up_page(target: Any, place: SheetPlace) -> None:
    """Landscape A4, as wide as the page and as long as it takes, header rows repeated."""
    target.set_landscape()
    target.set_paper(A4)
    target.set_margins(left=0.5, right=0.5, top=0.7, bottom=0.7)
    target.fit_to_pages(1, 0)
    target.center_horizontally()
    frozen = _frozen(place)
    if frozen:
        target.repeat_rows(frozen.header_row - 1)
    target.set_header(_margin_line(place.sheet.title, place.sheet.print_header))
    target.set_footer(_margin_line(place.sheet.print_footer, "", page=True))


def _frozen(place: SheetPlace) -> TablePlace | None:
    return next((table for table in place.tables.values() if table.table.frozen), None)


def _margin_line(left: str, right: str, page: bool = False) -> str:
    """A printed header or footer; `&` starts a command there, so that a plain one is doubled."""
    room = 180 if page else (LONGEST_LINE - 40) // 2
    right = "Page &P of &N" if page else _plain(right, room)
    return f'&L&"Calibri"&8{_plain(left, room)}&R&"Calibri"&8{right}'


def _plain(text: str, room: int) -> str:
    return " " + " ".join(text.split())[:room].replace("&", "&&") if text else ""
