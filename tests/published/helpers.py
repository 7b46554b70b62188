"""From the words and figures of the data files to schedules and their figures.

Every test of this folder builds its loans here, so that a change of the engine's doors is one change.
"""

from collections.abc import Mapping, Sequence
from dataclasses import replace
from datetime import date
from decimal import Decimal
from typing import Any

from published.printed import agrees, said
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
    RowKind,
    Timing,
)
from tenorbook.basis.documented import Documented
from tenorbook.schedule.build import build
from tenorbook.schedule.ledger import Row, Schedule
from tenorbook.terms.loan import ExtraPayment, Length, Loan, PaymentStep, RateChange
from tenorbook.terms.resolve import resolve

START = date(2001, 1, 1)
"""Funding date of published examples that name none."""

Terms = Mapping[str, Any]
"""Terms as the data files write them: names of `Loan`, words of the book, amounts and dates as text."""

_ENUMS: dict[str, type[Documented]] = {
    "frequency": Frequency,
    "timing": Timing,
    "repayment": Repayment,
    "day_count": DayCount,
    "odd_day_count": DayCount,
    "first_period": FirstPeriod,
    "long_first_period": LongFirst,
    "payment_basis": PaymentBasis,
    "interest_rounding": InterestRounding,
    "month_end": MonthEnd,
}
_AMOUNTS = ("principal", "annual_rate", "payment", "balloon")
_DATES = ("funding_date", "first_payment", "maturity")
_LENGTHS = ("term", "amortized_over")


def schedule(terms: Terms, rounding: str = "cents") -> Schedule:
    """The schedule of a published loan.

    Args:
        terms: see `Terms`; without a date the loan is funded on `START`.
        rounding: where the source rounds. `cents`: the payment, and interest every period;
            `payment only`: interest is carried unrounded; `none`: neither is rounded;
            `up`, `down`: interest goes up or down to the cent.
    """
    interest = {"cents": "half up", "payment only": "none"}.get(rounding, rounding)
    loan = loan_of({"interest_rounding": interest, **terms})
    resolved, problems = resolve(loan)
    assert resolved is not None, [str(problem) for problem in problems]
    if rounding == "none":
        resolved = replace(resolved, payment_step=1)
    return build(resolved)


def loan_of(terms: Terms) -> Loan:
    """The loan that the data describe."""
    given: dict[str, Any] = {"loan_id": "published"}
    if not terms.keys() & set(_DATES):
        given["funding_date"] = START
    for name, value in terms.items():
        given[name] = _value(name, value)
    return Loan(**given)


def _value(name: str, value: Any) -> object:
    if name in _ENUMS:
        return said(_ENUMS[name], value)
    if name in _AMOUNTS:
        return Decimal(value)
    if name in _DATES:
        return date.fromisoformat(value)
    if name in _LENGTHS:
        return Length(value)
    if name == "payment_rounding":
        return payment_step(value)
    if name == "rate_changes":
        return tuple(_rate_change(entry) for entry in value)
    if name == "extra_payments":
        return tuple(_extra(entry) for entry in value)
    return value


def payment_step(words: str) -> PaymentStep:
    """`up 1.00` as the loan's rounding of its payment."""
    way, _, step = words.partition(" ")
    return PaymentStep(said(PaymentRounding, way), Decimal(step) if step else None)


def _rate_change(entry: Mapping[str, str]) -> RateChange:
    given = entry.get("payment", "")
    words = {change.value for change in PaymentChange}
    payment: PaymentChange | Decimal | None = Decimal(given) if given and given not in words else None
    if given in words:
        payment = said(PaymentChange, given)
    return RateChange(
        from_date=date.fromisoformat(entry["from_date"]),
        annual_rate=Decimal(entry["annual_rate"]),
        payment=payment,
    )


def _extra(entry: Mapping[str, str]) -> ExtraPayment:
    return ExtraPayment(
        date=date.fromisoformat(entry["date"]),
        amount=Decimal(entry["amount"]),
        applies_to=said(AppliesTo, entry.get("applies_to", "principal")),
        effect=said(ExtraEffect, entry.get("effect", "shorten term")),
    )


class Figures:
    """The figures of a schedule by the number of the payment, in currency units."""

    def __init__(self, built: Schedule) -> None:
        self.built = built
        rows = list(built.rows())
        self.payments = [row for row in rows if row.kind in (RowKind.PAYMENT, RowKind.BALLOON)]
        self.events = [row for row in rows if row.kind is RowKind.EXTRA]

    def figure(self, name: str, at: Any) -> Decimal:
        """One figure by its name in the data files; `at` is a payment's number or [first, last]."""
        if name == "payments":
            return Decimal(len(self.payments))
        if name == "total of level payments":
            return self._units(sum(self._level(row.row) for row in self.payments[at[0] - 1 : at[1]]))
        if name.startswith("total "):
            return self.total(name.removeprefix("total "), at[0], at[1])
        if name == "interest to date":
            return self.total("interest", 1, at)
        if name.startswith("event "):
            row = self.events[at - 1]
            column = name.removeprefix("event ")
            return self._units(row.principal + row.extra if column == "principal" else _cell(row, column))
        return self._units(_cell(self.payments[at - 1], name))

    def total(self, column: str, first: int, last: int) -> Decimal:
        """The sum of a column over payments `first` to `last`, both counted."""
        return self._units(sum(_cell(row, column) for row in self.payments[first - 1 : last]))

    def _level(self, row: int) -> int:
        """The instalment in force at a row, before the last payment takes its difference."""
        return [entry.amount for entry in self.built.instalments if entry.row <= row][-1]

    def _units(self, minor: int) -> Decimal:
        return Decimal(minor).scaleb(-self.built.digits)


def _cell(row: Row, column: str) -> int:
    value = getattr(row, column)
    assert isinstance(value, int)
    return value


def differences(found: Figures, expected: Sequence[tuple[str, Any, str]]) -> list[str]:
    """Each figure that differs from the printed one by more than half of its last printed digit."""
    return [
        f"{name} at {at}: printed {printed}, found {value}"
        for name, at, printed in expected
        if not agrees(value := found.figure(name, at), printed)
    ]
