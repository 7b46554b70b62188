"""Interest accrued between two postings, read off a finished schedule by its own steps."""

from bisect import bisect_left, bisect_right
from datetime import date, timedelta
from decimal import Decimal

from tenorbook.basis.conventions import FirstPeriod, RowKind
from tenorbook.schedule.accrual import Accrual
from tenorbook.schedule.ledger import Item, Schedule
from tenorbook.schedule.steps import Steps, make_steps
from tenorbook.terms.terms import Terms


def accrued_interest(schedule: Schedule, until: date, after_events: bool = False) -> int:
    """Interest accrued and unpaid before a day, each item rounded once, in the ledger's unit.

    Args:
        schedule: of the loan.
        until: the first day that does not accrue.
        after_events: whether the events of that day have happened.

    Returns:
        0 before funding and after the last row; negative where interest was paid in advance.
    """
    if until < schedule.date[0] or until > schedule.date[-1] - timedelta(after_events):
        return 0
    # Where a payment decides the term, the schedule's end is the contract's maturity.
    steps = make_steps(schedule.terms, None if schedule.terms.count else schedule.date[-1])
    period = max(1, (bisect_right if after_events else bisect_left)(steps.boundaries, until))
    accrual = Accrual(steps, schedule.terms.interest_rounding)
    first = 1 if schedule.terms.one_payment else period
    _take_off_prepaid(schedule, steps, accrual, first)
    row = bisect_right(schedule.date, steps.boundaries[first - 1]) - 1
    for number in range(first, period + 1):
        row = _run_period(schedule, steps, accrual, number, row, until, after_events)
    return accrual.due() + schedule.carried.get(row, 0)


def _take_off_prepaid(schedule: Schedule, steps: Steps, accrual: Accrual, period: int) -> None:
    """Settles what was paid in advance for a period: with its first payment, or at funding."""
    terms, start = schedule.terms, steps.boundaries[period - 1]
    row = bisect_left(schedule.date, start)
    while row < len(schedule) and schedule.date[row] == start:
        if schedule.prepays(row):
            spans = steps.spans(period)
            accrual.settle(accrual.prepay(spans, schedule.opening[row], row, rate_on(terms, start)))
        row += 1
    if period == 1 and terms.first_period is FirstPeriod.PAY_AT_FUNDING and steps.first:
        accrual.settle(accrual.prepay(steps.first[:1], terms.principal, 0, terms.rate))


def _run_period(
    schedule: Schedule, steps: Steps, accrual: Accrual, number: int, row: int, until: date, after_events: bool
) -> int:
    """Accrues through one period, or the part of it before `until`; returns the last row passed."""
    terms, spans = schedule.terms, steps.spans(number)
    end = min(until, steps.boundaries[number])
    accrual.start_period()
    while schedule.date[row + 1] < end + timedelta(after_events and end == until):
        rate = rate_on(terms, schedule.date[row])
        accrual.run_to(spans, schedule.date[row + 1], schedule.closing[row], row, rate)
        row += 1
        if schedule.kind[row] is RowKind.CAPITALIZE:
            accrual.clear()
        elif schedule.interest[row]:
            accrual.pay(schedule.interest[row])
    accrual.run_to(spans, end, schedule.closing[row], row, rate_on(terms, schedule.date[row]))
    if terms.first_period is FirstPeriod.WAIVE:
        accrual.drop(Item.ODD_DAYS)
    return row


def rate_on(terms: Terms, day: date) -> Decimal:
    """The annual rate that a day accrues at."""
    rate = terms.rate
    for change in terms.repricings:
        if change.date <= day:
            rate = change.rate
    return rate
