"""The laws every schedule keeps, asserted on each run and not only in tests."""

from collections.abc import Iterator
from operator import add, le, lt, sub

from tenorbook.basis.problem import NOWHERE, InvariantError, error
from tenorbook.schedule.ledger import Schedule


def assert_invariants(schedule: Schedule) -> None:
    """Checks a schedule against its own laws.

    Raises:
        InvariantError: one of them is broken; the figures must not be used.
    """
    broken = list(_broken(schedule))
    if broken:
        raise InvariantError(
            error(
                schedule.terms.loan_id,
                NOWHERE,
                f"the schedule breaks its own laws ({'; '.join(broken)})",
                "please report this with the loan's terms: it is a fault of the program",
            )
        )


def _broken(schedule: Schedule) -> Iterator[str]:
    """The laws that do not hold, in words."""
    repaid = list(schedule.principal)
    if any(schedule.extra):
        repaid = list(map(add, repaid, schedule.extra))
    if _rolled(schedule, repaid) != schedule.closing:
        yield "a balance does not roll forward"
    if schedule.opening[0] != 0 or schedule.opening[1:] != schedule.closing[:-1]:
        yield "a row does not open where the row before closed"
    if sum(repaid) != sum(schedule.draw):
        yield "principal repaid is not principal advanced"
    if schedule.closing[-1] != 0:
        yield "the last balance is not zero"
    paid = list(map(add, schedule.interest, repaid))
    if any(schedule.charges):
        paid = list(map(add, paid, schedule.charges))
    if paid != schedule.payment:
        yield "a payment is not the sum of its parts"
    if not all(map(lt, schedule.date, schedule.date[1:])):
        yield from _broken_order(schedule)


def _rolled(schedule: Schedule, repaid: list[int]) -> list[int]:
    """opening + draw - principal - extra, row by row; most loans are drawn once, at funding."""
    rolled = list(map(sub, schedule.opening, repaid))
    if any(schedule.draw[1:]):
        return list(map(add, rolled, schedule.draw))
    return [rolled[0] + schedule.draw[0], *rolled[1:]]


def _broken_order(schedule: Schedule) -> Iterator[str]:
    """The laws of order, for a schedule with several rows on one date."""
    if not all(map(le, schedule.date, schedule.date[1:])):
        yield "the rows are not in order of date"
    if len(set(zip(schedule.kind, schedule.date, strict=True))) < len(schedule):
        yield "two rows of one kind fall on one date"
