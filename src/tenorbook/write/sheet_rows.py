"""The rows of a whole sheet, top to bottom, as XML."""

from collections.abc import Iterator, Mapping

from tenorbook.tables.sheet import Block, Blocks, Checks, Entry, Lines
from tenorbook.tables.table import Role, Table
from tenorbook.write.body import Body, header_cells
from tenorbook.write.cells import (
    formula_cell,
    letters,
    number_cell,
    text_cell,
    text_formula_cell,
)
from tenorbook.write.heights import Heights
from tenorbook.write.layout import SheetPlace, TablePlace, verdict_cell
from tenorbook.write.look import Look
from tenorbook.write.values import amount_text, entry_text, plain_text

PASS, FAIL = "PASS", "FAIL"
"""The verdicts of a check."""


def sheet_rows(place: SheetPlace, look: Look, heights: Heights, values_only: bool) -> Iterator[str]:
    """Every `<row>` of a sheet in ascending order, one or many at a time."""
    sheet, tall = place.sheet, heights.others
    yield _row(1, text_cell("A1", look.named("title"), sheet.title), tall[1])
    yield _row(2, text_cell("A2", look.named("subtitle"), sheet.subtitle), tall[2])
    if sheet.back:
        yield _row(3, text_cell("A3", look.named("link"), f"\u2190 {sheet.back.partition('#')[0]}"), tall[3])
    for first, part in place.parts:
        match part:
            case Blocks(blocks):
                yield from _blocks(blocks, first, place, look, values_only)
            case Checks():
                yield from _checks(part, first, place, look, values_only)
            case Lines():
                yield from _lines(part, first, place, look)
            case Table():
                yield from _table(place.tables[part.key], place, look, heights, values_only)


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


def _heading(
    row: int, first: int, stop: int, title: str, look: Look, others: Mapping[int, str] | None = None
) -> str:
    """A heading over several columns, its rule drawn under each of them; `others` stand to the right."""
    style, right = look.named("heading"), look.named("right heading")
    cells = [text_cell(f"{letters(first)}{row}", style, title)]
    for column in range(first + 1, stop):
        text = (others or {}).get(column, "")
        cells.append(text_cell(f"{letters(column)}{row}", right if text else style, text))
    return "".join(cells)


def _blocks(
    blocks: tuple[Block, ...], first: int, place: SheetPlace, look: Look, values_only: bool
) -> Iterator[str]:
    """Blocks side by side, row by row."""
    heights = [len(block.entries) + bool(block.title) for block in blocks]
    for offset in range(max(heights)):
        row, cells = first + offset, []
        for block, height in zip(blocks, heights, strict=True):
            entry = offset - bool(block.title)
            if offset == 0 and block.title:
                stop = block.value_column + 1
                cells.append(_heading(row, block.label_column, stop, block.title, look))
            elif offset < height:
                cells.append(_entry(block, block.entries[entry], row, place, look, values_only))
        yield _row(row, "".join(cells))


def _entry(block: Block, entry: Entry, row: int, place: SheetPlace, look: Look, values_only: bool) -> str:
    """A label, its value, and the words after it."""
    labels = [entry.label, *[""] * (block.value_column - block.label_column - 1)]
    label = "".join(
        text_cell(f"{letters(block.label_column + n)}{row}", look.named("label"), text)
        for n, text in enumerate(labels)
    )
    address = f"{letters(block.value_column)}{row}"
    shown = entry.digits if entry.shown_digits is None else entry.shown_digits
    style = look.value(entry.role, shown)
    number = entry_text(entry.value, entry.role, entry.digits)
    formula = None if values_only or entry.formula is None else place.resolve(entry.formula)
    if number is None:
        value = _words(address, style, formula, plain_text(entry.value))
    else:
        value = _number(address, style, formula, number)
    if not entry.note:
        return label + value
    return (
        label + value + text_cell(f"{letters(block.value_column + 1)}{row}", look.named("quiet"), entry.note)
    )


def _checks(checks: Checks, first: int, place: SheetPlace, look: Look, values_only: bool) -> Iterator[str]:
    """A heading, a row a check, and the verdict on all of them."""
    left, right = letters(checks.value_column), letters(checks.value_column + 1)
    label, verdict = look.named("label"), look.named("verdict")
    stop = checks.value_column + 2
    heads = {checks.value_column: "Difference", checks.value_column + 1: "Verdict"}
    yield _row(first, _heading(first, checks.label_column, stop, checks.title, look, heads))
    last = first + len(checks.checks)
    for row, check in enumerate(checks.checks, first + 1):
        cells = _labels(row, checks, check.label, label)
        number = amount_text(check.value, check.digits)
        style = look.value(Role.BALANCE, check.shown_digits)
        formula = None if values_only or check.formula is None else place.resolve(check.formula)
        cells += _number(f"{left}{row}", style, formula, number)
        said = PASS if check.value == 0 else FAIL
        whether = None if values_only else f'IF({left}{row}=0,"{PASS}","{FAIL}")'
        yield _row(row, cells + _words(f"{right}{row}", verdict, whether, said))
    said = FAIL if any(check.value for check in checks.checks) else PASS
    whether = f'IF(COUNTIF({right}{first + 1}:{right}{last},"{PASS}")={len(checks.checks)},"{PASS}","{FAIL}")'
    cells = _labels(last + 1, checks, "All of them", label)
    verdict_formula = None if values_only else whether
    yield _row(last + 1, cells + _words(verdict_cell(checks, first), verdict, verdict_formula, said))


def _labels(row: int, checks: Checks, label: str, style: int) -> str:
    """A check's label, and the rule under it up to the figures."""
    texts = [label, *[""] * (checks.value_column - checks.label_column - 1)]
    cells = (
        text_cell(f"{letters(checks.label_column + n)}{row}", style, text) for n, text in enumerate(texts)
    )
    return "".join(cells)


def _number(address: str, style: int, formula: str | None, number: str) -> str:
    if formula is None:
        return number_cell(address, style, number)
    return formula_cell(address, style, formula, number)


def _words(address: str, style: int, formula: str | None, words: str) -> str:
    if formula is None:
        return text_cell(address, style, words)
    return text_formula_cell(address, style, formula, words)


def _table(
    table: TablePlace, place: SheetPlace, look: Look, heights: Heights, values_only: bool
) -> Iterator[str]:
    if table.title_row:
        width = len(table.table.columns)
        yield _row(table.title_row, _heading(table.title_row, 0, width, table.table.title, look))
    header = header_cells(table.table, table.header_row, look)
    yield _row(table.header_row, header, heights.others[table.header_row])
    tall = {row: heights.others[number] for row, number in enumerate(table.rows) if number in heights.others}
    yield from Body(table, place, look, values_only, tall).rows()
