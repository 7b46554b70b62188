"""Walks a loan from funding to its last row: what happens on which day, in the order of the contract.

On one date: rate change, draw, capitalized odd days, scheduled payment, extra payment. Runs of plain
periods go through the kernel in one step; a period in which anything happens is taken apart.
"""

import datetime as dt
from collections.abc import Iterator

from tenorbook.basis.conventions import PaymentChange, RowKind
from tenorbook.basis.money import to_words
from tenorbook.basis.problem import NOWHERE, TermsError, error
from tenorbook.schedule.due import balloon_payment, scheduled_payment
from tenorbook.schedule.extras import extras_between_due_dates
from tenorbook.schedule.first_period import (
    capitalization_day,
    capitalize_on,
    odd_days_at_funding,
    waive_odd_days,
)
from tenorbook.schedule.plain import take_plain_run
from tenorbook.schedule.resizing import settle_pending, size_at_funding
from tenorbook.schedule.sizing import Plan
from tenorbook.schedule.state import State
from tenorbook.schedule.steps import Span, Steps


def walk(steps: Steps, plan: Plan) -> State:
    """The loan at its end, with all its rows.

    Args:
        steps: dated steps of the loan.
        plan: number of payments and balloon that sizing aims at.

    Raises:
        TermsError: the fixed payment never repays the loan.
    """
    state = State.before_funding(steps, plan)
    _fund(state)
    while not state.over:
        if not take_plain_run(state):
            _period(state, state.at + 1)
    _report_unused(state)
    return state


def _fund(state: State) -> None:
    """The funding date, with everything that falls on it."""
    day, prepaid = state.terms.funding, odd_days_at_funding(state)
    interest, parts = (prepaid.due(), prepaid.posted_parts()) if prepaid else (0, ())
    state.add_row(RowKind.FUNDING, day, interest=interest, draw=state.terms.principal, parts=parts)
    if prepaid:
        state.accrual.settle(prepaid)
    size_at_funding(state)
    _reprice_until(state, day)
    settle_pending(state)
    if state.terms.in_advance:
        scheduled_payment(state, day, 1)
    else:
        extras_between_due_dates(state, day)
    settle_pending(state)


def _period(state: State, number: int) -> None:
    """One period, event by event, and what its end brings."""
    end, spans = state.steps.boundaries[number], state.steps.spans(number)
    state.accrual.start_period()
    for day in _days_before(state, end):
        _accrue(state, spans, day)
        _reprice_until(state, day)
        capitalize_on(state, day)
        extras_between_due_dates(state, day)
        if state.over:
            return
    _accrue(state, spans, end)
    _reprice_until(state, end)
    _boundary(state, number, end)
    state.at = number
    settle_pending(state)


def _days_before(state: State, end: dt.date) -> Iterator[dt.date]:
    """The days inside the running period on which something happens, in order."""
    while True:
        days = [day for day in (state.next_event(), capitalization_day(state)) if day is not None]
        day = min(days, default=end)
        if day >= end:
            return
        yield day


def _accrue(state: State, spans: tuple[Span, ...], day: dt.date) -> None:
    row = len(state.columns.date) - 1
    state.accrual.run_to(spans, day, state.balance, row, state.rate)
    state.rate_before = state.rate
    waive_odd_days(state)


def _reprice_until(state: State, day: dt.date) -> None:
    """Rate changes up to a day; their row still shows the rate of the days before it."""
    while state.repricings and state.repricings[-1].date <= day:
        change = state.repricings.pop()
        state.add_row(RowKind.RATE, change.date)
        state.rate = change.rate
        if isinstance(change.payment, int):
            state.pending = change.payment
        elif change.payment is PaymentChange.REAMORTIZE:
            state.pending = f"re-amortized after the rate change of {change.date}"


def _boundary(state: State, number: int, day: dt.date) -> None:
    """The end of a period: a payment, the balloon, or nothing where all is paid at maturity."""
    at_end = number == state.steps.last
    if state.balloon_next:
        balloon_payment(state, day)
    elif state.terms.one_payment and not at_end:
        extras_between_due_dates(state, day)
    else:
        scheduled_payment(state, day, number + 1)
        if at_end and not state.over:
            raise _never_repaid(state)


def _never_repaid(state: State) -> TermsError:
    """The end of the calendar is reached with money still owed."""
    terms = state.terms
    left = to_words(state.balance, terms.digits)
    rate = terms.loan.place("Annual rate")
    return TermsError(
        error(
            terms.loan_id,
            terms.loan.place("Payment"),
            f"the payment of {to_words(state.instalment, terms.digits)} does not repay the loan: after "
            f"{state.paid:,} payments {left} is still owed",
            "give a higher payment, or the Term or Maturity at which the rest falls due",
            *((rate,) if rate != NOWHERE else ()),
        )
    )


def _report_unused(state: State) -> None:
    """One-off extras and rate changes that the loan never came to."""
    end = state.columns.date[-1]
    unused = [
        *((extra.place, f"the extra payment of {extra.date}") for extra in state.extras if not extra.repeats),
        *((change.place, f"the rate change of {change.date}") for change in state.repricings),
    ]
    for place, what in reversed(unused):
        state.warn(place, f"{what} is not used: the loan is repaid on {end}", "check the date")
