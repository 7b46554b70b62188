"""Whole books: rows, columns, events, settings."""

from datetime import date
from decimal import Decimal
from pathlib import Path

import pytest
from openpyxl import load_workbook

from read.books import A_1, HEADERS, START, loan, messages, read, refusal, workbook
from tenorbook.basis.conventions import (
    AppliesTo,
    DayCount,
    ExtraEffect,
    FirstPeriod,
    Frequency,
    InterestRounding,
    LongFirst,
    MonthEnd,
    PaymentBasis,
    PaymentChange,
    PaymentRounding,
    Repayment,
    Side,
    Timing,
    UnpaidInterest,
)
from tenorbook.basis.problem import Place
from tenorbook.read import read_book
from tenorbook.terms.book import DayOrder, DecimalMark, Settings
from tenorbook.terms.loan import ExtraPayment, Length, LengthUnit, Loan, PaymentStep, RateChange

D = Decimal


def test_a_full_row(tmp_path: Path) -> None:
    found = loan(
        tmp_path,
        Counterparty="First Harbour Bank",
        Description="Forklift",
        Side="receivable",
        Currency="eur",
        First_payment="1 Mar 2026",
        Maturity=date(2056, 2, 1),
        Frequency="Twice a month",
        Timing="advance",
        Repayment="level principal",
        Payment="1,539.29",
        Balloon=0,
        Amortized_over="30 years",
        **{"Interest-only payments": 12},
        Day_count="Actual/360",
        **{"Odd-day count": "Actual/365 Fixed"},
        First_period="add to first payment",
        Long_first_period="compound",
        Payment_basis="equal periods",
        Payment_rounding="up 1.00",
        Interest_rounding="half even",
        **{"Month-end": "no"},
        Extra_each_payment=100,
        Extra_from="2027-01-01",
        Extra_until="2028-01-01",
        Unpaid_interest="carry",
    )
    assert found == Loan(
        loan_id="A-1",
        counterparty="First Harbour Bank",
        description="Forklift",
        side=Side.RECEIVABLE,
        currency="EUR",
        principal=D(250000),
        annual_rate=D("0.0625"),
        funding_date=START,
        first_payment=date(2026, 3, 1),
        term=Length(360),
        maturity=date(2056, 2, 1),
        frequency=Frequency.TWICE_A_MONTH,
        timing=Timing.ADVANCE,
        repayment=Repayment.LEVEL_PRINCIPAL,
        payment=D("1539.29"),
        balloon=D(0),
        amortized_over=Length(360, LengthUnit.MONTHS),
        interest_only_payments=12,
        day_count=DayCount.ACTUAL_360,
        odd_day_count=DayCount.ACTUAL_365_FIXED,
        first_period=FirstPeriod.ADD_TO_FIRST,
        long_first_period=LongFirst.COMPOUND,
        payment_basis=PaymentBasis.EQUAL_PERIODS,
        payment_rounding=PaymentStep(PaymentRounding.UP, D("1.00")),
        interest_rounding=InterestRounding.HALF_EVEN,
        month_end=MonthEnd.NO,
        extra_each_payment=D(100),
        extra_from=date(2027, 1, 1),
        extra_until=date(2028, 1, 1),
        unpaid_interest=UnpaidInterest.CARRY,
    )
    assert found.where["Payment"] == Place("Loans", "O2", "1,539.29")
    assert found.where["Annual rate"] == Place("Loans", "C2", "6.25%")
    assert set(found.where) >= {"Loan ID", "Month-end", "Funding date"}


@pytest.mark.parametrize(
    ("written", "loan_id"),
    [(1001, "1001"), (1001.0, "1001"), ("00123", "00123"), (" A  1 ", "A 1"), ("=A", "=A")],
)
def test_loan_ids(tmp_path: Path, written: object, loan_id: str) -> None:
    path = workbook(tmp_path / "book.xlsx", Loans=(HEADERS, ("x", *A_1[1:])))
    book = load_workbook(path)
    book["Loans"]["A2"].value = written
    book["Loans"]["A2"].data_type = "s" if isinstance(written, str) else "n"
    book.save(path)
    assert [found.loan_id for found in read_book(path).loans] == [loan_id]


def test_a_loan_id_shown_with_leading_zeros_keeps_them(tmp_path: Path) -> None:
    path = workbook(tmp_path / "book.xlsx", Loans=(HEADERS, (123, *A_1[1:])))
    book = load_workbook(path)
    book["Loans"]["A2"].number_format = "00000"
    book.save(path)
    assert [found.loan_id for found in read_book(path).loans] == ["00123"]


