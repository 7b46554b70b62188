"""The recurrence: balance x factor, rounded once a period, and what the payment leaves.

Plain integers throughout. A factor is `numerator / denominator`, so interest is exact before it is
rounded. These loops are where a long schedule spends its time; everything out of the ordinary is
handled by `walk`.
"""

from collections.abc import Sequence
from itertools import pairwise

from tenorbook.basis.conventions import InterestRounding
from tenorbook.basis.rounding import divide

NEAREST = (InterestRounding.HALF_UP, InterestRounding.NONE)


def level_payment_run(
    balance: int,
    payment: int,
    numerators: Sequence[int],
    denominator: int,
    rounding: InterestRounding,
) -> tuple[list[int], list[int]]:
    """A run of equal payments, one a period.

    Args:
        balance: before the run.
        payment: each payment; interest first, the rest is principal (negative if it does not cover it).
        numerators: the factor of each period over `denominator`.
        denominator: positive.
        rounding: of each period's interest.

    Returns:
        Interest and closing balance of each period. The run does not stop at zero: closings that are
        not positive, and all after them, are for the caller to cut off.
    """
    if rounding in NEAREST and balance >= 0 and min(numerators, default=0) >= 0:
        closings = _nearest(balance, payment, numerators, denominator)
        interest = [after - before + payment for before, after in pairwise([balance, *closings])]
        return interest, closings
    interest, closings = [], []
    for numerator in numerators:
        due = divide(balance * numerator, denominator, rounding)
        balance += due - payment
        interest.append(due)
        closings.append(balance)
    return interest, closings


def _nearest(balance: int, payment: int, numerators: Sequence[int], denominator: int) -> list[int]:
    """Closing balances where nothing is negative: floor(x + 1/2) is half away from zero."""
    closings: list[int] = []
    append = closings.append
    double = 2 * denominator
    for numerator in numerators:
        balance += (2 * balance * numerator + denominator) // double - payment
        append(balance)
    return closings


def level_principal_run(
    balance: int,
    principal: int,
    numerators: Sequence[int],
    denominator: int,
    rounding: InterestRounding,
) -> tuple[list[int], list[int]]:
    """A run of equal principal parts (0: interest only), one a period; otherwise as `level_payment_run`."""
    closings = [balance - principal * number for number in range(1, len(numerators) + 1)]
    openings = [balance, *closings[:-1]]
    interest = [
        divide(opening * numerator, denominator, rounding)
        for opening, numerator in zip(openings, numerators, strict=True)
    ]
    return interest, closings
