"""Rounding formulas, evaluated as a spreadsheet does, against exact rounding."""

import math
from decimal import ROUND_DOWN, ROUND_HALF_UP, ROUND_UP, Decimal
from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from tenorbook.basis.conventions import InterestRounding
from tenorbook.basis.rounding import round_fraction
from tenorbook.reports.rounding_formula import are_plain, ordinary, rounded

MODES = (InterestRounding.HALF_UP, InterestRounding.HALF_EVEN, InterestRounding.DOWN, InterestRounding.UP)


def evaluated(formula: str, **cells: float) -> float:
    """A formula of these few functions, on doubles."""
    names = {"ROUND": half_up, "ROUNDDOWN": down, "ROUNDUP": up, "MOD": modulo, "IF": choose}
    text = formula.replace("IF(", "choose(").replace("=0.5", "==0.5").replace("^", "**")
    return float(eval(text, {"__builtins__": {}}, {**names, "choose": choose, **cells}))


def _cut(number: float, digits: int, mode: str) -> float:
    """Rounds the 15 digits that a spreadsheet shows of a double."""
    shown = Decimal(f"{number:.15g}")
    return float(shown.quantize(Decimal(1).scaleb(-digits), mode))


def half_up(number: float, digits: int) -> float:
    return _cut(number, digits, ROUND_HALF_UP)


def down(number: float, digits: int) -> float:
    return _cut(number, digits, ROUND_DOWN)


def up(number: float, digits: int) -> float:
    return _cut(number, digits, ROUND_UP)


def modulo(number: float, divisor: float) -> float:
    return number - divisor * math.floor(number / divisor)


def choose(condition: bool, yes: float, no: float) -> float:
    return yes if condition else no


@given(
    units=st.integers(-(10**11), 10**11),
    rate=st.integers(0, 300_000),
    days=st.integers(1, 400),
    year=st.sampled_from([360, 365, 366]),
    digits=st.sampled_from([0, 2, 3]),
    mode=st.sampled_from(MODES),
)
def test_any_interest_comes_to_the_exact_figure(
    units: int, rate: int, days: int, year: int, digits: int, mode: InterestRounding
) -> None:
    exact = units * Fraction(rate, 10**6) * Fraction(days, year)
    formula = rounded(f"b*r*{days}/{year}", exact, digits, mode)
    value = evaluated(formula, b=units / 10**digits, r=rate / 10**6)
    assert round(value * 10**digits) == round_fraction(exact, mode)


@pytest.mark.parametrize("mode", MODES)
@given(whole=st.integers(0, 10**8), tie=st.booleans())
def test_ties_and_whole_units_come_to_the_exact_figure(mode: InterestRounding, whole: int, tie: bool) -> None:
    exact = whole + Fraction(tie, 2)
    value = evaluated(rounded("x*(1/3)*3", exact, 2, mode), x=float(exact) / 100)
    assert round(value * 100) == round_fraction(exact, mode)


@pytest.mark.parametrize(
    ("mode", "expected"),
    [
        (InterestRounding.HALF_UP, "ROUND(x,2)"),
        (InterestRounding.DOWN, "ROUNDDOWN(ROUND(x,8),2)"),
        (InterestRounding.UP, "ROUNDUP(ROUND(x,8),2)"),
        (InterestRounding.HALF_EVEN, "IF(MOD(ROUND(x*100,6),1)=0.5,2*ROUND(x*50,0)/100,ROUND(x,2))"),
    ],
)
def test_the_ordinary_form(mode: InterestRounding, expected: str) -> None:
    assert ordinary("x", 2, mode) == expected


def test_a_tie_is_rounded_free_of_noise_first() -> None:
    assert rounded("x", Fraction(1_000_5, 10), 2, InterestRounding.HALF_UP) == "ROUND(ROUND(x,8),2)"


def test_carried_interest_keeps_away_from_the_tie_a_double_cannot_see() -> None:
    """1e12 units of 10^-8: the fifteenth digit is past the last one kept."""
    near = 10**12 + Fraction(1, 2) + Fraction(1, 10**6)
    assert rounded("x", near, 8, InterestRounding.NONE) == "ROUND(x+0.000000001,8)"
    assert rounded("x", near - Fraction(2, 10**6), 8, InterestRounding.NONE) == "ROUND(x-0.000000001,8)"


@pytest.mark.parametrize(
    ("scaled", "mode", "plain"),
    [
        (130208.33, InterestRounding.HALF_UP, True),
        (130208.5, InterestRounding.HALF_UP, False),
        (130208.0, InterestRounding.HALF_UP, True),
        (130208.0, InterestRounding.UP, False),
        (130208.5, InterestRounding.DOWN, True),
        (-0.5, InterestRounding.HALF_EVEN, False),
    ],
)
def test_which_figures_are_far_from_a_tie(scaled: float, mode: InterestRounding, plain: bool) -> None:
    assert are_plain([scaled], mode) == [plain]