def test_a_loan_id_that_lost_digits_is_an_error(tmp_path: Path) -> None:
    book = read(tmp_path, Loans=(HEADERS, A_1, (1234567890123456, *A_1[1:])))
    assert [found.loan_id for found in book.set_aside] == ["(row 3)"]


def test_the_header_row_may_stand_lower(tmp_path: Path) -> None:
    rows = [("Harbour Holdings",), (), ("Loans as of", START), (None, *HEADERS), (None, *A_1)]
    (found,) = read(tmp_path, Loans=rows).loans
    assert found.principal == 250000
    assert found.where["Loan ID"].cell == "B5"


def test_a_header_row_below_the_first_thirty_is_not_found(tmp_path: Path) -> None:
    path = workbook(tmp_path / "book.xlsx", Loans=[*[("text",)] * 30, HEADERS, A_1])
    assert "has no header row in the first 30 rows of the sheet Loans" in refusal(path)


def test_headers_match_by_letters_and_digits_alone(tmp_path: Path) -> None:
    headers = ("LOAN-ID", "principal (USD)", "Annual  Rate", "funding_date", "Term.")
    book = read(tmp_path, Loans=(headers, ("A-1", 1000, "5%", START, 12)))
    assert book.loans[0].principal == 1000
    assert book.problems == ()


def test_synonyms_are_noted_once_each(tmp_path: Path) -> None:
    headers = ("Loan no.", "Amount", "Rate %", "Start date", "Payments")
    book = read(tmp_path, Loans=(headers, ("A-1", 1000, 5, START, 12), ("A-2", 1000, 5, START, 12)))
    assert messages(book) == [
        "note: Loans!A1 [Loan no.]: this column is read as Loan ID",
        "note: Loans!B1 [Amount]: this column is read as Principal",
        "note: Loans!C1 [Rate %]: this column is read as Annual rate",
        "note: Loans!D1 [Start date]: this column is read as Funding date",
        "note: Loans!E1 [Payments]: this column is read as Term",
    ]
    assert [found.annual_rate for found in book.loans] == [D("0.05"), D("0.05")]


def test_brackets_that_hold_no_unit_belong_to_the_name(tmp_path: Path) -> None:
    headers = ("Loan ID", "Principal (000s)", "Annual rate", "Funding date", "Term")
    path = workbook(tmp_path / "book.xlsx", Loans=(headers, A_1))
    assert "has no column Principal" in refusal(path)


@pytest.mark.parametrize("header", ["Term (years)", "Term in years", "Years", "Loan term [years]"])
def test_a_term_in_years_by_its_header(tmp_path: Path, header: str) -> None:
    book = read(tmp_path, Loans=((*HEADERS[:4], header), (*A_1[:4], 30)))
    assert book.loans[0].term == Length(360, LengthUnit.MONTHS)
    assert any("read as years, as the header says" in line for line in messages(book))


def test_interest_only_months_of_a_loan_that_is_not_monthly(tmp_path: Path) -> None:
    headers = (*HEADERS, "Frequency", "IO months")
    book = read(tmp_path, Loans=(headers, (*A_1, "monthly", 12), ("A-2", *A_1[1:], "quarterly", 12)))
    assert [found.interest_only_payments for found in book.loans] == [12]
    assert [found.loan_id for found in book.set_aside] == ["A-2"]


def test_unknown_columns_are_carried_untouched(tmp_path: Path) -> None:
    headers = (*HEADERS, "Plant", "Plant", "Rate desk", "Classification")
    book = read(tmp_path, Loans=(headers, (*A_1, "North", 7, date(2026, 5, 1), "on demand")))
    assert book.carried_headers == ("Plant", "Plant (2)", "Rate desk", "Classification")
    assert book.loans[0].carried == {
        "Plant": "North",
        "Plant (2)": D(7),
        "Rate desk": date(2026, 5, 1),
        "Classification": "on demand",
    }
    assert book.problems == ()


def test_an_unknown_column_that_resembles_a_term_is_a_warning(tmp_path: Path) -> None:
    book = read(tmp_path, Loans=((*HEADERS, "Baloon"), (*A_1, 5000)))
    assert messages(book) == [
        "warning: Loans!F1 [Baloon]: this column is not known and is carried through unread; "
        "if it means Balloon, name it so"
    ]


