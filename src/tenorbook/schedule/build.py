"""The one door: resolved terms in, a checked schedule out."""

from dataclasses import replace

from tenorbook.basis.conventions import DayCount
from tenorbook.schedule.exceptions import exceptions_of
from tenorbook.schedule.invariants import assert_invariants
from tenorbook.schedule.ledger import Schedule
from tenorbook.schedule.sizing import Plan
from tenorbook.schedule.state import State
from tenorbook.schedule.steps import make_steps
from tenorbook.schedule.walk import walk
from tenorbook.terms.terms import Terms


def build(terms: Terms) -> Schedule:
    """The contract schedule of a loan.

    Every invariant of the ledger is asserted before it is returned. The result depends on the terms
    alone: the same terms give the same schedule, always.

    Args:
        terms: from `terms.resolve.resolve`.

    Returns:
        The schedule, with the warnings and notes that arose.

    Raises:
        TermsError: a fixed payment never repays the loan.
        InvariantError: a fault of the program itself.
    """
    state = _walk_planned(terms)
    schedule = state.columns.schedule(terms)
    assert_invariants(schedule)
    found = tuple(exceptions_of(schedule))
    return replace(schedule, problems=(*schedule.problems, *found)) if found else schedule


def _walk_planned(terms: Terms) -> State:
    """The loan walked with what its payments come to if nothing happens."""
    if terms.payment is None:
        return walk(make_steps(terms), Plan(terms.count, terms.balloon or 0))
    undisturbed = _undisturbed(terms)
    implied = 0 if terms.balloon else _implied_balloon(undisturbed)
    if not (implied or terms.extras or terms.repricings or terms.each_payment):
        return undisturbed
    plan = Plan(terms.count or undisturbed.paid, terms.balloon or implied)
    maturity = None if terms.count else undisturbed.columns.date[-1]
    return walk(make_steps(terms, maturity), plan)


def _undisturbed(terms: Terms) -> State:
    """The contract of a note that fixes its payment, without extra payments and rate changes."""
    quiet = replace(terms, extras=(), repricings=(), each_payment=0)
    plan = Plan(terms.count, terms.balloon or 0)
    state = walk(make_steps(quiet), plan)
    if terms.count is None and terms.day_count is DayCount.THIRTY_E_360_ISDA:
        # Only this convention asks for the maturity date, which the payment decides here.
        state = walk(make_steps(quiet, maturity=state.columns.date[-1]), plan)
    return state


def _implied_balloon(undisturbed: State) -> int:
    """What the note's payments leave, if it is more than one payment; less is taken by the last one."""
    left = undisturbed.left_at_end
    return left if left > undisturbed.instalment and not undisturbed.terms.amortized_over else 0
