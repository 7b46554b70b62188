"""Odd days of the first period that are settled apart from the regular run.

Paid on the funding date, or added to principal one regular period before the first payment. The
interest follows balance and rate as events change them within the odd days; what was paid at funding
is then corrected with the first payment.
"""

import datetime as dt

from tenorbook.basis.conventions import FirstPeriod, RowKind
from tenorbook.schedule.accrual import Accrual
from tenorbook.schedule.ledger import Item
from tenorbook.schedule.state import State


def odd_days_at_funding(state: State) -> Accrual | None:
    """Odd-day interest to be paid on the funding date, on what is known then; `None` if there is none."""
    terms = state.terms
    if terms.first_period is not FirstPeriod.PAY_AT_FUNDING or not state.steps.first:
        return None
    return state.accrual.prepay(state.steps.first[:1], terms.principal, 0, state.rate)


def capitalization_day(state: State) -> dt.date | None:
    """Where odd-day interest is still to be added to principal; `None` if it is not."""
    if state.at or state.terms.first_period is not FirstPeriod.CAPITALIZE or not state.steps.first:
        return None
    return None if state.capitalized else state.steps.first[0].end


def still_to_capitalize(state: State) -> int:
    """The odd-day interest that will be added to principal, at the present balance and rate."""
    if capitalization_day(state) is None:
        return 0
    odd_days = state.steps.first[:1]
    return state.accrual.prepay(odd_days, state.balance, 0, state.rate).due()


def capitalize_on(state: State, day: dt.date) -> None:
    """Adds the odd-day interest to principal, if this is the day."""
    if day != capitalization_day(state):
        return
    interest, parts = state.accrual.due(), state.accrual.posted_parts()
    state.capitalized = True
    if interest:
        state.add_row(RowKind.CAPITALIZE, day, interest=interest, principal=-interest, parts=parts)
    state.accrual.clear()


def waive_odd_days(state: State) -> None:
    """Forgets odd-day interest that is not charged."""
    if state.terms.first_period is FirstPeriod.WAIVE:
        state.accrual.drop(Item.ODD_DAYS)