def test_beside_a_canonical_name_its_other_spelling_is_carried(tmp_path: Path) -> None:
    headers = ("Account no", *HEADERS, "Description", "Collateral")
    book = read(tmp_path, Loans=(headers, ("4711", *A_1, "Forklift", "Serial 9")))
    (found,) = book.loans
    assert (found.loan_id, found.description) == ("A-1", "Forklift")
    assert found.carried == {"Account no": "4711", "Collateral": "Serial 9"}
    assert book.problems == ()


def test_two_other_spellings_of_one_name_are_refused(tmp_path: Path) -> None:
    headers = ("Loan no", "Account no", *HEADERS[1:])
    path = workbook(tmp_path / "book.xlsx", Loans=(headers, ("1", *A_1)))
    assert "the headers in A1 and B1 both mean Loan ID" in refusal(path)


def test_rows_that_are_no_loans(tmp_path: Path) -> None:
    rows = [
        HEADERS,
        A_1,
        (),
        ("Subtotal", 250000),
        (None, "=SUM(B2:B2)"),
        HEADERS,
        ("Total", 250000, "6.25%"),
        (None, None, None, None, None, "a remark beside the table"),
    ]
    book = read(tmp_path, Loans=rows)
    assert [found.loan_id for found in book.loans] == ["A-1"]
    assert book.set_aside == ()
    assert messages(book) == ["note: Loans: rows 4, 5, 7 add up others and are not read as an entry"]


def test_a_company_called_total_is_a_loan(tmp_path: Path) -> None:
    headers = ("Counterparty", *HEADERS)
    book = read(
        tmp_path,
        Loans=(headers, ("Total Roofing", *A_1), ("Total", "A-2", *A_1[1:]), ("Total", None, *A_1[1:])),
    )
    assert [found.loan_id for found in (*book.loans, *book.set_aside)] == ["A-1", "A-2", "(row 4)"]


def test_hidden_rows_are_loans_and_noted_once(tmp_path: Path) -> None:
    path = workbook(tmp_path / "book.xlsx", Loans=(HEADERS, A_1, ("A-2", *A_1[1:]), ("A-3", *A_1[1:])))
    book = load_workbook(path)
    book["Loans"].row_dimensions[2].hidden = True
    book["Loans"].row_dimensions[4].hidden = True
    book.save(path)
    found = read_book(path)
    assert len(found.loans) == 3
    assert messages(found) == [
        "note: Loans: 2 hidden or filtered rows are read like any other: first of them row 2"
    ]


def test_duplicate_ids_set_all_their_loans_aside(tmp_path: Path) -> None:
    book = read(tmp_path, Loans=(HEADERS, A_1, ("B", *A_1[1:]), A_1))
    assert [found.loan_id for found in book.loans] == ["B"]
    assert [found.loan_id for found in book.set_aside] == ["A-1", "A-1"]
    (problem,) = book.problems
    assert (problem.cell, problem.also[0].cell) == ("A4", "A2")


def test_one_bad_loan_hides_no_other_and_no_other_problem(tmp_path: Path) -> None:
    rows = (HEADERS, ("X", "none", "many", "soon", "ever"), A_1)
    book = read(tmp_path, Loans=rows)
    assert [found.loan_id for found in book.loans] == ["A-1"]
    assert [problem.cell for problem in book.problems] == ["B2", "C2", "D2", "E2"]


def test_a_sheet_of_loans_under_another_name(tmp_path: Path) -> None:
    by_synonym = read(tmp_path, Debt_register=(HEADERS, A_1))
    assert messages(by_synonym) == ["note: Debt register: this sheet is read as Loans"]
    alone = read(tmp_path, Sheet1=(HEADERS, A_1))
    assert messages(alone) == ["note: Sheet1: this sheet is read as Loans, since the book has no other"]


def test_the_sheet_called_loans_counts_before_a_synonym(tmp_path: Path) -> None:
    book = read(tmp_path, Debt=(HEADERS, ("B", *A_1[1:])), Loans=(HEADERS, A_1))
    assert [found.loan_id for found in book.loans] == ["A-1"]
    assert messages(book) == [
        "warning: Debt: this sheet is not read, because the book has a sheet Loans; "
        "move what belongs there to Loans"
    ]


def test_two_sheets_that_could_be_the_loans(tmp_path: Path) -> None:
    path = workbook(tmp_path / "book.xlsx", Debt=(HEADERS, A_1), Loan_book=(HEADERS, A_1))
    assert refusal(path) == (
        "error: book.xlsx has two sheets that could be Loans: Debt and Loan book; name the right one Loans"
    )


