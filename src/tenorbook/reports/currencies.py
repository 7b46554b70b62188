"""Loans by currency: amounts of different currencies are never added up."""

from collections.abc import Iterable, Iterator

from tenorbook.basis.money import currency_digits
from tenorbook.reports.result import LoanResult


def computed(results: Iterable[LoanResult]) -> Iterator[LoanResult]:
    """The loans that have a schedule."""
    return (result for result in results if result.schedule is not None)


def currencies(results: Iterable[LoanResult]) -> list[str]:
    """The currencies of the computed loans, the one with the most loans first."""
    counts: dict[str, int] = {}
    for result in computed(results):
        if result.terms is not None:
            counts[result.terms.currency] = counts.get(result.terms.currency, 0) + 1
    return sorted(counts, key=lambda code: (-counts[code], code))


def ledger_digits(results: Iterable[LoanResult], currency: str) -> int:
    """Digits of the finest ledger among the loans of a currency."""
    digits = [r.terms.digits for r in computed(results) if r.terms and r.terms.currency == currency]
    return max(digits, default=currency_digits(currency) or 0)


def rescaled(units: int, digits: int, wanted: int) -> int:
    """An amount in units of 10^-digits in the finer unit 10^-wanted."""
    scale: int = 10 ** (wanted - digits)
    return units * scale
