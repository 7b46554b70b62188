"""What is found wrong, doubtful or worth saying about a note: the exact sentence, and the cells it names."""

from dataclasses import replace
from datetime import date
from decimal import Decimal
from typing import Any

import pytest

from engine.support import built, loan, said, terms_of
from tenorbook.basis.conventions import (
    AppliesTo,
    DayCount,
    ExtraEffect,
    FirstPeriod,
    Frequency,
    InterestRounding,
    LongFirst,
    MonthEnd,
    PaymentBasis,
    PaymentChange,
    PaymentRounding,
    Repayment,
    Side,
    Timing,
    UnpaidInterest,
)
from tenorbook.basis.problem import Place, Severity, TermsError
from tenorbook.schedule.build import build
from tenorbook.terms.book import Settings
from tenorbook.terms.lengths import date_after, payments_in
from tenorbook.terms.loan import ExtraPayment, Length, LengthUnit, Loan, PaymentStep, RateChange
from tenorbook.terms.resolve import resolve

MONTHS, WEEKS, DAYS = LengthUnit.MONTHS, LengthUnit.WEEKS, LengthUnit.DAYS
HEADERS = (
    "Loan ID", "Currency", "Principal", "Annual rate", "Funding date", "First payment", "Term", "Maturity",
    "Frequency", "Timing", "Repayment", "Payment", "Balloon", "Amortized over", "Interest-only payments",
    "First period", "Payment rounding", "Extra each payment", "Extra from", "Extra until", "Month-end",
)  # fmt: skip
CELLS = {
    header: Place("Loans", f"{letter}7", "as typed")
    for letter, header in zip("ABCDEFGHIJKLMNOPQRSTU", HEADERS, strict=True)
}
"""Row 7 of the sheet `Loans`: its headers in order, from column A."""


def noted(**terms: Any) -> Loan:
    """A loan of the book, its cells known."""
    return replace(loan(**terms), where=CELLS)


