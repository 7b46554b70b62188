"""A note as resolved: every convention settled, amounts in minor units, due dates by rule.

Made from a `Loan` by `terms.resolve.resolve`, and from nothing else.
"""

import datetime as dt
from dataclasses import dataclass
from decimal import Decimal

from tenorbook.basis.conventions import (
    AppliesTo,
    DayCount,
    ExtraEffect,
    FirstPeriod,
    Frequency,
    InterestRounding,
    LongFirst,
    PaymentBasis,
    PaymentChange,
    PaymentRounding,
    Repayment,
    Side,
    Timing,
    UnpaidInterest,
)
from tenorbook.basis.problem import Place
from tenorbook.calendar.due_dates import DueDates
from tenorbook.terms.loan import Loan


@dataclass(frozen=True, slots=True)
class Extra:
    """One extra payment on one date; a repeating entry has become one of these a date.

    Attributes:
        amount: in the ledger's unit (see `Terms.digits`), positive.
        repeats: whether the entry repeats, so that it is bound to meet the end of the loan.
        place: the cell of the entry, for messages.
    """

    date: dt.date
    amount: int
    effect: ExtraEffect
    applies_to: AppliesTo
    repeats: bool
    place: Place


@dataclass(frozen=True, slots=True)
class Repricing:
    """A rate change: `rate` accrues from `date` (that day included).

    Attributes:
        payment: what becomes of the payment; an `int` is a set amount in the ledger's unit.
    """

    date: dt.date
    rate: Decimal
    payment: PaymentChange | int
    place: Place


@dataclass(frozen=True, slots=True, kw_only=True)
class Terms:
    """The terms that the schedule is built from.

    Attributes:
        loan: the note as entered, for its words and cells.
        currency: ISO 4217 code.
        currency_digits: digits of the currency.
        digits: digits of the ledger's unit: the currency's, and 6 more where interest is carried
            unrounded. Every integer amount of the terms and of the schedule is in this unit.
        principal: what is advanced on the funding date.
        rate: annual rate as an exact decimal fraction.
        funding: the date from which interest runs (that day included).
        due: the unrolled due dates by number; `due[1]` is the first payment.
        count: number of payments; `None` when the fixed payment decides.
        payment: the amount the note fixes (for level principal: the principal part); `None`: solved.
        balloon: principal left to be paid with (in advance: one period after) the last payment;
            `None`: none stated.
        amortized_over: amortizing payments that size the payment, counted after the interest-only
            ones; `None`: as many as there are.
        interest_only: number of interest-only payments at the start.
        odd_day_count: how odd days and parts of a period are counted.
        odd_day_count_given: whether the loan names it (else it follows the day count).
        payment_step: multiple to which a solved payment is rounded.
        each_payment: extra with every scheduled payment in [each_from, each_until]; 0: none.
        extras: by date, then in the book's order.
        repricings: by date.
    """

    loan: Loan
    loan_id: str
    side: Side
    currency: str
    currency_digits: int
    digits: int
    principal: int
    rate: Decimal
    funding: dt.date
    due: DueDates
    count: int | None
    frequency: Frequency
    timing: Timing
    repayment: Repayment
    payment: int | None
    balloon: int | None
    amortized_over: int | None
    interest_only: int
    day_count: DayCount
    odd_day_count: DayCount
    odd_day_count_given: bool
    first_period: FirstPeriod
    long_first: LongFirst
    payment_basis: PaymentBasis
    payment_rounding: PaymentRounding
    payment_step: int
    interest_rounding: InterestRounding
    unpaid_interest: UnpaidInterest
    each_payment: int
    each_from: dt.date
    each_until: dt.date
    extras: tuple[Extra, ...]
    repricings: tuple[Repricing, ...]

    @property
    def in_advance(self) -> bool:
        """Whether payments fall at the start of their periods."""
        return self.timing is Timing.ADVANCE

    @property
    def one_payment(self) -> bool:
        """Whether principal and all interest are paid at once, on the maturity date."""
        return self.repayment is Repayment.AT_MATURITY or self.frequency is Frequency.AT_MATURITY

    @property
    def leaves_balloon(self) -> bool:
        """Whether the terms leave principal to be paid after (in arrears: with) the last payment."""
        return self.repayment is Repayment.INTEREST_ONLY or bool(self.balloon or self.amortized_over)
