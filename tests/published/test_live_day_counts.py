"""Day counts and dates against general-purpose libraries, on random dates: QuantLib and dateutil."""

from datetime import date, timedelta
from fractions import Fraction
from typing import Any

import pytest
from dateutil.relativedelta import relativedelta
from hypothesis import given, settings
from hypothesis import strategies as st

from published.quantlib import QuantLib
from tenorbook.basis.conventions import DayCount, Frequency, MonthEnd
from tenorbook.calendar.day_count import regular_fractions, year_fraction
from tenorbook.calendar.due_dates import DueDates, is_month_end

steady = settings(derandomize=True, deadline=None, max_examples=400, database=None)
BY_MONTHS = [frequency for frequency in Frequency if frequency.months]


def _month_end(day: date) -> date:
    return day + relativedelta(day=31)


def _february_end(day: date) -> date:
    return day + relativedelta(month=2, day=31)


ANY_DAY = st.dates(date(1950, 1, 1), date(2090, 12, 31))
DAY = ANY_DAY | ANY_DAY.map(_month_end) | ANY_DAY.map(_february_end)
"""A third each: any day, month-ends, ends of February, where the conventions part."""
SPAN = st.tuples(DAY, DAY).map(sorted).map(tuple)


def _ql(day: date) -> Any:
    return QuantLib.Date(day.day, day.month, day.year)


THIRTY = QuantLib.Thirty360
WHOLE_DAYS = {
    DayCount.THIRTY_360_BY_DATES: (THIRTY(THIRTY.BondBasis), 360),
    DayCount.THIRTY_360_US_EOM: (THIRTY(THIRTY.USA), 360),
    DayCount.THIRTY_E_360: (THIRTY(THIRTY.EurobondBasis), 360),
    DayCount.ACTUAL_360: (QuantLib.Actual360(), 360),
    DayCount.ACTUAL_365_FIXED: (QuantLib.Actual365Fixed(), 365),
    DayCount.NL_365: (QuantLib.Actual365Fixed(QuantLib.Actual365Fixed.NoLeap), 365),
}


@pytest.mark.parametrize("convention", WHOLE_DAYS, ids=str)
@steady
@given(span=SPAN)
def test_days_as_quantlib(convention: DayCount, span: tuple[date, date]) -> None:
    counter, denominator = WHOLE_DAYS[convention]
    start, end = span
    expected = Fraction(counter.dayCount(_ql(start), _ql(end)), denominator)
    assert year_fraction(convention, start, end) == expected


@steady
@given(span=SPAN, matures=st.booleans())
def test_30e_360_isda_as_quantlib(span: tuple[date, date], matures: bool) -> None:
    start, end = span
    maturity = end if matures else None
    counter = THIRTY(THIRTY.ISDA, _ql(maturity)) if maturity else THIRTY(THIRTY.ISDA)
    expected = Fraction(counter.dayCount(_ql(start), _ql(end)), 360)
    assert year_fraction(DayCount.THIRTY_E_360_ISDA, start, end, maturity=maturity) == expected


@steady
@given(span=SPAN)
def test_365_25_and_actual_actual_as_quantlib(span: tuple[date, date]) -> None:
    start, end = span
    for convention, counter in (
        (DayCount.ACTUAL_365_25, QuantLib.Actual36525()),
        (DayCount.ACTUAL_ACTUAL_ISDA, QuantLib.ActualActual(QuantLib.ActualActual.ISDA)),
    ):
        expected = counter.yearFraction(_ql(start), _ql(end))
        assert float(year_fraction(convention, start, end)) == pytest.approx(expected, abs=1e-12)


@steady
@given(first=DAY, frequency=st.sampled_from(BY_MONTHS), share=st.fractions(0, 1))
def test_icma_within_a_period_as_quantlib(first: date, frequency: Frequency, share: Fraction) -> None:
    grid = DueDates.of(first, frequency, MonthEnd.NO)
    left, right = grid[3], grid[4]
    end = left + timedelta(int((right - left).days * share))
    counter = QuantLib.ActualActual(QuantLib.ActualActual.ISMA)
    expected = counter.yearFraction(_ql(left), _ql(end), _ql(left), _ql(right))
    found = year_fraction(DayCount.ACTUAL_ACTUAL_ICMA, left, end, frequency=frequency, grid=grid)
    assert float(found) == pytest.approx(expected, abs=1e-12)


@pytest.mark.parametrize("convention", [*WHOLE_DAYS, DayCount.THIRTY_E_360_ISDA], ids=str)
@steady
@given(first=DAY, frequency=st.sampled_from([f for f in Frequency if f is not Frequency.AT_MATURITY]))
def test_a_run_of_periods_counts_as_its_spans(
    convention: DayCount, first: date, frequency: Frequency
) -> None:
    """`regular_fractions` is what a schedule uses; by dates it says what `year_fraction` says."""
    dates = DueDates.of(first, frequency).between(0, 6)
    numerators, denominator = regular_fractions(convention, dates, frequency, dates[-1])
    expected = [
        year_fraction(convention, dates[k], dates[k + 1], frequency=frequency, maturity=dates[-1])
        for k in range(6)
    ]
    assert [Fraction(numerator, denominator) for numerator in numerators] == expected


@steady
@given(first=DAY, frequency=st.sampled_from(BY_MONTHS), number=st.integers(-40, 400))
def test_months_are_counted_from_the_anchor_as_dateutil(
    first: date, frequency: Frequency, number: int
) -> None:
    step = relativedelta(months=frequency.months * (number - 1))
    assert DueDates.of(first, frequency, MonthEnd.NO)[number] == first + step
    assert DueDates.of(first, frequency, MonthEnd.YES)[number] == _month_end(first.replace(day=1) + step)
    auto = DueDates.of(first, frequency)[number]
    assert auto == (_month_end(first + step) if is_month_end(first) else first + step)


@steady
@given(
    first=DAY,
    frequency=st.sampled_from([f for f in Frequency if f.months or f.days]),
    count=st.integers(2, 60),
    month_end=st.sampled_from([MonthEnd.AUTO, MonthEnd.NO]),
)
def test_due_dates_as_quantlib(first: date, frequency: Frequency, count: int, month_end: MonthEnd) -> None:
    due = DueDates.of(first, frequency, month_end)
    tenor = (
        QuantLib.Period(frequency.months, QuantLib.Months)
        if frequency.months
        else QuantLib.Period(frequency.days, QuantLib.Days)
    )
    found = QuantLib.Schedule(
        _ql(first),
        _ql(due[count]),
        tenor,
        QuantLib.NullCalendar(),
        QuantLib.Unadjusted,
        QuantLib.Unadjusted,
        QuantLib.DateGeneration.Forward,
        month_end is MonthEnd.AUTO,
    )
    assert due.between(1, count) == [day.to_date() for day in found.dates()]


@steady
@given(
    first=DAY,
    frequency=st.sampled_from([f for f in Frequency if f.days]),
    number=st.integers(-100, 2600),
)
def test_weeks_are_counted_in_days(first: date, frequency: Frequency, number: int) -> None:
    assert DueDates.of(first, frequency)[number] == first + timedelta(frequency.days * (number - 1))
