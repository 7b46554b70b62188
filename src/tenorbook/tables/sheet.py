"""A sheet as a stack of parts: labelled values, lines of text, tables, places for charts."""

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import date
from typing import Any

from tenorbook.tables.table import Role, Table


@dataclass(frozen=True, slots=True, kw_only=True)
class Entry:
    """A label and a value.

    Attributes:
        label: in words.
        value: typed by `role`; an amount is an integer in units of 10^-digits.
        role: what the value is.
        digits: of an amount.
        shown_digits: of an amount: how many the format shows; `None`: all.
        name: the cell's name on its sheet, for formulas; empty: none.
        formula: how the value comes about, see `tables.formula`; `None`: a plain value.
        note: a few words to the right of the value.
    """

    label: str
    value: Any
    role: Role = Role.TEXT
    digits: int = 0
    shown_digits: int | None = None
    name: str = ""
    formula: str | None = None
    note: str = ""

    @property
    def is_amount(self) -> bool:
        """Whether the value is an integer in units of 10^-digits."""
        return self.role in (Role.AMOUNT, Role.BALANCE)


@dataclass(frozen=True, slots=True)
class Block:
    """Entries below each other under a small heading.

    Attributes:
        title: heading; empty: none.
        entries: at least one.
        label_column: sheet column (from 0) of the labels, which run on into the next columns.
        value_column: sheet column of the values.
    """

    title: str
    entries: tuple[Entry, ...]
    label_column: int = 0
    value_column: int = 2


@dataclass(frozen=True, slots=True)
class Blocks:
    """Blocks side by side."""

    blocks: tuple[Block, ...]


@dataclass(frozen=True, slots=True, kw_only=True)
class Check:
    """A difference that must be nothing, worked out by the spreadsheet itself.

    Attributes:
        label: what is held against what, in words.
        formula: of the difference (see `tables.formula`); `None`: a plain value.
        value: what the difference comes to, in units of 10^-digits.
        digits: of the difference.
        shown_digits: how many of them the format shows.
    """

    label: str
    formula: str | None
    value: int = 0
    digits: int = 0
    shown_digits: int = 0


@dataclass(frozen=True, slots=True)
class Checks:
    """Checks below each other, each with its difference and PASS or FAIL, and what they all come to.

    Attributes:
        title: heading.
        checks: at least one.
        name: of the cell that says whether all of them pass.
        label_column: sheet column (from 0) of the labels, which run on into the next columns.
        value_column: sheet column of the differences; the verdicts stand in the next one.
    """

    title: str
    checks: tuple[Check, ...]
    name: str
    label_column: int = 0
    value_column: int = 5


@dataclass(frozen=True, slots=True)
class Lines:
    """Sentences below each other, each running across the sheet.

    Attributes:
        title: heading; empty: none.
        texts: one a line.
        quiet: set smaller and greyer.
    """

    texts: tuple[str, ...]
    title: str = ""
    quiet: bool = False


@dataclass(frozen=True, slots=True)
class Series:
    """One line or stack of a chart: a column of a table on some sheet of the workbook.

    Attributes:
        name: in the legend.
        sheet: name of the sheet.
        table: key of the table.
        column: key of the column.
        values: what the column holds, for programs that draw without opening the sheet.
    """

    name: str
    sheet: str
    table: str
    column: str
    values: Sequence[float | str | date]


@dataclass(frozen=True, slots=True)
class Chart:
    """A native chart.

    Attributes:
        kind: `area` (along dates), `column` or `stacked column`.
        title: in words.
        unit: of the axis, in words: `USD thousand`.
        thousands: how many times the axis divides by a thousand.
        categories: the column along the bottom.
        series: what is drawn.
    """

    kind: str
    title: str
    unit: str
    thousands: int
    categories: Series
    series: tuple[Series, ...]


@dataclass(frozen=True, slots=True)
class Charts:
    """Charts side by side, in their own rows."""

    charts: tuple[Chart, ...]


Part = Blocks | Checks | Lines | Charts | Table


@dataclass(frozen=True, slots=True)
class Printed:
    """What of a sheet is printed.

    Attributes:
        columns: how many, from the left; `None`: all.
        parts: how many, from the top; `None`: all.
        on_one_page: how many parts, from the top, are printed on one page if that leaves them legible;
            then only what else there is room for on it is printed. 0: as many pages as it takes.
    """

    columns: int | None = None
    parts: int | None = None
    on_one_page: int = 0


@dataclass(frozen=True, slots=True, kw_only=True)
class Sheet:
    """One sheet of a workbook.

    Attributes:
        name: fits the rules for sheet names and is unique in its workbook (see `tables.names`).
        title: first line.
        subtitle: second line.
        back: name of the sheet (or `file#sheet`) that the link at the top leads to; empty: none.
        parts: below the title, one under the other.
        print_header: at the top right of every printed page.
        print_footer: at the bottom left of every printed page.
        printed: what of it is printed.
        logo: whether the logo stands at its top right, if there is one.
    """

    name: str
    title: str
    subtitle: str
    parts: Sequence[Part]
    back: str = ""
    print_header: str = ""
    print_footer: str = ""
    printed: Printed = Printed()
    logo: bool = False
