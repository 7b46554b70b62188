"""Odd days of the first period that are settled apart from the regular run.

Paid on the funding date, or added to principal one regular period before the first payment; in both
cases the interest follows balance and rate as events change them within the odd days.
"""

import datetime as dt

from tenorbook.basis.conventions import FirstPeriod, RowKind
from tenorbook.schedule.accrual import Accrual
from tenorbook.schedule.ledger import Item, Part
from tenorbook.schedule.state import State
from tenorbook.schedule.steps import Span
from tenorbook.terms.terms import Extra, Repricing, Terms


def paid_at_funding(state: State) -> tuple[int, tuple[Part, ...]]:
    """Odd-day interest paid on the funding date, looking ahead over the events in the odd days."""
    terms = state.terms
    if terms.first_period is not FirstPeriod.PAY_AT_FUNDING or not state.steps.first:
        return 0, ()
    odd = state.steps.first[0]
    ahead = Accrual(state.steps, terms.interest_rounding)
    balance, rate = terms.principal, terms.rate
    for change in _changes_within(terms, odd):
        ahead.run_to((odd,), change.date, balance, 0, rate)
        if isinstance(change, Repricing):
            rate = change.rate
        else:
            balance = max(0, balance - change.amount)
    ahead.run_to((odd,), odd.end, balance, 0, rate)
    return ahead.due(), tuple(ahead.parts)


def _changes_within(terms: Terms, span: Span) -> list[Repricing | Extra]:
    """Rate changes and extra payments inside a stretch, in order; on one day the rate comes first."""
    changes: list[Repricing | Extra] = [*terms.repricings, *terms.extras]
    within = [change for change in changes if change.date < span.end]
    return sorted(within, key=lambda change: (change.date, isinstance(change, Extra)))


def capitalization_day(state: State) -> dt.date | None:
    """Where odd-day interest is still to be added to principal; `None` if it is not."""
    if state.at or state.terms.first_period is not FirstPeriod.CAPITALIZE or not state.steps.first:
        return None
    done = RowKind.CAPITALIZE in state.columns.kind
    return None if done else state.steps.first[0].end


def still_to_capitalize(state: State) -> int:
    """The odd-day interest that will be added to principal, at the present balance and rate."""
    if capitalization_day(state) is None:
        return 0
    trial = Accrual(state.steps, state.terms.interest_rounding)
    odd = state.steps.first[0]
    trial.run_to((odd,), odd.end, state.balance, 0, state.rate)
    return trial.due()


def capitalize_on(state: State, day: dt.date) -> None:
    """Adds the odd-day interest to principal, if this is the day."""
    if day != capitalization_day(state):
        return
    interest, parts = state.accrual.due(), tuple(state.accrual.parts)
    state.add_row(RowKind.CAPITALIZE, day, interest=interest, principal=-interest, parts=parts)
    state.accrual.clear()


def drop_settled_odd_days(state: State) -> None:
    """Forgets odd-day interest that was paid at funding or is not charged."""
    if state.terms.first_period in (FirstPeriod.WAIVE, FirstPeriod.PAY_AT_FUNDING):
        state.accrual.drop(Item.ODD_DAYS)
