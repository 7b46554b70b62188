"""Rounding of exact quotients to integers: the only place where a figure loses anything.

All functions take integers (or exact fractions of them) and return integers; nothing passes through a
binary float.
"""

from decimal import ROUND_CEILING, ROUND_FLOOR, ROUND_HALF_UP, Context, Decimal
from fractions import Fraction

from tenorbook.basis.conventions import InterestRounding, PaymentRounding

_SNAP = Context(prec=30)
_MODES = {
    PaymentRounding.NEAREST.value: ROUND_HALF_UP,
    PaymentRounding.UP.value: ROUND_CEILING,
    PaymentRounding.DOWN.value: ROUND_FLOOR,
}


def divide(numerator: int, denominator: int, rounding: InterestRounding) -> int:
    """The quotient of two integers, rounded to an integer.

    Args:
        numerator: any integer.
        denominator: a positive integer.
        rounding: half away from zero, half to even, down (toward zero) or up (away from zero);
            `none` rounds half away from zero, in whatever unit the caller has scaled to.
    """
    sign = -1 if numerator < 0 else 1
    whole, rest = divmod(abs(numerator), denominator)
    return sign * (whole + _carry(whole, rest, denominator, rounding))


def _carry(whole: int, rest: int, denominator: int, rounding: InterestRounding) -> int:
    """1 if the remainder carries the quotient to the next integer away from zero, else 0."""
    match rounding:
        case InterestRounding.DOWN:
            return 0
        case InterestRounding.UP:
            return int(rest > 0)
        case InterestRounding.HALF_EVEN if 2 * rest == denominator:
            return whole % 2
        case _:
            return int(2 * rest >= denominator)


def round_fraction(value: Fraction, rounding: InterestRounding) -> int:
    """An exact fraction rounded to an integer; see `divide`."""
    return divide(value.numerator, value.denominator, rounding)


def round_payment(amount: Decimal, rounding: PaymentRounding, step: int) -> int:
    """A solved payment, in minor units with many digits, rounded to a multiple of `step` minor units.

    The amount comes from arithmetic with 50 digits; it is first cut to 30 significant digits, so that
    a payment that is exactly 100.00 is not pushed to 100.01 by the noise of the last place.
    """
    steps = _SNAP.divide(_SNAP.plus(amount), Decimal(step))
    return int(steps.to_integral_value(_MODES[rounding.value])) * step
