"""Tables as rows of sheet XML, from templates.

The rows of a table that look alike are one format string, filled in all at once: that is where the speed
comes from. Rows set apart, and those whose formulas are their own, are put together
cell by cell.
"""

from collections.abc import Iterator, Mapping, Sequence
from datetime import date
from itertools import chain
from typing import NamedTuple, cast

from tenorbook.tables.formula import Template, template
from tenorbook.tables.table import Column, Role, Table, Tone
from tenorbook.write.cells import (
    escaped,
    formula_cell,
    letters,
    number_cell,
    shortened,
    text_cell,
    text_formula_cell,
)
from tenorbook.write.filling import filled
from tenorbook.write.layout import SheetPlace, TablePlace
from tenorbook.write.look import Look
from tenorbook.write.sums import SumRows
from tenorbook.write.values import column_texts, number_text, plain_text

_FEW = 8
"""Rows of their own kind are put together one by one if there is at most one in so many."""


class _Piece(NamedTuple):
    """A column's part of the rows: a format string, and what goes into it row by row.

    Attributes:
        shape: with one `%s` for each of `arguments`.
        arguments: one value a row each.
        apart: rows that the shape does not fit; they are put together cell by cell.
    """

    shape: str
    arguments: list[Sequence[str]]
    apart: Sequence[int] = ()


