"""The oracle against published figures and hand arithmetic; every expectation has its source or its sum."""

from __future__ import annotations

from datetime import date
from decimal import Decimal as Dec
from fractions import Fraction as Frac

import pytest

from . import schedule
from .dates import STEPS, Grid
from .daycounts import Context, by_dates
from .money import round_units

Rows = list[dict[str, object]]

# 1 % a month; every factor of the hand sums below is 0.01, a day of 30/360 is 1/3000
TWELVE = {"Principal": Dec(12000), "Annual rate": Dec("0.12"), "Funding date": date(2024, 1, 1), "Term": 4}
# funded 22 days (30/360: from the 10th to the 1st, 21 days) before the regular month
LONG = TWELVE | {"Funding date": date(2024, 1, 10), "First payment": date(2024, 3, 1)}


def column(rows: Rows, name: str, kind: str = "payment") -> list[object]:
    return [row[name] for row in rows if row["kind"] == kind]


def amounts(*texts: str) -> list[object]:
    return [Dec(text) for text in texts]


# ---------------------------------------------------------------------- level payment, published


def test_ten_thousand_in_twenty_four_months() -> None:
    # https://www.pureprogrammer.org/py/format_project.cgi/projects/AmortizationTable2.txt
    loan = {
        "Principal": Dec(10000),
        "Annual rate": Dec("0.05"),
        "Funding date": date(2024, 1, 15),
        "Term": 24,
    }
    assert column(schedule(loan), "payment") == amounts(*["438.71"] * 23, "438.82")


def test_thirty_year_mortgage_leaves_three_dollars() -> None:
    # https://www.hpmuseum.org/forum/showthread.php?mode=threaded&tid=16594&pid=145540: 360 x 1,289.54, and
    # with each period's interest rounded 3.00 is left, which the last payment takes
    loan = {
        "Principal": Dec(180000),
        "Annual rate": Dec("0.0775"),
        "Funding date": date(2024, 1, 1),
        "Term": "30 years",
    }
    assert column(schedule(loan), "payment") == amounts(*["1289.54"] * 359, "1292.54")


def test_given_payment_with_its_term() -> None:
    # OpenStax, Principles of Accounting, Financial Accounting s.13.2: the payment comes from a factor of
    # three decimals, and the last one is raised to clear the note
    loan = {
        "Principal": Dec(10000),
        "Annual rate": Dec("0.12"),
        "Funding date": date(2024, 1, 1),
        "Frequency": "yearly",
        "Term": 5,
        "Payment": Dec("2773.93"),
    }
    rows = schedule(loan)
    assert column(rows, "interest") == amounts("1200.00", "1011.13", "799.59", "562.67", "297.32")
    assert column(rows, "payment") == amounts(*["2773.93"] * 4, "2774.99")


def test_given_payment_until_paid_off() -> None:
    # a computer-algebra system's help page for its amortization table: 100 at 10 %, 50 a period, last 17.60
    loan = {
        "Principal": Dec(100),
        "Annual rate": Dec("0.10"),
        "Funding date": date(2024, 1, 1),
        "Frequency": "yearly",
        "Payment": Dec(50),
    }
    assert column(schedule(loan), "payment") == amounts("50.00", "50.00", "17.60")


def test_level_principal() -> None:
    # Ross, Westerfield, Jordan, Fundamentals of Corporate Finance, ch. 6 problem 56 (course-posted solution)
    loan = {
        "Principal": Dec(42000),
        "Annual rate": Dec("0.08"),
        "Funding date": date(2024, 1, 1),
        "Frequency": "yearly",
        "Term": 5,
        "Repayment": "level principal",
    }
    expected = amounts("11760.00", "11088.00", "10416.00", "9744.00", "9072.00")
    assert column(schedule(loan), "payment") == expected


