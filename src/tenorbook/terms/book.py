"""A book as read: its loans, the ones that could not be read, its settings and every problem found."""

from collections.abc import Mapping
from dataclasses import dataclass, field
from datetime import date
from decimal import Decimal
from enum import StrEnum

from tenorbook.basis.problem import Problem
from tenorbook.terms.loan import Loan


class DayOrder(StrEnum):
    """How a text date such as 03/04/2026 is to be read."""

    MONTH_FIRST = "month first"
    DAY_FIRST = "day first"
    YEAR_FIRST = "year first"


class DecimalMark(StrEnum):
    """Which character separates the fraction of a number typed as text."""

    POINT = "point"
    COMMA = "comma"


@dataclass(frozen=True, slots=True, kw_only=True)
class Settings:
    """The sheet `Settings`: what holds for the whole book.

    Attributes:
        as_of: the date of the summary's figures; `None`: not stated.
        currency: ISO 4217 code for loans that state none.
        fiscal_year_end: (month, day).
        period_end_counted: whether accrued interest includes the as-of day itself.
        tolerance: in currency units, for reconciliation.
        accounts: name of the account's use -> account.
    """

    as_of: date | None = None
    currency: str = "USD"
    fiscal_year_end: tuple[int, int] = (12, 31)
    day_order: DayOrder | None = None
    decimal_mark: DecimalMark = DecimalMark.POINT
    tolerance: Decimal = Decimal(0)
    period_end_counted: bool = True
    accounts: Mapping[str, str] = field(default_factory=dict)


@dataclass(frozen=True, slots=True, kw_only=True)
class Book:
    """One workbook (or CSV) of loans, as read.

    Attributes:
        name: file name without folder, such as `book.xlsx`.
        loans: in the order of the sheet, those without an error.
        set_aside: loans with an error, filled as far as they could be read; a loan without an ID has
            the ID `(row 7)`.
        settings: the book's settings.
        problems: every problem found, in the order of the sheets; errors of `set_aside` included.
        carried_headers: unknown columns of `Loans`, in order, that go through to the summary.
    """

    name: str
    loans: tuple[Loan, ...]
    set_aside: tuple[Loan, ...] = ()
    settings: Settings = Settings()
    problems: tuple[Problem, ...] = ()
    carried_headers: tuple[str, ...] = ()
