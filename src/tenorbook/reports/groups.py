"""Loans by currency and side: amounts of different currencies, or owed in different directions, are
never added up."""

from collections.abc import Iterable, Iterator
from dataclasses import dataclass

from tenorbook.basis.conventions import Side
from tenorbook.basis.money import currency_digits
from tenorbook.reports.result import LoanResult


@dataclass(frozen=True, slots=True)
class Group:
    """The loans whose amounts may be added up.

    Attributes:
        currency: ISO 4217 code.
        side: payable or receivable.
        apart: whether the currency has loans of both sides, so that the side must be said.
    """

    currency: str
    side: Side
    apart: bool

    @property
    def label(self) -> str:
        """`USD`, or `USD payable` where the currency has both sides."""
        return f"{self.currency} {self.side}" if self.apart else self.currency

    @property
    def key(self) -> str:
        """A name for tables: `USD_payable`."""
        return f"{self.currency}_{self.side}"


def computed(results: Iterable[LoanResult]) -> Iterator[LoanResult]:
    """The loans that have a schedule."""
    return (result for result in results if result.schedule is not None)


def groups(results: Iterable[LoanResult]) -> list[Group]:
    """The groups of the computed loans: the currency with the most loans first, payable before receivable."""
    counts: dict[str, int] = {}
    sides: set[tuple[str, Side]] = set()
    for each in computed(results):
        if each.terms is not None:
            counts[each.terms.currency] = counts.get(each.terms.currency, 0) + 1
            sides.add((each.terms.currency, each.terms.side))
    ranked = sorted(counts, key=lambda code: (-counts[code], code))
    found = [(code, side) for code in ranked for side in Side if (code, side) in sides]
    return [Group(code, side, {(code, other) for other in Side} <= sides) for code, side in found]


def members(results: Iterable[LoanResult], group: Group) -> Iterator[LoanResult]:
    """The computed loans of a group."""
    wanted = (group.currency, group.side)
    return (
        each for each in computed(results) if each.terms and (each.terms.currency, each.terms.side) == wanted
    )


def ledger_digits(results: Iterable[LoanResult], currency: str) -> int:
    """Digits of the finest ledger among the loans of a currency."""
    digits = [r.terms.digits for r in computed(results) if r.terms and r.terms.currency == currency]
    return max(digits, default=currency_digits(currency) or 0)


def rescaled(units: int, digits: int, wanted: int) -> int:
    """An amount in units of 10^-digits in the finer unit 10^-wanted."""
    scale: int = 10 ** (wanted - digits)
    return units * scale
