"""The closed forms against numpy-financial, on random loans: PMT, IPMT, PPMT with nothing rounded."""

from decimal import Decimal

import numpy_financial
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from published.helpers import Figures, schedule
from tenorbook.basis.conventions import RowKind

steady = settings(derandomize=True, deadline=None, max_examples=60, database=None)
PER_YEAR = {"monthly": 12, "quarterly": 4, "twice a year": 2, "yearly": 1, "every 2 months": 6}
CLOSE = Decimal("0.00005")
"""Doubles against integers: the library's own noise on balances of millions."""

LOANS = st.fixed_dictionaries(
    {
        "principal": st.integers(1_000, 5_000_000),
        "rate": st.decimals(Decimal("0.001"), Decimal("0.30"), places=5),
        "frequency": st.sampled_from(sorted(PER_YEAR)),
        "count": st.integers(2, 50),
        "advance": st.booleans(),
    }
)
"""Up to 50 periods: at high powers the library's own `ppmt` loses digits."""


def _built(loan: dict[str, object], **terms: object) -> Figures:
    return Figures(
        schedule(
            {
                "principal": str(loan["principal"]),
                "annual_rate": str(loan["rate"]),
                "frequency": loan["frequency"],
                "term": loan["count"],
                "timing": "advance" if loan["advance"] else "arrears",
                **terms,
            },
            rounding="none",
        )
    )


def _periodic(loan: dict[str, object]) -> float:
    rate = Decimal(str(loan["rate"])) / PER_YEAR[str(loan["frequency"])]
    return float(rate)


@steady
@given(loan=LOANS)
def test_payment_interest_and_principal(loan: dict[str, object]) -> None:
    found, rate, when = _built(loan), _periodic(loan), "begin" if loan["advance"] else "end"
    count, principal = int(str(loan["count"])), float(str(loan["principal"]))
    level = -numpy_financial.pmt(rate, count, principal, 0, when)
    for k in range(1, count + 1):
        interest = -float(numpy_financial.ipmt(rate, k, count, principal, 0, when))
        if loan["advance"] and k == 1:
            interest = 0.0  # the library spreads the first payment otherwise; no interest has run yet
        assert found.figure("payment", k) == pytest.approx(Decimal(level), abs=CLOSE)
        assert found.figure("interest", k) == pytest.approx(Decimal(interest), abs=CLOSE)
        assert found.figure("principal", k) == pytest.approx(Decimal(level - interest), abs=CLOSE)


@steady
def _rest(rate: float, count: int) -> Decimal:
    """What rounding to 1e-8, half of it for the payment and half for the interest, grows to by the end."""
    periods = sum((1 + rate) ** k for k in range(count))
    return max(CLOSE, Decimal(1e-8 * periods))


@given(loan=LOANS, share=st.integers(1, 99))
def test_balloon(loan: dict[str, object], share: int) -> None:
    """The balloon is the principal left by the last payment, as the library's future value.

    In advance it is left at the start of the last period and falls due at its end, with that period's
    interest on top: a future value of balloon x (1 + rate).
    """
    principal, rate, count = int(str(loan["principal"])), _periodic(loan), int(str(loan["count"]))
    advance = bool(loan["advance"])
    balloon = principal * share // 100
    found, when = _built(loan, balloon=str(balloon)), "begin" if advance else "end"
    future = balloon * (1 + rate) if advance else balloon
    level = Decimal(-numpy_financial.pmt(rate, count, principal, -future, when))
    for k in range(1, count):
        assert found.figure("payment", k) == pytest.approx(level, abs=CLOSE)
    if advance:
        assert found.payments[-1].kind is RowKind.BALLOON
        assert found.figure("principal", count + 1) == balloon
        assert found.figure("payment", count + 1) == pytest.approx(Decimal(future), abs=CLOSE)
    else:
        assert found.figure("payment", count) == pytest.approx(level + balloon, abs=_rest(rate, count))
