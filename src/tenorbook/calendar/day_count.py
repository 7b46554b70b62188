"""Day counts as exact fractions of a year. The first day of a span counts, the last does not.

`year_fraction` counts one span by its dates. `regular_fractions` counts a whole run of regular
periods at once, over one common denominator, which is what makes a long schedule cheap.

The definitions are those of the ISDA 2006 Definitions, section 4.16, and ICMA Rule 251; each is
documented on its member of `DayCount`.
"""

from collections.abc import Callable, Sequence
from datetime import date
from fractions import Fraction
from itertools import pairwise
from operator import mul, ne, sub

from tenorbook.basis.conventions import DayCount, Frequency
from tenorbook.calendar.due_dates import DueDates, is_month_end

_LEAP_AND_NOT = 365 * 366  # common denominator of 365ths and 366ths


def is_leap(year: int) -> bool:
    """Whether a year has a 29 February."""
    return year % 4 == 0 and (year % 100 != 0 or year % 400 == 0)


def leap_days(start: date, end: date) -> int:
    """The 29 Februaries after `start` and up to `end`."""
    return _leap_days_to(end) - _leap_days_to(start)


def _leap_days_to(day: date) -> int:
    """The 29 Februaries from year 1 to `day`, that day included."""
    year = day.year if (day.month, day.day) >= (2, 29) else day.year - 1
    return year // 4 - year // 100 + year // 400


def _thirties(start: date, start_day: int, end: date, end_day: int) -> int:
    """Days in a year of 30-day months, with the day numbers already adjusted."""
    return 360 * (end.year - start.year) + 30 * (end.month - start.month) + end_day - start_day


def days_30_360(start: date, end: date) -> int:
    """30/360 days by dates, ISDA 2006 4.16(f)."""
    start_day = min(start.day, 30)
    end_day = 30 if end.day == 31 and start_day == 30 else end.day
    return _thirties(start, start_day, end, end_day)


def days_30_360_us_eom(start: date, end: date) -> int:
    """30/360 days with the end-of-February rule of US bond markets."""
    start_day, end_day = start.day, end.day
    if _february_end(start):
        if _february_end(end):
            end_day = 30
        start_day = 30
    if end_day == 31 and start_day >= 30:
        end_day = 30
    return _thirties(start, min(start_day, 30), end, end_day)


def _february_end(day: date) -> bool:
    return day.month == 2 and is_month_end(day)


def days_30e_360(start: date, end: date) -> int:
    """30E/360 days, ISDA 2006 4.16(g)."""
    return _thirties(start, min(start.day, 30), end, min(end.day, 30))


def days_30e_360_isda(start: date, end: date, maturity: date | None) -> int:
    """30E/360 (ISDA) days, 4.16(h): the last of February stays as it is at maturity."""
    start_day = 30 if is_month_end(start) else start.day
    end_stays = end.month == 2 and end == maturity
    end_day = 30 if is_month_end(end) and not end_stays else end.day
    return _thirties(start, start_day, end, end_day)


def _actual_actual_isda(start: date, end: date) -> int:
    """Days in leap years x 365 plus days in other years x 366: a numerator over 365 x 366."""
    if start.year == end.year:
        return (end - start).days * (365 if is_leap(start.year) else 366)
    if end.year == start.year + 1:
        new_year = date(end.year, 1, 1)
        left = (new_year - start).days * (365 if is_leap(start.year) else 366)
        return left + (end - new_year).days * (365 if is_leap(end.year) else 366)
    bounds = [start, *(date(year, 1, 1) for year in range(start.year + 1, end.year + 1)), end]
    return sum((b - a).days * (365 if is_leap(a.year) else 366) for a, b in pairwise(bounds))


def _leap_year_basis(start: date, end: date, period_end: date, frequency: Frequency) -> int:
    """365 or 366 for Actual/365 Leap, ISDA 2006 4.16(i)."""
    if frequency is Frequency.YEARLY:
        return 366 if leap_days(start, period_end) else 365
    return 366 if is_leap(period_end.year) else 365


def _icma(start: date, end: date, grid: DueDates) -> Fraction:
    """Each notional regular period by itself: days over its days times the periods a year."""
    first, last = grid.number_on_or_before(start), grid.number_on_or_before(end)
    dates = grid.between(first, last + 1)
    total = Fraction(0)
    for left, right in pairwise(dates):
        days = (min(end, right) - max(start, left)).days
        if days > 0:
            total += Fraction(days, (right - left).days * grid.frequency.per_year)
    return total


