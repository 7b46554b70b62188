"""What holds for any valid loan, whatever its terms."""

from collections.abc import Iterator
from dataclasses import replace
from decimal import Decimal
from itertools import pairwise

from hypothesis import given
from hypothesis import strategies as st

from engine.profile import examples
from engine.support import columns, quiet, schedule_of, terms_of
from strategies import REPEATING, Fixed, loans, rates
from tenorbook.basis.conventions import (
    DayCount,
    ExtraEffect,
    FirstPeriod,
    InterestRounding,
    PaymentChange,
    Repayment,
    RowKind,
)
from tenorbook.basis.problem import TermsError
from tenorbook.schedule.ledger import Row, Schedule
from tenorbook.terms.loan import ExtraPayment, Loan, RateChange

MONEY = ("opening", "interest", "principal", "extra", "charges", "payment", "closing", "draw")


def attempted(loan: Loan) -> Iterator[Schedule]:
    """The schedule of a loan, or nothing where its payment never repays it (see `test_against_oracle`)."""
    try:
        schedule = schedule_of(loan)
    except TermsError as refusal:
        if "does not repay the loan" not in refusal.problems[0].problem:
            raise
    else:
        yield schedule


def rows_of(schedule: Schedule, kind: RowKind) -> list[Row]:
    return [row for row in schedule.rows() if row.kind is kind]


@examples(150)
@given(loans())
def test_every_loan_closes_at_zero_and_repays_what_was_lent(loan: Loan) -> None:
    for schedule in attempted(loan):
        assert schedule.closing[-1] == 0
        assert sum(schedule.principal) + sum(schedule.extra) == sum(schedule.draw) == schedule.terms.principal
        for row in schedule.rows():
            assert row.payment == row.interest + row.principal + row.extra + row.charges
            assert row.closing == row.opening + row.draw - row.principal - row.extra
            assert row.closing >= 0
        assert all(before.closing == after.opening for before, after in pairwise(schedule.rows()))
        assert all(type(amount) is int for name in MONEY for amount in getattr(schedule, name))


@examples(120)
@given(loans())
def test_rows_are_in_order_and_no_two_of_a_kind_share_a_day(loan: Loan) -> None:
    for schedule in attempted(loan):
        assert schedule.kind[0] is RowKind.FUNDING
        assert all(before <= after for before, after in pairwise(schedule.date))
        for kind in set(schedule.kind):
            assert all(before.date < after.date for before, after in pairwise(rows_of(schedule, kind)))
        passed = [(after - before).days for before, after in pairwise(schedule.date)]
        assert list(schedule.days) == [0, *passed]
        due = set(schedule.terms.due.between(1, schedule.terms.count or len(schedule)))
        assert due.issuperset(row.date for row in rows_of(schedule, RowKind.PAYMENT))


@examples(60)
@given(loans())
def test_the_same_terms_give_the_same_schedule(loan: Loan) -> None:
    for schedule in attempted(loan):
        again = schedule_of(loan)
        assert columns(again) == columns(schedule)
        assert again.problems == schedule.problems
        assert [again.parts(row) for row in range(len(again))] == [
            schedule.parts(row) for row in range(len(schedule))
        ]


LEVEL: Fixed = {
    "repayment": st.just(Repayment.LEVEL_PAYMENT),
    "frequency": st.sampled_from(REPEATING),
    "open_ended": st.just(False),
    "interest_only": st.none(),
}


@examples(150)
@given(loans(LEVEL))
def test_a_level_payment_is_level_but_for_the_last(loan: Loan) -> None:
    for schedule in attempted(quiet(loan)):
        payments = [row.payment for row in rows_of(schedule, RowKind.PAYMENT)]
        odd_apart = schedule.terms.first_period is not FirstPeriod.ACCRUE
        regular = payments[1 if odd_apart else 0 : -1]
        assert set(regular) <= {schedule.instalments[0].amount}


@examples(100)
@given(
    loans(
        {
            "repayment": st.just(Repayment.INTEREST_ONLY),
            "interest_rounding": st.just(InterestRounding.NONE),
            "first_period": st.none(),
        }
    ),
    st.integers(2, 1000),
)
def test_interest_only_scales_with_the_principal(loan: Loan, times: int) -> None:
    # each row is rounded by at most half a unit, once as it is and once times over
    entered = quiet(loan)
    assert entered.principal is not None
    one, many = schedule_of(entered), schedule_of(replace(entered, principal=entered.principal * times))
    for small, large in zip(one.interest, many.interest, strict=True):
        assert 2 * abs(large - times * small) <= times + 1