class Body:
    """Renders the rows of one table.

    Args:
        place: where the table stands.
        sheet: where everything else on the sheet stands.
        look: the styles.
        values_only: whether formulas are left out.
        tall: row of the table -> its height in points, where it is not the usual one.
    """

    def __init__(
        self,
        place: TablePlace,
        sheet: SheetPlace,
        look: Look,
        values_only: bool,
        tall: Mapping[int, float] | None = None,
    ) -> None:
        self._place = place
        self._sheet = sheet
        self._look = look
        self._values_only = values_only
        self._tall = tall or {}
        self._numbers = list(map(str, place.rows))
        self._before = [str(place.header_row), *self._numbers[:-1]]
        self._texts = [self._stored(column) for column in place.table.columns]
        self._outline = ' outlineLevel="1"' if place.table.subtotals else ""

    def rows(self) -> Iterator[str]:
        """The `<row>`s below the header in order, many at a time."""
        table, place = self._place.table, self._place
        body = self._body_rows()
        sums = SumRows(place, self._look, self._values_only)
        if table.subtotals:
            for run, row in zip(table.subtotals, sums.subtotals(), strict=True):
                yield "".join(body[run.first : run.last + 1]) + row
        else:
            yield "".join(body)
        if place.total_row:
            yield sums.total()

    def _body_rows(self) -> list[str]:
        table = self._place.table
        pieces = [self._piece(number, column) for number, column in enumerate(table.columns)]
        shape = f'<row r="%s"{self._outline}>{"".join(piece.shape for piece in pieces)}</row>'
        arguments = chain.from_iterable(piece.arguments for piece in pieces)
        rows = filled(shape, [self._numbers, *arguments])
        apart = chain.from_iterable(piece.apart for piece in pieces)
        for row in {*table.tones, *self._tall, *apart}:
            rows[row] = self._row_apart(row)
        return rows

    def _row_apart(self, row: int) -> str:
        """A row put together cell by cell."""
        height = self._tall.get(row)
        size = f' ht="{height}" customHeight="1"' if height else ""
        cells = (self._cell(number, column, row) for number, column in enumerate(self._place.table.columns))
        return f'<row r="{self._numbers[row]}"{size}{self._outline}>{"".join(cells)}</row>'

    def _stored(self, column: Column) -> list[str | None]:
        """The stored values of a column as text; `None` for what is not a number."""
        if column.role is Role.TEXT:
            return []
        return column_texts(column)

    def _piece(self, number: int, column: Column) -> _Piece:
        """A column's part of the rows."""
        rows = range(len(column.values))
        if column.role is Role.TEXT:
            return self._text_piece(number, column)
        if column.role is Role.ANY or column.row_digits is not None:
            return _Piece("%s", [[self._cell(number, column, row) for row in rows]])
        texts = self._texts[number]
        apart = set(column.exceptions)
        if None in texts:
            apart.update(row for row, text in enumerate(texts) if text is None)
            texts = [text or "" for text in texts]
        if len(apart) * _FEW > len(texts):
            return _Piece("%s", [self._varied(number, column)])
        shape, arguments = self._shape(number, column, column.formula)
        return _Piece(shape, [*arguments, cast(list[str], texts)], sorted(apart))

    def _text_piece(self, number: int, column: Column) -> _Piece:
        """A column of text; equal texts are made ready once."""
        if column.exceptions or column.links or not all(column.values):
            rows = range(len(column.values))
            return _Piece("%s", [[self._cell(number, column, row) for row in rows]])
        style = self._look.body(Role.TEXT, 0, Tone.PLAIN, column.wrap)
        shape = text_cell(f"{letters(number)}\0", style, "\1").replace("%", "%%")
        shape = shape.replace("\0", "%s").replace(escaped("\1"), "%s")
        ready = {value: escaped(shortened(plain_text(value))) for value in set(column.values)}
        return _Piece(shape, [self._numbers, [ready[value] for value in column.values]])

    def _shape(self, number: int, column: Column, formula: str | None) -> tuple[str, list[Sequence[str]]]:
        """The cells of plain rows that follow one formula: their format string, and what goes in
        before the stored value."""
        start = f'<c r="{letters(number)}%s" s="{self._style(column, Tone.PLAIN)}">'
        if formula is None or self._values_only:
            return f"{start}<v>%s</v></c>", [self._numbers]
        text, references = template(formula)
        spelled, arguments = [], [self._numbers]
        for table, key, where, row in references:
            place = self._sheet.tables[table] if table else self._place
            if where in ("", "<"):
                spelled.append(place.letters[key] + "%s")
                arguments.append(self._numbers if where == "" else self._before)
            else:
                spelled.append(place.address(key, where, row))
        body = _percent_signs(escaped(text), spelled)
        return f"{start}<f>{body}</f><v>%s</v></c>", [*arguments]

    def _varied(self, number: int, column: Column) -> list[str]:
        """The cells of a column whose rows follow several formulas."""
        shapes: dict[str | None, tuple[str, list[Sequence[str]]]] = {}
        texts, tones, cells = self._texts[number], self._place.table.tones, []
        for row, text in enumerate(texts):
            if text is None or row in tones:
                cells.append(self._cell(number, column, row))
                continue
            formula = column.exceptions.get(row, column.formula)
            if formula not in shapes:
                shapes[formula] = self._shape(number, column, formula)
            shape, arguments = shapes[formula]
            cells.append(shape % (*[argument[row] for argument in arguments], text))
        return cells

    def _cell(self, number: int, column: Column, row: int) -> str:
        """One cell by itself."""
        address = letters(number) + self._numbers[row]
        tone = self._place.table.tones.get(row, Tone.PLAIN)
        if column.role is Role.TEXT:
            return self._text(address, column, row, tone)
        if column.role is Role.ANY:
            return self._carried(address, column.values[row], tone)
        text = self._texts[number][row]
        digits = column.row_shown_digits[row] if column.row_shown_digits is not None else None
        style = self._style(column, tone, digits)
        if text is None:
            return text_cell(address, style, plain_text(column.values[row]))
        formula = None if self._values_only else column.exceptions.get(row, column.formula)
        if formula is None:
            return number_cell(address, style, text)
        return formula_cell(address, style, self._resolve(template(formula), row), text)

    def _text(self, address: str, column: Column, row: int, tone: Tone) -> str:
        style = self._look.body(Role.TEXT, 0, tone, column.wrap, row in column.links)
        formula = None if self._values_only else column.exceptions.get(row)
        value = plain_text(column.values[row])
        if formula is None:
            return text_cell(address, style, value)
        return text_formula_cell(address, style, self._resolve(template(formula), row), value)

    def _resolve(self, formula: Template, row: int) -> str:
        """A formula with the addresses it means in one row."""
        addresses = []
        for table, key, where, other in formula.references:
            place = self._sheet.tables[table] if table else self._place
            if where in ("", "<"):
                numbers = self._numbers if where == "" else self._before
                addresses.append(place.letters[key] + numbers[row])
            else:
                addresses.append(place.address(key, where, other))
        return formula.text % tuple(addresses)

    def _carried(self, address: str, value: object, tone: Tone) -> str:
        """A carried value in the type it has."""
        text = number_text(value)
        if text is None:
            return text_cell(address, self._look.body(Role.TEXT, 0, tone), plain_text(value))
        role = Role.DATE if isinstance(value, date) else Role.ANY
        return number_cell(address, self._look.body(role, 0, tone), text)

    def _style(self, column: Column, tone: Tone, digits: int | None = None) -> int:
        shown = column.shown_digits if column.shown_digits is not None else column.digits
        return self._look.body(column.role, shown if digits is None else digits, tone, column.wrap)


def _percent_signs(text: str, spelled: list[str]) -> str:
    """A taken-apart formula filled in, its own percent signs still doubled for the format string to come."""
    filled = text.replace("%%", "\0") % tuple(spelled)
    return filled.replace("\0", "%%")


def header_cells(table: Table, row: int, look: Look) -> str:
    """The cells of a table's header."""
    return "".join(
        text_cell(f"{letters(number)}{row}", look.header(column.role), column.header)
        for number, column in enumerate(table.columns)
    )
