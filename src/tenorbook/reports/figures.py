"""The figures of one loan in the summary, in `summary.csv` and in the Summary sheet alike."""

from dataclasses import dataclass
from datetime import date
from decimal import Decimal

from tenorbook.basis.conventions import Repayment, RowKind
from tenorbook.basis.money import currency_digits, to_decimal
from tenorbook.reports.result import LoanResult
from tenorbook.schedule.ledger import Schedule


@dataclass(frozen=True, slots=True, kw_only=True)
class Figures:
    """What the summary says of a loan; amounts in the unit of `digits`, `None` where not computed."""

    currency: str
    digits: int
    shown_digits: int
    principal: int | None = None
    annual_rate: Decimal | None = None
    payment: int | None = None
    payments: int | None = None
    first_payment: date | None = None
    last_payment: date | None = None
    total_interest: int | None = None
    total_paid: int | None = None
    apr: Decimal | None = None
    effective_annual_rate: Decimal | None = None
    balance: int | None = None
    accrued_interest: int | None = None
    due_within_12_months: int | None = None
    due_after_12_months: int | None = None

    def decimal(self, units: int | None) -> Decimal | None:
        """An amount as an exact decimal with all its digits."""
        return None if units is None else to_decimal(units, self.digits)


def figures(result: LoanResult, currency: str) -> Figures:
    """The figures of a loan.

    Args:
        result: of the loan.
        currency: the book's, for a loan that names none.

    A loan that was set aside has none but its currency, so that sums over the loans stay sound.
    """
    schedule, terms, position = result.schedule, result.terms, result.position
    if schedule is None or terms is None:
        code = result.loan.currency or currency
        digits = currency_digits(code) or 0
        return Figures(currency=code, digits=digits, shown_digits=digits)
    return Figures(
        currency=terms.currency,
        digits=schedule.digits,
        shown_digits=terms.currency_digits,
        principal=terms.principal,
        annual_rate=terms.rate,
        payment=regular_payment(schedule),
        payments=schedule.kind.count(RowKind.PAYMENT),
        first_payment=_first_payment(schedule),
        last_payment=_last_payment(schedule),
        total_interest=sum(schedule.interest),
        total_paid=sum(schedule.payment),
        effective_annual_rate=result.effective_annual_rate,
        balance=position.balance if position else None,
        accrued_interest=position.accrued_interest if position else None,
        due_within_12_months=position.due_within_12_months if position else None,
        due_after_12_months=position.due_after_12_months if position else None,
    )


def regular_payment(schedule: Schedule) -> int:
    """The regular payment: the first scheduled amount of a loan with level payments.

    For every other shape what the first payment row asks for, without extra principal.
    """
    if schedule.instalments and schedule.terms.repayment is Repayment.LEVEL_PAYMENT:
        return schedule.instalments[0].amount
    for row, kind in enumerate(schedule.kind):
        if kind is RowKind.PAYMENT:
            return schedule.payment[row] - schedule.extra[row]
    return 0


def _first_payment(schedule: Schedule) -> date | None:
    rows = zip(schedule.date, schedule.kind, strict=True)
    return next((day for day, kind in rows if kind is RowKind.PAYMENT), None)


def _last_payment(schedule: Schedule) -> date | None:
    """The last date on which money is paid."""
    rows = zip(reversed(schedule.date), reversed(schedule.payment), strict=True)
    return next((day for day, paid in rows if paid), None)
