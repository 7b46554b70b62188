"""Rounding of exact amounts to whole units, and how many digits a currency has.

A unit is the smallest amount the loan's ledger keeps: a minor unit, or a millionth of one when interest is
not rounded. Amounts are Python integers of such units; what is not yet rounded is a `Fraction` of them.
"""

from __future__ import annotations

from dataclasses import dataclass
from decimal import ROUND_DOWN, ROUND_HALF_EVEN, ROUND_HALF_UP, ROUND_UP, Decimal, localcontext
from fractions import Fraction

# ISO 4217, the codes whose minor unit is not a hundredth
ZERO_DIGITS = "BIF CLP DJF GNF ISK JPY KMF KRW PYG RWF UGX UYI VND VUV XAF XOF XPF"
THREE_DIGITS = "BHD IQD JOD KWD LYD OMR TND"


def currency_digits(code: str) -> int:
    """Decimals of the currency."""
    if code in ZERO_DIGITS.split():
        return 0
    return 3 if code in THREE_DIGITS.split() else 2


def round_units(exact: Fraction, rule: str) -> int:
    """`exact` as a whole number of units by the loan's interest rounding; the rules mirror at zero."""
    sign = -1 if exact < 0 else 1
    whole, rest = divmod(abs(exact), 1)
    size = int(whole)
    if rule in ("half up", "none"):
        size += rest >= Fraction(1, 2)
    elif rule == "half even":
        size += rest > Fraction(1, 2) or (rest == Fraction(1, 2) and size % 2 == 1)
    elif rule == "up":
        size += rest > 0
    elif rule != "down":
        raise ValueError(f"interest rounding {rule!r}")
    return sign * size


@dataclass(frozen=True)
class PaymentRounding:
    """nearest / up / down to a step, given in units."""

    rule: str
    step: int

    def apply(self, exact: Decimal) -> int:
        """A multiple of the step. Digits past the 40th decimal are noise of the solution: dropped first."""
        modes = {"nearest": ROUND_HALF_UP, "up": ROUND_UP, "down": ROUND_DOWN}
        with localcontext() as context:
            context.prec = 120
            steps = (exact / self.step).quantize(Decimal(1).scaleb(-40), rounding=ROUND_HALF_EVEN)
            return int(steps.quantize(Decimal(1), rounding=modes[self.rule])) * self.step
