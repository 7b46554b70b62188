"""The problems of a book in one list: each said once, what must be done first on top."""

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import replace

from tenorbook.basis.problem import NOWHERE, Place, Problem, Severity
from tenorbook.terms.loan import Loan

_GRAVITY = {Severity.ERROR: 0, Severity.WARNING: 1, Severity.NOTE: 2}


def new_problems(loan: Loan, said: Sequence[Problem], found: Iterable[Problem]) -> tuple[Problem, ...]:
    """What was found about a loan and not said by the reader already.

    The limits of rates and terms are looked at twice, in the cell and among the terms as a whole: at
    those cells a second problem of the same weight is the same problem.
    """
    twice = {(p.place, p.severity) for p in said if p.place in _checked_twice(loan)}
    new = (_placed(p, loan) for p in found if (p.place, p.severity) not in twice)
    return tuple(dict.fromkeys(p for p in new if p not in said))


def _placed(problem: Problem, loan: Loan) -> Problem:
    """A problem of a cell that is blank stands at the loan's ID, so that every problem names a cell."""
    return problem if problem.cell else replace(problem, place=loan.place("Loan ID"))


def _checked_twice(loan: Loan) -> set[Place]:
    rates = (change.where.get("Annual rate", NOWHERE) for change in loan.rate_changes)
    return {loan.place("Annual rate"), loan.place("Term"), *rates} - {NOWHERE}


def by_loan(problems: Iterable[Problem]) -> Mapping[str, tuple[Problem, ...]]:
    """Loan ID -> its problems, in the order given; those of the book as a whole under no ID."""
    found: dict[str, list[Problem]] = {}
    for problem in problems:
        found.setdefault(problem.loan_id, []).append(problem)
    return {loan_id: tuple(its) for loan_id, its in found.items()}


def in_order(problems: Iterable[Problem], loans: Sequence[Loan]) -> tuple[Problem, ...]:
    """Errors, then warnings, then notes; within each, of the book as a whole, then loan by loan."""
    order = {"": -1, **{loan.loan_id: number for number, loan in enumerate(loans)}}
    each_once = dict.fromkeys(problems)
    return tuple(sorted(each_once, key=lambda p: (_GRAVITY[p.severity], order.get(p.loan_id, len(order)))))


def to_mark(problems: Iterable[Problem]) -> tuple[Problem, ...]:
    """The errors and warnings that name a cell: what a checked copy of the book shows."""
    return tuple(p for p in problems if p.cell and p.severity is not Severity.NOTE)
