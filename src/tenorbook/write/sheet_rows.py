"""The rows of a whole sheet, top to bottom, as XML."""

from collections.abc import Iterator
from textwrap import wrap

from tenorbook.tables.sheet import Block, Blocks, Entry, Lines
from tenorbook.tables.table import Table
from tenorbook.write.body import Body, header_cells
from tenorbook.write.cells import (
    formula_cell,
    letters,
    number_cell,
    text_cell,
    text_formula_cell,
)
from tenorbook.write.layout import SheetPlace, TablePlace
from tenorbook.write.look import Look
from tenorbook.write.values import entry_text, plain_text

BACK_HEIGHT = 20
"""Of the row with the link back, in points."""

HEADER_HEIGHT = 30
"""Of a table's header, in points: two lines."""


LINE_HEIGHT = 13.5
"""Of each line of a wrapped text, in points."""

TALLEST = 400
"""Of a row, in points; spreadsheet programs take 409."""

CHARACTERS = 1.05
"""Characters of small text to a unit of column width, with some left over."""


def sheet_rows(place: SheetPlace, look: Look, values_only: bool) -> Iterator[str]:
    """Every `<row>` of a sheet in ascending order."""
    sheet = place.sheet
    yield _row(1, text_cell("A1", look.named("title"), sheet.title), 24)
    yield _row(2, text_cell("A2", look.named("subtitle"), sheet.subtitle))
    if sheet.back:
        yield _row(3, text_cell("A3", look.named("link"), f"\u2190 {sheet.back}"), BACK_HEIGHT)
    for first, part in place.parts:
        match part:
            case Blocks(blocks):
                yield from _blocks(blocks, first, place, look, values_only)
            case Lines():
                yield from _lines(part, first, place, look)
            case Table():
                yield from _table(place.tables[part.key], place, look, values_only)


def _row(number: int, cells: str, height: float = 0) -> str:
    size = f' ht="{height}" customHeight="1"' if height else ""
    return f'<row r="{number}"{size}>{cells}</row>'


def _lines(lines: Lines, row: int, place: SheetPlace, look: Look) -> Iterator[str]:
    if lines.title:
        yield _row(row, _heading(row, 0, min(len(place.widths), 12), lines.title, look))
        row += 1
    style = look.named("quiet" if lines.quiet else "line")
    for number, text in enumerate(lines.texts, row):
        yield _row(number, text_cell(f"A{number}", style, text))


def _heading(row: int, first: int, stop: int, title: str, look: Look) -> str:
    """A heading over several columns, its rule drawn under each of them."""
    style = look.named("heading")
    texts = [title, *[""] * (stop - first - 1)]
    cells = (text_cell(f"{letters(first + n)}{row}", style, text) for n, text in enumerate(texts))
    return "".join(cells)


def _blocks(
    blocks: tuple[Block, ...], first: int, place: SheetPlace, look: Look, values_only: bool
) -> Iterator[str]:
    """Blocks side by side, row by row."""
    ends = [*[block.label_column - 1 for block in blocks[1:]], len(place.widths)]
    heights = [len(block.entries) + bool(block.title) for block in blocks]
    for offset in range(max(heights)):
        row, cells = first + offset, []
        for block, end, height in zip(blocks, ends, heights, strict=True):
            entry = offset - bool(block.title)
            if offset == 0 and block.title:
                stop = max(min(end, block.value_column + 2), block.label_column + 1)
                cells.append(_heading(row, block.label_column, stop, block.title, look))
            elif offset < height:
                cells.append(_entry(block, block.entries[entry], row, place, look, values_only))
        yield _row(row, "".join(cells))


def _entry(block: Block, entry: Entry, row: int, place: SheetPlace, look: Look, values_only: bool) -> str:
    """A label, its value, and the words after it."""
    label = text_cell(f"{letters(block.label_column)}{row}", look.named("label"), entry.label)
    address = f"{letters(block.value_column)}{row}"
    shown = entry.digits if entry.shown_digits is None else entry.shown_digits
    style = look.value(entry.role, shown)
    number = entry_text(entry.value, entry.role, entry.digits)
    formula = None if values_only or entry.formula is None else place.resolve(entry.formula)
    if number is None and formula is None:
        value = text_cell(address, style, plain_text(entry.value))
    elif number is None:
        value = text_formula_cell(address, style, formula or "", plain_text(entry.value))
    elif formula is None:
        value = number_cell(address, style, number)
    else:
        value = formula_cell(address, style, formula, number)
    if not entry.note:
        return label + value
    return (
        label + value + text_cell(f"{letters(block.value_column + 1)}{row}", look.named("quiet"), entry.note)
    )


def _table(table: TablePlace, place: SheetPlace, look: Look, values_only: bool) -> Iterator[str]:
    if table.title_row:
        width = len(table.table.columns)
        yield _row(table.title_row, _heading(table.title_row, 0, width, table.table.title, look))
    yield _row(table.header_row, header_cells(table.table, table.header_row, look), HEADER_HEIGHT)
    tall = _tall_rows(table)
    for number, cells in Body(table, place, look, values_only).rows():
        yield _row(number, cells, tall.get(number, 0))


def _tall_rows(table: TablePlace) -> dict[int, float]:
    """Rows whose text runs over several lines -> their height; not every program finds it by itself."""
    tall: dict[int, float] = {}
    for column in (column for column in table.table.columns if column.wrap):
        longest = int(column.width * CHARACTERS)
        for row, value in zip(table.rows, column.values, strict=True):
            lines = sum(len(wrap(line, longest)) or 1 for line in plain_text(value).splitlines())
            if lines > 1:
                tall[row] = max(tall.get(row, 0), min(lines * LINE_HEIGHT, TALLEST))
    return tall
