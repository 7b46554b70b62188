"""Accrual periods: how much of a year each one counts, and how much of it has run on any day inside.

A due period is one stretch, except that the first period of a loan whose note treats odd days apart is two:
the odd days, and one regular period. A stretch is counted as a whole; what happens inside it is counted from
the stretch's start, so that its parts add up to the whole.
"""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date
from fractions import Fraction
from functools import cached_property

from .daycounts import Context, by_dates
from .terms import Terms


@dataclass(frozen=True)
class Stretch:
    """One counted stretch, start counted, end not.

    whole: its fraction of a year; odd_item: its interest is the odd-day item, posted and rounded by itself;
    given_back: it is the days before funding that a short first period lacks, and its interest is taken off;
    compounding: the regular periods that compound in it (none: simple interest on the whole); odd: the days
    before them, which stay simple; through: the regular period after the stretch through which its interest
    compounds too, that period's own interest being left out.
    """

    start: date
    end: date
    whole: Fraction
    odd_item: bool = False
    given_back: bool = False
    compounding: tuple[Fraction, ...] = ()
    odd: Fraction = Fraction(0)
    through: Fraction = Fraction(0)

    def growth(self, rate: Fraction) -> Fraction:
        """Interest on 1 over the whole stretch, at one rate: (1+i)^k (1+odd) - 1 where periods compound."""
        if not self.compounding and not self.through:
            return rate * self.whole
        grown = (1 + rate * self.odd) * (1 + rate * self.through)
        for period in self.compounding:
            grown *= 1 + rate * period
        return grown - 1 - rate * self.through


class Periods:
    """The stretches of every due period of a loan."""

    def __init__(self, terms: Terms, maturity: date | None) -> None:
        self.terms = terms
        self.maturity = maturity

    def _by_dates(self, name: str, d1: date, d2: date, start: date, end: date) -> Fraction:
        yearly = not self.terms.single and self.terms.per_year == 1
        context = Context(start, end, self.terms.grid, yearly, self.maturity)
        return by_dates(name, d1, d2, context)

    def _odd_name(self) -> str:
        """The count of odd days: their own, else the day count, else (Equal periods) Actual/365 Fixed."""
        terms = self.terms
        default = "Actual/365 Fixed" if terms.day_count == "Equal periods" else terms.day_count
        return terms.odd_day_count or default

    def _odd_days(self, start: date, end: date) -> Fraction:
        return self._by_dates(self._odd_name(), start, end, start, end)

    def _regular(self, i: int) -> Fraction:
        """The fraction of regular period number i, from due date i-1 to due date i."""
        terms = self.terms
        if terms.day_count == "Equal periods" or (terms.day_count == "30/360" and terms.grid.step.of_months):
            return Fraction(1, terms.per_year)
        start, end = terms.grid.due(i - 1), terms.grid.due(i)
        return self._by_dates(terms.day_count, start, end, start, end)

    def growth_to(self, stretch: Stretch, x: date, rate: Fraction) -> Fraction:
        """Interest on 1 from the stretch's start to x, at one rate: the stretch's growth at its end; before
        that the odd-day count by dates (or, for equal periods, the stretch by its days), always simple."""
        if x >= stretch.end:
            return stretch.growth(rate)
        if self.terms.day_count == "Equal periods" and self.terms.odd_day_count is None:
            return (
                rate * stretch.whole * Fraction((x - stretch.start).days, (stretch.end - stretch.start).days)
            )
        return rate * self._by_dates(self._odd_name(), stretch.start, x, stretch.start, stretch.end)

    @cached_property
    def is_regular(self) -> bool:
        """True when the first period is one regular period, or (in advance) no time at all."""
        return not self.terms.single and (self.terms.advance or self.terms.funding == self.terms.grid.due(0))

    @cached_property
    def is_short(self) -> bool:
        """True when less than one regular period runs from funding to the first payment in arrears."""
        return not self.terms.single and not self.is_regular and self.terms.funding > self.terms.grid.due(0)

    @cached_property
    def treatment(self) -> str:
        """The first-period treatment in effect: a short period has nothing to pay, capitalize or waive."""
        asked = self.terms.first_period
        if self.is_regular or self.terms.single or asked == "accrue":
            return "accrue"
        return "add to first payment" if self.is_short else asked

    @cached_property
    def first(self) -> list[Stretch]:
        """The stretches from funding to the first payment; none when both fall on one date (in advance)."""
        terms, due = self.terms, self.terms.grid.due
        if terms.advance:
            return []
        if terms.single:
            return [self._single()]
        regular = Stretch(due(0), due(1), self._regular(1))
        if self.is_regular:
            return [regular]
        if self.treatment == "accrue":
            if self.is_short:
                return [Stretch(terms.funding, due(1), self._odd_days(terms.funding, due(1)))]
            return [self._counted_back(1, terms.compound)]
        if self.is_short:
            missing = self._odd_days(due(0), terms.funding)
            return [Stretch(due(0), terms.funding, missing, odd_item=True, given_back=True), regular]
        return [self._odd_stretch(regular.whole), regular]

    def _odd_stretch(self, regular: Fraction) -> Stretch:
        """From funding to one regular period before the first payment, as an item of its own.

        Paid with the first payment, compound interest runs on it through the regular period as well.
        """
        days = self._counted_back(0, self.terms.compound)
        through = regular if self.terms.compound and self.treatment == "add to first payment" else Fraction(0)
        return Stretch(days.start, days.end, days.whole, True, False, days.compounding, days.odd, through)

    def _counted_back(self, last: int, compound: bool) -> Stretch:
        """From funding to due date `last`: whole regular periods counted back, then the odd days."""
        due, funding = self.terms.grid.due, self.terms.funding
        back = last
        while due(back - 1) >= funding:
            back -= 1
        periods = tuple(self._regular(i) for i in range(back + 1, last + 1))
        odd = self._odd_days(funding, due(back)) if due(back) > funding else Fraction(0)
        whole = odd + sum(periods)
        if not compound:
            return Stretch(funding, due(last), whole)
        return Stretch(funding, due(last), whole, compounding=periods, odd=odd)

    def _single(self) -> Stretch:
        """The one period of a loan paid at maturity: years counted back where the count is by periods."""
        terms = self.terms
        start, end = terms.funding, terms.grid.due(1)
        if terms.day_count in ("Equal periods", "Actual/Actual ICMA"):
            return self._counted_back(1, compound=False)
        if terms.day_count == "30/360" and terms.whole_months is not None:
            return Stretch(start, end, Fraction(terms.whole_months, 12))
        return Stretch(start, end, self._by_dates(terms.day_count, start, end, start, end))

    def of(self, i: int) -> list[Stretch]:
        """The stretches of due period i (the one that ends on due date i)."""
        if i == 1:
            return self.first
        return [Stretch(self.terms.grid.due(i - 1), self.terms.grid.due(i), self._regular(i))]

    def odd_growth(self, rate: Fraction) -> Fraction:
        """Interest on 1 over the odd days that are an item of their own; 0 when there are none."""
        return sum((stretch.growth(rate) for stretch in self.first if stretch.odd_item), Fraction(0))

    def factor(self, i: int, rate: Fraction) -> Fraction:
        """Interest per unit of balance over period i, as a level payment is sized to meet it."""
        return sum((stretch.growth(rate) for stretch in self.of(i) if not stretch.odd_item), Fraction(0))
