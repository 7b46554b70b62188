"""Typed values as the numbers a cell stores; the only place where an exact figure becomes a double."""

from collections.abc import Sequence
from datetime import date, datetime
from decimal import Decimal
from typing import Any

from tenorbook.tables.table import Column, Role
from tenorbook.write.cells import DAY_ZERO, FIRST_SERIAL_DATE, serial


def amount_text(units: int, digits: int) -> str:
    """An amount in units of 10^-digits as the decimal number it is."""
    return amount_texts((units,), digits)[0] or ""


def amount_texts(units: Sequence[int | None], digits: int) -> list[str | None]:
    """A column of amounts; see `amount_text`. The point is put into the text of each whole number, in half
    the time that a double's shortest text takes."""
    if None in units:
        return [None if each is None else amount_text(each, digits) for each in units]
    texts = map(str, units)
    if not digits:
        return list(texts)
    whole, scale = digits + 1, 10**digits
    return [
        text[:-digits] + "." + text[-digits:] if len(text) > whole else repr(int(text) / scale)
        for text in texts
    ]


def column_texts(column: Column) -> list[str | None]:
    """The stored values of a numeric column as text; `None` for what is not a number."""
    if column.is_amount and column.row_digits is not None:
        pairs = zip(column.values, column.row_digits, strict=True)
        return [None if value is None else amount_text(value, digits) for value, digits in pairs]
    if column.is_amount:
        return amount_texts(column.values, column.digits)
    values = column.values
    if column.role is Role.RATE:
        return _rate_texts(values)
    if column.role is Role.INTEGER:
        return [None if value is None else str(value) for value in values]
    if column.role is Role.DATE and min(filter(None, values), default=date.max) >= FIRST_SERIAL_DATE:
        return [None if value is None else str(value.toordinal() - DAY_ZERO) for value in values]
    return [number_text(value) for value in values]


def _rate_texts(rates: Sequence[Decimal | None]) -> list[str | None]:
    """A column of rates; most loans have one, and few have many."""
    if rates and rates.count(rates[0]) == len(rates):
        return [number_text(rates[0])] * len(rates)
    texts = {rate: number_text(rate) for rate in set(rates)}
    return [texts[rate] for rate in rates]


def number_text(value: Any) -> str | None:
    """A plain number, rate or date as a cell stores it; `None` for anything that is not a number."""
    match value:
        case bool() | None | str():
            return None
        case int():
            return str(value)
        case Decimal() if value.is_finite():
            return repr(float(value))
        case float() if value - value == 0:
            return repr(value)
        case datetime():
            return None
        case date() if value >= FIRST_SERIAL_DATE:
            return str(serial(value))
        case _:
            return None


def plain_text(value: Any) -> str:
    """What is not a number, as text: dates before March 1900 in ISO form, truth values as yes and no."""
    match value:
        case None:
            return ""
        case bool():
            return "yes" if value else "no"
        case datetime():
            return value.isoformat(sep=" ", timespec="minutes")
        case date():
            return value.isoformat()
        case _:
            return str(value)


def entry_text(value: Any, role: Role, digits: int) -> str | None:
    """The stored number of a single value; `None` for what is not a number."""
    if value is not None and role in (Role.AMOUNT, Role.BALANCE):
        return amount_text(value, digits)
    return None if role is Role.TEXT else number_text(value)
