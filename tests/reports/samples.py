"""Loans, and the results of small books, for the tests of reports, writers and spreadsheets."""

from collections.abc import Iterator, Sequence
from dataclasses import replace
from datetime import date
from decimal import Decimal
from typing import Any

from tenorbook.basis.conventions import (
    AppliesTo,
    DayCount,
    ExtraEffect,
    FirstPeriod,
    Frequency,
    InterestRounding,
    LongFirst,
    PaymentChange,
    Repayment,
    Timing,
    UnpaidInterest,
)
from tenorbook.basis.problem import TenorbookError
from tenorbook.owed.position import position
from tenorbook.reports.result import BookResult, LoanResult
from tenorbook.schedule.build import build
from tenorbook.terms.book import Book, Settings
from tenorbook.terms.loan import ExtraPayment, Length, Loan, RateChange
from tenorbook.terms.resolve import resolve
from tenorbook.yields.effective import effective_annual_rate

AS_OF = date(2025, 12, 31)


def note(loan_id: str = "EQ-101", **terms: Any) -> Loan:
    """A plain equipment note of 60 monthly payments, changed as asked."""
    plain = Loan(
        loan_id=loan_id,
        counterparty="Harbor Equipment Finance",
        description="Excavator",
        principal=Decimal("250000"),
        annual_rate=Decimal("0.0625"),
        funding_date=date(2025, 1, 15),
        first_payment=date(2025, 2, 15),
        term=Length(60),
    )
    return replace(plain, **terms)


def result_of(loan: Loan, as_of: date = AS_OF) -> LoanResult:
    """Everything computed for a loan, or its errors."""
    terms, problems = resolve(loan, Settings())
    if terms is None:
        return LoanResult(loan=loan, problems=problems)
    try:
        schedule = build(terms)
    except TenorbookError as failure:
        return LoanResult(loan=loan, problems=(*problems, *failure.problems))
    return LoanResult(
        loan=loan,
        terms=terms,
        schedule=schedule,
        position=position(schedule, as_of),
        effective_annual_rate=effective_annual_rate(terms),
        problems=(*problems, *schedule.problems),
    )


def book_of(loans: Sequence[Loan], carried_headers: tuple[str, ...] = ()) -> BookResult:
    """The results of a book of these loans."""
    results = [result_of(loan) for loan in loans]
    problems = tuple(problem for each in results for problem in each.problems)
    book = Book(name="book.xlsx", loans=tuple(loans), carried_headers=carried_headers)
    return BookResult(book=book, as_of=AS_OF, results=results, problems=problems, versions=("tenorbook",))


def extra(day: date, amount: int, **more: Any) -> ExtraPayment:
    """An extra payment."""
    return ExtraPayment(date=day, amount=Decimal(amount), **more)


def every_kind() -> Iterator[Loan]:
    """At least one loan for each kind of row, rule and formula."""
    odd = date(2025, 3, 1)
    yield note("plain")
    yield note("actual 360", day_count=DayCount.ACTUAL_360, first_payment=odd)
    yield note("mixed years", day_count=DayCount.ACTUAL_ACTUAL_ISDA, first_payment=odd)
    yield note("leap", day_count=DayCount.ACTUAL_365_LEAP, extra_payments=(extra(date(2026, 5, 20), 9000),))
    yield note("hybrid", odd_day_count=DayCount.ACTUAL_365_FIXED, first_payment=odd)
    for treatment in FirstPeriod:
        yield note(f"long, {treatment}", first_period=treatment, first_payment=odd)
        yield note(f"short, {treatment}", first_period=treatment, first_payment=date(2025, 2, 3))
    yield note("compound", long_first_period=LongFirst.COMPOUND, first_payment=date(2025, 5, 1))
    yield from _happenings()
    yield from _shapes()
    yield from _roundings()


def _happenings() -> Iterator[Loan]:
    june, later = date(2026, 5, 20), date(2027, 6, 10)
    yield note("extras", extra_payments=(extra(june, 15000), extra(later, 9000, effect=ExtraEffect.LOWER)))
    yield note("on due date", extra_payments=(extra(date(2026, 5, 15), 15000),))
    yield note("ahead", extra_payments=(extra(june, 12000, effect=ExtraEffect.PAY_AHEAD),))
    yield note("interest first", extra_payments=(extra(june, 500, applies_to=AppliesTo.INTEREST_FIRST),))
    yield note("paid off", extra_payments=(extra(june, 1_000_000),))
    yield note("each payment", extra_each_payment=Decimal(1000), extra_from=date(2026, 1, 1))
    yield note(
        "rates",
        rate_changes=(
            RateChange(from_date=date(2027, 2, 15), annual_rate=Decimal("0.0725")),
            RateChange(from_date=date(2028, 3, 1), annual_rate=Decimal("0.05"), payment=PaymentChange.KEEP),
            RateChange(from_date=date(2028, 9, 1), annual_rate=Decimal("0.0555"), payment=Decimal(6000)),
        ),
    )
    many = (
        RateChange(from_date=date(y, 9, 1), annual_rate=Decimal(y - 2000) / 400) for y in range(2025, 2030)
    )
    yield note("many rates", rate_changes=tuple(many))


def _shapes() -> Iterator[Loan]:
    for shape in Repayment:
        yield note(str(shape), repayment=shape)
    for shape in (Repayment.LEVEL_PAYMENT, Repayment.LEVEL_PRINCIPAL, Repayment.INTEREST_ONLY):
        yield note(f"{shape}, advance", repayment=shape, timing=Timing.ADVANCE, first_payment=None)
    yield note(
        "prepaid",
        repayment=Repayment.INTEREST_ONLY,
        timing=Timing.ADVANCE,
        first_payment=None,
        extra_payments=(extra(date(2026, 5, 20), 15000),),
    )
    yield note("balloon", balloon=Decimal(50000))
    yield note("balloon, advance", balloon=Decimal(50000), timing=Timing.ADVANCE, first_payment=None)
    yield note("amortized", amortized_over=Length(360))
    yield note("interest only first", interest_only_payments=12)
    yield note("fixed", payment=Decimal(5000), term=None)
    yield note("negative", payment=Decimal(1000))
    yield note("carried", payment=Decimal(1200), unpaid_interest=UnpaidInterest.CARRY)
    yield note("no rate", annual_rate=Decimal(0))
    yield note("below zero", annual_rate=Decimal("-0.005"))
    yield note("weekly", frequency=Frequency.WEEKLY, first_payment=None, term=Length(104))


def _roundings() -> Iterator[Loan]:
    ties = {"principal": Decimal(100010), "annual_rate": Decimal("0.06"), "term": Length(200)}
    for rounding in InterestRounding:
        level = Repayment.LEVEL_PRINCIPAL
        yield note(f"ties, {rounding}", interest_rounding=rounding, repayment=level, **ties)
        yield note(f"yen, {rounding}", interest_rounding=rounding, currency="JPY")
        yield note(f"dinar, {rounding}", interest_rounding=rounding, currency="KWD")
