"""Every figure of every row against the independent calculation, for loans of every kind.

`oracle` was written from the conventions alone and shares nothing with the engine. The hard corners of the
terms are drawn from as well, and counted: a corner that is not met is a test that proves nothing.
"""

from collections import Counter
from collections.abc import Callable, Iterable
from dataclasses import dataclass, field
from datetime import date
from pathlib import Path

import pytest
from hypothesis import given

import oracle
import strategies
from engine.against_oracle import EXTRA_HEADERS, HEADERS, RATE_HEADERS, in_words, shown
from engine.profile import examples
from engine.support import quiet
from strategies import REGIONS, loans
from tenorbook.basis.conventions import (
    ExtraEffect,
    FirstPeriod,
    Frequency,
    InterestRounding,
    LongFirst,
    PaymentBasis,
    Repayment,
    RowKind,
)
from tenorbook.basis.problem import TermsError
from tenorbook.schedule.build import build
from tenorbook.schedule.ledger import Schedule
from tenorbook.terms.loan import Loan
from tenorbook.terms.resolve import resolve

MOST_REFUSED = 0.12
"""Share of drawn loans that may be refused: those whose own payment, after events, never repays them."""
LEAST_MET = 0.4
"""Share of the loans of a corner that must lie in it; an extra can repay a loan before it gets there."""


def expected(loan: Loan) -> list[dict[str, object]]:
    """The rows by the independent calculation."""
    return oracle.schedule(
        in_words(loan, HEADERS),
        extra_payments=[in_words(extra, EXTRA_HEADERS) for extra in loan.extra_payments],
        rate_changes=[in_words(change, RATE_HEADERS) for change in loan.rate_changes],
    )


def first_difference(found: list[dict[str, object]], wanted: list[dict[str, object]]) -> str:
    """The first row that differs, with its differing columns; empty when all agree."""
    for mine, theirs in zip(found, wanted, strict=False):
        assert mine.keys() == theirs.keys()
        differing = [
            f"{name}: {mine[name]}, not {theirs[name]}" for name in theirs if mine[name] != theirs[name]
        ]
        if differing:
            return f"row {mine['row']} of {mine['date']}: {'; '.join(differing)}"
    return "" if len(found) == len(wanted) else f"{len(found)} rows, not {len(wanted)}"


@dataclass
class Sample:
    """What a run of examples met."""

    drawn: int = 0
    refused: int = 0
    met: Counter[str] = field(default_factory=Counter)


def compare(loan: Loan, sample: Sample, regions: Iterable[str]) -> None:
    """One loan through both calculations; counts the regions it lies in."""
    sample.drawn += 1
    terms, problems = resolve(loan)
    assert terms is not None, [str(problem) for problem in problems]
    refused: TermsError | None = None
    try:
        schedule = build(terms)
    except TermsError as refusal:
        refused = refusal
    if refused is not None:
        sample.refused += 1
        assert refused_rightly(loan, refused)
        return
    assert first_difference(shown(schedule), expected(loan)) == ""
    sample.met.update(name for name in regions if MET[name](schedule))


def refused_rightly(loan: Loan, refusal: TermsError) -> bool:
    """Whether a loan that was refused is not repaid in a hundred years, by itself or as events change it."""
    assert len(refusal.problems) == 1
    assert "does not repay the loan" in refusal.problems[0].problem
    return not (ends_in_time(loan) and ends_in_time(quiet(loan)))


def ends_in_time(loan: Loan) -> bool:
    """Whether the independent calculation has the loan repaid within a hundred years."""
    try:
        rows = expected(loan)
    except (ValueError, OverflowError):
        return False
    first, last = rows[0]["date"], rows[-1]["date"]
    assert isinstance(first, date)
    assert isinstance(last, date)
    return last.year - first.year < 99


