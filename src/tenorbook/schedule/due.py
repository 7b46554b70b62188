"""A scheduled payment: what falls due, and how much of it is interest and how much principal."""

import datetime as dt

from tenorbook.basis.conventions import RowKind
from tenorbook.schedule.accrual import Accrual
from tenorbook.schedule.extras import extras_on_due_date
from tenorbook.schedule.ledger import Item
from tenorbook.schedule.state import State


def scheduled_payment(state: State, day: dt.date, period_ahead: int) -> None:
    """A scheduled payment, and the extra payments made with it, in one row.

    Args:
        state: of the loan, accrued up to the day.
        day: the due date.
        period_ahead: the period that starts on the day.
    """
    state.accrual.forget_settled()
    ahead = _interest_ahead(state, period_ahead)
    if ahead is not None:
        state.accrual.add(ahead)
    due_with_ahead = state.accrual.due()
    interest, principal = _split(state, state.owed_interest())
    unpaid, extra = extras_on_due_date(state, day, state.balance - principal)
    interest += unpaid
    if ahead is not None and principal + extra == state.balance:
        state.accrual.settle(ahead)  # repaid today: there is no period to come
        interest, ahead = interest + state.accrual.due() - due_with_ahead, None
    parts = state.accrual.posted_parts()
    state.add_row(RowKind.PAYMENT, day, interest=interest, principal=principal, extra=extra, parts=parts)
    state.paid += 1
    state.accrual.clear()
    if ahead is not None:
        state.accrual.settle(ahead)
    state.end_if_repaid()


def _interest_ahead(state: State, period: int) -> Accrual | None:
    """The interest of the period that starts now, where the payment prepays it."""
    if not state.prepays(state.paid + 1):
        return None
    row = len(state.columns.date) - 1
    return state.accrual.prepay(state.steps.spans(period), state.balance, row, state.rate)


def balloon_payment(state: State, day: dt.date) -> None:
    """What is left, one period after the last payment in advance."""
    state.add_row(
        RowKind.BALLOON,
        day,
        interest=state.owed_interest(),
        principal=state.balance,
        parts=state.accrual.posted_parts(),
    )
    state.over = True


def _split(state: State, interest: int) -> tuple[int, int]:
    """Interest and principal of the payment now due.

    Args:
        state: of the loan; what is paid ahead or carried unpaid is updated.
        interest: due, carried interest included.
    """
    owed = state.balance + interest
    due, used = _falls_due(state, interest, owed), 0
    if due < owed or not is_last(state):
        used = min(state.ahead, max(0, due - interest))
        state.ahead -= used
        state.balloon_next = state.balloon_next and (not used or is_last(state))
    principal = due - used - interest
    if principal >= 0 or not state.carries_interest():
        state.carried = 0
        return interest, principal
    state.carried = -principal
    return due - used, 0


def _falls_due(state: State, interest: int, owed: int) -> int:
    """The payment now due, before anything paid ahead is taken off; at most what is owed."""
    regular = min(_regular(state, interest), owed)
    if not is_last(state) and not _reaches_end(state, owed - regular):
        return regular
    state.left_at_end = owed - regular
    if not state.terms.in_advance:
        return owed
    due = _last_in_advance(state, regular, owed)
    state.balloon_next = due < owed
    return due


def _regular(state: State, interest: int) -> int:
    """The scheduled payment by its shape. Odd-day interest is paid on top of a level payment."""
    if not state.amortizing(state.paid + 1):
        return interest
    if state.pays_level():
        return state.instalment + state.accrual.rounded(Item.ODD_DAYS)
    return state.instalment + interest


def is_last(state: State) -> bool:
    """Whether the payment now due is the last of the contract."""
    terms = state.terms
    if terms.one_payment:
        return state.at + 1 == state.steps.last
    if terms.count is None and not state.resized:
        return False
    return state.paid + 1 == state.plan.count


def _reaches_end(state: State, left: int) -> bool:
    """Whether a loan has come down to its stated balloon, or to nothing, before its term says so.

    So it does where the payment decides the term, and where extra payments shorten it.
    """
    open_ended = state.terms.count is None and not state.resized
    shortened = state.reduced and bool(state.terms.balloon)
    return (open_ended or shortened) and left <= (state.terms.balloon or 0)


def _last_in_advance(state: State, regular: int, owed: int) -> int:
    """The last payment in advance: it leaves the balloon, due one period later, and takes the rest.

    Where the note's own payment decides what is left, or more payments than the term sized it, that is
    the balloon. A loan that comes down to its stated balloon early leaves just that.
    """
    if not state.amortizing(state.paid + 1):
        return regular
    terms, left, balloon = state.terms, owed - regular, state.plan.balloon
    given = terms.payment is not None and not state.resized
    open_ended = terms.count is None and not state.resized
    if open_ended or (state.reduced and terms.balloon):
        return max(owed - balloon, owed - state.balance)
    if terms.amortized_over or (given and (terms.balloon or left > regular)):
        return regular
    if not balloon:
        return owed
    if given or owed < balloon:
        return regular
    return owed - balloon
