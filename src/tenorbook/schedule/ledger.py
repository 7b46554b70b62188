"""The schedule as computed: columns of equal length, one entry a row.

Columns, not an object a row: five hundred 30-year loans are 180,000 rows.
"""

import datetime as dt
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass
from decimal import Decimal
from enum import StrEnum
from fractions import Fraction
from functools import cached_property
from typing import TYPE_CHECKING, NamedTuple

from tenorbook.basis.conventions import Repayment, RowKind
from tenorbook.basis.problem import Problem
from tenorbook.terms.terms import Terms

if TYPE_CHECKING:
    import pandas as pd


class Item(StrEnum):
    """Which item of interest a stretch of accrual belongs to; each item is rounded by itself."""

    PERIOD = "period"
    """Interest of the regular run of the loan."""
    ODD_DAYS = "odd days"
    """Odd-day interest of the first period, where the loan treats it apart."""


class Part(NamedTuple):
    """One stretch of accrual behind an interest figure: `sign` x balance x factor.

    Attributes:
        start: first day that accrues.
        end: the day after the last that accrues.
        balance_row: the row whose closing balance accrues.
        rate: annual rate in force.
        fraction: of a year, by the loan's day count for this stretch.
        factor: rate x fraction, except where whole periods of a long first period compound.
        item: the item of interest it is part of.
        sign: 1, or -1 for a short first period's odd days, and for what was prepaid of a period whose
            balance or rate then changed.
        compounds: whole periods that compound within `factor`; 0 where factor = rate x fraction.
    """

    start: dt.date
    end: dt.date
    balance_row: int
    rate: Decimal
    fraction: Fraction
    factor: Fraction
    item: Item = Item.PERIOD
    sign: int = 1
    compounds: int = 0


class Instalment(NamedTuple):
    """A scheduled amount and the row of the first payment it is due with.

    Attributes:
        row: first row it applies to.
        amount: the level payment, or with level principal the principal part.
        why: in words: "solved", "given by the note", "re-amortized after the extra payment of ...".
    """

    row: int
    amount: int
    why: str


class Row(NamedTuple):
    """One row of a schedule; amounts in the ledger's unit (`Schedule.digits`).

    Attributes:
        row: 0 is the funding row.
        kind: what the row is.
        date: the day it happens.
        days: actual days since the row before.
        annual_rate: the rate in force over the days before the row.
        opening: balance before the row.
        interest: interest posted (paid, or where principal is negative, partly added to principal).
        principal: scheduled principal; negative when interest is added to the balance.
        extra: extra principal.
        charges: fees and charges.
        payment: interest + principal + extra + charges.
        closing: opening + draw - principal - extra.
        due_date: the unrolled date.
        draw: money advanced.
    """

    row: int
    kind: RowKind
    date: dt.date
    days: int
    annual_rate: Decimal
    opening: int
    interest: int
    principal: int
    extra: int
    charges: int
    payment: int
    closing: int
    due_date: dt.date
    draw: int


@dataclass(frozen=True, eq=False)
class Schedule:
    """The contract schedule of one loan; see `Row` for the meaning of each column.

    Attributes:
        terms: what it was built from.
        digits: digits of the ledger's unit; divide by 10^digits for currency units.
        carried: unpaid interest that bears none, after a row; rows without any are not there.
        instalments: the scheduled amounts in the order they came into force; empty for interest
            only and at maturity.
        irregular: for rows whose interest is not one stretch at one rate on the opening balance, the
            stretches it was computed from. `parts` gives them for every row.
        paid_before: for rows whose stretches were partly posted earlier (an extra payment that took
            interest first), the rows that posted it: interest = rounded stretches less theirs.
        numerators: of the year fraction between the row and the one before; 0 where the row posts no
            interest. Meaningful only for rows not in `irregular`.
        denominators: below it.
        problems: what someone should know: warnings and notes; never errors.
    """

    terms: Terms
    digits: int
    kind: Sequence[RowKind]
    date: Sequence[dt.date]
    days: Sequence[int]
    annual_rate: Sequence[Decimal]
    opening: Sequence[int]
    interest: Sequence[int]
    principal: Sequence[int]
    extra: Sequence[int]
    charges: Sequence[int]
    payment: Sequence[int]
    closing: Sequence[int]
    draw: Sequence[int]
    numerators: Sequence[int]
    denominators: Sequence[int]
    irregular: Mapping[int, tuple[Part, ...]]
    paid_before: Mapping[int, tuple[int, ...]]
    carried: Mapping[int, int]
    instalments: Sequence[Instalment]
    problems: tuple[Problem, ...]

    def __len__(self) -> int:
        return len(self.date)

    @property
    def due_date(self) -> Sequence[dt.date]:
        """The unrolled dates."""
        return self.date

    def rows(self) -> Iterator[Row]:
        """The rows in order."""
        columns = (
            self.kind, self.date, self.days, self.annual_rate, self.opening, self.interest,
            self.principal, self.extra, self.charges, self.payment, self.closing, self.due_date,
            self.draw,
        )  # fmt: skip
        for number, values in enumerate(zip(*columns, strict=True)):
            yield Row(number, *values)

    def prepays(self, row: int) -> bool:
        """Whether a row is a payment in advance of the interest of the period it starts."""
        if not self.terms.in_advance or self.kind[row] is not RowKind.PAYMENT:
            return False
        number = sum(kind is RowKind.PAYMENT for kind in self.kind[: row + 1])
        return self.terms.repayment is Repayment.INTEREST_ONLY or number <= self.terms.interest_only

    def parts(self, row: int) -> tuple[Part, ...]:
        """The stretches of accrual that the interest of a row was computed from; empty if none was due."""
        if row in self.irregular:
            return self.irregular[row]
        if self.numerators[row] == 0:
            return ()
        fraction = Fraction(self.numerators[row], self.denominators[row])
        rate = self.annual_rate[row]
        return (Part(self.date[row - 1], self.date[row], row - 1, rate, fraction, Fraction(rate) * fraction),)

    def frame(self, *, exact: bool = False) -> "pd.DataFrame":
        """The rows as a pandas frame, under the column names of `schedules.csv`.

        Args:
            exact: amounts and rates as Decimals in object columns. By default they are float64, the
                nearest double to each exact figure; dates are datetime64, `row` and `days` int64.
        """
        from tenorbook.schedule.frame import to_frame

        return to_frame(self, exact)

    @cached_property
    def last_row(self) -> int:
        """The number of the last row."""
        return len(self.date) - 1