# Each row: the terms that replace those of `loan`, and every error: cells, sentence, remedy.
ERRORS: list[tuple[dict[str, Any], list[str]]] = [
    (
        {"first_payment": date(2023, 12, 15)},
        ["F7 E7 | the first payment 2023-12-15 (Loans!F7) is before the funding date 2024-01-01 (Loans!E7) | "
         "correct one of the two dates"],
    ),
    (
        {"first_payment": date(2024, 1, 1)},
        ["F7 E7 | the first payment 2024-01-01 (Loans!F7) is on the funding date 2024-01-01 (Loans!E7) | "
         "correct one of the two dates, or set Timing to advance"],
    ),
    (
        {"first_payment": date(2024, 2, 1), "timing": Timing.ADVANCE},
        ["F7 E7 | in advance the first payment falls on the funding date, but First payment is 2024-02-01 "
         "(Loans!F7) and Funding date is 2024-01-01 (Loans!E7) | make the two dates the same; payments that "
         "start later are payments in arrears with a short first period"],
    ),
    (
        {"timing": Timing.ADVANCE, "month_end": MonthEnd.YES},
        ["U7 E7 | month-end due dates cannot start on 2024-01-01, which is not the last day of its month | "
         "set Month-end to auto, or start on a month-end"],
    ),
    (
        {"funding_date": None},
        ["E7 | neither Funding date nor First payment is given | give one of the two dates"],
    ),
    (
        {"funding_date": None, "timing": Timing.ADVANCE},
        ["E7 | neither Funding date nor First payment is given | give one of the two dates"],
    ),
    (
        {"term": None, "maturity": date(2024, 5, 2)},
        ["H7 F7 | 2024-05-02 is not a due date: the due dates around it are 2024-05-01 and 2024-06-01 | give "
         "the unrolled date of the last payment, or use Term"],
    ),
    (
        {"term": None, "maturity": date(2024, 1, 15)},
        ["H7 F7 | 2024-01-15 is before the first payment 2024-02-01 | correct one of the two dates"],
    ),
    (
        {"term": Length(4), "maturity": date(2024, 7, 1)},
        ["H7 G7 | Term (Loans!G7) makes 4 payments, the last on 2024-05-01, but Maturity (Loans!H7) "
         "2024-07-01 makes 6 | correct one of them, or leave one blank"],
    ),
    (
        {"term": None},
        ["G7 H7 | Term and Maturity are blank, and no payment is given that would settle them | give the "
         "number of payments, a duration, or the maturity date"],
    ),
    (
        {"term": Length(0)},
        ["G7 | makes 0 payments, and a schedule has 1 to 2,600 | correct the term"],
    ),
    (
        {"term": Length(26, WEEKS)},
        ["G7 I7 | 26 weeks is no whole number of payments monthly | give the number of payments, or a term "
         "that the frequency divides"],
    ),
    (
        {"term": Length(2601)},
        ["G7 | makes 2,601 payments, and a schedule has 1 to 2,600 | correct the term"],
    ),
    (
        {"term": None, "maturity": date(2301, 1, 1)},
        ["H7 | makes 3,324 payments, and a schedule has 1 to 2,600 | correct the date"],
    ),
    (
        {"term": Length(1201)},
        ["G7 | the last payment, 2124-02-01, is more than 100 years after funding | correct it"],
    ),
    (
        {"term": Length(2600), "funding_date": date(9990, 1, 1)},
        ["G7 | the last payment falls after the year 9999 | shorten the term"],
    ),
    (
        {"principal": None},
        ["C7 | Principal is blank | give the amount advanced"],
    ),
    (
        {"principal": Decimal(0)},
        ["C7 | a principal of 0 cannot be | give an amount above zero"],
    ),
    (
        {"principal": Decimal(-5)},
        ["C7 | a principal of -5 cannot be | give an amount above zero"],
    ),
    (
        {"principal": Decimal("1000.005")},
        ["C7 | 1000.005 has more decimals than USD, which has 2 | round the amount as the note states it"],
    ),
    (
        {"principal": Decimal("1000.5"), "currency": "jpy"},
        ["C7 | 1000.5 has more decimals than JPY, which has 0 | round the amount as the note states it"],
    ),
    (
        {"principal": Decimal("1e15")},
        ["C7 | 1E+15 is too large an amount | correct the amount"],
    ),
    (
        {"principal": Decimal("NaN")},
        ["C7 | NaN is too large an amount | correct the amount"],
    ),
    (
        {"currency": "XQQ"},
        ["B7 | XQQ is not a currency code of ISO 4217 | give a code such as USD"],
    ),
    (
        {"annual_rate": None},
        ["D7 | Annual rate is blank | give the note's rate; 0 is a rate"],
    ),
    (
        {"annual_rate": Decimal(-1)},
        ["D7 | an annual rate of -100 % cannot be | give a rate above -100 % and up to 1,000 %"],
    ),
    (
        {"annual_rate": Decimal("10.0001")},
        ["D7 | an annual rate of 1000.01 % cannot be | give a rate above -100 % and up to 1,000 %"],
    ),
    (
        {"balloon": Decimal(12001)},
        ["M7 C7 | a balloon of 12001 does not lie between 0 and the principal of 12000 (Loans!C7) | correct "
         "one of the two amounts"],
    ),
    (
        {"balloon": Decimal(-1)},
        ["M7 C7 | a balloon of -1 does not lie between 0 and the principal of 12000 (Loans!C7) | correct one "
         "of the two amounts"],
    ),
    (
        {"interest_only_payments": 4},
        ["O7 G7 | 4 interest-only payments leave none of the 4 to repay principal | correct the number, or "
         "set Repayment to interest only"],
    ),
    (
        {"interest_only_payments": -1},
        ["O7 | cannot be negative | give 0 or more"],
    ),
    (
        {"amortized_over": Length(26, WEEKS)},
        ["N7 I7 | 26 weeks is no whole number of payments monthly | give the number of payments"],
    ),
    (
        {"amortized_over": Length(12_001)},
        ["N7 | 12,001 payments cannot be | correct the number"],
    ),
    (
        {"payment": Decimal(0)},
        ["L7 | a payment must be above zero | correct it, or leave it blank"],
    ),
    (
        {"payment_rounding": PaymentStep(PaymentRounding.UP, Decimal(0))},
        ["Q7 | the step must be above zero | give a step such as 1.00"],
    ),
    (
        {"extra_each_payment": Decimal(-1)},
        ["R7 | an extra payment cannot be negative | correct it"],
    ),
    (
        {
            "extra_each_payment": Decimal(1),
            "extra_from": date(2024, 3, 1),
            "extra_until": date(2024, 2, 1),
        },
        ["T7 S7 | 2024-02-01 is before Extra from, 2024-03-01 | correct one"],
    ),
    (
        {"repayment": Repayment.AT_MATURITY, "timing": Timing.ADVANCE},
        ["J7 K7 | a loan paid at maturity has no payments in advance | set Timing to arrears, or change "
         "Repayment"],
    ),
    (
        {"frequency": Frequency.AT_MATURITY, "term": None},
        ["H7 | the date of the one payment is missing | give Maturity or Term"],
    ),
    (
        {"frequency": Frequency.AT_MATURITY, "term": Length(4)},
        ["G7 | a loan paid at maturity has one payment | give a duration, or the maturity date"],
    ),
    (
        {"frequency": Frequency.AT_MATURITY, "term": Length(6, MONTHS), "maturity": date(2024, 8, 1)},
        ["H7 G7 | the one payment has several dates: Maturity says 2024-08-01, Term says 2024-07-01 | "
         "keep one"],
    ),
    (
        {"frequency": Frequency.AT_MATURITY, "term": None, "maturity": date(2023, 8, 1)},
        ["F7 E7 | the first payment 2023-08-01 (Loans!F7) is before the funding date 2024-01-01 (Loans!E7) | "
         "correct one of the two dates"],
    ),
    (
        {"frequency": Frequency.AT_MATURITY, "funding_date": None},
        ["E7 | is blank, and interest has no day to run from | give the date"],
    ),
]  # fmt: skip


