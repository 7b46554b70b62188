"""The level payment: present value over the sum of discount factors, to eighty digits, then rounded once."""

from __future__ import annotations

from decimal import Decimal, localcontext
from fractions import Fraction

from .money import PaymentRounding


def to_decimal(value: Fraction) -> Decimal:
    """In the precision of the surrounding context."""
    return Decimal(value.numerator) / Decimal(value.denominator)


def level_payment(present_value: int, left: int, factors: list[Fraction], rounding: PaymentRounding) -> int:
    """The payment that, made after each of `factors`, takes `present_value` down to `left` with the last."""
    with localcontext() as context:
        context.prec = 80
        discount, annuity = Decimal(1), Decimal(0)
        for factor in factors:
            discount /= 1 + to_decimal(factor)
            annuity += discount
        payment = (Decimal(present_value) - Decimal(left) * discount) / annuity
    return rounding.apply(payment)


def level_principal(balance: int, left: int, payments: int, rounding: PaymentRounding) -> int:
    """Equal parts of the principal, all but `left`."""
    with localcontext() as context:
        context.prec = 80
        part = Decimal(balance - left) / Decimal(payments)
    return rounding.apply(part)
