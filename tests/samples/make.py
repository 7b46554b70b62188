"""Makes the sample books and the empty book: `python tests/samples/make.py`.

The same bytes come out every time. What the books are about, and every message that the messy one
gets, stands in `samples/README.md`, written by hand.
"""

import sys
from datetime import date, datetime
from pathlib import Path
from typing import Any
from zipfile import ZipFile

from xlsxwriter import Workbook

from tenorbook.jobs.blank_book.workbook import sample_settings, write_book, write_sample_book

ROOT = Path(__file__).parent.parent.parent
AS_OF = date(2026, 6, 30)

Row = dict[str, Any]


def day(text: str) -> date:
    return date.fromisoformat(text)


def loan(loan_id: str, counterparty: str, description: str, **terms: Any) -> Row:
    """A row of Loans; `first_payment` is the header First payment."""
    headers = {"interest_only_payments": "Interest-only payments", "month_end": "Month-end",
               "odd_day_count": "Odd-day count"}  # fmt: skip
    named = {headers.get(key, key.replace("_", " ").capitalize()): value for key, value in terms.items()}
    return {"Loan ID": loan_id, "Counterparty": counterparty, "Description": description, **named}


HARBOUR_LOANS = [
    loan(
        "MP-01", "Quillhaven Savings Bank", "Quayside warehouse, mortgage",
        principal=1_850_000, annual_rate=0.05875, funding_date=day("2022-03-31"),
        first_payment=day("2022-04-30"), term=120, amortized_over="25 years", day_count="Actual/360",
        payment_basis="equal periods", payment_rounding="up 1.00",
    ),
    loan(
        "MP-02", "Quillhaven Savings Bank", "Tug Alma",
        side="payable", repayment="level payment", payment_basis="as accrued", interest_rounding="half up",
        long_first_period="simple", unpaid_interest="add to balance",
        principal=960_000, annual_rate=0.0635, funding_date=day("2023-01-10"),
        first_payment=day("2023-02-15"), term="7 years", frequency="monthly", day_count="30/360",
        odd_day_count="Actual/365 Fixed", first_period="add to first payment",
    ),
    loan(
        "MP-03", "Kestrel Leasing", "Ship-to-shore crane", currency="EUR",
        first_period="accrue",
        principal=640_000, annual_rate=0.049, funding_date=day("2023-05-02"),
        first_payment=day("2023-07-31"), maturity=day("2033-04-30"), frequency="quarterly",
        repayment="level principal", day_count="Actual/365 Fixed", month_end="yes",
    ),
    loan(
        "MP-04", "Minato Ridge Trust", "Floating dock", currency="JPY",
        principal=48_000_000, annual_rate=0.0135, funding_date=day("2024-01-17"),
        first_payment=day("2024-09-30"), term="10 years", frequency="twice a year",
        day_count="Actual/365 Leap", first_period="pay at funding", payment_rounding="down 100",
        interest_rounding="down",
    ),
    loan(
        "MP-05", "Dhow Yard Partners", "Slipway sold on instalments", side="receivable", currency="KWD",
        principal=185_000.5, annual_rate=0.0525, funding_date=day("2024-03-01"), term=96,
        timing="advance", day_count="30E/360", payment_rounding="nearest 0.050",
    ),
    loan(
        "MP-06", "Brackwater Credit Union", "Survey launch",
        principal=72_500, annual_rate=0.074, funding_date=day("2024-02-06"),
        first_payment=day("2024-04-20"), term=60, day_count="NL/365", first_period="capitalize",
        long_first_period="compound", unpaid_interest="carry",
    ),
    loan(
        "MP-07", "Ostrava Lifting", "Two forklifts",
        principal=38_900, annual_rate=0.082, funding_date=day("2024-08-01"),
        first_payment=day("2024-08-23"), term=104, frequency="every 2 weeks",
        day_count="Actual/365.25", first_period="waive",
    ),
    loan(
        "MP-08", "Gull and Anchor Cafe", "Fit-out of the kiosk", side="receivable",
        principal=5_200, annual_rate=0.09, funding_date=day("2026-01-08"),
        first_payment=day("2026-01-12"), term="52 weeks", frequency="weekly", day_count="Equal periods",
        first_period="waive", payment_rounding="nearest 1.00",
    ),
    loan(
        "MP-09", "Ferrier Tools", "Workshop machines, until paid",
        principal=9_800, annual_rate=0.0875, funding_date=day("2025-02-03"), payment=410,
        frequency="every 4 weeks", day_count="Equal periods", timing="arrears",
    ),
    loan(
        "MP-10", "Brackwater Credit Union", "Pilots' minibus",
        principal=26_000, annual_rate=0.066, funding_date=day("2025-03-31"),
        first_payment=day("2025-04-15"), term="4 years", frequency="twice a month",
        day_count="Actual/Actual ISDA", extra_each_payment=50, extra_from=day("2026-01-01"),
        extra_until=day("2026-12-31"),
    ),
    loan(
        "MP-11", "Sandbar Marina", "Vendor note on the marina", side="receivable", currency="EUR",
        principal=1_200_000, annual_rate=0.042, funding_date=day("2023-11-15"), term=10,
        frequency="twice a year", repayment="interest only", day_count="Actual/Actual ICMA",
    ),
    loan(
        "MP-12", "Tern Street Finance", "Bridge for the dredging season",
        principal=150_000, annual_rate=0.0775, funding_date=day("2026-02-02"),
        maturity=day("2026-11-02"), frequency="at maturity", day_count="Actual/360",
    ),
    loan(
        "MP-13", "I. and R. Vance", "Owners' note on the office", side="receivable",
        principal=310_000, annual_rate=0.0575, funding_date=day("2023-12-29"),
        first_payment=day("2024-02-29"), term="9 years", frequency="every 2 months",
        day_count="30/360 US EOM", interest_only_payments=6, month_end="no",
    ),
    loan(
        "MP-14", "County of Low Ferry", "Land contract, north mole",
        principal=240_000, annual_rate=0.045, funding_date=day("2021-10-01"), term=10,
        frequency="yearly", day_count="30/360 by dates", balloon=60_000,
    ),
    loan(
        "MP-15", "Kestrel Leasing", "Weighbridge", currency="EUR",
        principal=84_000, annual_rate=0.051, funding_date=day("2024-10-31"),
        first_payment=day("2025-02-28"), term=12, frequency="every 4 months",
        repayment="level principal", payment=7_000, day_count="30E/360 ISDA", interest_rounding="up",
    ),
    loan(
        "MP-16", "Quillhaven Savings Bank", "Cold store, payment fixed by the note",
        principal=420_000, annual_rate=0.0685, funding_date=day("2024-05-20"),
        first_payment=day("2024-06-15"), term=72, payment=6_400, balloon=65_000,
        first_period="capitalize", interest_rounding="none",
    ),
    loan(
        "MP-17", "Old Customs House Fund", "Unpaid interest carried",
        principal=500_000, annual_rate=0.06, funding_date=day("2024-12-31"), maturity=day("2029-12-31"),
        payment=2_600, balloon=490_000, unpaid_interest="carry", month_end="auto",
    ),
    loan(
        "MP-18", "Lantern Insurance", "Premium reserve, interest paid ahead",
        principal=220_000, annual_rate=0.0505, funding_date=day("2025-01-01"), term=16,
        frequency="quarterly", timing="advance", repayment="interest only", day_count="Actual/365 Fixed",
    ),
    loan(
        "MP-19", "Brackwater Credit Union", "Harbour patrol boat",
        principal=118_000, annual_rate=0.0699, funding_date=day("2025-06-12"),
        first_payment=day("2025-07-05"), term=60, day_count="Actual/360",
        first_period="add to first payment", interest_rounding="half even",
    ),
    loan(
        "MP-20", "Ferrier Tools", "Diving compressor",
        principal=31_400, annual_rate=0.0825, funding_date=day("2026-03-20"),
        first_payment=day("2026-04-10"), term=36, first_period="pay at funding",
    ),
    loan(
        "MP-21", "M. Vance", "Shareholder loan, one payment",
        principal=90_000, annual_rate=0, funding_date=day("2025-09-15"), term="24 months",
        repayment="at maturity", frequency="at maturity",
    ),
]  # fmt: skip

