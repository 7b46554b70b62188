"""What the reports are made from: the results of one loan, and of a whole book."""

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import date
from decimal import Decimal
from typing import Literal

from tenorbook.basis.problem import Problem, Severity
from tenorbook.owed.position import Position
from tenorbook.schedule.ledger import Schedule
from tenorbook.terms.book import Book
from tenorbook.terms.loan import Loan
from tenorbook.terms.terms import Terms

Status = Literal["ok", "warning", "error"]


@dataclass(frozen=True, slots=True, kw_only=True)
class LoanResult:
    """Everything computed for one loan; a loan with an error has no terms, schedule or position.

    Attributes:
        loan: as entered.
        terms: as resolved.
        schedule: the contract schedule.
        position: what is owed on the book's as-of date.
        effective_annual_rate: as a fraction.
        problems: what concerns this loan, from reading to schedule.
    """

    loan: Loan
    terms: Terms | None = None
    schedule: Schedule | None = None
    position: Position | None = None
    effective_annual_rate: Decimal | None = None
    problems: tuple[Problem, ...] = ()

    @property
    def status(self) -> Status:
        """`error` if the loan was set aside, `warning` if someone should look, else `ok`."""
        severities = {problem.severity for problem in self.problems}
        if self.schedule is None or Severity.ERROR in severities:
            return "error"
        return "warning" if Severity.WARNING in severities else "ok"


@dataclass(frozen=True, slots=True, kw_only=True)
class BookResult:
    """The results of a book.

    Attributes:
        book: as read.
        as_of: the date of the summary's figures.
        results: in the order of the book's sheet, loans that were set aside included.
        problems: every problem of the book and of its loans, in the order of `exceptions.csv`.
        versions: of the program and of the data it rests on, for the foot of the outputs.
    """

    book: Book
    as_of: date
    results: Sequence[LoanResult]
    problems: tuple[Problem, ...] = ()
    versions: tuple[str, ...] = ()
