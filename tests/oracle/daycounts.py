"""Day-count fractions by dates, exact, each written out from its published definition.

ISDA 2006 Definitions section 4.16 and ICMA Rule 251, as the conventions' section 3 lists them. "A regular
period of 30/360 is exactly its months" and "an equal period is 1/m" are not counts by dates; `periods.py`
has them.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from datetime import date
from fractions import Fraction

from .dates import Grid, is_leap, is_month_end


@dataclass(frozen=True)
class Context:
    """What a count needs to know besides its two dates.

    start, end: the whole period that the dates lie in; grid: the regular due dates, for notional periods;
    yearly: payments are yearly; maturity: the date that 30E/360 ISDA spares.
    """

    start: date
    end: date
    grid: Grid
    yearly: bool
    maturity: date | None


def _days360(d1: date, day1: int, d2: date, day2: int) -> Fraction:
    return Fraction(360 * (d2.year - d1.year) + 30 * (d2.month - d1.month) + day2 - day1, 360)


def bond_basis(d1: date, d2: date) -> Fraction:
    """4.16(f): D1 31 -> 30; D2 31 -> 30 when D1 is 30 or 31."""
    day1 = min(d1.day, 30)
    day2 = 30 if d2.day == 31 and day1 == 30 else d2.day
    return _days360(d1, day1, d2, day2)


def us_month_end(d1: date, d2: date) -> Fraction:
    """4.16(f), after the February rules: both last of February -> D2 30; d1 last of February -> D1 30."""
    day1, day2 = d1.day, d2.day
    if d1.month == 2 and is_month_end(d1):
        if d2.month == 2 and is_month_end(d2):
            day2 = 30
        day1 = 30
    day1 = min(day1, 30)
    if day2 == 31 and day1 == 30:
        day2 = 30
    return _days360(d1, day1, d2, day2)


def eurobond(d1: date, d2: date) -> Fraction:
    """4.16(g): 31 -> 30 at both ends."""
    return _days360(d1, min(d1.day, 30), d2, min(d2.day, 30))


def eurobond_isda(d1: date, d2: date, maturity: date | None) -> Fraction:
    """4.16(h): last day of a month -> 30 at both ends, but a maturity date on February's last day stays."""
    day1 = 30 if is_month_end(d1) else d1.day
    spared = d2.month == 2 and d2 == maturity
    day2 = 30 if is_month_end(d2) and not spared else d2.day
    return _days360(d1, day1, d2, day2)


def actual_isda(d1: date, d2: date) -> Fraction:
    """4.16(b): days in leap years / 366 + days in other years / 365."""
    total = Fraction(0)
    at = d1
    while at < d2:
        until = min(d2, date(at.year + 1, 1, 1))
        total += Fraction((until - at).days, 366 if is_leap(at.year) else 365)
        at = until
    return total


def leap_days(d1: date, d2: date) -> int:
    """How many 29 Februaries lie in (d1, d2]."""
    return sum(1 for year in range(d1.year, d2.year + 1) if is_leap(year) and d1 < date(year, 2, 29) <= d2)


def actual_icma(d1: date, d2: date, grid: Grid) -> Fraction:
    """Rule 251: days / (days in the regular period x periods a year), summed over the notional periods."""
    guess_days = max(1, 365 // grid.step.per_year)
    i = grid.number + (d1 - grid.anchor).days // guess_days
    while grid.due(i) > d1:
        i -= 1
    while grid.due(i + 1) <= d1:
        i += 1
    total = Fraction(0)
    while grid.due(i) < d2:
        left, right = grid.due(i), grid.due(i + 1)
        inside = (min(right, d2) - max(left, d1)).days
        total += Fraction(inside, (right - left).days * grid.step.per_year)
        i += 1
    return total


def actual_leap(d1: date, d2: date, context: Context) -> Fraction:
    """4.16(i): /366 when the period ends in a leap year (yearly: when it holds 29 Feb), else /365.

    The period is the whole one, also where only a part of it is counted, so that its parts add up.
    """
    holds_leap_day = leap_days(context.start, context.end) > 0
    long_year = holds_leap_day if context.yearly else is_leap(context.end.year)
    return Fraction((d2 - d1).days, 366 if long_year else 365)


def _per_days(denominator: Fraction) -> Callable[[date, date, Context], Fraction]:
    return lambda d1, d2, _: (d2 - d1).days / denominator


BY_DATES: dict[str, Callable[[date, date, Context], Fraction]] = {
    "30/360": lambda d1, d2, _: bond_basis(d1, d2),
    "30/360 by dates": lambda d1, d2, _: bond_basis(d1, d2),
    "30/360 US EOM": lambda d1, d2, _: us_month_end(d1, d2),
    "30E/360": lambda d1, d2, _: eurobond(d1, d2),
    "30E/360 ISDA": lambda d1, d2, context: eurobond_isda(d1, d2, context.maturity),
    "Actual/360": _per_days(Fraction(360)),
    "Actual/365 Fixed": _per_days(Fraction(365)),
    "Actual/365.25": _per_days(Fraction(1461, 4)),
    "Actual/365 Leap": actual_leap,
    "Actual/Actual ISDA": lambda d1, d2, _: actual_isda(d1, d2),
    "Actual/Actual ICMA": lambda d1, d2, context: actual_icma(d1, d2, context.grid),
    "NL/365": lambda d1, d2, _: Fraction((d2 - d1).days - leap_days(d1, d2), 365),
}


def by_dates(name: str, d1: date, d2: date, context: Context) -> Fraction:
    """The fraction of a year from d1 (counted) to d2 (not counted)."""
    if d1 >= d2:
        return Fraction(0)
    return BY_DATES[name](d1, d2, context)
