"""Where a loan stands on a date, against the independent calculation and against visible arithmetic."""

from bisect import bisect_right
from dataclasses import replace
from datetime import date, timedelta
from decimal import Decimal
from typing import Any

import pytest
from hypothesis import given
from hypothesis import strategies as st

import oracle
from engine.against_oracle import EXTRA_HEADERS, HEADERS, RATE_HEADERS, in_words
from engine.profile import examples
from engine.support import built, schedule_of
from strategies import REGIONS, loans
from tenorbook.basis.conventions import AppliesTo, DayCount, FirstPeriod, Repayment, Timing, UnpaidInterest
from tenorbook.basis.problem import TermsError
from tenorbook.owed.position import position
from tenorbook.schedule.ledger import Schedule
from tenorbook.terms.loan import ExtraPayment, Length, Loan, RateChange


def day_of(schedule: Schedule, place: int) -> date:
    """A day from just before funding to just after the end; every third one is the day of a row."""
    if place % 3 == 0:
        return schedule.date[place // 3 % len(schedule)]
    days = (schedule.date[-1] - schedule.date[0]).days + 6
    return schedule.date[0] + timedelta(place % days - 3)


def expected(loan: Loan, schedule: Schedule, as_of: date, counted: bool) -> tuple[Decimal, ...]:
    """Balance, accrued interest, due within a year and after it, by the independent calculation."""
    events: dict[str, Any] = {
        "extra_payments": [in_words(extra, EXTRA_HEADERS) for extra in loan.extra_payments],
        "rate_changes": [in_words(change, RATE_HEADERS) for change in loan.rate_changes],
    }
    words = in_words(loan, HEADERS)
    accrued = oracle.accrued_interest(words, as_of, day_counted=counted, **events)
    balance = within = Decimal(0)
    leap_day = (as_of.month, as_of.day) == (2, 29)
    year_on = date(as_of.year + 1, 2, 28) if leap_day else as_of.replace(year=as_of.year + 1)
    for row in oracle.schedule(words, **events):
        day, closing = row["date"], row["closing_balance"]
        principal, extra = row["principal"], row["extra_principal"]
        assert isinstance(day, date)
        assert isinstance(closing, Decimal)
        assert isinstance(principal, Decimal)
        assert isinstance(extra, Decimal)
        if day <= as_of:
            balance = closing
        elif day <= year_on:
            within += principal + extra
    if as_of < schedule.date[0]:
        return Decimal(0), accrued, Decimal(0), Decimal(0)
    return balance, accrued, within, balance - within


def check(loan: Loan, place: int, counted: bool) -> None:
    try:
        schedule = schedule_of(loan)
    except TermsError:
        return
    as_of = day_of(schedule, place)
    found = position(schedule, as_of, counted)
    figures = (found.balance, found.accrued_interest, found.due_within_12_months, found.due_after_12_months)
    in_units = tuple(Decimal(figure).scaleb(-schedule.digits) for figure in figures)
    assert found.as_of == as_of
    assert in_units == expected(loan, schedule, as_of, counted), as_of


PLACES = st.integers(0, 10**5)


@examples(150)
@given(loans(), PLACES)
def test_any_loan_on_any_day_counted(loan: Loan, place: int) -> None:
    check(loan, place, counted=True)


@examples(120)
@given(loans(), PLACES)
def test_any_loan_on_any_day_not_counted(loan: Loan, place: int) -> None:
    check(loan, place, counted=False)


@pytest.mark.parametrize(
    "region",
    [
        "compound long first period",
        "odd days capitalized",
        "odd days paid at funding, with events",
        "short first period",
        "interest only in advance",
        "one payment at maturity",
    ],
)
def test_hard_corner_on_any_day(region: str) -> None:
    @examples(25)
    @given(REGIONS[region], PLACES, st.booleans())
    def agree(loan: Loan, place: int, counted: bool) -> None:
        check(loan, place, counted)

    agree()


@examples(60)
@given(loans({"rate": st.decimals(Decimal("0.01"), Decimal("0.2"), places=4)}), st.integers(0, 1000))
def test_posted_and_accrued_interest_never_falls(loan: Loan, start: int) -> None:
    """Month after month, what was posted and what has accrued grows, up to the interest of the schedule.

    By a count of actual days, since a 30-day month may put more than the month before its 31st; each of
    the two items is rounded by itself. What is prepaid is posted before it accrues.
    """
    entered = replace(
        loan, day_count=DayCount.ACTUAL_365_FIXED, odd_day_count=None, first_period=FirstPeriod.ACCRUE
    )
    if entered.first_payment is not None:
        entered = replace(entered, long_first_period=None)
    try:
        schedule = schedule_of(entered)
    except TermsError:
        return
    before, day = 0, schedule.date[0] + timedelta(start % 28)
    while day <= schedule.date[-1]:
        posted = sum(schedule.interest[: bisect_right(schedule.date, day)])
        now = posted + position(schedule, day).accrued_interest
        assert now >= before - 2
        before, day = now, day + timedelta(31)
    assert before <= sum(schedule.interest) + 2


# ---------------------------------------------------------------- visible arithmetic
# 12,000 at 12 % 30/360: 120.00 a month, 4.00 a day; payments of 3,075.37 on the 1st from 1 February


def accrued(schedule: Schedule, day: date, counted: bool = True) -> int:
    return position(schedule, day, counted).accrued_interest


@pytest.mark.parametrize(
    ("day", "counted", "not_counted"),
    [
        (date(2023, 12, 31), 0, 0),  # before funding
        (date(2024, 1, 1), 4_00, 0),  # the funding date itself
        (date(2024, 1, 15), 15 * 4_00, 14 * 4_00),
        (date(2024, 1, 30), 30 * 4_00, 29 * 4_00),
        # the month is 30 days: its whole at the end, and by dates the 31st is the 30th
        (date(2024, 1, 31), 120_00, 30 * 4_00),
        # on the due date 120.00 was posted; 12,000 - 2,955.37 = 9,044.63 bears 3.01 a day
        (date(2024, 2, 1), 3_01, 0),
        (date(2024, 2, 2), 6_03, 3_01),
        (date(2024, 5, 1), 0, 0),  # repaid
        (date(2025, 1, 1), 0, 0),
    ],
)
def test_accrued_interest_day_by_day(day: date, counted: int, not_counted: int) -> None:
    schedule = built()
    assert accrued(schedule, day) == counted
    assert accrued(schedule, day, counted=False) == not_counted


def test_on_an_extra_that_paid_the_interest_nothing_is_left() -> None:
    # 15 days are 60.00, which the extra of the 16th pays first; then 11,060.00 bears 3.69 a day
    extra = ExtraPayment(date=date(2024, 1, 16), amount=Decimal(1000), applies_to=AppliesTo.INTEREST_FIRST)
    schedule = built(extra_payments=(extra,))
    assert accrued(schedule, date(2024, 1, 15)) == 60_00
    assert accrued(schedule, date(2024, 1, 16), counted=False) == 0
    assert accrued(schedule, date(2024, 1, 16)) == 3_69


def test_a_rate_change_counts_from_its_day() -> None:
    change = RateChange(from_date=date(2024, 1, 16), annual_rate=Decimal("0.06"))
    schedule = built(rate_changes=(change,))
    assert accrued(schedule, date(2024, 1, 15)) == 15 * 4_00
    assert accrued(schedule, date(2024, 1, 16)) == 15 * 4_00 + 2_00


def test_interest_paid_in_advance_is_negative_until_it_has_run() -> None:
    schedule = built(timing=Timing.ADVANCE, repayment=Repayment.INTEREST_ONLY)
    assert schedule.interest[1] == 120_00  # on the funding date
    assert accrued(schedule, date(2024, 1, 1), counted=False) == -120_00
    assert accrued(schedule, date(2024, 1, 1)) == -116_00
    assert accrued(schedule, date(2024, 1, 15)) == -120_00 + 15 * 4_00
    assert accrued(schedule, date(2024, 1, 31)) == 0


@pytest.mark.parametrize(
    ("treatment", "in_the_odd_days", "after_them", "at_the_end"),
    [
        # funded on the 10th, first payment on 1 March: 21 odd days to 1 February (84.00), then the month
        (FirstPeriod.ACCRUE, 11 * 4_00, 36 * 4_00, 204_00),
        (FirstPeriod.ADD_TO_FIRST, 11 * 4_00, 36 * 4_00, 204_00),
        # 84.00 was paid on the 10th; 11 days of it have run
        (FirstPeriod.PAY_AT_FUNDING, -84_00 + 11 * 4_00, 15 * 4_00, 120_00),
        # 84.00 was added to principal on 1 February: 12,084 bears 4.028 a day
        (FirstPeriod.CAPITALIZE, 11 * 4_00, 60_42, 120_84),
        (FirstPeriod.WAIVE, 0, 15 * 4_00, 120_00),
    ],
)
def test_accrued_interest_in_a_long_first_period(
    treatment: FirstPeriod, in_the_odd_days: int, after_them: int, at_the_end: int
) -> None:
    schedule = built(funding_date=date(2024, 1, 10), first_payment=date(2024, 3, 1), first_period=treatment)
    assert accrued(schedule, date(2024, 1, 20)) == in_the_odd_days
    assert accrued(schedule, date(2024, 2, 15)) == after_them
    assert accrued(schedule, date(2024, 2, 29)) == at_the_end


def test_carried_interest_stays_accrued() -> None:
    # 100.00 of the 120.00 due is paid on 1 February: 20.00 is carried, and bears nothing
    schedule = built(payment=Decimal(100), unpaid_interest=UnpaidInterest.CARRY)
    assert accrued(schedule, date(2024, 2, 1), counted=False) == 20_00
    assert accrued(schedule, date(2024, 2, 1)) == 24_00


def test_due_within_a_year_and_after() -> None:
    # 12,000 over 24 months in level principal: 500.00 a month
    schedule = built(repayment=Repayment.LEVEL_PRINCIPAL, term=Length(24))
    found = position(schedule, date(2024, 3, 1))  # two payments made
    assert found.balance == 11_000_00
    assert found.due_within_12_months == 12 * 500_00  # 1 April 2024 to 1 March 2025, that day included
    assert found.due_after_12_months == 5_000_00
    leap = position(schedule, date(2024, 2, 29))  # one payment made; the year ends on 28 February
    assert (leap.balance, leap.due_within_12_months) == (11_500_00, 12 * 500_00)
    before = position(schedule, date(2023, 12, 31))
    assert (before.balance, before.due_within_12_months, before.due_after_12_months) == (0, 0, 0)
    after = position(schedule, date(2026, 1, 1))
    assert (after.balance, after.due_within_12_months, after.due_after_12_months) == (0, 0, 0)