def test_interest_unrounded() -> None:
    # OpenStax, Contemporary Mathematics s.6.8: 5,000 at 8 %, 60 months, a spreadsheet at full precision,
    # row 27; its payment is unrounded too (101.38197), ours is 101.38: 27 months of 0.00197 with interest
    loan = {
        "Principal": Dec(5000),
        "Annual rate": Dec("0.08"),
        "Funding date": date(2024, 1, 1),
        "Term": 60,
        "Interest rounding": "none",
    }
    row = schedule(loan)[27]
    assert row["interest"] == pytest.approx(Dec("20.50"), abs=Dec("0.005"))
    assert row["closing_balance"] == pytest.approx(Dec("2994.24"), abs=Dec("0.07"))
    assert str(row["interest"])[-9] == "."  # cents and six digits more


def test_commercial_mortgage_actual_360() -> None:
    # public asset-level exhibit (SEC EX-102), March 2026: 20,000,000 at 6.065 %, 120 months, amortized over
    # 360, payment set on equal periods, interest actual/360: 120,747.17 = 94,344.44 + 26,402.73
    loan = {
        "Principal": Dec(20000000),
        "Annual rate": Dec("0.06065"),
        "First payment": date(2026, 3, 6),
        "Term": 120,
        "Amortized over": 360,
        "Day count": "Actual/360",
        "Payment basis": "equal periods",
    }
    row = schedule(loan)[1]
    assert row["interest"] == Dec("94344.44")  # 20,000,000 x 0.06065 x 28 / 360
    assert row["principal"] == Dec("26402.73")


def test_united_states_rule() -> None:
    # a nineteenth-century school arithmetic (public domain, books.google.com id jr8DAAAAQAAJ, p. 50): 600 at
    # 6 %, 30/360; the payment of 24 (its date is not legible) leaves interest unpaid, which does not compound
    loan = {
        "Principal": Dec(600),
        "Annual rate": Dec("0.06"),
        "Funding date": date(1874, 6, 20),
        "Maturity": date(1877, 1, 21),
        "Frequency": "at maturity",
        "Day count": "30/360 by dates",
    }
    paid = {
        date(1874, 10, 2): Dec("110.20"),
        date(1876, 1, 1): Dec("24.00"),
        date(1876, 5, 23): Dec("125.25"),
        date(1876, 12, 11): Dec("113.20"),
    }
    extras = [{"Date": day, "Amount": paid[day], "Applies to": "interest first"} for day in paid]
    rows = schedule(loan, extra_payments=extras)
    assert column(rows, "closing_balance", "extra") == amounts("500.00", "500.00", "400.00", "300.00")
    assert column(rows, "interest", "extra") == amounts("10.20", "24.00", "25.25", "13.20")
    assert rows[-1]["payment"] == Dec("302.00")


def test_yearly_rate_changes_re_amortize() -> None:
    # 12 CFR 1026 Appendix H, sample H-14: 10,000 over 360 months at 12.41 %, first year 106.03, fourth year
    # at most 145.34 (145.3441 unrounded); 14.41, 16.41 and 17.41 % from each anniversary
    loan = {
        "Principal": Dec(10000),
        "Annual rate": Dec("0.1241"),
        "Funding date": date(2024, 1, 1),
        "Term": 360,
    }
    rates = ["0.1441", "0.1641", "0.1741"]
    changes = [{"From": date(2025 + k, 1, 1), "Annual rate": Dec(rate)} for k, rate in enumerate(rates)]
    paid = column(schedule(loan, rate_changes=changes), "payment")
    assert paid[11:13] == amounts("106.03", "121.59")  # the change on a due date shows in the next payment
    assert paid[24] == Dec("137.39")
    assert paid[36] == pytest.approx(Dec("145.34"), abs=Dec("0.01"))


# ---------------------------------------------------------------------- dates and day counts

