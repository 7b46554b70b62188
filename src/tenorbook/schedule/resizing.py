"""The scheduled amount: sized at funding, and again when an event asks for it."""

from tenorbook.basis.conventions import Repayment
from tenorbook.schedule.first_period import still_to_capitalize
from tenorbook.schedule.state import State

_SIZED = (Repayment.LEVEL_PAYMENT, Repayment.LEVEL_PRINCIPAL)


def size_at_funding(state: State) -> None:
    """The first scheduled amount: the note's own, or solved."""
    terms = state.terms
    if terms.payment is not None:
        state.set_instalment(terms.payment, "given by the note")
    elif terms.repayment in _SIZED:
        balance = state.balance + still_to_capitalize(state)
        left = min(_balloon_to_leave(state), balance)
        amount = state.sizer.amount(balance, left, state.rate, 0)
        state.set_instalment(amount, "solved")


def settle_pending(state: State) -> None:
    """Sets or re-amortizes the payment after a due date, if an event asked for it."""
    if state.pending is None or state.over:
        return
    pending, state.pending = state.pending, None
    if state.terms.repayment not in _SIZED:
        return
    if isinstance(pending, int):
        state.set_instalment(pending, "set by the rate change")
    else:
        _reamortize(state, pending)


def _reamortize(state: State, why: str | None) -> None:
    if state.sizer.remaining(state.paid) > 0:
        balance = state.balance + still_to_capitalize(state)
        left = min(_balloon_to_leave(state), balance)
        state.set_instalment(state.sizer.amount(balance, left, state.rate, state.paid), why or "re-amortized")
        state.resized = True


def _balloon_to_leave(state: State) -> int:
    """What sizing aims at: the plan's balloon; where more payments size it, only a stated one."""
    terms = state.terms
    return (terms.balloon or 0) if terms.amortized_over else state.plan.balloon
