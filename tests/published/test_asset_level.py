"""Sixty-two commercial mortgage loans of a public asset-level exhibit (SEC Schedule AL, EX-102, March 2026).

Terms at origination in, the servicer's scheduled figures out, with nothing fitted. All accrue on
Actual/360 and are sized on equal periods; the first period is one whole month, odd days having been
paid at closing. Three loans show no interest in the reporting period and no due date before its end.
"""

from datetime import date, datetime
from decimal import Decimal
from typing import Any

import pytest

from published.helpers import Figures, schedule
from published.printed import records
from tenorbook.basis.conventions import RowKind
from tenorbook.schedule.ledger import Row, Schedule

Asset = dict[str, str]
ASSETS: list[Asset] = records("asset_level_2026-03.csv")
RECORDED = [asset for asset in ASSETS if Decimal(asset["scheduledInterestAmount"])]
NOT_YET = [asset for asset in ASSETS if not Decimal(asset["scheduledInterestAmount"])]
ACTUAL_360 = "3"
ANTICIPATED = {"3", "36"}
"""Their maturity date is the end of the amortization; the term runs to the anticipated repayment date."""

A_CENT_APART = {"3", "16"}
"""Their recorded opening balance less the recorded principal is a cent above the recorded closing one."""


def _day(text: str) -> date:
    return datetime.strptime(text, "%m-%d-%Y").date()


def _terms(asset: Asset) -> dict[str, Any]:
    """The terms as the exhibit states them; the funding date is left to the caller."""
    term, amortized = int(asset["originalTermLoanNumber"]), int(asset["originalAmortizationTermNumber"])
    free = int(asset["originalInterestOnlyTermNumber"])
    terms: dict[str, Any] = {
        "principal": asset["originalLoanAmount"],
        "annual_rate": asset["originalInterestRatePercentage"],
        "first_payment": _day(asset["firstLoanPaymentDueDate"]).isoformat(),
        "term": term,
        "frequency": "monthly",
        "day_count": "Actual/360",
        "payment_basis": "equal periods",
        "month_end": "no",
    }
    if free == term or not amortized:
        return {**terms, "repayment": "interest only"}
    return {**terms, "amortized_over": amortized, "interest_only_payments": free}


def _paid_at_closing(asset: Asset) -> dict[str, Any]:
    """Funded on the origination date, with the odd days paid that day."""
    origination = _day(asset["originationDate"]).isoformat()
    return {**_terms(asset), "funding_date": origination, "first_period": "pay at funding"}


def _on(built: Schedule, day: date) -> Row:
    return next(row for row in built.rows() if row.kind is RowKind.PAYMENT and row.date == day)


def _name(asset: Asset) -> str:
    return f"asset {asset['assetNumber']}"


@pytest.mark.parametrize("terms_of", [_terms, _paid_at_closing], ids=["whole month", "paid at closing"])
@pytest.mark.parametrize("asset", RECORDED, ids=_name)
def test_scheduled_figures_to_the_cent(asset: Asset, terms_of: Any) -> None:
    built = schedule(terms_of(asset))
    row = _on(built, _day(asset["paidThroughDate"]))
    found = [Decimal(cents).scaleb(-2) for cents in (row.opening, row.interest, row.principal, row.closing)]
    apart = Decimal("0.01") if asset["assetNumber"] in A_CENT_APART else 0
    assert found == [
        Decimal(asset["reportPeriodBeginningScheduleLoanBalanceAmount"]) - apart,
        Decimal(asset["scheduledInterestAmount"]),
        Decimal(asset["scheduledPrincipalAmount"]),
        Decimal(asset["reportPeriodEndScheduledLoanBalanceAmount"]),
    ]


@pytest.mark.parametrize("asset", RECORDED, ids=_name)
def test_payment_at_securitization(asset: Asset) -> None:
    """The recorded periodic payment: principal and interest of the month."""
    row = _on(schedule(_terms(asset)), _day(asset["paidThroughDate"]))
    recorded = asset["periodicPrincipalAndInterestPaymentSecuritizationAmount"]
    assert Decimal(row.payment).scaleb(-2) == Decimal(recorded)


@pytest.mark.parametrize("asset", NOT_YET, ids=_name)
def test_no_payment_is_due_before_the_first(asset: Asset) -> None:
    """The reporting period ends before the first due date: nothing scheduled, the whole balance open."""
    built = schedule(_terms(asset))
    assert _day(asset["firstLoanPaymentDueDate"]) > _day(asset["reportingPeriodEndDate"])
    first = Figures(built).payments[0]
    assert Decimal(first.opening).scaleb(-2) == Decimal(asset["reportPeriodEndScheduledLoanBalanceAmount"])


@pytest.mark.parametrize("asset", ASSETS, ids=_name)
def test_last_due_date_is_the_maturity(asset: Asset) -> None:
    assert asset["interestAccrualMethodCode"] == ACTUAL_360
    found = Figures(schedule(_terms(asset)))
    if asset["assetNumber"] in ANTICIPATED:
        number = int(asset["originalAmortizationTermNumber"])
        assert found.built.terms.due[number] == _day(asset["maturityDate"])
    else:
        assert found.payments[-1].date == _day(asset["maturityDate"])
    assert found.payments[-1].closing == 0


def test_every_loan_is_in_one_group() -> None:
    assert (len(RECORDED), len(NOT_YET)) == (59, 3)
