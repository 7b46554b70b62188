"""What the loans of a workbook come to over time, by currency, worked out once for all its sheets."""

from bisect import bisect_right
from collections.abc import Sequence
from dataclasses import dataclass, field
from datetime import MAXYEAR, date, timedelta
from itertools import accumulate, pairwise, repeat

from tenorbook.basis.conventions import Frequency
from tenorbook.basis.money import currency_digits
from tenorbook.calendar.due_dates import DueDates
from tenorbook.reports.groups import Group, groups, ledger_digits, members, rescaled
from tenorbook.reports.result import LoanResult
from tenorbook.reports.words import day
from tenorbook.schedule.ledger import Schedule

_BANDS = 5
"""Bands of twelve months after the as-of date, and calendar years after its own; one more takes the rest."""

_MOST_CHARTED = 3
"""Groups that get a run-off of their own."""


@dataclass(frozen=True, slots=True)
class Band:
    """A stretch of time in which principal falls due.

    Attributes:
        header: in words.
        after: the day before its first.
        until: its last day; `None`: without end.
    """

    header: str
    after: date
    until: date | None


@dataclass(frozen=True, slots=True)
class Maturities:
    """The principal of a group's loans by when it falls due.

    Attributes:
        group: currency and side.
        digits: unit of the amounts.
        shown_digits: digits of the currency.
        loans: those that owe something on the as-of date.
        by_twelve_months: a list of amounts a loan, one for each band of twelve months.
        by_year: the same by calendar year.
    """

    group: Group
    digits: int
    shown_digits: int
    loans: tuple[LoanResult, ...]
    by_twelve_months: list[list[int]]
    by_year: list[list[int]]


@dataclass(frozen=True, slots=True)
class RunOff:
    """The loans of one group over time.

    Attributes:
        group: currency and side.
        digits: unit of the amounts.
        shown_digits: digits of the currency.
        months: the first of each month from the as-of date on.
        balance: owed at the end of each month.
        years: calendar years with payments.
        interest: paid in each year.
        principal: paid in each year, extra principal included.
    """

    group: Group
    digits: int
    shown_digits: int
    months: list[date] = field(default_factory=list)
    balance: list[int] = field(default_factory=list)
    years: list[int] = field(default_factory=list)
    interest: list[int] = field(default_factory=list)
    principal: list[int] = field(default_factory=list)


class Outlook:
    """The loans of a workbook over time.

    Args:
        as_of: the date of the book's figures.
        results: the loans.

    Attributes:
        as_of: the date of the book's figures.
        twelve_months: bands of twelve months after it; a band includes its last day.
        years: calendar years; the first is the rest of the as-of date's year.
        maturities: of each group that owes something.
        run_offs: of each of the main groups.
    """

    def __init__(self, as_of: date, results: Sequence[LoanResult]) -> None:
        self.as_of = as_of
        self.twelve_months = _twelve_months(as_of)
        self.years = _calendar_years(as_of)
        found = groups(results)
        all_maturities = (self._maturities(group, results) for group in found)
        self.maturities = [each for each in all_maturities if each.loans]
        self.run_offs = [_run_off(as_of, results, group) for group in found[:_MOST_CHARTED]]

    def _maturities(self, group: Group, results: Sequence[LoanResult]) -> Maturities:
        loans = [each for each in members(results, group) if each.position and each.position.balance]
        digits = ledger_digits(results, group.currency)
        return Maturities(
            group,
            digits,
            currency_digits(group.currency) or 0,
            tuple(loans),
            [_spread(each, digits, self.twelve_months) for each in loans],
            [_spread(each, digits, self.years) for each in loans],
        )


def _twelve_months(as_of: date) -> list[Band]:
    ends = DueDates.after(as_of, Frequency.YEARLY)
    stops = [as_of, *(ends[number] for number in range(1, _BANDS + 1))]
    bands = [Band(f"to {day(until)}", after, until) for after, until in pairwise(stops)]
    return [*bands, Band("thereafter", stops[-1], None)]


def _calendar_years(as_of: date) -> list[Band]:
    years = [as_of.year + number for number in range(_BANDS + 1)]
    stops = [as_of, *(date(year, 12, 31) for year in years)]
    headers = [f"rest of {years[0]}", *map(str, years[1:])]
    bands = [Band(header, *each) for header, each in zip(headers, pairwise(stops), strict=True)]
    return [*bands, Band("thereafter", stops[-1], None)]


def _spread(each: LoanResult, digits: int, bands: Sequence[Band]) -> list[int]:
    """Principal of one loan by band."""
    schedule = each.schedule
    if schedule is None:
        return [0] * len(bands)
    scale = rescaled(1, schedule.digits, digits)
    repaid = [0, *accumulate(map(int.__add__, schedule.principal, schedule.extra))]
    stops = [bands[0].after, *(band.until for band in bands)]
    reached = [repaid[-1] if stop is None else repaid[bisect_right(schedule.date, stop)] for stop in stops]
    return [(upper - lower) * scale for lower, upper in pairwise(reached)]


def _run_off(as_of: date, results: Sequence[LoanResult], group: Group) -> RunOff:
    digits = ledger_digits(results, group.currency)
    found = RunOff(group, digits, currency_digits(group.currency) or 0)
    schedules = [each.schedule for each in members(results, group) if each.schedule is not None]
    _fill_months(found, as_of, schedules)
    paid: dict[int, list[int]] = {}
    for schedule in schedules:
        _add_paid(schedule, digits, paid)
    for year in sorted(paid):
        found.years.append(year)
        found.interest.append(paid[year][0])
        found.principal.append(paid[year][1])
    return found


def _fill_months(found: RunOff, as_of: date, schedules: Sequence[Schedule]) -> None:
    """Balances at the end of each month, from the as-of month to the last in which anything happens."""
    last = max(schedule.date[-1] for schedule in schedules)
    first = min(as_of, last)
    count = 12 * (last.year - first.year) + last.month - first.month + 1
    months = [divmod(12 * first.year + first.month - 1 + number, 12) for number in range(count + 1)]
    starts = [date(year, month + 1, 1) for year, month in months if year <= MAXYEAR]
    found.months.extend(starts[:count])
    ends = [*(start - timedelta(1) for start in starts[1:]), date.max][:count]
    balance = [0] * count
    for schedule in schedules:
        scale, closing = rescaled(1, schedule.digits, found.digits), (0, *schedule.closing)
        reached = map(bisect_right, repeat(schedule.date), ends)
        balance = [
            sum_so_far + closing[row] * scale for sum_so_far, row in zip(balance, reached, strict=True)
        ]
    found.balance.extend(balance)


def _add_paid(schedule: Schedule, digits: int, paid: dict[int, list[int]]) -> None:
    """Interest and principal in each calendar year's payments; what was only capitalized was not paid."""
    scale = rescaled(1, schedule.digits, digits)
    unpaid = [row for row, payment in enumerate(schedule.payment) if not payment]
    first = 0
    while first < len(schedule):
        year = schedule.date[first].year
        stop = bisect_right(schedule.date, date(year, 12, 31), first)
        left_out = [row for row in unpaid if first <= row < stop]
        if len(left_out) < stop - first:
            sums = paid.setdefault(year, [0, 0])
            interest = sum(schedule.interest[first:stop]) - sum(schedule.interest[row] for row in left_out)
            repaid = sum(schedule.principal[first:stop]) + sum(schedule.extra[first:stop])
            repaid -= sum(schedule.principal[row] + schedule.extra[row] for row in left_out)
            sums[0] += interest * scale
            sums[1] += repaid * scale
        first = stop
