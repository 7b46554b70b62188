"""Small loans worked by hand, each with its arithmetic: treatments of the first period, effects of extras.

Unless a row names another source these are common practice as the conventions of the program have it. The
loan is 12,000.00 at 12 % on 30/360: 120.00 a month, 4.00 a day. Its regular level payment over four months
is 12,000 x 0.01 / (1 - 1.01^-4) = 3,075.37; over three months 1 is worth (1 - 1.01^-3) / 0.01 = 2.9409852.
"""

from datetime import date
from decimal import Decimal
from typing import Any

import pytest

from engine.support import built, column
from tenorbook.basis.conventions import (
    AppliesTo,
    DayCount,
    ExtraEffect,
    FirstPeriod,
    Frequency,
    LongFirst,
    PaymentChange,
    Repayment,
    RowKind,
    Timing,
    UnpaidInterest,
)
from tenorbook.terms.loan import ExtraPayment, Length, RateChange

FEB_1, FEB_16, MAR_1 = date(2024, 2, 1), date(2024, 2, 16), date(2024, 3, 1)

# ---------------------------------------------------------------- a first period of 43 days
# funded on 18 January, first payment on 1 March: 13 odd days to 1 February (52.00), then the month (120.00)

LONG = {"funding_date": date(2024, 1, 18), "first_payment": MAR_1}
SIMPLE, COMPOUND = LongFirst.SIMPLE, LongFirst.COMPOUND


@pytest.mark.parametrize(
    ("treatment", "long_first", "interest", "payments"),
    [
        # 12,000 x 1.0143333 / (1 + 2.9409852) = 12,172 / 3.9409852 = 3,088.57
        (FirstPeriod.ACCRUE, SIMPLE, "172.00", ["3088.57", "3088.57", "3088.57", "3088.55"]),
        # 12,052 x 1.01 - 12,000 = 172.52; 12,172.52 / 3.9409852 = 3,088.70
        (FirstPeriod.ACCRUE, COMPOUND, "172.52", ["3088.70", "3088.70", "3088.70", "3088.70"]),
        # 3,075.37 + 52.00
        (FirstPeriod.ADD_TO_FIRST, SIMPLE, "172.00", ["3127.37", "3075.37", "3075.37", "3075.37"]),
        # 3,075.37 + 52.00 x 1.01
        (FirstPeriod.ADD_TO_FIRST, COMPOUND, "172.52", ["3127.89", "3075.37", "3075.37", "3075.37"]),
        # 52.00 on 18 January
        (FirstPeriod.PAY_AT_FUNDING, SIMPLE, "120.00", ["3075.37", "3075.37", "3075.37", "3075.37"]),
        # 12,052.00 from 1 February; 12,052 x 0.01 / (1 - 1.01^-4) = 3,088.70
        (FirstPeriod.CAPITALIZE, SIMPLE, "120.52", ["3088.70", "3088.70", "3088.70", "3088.70"]),
        (FirstPeriod.WAIVE, SIMPLE, "120.00", ["3075.37", "3075.37", "3075.37", "3075.37"]),
    ],
)
def test_a_first_period_of_43_days(
    treatment: FirstPeriod, long_first: LongFirst, interest: str, payments: list[str]
) -> None:
    schedule = built(first_period=treatment, long_first_period=long_first, **LONG)
    assert column(schedule, "interest")[0] == interest
    assert column(schedule, "payment")[:3] == payments[:3]
    last, expected = (Decimal(text) for text in (column(schedule, "payment")[3], payments[3]))
    assert abs(last - expected) <= Decimal("0.02")  # the last takes what rounding leaves
    at_funding = treatment is FirstPeriod.PAY_AT_FUNDING
    assert schedule.interest[0] == schedule.payment[0] == (52_00 if at_funding else 0)
    capitalized = column(schedule, "principal", RowKind.CAPITALIZE)
    assert capitalized == (["-52.00"] if treatment is FirstPeriod.CAPITALIZE else [])


def test_two_whole_months_compound_and_odd_days_do_not() -> None:
    # funded on 18 December: 13 days (1.0043333), then January and February: x 1.01 x 1.01 - 1 = 0.02452043
    schedule = built(
        funding_date=date(2023, 12, 18), first_payment=MAR_1, long_first_period=LongFirst.COMPOUND
    )
    assert column(schedule, "interest")[0] == "294.25"  # 12,000 x 0.02452043 = 294.245