HARBOUR_EXTRAS: list[Row] = [
    {"Loan ID": "MP-01", "Date": day("2023-12-31"), "Amount": 20_000, "Every": "yearly",
     "Until": day("2027-12-31"), "Note": "Yearly prepayment right"},
    {"Loan ID": "MP-02", "Date": day("2024-09-02"), "Amount": 45_000, "Effect": "shorten term",
     "Applies to": "principal", "Note": "Insurance money"},
    {"Loan ID": "MP-06", "Date": day("2025-05-20"), "Amount": 4_500, "Effect": "pay ahead",
     "Note": "Three payments ahead"},
    {"Loan ID": "MP-13", "Date": day("2025-06-10"), "Amount": 30_000, "Effect": "lower payment"},
    {"Loan ID": "MP-14", "Date": day("2025-04-01"), "Amount": 25_000, "Effect": "lower payment",
     "Applies to": "interest first", "Note": "By the note, interest first"},
    {"Loan ID": "MP-19", "Date": day("2025-10-05"), "Amount": 1_000, "Every": "quarterly", "Until": 4},
]  # fmt: skip

HARBOUR_RATES: list[Row] = [
    {"Loan ID": "MP-02", "From": day("2026-02-15"), "Annual rate": 0.059, "Payment": "re-amortize"},
    {"Loan ID": "MP-13", "From": day("2026-03-17"), "Annual rate": 0.0625},
    {"Loan ID": "MP-16", "From": day("2026-06-15"), "Annual rate": 0.0645, "Payment": "keep"},
    {"Loan ID": "MP-17", "From": day("2026-01-31"), "Annual rate": 0.065, "Payment": 2_650},
    {"Loan ID": "MP-17", "From": day("2027-06-30"), "Annual rate": 0.055, "Payment": 2_700},
]


