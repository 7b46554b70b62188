"""Does the note's payment reproduce a reading of its rate? Only to tell 6.25 from 0.0625 apart.

The two readings differ a hundredfold, so the plain annuity is enough; it is no figure of any schedule.
"""

from collections.abc import Mapping
from decimal import Decimal, localcontext

from tenorbook.basis.conventions import Frequency, Repayment, Timing
from tenorbook.read.values.reading import Reading
from tenorbook.terms.loan import Length, LengthUnit

_CLOSE = Decimal("0.01")
_UNITS_A_YEAR = {LengthUnit.MONTHS: Decimal(12), LengthUnit.WEEKS: Decimal(52), LengthUnit.DAYS: Decimal(365)}


def fits(values: Mapping[str, Reading[object]], number: Decimal) -> tuple[bool, bool]:
    """Whether the payment of a note fits its rate, read as a percentage and read as a fraction.

    Args:
        values: the other terms of the loan, by attribute; without principal, payment and a length
            neither reading is confirmed.
        number: the plain number in the rate's cell.
    """
    return _reproduces(values, number / 100), _reproduces(values, number)


def _reproduces(values: Mapping[str, Reading[object]], rate: Decimal) -> bool:
    found = {name: reading.value for name, reading in values.items()}
    principal, payment = found.get("principal"), found.get("payment")
    length = found.get("amortized_over") or found.get("term")
    frequency = found.get("frequency", Frequency.MONTHLY)
    if found.get("repayment", Repayment.LEVEL_PAYMENT) is not Repayment.LEVEL_PAYMENT:
        return False
    if not (isinstance(principal, Decimal) and isinstance(payment, Decimal)):
        return False
    if not (isinstance(length, Length) and isinstance(frequency, Frequency)) or rate <= 0:
        return False
    count = _payments(length, frequency)
    expected = _annuity(principal, rate / frequency.per_year, count)
    if found.get("timing") is Timing.ADVANCE:
        expected /= 1 + rate / frequency.per_year
    return abs(expected - payment) <= payment * _CLOSE


def _payments(length: Length, frequency: Frequency) -> Decimal:
    """How many payments fall in a length of time, about."""
    if length.unit is LengthUnit.PAYMENTS:
        return Decimal(length.count)
    return Decimal(length.count) * frequency.per_year / _UNITS_A_YEAR[length.unit]


def _annuity(principal: Decimal, periodic: Decimal, count: Decimal) -> Decimal:
    with localcontext(prec=30):
        return principal * periodic / (1 - (1 + periodic) ** -count)