def test_a_compound_first_period_with_an_extra_inside() -> None:
    # 4 days at 4.00 = 16.00 are simple; 2,000 on the 22nd; then what is left of 1.0043333 x 1.01 - 1:
    # 0.0143766667 - 4/3000 = 0.0130433333, on 10,000: 130.43; 16.00 + 130.43 = 146.43
    extra = ExtraPayment(date=date(2024, 1, 22), amount=Decimal(2000))
    schedule = built(long_first_period=LongFirst.COMPOUND, extra_payments=(extra,), **LONG)
    assert column(schedule, "interest")[0] == "146.43"


def test_odd_days_on_a_count_of_their_own() -> None:
    # 14 actual days at 365: 12,000 x 0.12 x 14 / 365 = 55.23, then the month of 120.00
    schedule = built(first_period=FirstPeriod.ADD_TO_FIRST, odd_day_count=DayCount.ACTUAL_365_FIXED, **LONG)
    assert column(schedule, "payment")[:2] == ["3130.60", "3075.37"]


@pytest.mark.parametrize(
    ("treatment", "first_interest", "first_payment", "second_payment"),
    [
        # 11 days: 44.00; sized on them: 12,000 x 1.0036667 / 3.9409852 = 3,056.09
        (FirstPeriod.ACCRUE, "44.00", "3056.09", "3056.09"),
        # 120.00 less the 19 days before funding, 76.00
        (FirstPeriod.ADD_TO_FIRST, "44.00", "2999.37", "3075.37"),
        (FirstPeriod.WAIVE, "44.00", "2999.37", "3075.37"),
    ],
)
def test_a_first_period_of_11_days(
    treatment: FirstPeriod, first_interest: str, first_payment: str, second_payment: str
) -> None:
    schedule = built(funding_date=date(2024, 1, 20), first_payment=FEB_1, first_period=treatment)
    assert column(schedule, "interest")[0] == first_interest
    assert column(schedule, "payment")[:2] == [first_payment, second_payment]


# ---------------------------------------------------------------- extras of 3,000
# without: interest 120.00, 90.45, 60.60, 30.45; closing 9,044.63, 6,059.71, 3,044.94, 0


def with_extra(day: date, **row: Any) -> Any:
    extra = ExtraPayment(date=day, **({"amount": Decimal(3000)} | row))
    return built(extra_payments=(extra,))


def test_an_extra_shortens_the_term() -> None:
    # 9,044.63 - 3,000 = 6,044.63; 60.45; 6,044.63 - 3,014.92 = 3,029.71; 30.30; the last is 3,060.01
    schedule = with_extra(FEB_1, effect=ExtraEffect.SHORTEN)
    assert column(schedule, "extra") == ["3000.00", "0.00", "0.00"]
    assert column(schedule, "interest") == ["120.00", "60.45", "30.30"]
    assert column(schedule, "payment") == ["6075.37", "3075.37", "3060.01"]


def test_an_extra_lowers_the_payment() -> None:
    # 6,044.63 / 2.9409852 = 2,055.31 for the three payments left
    schedule = with_extra(FEB_1, effect=ExtraEffect.LOWER)
    assert column(schedule, "payment")[:3] == ["6075.37", "2055.31", "2055.31"]
    assert column(schedule, "date")[-1] == "2024-05-01"


def test_an_extra_inside_a_period_lowers_the_payment_after_its_due_date() -> None:
    # half of February on 9,044.63 (45.22315) and half on 6,044.63 (30.22315): 75.45 on 1 March;
    # then 6,044.63 - (3,075.37 - 75.45) = 3,044.71 over two: / 1.9703951 = 1,545.23
    schedule = with_extra(FEB_16, effect=ExtraEffect.LOWER)
    assert column(schedule, "extra", RowKind.EXTRA) == ["3000.00"]
    assert column(schedule, "interest")[1] == "75.45"
    assert column(schedule, "payment")[1:3] == ["3075.37", "1545.23"]


def test_an_extra_at_funding_lowers_the_first_payment() -> None:
    # 9,000 x 0.01 / (1 - 1.01^-4) = 2,306.53: nothing has run, and no period is cut
    schedule = with_extra(date(2024, 1, 1), effect=ExtraEffect.LOWER)
    assert column(schedule, "payment")[0] == "2306.53"


def test_an_extra_pays_ahead() -> None:
    # 3,000 takes all but 75.37 of the next payment; interest goes on: 60.45 of it, so 14.92 is principal
    schedule = with_extra(FEB_1, effect=ExtraEffect.PAY_AHEAD)
    assert column(schedule, "payment")[:3] == ["6075.37", "75.37", "3075.37"]
    assert column(schedule, "principal")[1] == "14.92"


