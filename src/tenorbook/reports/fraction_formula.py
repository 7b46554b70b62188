"""Fractions of a year, as someone who checks them by hand would write them."""

from datetime import date
from fractions import Fraction

from tenorbook.basis.conventions import DayCount

_BY_COUNT: dict[DayCount, tuple[int, ...]] = {
    DayCount.ACTUAL_360: (360,),
    DayCount.THIRTY_360: (360,),
    DayCount.THIRTY_360_BY_DATES: (360,),
    DayCount.THIRTY_360_US_EOM: (360,),
    DayCount.THIRTY_E_360: (360,),
    DayCount.THIRTY_E_360_ISDA: (360,),
    DayCount.ACTUAL_365_FIXED: (365,),
    DayCount.NL_365: (365,),
    DayCount.ACTUAL_365_LEAP: (365, 366),
    DayCount.ACTUAL_ACTUAL_ISDA: (365, 366),
}
_MOST_PERIODS = 1200


def fraction_text(
    fraction: Fraction, start: date, end: date, counts: tuple[DayCount, ...], days_cell: str
) -> str:
    """A year fraction as the right-hand side of a product: `30/360`, `[days]/365`, `(15/365+16/366)`.

    Args:
        fraction: what it comes to.
        start: first day.
        end: the day after the last.
        counts: the day counts of the loan, the likeliest first.
        days_cell: reference to the cell with the actual days of the stretch; empty: there is none.
    """
    days = (end - start).days
    if DayCount.ACTUAL_365_25 in counts and fraction == Fraction(days * 4, 1461):
        return f"{days_cell or days}/365.25"
    for year in dict.fromkeys(year for count in counts for year in _BY_COUNT.get(count, ())):
        numerator = fraction * year
        if numerator.denominator == 1:
            thirty = numerator != days or not days_cell or _thirty(counts[0])
            return f"{numerator}/{year}" if thirty else f"{days_cell}/{year}"
    return _by_leap_years(fraction, start, end) or _by_periods(fraction) or _plain(fraction)


def _thirty(count: DayCount) -> bool:
    return count in (
        DayCount.THIRTY_360,
        DayCount.THIRTY_360_BY_DATES,
        DayCount.THIRTY_360_US_EOM,
        DayCount.THIRTY_E_360,
        DayCount.THIRTY_E_360_ISDA,
    )


def _plain(fraction: Fraction) -> str:
    text = f"{fraction.numerator}/{fraction.denominator}"
    return text if fraction >= 0 else f"({text})"


def _by_leap_years(fraction: Fraction, start: date, end: date) -> str:
    """Days in ordinary years over 365 plus days in leap years over 366, if that is what it is."""
    ordinary, leap = 0, 0
    for year in range(start.year, end.year + 1):
        first, last = max(start, date(year, 1, 1)), min(end, date(min(year + 1, 9999), 1, 1))
        length = date(year, 12, 31).timetuple().tm_yday
        ordinary += (last - first).days if length == 365 else 0
        leap += (last - first).days if length == 366 else 0
    if fraction != Fraction(ordinary, 365) + Fraction(leap, 366):
        return ""
    return f"({ordinary}/365+{leap}/366)"


def _by_periods(fraction: Fraction) -> str:
    """Whole periods, or whole periods with odd days counted another way."""
    if fraction.numerator == 1 or fraction.denominator <= 52:
        return _plain(fraction)
    for periods in (*range(1, 13), *range(13, 61)):
        whole = Fraction(periods, 12)
        for year in (365, 360, 366):
            days = (fraction - whole) * year
            if days.denominator == 1 and abs(days) < year:
                sign = "+" if days > 0 else "-"
                return f"({_plain(whole)}{sign}{abs(days)}/{year})"
    return ""
