"""CSV: plain decimals, ISO dates, and no text that a spreadsheet would run."""

from datetime import date
from decimal import Decimal
from pathlib import Path
from typing import Any

import pytest

from tenorbook.tables.stream import Field, Kind, Stream
from tenorbook.write.csv_file import guarded, write_csv

FIELDS = (
    Field("id", Kind.TEXT),
    Field("n", Kind.INTEGER),
    Field("amount", Kind.DECIMAL),
    Field("day", Kind.DATE),
)


def written(path: Path, *rows: tuple[Any, ...]) -> str:
    write_csv(path, Stream("x", FIELDS, rows, 2))
    return path.read_bytes().decode("utf-8")


def test_one_header_line_and_a_line_a_row(tmp_path: Path) -> None:
    text = written(
        tmp_path / "x.csv", ("A", 1, Decimal("-1234.50"), date(2026, 1, 2)), ("B", None, None, None)
    )
    assert text == "id,n,amount,day\r\nA,1,-1234.50,2026-01-02\r\nB,,,\r\n"


def test_decimals_are_never_in_scientific_notation(tmp_path: Path) -> None:
    text = written(tmp_path / "x.csv", ("A", 1, Decimal("1E+3"), None), ("B", 1, Decimal("1E-10"), None))
    assert text.splitlines()[1:] == ["A,1,1000,", "B,1,0.0000000001,"]


@pytest.mark.parametrize("text", ["=1+1", "+SUM(A1)", "-2+3", "@x", "\tx", "\rx", "-", "+", "--5", "-5-5"])
def test_text_that_looks_like_a_formula_is_guarded(text: str) -> None:
    assert guarded(text) == "'" + text


@pytest.mark.parametrize("text", ["-5.00", "+5", "-1234", "5-5", "Loan =1", "", "-.5"])
def test_numbers_and_other_text_stay(text: str) -> None:
    assert guarded(text) == text


def test_names_outside_ascii_are_utf_8(tmp_path: Path) -> None:
    assert "Žižek & Łódź, a.s." in written(tmp_path / "x.csv", ("Žižek & Łódź, a.s.", 1, None, None))
