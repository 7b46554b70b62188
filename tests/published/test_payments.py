"""Published level payments, to the cent or to the step the source rounds to."""

from decimal import Decimal

import pytest

from published.helpers import Figures, schedule
from published.printed import records

Case = dict[str, str]
CASES: list[Case] = records("payments.csv")


def _name(case: Case) -> str:
    return f"{case['id']} {case['principal']} {case['annual_rate']} x{case['payments']}"


@pytest.mark.parametrize("case", CASES, ids=_name)
def test_published_payment(case: Case) -> None:
    built = schedule(
        {
            "principal": case["principal"],
            "annual_rate": case["annual_rate"],
            "frequency": case["frequency"],
            "term": int(case["payments"]),
            "timing": case["timing"],
            "payment_rounding": case["rounding"],
        }
    )
    assert Figures(built).figure("payment", 1) == Decimal(case["expected"])
