"""Which rate and which scheduled amount are in force in which row, and the names of their cells."""

from bisect import bisect_right
from decimal import Decimal
from typing import NamedTuple

from tenorbook.basis.conventions import RowKind
from tenorbook.schedule.ledger import Schedule

AMOUNT_NAME = "level_payment"
RATE_NAME = "annual_rate"


class RateInForce(NamedTuple):
    """A rate, the first row it is shown in, and the name of its cell."""

    row: int
    rate: Decimal
    name: str


class AmountInForce(NamedTuple):
    """A scheduled amount, the first row it applies to, why it came into force, and its cell's name."""

    row: int
    amount: int
    why: str
    name: str


class Force:
    """What is in force when.

    Args:
        schedule: the schedule.
    """

    def __init__(self, schedule: Schedule) -> None:
        self.rates = _rates(schedule)
        self.amounts = _amounts(schedule)
        self._amount_rows = [amount.row for amount in self.amounts]

    def instalment(self, row: int) -> tuple[int, str] | None:
        """The scheduled amount in force in a row and the name of its cell; `None`: none is."""
        number = bisect_right(self._amount_rows, row)
        if not number:
            return None
        found = self.amounts[number - 1]
        return found.amount, found.name


def _numbered(name: str, number: int) -> str:
    return name if number == 1 else f"{name}_{number}"


def _rates(schedule: Schedule) -> list[RateInForce]:
    """The first rate, and one for each rate change that the loan came to."""
    rates = [RateInForce(0, schedule.terms.rate, RATE_NAME)]
    changes = [row for row, kind in enumerate(schedule.kind) if kind is RowKind.RATE]
    for number, (row, change) in enumerate(zip(changes, schedule.terms.repricings, strict=False), 2):
        rates.append(RateInForce(row + 1, change.rate, _numbered(RATE_NAME, number)))
    return rates


def _amounts(schedule: Schedule) -> list[AmountInForce]:
    """The scheduled amounts; of several for one row the last counts, and those never used are left out."""
    by_row = {each.row: each for each in schedule.instalments if each.row <= schedule.last_row}
    return [
        AmountInForce(each.row, each.amount, each.why, _numbered(AMOUNT_NAME, number))
        for number, each in enumerate(by_row.values(), 1)
    ]
