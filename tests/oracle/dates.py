"""Calendar arithmetic of the oracle: month ends, and due dates counted from one anchor date.

Nothing here knows money or rates. A `Grid` answers "the date of due date number i" for any integer i,
number 1 being the first payment, number 0 the date one regular period before it.
"""

from __future__ import annotations

import calendar
from dataclasses import dataclass
from datetime import date, timedelta


def is_leap(year: int) -> bool:
    """Gregorian leap year."""
    return calendar.isleap(year)


def last_day(year: int, month: int) -> int:
    """Number of days in the month."""
    return calendar.monthrange(year, month)[1]


def is_month_end(d: date) -> bool:
    """True on the last day of the month."""
    return d.day == last_day(d.year, d.month)


def clipped(month_number: int, day: int) -> date:
    """That day of month `month_number` (12 x year + month - 1), or the month's last day when it has none."""
    year, month = divmod(month_number, 12)
    return date(year, month + 1, min(day, last_day(year, month + 1)))


def add_months(d: date, months: int) -> date:
    """d moved by whole months, clipped to the month's end (31 Jan + 1 -> 28 Feb)."""
    return clipped(12 * d.year + d.month - 1 + months, d.day)


@dataclass(frozen=True)
class Step:
    """How far apart two due dates are: months, days, or half a month (exactly one of them is set)."""

    per_year: int
    months: int = 0
    days: int = 0
    half_month: bool = False

    @property
    def of_months(self) -> bool:
        """True for the frequencies made of months (half months included)."""
        return self.months > 0 or self.half_month


STEPS: dict[str, Step] = {
    "weekly": Step(52, days=7),
    "every 2 weeks": Step(26, days=14),
    "every 4 weeks": Step(13, days=28),
    "twice a month": Step(24, half_month=True),
    "monthly": Step(12, months=1),
    "every 2 months": Step(6, months=2),
    "quarterly": Step(4, months=3),
    "every 4 months": Step(3, months=4),
    "twice a year": Step(2, months=6),
    "yearly": Step(1, months=12),
}


@dataclass(frozen=True)
class Grid:
    """Dates one `step` apart, counted from `anchor`, never from each other.

    `number` is the due-date number that the anchor itself has: 1 when the first payment was given, 0 when it
    is one period after the funding date, which then is the anchor and keeps its day number. `derived`
    switches off the `auto` month-end rule, which asks for a *given* first payment on a month's last day.
    """

    anchor: date
    step: Step
    month_end: str
    number: int = 1
    derived: bool = False

    @property
    def on_month_ends(self) -> bool:
        """True when the dates are the last days of their months (twice a month: the later ones)."""
        if self.month_end == "yes" and self.step.of_months:
            return True
        auto = self.month_end == "auto" and not self.derived
        return auto and self.step.of_months and is_month_end(self.anchor)

    def due(self, i: int) -> date:
        """Due date number i."""
        away = i - self.number
        if self.step.days:
            return self.anchor + timedelta(days=away * self.step.days)
        month = 12 * self.anchor.year + self.anchor.month - 1
        day = self.anchor.day
        if self.step.half_month:
            early, late, half = (day, day + 15, 0) if day <= 15 else (day - 15, day, 1)
            month, half = divmod(2 * month + half + away, 2)
            if half == 0:
                return clipped(month, early)
            return clipped(month, 31 if self.on_month_ends else late)
        return clipped(month + away * self.step.months, 31 if self.on_month_ends else day)

    def number_of(self, day: date) -> int | None:
        """The number of the due date that falls on `day`; None when there is none."""
        i = self.number + (day - self.anchor).days * self.step.per_year // 366 - 2
        while self.due(i) < day:
            i += 1
        return i if self.due(i) == day else None
