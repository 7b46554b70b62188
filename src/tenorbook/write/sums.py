"""Subtotal and total rows of a table."""

from collections.abc import Sequence
from itertools import chain
from typing import NamedTuple

from tenorbook.tables.table import Column, Role, Subtotal, Tone
from tenorbook.write.cells import letters, text_cell
from tenorbook.write.filling import filled
from tenorbook.write.layout import TablePlace
from tenorbook.write.look import Look
from tenorbook.write.values import amount_text


class _Piece(NamedTuple):
    """A column's part of the sum rows: a format string, and what goes into it row by row."""

    shape: str
    arguments: list[Sequence[str]]


class SumRows:
    """Renders the sum rows of one table.

    Args:
        place: where the table stands.
        look: the styles.
        values_only: whether formulas are left out.
    """

    def __init__(self, place: TablePlace, look: Look, values_only: bool) -> None:
        self._place = place
        self._look = look
        self._values_only = values_only

    def subtotals(self) -> list[str]:
        """The `<row>` of each subtotal."""
        return self._rows(Tone.SUBTOTAL, self._place.table.subtotals, self._place.subtotal_rows)

    def total(self) -> str:
        """The `<row>` of the total."""
        table = self._place.table
        whole = Subtotal(0, len(table) - 1, table.total_label)
        return self._rows(Tone.TOTAL, (whole,), [self._place.total_row])[0]

    def _rows(self, tone: Tone, runs: Sequence[Subtotal], numbers: Sequence[int]) -> list[str]:
        rows = list(map(str, numbers))
        columns = enumerate(self._place.table.columns)
        pieces = [self._piece(letters(number), column, tone, runs, rows) for number, column in columns]
        shape = f'<row r="%s">{"".join(piece.shape for piece in pieces)}</row>'
        arguments = chain.from_iterable(piece.arguments for piece in pieces)
        return filled(shape, [rows, *arguments])

    def _piece(
        self, letter: str, column: Column, tone: Tone, runs: Sequence[Subtotal], rows: list[str]
    ) -> _Piece:
        """A label, a sum, a repeated last value, or nothing."""
        table, last = self._place.table, column.last_in_subtotal and tone is Tone.SUBTOTAL
        if column.key == table.label_column:
            style = self._look.body(Role.TEXT, 0, tone)
            cells = [text_cell(letter + row, style, run.label) for row, run in zip(rows, runs, strict=True)]
            return _Piece("%s", [cells])
        if not column.totalled and not last:
            return _Piece(f'<c r="{letter}%s" s="{self._look.body(Role.TEXT, 0, tone)}"/>', [rows])
        shown = column.shown_digits if column.shown_digits is not None else column.digits
        start = f'<c r="{letter}%s" s="{self._look.body(column.role, shown, tone)}">'
        values = [column.values[run.last] if last else _sum(column, run) for run in runs]
        texts = [amount_text(each, column.digits) if column.is_amount else str(each) for each in values]
        if self._values_only:
            return _Piece(start + "<v>%s</v></c>", [rows, texts])
        formula, references = self._formula(letter, column, tone, runs, last)
        return _Piece(f"{start}<f>{formula}</f><v>%s</v></c>", [rows, *references, texts])

    def _formula(
        self, letter: str, column: Column, tone: Tone, runs: Sequence[Subtotal], last: bool
    ) -> tuple[str, list[list[str]]]:
        """The formula's format string and what goes in; the total adds up the subtotals, if any."""
        place = self._place
        ends = [str(place.rows[run.last]) for run in runs]
        if last:
            return f"{letter}%s", [ends]
        if tone is Tone.TOTAL and place.subtotal_rows:
            inner, references = ",".join(f"{letter}{row}" for row in place.subtotal_rows), []
        else:
            inner, references = f"{letter}%s:{letter}%s", [[str(place.rows[run.first]) for run in runs], ends]
        whole = f"ROUND(SUM({inner}),{column.digits})" if column.is_amount else f"SUM({inner})"
        return whole, references


def _sum(column: Column, run: Subtotal) -> int:
    return sum(filter(None, column.values[run.first : run.last + 1]))