@pytest.mark.parametrize(("terms", "errors"), ERRORS, ids=[str(list(terms)) for terms, _ in ERRORS])
def test_an_impossible_note_is_refused_by_cell(terms: dict[str, Any], errors: list[str]) -> None:
    entered = noted(**terms)
    assert resolve(entered)[0] is None
    found = said(entered, Severity.ERROR)
    assert found == errors


EVENT_ERRORS: list[tuple[dict[str, Any], list[str]]] = [
    (
        {"date": date(2023, 12, 31), "amount": Decimal(1)},
        ["X2 E7 | the extra payment of 2023-12-31 is before the funding date 2024-01-01 (Loans!E7) | correct "
         "one of the two dates"],
    ),
    (
        {"date": date(2024, 2, 1), "amount": Decimal(0)},
        ["X3 | an extra payment must be above zero | correct the amount"],
    ),
    (
        {"date": date(2024, 2, 1), "amount": Decimal("0.001")},
        ["X3 | 0.001 has more decimals than USD, which has 2 | round the amount as the note states it"],
    ),
    (
        {"date": date(2024, 2, 1), "amount": Decimal(1), "every": Frequency.AT_MATURITY},
        ["X4 | at maturity does not repeat | name a frequency, or leave blank"],
    ),
]  # fmt: skip


@pytest.mark.parametrize(("row", "errors"), EVENT_ERRORS)
def test_an_impossible_extra_is_refused_by_cell(row: dict[str, Any], errors: list[str]) -> None:
    cells = {header: Place("Extra payments", f"X{number}") for number, header in
             ((2, "Date"), (3, "Amount"), (4, "Every"))}  # fmt: skip
    entered = noted(extra_payments=(ExtraPayment(**row, where=cells),))
    assert said(entered, Severity.ERROR) == errors


def rate_change(row: int, from_date: date, rate: str, payment: Any = None) -> RateChange:
    cells = {header: Place("Rate changes", f"{letter}{row}") for letter, header in
             (("B", "From"), ("C", "Annual rate"), ("D", "Payment"))}  # fmt: skip
    return RateChange(from_date=from_date, annual_rate=Decimal(rate), payment=payment, where=cells)


