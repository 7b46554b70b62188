"""Annual rates, decided for a whole column at once, because `6.25` and `0.0625` need each other.

A cell formatted as percent, and a text with a percent sign, means what it shows. A plain number is
read by its column; in a column that mixes percentages and fractions, small ones are fractions, those
of 1 or more percentages, and what lies between is asked for.
"""

import re
import unicodedata
from collections.abc import Callable, Iterable, Mapping
from dataclasses import dataclass
from decimal import Decimal
from enum import Enum, auto
from typing import TypeAlias

from tenorbook.basis.problem import Severity
from tenorbook.read.files.grid import Cell, Kind, plain
from tenorbook.read.values.numbers import clean, signed_number
from tenorbook.read.values.reading import (
    Reading,
    Remark,
    Rules,
    Unreadable,
    number_of,
    refuse_valueless,
    warn,
)

_RATE = "enter it with its percent sign, such as 6.25%"
_SUFFIX = re.compile(
    r"(%|percent\b|pct\b)\.?( ?(p\. ?a\.?|per annum|per year|a year|annually|yearly))?$", re.IGNORECASE
)
_YEARLY = re.compile(r" ?(p\. ?a\.?|per annum|per year|a year)$", re.IGNORECASE)
_MIXED_NUMBER = re.compile(r"(-?)(?:(\d+)[ -])?(\d+) ?/ ?(\d+)$")
_HUNDRED = Decimal(100)
_SURE_FRACTION = Decimal("0.3")


class Style(Enum):
    """What plain numbers of a column are."""

    PERCENT = auto()
    FRACTION = auto()
    MIXED = auto()


@dataclass(frozen=True, slots=True)
class RateColumn:
    """A column of rates, read.

    Attributes:
        style: what its plain numbers are.
        readings: row -> the rate as a fraction, or why it cannot be one.
        plain: row -> the plain number that stood there, for rows of a mixed column whose reading
            rests on its size alone.
    """

    style: Style
    readings: Mapping[int, Reading[Decimal] | Unreadable]
    plain: Mapping[int, Decimal]


Confirm: TypeAlias = Callable[[int, Decimal], tuple[bool, bool]]
"""For a row and its plain number: whether the note's payment fits it as a percentage, and as a fraction."""


def read_rates(cells: Iterable[Cell], rules: Rules, *, header_percent: bool, confirm: Confirm) -> RateColumn:
    """All rates of a column.

    Args:
        cells: the cells that are not blank, one a row.
        rules: of the book.
        header_percent: the header says that plain numbers are percentages.
        confirm: whether the note's payment reproduces either reading; asked for mixed columns only.
    """
    shown: dict[int, Reading[Decimal] | Unreadable] = {}
    bare: dict[int, Decimal] = {}
    for cell in cells:
        try:
            value, is_plain = _stored(cell, rules)
        except Unreadable as fault:
            shown[cell.row] = fault
            continue
        if is_plain:
            bare[cell.row] = value
        else:
            shown[cell.row] = Reading(value)
    style = _style(bare.values(), header_percent)
    for row, number in bare.items():
        shown[row] = _by_column(row, number, style, header_percent, confirm)
    readings = {row: _in_range(reading) for row, reading in shown.items()}
    return RateColumn(style, readings, bare if style is Style.MIXED else {})


def _stored(cell: Cell, rules: Rules) -> tuple[Decimal, bool]:
    """What a cell says, and whether it is a plain number that its column must explain."""
    refuse_valueless(cell)
    number = number_of(cell)
    if number is not None:
        return number, cell.kind is Kind.NUMBER and number != 0
    if not cell.text:
        raise Unreadable("is not a rate", _RATE)
    text = clean(_spelled_fractions(cell.text))
    suffix = _SUFFIX.search(text)
    if suffix:
        return _number(text[: suffix.start()].strip(), rules) / _HUNDRED, False
    value = _number(_YEARLY.sub("", text), rules)
    return value, value != 0


def _number(text: str, rules: Rules) -> Decimal:
    """A decimal number or a mixed one: `6.25`, `6 1/4`, `1/4`."""
    mixed = _MIXED_NUMBER.match(text)
    if mixed:
        return _mixed(mixed)
    try:
        return signed_number(text, rules)
    except Unreadable as fault:
        remedy = fault.remedy if "Decimal mark" in fault.remedy else _RATE
        raise Unreadable("is not a rate" if remedy is _RATE else fault.problem, remedy) from fault