def harbour_book(path: Path) -> None:
    """Every term of this version, in loans that a harbour company could have."""
    write_book(
        path,
        {"Loans": HARBOUR_LOANS, "Extra payments": HARBOUR_EXTRAS, "Rate changes": HARBOUR_RATES},
        {**sample_settings(), "As-of date": AS_OF},
        "Marrow Point Harbour Company: loans",
    )


MESSY_HEADERS = (
    "Loan no.", "Lender", "What for", "Amount ($)", "Interest rate", "Start date", "First instalment",
    "Payments", "How often", "Basis", "Renewal contact",
)  # fmt: skip


def messy_rows(percent: Any) -> list[tuple[Any, ...]]:
    """The rows as they were typed: (value, format) where a cell has a format of its own."""
    return [
        ("PJ/1", "Wend Valley Bank", "Workshop", "$ 182,500.00", (0.0595, percent), "14/03/2022",
         "01/05/2022", 180, "Monthly", "Act/365", "Ms Orme"),
        ("PJ/2", "Wend Valley Bank", "Panel saw", "24\u00a0900.00", "6 1/4 %", "3 April 2024",
         "03/05/2024", 48, "Monthly", "", "Ms Orme"),
        ("PJ/3", "Thistle Motors", "Van", 31_250, 7.25, "2025-01-20", "20/02/2025", 60, "Monthly", "", ""),
        ("PJ/4", "Thistle Motors", "Van returned", "(12,500.00)", 7.25, "20/01/2025", "20/02/2025", 60,
         "Monthly", "", "closed?"),
        (),
        ("PJ/5", "Ada Pellworth", "Family loan", 60_000, "4%", "01/07/2023", "31/12/2023", 20, "Semi-annual",
         "30/360", ""),
        ("PJ/6", "Copse Timber Co-op", "Drying kiln", "88,000", 6.5, "31/02/2025", "15/03/2025", 84,
         "Monthly", "", "J. Sallow"),
        ("PJ/7", "Copse Timber Co-op", "Dust extraction", "15'400.00", 6.5, "15-Sep-2025", "15/10/2025", 36,
         "Monthly", "Act/360", "J. Sallow"),
    ]  # fmt: skip


HIDDEN = "PJ/5"


def messy_book(path: Path) -> None:
    """A register as it comes from a drawer: titles, text dates, three kinds of percent, a total."""
    with Workbook(str(path)) as book:
        book.set_properties({"created": datetime(2026, 1, 1)})
        sheet = book.add_worksheet("Loan register")
        bold, money = (
            book.add_format({"bold": True, "border": 1}),
            book.add_format({"num_format": "#,##0.00"}),
        )
        percent = book.add_format({"num_format": "0.00%"})
        sheet.merge_range("A1:F1", "Pellworth Joinery", book.add_format({"bold": True, "font_size": 14}))
        sheet.write("A2", "Our loans - please keep up to date!")
        sheet.write("K2", "typed by hand, Dec.")
        for column, header in enumerate(MESSY_HEADERS):
            sheet.write(4, column, header, bold)
        rows = messy_rows(percent)
        for number, row in enumerate(rows, 5):
            for column, value in enumerate(row):
                sheet.write(number, column, *(value if isinstance(value, tuple) else (value,)))
            if row and row[0] == HIDDEN:
                sheet.set_row(number, None, None, {"hidden": True})
        total = 5 + len(rows) + 1
        sheet.write(total, 0, "Total", bold)
        sheet.write_formula(total, 3, f"=SUM(D6:D{total})", money, 91_250)
        sheet.set_column("A:K", 15)
        settings = book.add_worksheet("Settings")
        for number, pair in enumerate((("Date order", "dd/mm/yyyy"), ("As of", "31/12/2025"))):
            settings.write_row(number, 0, pair)


def blank_book(path: Path) -> None:
    """What `tenorbook blank` writes."""
    write_sample_book(path)


BOOKS = {
    "samples/harbour-book.xlsx": harbour_book,
    "samples/messy-book.xlsx": messy_book,
    "templates/blank-book.xlsx": blank_book,
}


def parts(path: Path) -> dict[str, bytes]:
    """A workbook's parts, unzipped: the same on any machine, however it compresses."""
    with ZipFile(path) as book:
        return {info.filename: book.read(info) for info in book.infolist()}


def main(root: Path) -> None:
    for name, write in BOOKS.items():
        path = root / name
        path.parent.mkdir(parents=True, exist_ok=True)
        write(path)


if __name__ == "__main__":
    main(Path(sys.argv[1]) if len(sys.argv) > 1 else ROOT)
