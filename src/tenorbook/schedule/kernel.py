"""The recurrence: balance x factor, rounded once a period, and what the payment leaves.

Plain integers throughout. A period is given as its growth `1 + factor`, a numerator over a common
denominator, so interest is exact before it is rounded. These loops are where a long schedule spends
its time; everything out of the ordinary is handled by `walk`.
"""

from collections.abc import Sequence
from operator import sub
from typing import NamedTuple

from tenorbook.basis.conventions import InterestRounding
from tenorbook.basis.rounding import divide

_NEAREST = (InterestRounding.HALF_UP, InterestRounding.NONE)


class Run(NamedTuple):
    """Columns of consecutive periods, in the ledger's unit.

    Attributes:
        interest: rounded, of each period.
        principal: repaid with each payment; negative where it does not cover the interest.
        payment: interest + principal.
        opening: balance before each payment.
        closing: balance after it.
    """

    interest: list[int]
    principal: list[int]
    payment: list[int]
    opening: list[int]
    closing: list[int]

    def first(self, count: int) -> "Run":
        """The first periods of a run."""
        return Run(*(column[:count] for column in self))


def with_last_payment(run: Run, growth: int, denominator: int, rounding: InterestRounding) -> Run:
    """A run and one more period, whose payment repays what is left."""
    left = run.closing[-1]
    due = divide(left * (growth - denominator), denominator, rounding)
    last = ([due], [left], [due + left], [left], [0])
    return Run(*(column + end for column, end in zip(run, last, strict=True)))


def level_payment_run(
    balance: int,
    payment: int,
    growths: Sequence[int],
    denominator: int,
    rounding: InterestRounding,
) -> Run:
    """A run of equal payments, one a period.

    Args:
        balance: before the run.
        payment: each payment; interest first, the rest is principal.
        growths: 1 + factor of each period, over `denominator`.
        denominator: positive.
        rounding: of each period's interest.

    Returns:
        The run. It does not stop at zero: closings that are not positive, and all after them, are for
        the caller to cut off.
    """
    if rounding in _NEAREST and balance >= 0 and min(growths, default=denominator) >= denominator:
        closing = _nearest(balance, payment, growths, denominator)
    else:
        closing = _rounded(balance, payment, growths, denominator, rounding)
    opening = [balance, *closing[:-1]]
    principal = list(map(sub, opening, closing))
    interest = [payment - part for part in principal]
    return Run(interest, principal, [payment] * len(closing), opening, closing)


def _nearest(balance: int, payment: int, growths: Sequence[int], denominator: int) -> list[int]:
    """Closing balances where nothing is negative.

    floor(balance x growth + 1/2) - payment, with the half and the payment brought over the same
    denominator. Its whole half serves an odd denominator too, which has no exact half to decide.
    """
    shift = denominator // 2 - payment * denominator
    return [balance := (balance * growth + shift) // denominator for growth in growths]


def _rounded(
    balance: int, payment: int, growths: Sequence[int], denominator: int, rounding: InterestRounding
) -> list[int]:
    """Closing balances under any rounding and sign."""
    closing = []
    for growth in growths:
        balance += divide(balance * (growth - denominator), denominator, rounding) - payment
        closing.append(balance)
    return closing


def level_principal_run(
    balance: int,
    principal: int,
    growths: Sequence[int],
    denominator: int,
    rounding: InterestRounding,
) -> Run:
    """A run of equal principal parts (0: interest only), one a period; otherwise as `level_payment_run`."""
    count = len(growths)
    closing = [balance - principal * number for number in range(1, count + 1)]
    opening = [balance, *closing[:-1]]
    interest = [
        divide(before * (growth - denominator), denominator, rounding)
        for before, growth in zip(opening, growths, strict=True)
    ]
    payment = [principal + due for due in interest]
    return Run(interest, [principal] * count, payment, opening, closing)
