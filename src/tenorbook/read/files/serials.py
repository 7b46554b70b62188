"""Days as spreadsheets store them."""

import re
from datetime import date, timedelta

_EPOCH_1900 = date(1899, 12, 30)
_EPOCH_1904 = date(1904, 1, 1)
_FIRST_SURE_SERIAL = 61
"""1 March 1900. Serials below count a 29 February 1900 that never was, and blanks are exported as 0."""
_LAST_SERIAL = 2_958_465
"""31 December 9999."""
_HALF_SECOND = 0.5 / 86_400
_ISO = re.compile(r"(\d{4})-(\d{2})-(\d{2})(?:T[\d:.]*Z?)?$")


def serial_date(stored: str, *, from_1904: bool) -> date | None:
    """The day of a stored serial number, its time of day left off; `None` if it is no plausible date.

    Args:
        stored: the number as the file has it.
        from_1904: the workbook counts from 1 January 1904 instead of 30 December 1899.
    """
    try:
        days = int(float(stored) + _HALF_SECOND)
    except (ValueError, OverflowError):
        return None
    epoch, first = (_EPOCH_1904, 1) if from_1904 else (_EPOCH_1900, _FIRST_SURE_SERIAL)
    if not first <= days <= _LAST_SERIAL - (epoch - _EPOCH_1900).days:
        return None
    return epoch + timedelta(days=days)


def text_day(stored: str) -> date | None:
    """The day of an ISO date (with or without a time) in a file's own notation."""
    match = _ISO.match(stored.strip())
    if match is None:
        return None
    try:
        return date(int(match[1]), int(match[2]), int(match[3]))
    except ValueError:
        return None
