"""Extra payments: on a due date with the scheduled payment, or in between as rows of their own."""

import datetime as dt

from tenorbook.basis.conventions import AppliesTo, ExtraEffect, RowKind
from tenorbook.basis.money import to_text
from tenorbook.schedule.state import State
from tenorbook.terms.terms import Extra


def extras_between_due_dates(state: State, day: dt.date) -> None:
    """Extra payments up to a day, each a row; interest has accrued to that day."""
    while state.extras and state.extras[-1].date <= day and not state.over:
        _extra_row(state, state.extras.pop())


def _extra_row(state: State, extra: Extra) -> None:
    owed, parts = state.owed_interest()
    interest = 0
    if extra.amount >= state.balance:  # a payoff: the interest accrued to its date comes first
        interest = min(owed, extra.amount)
    elif extra.applies_to is AppliesTo.INTEREST_FIRST:
        interest = max(0, min(owed, extra.amount))
    principal = min(extra.amount - interest, state.balance)
    state.add_row(
        RowKind.EXTRA,
        extra.date,
        interest=interest,
        extra=principal,
        parts=parts if interest else (),
    )
    if interest:
        _take_interest(state, interest)
    _note_cut(state, extra, interest + principal)
    _apply_effect(state, extra.effect, extra.date, principal)
    state.end_if_repaid()


def _take_interest(state: State, interest: int) -> None:
    carried = min(state.carried, interest)
    state.carried -= carried
    state.accrual.pay(interest - carried)
    state.accrual.paid_rows.append(len(state.columns.date) - 1)


def extras_on_due_date(state: State, day: dt.date, balance: int) -> int:
    """Extra principal paid together with a scheduled payment that leaves `balance`."""
    terms, total = state.terms, 0
    if terms.each_payment and terms.each_from <= day <= terms.each_until:
        total = min(terms.each_payment, balance)
        state.reduced = True
    while state.extras and state.extras[-1].date <= day:
        extra = state.extras.pop()
        used = min(extra.amount, balance - total)
        total += used
        _note_cut(state, extra, used)
        _apply_effect(state, extra.effect, extra.date, used)
    return total


def _apply_effect(state: State, effect: ExtraEffect, day: dt.date, principal: int) -> None:
    match effect:
        case ExtraEffect.LOWER:
            state.pending = f"re-amortized after the extra payment of {day}"
        case ExtraEffect.PAY_AHEAD:
            state.ahead += principal
        case ExtraEffect.SHORTEN:
            state.reduced = True


def _note_cut(state: State, extra: Extra, used: int) -> None:
    """Says when an extra payment was more than was left; a repeating one is bound to be, once."""
    if used == extra.amount or (extra.repeats and not used):
        return
    digits = state.terms.digits
    state.note(
        extra.place,
        f"the extra payment of {to_text(extra.amount, digits)} on {extra.date} is more than was left to "
        f"pay: {to_text(used, digits)} was used",
    )
