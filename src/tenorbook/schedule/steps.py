"""From terms to dated steps: the boundaries of the accrual periods and the fraction of each.

Period k runs from boundary k-1 to boundary k. In arrears boundary k is due date k, and payment k is
made there; in advance boundary k is due date k+1, and payment k+1 is made there. Boundary 0 is the
funding date. Only period 1 of a loan in arrears can be odd.
"""

from dataclasses import dataclass, replace
from datetime import date
from decimal import Decimal
from fractions import Fraction
from functools import lru_cache
from operator import sub

from tenorbook.basis.conventions import DayCount, FirstPeriod, Frequency, LongFirst
from tenorbook.calendar.day_count import days_between, regular_fractions, year_fraction
from tenorbook.calendar.due_dates import DueDates
from tenorbook.schedule.ledger import Item
from tenorbook.terms.dating import MOST_PAYMENTS, MOST_YEARS
from tenorbook.terms.terms import Terms


@lru_cache(maxsize=256)
def exact(rate: Decimal) -> Fraction:
    """An annual rate as an exact fraction."""
    return Fraction(rate)


@dataclass(frozen=True, slots=True, eq=False)
class Span:
    """A stretch that accrues as a whole, and can be split by an event inside it.

    Stretches are told apart by identity: what has accrued of one is kept by it.

    Attributes:
        start: first day that accrues; before the funding date for the regular period that a short
            first period is measured against.
        end: the day after the last.
        whole: year fraction of the whole stretch.
        item: the item of interest it belongs to.
        sign: -1 where the interest is taken off.
        compounding: the year fractions of whole periods that compound; empty for simple interest.
        odd: the simple rest of a compounding stretch.
        apart: year fraction of the regular period that compounds with the stretch, but whose own
            interest is another item.
    """

    start: date
    end: date
    whole: Fraction
    item: Item = Item.PERIOD
    sign: int = 1
    compounding: tuple[Fraction, ...] = ()
    odd: Fraction = Fraction(0)
    apart: Fraction = Fraction(0)

    def factor(self, rate: Decimal) -> Fraction:
        """Interest on 1 over the whole stretch: (1+i)^k (1+odd) - 1 where whole periods compound."""
        annual = exact(rate)
        if not self.compounding:
            return annual * self.whole
        growth = 1 + annual * self.odd
        for fraction in self.compounding:
            growth *= 1 + annual * fraction
        return growth - 1 - annual * self.apart


@dataclass(frozen=True)
class Steps:
    """The dated steps of a loan.

    Attributes:
        terms: what they were made from.
        boundaries: dates of boundary 0, 1, 2 ...; beyond the last one in use where the payment is
            sized over more payments than the term leaves.
        numerators: year fraction of each period as a numerator over `denominator`; entry 0 is period
            1 as if it were regular.
        denominator: common to all periods.
        last: number of the last boundary of the loan.
        days: actual days of each period.
        first: the stretches of period 1; empty when it is regular.
        maturity: the contract's last date, where 30E/360 ISDA leaves the end of February as it is;
            `None` while a fixed payment is still to decide it.
    """

    terms: Terms
    boundaries: list[date]
    numerators: list[int]
    denominator: int
    last: int
    first: tuple[Span, ...]
    maturity: date | None
    days: list[int]

    def spans(self, period: int) -> tuple[Span, ...]:
        """The stretches of a period."""
        if period == 1 and self.first:
            return self.first
        whole = Fraction(self.numerators[period - 1], self.denominator)
        return (Span(self.boundaries[period - 1], self.boundaries[period], whole),)

    def counted_to(self, span: Span, day: date) -> Fraction:
        """The year fraction from the start of a stretch to a day inside it.

        By the odd-day count, by dates; for `Equal periods` with no odd-day count of its own, the
        stretch in proportion to its days.
        """
        terms = self.terms
        if terms.day_count is DayCount.EQUAL_PERIODS and not terms.odd_day_count_given:
            return span.whole * Fraction((day - span.start).days, (span.end - span.start).days)
        return self.by_dates(terms.odd_day_count, span.start, day, span.start, span.end)

    def by_dates(
        self, convention: DayCount, start: date, end: date, period_start: date, period_end: date
    ) -> Fraction:
        """Year fraction by the dates alone, within an accrual period of this loan."""
        return year_fraction(
            convention,
            start,
            end,
            frequency=self.terms.frequency,
            grid=self.terms.due,
            period_start=period_start,
            period_end=period_end,
            maturity=self.maturity,
        )

    def factor(self, span: Span, day: date, rate: Decimal) -> Fraction:
        """Interest on 1 from the start of a stretch to `day`, at one rate throughout."""
        if day >= span.end:
            return span.factor(rate)
        return exact(rate) * self.counted_to(span, day)


