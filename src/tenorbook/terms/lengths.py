"""A length of time as a number of payments."""

from datetime import date, timedelta

from tenorbook.basis.conventions import Frequency
from tenorbook.calendar.due_dates import DueDates
from tenorbook.terms.loan import Length, LengthUnit


def payments_in(length: Length, frequency: Frequency) -> int | None:
    """How many payments of a frequency make up a length; `None` when it is no whole number.

    `30 years` monthly is 360, `1 year` every 2 weeks is 26, `26 weeks` monthly is `None`.
    """
    match length.unit:
        case LengthUnit.PAYMENTS:
            return length.count
        case LengthUnit.MONTHS:
            return _whole(length.count * frequency.per_year, 12)
        case LengthUnit.WEEKS:
            return _whole(7 * length.count, frequency.days)
        case LengthUnit.DAYS:
            return _whole(length.count, frequency.days)


def _whole(amount: int, each: int) -> int | None:
    return amount // each if each and amount % each == 0 else None


def date_after(start: date, length: Length) -> date | None:
    """The date a length after `start`, months keeping its day number; `None` for a number of payments."""
    match length.unit:
        case LengthUnit.PAYMENTS:
            return None
        case LengthUnit.MONTHS:
            return DueDates.after(start, Frequency.MONTHLY)[length.count]
        case LengthUnit.WEEKS:
            return start + timedelta(7 * length.count)
        case LengthUnit.DAYS:
            return start + timedelta(length.count)
