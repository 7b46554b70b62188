"""Plain cells: what every kind of file becomes before anything is understood.

A cell says what is stored and how it is shown; it says nothing about what it means. Blank cells are
not kept, so a million formatted empty rows are an empty sheet.
"""

from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from datetime import date
from decimal import Context, Decimal
from enum import StrEnum
from functools import cache
from typing import TypeAlias

from tenorbook.basis.problem import Place, Problem

SHOWN = 80
"""Most characters of a cell that a message repeats."""

_FIFTEEN = Context(prec=15)


class Kind(StrEnum):
    """What a cell holds."""

    BLANK = "blank"
    TEXT = "text"
    NUMBER = "number"
    PERCENT = "percent"
    """A number shown as a percentage: the value is the fraction."""
    DATE = "date"
    BOOL = "true or false"
    ERROR = "error value"
    NO_VALUE = "formula without a stored value"


Value: TypeAlias = str | Decimal | date | bool | None


@dataclass(frozen=True, slots=True)
class Cell:
    """One cell that is not blank.

    Attributes:
        row: from 1.
        column: from 1.
        value: text (also of an error value), exact decimal, date, truth value; `None` for a blank and
            for a formula without a stored value.
        shown: what stood there, as text for messages.
        number_format: the format code, where the file has one.
        formula: the formula's text, or `=` where the file does not repeat it; empty: no formula.
    """

    row: int
    column: int
    kind: Kind
    value: Value = None
    shown: str = ""
    number_format: str = ""
    formula: str = ""

    @property
    def address(self) -> str:
        """Address such as `F7`."""
        return f"{column_letters(self.column)}{self.row}"

    @property
    def is_blank(self) -> bool:
        """Whether nothing stands there."""
        return self.kind is Kind.BLANK

    @property
    def text(self) -> str:
        """The text of a text cell, and nothing for any other kind."""
        return self.value if self.kind is Kind.TEXT and isinstance(self.value, str) else ""

    def place(self, sheet: str) -> Place:
        """Where it stands, for messages."""
        return Place(sheet, self.address, self.shown)


@dataclass(frozen=True, slots=True)
class Row:
    """One row that has at least one cell; `hidden` includes rows that a filter hides."""

    number: int
    cells: Mapping[int, Cell]
    hidden: bool = False


@dataclass(frozen=True, slots=True)
class Span:
    """A merged range, ends included."""

    first_row: int
    first_column: int
    last_row: int
    last_column: int


@dataclass(frozen=True, slots=True)
class Sheet:
    """One sheet: its rows that are not blank, by number, ascending; and its merged ranges."""

    name: str
    rows: Mapping[int, Row]
    merged: tuple[Span, ...] = ()

    def cell(self, row: int, column: int) -> Cell:
        """The cell at a position; a blank one where nothing stands."""
        if row in self.rows:
            found = self.rows[row].cells.get(column)
            if found is not None:
                return found
        return Cell(row, column, Kind.BLANK)


@dataclass(frozen=True, slots=True)
class Source:
    """A file that was opened and found sound.

    Attributes:
        name: file name without folder.
        sheet_names: in the order of the workbook.
        load: reads one sheet; raises `BookError` when it is unusable.
        notes: what should be known about the file as a whole.
    """

    name: str
    sheet_names: tuple[str, ...]
    load: Callable[[str], Sheet]
    notes: tuple[Problem, ...] = ()
    _loaded: dict[str, Sheet] = field(default_factory=dict, compare=False, repr=False)

    def sheet(self, name: str) -> Sheet:
        """The cells of one sheet, read once."""
        if name not in self._loaded:
            self._loaded[name] = self.load(name)
        return self._loaded[name]


@cache
def column_letters(column: int) -> str:
    """1 is `A`, 27 is `AA`."""
    letters = ""
    while column:
        column, rest = divmod(column - 1, 26)
        letters = chr(ord("A") + rest) + letters
    return letters


def exact(number: str) -> Decimal | None:
    """A stored double as the decimal that a spreadsheet shows; `None` if it is not a finite number.

    The shortest text that gives the same double back is what was typed, except where the double came
    out of arithmetic: 6.15 % is stored as 0.061500000000000006. Spreadsheet programs show 15
    significant digits, so longer ones are rounded to that.
    """
    try:
        value = Decimal(repr(float(number)))
    except (ValueError, OverflowError):
        return None
    if not value.is_finite():
        return None
    return Decimal(plain(_FIFTEEN.plus(value)))


def plain(number: Decimal) -> str:
    """A decimal without exponent or trailing zeros: `250000`, `0.0625`."""
    text = format(number, "f")
    shorter = text.rstrip("0").rstrip(".") if "." in text else text
    return "0" if shorter == "-0" else shorter


def index(text: str) -> int | None:
    """A row, style or text number as a file writes it; `None` if it is none, or absurdly long."""
    return int(text) if text.isascii() and text.isdecimal() and len(text) < 10 else None


def number_cell(row: int, column: int, number: str, number_format: str, formula: str, percent: bool) -> Cell:
    """A number, shown as the percentage it is formatted as; an error where it is not finite."""
    value = exact(number)
    if value is None:
        return Cell(row, column, Kind.ERROR, clip(number), clip(number), number_format, formula)
    shown = f"{plain(value * 100)}%" if percent else plain(value)
    kind = Kind.PERCENT if percent else Kind.NUMBER
    return Cell(row, column, kind, value, shown, number_format, formula)


def text_cell(row: int, column: int, text: str, formula: str = "") -> Cell | None:
    """A text; `None` when it holds nothing but white space and invisible marks."""
    if not text.strip(" \t\r\n\xa0\u200b\u202f\u2007\u2009\ufeff"):
        return None
    return Cell(row, column, Kind.TEXT, text, clip(text), "@", formula)


def clip(text: str) -> str:
    """At most `SHOWN` characters of a text, on one line."""
    line = " ".join(text.split())
    return line if len(line) <= SHOWN else line[: SHOWN - 3] + "..."
