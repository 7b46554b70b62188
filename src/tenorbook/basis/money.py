"""Money as an integer count of minor units, and the one door in and out of it.

An amount inside the package is always an `int`: cents for USD, yen for JPY, fils for KWD. How many
decimal digits a currency has comes from ISO 4217. Floats are refused; they appear only where a
figure leaves for a spreadsheet cell or a frame.
"""

from decimal import Decimal
from functools import cache

CARRIED_DIGITS = 6
"""Digits kept beyond the minor unit when interest is carried unrounded (interest rounding `none`)."""


@cache
def currency_digits(code: str) -> int | None:
    """Digits after the decimal point of a currency, by ISO 4217; `None` if there is no such code.

    Units of account without a minor unit (gold, test codes) are not money a loan is kept in: `None`.
    """
    from iso4217 import Currency

    try:
        exponent = Currency(code).exponent
    except ValueError:
        return None
    return exponent if isinstance(exponent, int) else None


def to_minor(amount: Decimal | int, digits: int) -> int:
    """An amount in currency units as whole minor units.

    Raises:
        TypeError: `amount` is neither a Decimal nor an int (floats are refused).
        ValueError: the amount has more digits than the currency.
    """
    if not isinstance(amount, Decimal | int) or isinstance(amount, bool):
        raise TypeError(f"an amount must be a Decimal or an int, not {type(amount).__name__}")
    scaled = Decimal(amount).scaleb(digits)
    minor = int(scaled)
    if minor != scaled:
        raise ValueError(f"{amount} has more than {digits} digits after the decimal point")
    return minor


def to_decimal(minor: int, digits: int) -> Decimal:
    """Whole minor units as an exact decimal amount with exactly `digits` digits after the point."""
    return Decimal(minor).scaleb(-digits)


def to_text(minor: int, digits: int) -> str:
    """Whole minor units as plain decimal text with exactly `digits` digits: `-0.05`, `1234.50`."""
    if digits == 0:
        return str(minor)
    sign = "-" if minor < 0 else ""
    padded = str(abs(minor)).rjust(digits + 1, "0")
    return f"{sign}{padded[:-digits]}.{padded[-digits:]}"


def to_words(minor: int, digits: int) -> str:
    """Whole minor units as a sentence shows them, with thousands marks: `1,293,043.92`."""
    return f"{to_decimal(minor, digits):,f}"
