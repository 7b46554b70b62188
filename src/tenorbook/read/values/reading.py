"""What a parser is given and what it gives back."""

from collections.abc import Callable
from dataclasses import dataclass
from decimal import Decimal
from typing import Generic, TypeAlias, TypeVar

from tenorbook.basis.problem import Severity
from tenorbook.read.files.grid import Cell, Kind
from tenorbook.terms.book import DayOrder, DecimalMark

T_co = TypeVar("T_co", covariant=True)


@dataclass(frozen=True, slots=True)
class Rules:
    """How the texts of a book are to be read.

    Attributes:
        day_order: of text dates; `None`: the book does not say.
        decimal_mark: of numbers typed as text.
        time: the unit that the column's header gives to plain lengths; empty: payments.
    """

    day_order: DayOrder | None = None
    decimal_mark: DecimalMark = DecimalMark.POINT
    time: str = ""


@dataclass(frozen=True, slots=True)
class Remark:
    """Something to say about a value that was read.

    Attributes:
        problem: a predicate that follows the header's name: `is read as ...`.
        once: said once for the book, not for every loan.
    """

    severity: Severity
    problem: str
    remedy: str = ""
    once: bool = False


@dataclass(frozen=True, slots=True)
class Reading(Generic[T_co]):
    """A value and what should be said about how it was read.

    Attributes:
        signs: currency codes that the cell's own sign or code allows; empty: it has none.
    """

    value: T_co
    remarks: tuple[Remark, ...] = ()
    signs: frozenset[str] = frozenset()


class Unreadable(Exception):  # noqa: N818 - it is a finding, handled by the reader, never shown as a fault
    """A cell that cannot be what its column asks for.

    Args:
        problem: a predicate that follows the header's name: `is not a date`.
        remedy: what would do.
    """

    def __init__(self, problem: str, remedy: str) -> None:
        super().__init__(problem)
        self.problem = problem
        self.remedy = remedy


Parser: TypeAlias = Callable[[Cell, Rules], Reading[object]]


def warn(problem: str, remedy: str = "") -> Remark:
    """A remark that someone should look at."""
    return Remark(Severity.WARNING, problem, remedy)


def refuse_valueless(cell: Cell) -> None:
    """Raise for an error value and for a formula whose value the file does not hold."""
    if cell.kind is Kind.ERROR:
        raise Unreadable("is an error value", "repair the formula, or type the value itself")
    if cell.kind is Kind.NO_VALUE:
        raise Unreadable(
            "is a formula without a stored value",
            "open the book in a spreadsheet program, let it calculate, save it, or type the value itself",
        )


def number_of(cell: Cell) -> Decimal | None:
    """The value of a number cell (as percent or not); `None` for any other kind."""
    numeric = cell.kind in (Kind.NUMBER, Kind.PERCENT)
    return cell.value if numeric and isinstance(cell.value, Decimal) else None
