"""One loan from the note as entered to its result."""

import logging
from datetime import date

from tenorbook.basis.problem import NOWHERE, InvariantError, Problem, Severity, TermsError, error
from tenorbook.owed.position import position
from tenorbook.reports.result import LoanResult
from tenorbook.schedule.build import build
from tenorbook.terms.book import Settings
from tenorbook.terms.loan import Loan
from tenorbook.terms.resolve import resolve
from tenorbook.yields.effective import effective_annual_rate

_LOG = logging.getLogger(__name__)

_FEEDS_OTHERS = frozenset(
    {
        "Funding date",
        "First payment",
        "Term",
        "Maturity",
        "Frequency",
        "Timing",
        "Repayment",
        "Payment",
        "Month-end",
        "Currency",
    }
)
"""Terms that others are judged by: while one cannot be read, what is said of the others may be wrong."""


def compute_loan(loan: Loan, settings: Settings, as_of: date) -> tuple[LoanResult, bool]:
    """The result of one loan, and whether the program itself failed on it.

    A loan that cannot be computed comes back without a schedule and with the errors that say why; so
    does one on which the program fails, that no fault of ours hides the other loans.

    Args:
        loan: as read, without an error so far.
        settings: of the book.
        as_of: the date of its position.
    """
    try:
        return _computed(loan, settings, as_of), False
    except TermsError as refused:
        return LoanResult(loan=loan, problems=_with(resolve(loan, settings)[1], refused.problems)), False
    except InvariantError as broken:
        _LOG.debug("loan %s", loan.loan_id, exc_info=True)
        return LoanResult(loan=loan, problems=broken.problems), True
    except Exception as fault:
        _LOG.debug("loan %s", loan.loan_id, exc_info=True)
        return LoanResult(loan=loan, problems=(_fault(loan, fault),)), True


def _computed(loan: Loan, settings: Settings, as_of: date) -> LoanResult:
    """Terms, schedule, position and rate, in that order."""
    terms, problems = resolve(loan, settings)
    if terms is None:
        return LoanResult(loan=loan, problems=problems)
    schedule = build(terms)
    return LoanResult(
        loan=loan,
        terms=terms,
        schedule=schedule,
        position=position(schedule, as_of, settings.period_end_counted),
        effective_annual_rate=effective_annual_rate(terms),
        problems=_with(problems, schedule.problems),
    )


def _with(first: tuple[Problem, ...], then: tuple[Problem, ...]) -> tuple[Problem, ...]:
    """Both, each problem once."""
    return tuple(dict.fromkeys((*first, *then)))


def _fault(loan: Loan, fault: Exception) -> Problem:
    return error(
        loan.loan_id,
        loan.place("Loan ID") if loan.where else NOWHERE,
        f"the program failed on this loan ({type(fault).__name__}: {fault})",
        "please report this with the loan's terms: it is a fault of the program",
    )


def further_problems(loan: Loan, said: tuple[Problem, ...], settings: Settings) -> tuple[Problem, ...]:
    """What else is wrong with a loan that was set aside while it was read, so that one pass shows it all.

    Nothing is said of a cell that has its error already, and nothing at all while a term that others
    are judged by could not be read.

    Args:
        loan: filled as far as it could be read.
        said: the reader's problems of this loan.
        settings: of the book.
    """
    faulty = {(p.sheet, p.cell) for p in said if p.severity is Severity.ERROR}
    unread = {header for header, place in loan.where.items() if (place.sheet, place.cell) in faulty}
    if unread & {*_FEEDS_OTHERS, "Loan ID"} or not loan.where:
        return ()
    try:
        problems = resolve(loan, settings)[1]
    except Exception:
        _LOG.debug("loan %s", loan.loan_id, exc_info=True)
        return ()
    return tuple(problem for problem in problems if (problem.sheet, problem.cell) not in faulty)
