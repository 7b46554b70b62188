"""Collects what is wrong or doubtful about one loan, each finding with the cells it speaks of."""

from tenorbook.basis.problem import NOWHERE, Place, Problem, Severity, error, note, warning
from tenorbook.terms.loan import Loan


class Findings:
    """The problems of one loan, in the order they were found.

    Headers are those of the sheet `Loans`; a header with no cell behind it names no cell.
    """

    def __init__(self, loan: Loan) -> None:
        self.loan = loan
        self.problems: list[Problem] = []

    @property
    def failed(self) -> bool:
        """Whether an error was found."""
        return any(problem.severity is Severity.ERROR for problem in self.problems)

    def error(self, header: str, problem: str, remedy: str, *also: str) -> None:
        """An error at the cell of a header, and the further headers it speaks of."""
        self.error_at(self.loan.place(header), problem, remedy, *self._places(also))

    def warning(self, header: str, problem: str, remedy: str = "", *also: str) -> None:
        """A warning at the cell of a header."""
        self.warning_at(self.loan.place(header), problem, remedy, *self._places(also))

    def note(self, header: str, problem: str) -> None:
        """How an entry was understood."""
        self.problems.append(note(self.loan.loan_id, self.loan.place(header), problem))

    def error_at(self, place: Place, problem: str, remedy: str, *also: Place) -> None:
        """An error at a cell."""
        self.problems.append(error(self.loan.loan_id, place, problem, remedy, *also))

    def warning_at(self, place: Place, problem: str, remedy: str = "", *also: Place) -> None:
        """A warning at a cell."""
        self.problems.append(warning(self.loan.loan_id, place, problem, remedy, *also))

    def cell(self, header: str) -> str:
        """` (Loans!F7)` for a sentence, or nothing when the header has no cell."""
        place = self.loan.place(header)
        return f" ({place.sheet}!{place.cell})" if place.cell else ""

    def _places(self, headers: tuple[str, ...]) -> tuple[Place, ...]:
        found = (self.loan.place(header) for header in headers)
        return tuple(place for place in found if place != NOWHERE)
