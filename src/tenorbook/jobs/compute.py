"""A book as read to its results: every loan computed, or set aside with the reasons."""

from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace
from datetime import date

from tenorbook.basis.problem import BookError, Place, Problem, error
from tenorbook.jobs.loan import compute_loan, further_problems
from tenorbook.jobs.problems import by_loan, in_order, new_problems
from tenorbook.reports.result import BookResult, LoanResult
from tenorbook.terms.book import Book
from tenorbook.terms.loan import Loan

MOST_NAMED = 20
"""Loan IDs named in a message."""

Progress = Callable[[str, int, int], None]
"""Told what is being done, how much of it is done, and how much there is."""


@dataclass(frozen=True, slots=True)
class Computed:
    """The results of a book.

    Attributes:
        result: of every loan.
        failed: IDs of the loans on which the program itself failed.
    """

    result: BookResult
    failed: tuple[str, ...] = ()


def silent(_what: str, _done: int, _of: int) -> None:
    """Progress that nobody watches."""


def compute(book: Book, as_of: date, loan_ids: Sequence[str] = (), progress: Progress = silent) -> Computed:
    """Every loan of a book, in the order of its sheet.

    Args:
        book: as read.
        as_of: the date of the summary's figures.
        loan_ids: only these loans; all of them when empty.
        progress: told after each loan.

    Raises:
        BookError: a Loan ID that is not in the book.
    """
    loans = _chosen(book, loan_ids)
    said = by_loan(book.problems)
    aside = {id(loan) for loan in book.set_aside}
    results: list[LoanResult] = []
    failed: list[str] = []
    for done, loan in enumerate(loans, 1):
        its = said.get(loan.loan_id, ())
        if id(loan) in aside:
            further = further_problems(loan, its, book.settings)
            results.append(LoanResult(loan=loan, problems=(*its, *new_problems(loan, its, further))))
        else:
            result, fault = compute_loan(loan, book.settings, as_of)
            results.append(_with_said(result, its))
            failed += [loan.loan_id] * fault
        progress("computing", done, len(loans))
    return Computed(_book_result(book, as_of, loans, results), tuple(failed))


def _with_said(result: LoanResult, said: Sequence[Problem]) -> LoanResult:
    """A result with what the reader had to say about the loan in front."""
    new = new_problems(result.loan, said, result.problems)
    return replace(result, problems=(*said, *new))


def _book_result(book: Book, as_of: date, loans: Sequence[Loan], results: Sequence[LoanResult]) -> BookResult:
    """The whole, with the problems of the chosen loans and those that belong to no loan of the book."""
    left_out = {loan.loan_id for loan in (*book.loans, *book.set_aside)} - {loan.loan_id for loan in loans}
    own = [problem for problem in book.problems if problem.loan_id not in left_out]
    found = [problem for result in results for problem in result.problems]
    problems = in_order((*own, *found), loans)
    return BookResult(book=book, as_of=as_of, results=results, problems=problems, versions=_versions())


def _chosen(book: Book, loan_ids: Sequence[str]) -> list[Loan]:
    """The loans asked for, in the order of the sheet."""
    loans = sorted((*book.loans, *book.set_aside), key=_row)
    known = {loan.loan_id for loan in loans}
    unknown = [loan_id for loan_id in dict.fromkeys(loan_ids) if loan_id not in known]
    if unknown:
        raise BookError(
            [_unknown_loan(book, loan_id, [loan.loan_id for loan in loans]) for loan_id in unknown]
        )
    return [loan for loan in loans if not loan_ids or loan.loan_id in loan_ids]


def _row(loan: Loan) -> int:
    """The row a loan stands in; 0 for one that came from no sheet."""
    cells = (place.cell for place in loan.where.values())
    return next((int("".join(filter(str.isdigit, cell))) for cell in cells if cell), 0)


def _unknown_loan(book: Book, loan_id: str, known: Sequence[str]) -> Problem:
    more = len(known) - MOST_NAMED
    named = ", ".join(known[:MOST_NAMED]) + (f" and {more} more" if more > 0 else "")
    return error("", Place(value=book.name), f"{book.name} has no loan {loan_id}", f"its loans are {named}")


def _versions() -> tuple[str, ...]:
    """The program, and the table of currencies that its amounts rest on."""
    from importlib.metadata import version

    from tenorbook import __version__

    return (f"tenorbook {__version__}", f"iso4217 {version('iso4217')}")
