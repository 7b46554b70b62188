"""Sheets to a workbook file: rows by our own writer, everything around them by XlsxWriter.

Sheets are announced in the order of their tabs and filled in any order, one at a time; each goes to
disk as it is filled, so that memory holds one sheet.
"""

from collections.abc import Iterable
from datetime import datetime
from pathlib import Path
from tempfile import TemporaryDirectory
from types import TracebackType
from typing import Any, Self

from tenorbook.tables.sheet import Charts, Sheet
from tenorbook.tables.table import Sparklines, Table
from tenorbook.write.cells import quoted
from tenorbook.write.charts import insert_chart
from tenorbook.write.layout import SheetPlace, arrange
from tenorbook.write.look import ACCENT, Look
from tenorbook.write.page import set_up_page, set_up_view
from tenorbook.write.sheet_rows import sheet_rows


class Workbook:
    """A workbook being written; leaving its `with` block writes the file.

    Args:
        path: the file to write.
        sheets: names of the sheets in the order of their tabs.
        title: in the document's properties.
        created: the time of creation in the document's properties; the caller fixes it, so that the
            same input gives the same bytes.
        values_only: whether formulas are left out.
    """

    def __init__(
        self,
        path: Path,
        sheets: Iterable[str],
        *,
        title: str,
        created: datetime,
        values_only: bool = False,
    ) -> None:
        self._folder = TemporaryDirectory(prefix="tenorbook-")
        self._writer = _xlsxwriter(path, self._folder.name)
        self._writer.set_properties({"title": title, "created": created, "author": "tenorbook"})
        self._look = Look(self._writer)
        self._values_only = values_only
        self._ranges: dict[tuple[str, str, str], str] = {}
        self._later: list[tuple[Any, SheetPlace]] = []
        self._sheets = {name: self._announce(name) for name in sheets}

    def _announce(self, name: str) -> Any:
        from tenorbook.write.row_sheet import RowSheet

        sheet = self._writer.add_worksheet(name, RowSheet)
        sheet.pause()
        return sheet

    def fill(self, sheet: Sheet) -> None:
        """Writes one announced sheet; it is not needed afterwards."""
        target, place = self._sheets[sheet.name], arrange(sheet)
        rows = sheet_rows(place, self._look, self._values_only)
        target.put_rows(rows, place.height, len(place.widths))
        set_up_view(target, place)
        set_up_page(target, place)
        _link(target, place)
        for name, cell in place.names.items():
            self._writer.define_name(f"{quoted(sheet.name)}!{name}", f"={quoted(sheet.name)}!{cell}")
        self._ranges.update(place.ranges())
        if _draws_on_others(sheet):
            self._later.append((target, place))

    def _finish(self) -> None:
        """Adds what draws on several sheets, and writes the file."""
        for target, place in self._later:
            for row, part in place.parts:
                if isinstance(part, Charts):
                    for number, chart in enumerate(part.charts):
                        insert_chart(self._writer, target, self._ranges, chart, (row - 1, number))
                elif isinstance(part, Table) and part.sparkline:
                    self._insert_sparklines(target, place, part.key, part.sparkline)
        self._writer.close()

    def _insert_sparklines(self, target: Any, place: SheetPlace, table: str, lines: Sparklines) -> None:
        where = place.tables[table]
        for row, followed in lines.targets.items():
            cell = f"{where.letters[lines.column]}{where.rows[row]}"
            options = {"range": self._ranges[followed], "series_color": ACCENT, "weight": 1.25, "min": 0}
            target.add_sparkline(cell, options)

    def __enter__(self) -> Self:
        return self

    def __exit__(
        self, kind: type[BaseException] | None, value: BaseException | None, trace: TracebackType | None
    ) -> None:
        try:
            if kind is None:
                self._finish()
        finally:
            for sheet in self._sheets.values():
                sheet.pause()
            self._folder.cleanup()


def _xlsxwriter(path: Path, temporary: str) -> Any:
    """XlsxWriter's workbook, told never to take text for anything but text."""
    from xlsxwriter import Workbook as Writer

    options = {
        "constant_memory": True,
        "tmpdir": temporary,
        "strings_to_formulas": False,
        "strings_to_urls": False,
        "strings_to_numbers": False,
    }
    return Writer(str(path), options)


def _link(target: Any, place: SheetPlace) -> None:
    """Makes the cells that lead to other sheets links."""
    if place.sheet.back:
        target.put_link(2, 0, f"internal:{quoted(place.sheet.back)}!A1")
    for table in place.tables.values():
        for number, column in enumerate(table.table.columns):
            for row, sheet in column.links.items():
                target.put_link(table.rows[row] - 1, number, _target(sheet))


def _target(sheet: str) -> str:
    """A link as XlsxWriter spells it; `file#sheet` leads to another workbook in the same folder."""
    file, mark, name = sheet.rpartition("#")
    return f"external:{file}#{quoted(name)}!A1" if mark else f"internal:{quoted(sheet)}!A1"


def _draws_on_others(sheet: Sheet) -> bool:
    return any(
        isinstance(part, Charts) or (isinstance(part, Table) and part.sparkline is not None)
        for part in sheet.parts
    )