COUNTS = [
    # ISDA 1998 memorandum "EMU and market conventions", as the test suites of Strata and QuantLib have it
    ("Actual/Actual ISDA", date(2003, 11, 1), date(2004, 5, 1), Frac(61, 365) + Frac(121, 366)),
    ("Actual/Actual ISDA", date(1999, 2, 1), date(1999, 7, 1), Frac(150, 365)),
    # Strata DayCountTest; Act/365.25 in hundredths of days
    ("30/360 by dates", date(2011, 12, 28), date(2012, 2, 29), Frac(61, 360)),
    ("30E/360", date(2011, 12, 28), date(2012, 2, 29), Frac(61, 360)),
    ("NL/365", date(2011, 12, 28), date(2012, 2, 29), Frac(62, 365)),
    ("NL/365", date(2011, 12, 28), date(2012, 2, 28), Frac(62, 365)),
    ("Actual/365.25", date(2011, 12, 28), date(2012, 2, 28), Frac(6200, 36525)),
    # the dialects at February's end, own arithmetic: 28 Feb 2023 to 31 Mar 2023 counts 33, 30, 32 and 30 days
    ("30/360 by dates", date(2023, 2, 28), date(2023, 3, 31), Frac(33, 360)),
    ("30/360 US EOM", date(2023, 2, 28), date(2023, 3, 31), Frac(30, 360)),
    ("30E/360", date(2023, 2, 28), date(2023, 3, 31), Frac(32, 360)),
    ("30E/360 ISDA", date(2023, 2, 28), date(2023, 3, 31), Frac(30, 360)),
    ("30E/360 ISDA", date(2023, 1, 31), date(2023, 2, 28), Frac(30, 360)),
    # Rule 251: half-yearly, 182 days in the period of 1 Nov 2003 to 1 May 2004
    ("Actual/Actual ICMA", date(2003, 11, 1), date(2004, 4, 30), Frac(181, 364)),
    ("Actual/365 Leap", date(2003, 11, 1), date(2004, 4, 30), Frac(181, 366)),
]


@pytest.mark.parametrize(("name", "d1", "d2", "expected"), COUNTS)
def test_day_counts(name: str, d1: date, d2: date, expected: Frac) -> None:
    grid = Grid(date(2004, 5, 1), STEPS["twice a year"], "no")
    assert by_dates(name, d1, d2, Context(d1, d2, grid, False, None)) == expected


def test_maturity_on_the_last_of_february_stays() -> None:
    grid = Grid(date(2023, 2, 28), STEPS["monthly"], "auto")
    context = Context(date(2023, 1, 31), date(2023, 2, 28), grid, False, date(2023, 2, 28))
    assert by_dates("30E/360 ISDA", date(2023, 1, 31), date(2023, 2, 28), context) == Frac(28, 360)


def test_due_dates_count_from_the_anchor() -> None:
    def three(anchor: date, frequency: str, month_end: str, derived: bool = False) -> list[str]:
        grid = Grid(anchor, STEPS[frequency], month_end, number=0 if derived else 1, derived=derived)
        return [grid.due(i).isoformat()[5:] for i in (1, 2, 3)]

    assert three(date(2025, 1, 31), "monthly", "no") == ["01-31", "02-28", "03-31"]
    assert three(date(2025, 2, 28), "monthly", "auto") == ["02-28", "03-31", "04-30"]
    assert three(date(2025, 2, 28), "monthly", "no") == ["02-28", "03-28", "04-28"]
    assert three(date(2025, 1, 30), "monthly", "auto", derived=True) == ["02-28", "03-30", "04-30"]
    assert three(date(2025, 1, 15), "twice a month", "auto") == ["01-15", "01-30", "02-15"]
    assert three(date(2025, 1, 31), "twice a month", "auto") == ["01-31", "02-16", "02-28"]
    assert three(date(2025, 1, 15), "monthly", "yes") == ["01-31", "02-28", "03-31"]
    assert three(date(2025, 1, 31), "every 2 weeks", "auto") == ["01-31", "02-14", "02-28"]


def test_interest_rounding_rules() -> None:
    rules = ["half up", "half even", "down", "up"]
    assert [round_units(Frac(5, 2), rule) for rule in rules] == [3, 2, 2, 3]
    assert [round_units(Frac(-5, 2), rule) for rule in rules] == [-3, -2, -2, -3]


