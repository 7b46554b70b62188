"""Sheets to a workbook file: rows by our own writer, everything around them by XlsxWriter.

Sheets are announced in the order of their tabs and filled in any order, one at a time; each is kept
compressed once it is filled, so that memory holds one sheet in full and little of the others.
"""

from collections.abc import Iterable
from datetime import datetime
from pathlib import Path
from types import TracebackType
from typing import Any, Self

from tenorbook.tables.sheet import Charts, Checks, Sheet
from tenorbook.tables.table import Sparklines, Table
from tenorbook.write.cells import quoted
from tenorbook.write.charts import ChartMaker
from tenorbook.write.design import Design
from tenorbook.write.heights import Heights
from tenorbook.write.layout import SheetPlace, arrange
from tenorbook.write.logo import insert_logo
from tenorbook.write.look import Look
from tenorbook.write.page import pixels, set_up_page, set_up_view
from tenorbook.write.sheet_rows import FAIL, sheet_rows


class Workbook:
    """A workbook being written; leaving its `with` block writes the file.

    Args:
        path: the file to write.
        sheets: names of the sheets in the order of their tabs.
        title: in the document's properties.
        created: the time of creation in the document's properties; the caller fixes it, so that the
            same input gives the same bytes.
        design: the chosen look.
        values_only: whether formulas are left out.
    """

    def __init__(
        self,
        path: Path,
        sheets: Iterable[str],
        *,
        title: str,
        created: datetime,
        design: Design,
        values_only: bool = False,
    ) -> None:
        self._writer = _xlsxwriter(path)
        self._writer.set_properties({"title": title, "created": created, "author": "tenorbook"})
        self._look = Look(self._writer, design)
        self._values_only = values_only
        self._ranges: dict[tuple[str, str, str], str] = {}
        self._later: list[tuple[Any, SheetPlace]] = []
        self._sheets = {name: self._announce(name) for name in sheets}

    def _announce(self, name: str) -> Any:
        from tenorbook.write.row_sheet import RowSheet

        return self._writer.add_worksheet(name, RowSheet)

    def fill(self, sheet: Sheet) -> None:
        """Writes one announced sheet; it is not needed afterwards."""
        target, place, design = self._sheets[sheet.name], arrange(sheet), self._look.design
        heights = Heights(place, design)
        rows = sheet_rows(place, self._look, heights, self._values_only)
        target.put_rows(rows, place.height, len(place.widths))
        set_up_view(target, place, heights, design)
        set_up_page(target, place, heights, design)
        _link(target, place)
        self._name(sheet.name, place)
        self._mark_failures(target, place)
        if sheet.logo and design.logo:
            insert_logo(target, place, heights, design)
        self._ranges.update(place.ranges())
        if _draws_on_others(sheet):
            self._later.append((target, place))

    def _name(self, sheet: str, place: SheetPlace) -> None:
        """Defines the names of a sheet."""
        for name, cells in place.names.items():
            self._writer.define_name(f"{quoted(sheet)}!{name}", f"={quoted(sheet)}!{cells}")

    def _mark_failures(self, target: Any, place: SheetPlace) -> None:
        """Lets a FAIL stand out, whenever a recalculation brings one."""
        rule = {"type": "cell", "criteria": "==", "value": f'"{FAIL}"', "format": self._look.alarm}
        for row, part in place.parts:
            if isinstance(part, Checks):
                column = part.value_column + 1
                target.conditional_format(row, column, row + len(part.checks), column, rule)

    def _finish(self) -> None:
        """Adds what draws on several sheets, and writes the file."""
        maker = ChartMaker(self._writer, self._look.design, self._ranges)
        for target, place in self._later:
            for row, part in place.parts:
                if isinstance(part, Charts):
                    width = pixels(place, self._look.design)
                    maker.insert(target, part, row, width, Heights(place, self._look.design))
                elif isinstance(part, Table) and part.sparkline:
                    self._insert_sparklines(target, place, part.key, part.sparkline)
        self._writer.close()

    def _insert_sparklines(self, target: Any, place: SheetPlace, table: str, lines: Sparklines) -> None:
        """All lines of a table as one group; each has a scale of its own."""
        where = place.tables[table]
        cells = [f"{where.letters[lines.column]}{where.rows[row]}" for row in lines.targets]
        ranges = [self._ranges[followed] for followed in lines.targets.values()]
        options = {
            "location": cells,
            "range": ranges,
            "series_color": self._look.design.accent,
            "weight": 1.25,
            "min": 0,
        }
        target.add_sparkline(cells[0], options)

    def __enter__(self) -> Self:
        return self

    def __exit__(
        self, kind: type[BaseException] | None, value: BaseException | None, trace: TracebackType | None
    ) -> None:
        if kind is None:
            self._finish()


def _xlsxwriter(path: Path) -> Any:
    """XlsxWriter's workbook, told never to take text for anything but text."""
    from tenorbook.write.package import QuickWriter

    options = {
        "in_memory": True,
        "strings_to_formulas": False,
        "strings_to_urls": False,
        "strings_to_numbers": False,
    }
    return QuickWriter(str(path), options)


def _link(target: Any, place: SheetPlace) -> None:
    """Makes the cells that lead to other sheets links."""
    if place.sheet.back:
        target.put_link(2, 0, _target(place.sheet.back))
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