@pytest.mark.parametrize(
    ("changes", "errors"),
    [
        (
            [rate_change(2, date(2023, 12, 1), "0.05")],
            ["B2 E7 | the rate change of 2023-12-01 is before the funding date 2024-01-01 (Loans!E7) | enter "
             "the rate at funding as Annual rate, and later changes here"],
        ),
        (
            [rate_change(2, date(2024, 3, 1), "0.05"), rate_change(3, date(2024, 3, 1), "0.06")],
            ["B3 B2 | two rate changes start on 2024-03-01 | keep one of them"],
        ),
        (
            [rate_change(2, date(2024, 3, 1), "0.05", Decimal(0))],
            ["D2 | a payment must be above zero | correct the amount"],
        ),
        (
            [rate_change(2, date(2024, 3, 1), "-1.5")],
            ["C2 | an annual rate of -150 % cannot be | give a rate above -100 % and up to 1,000 %"],
        ),
    ],
)  # fmt: skip
def test_an_impossible_rate_change_is_refused_by_cell(changes: list[RateChange], errors: list[str]) -> None:
    assert said(noted(rate_changes=tuple(changes)), Severity.ERROR) == errors


def test_all_problems_in_one_pass() -> None:
    entered = noted(
        currency="QQQ", principal=Decimal(-1), annual_rate=Decimal(20), first_payment=date(2020, 1, 1)
    )
    assert [text.split(" | ")[0] for text in said(entered, Severity.ERROR)] == ["B7", "F7 E7", "C7", "D7"]


WARNINGS: list[tuple[dict[str, Any], list[str]]] = [
    (
        {"annual_rate": Decimal("0.3601")},
        ["D7 | an annual rate of 36.01 % is unusual | check it, and whether percent was meant"],
    ),
    ({"annual_rate": Decimal("0.36")}, []),
    ({"annual_rate": Decimal(0)}, []),
    (
        {"annual_rate": Decimal("-0.005")},
        ["D7 | an annual rate of -0.5 % is unusual | check it, and whether percent was meant"],
    ),
    (
        {"annual_rate": Decimal(10)},
        ["D7 | an annual rate of 1000 % is unusual | check it, and whether percent was meant"],
    ),
    ({"term": Length(721)}, ["G7 | the loan runs more than 60 years, to 2084-02-01"]),
    ({"term": Length(720)}, []),
    (
        {"first_payment": date(2024, 2, 10), "month_end": MonthEnd.YES},
        ["F7 U7 | Month-end is yes, so the first payment is taken to fall on 2024-02-29 instead of "
         "2024-02-10 | enter the last day of the month, or set Month-end to no"],
    ),
    (
        {"amortized_over": Length(3)},
        ["N7 G7 | 3 payments are fewer than the 4 the term leaves, and have no effect | give more, or leave "
         "it blank"],
    ),
    ({"amortized_over": Length(4)}, []),
    (
        {"amortized_over": Length(9), "repayment": Repayment.INTEREST_ONLY},
        ["N7 | has no effect on these terms | leave it blank"],
    ),
    (
        {"payment": Decimal(100), "repayment": Repayment.INTEREST_ONLY},
        ["L7 K7 | Repayment is interest only, so the payment given is not used | leave Payment blank, or "
         "change Repayment"],
    ),
    (
        {"balloon": Decimal(100), "repayment": Repayment.AT_MATURITY},
        ["M7 K7 | Repayment is at maturity: all principal is left to the end, whatever Balloon says | leave "
         "Balloon blank"],
    ),
    ({"balloon": Decimal(12000), "repayment": Repayment.INTEREST_ONLY}, []),
    (
        {"interest_only_payments": 2, "repayment": Repayment.INTEREST_ONLY},
        ["O7 | Repayment is interest only: the number is not used | leave it blank"],
    ),
    (
        {"extra_from": date(2024, 2, 1), "extra_until": date(2024, 3, 1)},
        ["S7 | has no effect without Extra each payment | give the amount",
         "T7 | has no effect without Extra each payment | give the amount"],
    ),
    (
        {"extra_payments": (ExtraPayment(date=date(2025, 1, 1), amount=Decimal(5)),)},
        ["the extra payment of 2025-01-01 falls after the last payment, 2024-05-01"],
    ),
]  # fmt: skip