def test_a_sheet_whose_name_is_almost_known(tmp_path: Path) -> None:
    book = read(tmp_path, Loans=(HEADERS, A_1), Extra_paymnts=(("Loan ID", "Date", "Amount"),))
    assert messages(book) == [
        "warning: Extra paymnts: this sheet is not read; if it means Extra payments, name it so"
    ]


def test_events_attach_to_their_loan(tmp_path: Path) -> None:
    book = read(
        tmp_path,
        Loans=(HEADERS, A_1, (1001, *A_1[1:])),
        Extra_payments=(
            ("Loan ID", "Date", "Amount", "Every", "Until", "Effect", "Applies to", "Note"),
            (
                "A-1",
                date(2027, 1, 1),
                500,
                "yearly",
                date(2030, 1, 1),
                "lower payment",
                "interest first",
                "bonus",
            ),
            ("1001", "1 Feb 2027", "$1,000.00", None, None, None, None, None),
            ("A-1", date(2028, 1, 1), 250, "monthly", 6, None, None, None),
        ),
        Rate_changes=(
            ("Loan ID", "From", "Annual rate", "Payment"),
            ("A-1", date(2029, 1, 1), "7%", "keep"),
            ("A-1", date(2030, 1, 1), "7.5%", 1800),
        ),
    )
    assert book.problems == ()
    first, second = book.loans
    assert first.extra_payments == (
        ExtraPayment(
            date=date(2027, 1, 1),
            amount=D(500),
            every=Frequency.YEARLY,
            until=date(2030, 1, 1),
            effect=ExtraEffect.LOWER,
            applies_to=AppliesTo.INTEREST_FIRST,
            note="bonus",
        ),
        ExtraPayment(date=date(2028, 1, 1), amount=D(250), every=Frequency.MONTHLY, until=6),
    )
    assert second.extra_payments == (ExtraPayment(date=date(2027, 2, 1), amount=D(1000)),)
    assert first.rate_changes == (
        RateChange(from_date=date(2029, 1, 1), annual_rate=D("0.07"), payment=PaymentChange.KEEP),
        RateChange(from_date=date(2030, 1, 1), annual_rate=D("0.075"), payment=D(1800)),
    )
    assert first.extra_payments[1].where["Amount"] == Place("Extra payments", "C4", "250")


def test_empty_sheets_of_events_are_nothing(tmp_path: Path) -> None:
    book = read(tmp_path, Loans=(HEADERS, A_1), Draws=(), Fees=(("Loan ID", "Date", "Amount"),))
    assert book.problems == ()


def test_a_sheet_of_events_without_headers_is_refused(tmp_path: Path) -> None:
    path = workbook(tmp_path / "book.xlsx", Loans=(HEADERS, A_1), Extra_payments=(("A-1", START, 5),))
    assert "has no header row in the first 30 rows of the sheet Extra payments" in refusal(path)


@pytest.mark.parametrize(
    ("header", "harmless", "used"),
    [
        ("Compounding", "per payment", "daily"),
        ("Business days", "none", "following"),
        ("Interest to rolled date", "no", "yes"),
        ("Index", "none", "SOFR"),
        ("Margin", "0", "2%"),
        ("Rate floor", "none", "1%"),
        ("Rate cap", "none", "9%"),
        ("Reset step cap", "none", "2%"),
        ("Reset every", "none", "yearly"),
        ("Reset payment", "none", "keep"),
        ("Lookback days", 0, 45),
        ("Interest method", "simple", "add-on"),
        ("Negative amortization cap", "none", "110%"),
        ("Rate rounding", "none", "1/8"),
    ],
)
def test_terms_that_are_not_computed_set_the_loan_aside(
    tmp_path: Path, header: str, harmless: object, used: object
) -> None:
    rows = ((*HEADERS, header), (*A_1, harmless), ("A-2", *A_1[1:], used), ("A-3", *A_1[1:], None))
    book = read(tmp_path, Loans=rows)
    assert [found.loan_id for found in book.loans] == ["A-1", "A-3"]
    assert messages(book) == [
        f"error: Loans!F3 [{used}]: loan A-2: the term {header} is not computed yet; "
        "the loan is set aside rather than computed without it; compute this loan elsewhere for now"
    ]


def test_records_are_a_note_only(tmp_path: Path) -> None:
    book = read(tmp_path, Loans=(HEADERS, A_1), Receipts=(("Loan ID", "Date", "Amount"), ("A-1", START, 5)))
    assert messages(book) == [
        "note: Receipts: the entries of this sheet do not change the contract schedule and are not used by it"
    ]


