"""Checks, sums by counterparty and the outlook: what they say, and that they can fail."""

from datetime import date
from decimal import Decimal
from typing import Any

import pytest

from reports.samples import AS_OF, book_of, extra, note, result_of
from tenorbook.basis.conventions import Side
from tenorbook.reports.book_charts import run_off_charts
from tenorbook.reports.counterparties import counterparties_table
from tenorbook.reports.figures import figures
from tenorbook.reports.loan_sheet import loan_sheet
from tenorbook.reports.outlook import Outlook
from tenorbook.reports.result import BookResult
from tenorbook.reports.summary import summary_sheet
from tenorbook.tables.sheet import Block, Blocks, Checks
from tenorbook.tables.table import Table
from tenorbook.terms.loan import Length


def checks_of(parts: Any) -> Checks:
    (found,) = [part for part in parts if isinstance(part, Checks)]
    return found


def counterparties(book: BookResult) -> Table:
    rows = [figures(each, "USD") for each in book.results]
    table = counterparties_table(book.results, rows)
    assert table is not None
    return table


def test_a_loan_is_checked_for_what_came_in_and_went_out() -> None:
    checks = checks_of(loan_sheet(result_of(note()), "EQ-101", "Summary", "book.xlsx").parts)
    assert [check.formula for check in checks.checks] == [
        "ROUND(loan_principal-[principal:total],2)",
        "ROUND([closing:last],2)",
        "ROUND([payment:total]-[interest:total]-[principal:total],2)",
        "ROUND(balance-due_within_12_months-due_after_12_months,2)",
    ]


def test_extra_principal_is_in_the_checks_of_loans_that_have_it() -> None:
    loan = note(extra_payments=(extra(date(2026, 5, 20), 9000),))
    checks = checks_of(loan_sheet(result_of(loan), "EQ-101", "Summary", "book.xlsx").parts)
    assert "-[extra:total]" in str(checks.checks[0].formula)


def figures_on(as_of: date) -> dict[str, Any]:
    parts = loan_sheet(result_of(note(), as_of), "EQ-101", "Summary", "book.xlsx").parts
    blocks: list[Block] = [block for part in parts if isinstance(part, Blocks) for block in part.blocks]
    return {entry.name: entry.formula for block in blocks for entry in block.entries if entry.name}


def test_the_position_is_live_from_the_funding_date_on() -> None:
    assert figures_on(AS_OF)["balance"] == 'ROUND(loan_principal-(SUMIFS(principals,dates,"<="&as_of)),2)'
    assert figures_on(date(2025, 1, 14))["balance"] is None


def test_counterparties_are_summed_within_currency_and_side() -> None:
    book = book_of(
        [
            note("A", counterparty="Quill"),
            note("B", counterparty="quill"),
            note("C", counterparty="Quill", side=Side.RECEIVABLE),
            note("D", counterparty="Any*"),
            note("E", counterparty=""),
        ]
    )
    table = counterparties(book)
    assert table.column("counterparty").values == ["(no counterparty)", "Any*", "Quill", "Quill"]
    assert table.column("loan").values == ["1 loan", "1 loan", "2 loans", "1 loan"]
    assert table.column("principal").values == [25_000_000, 25_000_000, 50_000_000, 25_000_000]
    live = table.column("principal").exceptions
    assert str(live[2]).startswith(
        "ROUND(SUMIFS([loans.principal:all],[loans.counterparty:all],[counterparty]"
    )
    assert str(live[1]).startswith("ROUND(SUMPRODUCT(([loans.counterparty:all]=[counterparty])*")
    assert str(live[0]).startswith('ROUND(SUMPRODUCT(([loans.counterparty:all]="")*')


def test_no_table_by_counterparty_where_nobody_is_named() -> None:
    book = book_of([note(counterparty="")])
    assert counterparties_table(book.results, [figures(each, "USD") for each in book.results]) is None


def test_the_summary_is_checked_currency_by_currency() -> None:
    book = book_of([note("A"), note("B", currency="JPY")])
    sheet = summary_sheet(book, book.results, Outlook(AS_OF, book.results), {"A": "A", "B": "B"}, live=True)
    labels = [check.label for check in checks_of(sheet.parts).checks]
    assert labels[:2] == [
        "Loans in the book less loans computed and set aside",
        "Loan sheets with a check that fails",
    ]
    assert labels[2:5] == [
        "JPY: balance less due within and after 12 months",
        "JPY: balance less the counterparties",
        "JPY: balance less the sheet Maturities",
    ]


@pytest.mark.parametrize(
    ("principal", "unit", "thousands"),
    [(9_000, "USD", 0), (250_000, "USD thousand", 1), (35_000_000, "USD million", 2)],
)
def test_the_axis_of_a_chart_is_in_readable_units(principal: int, unit: str, thousands: int) -> None:
    results = [result_of(note(principal=Decimal(principal), term=Length(24)))]
    charts = run_off_charts(Outlook(AS_OF, results), 0).charts
    assert [(chart.unit, chart.thousands) for chart in charts[:1]] == [(unit, thousands)]
    assert [chart.title for chart in charts] == [
        "Balance by month, USD",
        "Payments by year, USD",
        "Principal falling due by year, USD",
    ]