@pytest.mark.parametrize(("terms", "warnings"), WARNINGS)
def test_a_doubtful_note_is_computed_and_warned_of(terms: dict[str, Any], warnings: list[str]) -> None:
    entered = noted(**terms)
    assert said(entered, Severity.ERROR) == []
    assert said(entered, Severity.WARNING) == warnings
    assert resolve(entered)[0] is not None


@pytest.mark.parametrize(
    ("treatment", "verb"),
    [
        (FirstPeriod.PAY_AT_FUNDING, "pay at funding"),
        (FirstPeriod.CAPITALIZE, "capitalize"),
        (FirstPeriod.WAIVE, "waive"),
    ],
)
def test_a_short_first_period_has_nothing_to_treat(treatment: FirstPeriod, verb: str) -> None:
    entered = noted(first_payment=date(2024, 1, 20), first_period=treatment)
    assert said(entered, Severity.NOTE) == [
        f"P7 | the first period is short and has no odd days to {verb}: the first payment is lowered by the "
        "interest of the missing days instead"
    ]
    assert terms_of(entered).first_period is FirstPeriod.ADD_TO_FIRST


def test_the_payment_of_level_principal_is_its_principal_part() -> None:
    entered = noted(payment=Decimal(3000), repayment=Repayment.LEVEL_PRINCIPAL)
    assert said(entered, Severity.NOTE) == [
        "L7 | with level principal, Payment is the principal part of each payment"
    ]


# ---------------------------------------------------------------- defaults


def test_every_default() -> None:
    terms = terms_of(loan())
    assert terms.side is Side.PAYABLE
    assert terms.currency == "USD"
    assert terms.frequency is Frequency.MONTHLY
    assert terms.timing is Timing.ARREARS
    assert terms.repayment is Repayment.LEVEL_PAYMENT
    assert terms.day_count is terms.odd_day_count is DayCount.THIRTY_360
    assert not terms.odd_day_count_given
    assert terms.first_period is FirstPeriod.ACCRUE
    assert terms.long_first is LongFirst.SIMPLE
    assert terms.payment_basis is PaymentBasis.AS_ACCRUED
    assert (terms.payment_rounding, terms.payment_step) == (PaymentRounding.NEAREST, 1)
    assert terms.interest_rounding is InterestRounding.HALF_UP
    assert terms.unpaid_interest is UnpaidInterest.ADD
    assert (terms.payment, terms.balloon, terms.amortized_over) == (None, None, None)
    assert (terms.interest_only, terms.each_payment) == (0, 0)
    assert (terms.extras, terms.repricings) == ((), ())
    assert (terms.digits, terms.principal) == (2, 12000_00)


@pytest.mark.parametrize(
    ("frequency", "day_count"),
    [
        (Frequency.TWICE_A_MONTH, DayCount.THIRTY_360),
        (Frequency.YEARLY, DayCount.THIRTY_360),
        (Frequency.WEEKLY, DayCount.ACTUAL_365_FIXED),
        (Frequency.EVERY_4_WEEKS, DayCount.ACTUAL_365_FIXED),
    ],
)
def test_the_day_count_follows_the_frequency(frequency: Frequency, day_count: DayCount) -> None:
    assert terms_of(loan(frequency=frequency)).day_count is day_count


def test_odd_days_of_equal_periods_are_counted_on_365() -> None:
    terms = terms_of(loan(day_count=DayCount.EQUAL_PERIODS))
    assert (terms.odd_day_count, terms.odd_day_count_given) == (DayCount.ACTUAL_365_FIXED, False)
    terms = terms_of(loan(odd_day_count=DayCount.ACTUAL_360))
    assert (terms.odd_day_count, terms.odd_day_count_given) == (DayCount.ACTUAL_360, True)


def test_the_books_currency_fills_a_blank() -> None:
    terms, _ = resolve(loan(), Settings(currency="KWD"))
    assert terms is not None
    assert (terms.currency, terms.digits, terms.principal) == ("KWD", 3, 12000_000)


