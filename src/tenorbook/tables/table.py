"""A table column by column: header, role, values, and one formula template for the column.

No object stands for a cell: five hundred loans are two million cells.
"""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from enum import StrEnum
from typing import Any


class Role(StrEnum):
    """What the values of a column are; the writer chooses the format by it."""

    TEXT = "text"
    """Text, written as text whatever it begins with."""
    INTEGER = "integer"
    """Whole numbers."""
    AMOUNT = "amount"
    """Integers in units of 10^-digits of the currency, a flow: nothing is shown as a dash."""
    BALANCE = "balance"
    """As an amount, but nothing is shown as 0.00."""
    RATE = "rate"
    """Exact decimal fractions, shown as percent."""
    DATE = "date"
    """Dates."""
    ANY = "any"
    """Carried through as it came: text, number, date or truth value."""


class Tone(StrEnum):
    """How a row is set apart; never by colour alone, the report also puts a word or mark in it."""

    PLAIN = "plain"
    SPECIAL = "special"
    SUBTOTAL = "subtotal"
    TOTAL = "total"


@dataclass(frozen=True, slots=True, kw_only=True)
class Column:
    """One column of a table.

    Attributes:
        key: by which formulas name it.
        header: what stands above it.
        role: what the values are.
        values: one a row; `None` leaves the cell empty.
        width: in characters of the sheet's normal font.
        digits: of an amount: its values are integers in units of 10^-digits.
        shown_digits: of an amount: how many of them the format shows; `None`: all.
        row_digits: of amounts in several currencies: digits of each row, in place of `digits`.
        row_shown_digits: and how many of them each row shows.
        formula: the template of the column (see `tables.formula`); `None`: plain values.
        exceptions: row -> another formula for that row, or `None` for a plain value; in a column of text
            these are the only formulas.
        totalled: whether subtotals and totals add it up.
        last_in_subtotal: whether a subtotal repeats the last value of its rows.
        links: row -> sheet (of the same workbook, or `file#sheet`) that the cell links to.
        wrap: whether long text runs over several lines.
    """

    key: str
    header: str
    role: Role
    values: Sequence[Any]
    width: float
    digits: int = 0
    shown_digits: int | None = None
    row_digits: Sequence[int] | None = None
    row_shown_digits: Sequence[int] | None = None
    formula: str | None = None
    exceptions: Mapping[int, str | None] = field(default_factory=dict)
    totalled: bool = False
    last_in_subtotal: bool = False
    links: Mapping[int, str] = field(default_factory=dict)
    wrap: bool = False

    @property
    def is_amount(self) -> bool:
        """Whether its values are integers in units of 10^-digits."""
        return self.role in (Role.AMOUNT, Role.BALANCE)


@dataclass(frozen=True, slots=True)
class Subtotal:
    """A subtotal after a run of rows.

    Attributes:
        first: first row of the run.
        last: last row of the run (inclusive); the subtotal stands right below it.
        label: in the first columns: `2027`.
    """

    first: int
    last: int
    label: str


@dataclass(frozen=True, slots=True, kw_only=True)
class Table:
    """A table of a sheet.

    Attributes:
        key: by which formulas and charts name it.
        columns: at least one, all with the same number of values.
        title: above the header; empty: none.
        tones: row -> tone, for rows that are not plain.
        subtotals: in the order of the rows, not overlapping, covering every row if there are any.
        total_label: label of the total row; empty: no total row.
        label_column: key of the column that carries the labels of subtotals and total.
        frozen: whether the header stays in sight while the rows scroll, and is repeated in print.
        filtered: whether the header has buttons that filter the rows.
        names: name -> the cell or column of the table that it stands for on its sheet, as a formula's
            reference: `[total:total]`, `[date:all]`.
        sparkline: a small line in each row.
    """

    key: str
    columns: tuple[Column, ...]
    title: str = ""
    tones: Mapping[int, Tone] = field(default_factory=dict)
    subtotals: tuple[Subtotal, ...] = ()
    total_label: str = ""
    label_column: str = ""
    frozen: bool = False
    filtered: bool = False
    names: Mapping[str, str] = field(default_factory=dict)
    sparkline: "Sparklines | None" = None

    def __len__(self) -> int:
        return len(self.columns[0].values)

    def column(self, key: str) -> Column:
        """The column with this key."""
        return next(column for column in self.columns if column.key == key)


@dataclass(frozen=True, slots=True)
class Sparklines:
    """A small line in each row of a table.

    Attributes:
        column: key of the column whose cells hold the lines.
        targets: row -> (sheet, table, column) that the line follows.
    """

    column: str
    targets: Mapping[int, tuple[str, str, str]]
