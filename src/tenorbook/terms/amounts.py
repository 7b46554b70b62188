"""Amounts as entered, in currency units, as integers of the ledger's unit."""

from dataclasses import dataclass
from decimal import Decimal

from tenorbook.basis.money import CARRIED_DIGITS, to_minor
from tenorbook.basis.problem import Place
from tenorbook.terms.findings import Findings

LARGEST = Decimal(10) ** 15
"""Largest amount in currency units: beyond it a spreadsheet cell no longer shows every cent."""


@dataclass(frozen=True, slots=True)
class Ledger:
    """The unit of a loan's amounts.

    Attributes:
        currency: ISO 4217 code, for messages.
        currency_digits: digits of the minor unit.
        carried: whether interest is carried to a millionth of a minor unit.
    """

    currency: str
    currency_digits: int
    carried: bool

    @property
    def minor_unit(self) -> int:
        """One minor unit of the currency in the ledger's unit."""
        return 10**CARRIED_DIGITS if self.carried else 1

    @property
    def digits(self) -> int:
        """Digits after the decimal point of the ledger's unit."""
        return self.currency_digits + (CARRIED_DIGITS if self.carried else 0)

    def amount(self, value: Decimal, place: Place, findings: Findings) -> int | None:
        """An amount in the ledger's unit, or `None` after an error.

        Raises:
            TypeError: the value is a float.
        """
        if isinstance(value, Decimal) and not (value.is_finite() and abs(value) < LARGEST):
            findings.error_at(place, f"{value} is too large an amount", "correct the amount")
            return None
        return self._in_unit(value, self.currency_digits, place, findings)

    def step(self, value: Decimal, place: Place, findings: Findings) -> int | None:
        """A rounding step in the ledger's unit; where interest is carried it may be as fine as that."""
        return self._in_unit(value, self.digits, place, findings)

    def _in_unit(self, value: Decimal, digits: int, place: Place, findings: Findings) -> int | None:
        try:
            scale: int = 10 ** (self.digits - digits)
            return to_minor(value, digits) * scale
        except ValueError:
            findings.error_at(
                place,
                f"{value} has more decimals than {self.currency}, which has {self.currency_digits}",
                "round the amount as the note states it",
            )
            return None
