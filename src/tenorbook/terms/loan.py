"""A note as entered: one frozen record a loan, every field in the words of the loan book.

Nothing is defaulted here; `None` means that the cell was blank. `terms.resolve` turns a `Loan` into
`Terms`.
"""

import datetime as dt
from collections.abc import Mapping
from dataclasses import dataclass, field
from decimal import Decimal
from enum import StrEnum

from tenorbook.basis.conventions import (
    AppliesTo,
    DayCount,
    ExtraEffect,
    FirstPeriod,
    Frequency,
    InterestRounding,
    LongFirst,
    MonthEnd,
    PaymentBasis,
    PaymentChange,
    PaymentRounding,
    Repayment,
    Side,
    Timing,
    UnpaidInterest,
)
from tenorbook.basis.problem import NOWHERE, Place


class LengthUnit(StrEnum):
    """What a length of time is counted in."""

    PAYMENTS = "payments"
    MONTHS = "months"
    WEEKS = "weeks"
    DAYS = "days"


@dataclass(frozen=True, slots=True)
class Length:
    """A term as written: `120` is 120 payments, `7y 6m` is 90 months, `26 weeks` is 26 weeks."""

    count: int
    unit: LengthUnit = LengthUnit.PAYMENTS

    def __str__(self) -> str:
        return f"{self.count} {self.unit}"


@dataclass(frozen=True, slots=True)
class PaymentStep:
    """How a solved payment is rounded: direction, and the step in currency units (`None`: minor unit)."""

    rounding: PaymentRounding = PaymentRounding.NEAREST
    step: Decimal | None = None


@dataclass(frozen=True, slots=True, kw_only=True)
class ExtraPayment:
    """One row of the sheet `Extra payments`.

    Attributes:
        date: the (first) day it is paid.
        amount: currency units, positive.
        every: repeats at this frequency, counted from `date`; `None`: once.
        until: last day it may fall on (inclusive), or how many times it is paid; `None`: until payoff.
        effect: what it changes in the payments after it; `None`: shorten term.
        applies_to: principal, or accrued interest first; `None`: principal.
        note: free text.
        where: header -> cell.
    """

    date: dt.date
    amount: Decimal
    every: Frequency | None = None
    until: dt.date | int | None = None
    effect: ExtraEffect | None = None
    applies_to: AppliesTo | None = None
    note: str = ""
    where: Mapping[str, Place] = field(default_factory=dict, compare=False, repr=False)


@dataclass(frozen=True, slots=True, kw_only=True)
class RateChange:
    """One row of the sheet `Rate changes`.

    Attributes:
        from_date: the first day that accrues at the new rate.
        annual_rate: as a fraction: 0.0625.
        payment: re-amortize, keep, or the new payment in currency units; `None`: re-amortize a level
            payment, keep one that decides the term, and keep the principal part of level principal.
        where: header -> cell.
    """

    from_date: dt.date
    annual_rate: Decimal
    payment: PaymentChange | Decimal | None = None
    where: Mapping[str, Place] = field(default_factory=dict, compare=False, repr=False)


@dataclass(frozen=True, slots=True, kw_only=True)
class Loan:
    """One row of the sheet `Loans`, and the rows of the other sheets that name it.

    Amounts are exact decimals in currency units, rates exact decimal fractions (0.0625). A float is
    refused when the terms are resolved.

    Attributes:
        where: header of the book (`First payment`) -> the cell it came from; empty in Python use.
        carried: columns of the book that the program does not know, untouched: header -> value.
    """

    loan_id: str
    counterparty: str = ""
    description: str = ""
    side: Side | None = None
    currency: str | None = None
    principal: Decimal | None = None
    annual_rate: Decimal | None = None
    funding_date: dt.date | None = None
    first_payment: dt.date | None = None
    term: Length | None = None
    maturity: dt.date | None = None
    frequency: Frequency | None = None
    timing: Timing | None = None
    repayment: Repayment | None = None
    payment: Decimal | None = None
    balloon: Decimal | None = None
    amortized_over: Length | None = None
    interest_only_payments: int | None = None
    day_count: DayCount | None = None
    odd_day_count: DayCount | None = None
    first_period: FirstPeriod | None = None
    long_first_period: LongFirst | None = None
    payment_basis: PaymentBasis | None = None
    payment_rounding: PaymentStep | None = None
    interest_rounding: InterestRounding | None = None
    month_end: MonthEnd | None = None
    extra_each_payment: Decimal | None = None
    extra_from: dt.date | None = None
    extra_until: dt.date | None = None
    unpaid_interest: UnpaidInterest | None = None
    extra_payments: tuple[ExtraPayment, ...] = ()
    rate_changes: tuple[RateChange, ...] = ()
    where: Mapping[str, Place] = field(default_factory=dict, compare=False, repr=False)
    carried: Mapping[str, object] = field(default_factory=dict, compare=False, repr=False)

    def place(self, header: str) -> Place:
        """The cell that a header's value came from; `NOWHERE` when it was blank or given in Python."""
        return self.where.get(header, NOWHERE)
