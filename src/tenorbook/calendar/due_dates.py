"""Unrolled due dates, each counted from the anchor and never from the date before it.

``DueDates.of(date(2026, 1, 31), MONTHLY)`` gives 31 Jan, 28 Feb, 31 Mar ...: a chain of one-month
steps would stay on the 28th for ever.
"""

from calendar import monthrange
from dataclasses import dataclass
from datetime import date, timedelta
from functools import cache

from tenorbook.basis.conventions import Frequency, MonthEnd

_TABLE_START, _TABLE_END = 1950 * 12, 2150 * 12
_HALF = 15  # days between the two dates of `twice a month`


@dataclass(frozen=True, slots=True)
class DueDates:
    """The due dates of a loan by number: `due[1]` is the first payment, `due[0]` one period before.

    Any whole number works, so periods can be counted back before the first payment and on beyond the
    last. For frequency `at maturity` the periods are years, counted back from the only payment.

    Attributes:
        anchor: the date from which all others are counted.
        anchor_number: the number of the anchor: 1 when it is the first payment, 0 when the first
            payment was derived from the funding date.
        frequency: how far apart.
        month_end: every date (twice a month: the later one) is the last day of its month.
    """

    anchor: date
    anchor_number: int
    frequency: Frequency
    month_end: bool

    @classmethod
    def of(
        cls,
        first_payment: date,
        frequency: Frequency,
        month_end: MonthEnd = MonthEnd.AUTO,
    ) -> "DueDates":
        """Due dates from a first payment that the note states.

        With `auto` they are month-ends when the first payment is the last day of its month.
        """
        sticks = month_end is MonthEnd.YES or (month_end is MonthEnd.AUTO and is_month_end(first_payment))
        return cls(first_payment, 1, frequency, sticks and not frequency.days)

    @classmethod
    def after(cls, funding: date, frequency: Frequency, month_end: MonthEnd = MonthEnd.AUTO) -> "DueDates":
        """Due dates from the funding date, whose day number they keep (30 Jan -> 28 Feb -> 30 Mar)."""
        return cls(funding, 0, frequency, month_end is MonthEnd.YES and not frequency.days)

    def __getitem__(self, number: int) -> date:
        return self.between(number, number)[0]

    def between(self, first: int, last: int) -> list[date]:
        """The due dates numbered `first` to `last`, both included.

        Raises:
            ValueError: a date falls outside the years 1 to 9999.
        """
        steps = range(first - self.anchor_number, last - self.anchor_number + 1)
        try:
            if self.frequency.days:
                return [self.anchor + timedelta(self.frequency.days * step) for step in steps]
            if self.frequency is Frequency.TWICE_A_MONTH:
                return self._half_months(steps)
            return self._months(steps)
        except OverflowError as fault:
            raise ValueError("a due date falls outside the years 1 to 9999") from fault

    def ordinals(self, first: int, last: int) -> list[int]:
        """The same dates as day numbers (1 is 1 January of year 1), for counting days."""
        if not self.frequency.days and self.frequency is not Frequency.TWICE_A_MONTH:
            counted = self._counted(first - self.anchor_number, last - self.anchor_number)
            if _tabled(counted):
                return _ordinal_table(self._day())[_slice(counted)]
        return [day.toordinal() for day in self.between(first, last)]

    def _months(self, steps: range) -> list[date]:
        counted = self._counted(steps[0], steps[-1])
        if _tabled(counted):
            return _table(self._day())[_slice(counted)]
        return [_on(month, self._day()) for month in counted]

    def _counted(self, first: int, last: int) -> range:
        """The months, counted from year 0, that lie so many periods from the anchor."""
        months = self.frequency.months or 12
        start = self.anchor.year * 12 + self.anchor.month - 1
        return range(start + months * first, start + months * last + 1, months)

    def _day(self) -> int:
        """The day number aimed at in each month."""
        return 31 if self.month_end else self.anchor.day

    def _half_months(self, steps: range) -> list[date]:
        late = self.anchor.day > _HALF
        early_day = self.anchor.day - _HALF if late else self.anchor.day
        days = (early_day, 31 if self.month_end else early_day + _HALF)
        start = 2 * (self.anchor.year * 12 + self.anchor.month - 1) + late
        return [_on((start + step) // 2, days[(start + step) % 2]) for step in steps]

    def number_on_or_before(self, day: date) -> int:
        """The number of the last due date that is not after `day`."""
        guess = self.anchor_number + (day - self.anchor).days * self.frequency.per_year // 366 - 1
        while self[guess] > day:
            guess -= 1
        while self[guess + 1] <= day:
            guess += 1
        return guess


def _on(month: int, day: int) -> date:
    """The day of a month counted from year 0, or the last one that the month has."""
    year, zero_based = divmod(month, 12)
    if day > 28:
        day = min(day, monthrange(year, zero_based + 1)[1])
    return date(year, zero_based + 1, day)


def _tabled(months: range) -> bool:
    """Whether the tables hold all of these months."""
    return bool(months) and months[0] >= _TABLE_START and months[-1] < _TABLE_END


def _slice(months: range) -> slice:
    """Where the tables hold these months."""
    return slice(months.start - _TABLE_START, months.stop - _TABLE_START, months.step)


@cache
def _table(day: int) -> list[date]:
    """The day of every month from 1950 on, made once: the loans of a book share their months."""
    return [_on(month, day) for month in range(_TABLE_START, _TABLE_END)]


@cache
def _ordinal_table(day: int) -> list[int]:
    """The dates of `_table` as day numbers."""
    return [dated.toordinal() for dated in _table(day)]


def is_month_end(day: date) -> bool:
    """Whether a date is the last day of its month."""
    return day.day >= 28 and (day + timedelta(1)).month != day.month
