"""The effective annual rate: (1 + r/m)^m - 1, worked by hand and by repeated multiplication."""

from decimal import Decimal
from fractions import Fraction

import pytest

from engine.support import loan, terms_of
from tenorbook.basis.conventions import DayCount, Frequency, Repayment
from tenorbook.terms.loan import Length, LengthUnit
from tenorbook.yields.effective import effective_annual_rate


@pytest.mark.parametrize(
    ("rate", "frequency", "effective"),
    [
        ("0.12", Frequency.MONTHLY, "0.1268250301"),  # 1.01^12 = 1.12682503013...
        ("0.12", Frequency.QUARTERLY, "0.1255088100"),  # 1.03^4 = 1.12550881
        ("0.12", Frequency.TWICE_A_YEAR, "0.1236000000"),  # 1.06^2
        ("0.12", Frequency.YEARLY, "0.1200000000"),
        ("0.18", Frequency.EVERY_2_MONTHS, "0.1940522965"),  # 1.03^6 = 1.194052296529
        ("0", Frequency.MONTHLY, "0E-10"),
        ("-0.12", Frequency.TWICE_A_YEAR, "-0.1164000000"),  # 0.94^2 = 0.8836
    ],
)
def test_by_hand(rate: str, frequency: Frequency, effective: str) -> None:
    terms = terms_of(loan(annual_rate=Decimal(rate), frequency=frequency))
    assert str(effective_annual_rate(terms)) == effective


def test_actual_360_bears_365_days() -> None:
    # 0.072 x 365/360 = 0.073 in a year; yearly payments
    terms = terms_of(
        loan(annual_rate=Decimal("0.072"), frequency=Frequency.YEARLY, day_count=DayCount.ACTUAL_360)
    )
    assert effective_annual_rate(terms) == Decimal("0.073")


@pytest.mark.parametrize("terms", [
    {"frequency": Frequency.AT_MATURITY, "term": Length(6, LengthUnit.MONTHS)},
    {"repayment": Repayment.AT_MATURITY},
])  # fmt: skip
def test_paid_at_maturity_compounds_once_a_year_at_most(terms: dict[str, object]) -> None:
    assert effective_annual_rate(terms_of(loan(**terms))) == Decimal("0.12")


@pytest.mark.parametrize("frequency", [each for each in Frequency if each is not Frequency.AT_MATURITY])
def test_by_exact_multiplication(frequency: Frequency) -> None:
    exact = Fraction(1)
    for _ in range(frequency.per_year):
        exact *= 1 + Fraction("0.0625") / frequency.per_year
    found = effective_annual_rate(terms_of(loan(annual_rate=Decimal("0.0625"), frequency=frequency)))
    assert abs(Fraction(found) - (exact - 1)) <= Fraction(1, 2 * 10**10)
