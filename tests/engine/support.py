"""Loans in a line, and their figures as text, for the tests of the engine."""

from dataclasses import replace
from datetime import date
from decimal import Decimal
from typing import Any

from tenorbook.basis.conventions import RowKind
from tenorbook.basis.money import to_text
from tenorbook.basis.problem import Severity
from tenorbook.schedule.build import build
from tenorbook.schedule.ledger import Schedule
from tenorbook.terms.loan import Length, Loan
from tenorbook.terms.resolve import resolve
from tenorbook.terms.terms import Terms

COLUMNS = (
    "kind", "date", "days", "annual_rate", "opening", "interest", "principal", "extra", "charges", "payment",
    "closing", "draw",
)  # fmt: skip
"""The columns of a schedule."""


def loan(**terms: Any) -> Loan:
    """A loan of 12,000.00 at 12 %, funded on 1 January 2024, four monthly payments; any term replaced.

    One percent a month; a day of 30/360 is a three-thousandth.
    """
    usual: dict[str, Any] = {
        "loan_id": "L1",
        "principal": Decimal(12000),
        "annual_rate": Decimal("0.12"),
        "funding_date": date(2024, 1, 1),
        "term": Length(4),
    }
    return Loan(**(usual | terms))


def quiet(loan: Loan) -> Loan:
    """The same loan, with nothing happening to it."""
    return replace(loan, extra_payments=(), rate_changes=(), extra_each_payment=None)


def terms_of(entered: Loan) -> Terms:
    """The resolved terms of a loan that has no error."""
    terms, problems = resolve(entered)
    assert terms is not None, [str(problem) for problem in problems]
    return terms


def schedule_of(entered: Loan) -> Schedule:
    """The schedule of a loan that has no error."""
    return build(terms_of(entered))


def built(**terms: Any) -> Schedule:
    """The schedule of `loan` with some terms replaced."""
    return schedule_of(loan(**terms))


def column(schedule: Schedule, name: str, kind: RowKind = RowKind.PAYMENT) -> list[str]:
    """One column of the rows of a kind, amounts as text in currency units."""
    rows = [row for row in schedule.rows() if row.kind is kind]
    return [_text(getattr(row, name), schedule.digits) for row in rows]


def _text(value: object, digits: int) -> str:
    return to_text(value, digits) if isinstance(value, int) else str(value)


def columns(schedule: Schedule) -> dict[str, list[Any]]:
    """All columns, for comparing two schedules."""
    return {name: list(getattr(schedule, name)) for name in COLUMNS}


def said(entered: Loan, severity: Severity) -> list[str]:
    """What is found wrong (or doubtful, or noted) in a loan, each sentence with its remedy and cells."""
    return [
        " | ".join(
            part
            for part in (
                " ".join(place.cell for place in (problem.place, *problem.also) if place.cell),
                problem.problem,
                problem.remedy,
            )
            if part
        )
        for problem in resolve(entered)[1]
        if problem.severity is severity
    ]
