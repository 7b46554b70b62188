"""The one door: resolved terms in, a checked schedule out."""

from dataclasses import replace

from tenorbook.basis.conventions import DayCount
from tenorbook.schedule.exceptions import exceptions_of
from tenorbook.schedule.invariants import assert_invariants
from tenorbook.schedule.ledger import Schedule
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
    schedule = walk(make_steps(terms))
    if terms.count is None and terms.day_count is DayCount.THIRTY_E_360_ISDA:
        # Only this convention asks for the maturity date, which the payment decides here.
        schedule = walk(make_steps(terms, maturity=schedule.date[-1]))
    assert_invariants(schedule)
    return replace(schedule, problems=(*schedule.problems, *exceptions_of(schedule)))
