"""The flat tables behind `--csv` and `--parquet`, with the columns of the public contract."""

from collections.abc import Iterator
from decimal import Decimal
from typing import Any

from tenorbook.basis.conventions import Side
from tenorbook.basis.money import to_decimal
from tenorbook.reports.figures import figures
from tenorbook.reports.groups import computed
from tenorbook.reports.result import BookResult, LoanResult
from tenorbook.tables.stream import Field, Kind, Stream

_TEXT, _INTEGER, _DECIMAL, _DATE = Kind.TEXT, Kind.INTEGER, Kind.DECIMAL, Kind.DATE

SCHEDULE_FIELDS = (
    Field("loan_id", _TEXT),
    Field("row", _INTEGER),
    Field("kind", _TEXT),
    Field("date", _DATE),
    Field("days", _INTEGER),
    Field("annual_rate", _DECIMAL),
    Field("opening_balance", _DECIMAL),
    Field("interest", _DECIMAL),
    Field("principal", _DECIMAL),
    Field("extra_principal", _DECIMAL),
    Field("charges", _DECIMAL),
    Field("payment", _DECIMAL),
    Field("closing_balance", _DECIMAL),
    Field("due_date", _DATE),
    Field("draw", _DECIMAL),
    Field("ledger", _TEXT),
)
SUMMARY_FIELDS = (
    Field("loan_id", _TEXT),
    Field("counterparty", _TEXT),
    Field("side", _TEXT),
    Field("currency", _TEXT),
    Field("principal", _DECIMAL),
    Field("annual_rate", _DECIMAL),
    Field("payment", _DECIMAL),
    Field("payments", _INTEGER),
    Field("first_payment", _DATE),
    Field("last_payment", _DATE),
    Field("total_interest", _DECIMAL),
    Field("total_paid", _DECIMAL),
    Field("apr", _DECIMAL),
    Field("effective_annual_rate", _DECIMAL),
    Field("as_of", _DATE),
    Field("balance", _DECIMAL),
    Field("accrued_interest", _DECIMAL),
    Field("due_within_12_months", _DECIMAL),
    Field("due_after_12_months", _DECIMAL),
    Field("status", _TEXT),
)
EXCEPTION_FIELDS = tuple(
    Field(header, _TEXT) for header in ("severity", "loan_id", "sheet", "cell", "value", "problem", "remedy")
)


def streams(result: BookResult) -> tuple[Stream, Stream, Stream]:
    """The schedules, the summary and the exceptions of a book."""
    digits = max((r.terms.digits for r in computed(result.results) if r.terms), default=2)
    carried = tuple(Field(header, _TEXT) for header in result.book.carried_headers)
    return (
        Stream("schedules", SCHEDULE_FIELDS, _schedule_rows(result), digits),
        Stream("summary", SUMMARY_FIELDS + carried, _summary_rows(result), digits),
        Stream("exceptions", EXCEPTION_FIELDS, _exception_rows(result), 0),
    )


def _schedule_rows(result: BookResult) -> Iterator[tuple[Any, ...]]:
    for each in computed(result.results):
        yield from _rows_of(each)


def _rows_of(result: LoanResult) -> Iterator[tuple[Any, ...]]:
    schedule, loan_id = result.schedule, result.loan.loan_id
    if schedule is None:
        return
    digits = schedule.digits
    for row in schedule.rows():
        yield (
            loan_id,
            row.row,
            str(row.kind),
            row.date,
            row.days,
            row.annual_rate,
            to_decimal(row.opening, digits),
            to_decimal(row.interest, digits),
            to_decimal(row.principal, digits),
            to_decimal(row.extra, digits),
            to_decimal(row.charges, digits),
            to_decimal(row.payment, digits),
            to_decimal(row.closing, digits),
            row.due_date,
            to_decimal(row.draw, digits),
            "contract",
        )


def _summary_rows(result: BookResult) -> Iterator[tuple[Any, ...]]:
    for each in result.results:
        yield (*_summary_row(result, each), *_carried(result, each))


def _summary_row(result: BookResult, each: LoanResult) -> tuple[Any, ...]:
    loan, its = each.loan, figures(each, result.book.settings.currency)
    return (
        loan.loan_id,
        loan.counterparty,
        str(loan.side or Side.PAYABLE),
        its.currency,
        its.decimal(its.principal),
        its.annual_rate,
        its.decimal(its.payment),
        its.payments,
        its.first_payment,
        its.last_payment,
        its.decimal(its.total_interest),
        its.decimal(its.total_paid),
        its.apr,
        its.effective_annual_rate,
        result.as_of,
        its.decimal(its.balance),
        its.decimal(its.accrued_interest),
        its.decimal(its.due_within_12_months),
        its.decimal(its.due_after_12_months),
        each.status,
    )


def _carried(result: BookResult, each: LoanResult) -> Iterator[str | None]:
    for header in result.book.carried_headers:
        value = each.loan.carried.get(header)
        yield None if value is None else _text(value)


def _text(value: object) -> str:
    """A carried value as text, numbers in plain decimals."""
    if isinstance(value, float):
        value = Decimal(repr(value))
    if isinstance(value, Decimal):
        return f"{value:f}"
    return str(value)


def _exception_rows(result: BookResult) -> Iterator[tuple[Any, ...]]:
    for problem in result.problems:
        yield (
            str(problem.severity),
            problem.loan_id,
            problem.sheet,
            problem.cell,
            problem.value,
            problem.problem,
            problem.remedy,
        )