def test_carried_interest_keeps_six_more_digits() -> None:
    terms = terms_of(loan(interest_rounding=InterestRounding.NONE, balloon=Decimal("0.01")))
    assert (terms.currency_digits, terms.digits) == (2, 8)
    assert (terms.principal, terms.balloon) == (12000_00_000000, 1_000000)
    assert terms.payment_step == 1_000000


def test_extras_and_rate_changes_by_default() -> None:
    extra = ExtraPayment(date=date(2024, 2, 10), amount=Decimal(5))
    change = RateChange(from_date=date(2024, 2, 10), annual_rate=Decimal("0.05"))
    terms = terms_of(loan(extra_payments=(extra,), rate_changes=(change,)))
    assert (terms.extras[0].effect, terms.extras[0].applies_to) == (ExtraEffect.SHORTEN, AppliesTo.PRINCIPAL)
    assert terms.repricings[0].payment is PaymentChange.REAMORTIZE


@pytest.mark.parametrize(
    "terms",
    [{"repayment": Repayment.LEVEL_PRINCIPAL}, {"term": None, "payment": Decimal(1000)}],
)
def test_a_payment_that_decides_the_term_is_kept(terms: dict[str, Any]) -> None:
    change = RateChange(from_date=date(2024, 2, 10), annual_rate=Decimal("0.05"))
    assert terms_of(loan(rate_changes=(change,), **terms)).repricings[0].payment is PaymentChange.KEEP


# ---------------------------------------------------------------- dates and lengths


def test_funding_is_one_regular_period_before_the_first_payment() -> None:
    terms = terms_of(loan(funding_date=None, first_payment=date(2024, 3, 31)))
    assert terms.funding == date(2024, 2, 29)  # month-ends


def test_the_first_payment_keeps_the_day_of_funding() -> None:
    due = terms_of(loan(funding_date=date(2025, 1, 30))).due
    assert [due[number] for number in (1, 2)] == [date(2025, 2, 28), date(2025, 3, 30)]


def test_in_advance_the_first_payment_is_the_funding_date() -> None:
    for given in ({}, {"first_payment": date(2024, 1, 1)}):
        terms = terms_of(loan(timing=Timing.ADVANCE, **given))
        assert terms.due[1] == terms.funding == date(2024, 1, 1)
    terms = terms_of(loan(timing=Timing.ADVANCE, funding_date=None, first_payment=date(2024, 1, 31)))
    assert (terms.funding, terms.due[2]) == (date(2024, 1, 31), date(2024, 2, 29))


def test_maturity_and_term_agree() -> None:
    terms = terms_of(loan(term=Length(4), maturity=date(2024, 5, 1)))
    assert terms.count == 4
    assert terms_of(loan(term=None, maturity=date(2024, 5, 1))).count == 4


@pytest.mark.parametrize(
    ("length", "frequency", "payments"),
    [
        (Length(84, MONTHS), Frequency.MONTHLY, 84),
        (Length(360, MONTHS), Frequency.EVERY_2_WEEKS, 780),
        (Length(84, MONTHS), Frequency.QUARTERLY, 28),
        (Length(7, MONTHS), Frequency.QUARTERLY, None),
        (Length(90, MONTHS), Frequency.TWICE_A_MONTH, 180),
        (Length(12, MONTHS), Frequency.EVERY_4_WEEKS, 13),
        (Length(26, WEEKS), Frequency.WEEKLY, 26),
        (Length(26, WEEKS), Frequency.EVERY_2_WEEKS, 13),
        (Length(26, WEEKS), Frequency.EVERY_4_WEEKS, None),
        (Length(26, WEEKS), Frequency.MONTHLY, None),
        (Length(28, DAYS), Frequency.EVERY_2_WEEKS, 2),
        (Length(30, DAYS), Frequency.MONTHLY, None),
        (Length(5), Frequency.YEARLY, 5),
    ],
)
def test_lengths_in_payments(length: Length, frequency: Frequency, payments: int | None) -> None:
    assert payments_in(length, frequency) == payments