def _mixed(match: re.Match[str]) -> Decimal:
    sign, whole, above, below = match.groups()
    if int(below) == 0:
        raise Unreadable("is not a rate", _RATE)
    value = Decimal(whole or 0) + Decimal(above) / Decimal(below)
    if (value - Decimal(whole or 0)) * int(below) != int(above):
        raise Unreadable("is not exact as a decimal", _RATE)
    return -value if sign else value


def _spelled_fractions(text: str) -> str:
    """Signs such as one quarter written out, or compatibility forms would make 6 1/4 into 61/4."""
    return "".join(
        f" {unicodedata.normalize('NFKC', c).replace(chr(0x2044), '/')}"
        if unicodedata.decomposition(c).startswith("<fraction>")
        else c
        for c in text.replace(chr(0x2044), "/")
    )


def _style(numbers: Iterable[Decimal], header_percent: bool) -> Style:
    values = list(numbers)
    if header_percent or (values and all(value >= 1 for value in values)):
        return Style.PERCENT
    return Style.FRACTION if all(value < 1 for value in values) else Style.MIXED


def _by_column(
    row: int, number: Decimal, style: Style, header_percent: bool, confirm: Confirm
) -> Reading[Decimal] | Unreadable:
    """A plain number as its column reads it."""
    match style:
        case Style.PERCENT if header_percent:
            doubtful = warn(f"is read as {plain(number)}%, because the header says percent", _RATE)
            return Reading(number / _HUNDRED, (doubtful,) if 0 < number < _SURE_FRACTION else ())
        case Style.PERCENT:
            return Reading(number / _HUNDRED, (_column_note("percentages: 6.25 is 6.25%"),))
        case Style.FRACTION:
            return Reading(number, (_column_note("fractions: 0.0625 is 6.25%"),))
        case Style.MIXED:
            return _by_size(number, *confirm(row, number))


def _column_note(reading: str) -> Remark:
    return Remark(Severity.NOTE, f"is a column of plain numbers, read as {reading}", "", once=True)


def _by_size(number: Decimal, fits_percent: bool, fits_fraction: bool) -> Reading[Decimal] | Unreadable:
    """A plain number of a mixed column, by its size, unless the note's payment says otherwise."""
    percent, fraction = f"{plain(number)}%", f"{plain(number * _HUNDRED)}%"
    by_size = number / _HUNDRED if number >= 1 else number if 0 < number < _SURE_FRACTION else None
    if fits_percent != fits_fraction:
        confirmed = number / _HUNDRED if fits_percent else number
        return _confirmed(confirmed, by_size, percent if fits_percent else fraction)
    if by_size is None:
        return Unreadable(f"could be {percent} or {fraction}", _RATE)
    shown = percent if number >= 1 else fraction
    text = f"is a plain number in a column that mixes percentages and fractions; it is read as {shown}"
    return Reading(by_size, (Remark(Severity.NOTE, text, _RATE),))


def _confirmed(rate: Decimal, by_size: Decimal | None, shown: str) -> Reading[Decimal]:
    """The one reading that gives the note's payment; a warning where its size alone said another."""
    if by_size is None or by_size == rate:
        text = f"is a plain number, read as {shown}; confirmed by the payment that the note gives"
        return Reading(rate, (Remark(Severity.NOTE, text),))
    text = f"is a plain number, read as {shown}, because only that gives the note's payment"
    return Reading(rate, (warn(text, _RATE),))


def _in_range(reading: Reading[Decimal] | Unreadable) -> Reading[Decimal] | Unreadable:
    """The limits of what can be a rate, and of what is usual."""
    if isinstance(reading, Unreadable):
        return reading
    rate, shown = reading.value, f"{plain(reading.value * _HUNDRED)}%"
    if rate <= -1 or rate > 10:
        return Unreadable(f"is {shown}, which cannot be", "enter a rate above -100% and up to 1,000%")
    doubt = "is below 0" if rate < 0 else "is above 36%" if rate > Decimal("0.36") else ""
    if not doubt:
        return reading
    return Reading(
        rate, (*reading.remarks, warn(f"is {shown}, which {doubt}", "see that it is what the note says"))
    )
