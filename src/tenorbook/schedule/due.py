"""A scheduled payment: how much of it is interest and how much principal."""

from tenorbook.schedule.ledger import Item, Part
from tenorbook.schedule.state import State


def interest_due(state: State, period_ahead: int) -> tuple[int, tuple[Part, ...]]:
    """Interest to post with the payment now due, and the stretches it comes from.

    Args:
        state: of the loan, accrued up to today.
        period_ahead: the period that starts today, whose interest a prepaid loan pays.
    """
    return _prepay(state, period_ahead) if state.terms.prepays else state.owed_interest()


def _prepay(state: State, period: int) -> tuple[int, tuple[Part, ...]]:
    """Interest in advance for a period, and the correction of the period that ends today."""
    correction, parts = state.prepaid_correction()
    state.accrual.clear()
    spans, row = state.steps.spans(period), len(state.columns.date) - 1
    state.accrual.start_period()
    state.accrual.run_to(spans, spans[-1].end, state.balance, row, state.rate)
    state.prepaid, state.prepaid_parts = state.accrual.due(), tuple(state.accrual.parts)
    return state.prepaid + correction, (*state.prepaid_parts, *parts)


def split(state: State, due: int) -> tuple[int, int]:
    """Interest and principal of the payment now due.

    Args:
        state: of the loan; unpaid interest it carries is updated.
        due: interest due, carried interest included.
    """
    if is_last(state):
        state.carried = 0
        return due, state.balance
    if not state.amortizing(state.paid + 1):
        return due, 0
    interest, principal = _level_split(state, due) if state.pays_level() else (due, state.instalment)
    used = min(state.ahead, max(0, principal))
    state.ahead -= used
    return interest, _bounded(state, principal - used)


def _level_split(state: State, due: int) -> tuple[int, int]:
    """A level payment: interest first. Odd-day interest is paid on top of it."""
    payment = state.instalment + state.accrual.rounded(Item.ODD_DAYS)
    principal = payment - due
    if principal >= 0 or not state.carries_interest():
        state.carried = 0
        return due, principal
    state.carried = due - payment
    return payment, 0


def _bounded(state: State, principal: int) -> int:
    """No more than is left; the last payment in advance leaves exactly the stated balloon."""
    terms = state.terms
    if terms.in_advance and state.paid + 1 == terms.count:
        target = _left_in_advance(state)
        if target is not None:
            rest = max(0, state.balance - target)
            return min(principal, rest) if state.reduced and rest < principal else rest
    return min(principal, state.balance)


def _left_in_advance(state: State) -> int | None:
    """The balloon the last payment in advance must leave; `None`: whatever it comes to."""
    terms = state.terms
    if terms.amortized_over or (terms.payment is not None and terms.balloon is None):
        return None
    return terms.balloon or 0


def is_last(state: State) -> bool:
    """Whether the payment now due is the one that repays the rest."""
    terms = state.terms
    if terms.in_advance:
        return False
    if terms.one_payment:
        return state.at + 1 == state.steps.last
    return state.paid + 1 == terms.count
