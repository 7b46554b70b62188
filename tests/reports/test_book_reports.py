"""Summary, exceptions, maturities and the flat tables of a book."""

from datetime import date
from decimal import Decimal

from reports.samples import AS_OF, book_of, extra, note
from tenorbook.basis.conventions import Repayment, Side
from tenorbook.reports.exceptions import exceptions_sheet
from tenorbook.reports.flat import streams
from tenorbook.reports.maturities import maturities_sheet
from tenorbook.reports.outlook import Outlook
from tenorbook.reports.result import BookResult
from tenorbook.reports.summary import summary_sheet
from tenorbook.tables.sheet import Charts, Lines, Sheet
from tenorbook.tables.stream import Stream
from tenorbook.tables.table import Table

SCHEDULES = (
    "loan_id, row, kind, date, days, annual_rate, opening_balance, interest, principal, extra_principal, "
    "charges, payment, closing_balance, due_date, draw, ledger"
)
SUMMARY = (
    "loan_id, counterparty, side, currency, principal, annual_rate, payment, payments, first_payment, "
    "last_payment, total_interest, total_paid, apr, effective_annual_rate, as_of, balance, "
    "accrued_interest, due_within_12_months, due_after_12_months, status"
)
EXCEPTIONS = "severity, loan_id, sheet, cell, value, problem, remedy"
BAD = note("BAD", principal=Decimal(-5))


def headers(stream: Stream) -> str:
    return ", ".join(field.header for field in stream.fields)


def summary_of(book: BookResult, sheets: dict[str, str], live: bool) -> Sheet:
    return summary_sheet(book, book.results, Outlook(AS_OF, book.results), sheets, live)


def tables(sheet: Sheet) -> dict[str, Table]:
    return {part.key: part for part in sheet.parts if isinstance(part, Table)}


def test_columns_of_the_flat_tables_are_the_contract() -> None:
    schedules, summary, exceptions = streams(book_of([note()]))
    assert headers(schedules) == SCHEDULES
    assert headers(summary) == SUMMARY
    assert headers(exceptions) == EXCEPTIONS
    assert [stream.name for stream in (schedules, summary, exceptions)] == [
        "schedules",
        "summary",
        "exceptions",
    ]


def test_schedule_rows() -> None:
    rows = list(streams(book_of([note()]))[0].rows)
    assert len(rows) == 61
    assert [str(value) for value in rows[0]] == [
        "EQ-101",
        "0",
        "funding",
        "2025-01-15",
        "0",
        "0.0625",
        "0.00",
        "0.00",
        "0.00",
        "0.00",
        "0.00",
        "0.00",
        "250000.00",
        "2025-01-15",
        "250000.00",
        "contract",
    ]
    interest = Decimal("1302.08")  # 250,000 x 6.25 % / 12
    assert rows[1][7] == interest
    assert rows[1][8] == rows[1][11] - interest
    assert str(rows[-1][12]) == "0.00"


def test_amounts_have_the_digits_of_their_currency() -> None:
    book = book_of([note("J", currency="JPY"), note("K", currency="KWD")])
    rows = list(streams(book)[0].rows)
    assert {row[0]: str(row[6]) for row in rows if row[1] == 1} == {"J": "250000", "K": "250000.000"}


def test_summary_rows() -> None:
    loan = note(carried={"Cost centre": "4100", "Rank": 1.5})
    (row,) = streams(book_of([loan], ("Cost centre", "Rank")))[1].rows
    found = dict(zip(SUMMARY.split(", "), row, strict=False))
    assert found["payment"] == Decimal("4862.32")
    assert (found["payments"], found["first_payment"], found["last_payment"]) == (
        60,
        date(2025, 2, 15),
        date(2030, 1, 15),
    )
    assert found["total_paid"] == found["principal"] + found["total_interest"]
    assert found["balance"] == found["due_within_12_months"] + found["due_after_12_months"]
    assert (found["as_of"], found["status"], found["apr"]) == (AS_OF, "ok", None)
    assert row[-2:] == ("4100", "1.5")


def test_the_regular_payment_of_other_shapes_is_the_first() -> None:
    loans = [note("P", repayment=Repayment.LEVEL_PRINCIPAL), note("I", repayment=Repayment.INTEREST_ONLY)]
    rows = {row[0]: row[6] for row in streams(book_of(loans))[1].rows}
    # 250,000 / 60 = 4,166.67 and interest 1,302.08
    assert rows == {"P": Decimal("5468.75"), "I": Decimal("1302.08")}


def test_the_last_payment_is_the_last_date_on_which_money_is_paid() -> None:
    loan = note(extra_payments=(extra(date(2026, 5, 20), 1_000_000),))
    (row,) = streams(book_of([loan]))[1].rows
    assert row[9] == date(2026, 5, 20)