@pytest.mark.parametrize(("currency", "interest"), [("JPY", "100"), ("EUR", "100.01"), ("KWD", "100.008")])
def test_currency_digits(currency: str, interest: str) -> None:
    # 10,000.8 x 1 %, in a currency that has the digits; JPY 10,000
    principal = Dec(10000) if currency == "JPY" else Dec("10000.8")
    row = schedule(TWELVE | {"Principal": principal, "Currency": currency, "Repayment": "interest only"})[1]
    assert str(row["interest"]) == interest


# ---------------------------------------------------------------------- the first period
# odd days 21 of 30/360: 12,000 x 0.12 x 21/360 = 84.00; the regular month 120.00


@pytest.mark.parametrize(
    ("treatment", "compound", "first_interest", "first_payment"),
    [
        # regular level payment: 12,000 x 0.01 / (1 - 1.01^-4) = 3,075.37
        ("add to first payment", "simple", "204.00", "3159.37"),  # + 84.00
        ("add to first payment", "compound", "204.84", "3160.21"),  # + 84.00 x 1.01
        ("pay at funding", "simple", "120.00", "3075.37"),
        ("waive", "compound", "120.00", "3075.37"),
        # 12,084 instead of 12,000; the level payment 3,075.3723 x 12,084 / 12,000 = 3,096.8999
        ("capitalize", "simple", "120.84", "3096.90"),
        ("accrue", "compound", "204.84", "3096.90"),
        # 12,000 x 1.017 / (1.01 x annuity factor 3.9019656) = 12,204 / 3.9409852 = 3,096.6876
        ("accrue", "simple", "204.00", "3096.69"),
    ],
)
def test_long_first_period(treatment: str, compound: str, first_interest: str, first_payment: str) -> None:
    rows = schedule(LONG | {"First period": treatment, "Long first period": compound})
    assert column(rows, "interest")[0] == Dec(first_interest)
    assert column(rows, "payment")[0] == Dec(first_payment)
    assert rows[0]["interest"] == (Dec(84) if treatment == "pay at funding" else 0)
    assert column(rows, "principal", "capitalize") == ([Dec(-84)] if treatment == "capitalize" else [])


def test_short_first_period_lowers_the_first_payment() -> None:
    # funded on the 11th: 120.00 for the month less 10 days, 12,000 x 0.12 x 10/360 = 40.00
    rows = schedule(LONG | {"Funding date": date(2024, 2, 11), "First period": "waive"})
    assert column(rows, "interest")[0] == Dec("80.00")
    assert column(rows, "payment")[:2] == amounts("3035.37", "3075.37")


def test_two_whole_months_and_odd_days() -> None:
    # 22 Dec to 1 Jan is 9 days (36.00); 12,036 x 1.01 = 12,156.36 on 1 Feb, capitalized; then 121.56
    loan = LONG | {
        "Funding date": date(2023, 12, 22),
        "First period": "capitalize",
        "Long first period": "compound",
    }
    rows = schedule(loan)
    assert column(rows, "interest", "capitalize") == amounts("156.36")
    assert column(rows, "interest")[0] == Dec("121.56")


# ---------------------------------------------------------------------- in advance


def test_level_in_advance_with_a_balloon() -> None:
    # annuity due: (12,000 - 6,000 x 1.01^-3) / (1 + 2.940985) = 1,567.24; balloon a month later with 60.00
    rows = schedule(TWELVE | {"Timing": "advance", "Balloon": Dec(6000)})
    assert column(rows, "payment") == amounts("1567.24", "1567.24", "1567.24", "1567.23")
    assert [rows[-1][name] for name in ("kind", "opening_balance", "interest", "payment")] == [
        "balloon",
        Dec(6000),
        Dec(60),
        Dec(6060),
    ]


def test_interest_only_in_advance_settles_what_events_change() -> None:
    # 120.00 a month in advance; 3,000 less for half of February is 15.00 off March's 90.00; in the second
    # half of March the rate falls by half: 9,000 x 0.06 / 24 = 22.50 off April's 9,000 x 0.005 = 45.00
    rows = schedule(
        TWELVE | {"Timing": "advance", "Repayment": "interest only"},
        extra_payments=[{"Date": date(2024, 2, 16), "Amount": Dec(3000)}],
        rate_changes=[{"From": date(2024, 3, 16), "Annual rate": Dec("0.06")}],
    )
    assert column(rows, "payment") == amounts("120.00", "120.00", "75.00", "22.50")
    assert (rows[-1]["kind"], rows[-1]["payment"]) == ("balloon", Dec(9000))