def year_fraction(
    convention: DayCount,
    start: date,
    end: date,
    *,
    frequency: Frequency = Frequency.MONTHLY,
    grid: DueDates | None = None,
    period_start: date | None = None,
    period_end: date | None = None,
    maturity: date | None = None,
) -> Fraction:
    """The fraction of a year from `start` (counted) to `end` (not counted), by the dates alone.

    `30/360` counts as `30/360 by dates` here, and `Equal periods` as Actual/365 Fixed: what they say
    of regular periods is in `regular_fractions`.

    Args:
        convention: how to count.
        start: first day counted.
        end: the day after the last one counted; not before `start`.
        frequency: of the loan; Actual/365 Leap treats yearly payments apart.
        grid: the regular due dates; Actual/Actual ICMA splits the span at them.
        period_start: start of the accrual period that the span belongs to; default `start`.
        period_end: its end, by which Actual/365 Leap chooses its year; default `end`.
        maturity: where 30E/360 ISDA leaves the last of February as it is.

    Raises:
        ValueError: Actual/Actual ICMA without a grid.
    """
    days = (end - start).days
    match convention:
        case DayCount.ACTUAL_360:
            return Fraction(days, 360)
        case DayCount.ACTUAL_365_FIXED | DayCount.EQUAL_PERIODS:
            return Fraction(days, 365)
        case DayCount.ACTUAL_365_25:
            return Fraction(4 * days, 1461)
        case DayCount.ACTUAL_365_LEAP:
            basis = _leap_year_basis(period_start or start, end, period_end or end, frequency)
            return Fraction(days, basis)
        case DayCount.ACTUAL_ACTUAL_ISDA:
            return Fraction(_actual_actual_isda(start, end), _LEAP_AND_NOT)
        case DayCount.NL_365:
            return Fraction(days - leap_days(start, end), 365)
        case DayCount.ACTUAL_ACTUAL_ICMA:
            if grid is None:
                raise ValueError("Actual/Actual ICMA needs the regular due dates")
            return _icma(start, end, grid)
        case _:
            return Fraction(_thirty_day_months(convention, start, end, maturity), 360)


def _thirty_day_months(convention: DayCount, start: date, end: date, maturity: date | None) -> int:
    if convention is DayCount.THIRTY_E_360_ISDA:
        return days_30e_360_isda(start, end, maturity)
    return _BY_DATES[convention](start, end)


_BY_DATES: dict[DayCount, Callable[[date, date], int]] = {
    DayCount.THIRTY_360: days_30_360,
    DayCount.THIRTY_360_BY_DATES: days_30_360,
    DayCount.THIRTY_360_US_EOM: days_30_360_us_eom,
    DayCount.THIRTY_E_360: days_30e_360,
}


def days_between(dates: Sequence[date]) -> list[int]:
    """Actual days from each date to the next; one fewer than dates."""
    ordinals = [day.toordinal() for day in dates]
    return list(map(sub, ordinals[1:], ordinals))


def is_equal_period(convention: DayCount, frequency: Frequency) -> bool:
    """Whether every regular period counts the same, whatever its dates."""
    if convention is DayCount.THIRTY_360:
        return bool(frequency.months) or frequency is Frequency.TWICE_A_MONTH
    return convention in (DayCount.EQUAL_PERIODS, DayCount.ACTUAL_ACTUAL_ICMA)


def regular_fractions(
    convention: DayCount,
    dates: Sequence[date],
    frequency: Frequency,
    maturity: date | None = None,
    days: list[int] | None = None,
) -> tuple[list[int], int]:
    """The year fractions of consecutive regular periods, over one common denominator.

    Args:
        convention: how to count.
        dates: unrolled due dates in order; period k runs from `dates[k]` to `dates[k + 1]`.
        frequency: of the loan.
        maturity: see `year_fraction`.
        days: actual days of each period, where the caller has them.

    Returns:
        Numerators, one fewer than dates, and the denominator.
    """
    periods = len(dates) - 1
    if is_equal_period(convention, frequency):
        if convention is DayCount.THIRTY_360:
            return [30 * frequency.months or 15] * periods, 360
        return [1] * periods, frequency.per_year
    if convention in _PER_DAY:
        each, denominator = _PER_DAY[convention]
        days = days_between(dates) if days is None else days
        return (days if each == 1 else [each * number for number in days]), denominator
    return _uneven_fractions(convention, dates, frequency, maturity, days)


_PER_DAY = {
    DayCount.ACTUAL_360: (1, 360),
    DayCount.ACTUAL_365_FIXED: (1, 365),
    DayCount.ACTUAL_365_25: (4, 1461),
}


def _uneven_fractions(
    convention: DayCount,
    dates: Sequence[date],
    frequency: Frequency,
    maturity: date | None,
    days: list[int] | None,
) -> tuple[list[int], int]:
    """Conventions whose count depends on where in the calendar the days lie."""
    if convention in (DayCount.ACTUAL_ACTUAL_ISDA, DayCount.ACTUAL_365_LEAP):
        days = days_between(dates) if days is None else days
        return _by_kind_of_year(convention, dates, days, frequency), _LEAP_AND_NOT
    spans = pairwise(dates)
    if convention is DayCount.NL_365:
        return [(b - a).days - leap_days(a, b) for a, b in spans], 365
    return [_thirty_day_months(convention, a, b, maturity) for a, b in spans], 360


def _by_kind_of_year(
    convention: DayCount, dates: Sequence[date], days: list[int], frequency: Frequency
) -> list[int]:
    """Numerators over 365 x 366: a day of a leap year weighs 365, a day of another year 366."""
    years = [day.year for day in dates]
    weight = {year: 365 if is_leap(year) else 366 for year in set(years)}
    if convention is DayCount.ACTUAL_365_LEAP and frequency is not Frequency.YEARLY:
        return [number * weight[year] for number, year in zip(days, years[1:], strict=True)]
    if convention is DayCount.ACTUAL_365_LEAP:
        return [
            number * (365 if leap_days(a, b) else 366)
            for number, (a, b) in zip(days, pairwise(dates), strict=True)
        ]
    numerators = list(map(mul, days, map(weight.__getitem__, years)))
    for number, crossing in enumerate(map(ne, years, years[1:])):
        if crossing:
            numerators[number] = _actual_actual_isda(dates[number], dates[number + 1])
    return numerators