def test_paying_ahead_with_less_than_a_payment_left() -> None:
    """Principal is paid ahead, interest is not: it goes on being paid until the last payment clears."""
    # 1 February: 9,044.63 - 8,000 = 1,044.63, all of it paid ahead; 1 % of it is 10.45 on 1 March and on
    # 1 April, and on 1 May what is left falls due with it: 1,044.63 + 10.45 = 1,055.08
    schedule = with_extra(FEB_1, amount=Decimal(8000), effect=ExtraEffect.PAY_AHEAD)
    assert column(schedule, "payment") == ["11075.37", "10.45", "10.45", "1055.08"]
    assert column(schedule, "principal")[1:3] == ["0.00", "0.00"]


def test_interest_first_under_the_united_states_rule() -> None:
    # 15 days of 9,044.63 are 45.22, paid first; 2,954.78 is principal; 6,089.85 bears 30.45 for the rest
    schedule = with_extra(FEB_16, applies_to=AppliesTo.INTEREST_FIRST)
    assert column(schedule, "interest", RowKind.EXTRA) == ["45.22"]
    assert column(schedule, "extra", RowKind.EXTRA) == ["2954.78"]
    assert column(schedule, "interest")[1] == "30.45"


def test_an_extra_that_repays_the_loan_pays_its_interest_and_no_more() -> None:
    schedule = with_extra(FEB_16, amount=Decimal(20000))
    assert schedule.kind[-1] is RowKind.EXTRA
    assert column(schedule, "payment", RowKind.EXTRA) == ["9089.85"]  # 9,044.63 + 45.22
    assert [problem.problem for problem in schedule.problems] == [
        "the extra payment of 20,000.00 on 2024-02-16 is more than was left to pay: 9,089.85 was used"
    ]


def test_an_extra_that_repays_the_loan_pays_interest_carried_before() -> None:
    """A payoff pays the interest first, that which earlier payments left unpaid included."""
    # 100.00 of 120.00 is paid on 1 February, 20.00 is carried; 12,000 with it is a payoff but for that 20.00
    extra = ExtraPayment(date=FEB_1, amount=Decimal(20000))
    schedule = built(payment=Decimal(100), unpaid_interest=UnpaidInterest.CARRY, extra_payments=(extra,))
    assert [str(kind) for kind in schedule.kind] == ["funding", "payment"]
    assert column(schedule, "payment") == ["12120.00"]


# ---------------------------------------------------------------- rates, advance, balloons


def test_a_rate_change_on_a_due_date_shows_in_the_next_payment() -> None:
    # 9,044.63 over three at half a percent: / 2.9702481 = 3,045.08
    change = RateChange(from_date=FEB_1, annual_rate=Decimal("0.06"))
    schedule = built(rate_changes=(change,))
    assert column(schedule, "payment")[:2] == ["3075.37", "3045.08"]
    assert column(schedule, "annual_rate", RowKind.RATE) == ["0.12"]  # of the days before
    assert column(schedule, "annual_rate")[:2] == ["0.12", "0.06"]


@pytest.mark.parametrize(
    ("payment", "first"),
    [
        # 12,000 x 0.005 / (1 - 1.005^-4) = 3,037.59
        (PaymentChange.REAMORTIZE, "3037.59"),
        (PaymentChange.KEEP, "3075.37"),
        (Decimal("3100.00"), "3100.00"),
    ],
)
def test_a_rate_change_on_the_funding_date(payment: PaymentChange | Decimal, first: str) -> None:
    change = RateChange(from_date=date(2024, 1, 1), annual_rate=Decimal("0.06"), payment=payment)
    schedule = built(rate_changes=(change,))
    assert [str(kind) for kind in schedule.kind[:3]] == ["funding", "rate", "payment"]
    assert [str(rate) for rate in schedule.annual_rate[:3]] == ["0.12", "0.12", "0.06"]
    assert schedule.days[1] == 0
    assert column(schedule, "payment")[0] == first
    assert column(schedule, "interest")[0] == "60.00"


def test_in_advance_nothing_has_run_at_the_first_payment() -> None:
    # annuity due: 12,000 / 3.9409852 = 3,044.92; 8,955.08 bears 89.55
    schedule = built(timing=Timing.ADVANCE)
    assert column(schedule, "payment")[:2] == ["3044.92", "3044.92"]
    assert column(schedule, "interest")[:2] == ["0.00", "89.55"]
    assert column(schedule, "date") == ["2024-01-01", "2024-02-01", "2024-03-01", "2024-04-01"]


def test_interest_only_in_advance_repaid_on_a_due_date_prepays_nothing() -> None:
    # 120.00 on 1 January for January; on 1 February all is repaid, and February is never lent
    extra = ExtraPayment(date=FEB_1, amount=Decimal(12000))
    schedule = built(timing=Timing.ADVANCE, repayment=Repayment.INTEREST_ONLY, extra_payments=(extra,))
    assert column(schedule, "interest") == ["120.00", "0.00"]
    assert column(schedule, "payment") == ["120.00", "12000.00"]