# ---------------------------------------------------------------------- extra payments and rates


def test_extra_inside_a_period_splits_it() -> None:
    # 12,000 for 15 days (60.00) and 9,000 for 15 (45.00): by dates to the 16th, the rest is the month's
    extra = {"Date": date(2024, 1, 16), "Amount": Dec(3000), "Effect": "lower payment"}
    rows = schedule(TWELVE, extra_payments=[extra])
    paid = column(rows, "payment")
    assert rows[2]["interest"] == Dec("105.00")
    assert paid[0] == Dec("3075.37")  # the payment after the extra is still the old one
    # 12,000 - 3,000 - (3,075.37 - 105) = 6,029.63 over three: x 0.01 / (1 - 1.01^-3) = 2,050.21
    assert paid[1] == Dec("2050.21")


def test_paying_ahead() -> None:
    # 12,000 - 2,955.37 - 3,500 = 5,544.63; 1 % of it, 55.45, goes on being paid. 3,500 ahead takes all the
    # principal of the next instalment (3,019.92) and 480.08 of the one after: 3,075.37 - 480.08 = 2,595.29
    extra = {"Date": date(2024, 2, 1), "Amount": Dec(3500), "Effect": "pay ahead"}
    rows = schedule(TWELVE, extra_payments=[extra])
    assert column(rows, "extra_principal") == amounts("3500.00", "0.00", "0.00", "0.00")
    assert column(rows, "payment")[:3] == amounts("6575.37", "55.45", "2595.29")
    assert column(rows, "principal")[1] == Dec("0.00")


def test_extra_that_clears_the_loan() -> None:
    # 9,044.63 after the first payment; fifteen days of it are 45.22
    extra = {"Date": date(2024, 2, 16), "Amount": Dec(50000)}
    last = schedule(TWELVE, extra_payments=[extra])[-1]
    assert [last[name] for name in ("kind", "interest", "extra_principal", "payment")] == [
        "extra",
        Dec("45.22"),
        Dec("9044.63"),
        Dec("9089.85"),
    ]


def test_rate_change_inside_a_period_waits_a_period() -> None:
    # January half at 12 %, half at 6 %: 60.00 + 30.00; re-amortized from 1 Feb's balance, in force on 1 Mar
    rows = schedule(TWELVE, rate_changes=[{"From": date(2024, 1, 16), "Annual rate": Dec("0.06")}])
    assert [row["kind"] for row in rows[:3]] == ["funding", "rate", "payment"]
    assert [row["annual_rate"] for row in rows[1:3]] == amounts("0.12", "0.06")
    assert rows[2]["interest"] == Dec("90.00")
    # 12,000 - (3,075.37 - 90.00) = 9,014.63 over three at 0.5 %: x 0.005 / (1 - 1.005^-3) = 3,034.98
    assert column(rows, "payment")[:2] == amounts("3075.37", "3034.98")


def test_repeating_extras_count_from_their_own_date() -> None:
    extra = {"Date": date(2024, 1, 30), "Amount": Dec(10), "Every": "monthly", "Until": 3}
    rows = schedule(TWELVE, extra_payments=[extra])
    expected = [date(2024, 1, 30), date(2024, 2, 29), date(2024, 3, 30)]
    assert column(rows, "date", "extra") == expected


def test_at_maturity_is_simple_interest() -> None:
    # four months of 12,000 at 12 %, half-way through the second 3,000 repaid: 180.00 + 225.00
    extra = {"Date": date(2024, 2, 16), "Amount": Dec(3000)}
    rows = schedule(TWELVE | {"Repayment": "at maturity"}, extra_payments=[extra])
    assert [row["kind"] for row in rows] == ["funding", "extra", "payment"]
    assert rows[-1]["interest"] == Dec("405.00")
