"""Tables as rows of sheet XML, column by column, from templates.

A column without exceptions is one format string applied to every row; that is where the speed comes from.
"""

from collections.abc import Iterator, Sequence
from datetime import date
from itertools import repeat

from tenorbook.tables.formula import Template, template
from tenorbook.tables.table import Column, Role, Table, Tone
from tenorbook.write.cells import (
    blank_cell,
    escaped,
    formula_cell,
    letters,
    number_cell,
    shortened,
    text_cell,
)
from tenorbook.write.layout import SheetPlace, TablePlace
from tenorbook.write.look import Look
from tenorbook.write.values import amount_text, column_texts, number_text, plain_text


class Body:
    """Renders the rows of one table.

    Args:
        place: where the table stands.
        sheet: where everything else on the sheet stands.
        look: the styles.
        values_only: whether formulas are left out.
    """

    def __init__(self, place: TablePlace, sheet: SheetPlace, look: Look, values_only: bool) -> None:
        self._place = place
        self._sheet = sheet
        self._look = look
        self._values_only = values_only
        self._before = [place.header_row, *place.rows[:-1]]

    def rows(self) -> Iterator[tuple[int, str]]:
        """Number and cells of each row below the header, in order."""
        table, place = self._place.table, self._place
        columns = [self._column(number, column) for number, column in enumerate(table.columns)]
        body = zip(place.rows, map("".join, zip(*columns, strict=True)), strict=True)
        if not table.subtotals:
            yield from body
        for run, row in zip(table.subtotals, place.subtotal_rows, strict=True):
            for _ in range(run.first, run.last + 1):
                yield next(body)
            yield row, self._sum_row(row, Tone.SUBTOTAL, run.label, (run.first, run.last))
        if place.total_row:
            whole = (0, len(table) - 1)
            yield place.total_row, self._sum_row(place.total_row, Tone.TOTAL, table.total_label, whole)

    def _column(self, number: int, column: Column) -> list[str]:
        """The cells of a column, top to bottom."""
        letter = letters(number)
        if column.role is Role.TEXT:
            return self._texts(letter, column)
        if column.role is Role.ANY:
            return [self._carried(letter, column.values[row], row) for row in range(len(column.values))]
        texts = column_texts(column)
        if column.row_digits is not None:
            return [self._single(letter, column, row, texts[row]) for row in range(len(texts))]
        cells = self._uniform(letter, column, texts)
        empty = (row for row, text in enumerate(texts) if text is None)
        for row in {*self._place.table.tones, *column.exceptions, *empty}:
            cells[row] = self._single(letter, column, row, texts[row])
        return cells

    def _texts(self, letter: str, column: Column) -> list[str]:
        """The cells of a column of text; equal texts are made ready once."""
        table, rows, style = self._place.table, self._place.rows, self._look.body
        plain = style(Role.TEXT, 0, Tone.PLAIN, column.wrap)
        shape = text_cell(f"{letter}%s", plain, "\0").replace(escaped("\0"), "%s")
        ready = {value: escaped(shortened(plain_text(value))) for value in set(column.values)}
        cells = [shape % (row, ready[value]) for row, value in zip(rows, column.values, strict=True)]
        for row in {*table.tones, *column.links}:
            tone = table.tones.get(row, Tone.PLAIN)
            its = style(Role.TEXT, 0, tone, column.wrap, row in column.links)
            cells[row] = text_cell(f"{letter}{rows[row]}", its, plain_text(column.values[row]))
        return cells

    def _uniform(self, letter: str, column: Column, texts: Sequence[str | None]) -> list[str]:
        """The cells of a column as if every row were plain and followed the column's formula."""
        style = self._style(column, Tone.PLAIN)
        rows = self._place.rows
        if column.formula is None or self._values_only:
            shape = f'<c r="{letter}%s" s="{style}"><v>%s</v></c>'
            return [shape % pair for pair in zip(rows, texts, strict=True)]
        formula = template(column.formula)
        shape = f'<c r="{letter}%s" s="{style}"><f>{escaped(formula.text)}</f><v>%s</v></c>'
        arguments = [self._column_addresses(reference) for reference in formula.references]
        return [shape % each for each in zip(rows, *arguments, texts, strict=False)]

    def _column_addresses(self, reference: tuple[str, str, str, int]) -> Iterator[str]:
        """What a reference means, row by row."""
        table, key, where, row = reference
        if where in ("", "<") and table in ("", self._place.table.key):
            letter = self._place.letters[key]
            numbers = self._place.rows if where == "" else self._before
            return map(f"{letter}%d".__mod__, numbers)
        place = self._sheet.tables[table] if table else self._place
        return repeat(place.address(key, where, row))

    def _single(self, letter: str, column: Column, row: int, text: str | None) -> str:
        """One numeric cell by itself."""
        tone = self._place.table.tones.get(row, Tone.PLAIN)
        digits = column.row_shown_digits[row] if column.row_shown_digits is not None else None
        style = self._style(column, tone, digits)
        address = f"{letter}{self._place.rows[row]}"
        if text is None:
            return text_cell(address, style, plain_text(column.values[row]))
        formula = None if self._values_only else column.exceptions.get(row, column.formula)
        if formula is None:
            return number_cell(address, style, text)
        return formula_cell(address, style, self._resolve(template(formula), row), text)

    def _resolve(self, formula: Template, row: int) -> str:
        """A formula with the addresses it means in one row."""
        addresses = []
        for table, key, where, other in formula.references:
            place = self._sheet.tables[table] if table else self._place
            if where in ("", "<"):
                numbers = place.rows if where == "" else self._before
                addresses.append(f"{place.letters[key]}{numbers[row]}")
            else:
                addresses.append(place.address(key, where, other))
        return formula.text % tuple(addresses)

    def _carried(self, letter: str, value: object, row: int) -> str:
        """A carried value in the type it has."""
        address = f"{letter}{self._place.rows[row]}"
        tone = self._place.table.tones.get(row, Tone.PLAIN)
        text = number_text(value)
        if text is None:
            return text_cell(address, self._look.body(Role.TEXT, 0, tone), plain_text(value))
        role = Role.DATE if isinstance(value, date) else Role.ANY
        return number_cell(address, self._look.body(role, 0, tone), text)

    def _sum_row(self, row: int, tone: Tone, label: str, run: tuple[int, int]) -> str:
        """A subtotal or total: sums, repeated last values, and a label."""
        cells = []
        for number, column in enumerate(self._place.table.columns):
            address = f"{letters(number)}{row}"
            if column.key == self._place.table.label_column:
                style = self._look.body(Role.TEXT, 0, tone)
                cells.append(text_cell(address, style, label))
            elif column.totalled:
                cells.append(self._sum(address, column, tone, run))
            elif column.last_in_subtotal and tone is Tone.SUBTOTAL:
                cells.append(self._repeat(address, letters(number), column, run[1]))
            else:
                cells.append(blank_cell(address, self._look.body(Role.TEXT, 0, tone)))
        return "".join(cells)

    def _sum(self, address: str, column: Column, tone: Tone, run: tuple[int, int]) -> str:
        style = self._style(column, tone)
        units = sum(value or 0 for value in column.values[run[0] : run[1] + 1])
        text = amount_text(units, column.digits) if column.is_amount else str(units)
        if self._values_only:
            return number_cell(address, style, text)
        return formula_cell(address, style, self._sum_formula(column, tone, run), text)

    def _sum_formula(self, column: Column, tone: Tone, run: tuple[int, int]) -> str:
        """The sum of a run of rows; the total adds up the subtotals where there are any."""
        letter, place = self._place.letters[column.key], self._place
        if tone is Tone.TOTAL and place.subtotal_rows:
            inner = ",".join(f"{letter}{row}" for row in place.subtotal_rows)
        else:
            inner = f"{letter}{place.rows[run[0]]}:{letter}{place.rows[run[1]]}"
        return f"ROUND(SUM({inner}),{column.digits})" if column.is_amount else f"SUM({inner})"

    def _repeat(self, address: str, letter: str, column: Column, last: int) -> str:
        style = self._style(column, Tone.SUBTOTAL)
        text = amount_text(column.values[last], column.digits)
        if self._values_only:
            return number_cell(address, style, text)
        return formula_cell(address, style, f"{letter}{self._place.rows[last]}", text)

    def _style(self, column: Column, tone: Tone, digits: int | None = None) -> int:
        shown = column.shown_digits if column.shown_digits is not None else column.digits
        return self._look.body(column.role, shown if digits is None else digits, tone, column.wrap)


def header_cells(table: Table, row: int, look: Look) -> str:
    """The cells of a table's header."""
    return "".join(
        text_cell(f"{letters(number)}{row}", look.header(column.role), column.header)
        for number, column in enumerate(table.columns)
    )
