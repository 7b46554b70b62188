"""Where everything on a sheet stands, worked out before a cell is written.

Rows and addresses count from 1, as spreadsheet programs do; columns count from 0.
"""

import re
import textwrap
from collections.abc import Iterator
from dataclasses import dataclass
from functools import cached_property

from tenorbook.tables.formula import Reference, template
from tenorbook.tables.sheet import Block, Blocks, Charts, Checks, Lines, Part, Sheet
from tenorbook.tables.table import Table
from tenorbook.write.cells import letters, quoted

CHART_ROWS = 11
"""Sheet rows that a row of charts takes."""

TEXT = 1.1
"""Characters of running text to a unit of column width: letters are narrower than digits."""

SMALL_TEXT = 1.45
"""The same for text set smaller."""

DEFAULT_WIDTH = 9.0
"""Width of a column that no table sets."""

_ADDRESS = re.compile(r"\$?([A-Z]+)\$?(\d+)")


@dataclass(frozen=True)
class TablePlace:
    """Where a table stands.

    Attributes:
        table: the table.
        title_row: row of its title; 0: none.
        header_row: row of its header.
        rows: the sheet row of each row of the table.
        subtotal_rows: the sheet row of each subtotal.
        total_row: row of the total; 0: none.
        last_row: the last row it takes.
    """

    table: Table
    title_row: int
    header_row: int
    rows: list[int]
    subtotal_rows: list[int]
    total_row: int
    last_row: int

    @cached_property
    def letters(self) -> dict[str, str]:
        """The letters of each column, by key."""
        return {column.key: letters(number) for number, column in enumerate(self.table.columns)}

    def address(self, column: str, where: str, row: int) -> str:
        """The address that a reference other than `[key]` and `[key<]` means."""
        letter = self.letters[column]
        match where:
            case "@":
                return f"{letter}{self.rows[row]}"
            case "last":
                return f"{letter}{self.rows[-1]}"
            case "total":
                return f"{letter}{self.total_row}"
            case _:
                first = self.header_row + 1
                return f"{letter}${first}:{letter}${max(self.last_body_row, first)}"

    @property
    def last_body_row(self) -> int:
        """The last row above the total."""
        return self.total_row - 1 if self.total_row else self.last_row


@dataclass(frozen=True)
class SheetPlace:
    """Where the parts of a sheet stand.

    Attributes:
        sheet: the sheet.
        parts: each part with the row it begins in; sentences already broken into lines.
        tables: by key.
        names: the cells of each name, as an address that does not move.
        widths: of the columns.
        height: the last row.
    """

    sheet: Sheet
    parts: list[tuple[int, Part]]
    tables: dict[str, TablePlace]
    names: dict[str, str]
    widths: list[float]
    height: int

    def resolve(self, formula: str, table: str = "") -> str:
        """A formula outside the rows of a table, with addresses for its references."""
        text, references = template(formula)
        return text % tuple(self._address(reference, table) for reference in references)

    def _address(self, reference: Reference, table: str) -> str:
        place = self.tables[reference.table or table or next(iter(self.tables))]
        return place.address(reference.column, reference.where, reference.row)

    def ranges(self) -> Iterator[tuple[tuple[str, str, str], str]]:
        """(sheet, table, column) and the column's cells as a reference from another sheet."""
        name = self.sheet.name
        for key, place in self.tables.items():
            for column, letter in place.letters.items():
                first = place.header_row + 1
                last = max(place.last_body_row, first)
                yield (name, key, column), f"{quoted(name)}!${letter}${first}:${letter}${last}"


def arrange(sheet: Sheet) -> SheetPlace:
    """The places of everything on a sheet.

    Title in row 1, subtitle in row 2, the link back in row 3; then the parts, an empty row between them.
    """
    widths = _widths(sheet)
    parts: list[tuple[int, Part]] = []
    tables: dict[str, TablePlace] = {}
    row = 5 if sheet.back else 4
    for part in sheet.parts:
        fitted = _broken(part, sum(widths)) if isinstance(part, Lines) else part
        parts.append((row, fitted))
        if isinstance(fitted, Table):
            tables[fitted.key] = place_table(fitted, row)
        row += height_of(fitted)
    place = SheetPlace(sheet, parts, tables, {}, widths, max(row - 2, 3))
    place.names.update(_named_cells(place))
    return place


def place_table(table: Table, row: int) -> TablePlace:
    """Where a table stands that begins in `row`."""
    header = row + 1 if table.title else row
    rows: list[int] = []
    subtotals: list[int] = []
    following = header + 1
    for run in table.subtotals:
        rows.extend(range(following, following + run.last - run.first + 1))
        following += run.last - run.first + 2
        subtotals.append(following - 1)
    if not table.subtotals:
        rows = list(range(following, following + len(table)))
        following += len(table)
    total = following if table.total_label else 0
    last = following if total else following - 1
    return TablePlace(table, row if table.title else 0, header, rows, subtotals, total, last)


def height_of(part: Part) -> int:
    """Rows that a part takes, and one empty row below it."""
    match part:
        case Blocks(blocks):
            return 1 + max(len(block.entries) + bool(block.title) for block in blocks)
        case Checks(checks=checks):
            return len(checks) + 3
        case Lines():
            return len(part.texts) + bool(part.title) + 1
        case Charts():
            return CHART_ROWS + 1
        case _:
            return place_table(part, 1).last_row + 1


def _broken(lines: Lines, width: float) -> Lines:
    """Sentences broken so that no line runs beyond the sheet's columns."""
    longest = max(int(width * (SMALL_TEXT if lines.quiet else TEXT)), 40)
    texts = [line for text in lines.texts for line in textwrap.wrap(text, longest) or [""]]
    return Lines(tuple(texts), lines.title, lines.quiet)


def _widths(sheet: Sheet) -> list[float]:
    """The width of each column: the widest that a table asks for."""
    widths: list[float] = []
    for table in (part for part in sheet.parts if isinstance(part, Table)):
        widths += [0.0] * (len(table.columns) - len(widths))
        for number, column in enumerate(table.columns):
            widths[number] = max(widths[number], column.width)
    return widths or [DEFAULT_WIDTH] * 12


def _named_cells(place: SheetPlace) -> Iterator[tuple[str, str]]:
    """Every name of the sheet and its cells."""
    for row, part in place.parts:
        match part:
            case Blocks(blocks):
                for block in blocks:
                    yield from _named_entries(block, row)
            case Checks():
                yield part.name, _fixed(verdict_cell(part, row))
            case Table():
                for name, reference in part.names.items():
                    yield name, _fixed(place.resolve(reference, part.key))


def _named_entries(block: Block, row: int) -> Iterator[tuple[str, str]]:
    first = row + bool(block.title)
    for number, entry in enumerate(block.entries):
        if entry.name:
            yield entry.name, _fixed(f"{letters(block.value_column)}{first + number}")


def verdict_cell(checks: Checks, row: int) -> str:
    """The cell that says what checks beginning in a row all come to."""
    return f"{letters(checks.value_column + 1)}{row + len(checks.checks) + 1}"


def _fixed(address: str) -> str:
    """An address that does not move: `$A$1`."""
    return _ADDRESS.sub(r"$\1$\2", address)
