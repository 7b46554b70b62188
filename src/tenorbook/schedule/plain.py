"""Runs of periods in which nothing but the scheduled payment happens, taken in one step."""

import datetime as dt
from typing import NamedTuple

from tenorbook.schedule.kernel import Run, level_payment_run, level_principal_run, with_last_payment
from tenorbook.schedule.state import State

_SHORTEST_RUN = 4  # periods below which a run is not worth preparing


def take_plain_run(state: State) -> bool:
    """Writes the rows of the plain periods ahead; False, and nothing written, if there are too few."""
    last = _last_plain(state)
    if last - state.at < _SHORTEST_RUN:
        return False
    first = state.at
    factors = _factors(state, last)
    run = _run(state, factors.growths[: last - first], factors.denominator)
    count = _usable(state, run)
    if count < _SHORTEST_RUN:
        return False
    run = run.first(count) if count < last - first else run
    if first + count == last and _last_payment_is_plain(state, last):
        rounding = state.terms.interest_rounding
        run = with_last_payment(run, factors.growths[-1], factors.denominator, rounding)
        count, state.over = count + 1, True
    state.columns.add_run(
        run,
        state.steps.boundaries[first + 1 : first + 1 + count],
        state.steps.days[first : first + count],
        state.rate,
        state.steps.numerators[first : first + count],
        state.steps.denominator,
    )
    state.rate_before = state.rate
    state.balance = run.closing[-1]
    state.at += count
    state.paid += count
    return True


class _Factors(NamedTuple):
    """1 + factor of each period ahead, over one denominator; one period more than the run."""

    growths: list[int]
    denominator: int


def _factors(state: State, last: int) -> _Factors:
    rate_numerator, rate_denominator = state.rate.as_integer_ratio()
    denominator = state.steps.denominator * rate_denominator
    numerators = state.steps.numerators[state.at : last + 1]
    return _Factors([number * rate_numerator + denominator for number in numerators], denominator)


def _run(state: State, growths: list[int], denominator: int) -> Run:
    """The periods ahead, as if every one of them were plain."""
    run = level_payment_run if state.pays_level() else level_principal_run
    amount = state.instalment if state.amortizing(state.paid + 1) else 0
    return run(state.balance, amount, growths, denominator, state.terms.interest_rounding)


def _last_payment_is_plain(state: State, last: int) -> bool:
    """Whether the period after a run brings the contract's last payment and nothing else.

    Where the note fixes the payment, what it leaves at the end is of interest, and the last payment is
    taken apart.
    """
    terms, final = state.terms, last + 1
    if terms.in_advance or terms.payment is not None or final != state.plan.count:
        return False
    event = state.next_event()
    return event is None or event > state.steps.boundaries[final]


def _usable(state: State, run: Run) -> int:
    """How many periods of a run are plain after all: a balance is left, and the interest is covered."""
    count, floor = len(run.closing), _floor(state)
    if run.closing[-1] <= floor:
        count = next(number for number, closing in enumerate(run.closing) if closing <= floor)
    if state.pays_level() and state.carries_interest():
        uncovered = (number for number, due in enumerate(run.interest) if due > state.instalment)
        count = min(count, next(uncovered, count))
    return count


def _floor(state: State) -> int:
    """The balance at which a run ends: nothing, or the balloon where the loan may come down to it early."""
    early = state.terms.count is None or state.reduced
    return (state.terms.balloon or 0) if early else 0


def _last_plain(state: State) -> int:
    """The last boundary up to which every period is plain; the present one if there is none."""
    if _special(state):
        return state.at
    terms = state.terms
    last = min(state.steps.last, state.plan.count or state.steps.last) - 1
    if state.paid < terms.interest_only:
        last = min(last, state.at + terms.interest_only - state.paid)
    elif terms.in_advance:
        last -= 1
    day = state.next_event()
    return last if day is None else _last_before(state, last, day)


def _special(state: State) -> bool:
    """Whether the present state or the terms ask for each period to be taken apart."""
    terms = state.terms
    odd_first = state.at == 0 and bool(state.steps.first)
    unsettled = state.ahead or state.carried or state.accrual.open or state.pending is not None
    by_hand = terms.one_payment or state.prepays(state.paid + 1) or terms.each_payment
    return bool(odd_first or unsettled or by_hand or state.balloon_next)


def _last_before(state: State, last: int, day: dt.date) -> int:
    """The last boundary before a day, searched back from `last`."""
    boundaries, per_year = state.steps.boundaries, state.terms.frequency.per_year
    while last > state.at and boundaries[last] >= day:
        beyond = (boundaries[last] - day).days
        last -= max(1, beyond * per_year // 366 - 1)
    return max(last, state.at)