@pytest.mark.parametrize(
    ("length", "after"),
    [
        (Length(1, MONTHS), date(2024, 2, 29)),
        (Length(13, MONTHS), date(2025, 2, 28)),
        (Length(2, WEEKS), date(2024, 2, 14)),
        (Length(30, DAYS), date(2024, 3, 1)),
        (Length(3), None),
    ],
)
def test_lengths_from_a_date(length: Length, after: date | None) -> None:
    assert date_after(date(2024, 1, 31), length) == after


@pytest.mark.parametrize(
    ("every", "until", "dates"),
    [
        (Frequency.MONTHLY, 3, ["2024-02-01", "2024-03-01", "2024-04-01"]),
        (Frequency.MONTHLY, date(2024, 3, 1), ["2024-02-01", "2024-03-01"]),  # until includes its day
        (Frequency.MONTHLY, None, ["2024-02-01", "2024-03-01", "2024-04-01", "2024-05-01"]),
        (Frequency.EVERY_4_WEEKS, 2, ["2024-02-01", "2024-02-29"]),
        (None, None, ["2024-02-01"]),
    ],
)
def test_repeating_extras(every: Frequency | None, until: Any, dates: list[str]) -> None:
    extra = ExtraPayment(date=date(2024, 2, 1), amount=Decimal(5), every=every, until=until)
    assert [str(each.date) for each in terms_of(loan(extra_payments=(extra,))).extras] == dates


def test_an_extra_with_the_payments_follows_their_month_ends() -> None:
    # due on the 30th, in February on the 28th: an extra that starts there goes on with the payments
    extra = ExtraPayment(date=date(2025, 2, 28), amount=Decimal(5), every=Frequency.MONTHLY, until=2)
    entered = loan(funding_date=date(2025, 1, 30), extra_payments=(extra,))
    assert [str(each.date) for each in terms_of(entered).extras] == ["2025-02-28", "2025-03-30"]


# ---------------------------------------------------------------- floats, and payments that never repay


@pytest.mark.parametrize(
    "terms",
    [
        {"principal": 12000.0},
        {"annual_rate": 0.12},
        {"payment": 100.0},
        {"balloon": 100.0},
        {"extra_each_payment": 1.0},
        {"payment_rounding": PaymentStep(PaymentRounding.UP, 1.0)},  # type: ignore[arg-type]  # a float
        {"extra_payments": (ExtraPayment(date=date(2024, 2, 1), amount=1.0),)},  # type: ignore[arg-type]  # a float
        {"rate_changes": (RateChange(from_date=date(2024, 2, 1), annual_rate=0.1),)},  # type: ignore[arg-type]  # a float
    ],
)
def test_floats_are_refused(terms: dict[str, Any]) -> None:
    with pytest.raises(TypeError, match=r"must be a Decimal.*not a? ?float"):
        resolve(loan(**terms))


def test_a_payment_that_never_repays_is_refused_by_cell() -> None:
    # 12,000 at 1 % a month is 120.00, and 110.00 is paid
    with pytest.raises(TermsError) as raised:
        build(terms_of(noted(term=None, payment=Decimal(110))))
    problem = raised.value.problems[0]
    assert (problem.cell, [place.cell for place in problem.also]) == ("L7", ["D7"])
    assert problem.problem.startswith("the payment of 110.00 does not repay the loan: after 1,200 payments ")
    assert problem.remedy == "give a higher payment, or the Term or Maturity at which the rest falls due"


def test_what_a_finished_schedule_says() -> None:
    # 12,000 x 1.01 - 100 = 12,020.00; 12,040.20; 12,060.60; and x 1.01 = 12,181.21 with the last
    schedule = built(payment=Decimal(100), where=CELLS)
    assert [str(problem) for problem in schedule.problems] == [
        "warning: Loans!L7 [as typed]: loan L1: 3 payments do not cover the interest, the first on "
        "2024-02-01; what is unpaid is added to the balance; check the payment and the rate",
        "warning: Loans!L7 [as typed]: loan L1: the last payment of 12,181.21 on 2024-05-01 is 12,081.21 "
        "more than the payment of 100.00: what the payments leave falls due with it; check the terms if no "
        "balloon is meant",
    ]
