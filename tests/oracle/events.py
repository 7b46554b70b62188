"""What happens to a loan between its payments: extra payments and rate changes, each on its date."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Iterable, Mapping
from dataclasses import dataclass, field
from datetime import date
from decimal import Decimal

from .dates import STEPS, Grid
from .terms import Terms, to_units


@dataclass(frozen=True)
class Extra:
    """One extra payment, in units."""

    amount: int
    effect: str
    interest_first: bool


@dataclass(frozen=True)
class RateChange:
    """A new annual rate; payment is "re-amortize", "keep" or an amount in units."""

    rate: Decimal
    payment: str | int


@dataclass
class Events:
    """The events of one loan by date; of several rate changes on one date the last row counts."""

    extras: dict[date, list[Extra]] = field(default_factory=lambda: defaultdict(list))
    rates: dict[date, RateChange] = field(default_factory=dict)

    def dates(self) -> list[date]:
        """All event dates, in order."""
        return sorted(set(self.extras) | set(self.rates))


def _extra_dates(row: Mapping[str, object], terms: Terms, horizon: date) -> Iterable[date]:
    """The dates of one row. Repeated at the loan's own frequency from one of its due dates, an extra goes
    with the payments; else it has its own anchor, and keeps to month-ends only where the due dates do."""
    first = row["Date"]
    if not isinstance(first, date):
        raise ValueError("an extra payment needs its date")
    every = row.get("Every")
    if every is None or every == "":
        yield first
        return
    until = row.get("Until")
    last_date = min(until, horizon) if isinstance(until, date) else horizon
    count = None if until is None or isinstance(until, date) else int(str(until))
    grid, start = Grid(first, STEPS[str(every)], "auto" if terms.grid.on_month_ends else "no"), 1
    if not terms.single and STEPS[str(every)] == terms.grid.step:
        number = terms.grid.number_of(first)
        grid, start = (grid, 1) if number is None else (terms.grid, number)
    i = 0
    while grid.due(start + i) <= last_date and (count is None or i < count):
        yield grid.due(start + i)
        i += 1


def _default_payment(terms: Terms) -> str:
    """A level payment is re-amortized; where the payment alone decides how long the loan runs, it is kept."""
    return "re-amortize" if terms.repayment == "level payment" and not terms.open_ended else "keep"


def collect(
    terms: Terms,
    extra_payments: Iterable[Mapping[str, object]],
    rate_changes: Iterable[Mapping[str, object]],
    horizon: date,
) -> Events:
    """The rows of the sheets `Extra payments` and `Rate changes`, dated up to `horizon`."""
    events = Events()
    for row in extra_payments:
        extra = Extra(
            to_units(row["Amount"], terms.digits),
            str(row.get("Effect") or "shorten term"),
            row.get("Applies to") == "interest first",
        )
        for day in _extra_dates(row, terms, horizon):
            if day >= terms.funding:
                events.extras[day].append(extra)
    for row in rate_changes:
        start = row["From"]
        if not isinstance(start, date):
            raise ValueError("a rate change needs its date")
        answer = row.get("Payment")
        payment: str | int = _default_payment(terms) if answer is None or answer == "" else str(answer)
        if isinstance(answer, int | Decimal):
            payment = to_units(answer, terms.digits)
        events.rates[start] = RateChange(Decimal(str(row["Annual rate"])), payment)
    return events