def test_a_payment_in_advance_never_falls_below_its_interest_for_a_balloon() -> None:
    """An extra has taken the loan below its balloon: interest is paid, and the rest a month later."""
    # 12,000 - 1,000 on 1 January, then 10,000 of extra on the 16th, after 15 days of 11,000 (55.00):
    # 1,000 bears 5.00 for the rest of the month; 60.00 on 1 February; 1,000 and 10.00 on 1 March
    extra = ExtraPayment(date=date(2024, 1, 16), amount=Decimal(10000))
    schedule = built(
        timing=Timing.ADVANCE,
        term=None,
        payment=Decimal(1000),
        balloon=Decimal(6000),
        extra_payments=(extra,),
    )
    assert column(schedule, "payment") == ["1000.00", "60.00"]
    assert column(schedule, "payment", RowKind.BALLOON) == ["1010.00"]


def test_a_balloon_aimed_at_is_never_more_than_the_balance() -> None:
    # 12,000 with a balloon of 10,000: 9,500 repaid on 1 February leaves less than the balloon, so the payment
    # re-amortized over three is the interest alone: 1 % of what is left
    extra = ExtraPayment(date=FEB_1, amount=Decimal(9500), effect=ExtraEffect.LOWER)
    schedule = built(balloon=Decimal(10000), extra_payments=(extra,))
    left = Decimal(column(schedule, "closing")[0])
    assert column(schedule, "payment")[1] == str((left / 100).quantize(Decimal("0.01")))
    assert column(schedule, "principal")[1:3] == ["0.00", "0.00"]


def test_at_maturity_in_one_stretch() -> None:
    # two years and 14 days, Equal periods: 2 + 14/365 of a year at 12 %: 2,880.00 + 55.23
    schedule = built(
        frequency=Frequency.AT_MATURITY,
        term=None,
        maturity=date(2026, 1, 15),
        day_count=DayCount.EQUAL_PERIODS,
    )
    assert column(schedule, "interest") == ["2935.23"]
    # 14 months exactly are 14/12 of a year on 30/360, whatever the days: 1,680.00
    months = built(frequency=Frequency.AT_MATURITY, funding_date=date(2024, 1, 31), term=None,
                   maturity=date(2025, 3, 31))  # fmt: skip
    assert column(months, "interest") == ["1680.00"]


def test_twice_a_month_is_half_a_month() -> None:
    schedule = built(frequency=Frequency.TWICE_A_MONTH, repayment=Repayment.INTEREST_ONLY, term=Length(3))
    assert column(schedule, "interest") == ["60.00", "60.00", "60.00"]
    assert column(schedule, "date") == ["2024-01-16", "2024-02-01", "2024-02-16"]


def test_an_extra_brings_a_stated_balloon_forward() -> None:
    """Shorten term with a balloon: the payment stays, and the balloon falls due once it is reached."""
    # no interest: (10,000 - 4,000) / 10 = 600 a month. 1,500 extra with the first leaves 7,900, and six more
    # leave 4,300; the next would leave 3,700, less than the balloon, so all 4,300 falls due: two months early
    schedule = built(
        principal=Decimal(10000),
        annual_rate=Decimal(0),
        term=Length(10),
        balloon=Decimal(4000),
        extra_payments=(ExtraPayment(date=FEB_1, amount=Decimal(1500)),),
    )
    assert column(schedule, "payment") == ["2100.00", *["600.00"] * 6, "4300.00"]
    assert [problem.problem for problem in schedule.problems] == [
        "extra payments bring the loan down to its balloon early: 4,000.00 falls due on 2024-09-01 "
        "instead of 2024-11-01"
    ]


def test_in_advance_the_last_payment_leaves_exactly_the_balloon() -> None:
    # in advance: 600 from 1 January on; 1,500 extra on 1 February: 10,000 - 2 x 600 - 1,500 = 7,300, five
    # more leave 4,300; on 1 August only 300 is due, and on 1 September the balloon, two months early
    schedule = built(
        principal=Decimal(10000),
        annual_rate=Decimal(0),
        term=Length(10),
        balloon=Decimal(4000),
        timing=Timing.ADVANCE,
        extra_payments=(ExtraPayment(date=FEB_1, amount=Decimal(1500)),),
    )
    assert column(schedule, "payment") == ["600.00", "2100.00", *["600.00"] * 5, "300.00"]
    assert column(schedule, "payment", RowKind.BALLOON) == ["4000.00"]
    assert str(schedule.date[-1]) == "2024-09-01"
