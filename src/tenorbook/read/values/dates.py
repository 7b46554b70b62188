"""Dates: real ones, ISO text, words that settle themselves, and text in the book's day order.

A text with two readings is refused, never guessed; so is a year of two digits, which does not say its
century, and a day that its month does not have. Nothing is filled in from today's date.
"""

import re
from datetime import date, timedelta

from tenorbook.basis.problem import Severity
from tenorbook.read.files.grid import Cell, Kind
from tenorbook.read.spellings import month_number, tidy
from tenorbook.read.values.numbers import clean
from tenorbook.read.values.reading import Reading, Remark, Rules, Unreadable, number_of, warn
from tenorbook.terms.book import DayOrder

_DATE = "enter a date, such as 2026-01-31"
_TIME = r"(?:[T ]\d{1,2}:\d{2}(?::\d{2}(?:\.\d+)?)?(?: ?[AaPp][Mm])?Z?)?"
_YEAR_FIRST = re.compile(rf"(\d{{4}})([-/. ])(\d{{1,2}})\2(\d{{1,2}}){_TIME}$")
_COMPACT = re.compile(r"(\d{4})(\d{2})(\d{2})$")
_NUMERIC = re.compile(rf"(\d{{1,2}})([-/. ])(\d{{1,2}})\2(\d{{4}}){_TIME}$")
_SHORT_YEAR = re.compile(r"\d{1,2}([-/. ])(\d{1,2}|[A-Za-z]{3,9})\1'?\d{2}$")
_DAY_WORD = re.compile(
    rf"(\d{{1,2}})(?:st|nd|rd|th)?[ ./-]*(?:of )?([a-z]{{3,9}})\.?[ ,./-]*(\d{{4}}){_TIME}$",
    re.IGNORECASE,
)
_WORD_DAY = re.compile(
    rf"([a-z]{{3,9}})\.?[ -]*(\d{{1,2}})(?:st|nd|rd|th)?[ ,-]+(\d{{4}}){_TIME}$", re.IGNORECASE
)
_FIRST_YEAR, _LAST_YEAR = 1900, 2200
_SERIALS = range(18_264, 91_313)
"""1950 to 2149, counted from 30 December 1899: whole numbers that a date format would show as dates."""


def day(cell: Cell, rules: Rules) -> Reading[date]:
    """The date of a cell.

    Raises:
        Unreadable: not a date, no day of the calendar, or a text that could be two dates.
    """
    if cell.kind is Kind.DATE and isinstance(cell.value, date):
        return Reading(_plausible(cell.value))
    number = number_of(cell)
    if number is not None:
        return _number_day(int(number) if number == int(number) and cell.kind is Kind.NUMBER else -1)
    if not cell.text:
        raise Unreadable("is not a date", _DATE)
    return Reading(_plausible(text_date(cell.text, rules.day_order)))


def text_date(text: str, order: DayOrder | None) -> date:
    """The date that a text shows.

    Raises:
        Unreadable: see `day`.
    """
    cleaned = clean(text)
    match = _YEAR_FIRST.match(cleaned) or _COMPACT.match(cleaned)
    if match:
        groups = match.groups()
        return _calendar(int(groups[0]), int(groups[-2]), int(groups[-1]))
    numeric = _NUMERIC.match(cleaned)
    if numeric:
        return _ordered(int(numeric[1]), int(numeric[3]), int(numeric[4]), order)
    return _worded(cleaned)


def _worded(text: str) -> date:
    """`31 Jan 2026`, `Jan 31, 2026`: the word says which number is the month."""
    day_first, word_first = _DAY_WORD.match(text), _WORD_DAY.match(text)
    if day_first:
        number, word, year = day_first.groups()
    elif word_first:
        word, number, year = word_first.groups()
    elif _SHORT_YEAR.match(text):
        raise Unreadable("has a year of two digits, which does not say its century", _DATE)
    else:
        raise Unreadable("is not a date", _DATE)
    month = month_number(word)
    if month is None:
        raise Unreadable("is not a date", _DATE)
    return _calendar(int(year), month, int(number))


def _ordered(first: int, second: int, year: int, order: DayOrder | None) -> date:
    """Two numbers and a year, by the book's day order; without one, only where a single reading is a date."""
    as_month_first, as_day_first = _try(year, first, second), _try(year, second, first)
    if order is DayOrder.MONTH_FIRST and as_month_first:
        return as_month_first
    if order is DayOrder.DAY_FIRST and as_day_first:
        return as_day_first
    readings = {reading for reading in (as_month_first, as_day_first) if reading}
    if not readings:
        raise Unreadable("is not a day of the calendar", _DATE)
    if order is not None and order is not DayOrder.YEAR_FIRST:
        raise Unreadable(f"is no date when read {order}, as Settings says", _DATE)
    if len(readings) > 1:
        both = " or ".join(reading.isoformat() for reading in (as_month_first, as_day_first) if reading)
        raise Unreadable(
            f"could be {both}", "set Day order on the sheet Settings, or enter the date as 2026-01-31"
        )
    return readings.pop()


def _try(year: int, month: int, number: int) -> date | None:
    try:
        return date(year, month, number)
    except ValueError:
        return None


def _calendar(year: int, month: int, number: int) -> date:
    found = _try(year, month, number)
    if found is None:
        raise Unreadable("is not a day of the calendar", _DATE)
    return found


def _plausible(found: date) -> date:
    if not _FIRST_YEAR <= found.year <= _LAST_YEAR:
        raise Unreadable(f"is in the year {found.year}", "look at the year")
    return found


def _number_day(number: int) -> Reading[date]:
    """A plain number in a date column: eight digits as written, or the day a date format would show."""
    compact = _COMPACT.match(str(number))
    if compact:
        found = _plausible(_calendar(*(int(part) for part in compact.groups())))
        text = f"is a plain number, read as the date {found.isoformat()}"
        return Reading(found, (Remark(Severity.NOTE, text),))
    if number not in _SERIALS:
        raise Unreadable("is not a date", _DATE)
    found = date(1899, 12, 30) + timedelta(days=number)
    text = f"is a plain number, read as the date {found.isoformat()} that a date format shows for it"
    return Reading(found, (warn(text, "format the cell as a date"),))


def month_and_day(cell: Cell, rules: Rules) -> tuple[int, int]:
    """The end of a fiscal year: a date (its year does not matter), `31 Dec`, `12/31` or `June`.

    A month alone is its last day (of February, the 28th).

    Raises:
        Unreadable: none of these, or two readings.
    """
    if cell.kind is Kind.DATE and isinstance(cell.value, date):
        return cell.value.month, cell.value.day
    text = tidy(cell.text)
    month = month_number(text)
    if month is not None:
        return month, (date(2027 + month // 12, month % 12 + 1, 1) - timedelta(days=1)).day
    found = _yearless(text, rules.day_order)
    if found is None:
        raise Unreadable("is not one day of the year", "enter it such as 31 Dec")
    return found.month, found.day


def _yearless(text: str, order: DayOrder | None) -> date | None:
    """A text date that may lack its year; any year will do that is no leap year."""
    for joined in (text, f"{text} 2027", f"{text}/2027", f"{text}.2027", f"{text}-2027", f"2027-{text}"):
        try:
            return text_date(joined, order)
        except Unreadable:
            continue
    return None
