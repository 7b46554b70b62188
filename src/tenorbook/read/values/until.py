"""When a repeating extra payment ends: a date, or how many times it is paid."""

from datetime import date

from tenorbook.read.files.grid import Cell
from tenorbook.read.spellings import tidy
from tenorbook.read.values.dates import day
from tenorbook.read.values.numbers import count
from tenorbook.read.values.reading import Reading, Rules, Unreadable, number_of

_UNTIL = "enter the last date, or how many times it is paid, or leave it blank"
_MOST = 2_600


def until(cell: Cell, rules: Rules) -> Reading[date | int]:
    """The last day (inclusive) or a count; a plain number is a count.

    Raises:
        Unreadable: neither, or a text date with two readings.
    """
    if number_of(cell) is None and not tidy(cell.text).isdecimal():
        reading = day(cell, rules)
        return Reading(reading.value, reading.remarks)
    times = count(cell, rules).value
    if not 0 < times <= _MOST:
        raise Unreadable("is no number of payments", _UNTIL)
    return Reading(times)
