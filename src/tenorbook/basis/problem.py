"""What can be wrong, as data: a `Problem` names where, what stood there, why it cannot be, what would do.

The exceptions of the package::

    TenorbookError          base; carries the problems
    +-- BookError           the call or the file as a whole is unusable: nothing is written
    +-- TermsError          one loan cannot be computed as entered
    +-- InvariantError      a fault of the program itself: a schedule broke one of its own laws
"""

from collections.abc import Iterable
from dataclasses import dataclass, field
from enum import StrEnum


class Severity(StrEnum):
    """How much a problem weighs."""

    ERROR = "error"
    """The loan (or the file) is set aside."""
    WARNING = "warning"
    """Computed, but someone should look."""
    NOTE = "note"
    """How an entry was understood; nothing to do."""


@dataclass(frozen=True, slots=True)
class Place:
    """Where a value stood: sheet name, cell address such as `F7`, and the text that stood there."""

    sheet: str = ""
    cell: str = ""
    value: str = ""


NOWHERE = Place()
"""The place of a value that came from no workbook, such as terms given in Python."""


@dataclass(frozen=True, slots=True)
class Problem:
    """One thing to report, in the columns of `exceptions.csv`.

    Attributes:
        severity: error, warning or note.
        loan_id: the loan it concerns; empty for the book as a whole.
        place: sheet, cell and what stood there.
        problem: why it cannot be, or what is doubtful; a sentence without a full stop.
        remedy: what would do; empty for most notes.
        also: further cells the sentence speaks of, so that all of them can be marked.
    """

    severity: Severity
    loan_id: str
    place: Place
    problem: str
    remedy: str = ""
    also: tuple[Place, ...] = field(default=())

    @property
    def sheet(self) -> str:
        """Name of the sheet; empty when the problem has no cell."""
        return self.place.sheet

    @property
    def cell(self) -> str:
        """Address of the cell, such as `F7`; empty when the problem has no cell."""
        return self.place.cell

    @property
    def value(self) -> str:
        """What stood in the cell, as text."""
        return self.place.value

    def __str__(self) -> str:
        where = "!".join(part for part in (self.sheet, self.cell) if part)
        shown = f" [{self.value}]" if self.value else ""
        loan = f"loan {self.loan_id}: " if self.loan_id else ""
        head = f"{where}{shown}: " if where else ""
        remedy = f"; {self.remedy}" if self.remedy else ""
        return f"{self.severity}: {head}{loan}{self.problem}{remedy}"


class TenorbookError(Exception):
    """Base of the package's exceptions.

    Attributes:
        problems: every problem found, at least one; each has sheet, cell and remedy.
    """

    def __init__(self, problems: Problem | Iterable[Problem]) -> None:
        self.problems = (problems,) if isinstance(problems, Problem) else tuple(problems)
        super().__init__("\n".join(str(problem) for problem in self.problems))

    @property
    def sheet(self) -> str:
        """Sheet of the first problem."""
        return self.problems[0].sheet

    @property
    def cell(self) -> str:
        """Cell of the first problem."""
        return self.problems[0].cell

    @property
    def remedy(self) -> str:
        """Remedy of the first problem."""
        return self.problems[0].remedy


class BookError(TenorbookError):
    """The call or the file as a whole is unusable; nothing was written."""


class TermsError(TenorbookError):
    """One loan cannot be computed as entered."""


class InvariantError(TenorbookError):
    """A schedule broke one of its own laws: a fault of the program, never of the user."""


def error(loan_id: str, place: Place, problem: str, remedy: str, *also: Place) -> Problem:
    """An error: the loan (or, with no loan ID, the file) is set aside."""
    return Problem(Severity.ERROR, loan_id, place, problem, remedy, also)


def warning(loan_id: str, place: Place, problem: str, remedy: str = "", *also: Place) -> Problem:
    """A warning: the loan is computed, but someone should look."""
    return Problem(Severity.WARNING, loan_id, place, problem, remedy, also)


def note(loan_id: str, place: Place, problem: str, remedy: str = "", *also: Place) -> Problem:
    """A note: how an entry was understood."""
    return Problem(Severity.NOTE, loan_id, place, problem, remedy, also)
