"""Rounding, as a spreadsheet formula that comes to the exact figure.

The engine rounds an exact number; a spreadsheet rounds a double, with a little kindness of its own
towards ties. Far from a tie both agree. Near one, the same formula is written in a sturdier form, which
first rounds the noise away. Which form is needed is decided here, from the exact number.
"""

from collections.abc import Iterable
from fractions import Fraction

from tenorbook.basis.conventions import InterestRounding
from tenorbook.basis.rounding import round_fraction

_HALF = Fraction(1, 2)
_NOISE = Fraction(4, 10**15)
"""Relative error of a product of a few doubles, and of a spreadsheet's own rounding."""

_PRE_ROUNDING = (6, 4, 8, 7, 5, 3, 9)
"""Digits beyond the rounding's own at which noise is rounded away, in the order they are tried."""


def rounded(text: str, exact: Fraction, digits: int, rounding: InterestRounding) -> str:
    """The formula that rounds an expression.

    Args:
        text: the expression.
        exact: what it is exactly, in units of 10^-digits.
        digits: of the result.
        rounding: how.
    """
    if rounding in (InterestRounding.HALF_UP, InterestRounding.NONE):
        return _nearest(text, exact, digits)
    beyond = next((p for p in _PRE_ROUNDING if _holds(exact, p, rounding)), _PRE_ROUNDING[0])
    if rounding is InterestRounding.HALF_EVEN:
        return _half_even(text, digits, beyond)
    function = "ROUNDDOWN" if rounding is InterestRounding.DOWN else "ROUNDUP"
    return f"{function}(ROUND({text},{digits + beyond}),{digits})"


def are_plain(scaled: Iterable[float], rounding: InterestRounding) -> list[bool]:
    """Whether figures are so far from a tie that the ordinary form of the formula is right.

    A quick test for long columns; `rounded` settles the few that fail it.

    Args:
        scaled: the unrounded figures in units of the last digit, as doubles.
        rounding: how they are rounded.
    """
    if rounding in (InterestRounding.DOWN, InterestRounding.UP):
        return [abs(x % 1.0 - 0.5) < 0.5 - 2e-6 - abs(x) * 1e-14 for x in scaled]
    return [abs(x % 1.0 - 0.5) > 2e-6 + abs(x) * 1e-14 for x in scaled]


def ordinary(text: str, digits: int, rounding: InterestRounding) -> str:
    """The ordinary form of the formula, right wherever `are_plain`."""
    return rounded(text, Fraction(1, 4), digits, rounding)


def _nearest(text: str, exact: Fraction, digits: int) -> str:
    """To the nearest, half away from zero."""
    noise = abs(exact) * _NOISE
    if abs(abs(exact) % 1 - _HALF) > noise:
        return f"ROUND({text},{digits})"
    for beyond in _PRE_ROUNDING:
        if _holds(exact, beyond, InterestRounding.HALF_UP):
            return f"ROUND(ROUND({text},{digits + beyond}),{digits})"
    return f"ROUND({text}{_nudge(exact, digits)},{digits})"


def _nudge(exact: Fraction, digits: int) -> str:
    """A tenth of the last digit, away from the tie, where a double holds no digits to spare."""
    up = round_fraction(exact, InterestRounding.HALF_UP) > exact
    return f"{'+' if up else '-'}0.{'0' * digits}1"


def _half_even(text: str, digits: int, beyond: int) -> str:
    """To the nearest; at a tie twice the rounded half, which is even."""
    scale, half = 10**digits, Fraction(10**digits, 2)
    tie = f"MOD(ROUND({text}*{scale},{beyond}),1)=0.5" if digits else f"MOD(ROUND({text},{beyond}),1)=0.5"
    even = f"2*ROUND({text}*{half},0)/{scale}" if digits else f"2*ROUND({text}/2,0)"
    return f"IF({tie},{even},ROUND({text},{digits}))"


def _holds(exact: Fraction, beyond: int, rounding: InterestRounding) -> bool:
    """Whether rounding to `beyond` more digits first is safe and changes nothing."""
    scaled = exact * 10**beyond
    noise = abs(scaled) * _NOISE
    if abs(abs(scaled) % 1 - _HALF) <= noise or noise >= _HALF:
        return False
    first = Fraction(round_fraction(scaled, InterestRounding.HALF_UP), 10**beyond)
    return round_fraction(first, rounding) == round_fraction(exact, rounding)
