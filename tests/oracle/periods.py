"""Accrual periods: how much of a year each one counts, and how much of it has run on any day inside.

A due period is one or more stretches. All but the first are one regular stretch. A long first period is its
odd days, then as many whole regular stretches as fit before the first payment; a short one is all odd days,
unless the note charges it as a regular period less the days before funding.
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
    opens: the day interest starts to run, after `start` only in a short first period charged as regular.
    """

    start: date
    end: date
    whole: Fraction
    odd_item: bool
    opens: date


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

    def _odd(self, start: date, end: date, odd_item: bool) -> Stretch:
        return Stretch(start, end, self._by_dates(self._odd_name(), start, end, start, end), odd_item, start)

    def _regular(self, i: int, odd_item: bool = False) -> Stretch:
        """Regular stretch number i, from due date i-1 to due date i."""
        terms = self.terms
        start, end = terms.grid.due(i - 1), terms.grid.due(i)
        if terms.day_count == "Equal periods" or (terms.day_count == "30/360" and terms.grid.step.of_months):
            whole = Fraction(1, terms.per_year)
        else:
            whole = self._by_dates(terms.day_count, start, end, start, end)
        return Stretch(start, end, whole, odd_item, start)

    def part(self, stretch: Stretch, x: date) -> Fraction:
        """What has run from the stretch's start to x: the whole at its end, before by the odd-day count."""
        if x >= stretch.end:
            return stretch.whole
        if x <= stretch.start:
            return Fraction(0)
        if self.terms.day_count == "Equal periods" and self.terms.odd_day_count is None:
            return stretch.whole * Fraction((x - stretch.start).days, (stretch.end - stretch.start).days)
        return self._by_dates(self._odd_name(), stretch.start, x, stretch.start, stretch.end)

    @cached_property
    def charged_as_odd(self) -> bool:
        """True when the first period's odd days are an item of their own (any treatment but `accrue`)."""
        return self.terms.first_period != "accrue" and not self.terms.single

    @cached_property
    def is_short(self) -> bool:
        """True when less than one regular period runs from funding to the first payment in arrears."""
        terms = self.terms
        return not terms.single and not terms.advance and terms.funding > terms.grid.due(0)

    @cached_property
    def treatment(self) -> str:
        """The first-period treatment in effect: a short period has nothing to pay, capitalize or waive."""
        return "add to first payment" if self.is_short and self.charged_as_odd else self.terms.first_period

    @cached_property
    def unearned_days(self) -> Fraction:
        """Short first period charged as regular: the fraction of a year before funding, to be taken off."""
        if not (self.is_short and self.charged_as_odd):
            return Fraction(0)
        start = self.terms.grid.due(0)
        return self._by_dates(self._odd_name(), start, self.terms.funding, start, self.terms.grid.due(1))

    @cached_property
    def first(self) -> list[Stretch]:
        """The stretches from funding to the first payment; none when both fall on one date (in advance)."""
        terms, due = self.terms, self.terms.grid.due
        if terms.single:
            return self._single()
        if self.is_short:
            if not self.charged_as_odd:
                return [self._odd(terms.funding, due(1), False)]
            regular = self._regular(1)
            return [Stretch(regular.start, regular.end, regular.whole, False, terms.funding)]
        whole_from = 1  # due-date number of the earliest whole period's start
        while due(whole_from - 1) >= terms.funding:
            whole_from -= 1
        stretches = []
        if due(whole_from) > terms.funding:
            stretches.append(self._odd(terms.funding, due(whole_from), self.charged_as_odd))
        for i in range(whole_from + 1, 2):
            is_last = i == 1 and not terms.advance
            stretches.append(self._regular(i, self.charged_as_odd and not is_last))
        return stretches

    def _single(self) -> list[Stretch]:
        """The one period of a loan paid at maturity."""
        terms = self.terms
        start, end = terms.funding, terms.grid.due(1)
        if terms.day_count != "Equal periods":
            if terms.day_count == "30/360" and terms.whole_months is not None:
                return [Stretch(start, end, Fraction(terms.whole_months, 12), False, start)]
            whole = self._by_dates(terms.day_count, start, end, start, end)
            return [Stretch(start, end, whole, False, start)]
        years = 1
        while terms.grid.due(years - 1) >= start:
            years -= 1
        odd = [self._odd(start, terms.grid.due(years), False)] if terms.grid.due(years) > start else []
        return odd + [self._regular(i) for i in range(years + 1, 2)]

    def of(self, i: int) -> list[Stretch]:
        """The stretches of due period i (the one that ends on due date i)."""
        return self.first if i == 1 else [self._regular(i)]

    def growth(self, rate: Fraction, odd_item: bool) -> Fraction:
        """Interest per unit over the first period's stretches of one kind, simple or compounding."""
        stretches = [stretch for stretch in self.first if stretch.odd_item == odd_item]
        if not self.terms.compound:
            return rate * sum((stretch.whole for stretch in stretches), Fraction(0))
        grown = Fraction(1)
        for stretch in stretches:
            grown *= 1 + rate * stretch.whole
        return grown - 1

    def factor(self, i: int, rate: Fraction) -> Fraction:
        """Interest per unit of balance over period i, as a level payment is sized to meet it."""
        if i == 1:
            return self.growth(rate, odd_item=False)
        return rate * self._regular(i).whole
