"""Year fractions as someone who checks them by hand would write them."""

from datetime import date
from fractions import Fraction

import pytest

from tenorbook.basis.conventions import DayCount
from tenorbook.reports.fraction_formula import fraction_text

A, B = date(2026, 1, 15), date(2026, 2, 15)


@pytest.mark.parametrize(
    ("fraction", "count", "cell", "expected"),
    [
        (Fraction(1, 12), DayCount.THIRTY_360, "[days]", "30/360"),
        (Fraction(31, 360), DayCount.ACTUAL_360, "[days]", "[days]/360"),
        (Fraction(31, 360), DayCount.ACTUAL_360, "", "31/360"),
        (Fraction(31, 365), DayCount.ACTUAL_365_FIXED, "[days]", "[days]/365"),
        (Fraction(31, 366), DayCount.ACTUAL_365_LEAP, "[days]", "[days]/366"),
        (Fraction(124, 1461), DayCount.ACTUAL_365_25, "[days]", "[days]/365.25"),
        (Fraction(1, 12), DayCount.EQUAL_PERIODS, "[days]", "1/12"),
        (Fraction(1, 26), DayCount.EQUAL_PERIODS, "[days]", "1/26"),
        (Fraction(10, 31 * 12), DayCount.ACTUAL_ACTUAL_ICMA, "[days]", "5/186"),
        (Fraction(1, 12) - Fraction(14, 365), DayCount.THIRTY_360, "", "(1/12-14/365)"),
        (Fraction(2, 12) + Fraction(11, 365), DayCount.EQUAL_PERIODS, "", "(1/6+11/365)"),
    ],
)
def test_fractions(fraction: Fraction, count: DayCount, cell: str, expected: str) -> None:
    assert fraction_text(fraction, A, B, (count,), cell) == expected


def test_days_of_two_kinds_of_year() -> None:
    fraction = Fraction(17, 365) + Fraction(14, 366)
    text = fraction_text(
        fraction, date(2027, 12, 15), date(2028, 1, 15), (DayCount.ACTUAL_ACTUAL_ISDA,), "[days]"
    )
    assert text == "(17/365+14/366)"