def test_a_loan_set_aside_is_in_the_summary_without_figures() -> None:
    book = book_of([note(), BAD])
    good, bad = streams(book)[1].rows
    assert (good[-1], bad[-1]) == ("ok", "error")
    assert bad[4:18] == (None,) * 10 + (AS_OF,) + (None,) * 3
    (problem,) = [row for row in streams(book)[2].rows if row[0] == "error"]
    assert problem[1] == "BAD"


def test_totals_are_by_currency() -> None:
    book = book_of([note("A"), note("B"), note("E", currency="EUR"), BAD])
    totals = tables(summary_of(book, {}, live=False))["totals"]
    assert totals.column("currency").values == ["USD", "EUR"]
    assert totals.column("principal").values == [50_000_000, 25_000_000]
    assert totals.column("principal").exceptions[0] == (
        "ROUND(SUMIFS([loans.principal:all],[loans.currency:all],[currency],[loans.side:all],[side]),2)"
    )


def test_what_we_owe_and_are_owed_is_never_added_up() -> None:
    book = book_of([note("A"), note("B", side=Side.RECEIVABLE), note("E", currency="EUR")])
    found = tables(summary_of(book, {}, live=False))["totals"]
    assert found.column("loan").values == ["USD payable", "USD receivable", "EUR"]
    assert found.column("principal").values == [25_000_000, 25_000_000, 25_000_000]
    maturities = tables(maturities_sheet(book, Outlook(AS_OF, book.results), "Summary"))
    assert maturities["bands_USD_receivable"].column("loan").values == ["B"]


def test_totals_stand_under_the_columns_they_add_up() -> None:
    book = book_of([note()])
    found = tables(summary_of(book, {}, live=False))
    loans = [column.header for column in found["loans"].columns]
    for number, column in enumerate(found["totals"].columns):
        if column.header not in ("", "Totals"):
            assert loans[number] == column.header


def test_the_summary_refers_to_the_sheets_of_the_loans() -> None:
    book = book_of([note(), BAD])
    found = tables(summary_of(book, {"EQ-101": "EQ-101"}, live=True))["loans"]
    assert found.column("loan").links == {0: "EQ-101"}
    assert found.column("total_interest").exceptions == {0: "'EQ-101'!total_interest"}
    assert found.sparkline is not None
    assert found.sparkline.targets == {0: ("EQ-101", "schedule", "closing")}


def test_charts_of_up_to_three_currencies() -> None:
    codes = ("USD", "EUR", "JPY", "GBP")
    book = book_of([note(code, currency=code) for code in codes])
    sheet = summary_of(book, {}, live=False)
    charts = [chart for part in sheet.parts if isinstance(part, Charts) for chart in part.charts]
    assert [chart.kind for chart in charts] == ["area", "stacked column", "column"] * 3


def test_run_off_ends_at_nothing_and_adds_up() -> None:
    (run_off,) = Outlook(AS_OF, book_of([note()]).results).run_offs
    assert run_off.months[0] == date(2025, 12, 1)
    schedule = book_of([note()]).results[0].schedule
    assert schedule is not None
    assert run_off.balance[:2] == list(schedule.closing[11:13])
    assert run_off.balance[-1] == 0
    assert sum(run_off.principal) == 25_000_000


def test_maturities_add_up_to_the_balance() -> None:
    book = book_of([note("A"), note("B", currency="JPY")])
    found = tables(maturities_sheet(book, Outlook(AS_OF, book.results), "Summary"))
    for code, each in (("USD", book.results[0]), ("JPY", book.results[1])):
        assert each.position is not None
        for kind in ("bands", "years"):
            assert found[f"{kind}_{code}_payable"].column("total").values == [each.position.balance]
        assert found[f"bands_{code}_payable"].column("band_0").values == [each.position.due_within_12_months]
    headers = [column.header for column in found["bands_USD_payable"].columns]
    assert headers[1:3] == ["to 31 Dec 2026", "to 31 Dec 2027"]
    assert found["years_USD_payable"].columns[1].header == "rest of 2025"


def test_exceptions_name_severity_by_a_word() -> None:
    book = book_of([BAD])
    sheet = exceptions_sheet(book, book.problems, "Summary")
    assert tables(sheet)["exceptions"].column("severity").values[0] == "\u25c6 error"
    assert sheet.subtitle == "1 error, 0 warnings, 0 notes"


def test_no_exceptions_is_said_in_a_sentence() -> None:
    book = book_of([note()])
    (part,) = exceptions_sheet(book, (), "Summary").parts
    assert isinstance(part, Lines)
    assert part.texts == ("Nothing to report: every loan was read and computed as entered.",)
