"""Spreadsheet functions: PMT, IPMT, PPMT, CUMIPMT, CUMPRINC, ISPMT, in arrears and in advance.

Interest and payment are carried to a millionth of a cent, and compared there or at the printed digits.
In advance, the first payment is all principal: no interest has run yet.
"""

from decimal import Decimal

import pytest

from published.helpers import Figures, schedule
from published.printed import records

Case = dict[str, str]
CASES: list[Case] = records("functions.csv")
COLUMN = {
    "PMT": "payment",
    "IPMT": "interest",
    "CUMIPMT": "interest",
    "ISPMT": "interest",
    "PPMT": "principal",
    "CUMPRINC": "principal",
}
CLOSE = Decimal("0.000002")
"""Of the currency: a few hundred roundings at a millionth of a cent, in a balance that grows."""


def _name(case: Case) -> str:
    return f"{case['function']} {case['annual_rate']} {case['payments']} {case['first']} {case['timing']}"


@pytest.mark.parametrize("case", CASES, ids=_name)
def test_function_figure(case: Case) -> None:
    level = case["function"] != "ISPMT"
    found = Figures(
        schedule(
            {
                "principal": case["principal"],
                "annual_rate": case["annual_rate"],
                "frequency": case["frequency"],
                "term": int(case["payments"]),
                "timing": case["timing"],
                "repayment": "level payment" if level else "level principal",
            },
            rounding="none",
        )
    )
    first = int(case["first"] or 1)
    value = found.total(COLUMN[case["function"]], first, int(case["last"] or first))
    assert value == pytest.approx(Decimal(case["expected"]), abs=CLOSE)
