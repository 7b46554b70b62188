"""Random books through the whole program: workbook in, `schedules.csv` out, every row against the oracle."""

import csv
from dataclasses import replace
from datetime import date
from decimal import Decimal
from pathlib import Path
from tempfile import TemporaryDirectory

import openpyxl
from click.testing import CliRunner
from hypothesis import Phase, given, settings
from hypothesis import strategies as st

import oracle
from engine.against_oracle import EXTRA_HEADERS, HEADERS, RATE_HEADERS, in_words
from engine.profile import examples
from strategies import loans
from tenorbook.cli.main import main
from tenorbook.terms.loan import Loan

AMOUNTS = (
    "opening_balance",
    "interest",
    "principal",
    "extra_principal",
    "charges",
    "payment",
    "closing_balance",
    "draw",
)


def cell(value: object) -> object:
    """A value as a person's cell holds it: numbers as doubles, everything else as it is."""
    return float(value) if isinstance(value, Decimal) else value


def write_book(path: Path, book: list[Loan]) -> None:
    """The loans as a workbook with the sheets of the contract."""
    workbook = openpyxl.Workbook()
    workbook.remove(workbook.worksheets[0])
    sheets: dict[str, tuple[dict[str, str], list[dict[str, object]]]] = {
        "Loans": (HEADERS, [in_words(loan, HEADERS) for loan in book]),
        "Extra payments": (
            {"Loan ID": "", **EXTRA_HEADERS},
            [
                {"Loan ID": loan.loan_id, **in_words(x, EXTRA_HEADERS)}
                for loan in book
                for x in loan.extra_payments
            ],
        ),
        "Rate changes": (
            {"Loan ID": "", **RATE_HEADERS},
            [
                {"Loan ID": loan.loan_id, **in_words(x, RATE_HEADERS)}
                for loan in book
                for x in loan.rate_changes
            ],
        ),
    }
    for name, (headers, rows) in sheets.items():
        sheet = workbook.create_sheet(name)
        sheet.append(list(headers))
        for row in rows:
            sheet.append([cell(row.get(header)) for header in headers])
    workbook.save(path)


def expected(loan: Loan) -> list[dict[str, object]] | None:
    """The oracle's rows, or `None` where it finds no schedule."""
    try:
        return oracle.schedule(
            in_words(loan, HEADERS),
            extra_payments=[in_words(x, EXTRA_HEADERS) for x in loan.extra_payments],
            rate_changes=[in_words(x, RATE_HEADERS) for x in loan.rate_changes],
        )
    except ValueError:
        return None


def table(path: Path) -> list[dict[str, str]]:
    """The rows of a CSV file."""
    with path.open(encoding="utf-8", newline="") as file:
        return list(csv.DictReader(file))


def compared(row: dict[str, object]) -> dict[str, object]:
    """A row of either side in comparable values."""
    found: dict[str, object] = {name: Decimal(str(row[name])) for name in (*AMOUNTS, "annual_rate")}
    found |= {name: int(str(row[name])) for name in ("row", "days")}
    found |= {name: date.fromisoformat(str(row[name])) for name in ("date", "due_date")}
    return found | {"kind": str(row["kind"])}


@given(st.lists(loans(), min_size=12, max_size=12))
@settings(examples(8), phases=[Phase.generate])  # a book of twelve shrinks too slowly to wait for
def test_every_row_of_a_random_book(drawn: list[Loan]) -> None:
    book = [replace(loan, loan_id=f"L-{number}") for number, loan in enumerate(drawn)]
    with TemporaryDirectory() as folder:
        path = Path(folder, "book.xlsx")
        write_book(path, book)
        out = Path(folder, "out")
        result = CliRunner().invoke(
            main, ["schedule", str(path), "--out", str(out), "--csv", "--as-of", "2030-01-01"]
        )
        assert result.exit_code in (0, 1), result.output
        rows, problems = table(out / "book.schedules.csv"), table(out / "book.exceptions.csv")
    refused = {row["loan_id"]: row["problem"] for row in problems if row["severity"] == "error"}
    for loan in book:
        mine = [compared(dict(row)) for row in rows if row["loan_id"] == loan.loan_id]
        theirs = expected(loan)
        if theirs is None:
            assert not mine, loan
        elif loan.loan_id in refused:
            assert beyond_a_century(theirs), (refused[loan.loan_id], loan)
        else:
            assert mine == [compared(row) for row in theirs], loan


def beyond_a_century(rows: list[dict[str, object]]) -> bool:
    """Whether a payment that decides the term takes longer than the program goes along with."""
    first, last = rows[0]["date"], rows[-1]["date"]
    assert isinstance(first, date)
    assert isinstance(last, date)
    return last.year - first.year >= 99 or len(rows) > 2_600
