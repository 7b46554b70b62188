"""Terms and amortization periods: a number of payments, or a duration."""

import re
from decimal import Decimal

from tenorbook.basis.problem import Severity
from tenorbook.read.files.grid import Cell, Kind
from tenorbook.read.spellings import section
from tenorbook.read.values.numbers import clean, signed_number
from tenorbook.read.values.reading import Reading, Remark, Rules, Unreadable, number_of
from tenorbook.terms.loan import Length, LengthUnit

_LENGTH = "enter a number of payments, or a duration such as 30 years or 84 months"
_PART = re.compile(r"(\d+(?:[.,]\d+)?) ?-?([a-z]+)\.?(?:,? and |[, ]+)?", re.IGNORECASE)
_MONTHS = {"years": 12, "quarters": 3}
_QUOTED = re.compile(r'"([^"]*)"')


def length(cell: Cell, rules: Rules) -> Reading[Length]:
    """A length of time: `120`, `30 years`, `7y 6m`, `26 weeks`, `10 payments`.

    A plain number counts payments, unless the column's header or the cell's own number format says
    months, years or weeks.

    Raises:
        Unreadable: not a length, not a whole number of its unit, or not positive.
    """
    number = number_of(cell)
    if cell.kind is Kind.PERCENT or (number is None and not cell.text):
        raise Unreadable("is not a length of time", _LENGTH)
    if number is not None:
        return _plain_number(number, _format_unit(cell.number_format), rules)
    text = clean(cell.text)
    parts = _PART.findall(text)
    if not parts or _PART.sub("", text).strip():
        return _plain_number(_text_number(text, rules), "", rules)
    return Reading(_added(parts, rules))


def _text_number(text: str, rules: Rules) -> Decimal:
    try:
        return signed_number(text, rules)
    except Unreadable as fault:
        raise Unreadable("is not a length of time", _LENGTH) from fault


def _plain_number(number: Decimal, shown_unit: str, rules: Rules) -> Reading[Length]:
    unit = shown_unit or rules.time or LengthUnit.PAYMENTS
    if unit == LengthUnit.PAYMENTS:
        return Reading(_whole(number, LengthUnit.PAYMENTS))
    says = "the cell's number format" if shown_unit else "the header"
    remark = Remark(Severity.NOTE, f"is a column of plain numbers, read as {unit}, as {says} says", once=True)
    return Reading(_in_unit(number, unit), (remark,))


def _format_unit(number_format: str) -> str:
    """The unit that a number format adds on the screen: `0" years"` shows 30 as 30 years."""
    for quoted in _QUOTED.findall(number_format):
        unit = _unit(quoted.strip())
        if unit:
            return unit
    return ""


def _unit(word: str) -> str:
    lowered = word.casefold().rstrip(".")
    return next((unit for unit, words in section("lengths").items() if lowered in words), "")


def _added(parts: list[tuple[str, str]], rules: Rules) -> Length:
    """`7y 6m` as one length: years and months add up to months, other units stand alone."""
    lengths = []
    for digits, word in parts:
        unit = _unit(word)
        if not unit:
            raise Unreadable("is not a length of time", _LENGTH)
        lengths.append(_in_unit(_text_number(digits, rules), unit, may_be_zero=len(parts) > 1))
    units = {one.unit for one in lengths}
    if len(units) > 1 or (len(lengths) > 1 and units != {LengthUnit.MONTHS}):
        raise Unreadable("mixes units that do not add up", _LENGTH)
    return _whole(Decimal(sum(one.count for one in lengths)), lengths[0].unit)


def _in_unit(number: Decimal, unit: str, *, may_be_zero: bool = False) -> Length:
    """Years and quarters become months; other units are kept."""
    if unit in _MONTHS:
        return _whole(number * _MONTHS[unit], LengthUnit.MONTHS, may_be_zero=may_be_zero)
    return _whole(number, LengthUnit(unit), may_be_zero=may_be_zero)


def _whole(number: Decimal, unit: LengthUnit, *, may_be_zero: bool = False) -> Length:
    if number != int(number):
        raise Unreadable(f"is not a whole number of {unit}", _LENGTH)
    if number < 0 or (number == 0 and not may_be_zero):
        raise Unreadable("is negative" if number < 0 else "is 0", _LENGTH)
    return Length(int(number), unit)
