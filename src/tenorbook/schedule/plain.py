"""Runs of periods in which nothing but the scheduled payment happens, taken in one step."""

import datetime as dt
from fractions import Fraction

from tenorbook.schedule.kernel import level_payment_run, level_principal_run
from tenorbook.schedule.state import State

_SHORTEST_RUN = 4  # periods below which a run is not worth preparing


def take_plain_run(state: State) -> bool:
    """Writes the rows of the plain periods ahead; False, and nothing written, if there are too few."""
    last = _last_plain(state)
    if last - state.at < _SHORTEST_RUN:
        return False
    numerators = state.steps.numerators[state.at : last]
    interest, closings = _run(state, numerators)
    count = _usable(state, interest, closings)
    if count < _SHORTEST_RUN:
        return False
    state.columns.add_run(
        state.steps.boundaries[state.at + 1 : state.at + 1 + count],
        state.rate,
        state.balance,
        interest[:count],
        closings[:count],
        [(numerator, state.steps.denominator) for numerator in numerators[:count]],
    )
    state.rate_before = state.rate
    state.balance = closings[count - 1]
    state.at += count
    state.paid += count
    return True


def _run(state: State, numerators: list[int]) -> tuple[list[int], list[int]]:
    """Interest and closing balances of the periods ahead."""
    annual = Fraction(state.rate)
    run = level_payment_run if state.pays_level() else level_principal_run
    return run(
        state.balance,
        state.instalment if state.amortizing(state.paid + 1) else 0,
        [numerator * annual.numerator for numerator in numerators],
        state.steps.denominator * annual.denominator,
        state.terms.interest_rounding,
    )


def _usable(state: State, interest: list[int], closings: list[int]) -> int:
    """How many periods of a run are plain after all: a balance is left, and the interest is covered."""
    count, floor = len(closings), _floor(state)
    if closings[-1] <= floor:
        count = next(number for number, closing in enumerate(closings) if closing <= floor)
    if state.pays_level() and state.carries_interest():
        uncovered = (number for number, due in enumerate(interest) if due > state.instalment)
        count = min(count, next(uncovered, count))
    return count


def _floor(state: State) -> int:
    """The balance at which a run ends: nothing, or the balloon of a loan whose payment decides its term."""
    return (state.terms.balloon or 0) if state.terms.count is None else 0


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
