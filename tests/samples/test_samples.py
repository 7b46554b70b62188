"""The sample books: made by their script, clean where they should be, with the messages of their README."""

import re
from collections.abc import Iterator
from pathlib import Path

import pytest
from click.testing import CliRunner, Result

from samples import make
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
from tenorbook.cli.main import main
from tenorbook.jobs.compute import compute
from tenorbook.read import columns, read_book
from tenorbook.reports.result import LoanResult
from tenorbook.terms.book import Book

SAMPLES = make.ROOT / "samples"
HARBOUR, MESSY = SAMPLES / "harbour-book.xlsx", SAMPLES / "messy-book.xlsx"


def run(*arguments: str | Path) -> Result:
    return CliRunner().invoke(main, [str(each) for each in arguments])


def told(name: str) -> str:
    """The messages that the README tells of a book."""
    text = (SAMPLES / "README.md").read_text("utf-8").partition(f"## {name}")[2]
    found = re.search(r"```text\n(.*?)```", text, re.DOTALL)
    assert found is not None
    return found[1]


@pytest.mark.parametrize("name", make.BOOKS)
def test_the_script_makes_these_parts(name: str, tmp_path: Path) -> None:
    make.main(tmp_path)
    assert make.parts(tmp_path / name) == make.parts(make.ROOT / name)


@pytest.mark.parametrize(("book", "code"), [(HARBOUR, 0), (MESSY, 1)])
def test_it_says_what_the_readme_tells(book: Path, code: int) -> None:
    result = run("check", book)
    assert (result.exit_code, result.stderr) == (code, told(book.name))


@pytest.mark.parametrize(("book", "code", "set_aside"), [(HARBOUR, 0, 0), (MESSY, 1, 2)])
def test_it_is_computed_and_every_loan_closes(book: Path, code: int, set_aside: int, tmp_path: Path) -> None:
    assert run("schedule", book, "--out", tmp_path).exit_code == code
    assert (tmp_path / f"{book.stem}.schedules.xlsx").exists()
    assert (tmp_path / f"{book.stem}.checked.xlsx").exists() == bool(set_aside)
    results = list(computed(read_book(book)))
    assert sum(each.schedule is None for each in results) == set_aside
    assert all(each.schedule.closing[-1] == 0 for each in results if each.schedule is not None)


def computed(book: Book) -> Iterator[LoanResult]:
    yield from compute(book, make.AS_OF).result.results


def test_the_harbour_book_uses_every_column_and_every_word() -> None:
    book = read_book(HARBOUR)
    used = {header for loan in book.loans for header in loan.where}
    assert used == {columns.LOAN_ID, columns.RATE, *columns.LOANS}
    for attribute, words in {
        "side": Side, "frequency": Frequency, "timing": Timing, "repayment": Repayment,
        "day_count": DayCount, "first_period": FirstPeriod, "long_first_period": LongFirst,
        "payment_basis": PaymentBasis, "interest_rounding": InterestRounding, "month_end": MonthEnd,
        "unpaid_interest": UnpaidInterest,
    }.items():  # fmt: skip
        assert {getattr(loan, attribute) for loan in book.loans} - {None} == set(words), attribute
    steps = {loan.payment_rounding.rounding for loan in book.loans if loan.payment_rounding}
    assert steps == set(PaymentRounding)


def test_the_harbour_book_uses_every_kind_of_event() -> None:
    book = read_book(HARBOUR)
    extras = [extra for loan in book.loans for extra in loan.extra_payments]
    changes = [change for loan in book.loans for change in loan.rate_changes]
    assert {extra.effect for extra in extras} == {*ExtraEffect, None}
    assert {extra.applies_to for extra in extras} == {*AppliesTo, None}
    assert {type(extra.until).__name__ for extra in extras} == {"NoneType", "date", "int"}
    assert {type(change.payment).__name__ for change in changes} == {"NoneType", "PaymentChange", "Decimal"}
    assert {change.payment for change in changes} >= set(PaymentChange)
    assert len({loan.currency or "USD" for loan in book.loans}) == 4
