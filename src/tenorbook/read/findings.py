"""The problems found while a book is read, in one place, and the order they are shown in."""

from collections.abc import Iterable, Sequence

from tenorbook.basis.problem import Place, Problem, Severity
from tenorbook.read.files.grid import Cell
from tenorbook.read.headers import Table
from tenorbook.read.values.reading import Remark, Unreadable


class Findings:
    """Collects problems; knows which loans have an error, and what was said already."""

    def __init__(self, problems: Iterable[Problem] = ()) -> None:
        self._problems = list(problems)
        self._said: set[tuple[str, str]] = set()

    def add(self, *problems: Problem) -> None:
        """Take problems in."""
        self._problems += problems

    def remark(self, table: Table, header: str, cell: Cell, loan_id: str, remark: Remark) -> None:
        """What a parser had to say about a value."""
        text = f"{named(header)} {remark.problem}"
        if remark.once:
            if (table.kind, text) in self._said:
                return
            self._said.add((table.kind, text))
            loan_id = ""
        self.add(Problem(remark.severity, loan_id, table.place(cell), text, remark.remedy))

    def unreadable(self, table: Table, header: str, cell: Cell, loan_id: str, fault: Unreadable) -> None:
        """A cell that cannot be read: an error of its loan."""
        text = f"{named(header)} {fault.problem}"
        self.add(Problem(Severity.ERROR, loan_id, table.place(cell), text, fault.remedy))

    def faulty(self) -> frozenset[str]:
        """IDs of the loans that have an error."""
        return frozenset(p.loan_id for p in self._problems if p.severity is Severity.ERROR)

    def ordered(self, sheets: Sequence[str]) -> tuple[Problem, ...]:
        """All problems: of the file first, then by sheet, row and column."""
        order = {name: number for number, name in enumerate(sheets)}
        return tuple(sorted(self._problems, key=lambda p: (order.get(p.sheet, -1), *_position(p.place))))


def named(header: str) -> str:
    """A header inside a sentence: `Annual rate` is `annual rate`."""
    return header[:1].lower() + header[1:]


def _position(place: Place) -> tuple[int, int, str]:
    """Row, then column, of an address; both 0 where there is none."""
    letters = place.cell.rstrip("0123456789")
    digits = place.cell[len(letters) :]
    return int(digits or 0), len(letters), letters
