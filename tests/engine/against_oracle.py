"""A loan in the words of the book, for the independent calculation in `oracle`."""

from decimal import Decimal

from tenorbook.basis.documented import Documented
from tenorbook.basis.money import to_decimal
from tenorbook.schedule.ledger import Schedule
from tenorbook.terms.loan import ExtraPayment, Length, LengthUnit, Loan, PaymentStep, RateChange

HEADERS = {
    "Loan ID": "loan_id",
    "Currency": "currency",
    "Principal": "principal",
    "Annual rate": "annual_rate",
    "Funding date": "funding_date",
    "First payment": "first_payment",
    "Term": "term",
    "Maturity": "maturity",
    "Frequency": "frequency",
    "Timing": "timing",
    "Repayment": "repayment",
    "Payment": "payment",
    "Balloon": "balloon",
    "Amortized over": "amortized_over",
    "Interest-only payments": "interest_only_payments",
    "Day count": "day_count",
    "Odd-day count": "odd_day_count",
    "First period": "first_period",
    "Long first period": "long_first_period",
    "Payment basis": "payment_basis",
    "Payment rounding": "payment_rounding",
    "Interest rounding": "interest_rounding",
    "Month-end": "month_end",
    "Unpaid interest": "unpaid_interest",
    "Extra each payment": "extra_each_payment",
    "Extra from": "extra_from",
    "Extra until": "extra_until",
}
EXTRA_HEADERS = {
    "Date": "date",
    "Amount": "amount",
    "Every": "every",
    "Until": "until",
    "Effect": "effect",
    "Applies to": "applies_to",
}
RATE_HEADERS = {"From": "from_date", "Annual rate": "annual_rate", "Payment": "payment"}
AMOUNTS = {
    "opening_balance": "opening",
    "interest": "interest",
    "principal": "principal",
    "extra_principal": "extra",
    "charges": "charges",
    "payment": "payment",
    "closing_balance": "closing",
    "draw": "draw",
}


def in_words(record: Loan | ExtraPayment | RateChange, headers: dict[str, str]) -> dict[str, object]:
    """The filled cells of a row, by header."""
    cells = {header: getattr(record, name) for header, name in headers.items()}
    return {header: _word(value) for header, value in cells.items() if value is not None}


def _word(value: object) -> object:
    if isinstance(value, Documented):
        return value.value
    if isinstance(value, Length):
        return value.count if value.unit is LengthUnit.PAYMENTS else str(value)
    if isinstance(value, PaymentStep):
        return str(value.rounding) if value.step is None else f"{value.rounding} {value.step}"
    return value


def shown(schedule: Schedule) -> list[dict[str, object]]:
    """The rows of a schedule as `schedules.csv` has them."""
    rows = []
    for row in schedule.rows():
        cells: dict[str, object] = {
            "row": row.row,
            "kind": str(row.kind),
            "date": row.date,
            "days": row.days,
            "annual_rate": row.annual_rate,
            "due_date": row.due_date,
        }
        for header, name in AMOUNTS.items():
            amount: Decimal = to_decimal(getattr(row, name), schedule.digits)
            cells[header] = amount
        rows.append(cells)
    return rows
