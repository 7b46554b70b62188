"""The laws every schedule keeps, asserted on each run and not only in tests."""

from collections.abc import Iterator
from operator import le

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
    moved = [
        opening + draw - principal - extra
        for opening, draw, principal, extra in zip(
            schedule.opening, schedule.draw, schedule.principal, schedule.extra, strict=True
        )
    ]
    if moved != list(schedule.closing):
        yield "a balance does not roll forward"
    if schedule.opening[0] != 0 or list(schedule.opening[1:]) != list(schedule.closing[:-1]):
        yield "a row does not open where the row before closed"
    if sum(schedule.principal) + sum(schedule.extra) != sum(schedule.draw):
        yield "principal repaid is not principal advanced"
    if schedule.closing[-1] != 0:
        yield "the last balance is not zero"
    parts = (schedule.interest, schedule.principal, schedule.extra, schedule.charges)
    if list(map(sum, zip(*parts, strict=True))) != list(schedule.payment):
        yield "a payment is not the sum of its parts"
    if not all(map(le, schedule.date, schedule.date[1:])):
        yield "the rows are not in order of date"
    if len(set(zip(schedule.kind, schedule.date, strict=True))) < len(schedule):
        yield "two rows of one kind fall on one date"