def test_any_loan_agrees_row_by_row() -> None:
    sample = Sample()

    @examples(600)
    @given(loans())
    def agree(loan: Loan) -> None:
        compare(loan, sample, REGIONS)

    agree()
    assert sample.drawn >= 600
    assert sample.refused <= 0.02 * sample.drawn
    assert len(sample.met) >= 10, f"few corners are met by chance: {sorted(sample.met)}"


@pytest.mark.parametrize("region", REGIONS)
def test_hard_corner_agrees_row_by_row(region: str) -> None:
    sample = Sample()

    @examples(40)
    @given(REGIONS[region])
    def agree(loan: Loan) -> None:
        compare(loan, sample, [region])

    agree()
    assert sample.refused <= MOST_REFUSED * sample.drawn
    assert sample.met[region] >= LEAST_MET * (sample.drawn - sample.refused), f"{region}: {sample}"


def test_the_strategies_drop_nothing() -> None:
    source = Path(strategies.__file__).read_text(encoding="utf-8")
    assert ".filter(" not in source
    assert "assume(" not in source


# ---------------------------------------------------------------- what it is to lie in a corner


def _long_first(schedule: Schedule) -> bool:
    terms = schedule.terms
    single = terms.frequency is Frequency.AT_MATURITY
    return not single and not terms.in_advance and terms.funding < terms.due[0]


def _compound(schedule: Schedule) -> bool:
    return _long_first(schedule) and schedule.terms.long_first is LongFirst.COMPOUND


def _odd_paid_with_events(schedule: Schedule) -> bool:
    terms = schedule.terms
    eventful = bool(terms.extras and terms.repricings)
    return eventful and _long_first(schedule) and terms.first_period is FirstPeriod.PAY_AT_FUNDING


def _short_first(schedule: Schedule) -> bool:
    terms = schedule.terms
    single = terms.frequency is Frequency.AT_MATURITY
    return not single and not terms.in_advance and terms.funding > terms.due[0]


def _several_on_one_day(schedule: Schedule) -> bool:
    rates = {change.date for change in schedule.terms.repricings}
    return bool(rates & {extra.date for extra in schedule.terms.extras})


def _paid_ahead(schedule: Schedule) -> bool:
    return any(extra.effect is ExtraEffect.PAY_AHEAD for extra in schedule.terms.extras)


def _uncovered(schedule: Schedule) -> bool:
    pairs = zip(schedule.kind, schedule.principal, strict=True)
    added = any(kind is RowKind.PAYMENT and principal < 0 for kind, principal in pairs)
    return added or bool(schedule.carried)


def _equal_basis(schedule: Schedule) -> bool:
    terms = schedule.terms
    level = terms.repayment is Repayment.LEVEL_PAYMENT
    return level and terms.payment_basis is PaymentBasis.EQUAL_PERIODS


MET: dict[str, Callable[[Schedule], bool]] = {
    "compound long first period": _compound,
    "odd days capitalized": lambda schedule: RowKind.CAPITALIZE in schedule.kind,
    "odd days paid at funding, with events": _odd_paid_with_events,
    "short first period": _short_first,
    "in advance with a balloon": lambda schedule: RowKind.BALLOON in schedule.kind,
    "payment that decides the term": lambda schedule: schedule.terms.count is None,
    "interest only in advance": lambda schedule: (
        schedule.terms.in_advance and schedule.terms.repayment is Repayment.INTEREST_ONLY
    ),
    "month-ends": lambda schedule: schedule.terms.due.month_end,
    "twice a month": lambda schedule: schedule.terms.frequency is Frequency.TWICE_A_MONTH,
    "interest carried unrounded": lambda schedule: schedule.terms.interest_rounding is InterestRounding.NONE,
    "pay ahead": _paid_ahead,
    "several events on one day": _several_on_one_day,
    "payments that do not cover interest": _uncovered,
    "one payment at maturity": lambda schedule: schedule.terms.frequency is Frequency.AT_MATURITY,
    "payment on equal periods": _equal_basis,
}
"""For each corner, whether a schedule lies in it."""
