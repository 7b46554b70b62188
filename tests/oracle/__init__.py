"""An independent oracle for dated schedules, written from the written conventions alone.

It shares no code with the library it checks: its own dates, day counts, sizing and ledger, in exact
arithmetic (integers and fractions; decimals of eighty digits where a payment is sized). Clarity comes
before speed.

What it covers: level payment, level principal, interest only, at maturity; a given payment, with its term
or until paid off; balloons, amortization longer than the term, interest-only payments first, payments in
advance; every frequency and day count; every treatment of the first period; extra payments and rate
changes. What it leaves out: business days, indexed loans, draws, fees, skips, compounding other than per
payment, and solving for anything but the term of a given payment.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import replace
from datetime import date
from decimal import Decimal
from itertools import pairwise

from .events import Events, collect
from .ledger import Ledger, Row
from .periods import Periods
from .terms import Terms, resolve

__all__ = ["accrued_interest", "schedule"]

# repeating extras of a loan run until paid off are dated this many due dates past its contract's last
LONG_AHEAD = 600


def schedule(
    loan: Mapping[str, object],
    *,
    extra_payments: Sequence[Mapping[str, object]] = (),
    rate_changes: Sequence[Mapping[str, object]] = (),
) -> list[dict[str, object]]:
    """The dated schedule of one loan.

    loan: a row of the sheet `Loans` by its headers (a missing key is a blank cell); amounts and rates are
    `Decimal` or `int`, never float. extra_payments, rate_changes: rows of those sheets. Returns the rows of
    `schedules.csv`, amounts as `Decimal` with the currency's digits (six more when interest is not rounded).
    Raises `ValueError` for terms that make no schedule.
    """
    ledger = _ledger(loan, extra_payments, rate_changes)
    rows = ledger.run()
    _check(ledger.terms, rows)
    return _shown(ledger.terms, rows)


def accrued_interest(
    loan: Mapping[str, object],
    day: date,
    *,
    day_counted: bool = True,
    extra_payments: Sequence[Mapping[str, object]] = (),
    rate_changes: Sequence[Mapping[str, object]] = (),
) -> Decimal:
    """Interest run and not posted after a day's events, that day counted or not; see `schedule`."""
    ledger = _ledger(loan, extra_payments, rate_changes)
    if day < ledger.terms.funding:
        return Decimal(0)
    return Decimal(ledger.accrued_on(day, day_counted)).scaleb(-ledger.terms.digits)


def _ledger(
    loan: Mapping[str, object],
    extra_payments: Sequence[Mapping[str, object]],
    rate_changes: Sequence[Mapping[str, object]],
) -> Ledger:
    """The ledger of a loan, before its first row."""
    terms = resolve(loan)
    count = terms.count if terms.count is not None else _solved_count(terms)
    periods = Periods(terms, _maturity(terms, count))
    horizon = terms.grid.due(count + 1 + (LONG_AHEAD if terms.open_ended else 0))
    events = collect(terms, extra_payments, rate_changes, horizon)
    return Ledger(terms, periods, events, count, _implied_balloon(terms, periods, count))


def _solved_count(terms: Terms) -> int:
    """The fewest payments of the given amount that pay the loan off, if nothing else happens."""
    plain = replace(terms, extra_each=0)
    rows = Ledger(plain, Periods(plain, None), Events(), 0, 0).run()
    return sum(row.kind == "payment" for row in rows)


def _implied_balloon(terms: Terms, periods: Periods, count: int) -> int:
    """What a given payment leaves at the end of a given term: a balloon if it is more than one payment."""
    amortizing = count - terms.interest_only
    stretched = terms.amortized_over is not None and terms.amortized_over > amortizing
    if terms.payment is None or terms.open_ended or terms.balloon or stretched:
        return 0
    plain = Ledger(replace(terms, extra_each=0), periods, Events(), count, 0)
    plain.run()
    return plain.left_at_end if plain.left_at_end > terms.payment else 0


def _maturity(terms: Terms, count: int) -> date:
    """The contract's last date: the last payment's, or that of the balloon one period after it in advance."""
    stretched = terms.amortized_over is not None and terms.amortized_over > count - terms.interest_only
    balloon = terms.repayment == "interest only" or bool(terms.balloon) or stretched
    return terms.grid.due(count + 1 if terms.advance and balloon else count)


def _check(terms: Terms, rows: list[Row]) -> None:
    """The invariants that hold on every schedule."""
    before = 0
    for row in rows:
        assert row.opening == before
        assert row.opening + row.draw - row.principal - row.extra == row.closing
        before = row.closing
    assert before == 0
    assert sum(row.principal + row.extra for row in rows) == terms.principal
    for kind in {row.kind for row in rows}:
        dates = [row.day for row in rows if row.kind == kind]
        assert all(d1 < d2 for d1, d2 in pairwise(dates))


def _shown(terms: Terms, rows: list[Row]) -> list[dict[str, object]]:
    """Ledger rows as rows of `schedules.csv`."""

    def amount(units: int) -> Decimal:
        return Decimal(units).scaleb(-terms.digits)

    shown: list[dict[str, object]] = []
    for number, row in enumerate(rows):
        previous = rows[number - 1].day if number else row.day
        shown.append(
            {
                "row": number,
                "kind": row.kind,
                "date": row.day,
                "days": (row.day - previous).days,
                "annual_rate": row.rate,
                "opening_balance": amount(row.opening),
                "interest": amount(row.interest),
                "principal": amount(row.principal),
                "extra_principal": amount(row.extra),
                "charges": amount(0),
                "payment": amount(row.payment),
                "closing_balance": amount(row.closing),
                "due_date": row.day,
                "draw": amount(row.draw),
            }
        )
    return shown