def test_other_known_columns_and_sheets_are_accepted_without_a_word(tmp_path: Path) -> None:
    headers = (
        *HEADERS,
        "Prepayment charge",
        "Late charge",
        "Commitment",
        "Value at yield",
        "Entity",
        "Holidays",
    )
    book = read(
        tmp_path,
        Loans=(headers, (*A_1, "3%/2%/1%", "5% after 15 days", 300000, "7%", "North", "US")),
        Holidays=(("Date", "Name"), (START, "Day")),
        Ledger_balances=(("Account", "Date", "Balance"), (2500, START, 1)),
    )
    assert book.problems == ()
    assert book.loans[0].carried["Late charge"] == "5% after 15 days"


def test_currencies_that_contradict_each_other(tmp_path: Path) -> None:
    headers = ("Loan ID", "Principal", "Annual rate", "Funding date", "Currency")
    rows = (
        ("A", "EUR 1,000", "5%", START, "EUR"),
        ("B", "EUR 1,000", "5%", START, None),
        ("C", "$1,000", "5%", START, "CAD"),
        ("D", "$1,000", "5%", START, "EUR"),
    )
    book = read(tmp_path, Loans=(headers, *rows))
    assert [found.loan_id for found in book.loans] == ["A", "C"]
    assert [problem.cell for problem in book.problems] == ["B3", "B5"]


def test_a_currency_in_the_header_must_be_the_loans(tmp_path: Path) -> None:
    headers = ("Loan ID", "Principal (EUR)", "Annual rate", "Funding date", "Currency")
    book = read(tmp_path, Loans=(headers, ("A", 1, "5%", START, "EUR"), ("B", 1, "5%", START, None)))
    assert [found.loan_id for found in book.loans] == ["A"]


def test_settings(tmp_path: Path) -> None:
    book = read(
        tmp_path,
        Loans=(
            ("Loan ID", "Principal", "Annual rate", "Funding date"),
            ("A", "1.234,50", "6,25 %", "03/04/2026"),
        ),
        Settings=(
            ("Name", "Value"),
            ("As-of date", "31/12/2026"),
            ("Fiscal year end", "30 June"),
            ("Currency", "EUR"),
            ("Day order", "day first"),
            ("Decimal mark", "comma"),
            ("Tolerance", "0,05"),
            ("Period-end day", "not counted"),
            ("Interest account", 6100),
            ("Cash account", None),
        ),
    )
    assert book.problems == ()
    assert book.settings == Settings(
        as_of=date(2026, 12, 31),
        currency="EUR",
        fiscal_year_end=(6, 30),
        day_order=DayOrder.DAY_FIRST,
        decimal_mark=DecimalMark.COMMA,
        tolerance=D("0.05"),
        period_end_counted=False,
        accounts={"Interest account": "6100"},
    )
    (found,) = book.loans
    assert (found.principal, found.annual_rate, found.funding_date) == (
        D("1234.5"),
        D("0.0625"),
        date(2026, 4, 3),
    )


def test_settings_that_are_not_known_are_a_warning(tmp_path: Path) -> None:
    book = read(tmp_path, Loans=(HEADERS, A_1), Settings=(("Colour", "blue"),))
    assert messages(book) == [
        "warning: Settings!A1 [Colour]: this setting is not known and has no effect; known are: As-of date, "
        "Fiscal year end, Currency, Day order, Decimal mark, Tolerance, Period-end day, Accounts"
    ]
    assert book.settings == Settings()


def test_settings_may_be_given_where_the_book_has_none(tmp_path: Path) -> None:
    path = tmp_path / "book.csv"
    path.write_text("Loan ID;Principal;Annual rate;Funding date\nC-1;1.234,50;6,25 %;03/04/2026\n")
    given = Settings(decimal_mark=DecimalMark.COMMA, day_order=DayOrder.DAY_FIRST)
    (found,) = read_book(path, given).loans
    assert (found.principal, found.funding_date) == (D("1234.50"), date(2026, 4, 3))


def test_problems_come_in_the_order_of_the_sheets(tmp_path: Path) -> None:
    book = read(
        tmp_path,
        Extra_payments=(("Loan ID", "Date", "Amount"), ("A-1", "soon", 5)),
        Loans=(
            HEADERS,
            ("A-1", "none", "6%", "ever", 12),
            *(("B", *A_1[1:]) for _ in range(9)),
            ("Z", 0, *A_1[2:]),
        ),
    )
    assert [problem.cell for problem in book.problems][:3] == ["B2", "B2", "D2"]
    assert [problem.sheet for problem in book.problems][:2] == ["Extra payments", "Loans"]
    assert book.problems[-1].cell == "B12"