def make_steps(terms: Terms, maturity: date | None = None) -> Steps:
    """The steps of a loan, including those beyond its end that only size the payment.

    Args:
        terms: resolved terms.
        maturity: the last payment's date where it is known only from a first run (fixed payment).
    """
    last = _last_boundary(terms)
    sized_to = terms.interest_only + (terms.amortized_over or 0)
    if terms.frequency is Frequency.AT_MATURITY:
        return _single_step(terms)
    offset = 1 if terms.in_advance else 0
    due = terms.due.between(offset, offset + max(last, sized_to))
    if maturity is None and terms.count is not None:
        maturity = due[last if terms.leaves_balloon else terms.count - offset]
    ordinals = terms.due.ordinals(offset, offset + max(last, sized_to))
    days = list(map(sub, ordinals[1:], ordinals))
    numerators, denominator = regular_fractions(terms.day_count, due, terms.frequency, maturity, days)
    boundaries = due
    if due[0] != terms.funding:
        boundaries = [terms.funding, *due[1:]]
        days = [(due[1] - terms.funding).days, *days[1:]]
    bare = Steps(terms, boundaries, numerators, denominator, last, (), maturity, days)
    return bare if boundaries is due else _with_odd_first_period(bare, due[0])


def _last_boundary(terms: Terms) -> int:
    if terms.count is not None:
        return terms.count
    most = min(MOST_PAYMENTS, MOST_YEARS * terms.frequency.per_year)
    years = 9998 - terms.funding.year
    return max(1, min(most, years * terms.frequency.per_year))


def _single_step(terms: Terms) -> Steps:
    """One period from funding to maturity, counted by its dates."""
    boundaries = [terms.funding, terms.due[1]]
    bare = Steps(terms, boundaries, [], 1, 1, (), terms.due[1], days_between(boundaries))
    whole = _single_fraction(bare)
    return replace(bare, numerators=[whole.numerator], denominator=whole.denominator)


def _single_fraction(steps: Steps) -> Fraction:
    """From funding to the only payment: by dates, except where the convention counts in periods."""
    terms, (start, end) = steps.terms, steps.boundaries
    if terms.day_count in (DayCount.EQUAL_PERIODS, DayCount.ACTUAL_ACTUAL_ICMA):
        return _long_span(steps, 1).whole  # years counted back from maturity, then the odd days
    if terms.day_count is DayCount.THIRTY_360:
        months = DueDates.after(start, Frequency.MONTHLY)
        number = months.number_on_or_before(end)
        if months[number] == end:
            return Fraction(30 * number, 360)
    return steps.by_dates(terms.day_count, start, end, start, end)


def _with_odd_first_period(steps: Steps, regular_start: date) -> Steps:
    """The same steps with the stretches of a short or long first period."""
    terms = steps.terms
    short = terms.funding > regular_start
    if terms.first_period is FirstPeriod.ACCRUE:
        first: tuple[Span, ...] = (_short_span(steps) if short else _long_span(steps, 1),)
    else:
        odd = _missing_days(steps, regular_start) if short else _odd_span(steps)
        regular = Span(regular_start, steps.boundaries[1], Fraction(steps.numerators[0], steps.denominator))
        first = (odd, regular)
    return replace(steps, first=first)


def _odd_span(steps: Steps) -> Span:
    """From funding to one regular period before the first payment, an item of its own.

    Added to the first payment it compounds through the regular period too, so that the two items
    together come to what the long first period accrues.
    """
    span = _long_span(steps, 0)
    if not span.compounding and steps.terms.long_first is not LongFirst.COMPOUND:
        return span
    if steps.terms.first_period is not FirstPeriod.ADD_TO_FIRST:
        return span
    regular = Fraction(steps.numerators[0], steps.denominator)
    return replace(span, compounding=(*span.compounding, regular), apart=regular)


def _short_span(steps: Steps) -> Span:
    """A short first period, all odd days."""
    start, end = steps.boundaries[0], steps.boundaries[1]
    return Span(start, end, steps.by_dates(steps.terms.odd_day_count, start, end, start, end))


def _missing_days(steps: Steps, regular_start: date) -> Span:
    """The days that a short first period lacks, whose interest is taken off."""
    start, end = regular_start, steps.terms.funding
    whole = steps.by_dates(steps.terms.odd_day_count, start, end, start, end)
    return Span(start, end, whole, Item.ODD_DAYS, sign=-1)


def _long_span(steps: Steps, end_number: int) -> Span:
    """From funding to due date 1 (or 0): whole regular periods counted back, then the odd days."""
    terms = steps.terms
    first_whole = terms.due.number_on_or_before(terms.funding)
    if terms.due[first_whole] != terms.funding:
        first_whole += 1
    whole_dates = terms.due.between(first_whole, end_number)
    nums, den = regular_fractions(terms.day_count, whole_dates, terms.frequency, steps.maturity)
    periods = tuple(Fraction(num, den) for num in nums)
    start, odd_end = terms.funding, whole_dates[0]
    odd = steps.by_dates(terms.odd_day_count, start, odd_end, start, odd_end)
    item = Item.PERIOD if end_number == 1 else Item.ODD_DAYS
    compounding = periods if terms.long_first is LongFirst.COMPOUND else ()
    return Span(start, whole_dates[-1], sum(periods, odd), item, compounding=compounding, odd=odd)
