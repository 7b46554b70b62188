"""Published day-count fractions: ISDA's examples, and the test tables of open libraries and spreadsheets."""

from datetime import date
from fractions import Fraction

import pytest

from published.printed import agrees, records, said
from tenorbook.basis.conventions import DayCount, Frequency, MonthEnd
from tenorbook.calendar.day_count import year_fraction
from tenorbook.calendar.due_dates import DueDates

DAYS_IN_YEAR = {
    DayCount.ACTUAL_360: Fraction(360),
    DayCount.ACTUAL_365_FIXED: Fraction(365),
    DayCount.ACTUAL_365_25: Fraction(1461, 4),
    DayCount.NL_365: Fraction(365),
    DayCount.THIRTY_360_BY_DATES: Fraction(360),
    DayCount.THIRTY_E_360: Fraction(360),
    DayCount.THIRTY_E_360_ISDA: Fraction(360),
    DayCount.THIRTY_360_US_EOM: Fraction(360),
}

Case = dict[str, str]
CASES: list[Case] = records("day_counts.csv")
SPREADSHEET: list[Case] = records("spreadsheet_year_fractions.csv")
FLOAT_NOISE = 10.0**-13
"""Spreadsheet figures are printed doubles; their last of 15 digits may be off."""


def _name(case: Case) -> str:
    return f"{case['convention']} {case['start']} {case['end']}".replace("/", "-")


def _date(text: str) -> date | None:
    return date.fromisoformat(text) if text else None


def _nominal(case: Case) -> list[date]:
    """The regular period dates around the span, as the source lists them."""
    return [date.fromisoformat(text) for text in case.get("nominal", "").split()]


def _grid(case: Case) -> DueDates | None:
    nominal = _nominal(case)
    if not nominal:
        return None
    return DueDates.of(nominal[-1], said(Frequency, case["frequency"]), said(MonthEnd, case["month_end"]))


def _fraction(case: Case) -> Fraction:
    return year_fraction(
        said(DayCount, case["convention"]),
        date.fromisoformat(case["start"]),
        date.fromisoformat(case["end"]),
        frequency=said(Frequency, case.get("frequency") or "monthly"),
        grid=_grid(case),
        period_end=_date(case.get("period_end", "")),
        maturity=_date(case.get("maturity", "")),
    )


def _days(case: Case) -> Fraction:
    """The number of days behind the fraction; year by year where years have their own lengths."""
    convention = said(DayCount, case["convention"])
    if convention is not DayCount.ACTUAL_ACTUAL_ISDA:
        return _fraction(case) * DAYS_IN_YEAR[convention]
    start, end = date.fromisoformat(case["start"]), date.fromisoformat(case["end"])
    total = Fraction(0)
    for year in range(start.year, end.year + 1):
        opens, closes = date(year, 1, 1), date(year + 1, 1, 1)
        part = year_fraction(convention, max(start, opens), min(end, closes))
        total += part * (closes - opens).days
    return total


@pytest.mark.parametrize("case", [case for case in CASES if case["kind"] == "fraction"], ids=_name)
def test_published_fraction(case: Case) -> None:
    assert _fraction(case) == Fraction(case["expected"])


@pytest.mark.parametrize("case", [case for case in CASES if case["kind"] == "days"], ids=_name)
def test_published_days(case: Case) -> None:
    assert _days(case) == Fraction(case["expected"])


@pytest.mark.parametrize("case", [case for case in CASES if case["nominal"]], ids=_name)
def test_notional_periods_are_the_published_ones(case: Case) -> None:
    grid, nominal = _grid(case), _nominal(case)
    assert grid is not None
    number = grid.number_on_or_before(nominal[0])
    assert grid.between(number, number + len(nominal) - 1) == nominal


@pytest.mark.parametrize("case", SPREADSHEET, ids=_name)
def test_spreadsheet_figure(case: Case) -> None:
    """YEARFRAC, DAYS360 and ACCRINT on the bases that are conventions of the loan book.

    `expected` is the fraction as printed, or interest as printed over principal x rate.
    """
    printed, _, base = case["expected"].partition("/")
    assert agrees(_fraction(case) * Fraction(base or 1), printed, FLOAT_NOISE)
