"""Where a loan stands on a date: balance, accrued interest, and what is due within a year."""

from bisect import bisect_right
from dataclasses import dataclass
from datetime import date, timedelta

from tenorbook.basis.conventions import Frequency
from tenorbook.calendar.due_dates import DueDates
from tenorbook.schedule.accrued import accrued_interest
from tenorbook.schedule.ledger import Schedule


@dataclass(frozen=True, slots=True)
class Position:
    """A loan on a date; amounts in the ledger's unit.

    Attributes:
        as_of: the date; all its events have happened.
        balance: principal owed.
        accrued_interest: run since interest was last posted, rounded once; negative where interest
            was paid in advance. The as-of day counts when `counted`.
        due_within_12_months: scheduled principal due after the date and up to the same day a year on.
        due_after_12_months: the rest of the balance.
    """

    as_of: date
    balance: int
    accrued_interest: int
    due_within_12_months: int
    due_after_12_months: int


def position(schedule: Schedule, as_of: date, counted: bool = True) -> Position:
    """The position of a loan on a date, by its contract schedule.

    Args:
        schedule: of the loan.
        as_of: after that day's events.
        counted: whether the as-of day itself accrues (conventions, section 8).
    """
    reached = bisect_right(schedule.date, as_of)
    if not reached:
        return Position(as_of, 0, 0, 0, 0)
    balance = schedule.closing[reached - 1]
    year_on = DueDates.after(as_of, Frequency.YEARLY)[1]
    within = bisect_right(schedule.date, year_on)
    due = sum(schedule.principal[reached:within]) + sum(schedule.extra[reached:within])
    until = as_of + timedelta(1) if counted else as_of
    return Position(as_of, balance, accrued_interest(schedule, until, not counted), due, balance - due)