CHEAPER: Fixed = {
    **LEVEL,
    "advance": st.just(False),
    "rate": rates(),
    "day_count": st.just(DayCount.ACTUAL_365_FIXED),
    "odd_day_count": st.none(),
    "interest_rounding": st.just(InterestRounding.HALF_UP),
    "payment_given": st.just(False),
    "amortized_over": st.none(),
    "count": st.integers(2, 60),
}


@examples(100)
@given(loans(CHEAPER), st.integers(1, 60), st.integers(1, 100))
def test_an_extra_never_costs_interest(loan: Loan, place: int, percent: int) -> None:
    """On a due date the interest of no period rises, rounding included; inside one, rounding may add a unit.

    By a count of actual days: counts with 30-day months can put more than the month before a day in it.
    """
    without = schedule_of(quiet(loan))
    day = without.date[0] + (without.date[-1] - without.date[0]) * place // 60
    amount = Decimal(max(1, without.terms.principal * percent // 100)).scaleb(-without.digits)
    extra = ExtraPayment(date=day, amount=amount, effect=ExtraEffect.SHORTEN)
    with_it = schedule_of(replace(quiet(loan), extra_payments=(extra,)))
    assert sum(with_it.interest) <= sum(without.interest) + (RowKind.EXTRA in with_it.kind)
    assert with_it.date[-1] <= without.date[-1]


@examples(120)
@given(loans(), st.integers(0, 10**6))
def test_a_rate_change_to_the_same_rate_changes_no_figure(loan: Loan, place: int) -> None:
    """The parts of a split period add up to the whole, and are rounded once."""
    for plain in attempted(replace(loan, rate_changes=())):
        days = (plain.date[-1] - plain.date[0]).days
        day = plain.date[0] + (plain.date[-1] - plain.date[0]) * (place % max(1, days)) // max(1, days)
        assert loan.annual_rate is not None
        change = RateChange(from_date=day, annual_rate=loan.annual_rate, payment=PaymentChange.KEEP)
        split = schedule_of(replace(loan, rate_changes=(change,)))
        kept = [row for row in split.rows() if row.kind is not RowKind.RATE]
        figures = [(row.kind, row.date, row.interest, row.principal, row.extra, row.closing) for row in kept]
        assert figures == [
            (row.kind, row.date, row.interest, row.principal, row.extra, row.closing) for row in plain.rows()
        ]


@examples(80)
@given(loans(), st.integers(0, 10**6), st.integers(2, 50))
def test_an_extra_in_two_halves_is_one_extra(loan: Loan, place: int, minor: int) -> None:
    for plain in attempted(quiet(loan)):
        day = plain.date[0] + (plain.date[-1] - plain.date[0]) * (place % 1000) // 1000
        digits = plain.terms.currency_digits
        half = ExtraPayment(date=day, amount=Decimal(minor).scaleb(-digits))
        whole = replace(half, amount=half.amount * 2)
        entered = quiet(loan)
        together = replace(entered, extra_payments=(whole,))
        if plain.terms.principal <= 4 * minor * 10 ** (plain.digits - digits):
            together = replace(together, principal=entered.principal and entered.principal * 1000)
            entered = replace(entered, principal=together.principal)
        for one in attempted(together):
            two = schedule_of(replace(entered, extra_payments=(half, half)))
            assert columns(two) == columns(one)


@examples(100)
@given(loans())
def test_parts_explain_the_interest(loan: Loan) -> None:
    """What an auditor follows back: the stretches behind a row's interest come to that interest.

    Two items are each rounded by itself, up to one unit either way.
    """
    for schedule in attempted(loan):
        for row in schedule.rows():
            exact = sum(
                part.sign * schedule.closing[part.balance_row] * part.factor
                for part in schedule.parts(row.row)
            )
            before = sum(schedule.interest[paid] for paid in schedule.paid_before.get(row.row, ()))
            carried = schedule.carried.get(row.row - 1, 0) - schedule.carried.get(row.row, 0)
            unexplained = row.interest - carried + before - exact
            assert unexplained <= 2, row
            if row.kind is not RowKind.EXTRA:  # which may pay a part only
                assert unexplained >= -2, row


@examples(60)
@given(loans())
def test_resolving_is_the_same_each_time(loan: Loan) -> None:
    assert terms_of(loan) == terms_of(loan)
