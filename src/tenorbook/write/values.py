"""Typed values as the numbers a cell stores; the only place where an exact figure becomes a double."""

from collections.abc import Sequence
from datetime import date, datetime
from decimal import Decimal
from typing import Any

from tenorbook.tables.table import Column, Role
from tenorbook.write.cells import FIRST_SERIAL_DATE, serial


def amount_text(units: int, digits: int) -> str:
    """An amount in units of 10^-digits as the shortest text of the double nearest to it."""
    return repr(units / 10**digits) if digits else str(units)


def amount_texts(units: Sequence[int | None], digits: int) -> list[str | None]:
    """A column of amounts; see `amount_text`."""
    if not digits:
        return [None if value is None else str(value) for value in units]
    scale = 10**digits
    return [None if value is None else repr(value / scale) for value in units]


def column_texts(column: Column) -> list[str | None]:
    """The stored values of a numeric column as text; `None` for what is not a number."""
    if column.is_amount and column.row_digits is not None:
        pairs = zip(column.values, column.row_digits, strict=True)
        return [None if value is None else amount_text(value, digits) for value, digits in pairs]
    if column.is_amount:
        return amount_texts(column.values, column.digits)
    if column.role is Role.RATE:
        texts = {rate: number_text(rate) for rate in set(column.values)}
        return [texts[rate] for rate in column.values]
    if column.role is Role.DATE and min(filter(None, column.values), default=date.max) >= FIRST_SERIAL_DATE:
        return [None if value is None else str(serial(value)) for value in column.values]
    return [number_text(value) for value in column.values]


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
