"""Extra payments: on a due date with the scheduled payment, or in between in a row of their own."""

import datetime as dt

from tenorbook.basis.conventions import AppliesTo, ExtraEffect, RowKind
from tenorbook.basis.money import to_words
from tenorbook.schedule.state import State
from tenorbook.terms.terms import Extra


def extras_between_due_dates(state: State, day: dt.date) -> None:
    """The extra payments of a day, all in one row; interest has accrued to that day."""
    interest, principal, parts = 0, 0, state.accrual.posted_parts()
    paid_before = tuple(state.accrual.paid_rows)
    row, extras = len(state.columns.date), _take(state, day)
    for extra in extras:
        balance = state.balance - principal
        taken = _interest_first(state, extra, balance)
        used = min(extra.amount - taken, balance)
        interest, principal = interest + taken, principal + used
        _take_interest(state, taken, row)
        _note_cut(state, extra, taken + used)
        _apply_effect(state, extra.effect, extra.date, used)
    if interest or principal:
        state.add_row(
            RowKind.EXTRA,
            day,
            interest=interest,
            extra=principal,
            parts=parts if interest else (),
            paid_before=paid_before,
        )
        state.end_if_repaid()


def _take(state: State, day: dt.date) -> list[Extra]:
    """The extra payments up to a day, taken off the list of those to come."""
    taken = []
    while state.extras and state.extras[-1].date <= day:
        taken.append(state.extras.pop())
    return taken


def _interest_first(state: State, extra: Extra, balance: int) -> int:
    """The part of an extra payment that pays interest."""
    if not balance:
        return 0
    owed = state.owed_interest()
    if extra.amount >= max(balance, balance + owed):  # a payoff; interest paid in advance comes back
        return owed
    if extra.applies_to is AppliesTo.INTEREST_FIRST or extra.amount >= balance:
        return max(0, min(owed, extra.amount))
    return 0


def _take_interest(state: State, interest: int, row: int) -> None:
    """Takes interest off what is owed; a row that pays only part of it is remembered."""
    if not interest:
        return
    carried = min(state.carried, max(0, interest))
    state.carried -= carried
    if not state.accrual.pay(interest - carried) and row not in state.accrual.paid_rows:
        state.accrual.paid_rows.append(row)


def extras_on_due_date(state: State, day: dt.date, balance: int) -> tuple[int, int]:
    """Interest carried unpaid and extra principal, paid with a scheduled payment that leaves `balance`."""
    terms, interest, total = state.terms, 0, 0
    if terms.each_payment and terms.each_from <= day <= terms.each_until:
        interest = _carried_taken(state, terms.each_payment, False, balance)
        total = min(terms.each_payment - interest, balance)
        state.reduced = True
    for extra in _take(state, day):
        first = extra.applies_to is AppliesTo.INTEREST_FIRST
        taken = _carried_taken(state, extra.amount, first, balance - total)
        used = min(extra.amount - taken, balance - total)
        interest, total = interest + taken, total + used
        _note_cut(state, extra, taken + used)
        _apply_effect(state, extra.effect, extra.date, used)
    return interest, total


def _carried_taken(state: State, amount: int, interest_first: bool, balance: int) -> int:
    """The unpaid interest that an extra pays on a due date: all of it where it clears the loan."""
    if not (interest_first or amount >= balance):
        return 0
    taken = min(amount, state.carried)
    state.carried -= taken
    return taken


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
        f"the extra payment of {to_words(extra.amount, digits)} on {extra.date} is more than was left to "
        f"pay: {to_words(used, digits)} was used",
    )
