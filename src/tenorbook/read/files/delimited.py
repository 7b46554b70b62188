"""`.csv` to plain cells: one table, everything is text."""

import csv
import io
from collections.abc import Callable, Iterator, Sequence
from typing import TypeAlias

from tenorbook.basis.problem import Place, Problem, note
from tenorbook.read.files import limits
from tenorbook.read.files.grid import Cell, Row, Sheet, Source, text_cell
from tenorbook.read.files.refuse import damaged, too_large

SHEET = "Loans"
"""What the one table of a CSV is called in messages."""

_DELIMITERS = (",", ";", "\t")
_LOOKED_AT = 30

Recognise: TypeAlias = Callable[[Sequence[str]], int]


def open_csv(name: str, data: bytes, recognise: Recognise) -> Source:
    """The table of a CSV file.

    Args:
        name: file name, for messages.
        data: the whole file.
        recognise: how many of the texts of a row are known headers; the delimiter under which a row
            has most of them is the one.
    """
    text, notes = _decode(name, data)
    sheet = Sheet(SHEET, _rows(name, text, _delimiter(text, recognise)))
    return Source(name, (SHEET,), lambda _: sheet, notes)


def _decode(name: str, data: bytes) -> tuple[str, tuple[Problem, ...]]:
    if data.startswith((b"\xff\xfe", b"\xfe\xff")):
        return data.decode("utf-16", errors="replace"), ()
    try:
        return data.decode("utf-8-sig"), ()
    except UnicodeDecodeError:
        remark = note(
            "",
            Place(value=name),
            f"{name} is not in UTF-8; it is read in the Western European encoding of Windows",
            "look at names with accents; save the file as UTF-8 if they are wrong",
        )
        return data.decode("cp1252", errors="replace"), (remark,)


def _delimiter(text: str, recognise: Recognise) -> str:
    def best_row(delimiter: str) -> tuple[int, int]:
        try:
            rows = [row for row, _ in zip(_records(text, delimiter), range(_LOOKED_AT), strict=False)]
        except csv.Error:
            return (0, 0)
        return max(((recognise(row), len(row)) for row in rows), default=(0, 0))

    return max(_DELIMITERS, key=best_row)


def _records(text: str, delimiter: str) -> Iterator[list[str]]:
    return csv.reader(io.StringIO(text, newline=""), delimiter=delimiter)


def _rows(name: str, text: str, delimiter: str) -> dict[int, Row]:
    """The records as rows; a record that runs over several lines is one row, as in a spreadsheet."""
    rows: dict[int, Row] = {}
    count = 0
    try:
        for number, record in enumerate(_records(text, delimiter), start=1):
            cells = _cells(number, record)
            count += len(cells)
            if count > limits.MAX_CELLS or number > limits.MAX_ROWS:
                raise too_large(name, f"has more than {limits.MAX_CELLS:,} cells")
            if cells:
                rows[number] = Row(number, cells)
    except csv.Error as fault:
        raise damaged(name) from fault
    return rows


def _cells(number: int, record: Sequence[str]) -> dict[int, Cell]:
    cells = (text_cell(number, column, text) for column, text in enumerate(record, start=1))
    return {cell.column: cell for cell in cells if cell is not None}
