"""Workbooks as files: sound XML, the same bytes twice, text that stays text, what others read in them."""

import re
import zipfile
from collections.abc import Iterator
from datetime import datetime
from pathlib import Path
from typing import Any

import openpyxl
import pytest
from lxml import etree

from reports.samples import book_of, every_kind, note
from tenorbook.jobs.outputs import write_schedules

NOW = datetime(2026, 1, 2)
MAIN = "{http://schemas.openxmlformats.org/spreadsheetml/2006/main}"
HOSTILE = ["=1+1", "+A1", "-1+2", "@SUM(A1)", "\t=1", '=HYPERLINK("x")', "<&>\"'", "{=1}", "http://x.example"]

pytestmark = pytest.mark.filterwarnings("ignore:Sparkline Group extension")


@pytest.fixture(scope="module")
def folder(tmp_path_factory: pytest.TempPathFactory) -> Path:
    folder = tmp_path_factory.mktemp("book")
    write_schedules(book_of(list(every_kind())), folder, "book", now=NOW)
    return folder


def parts(path: Path) -> dict[str, bytes]:
    with zipfile.ZipFile(path) as archive:
        return {name: archive.read(name) for name in archive.namelist()}


def sheets(path: Path) -> Iterator[etree._Element]:
    for name, content in parts(path).items():
        if name.startswith("xl/worksheets/sheet"):
            yield etree.fromstring(content)


def test_every_part_is_well_formed(folder: Path) -> None:
    for name, content in parts(folder / "book.schedules.xlsx").items():
        assert etree.fromstring(content) is not None, name


def test_style_numbers_are_in_range(folder: Path) -> None:
    styles = etree.fromstring(parts(folder / "book.schedules.xlsx")["xl/styles.xml"])
    count = len(styles.find(f"{MAIN}cellXfs"))
    used = {
        int(c.get("s", 0)) for sheet in sheets(folder / "book.schedules.xlsx") for c in sheet.iter(f"{MAIN}c")
    }
    assert max(used) < count
    assert count < 80


def test_rows_ascend_and_no_cell_stands_twice(folder: Path) -> None:
    for sheet in sheets(folder / "book.schedules.xlsx"):
        rows = [int(row.get("r")) for row in sheet.iter(f"{MAIN}row")]
        assert rows == sorted(set(rows))
        for row in sheet.iter(f"{MAIN}row"):
            columns = [re.fullmatch(r"([A-Z]+)(\d+)", cell.get("r")) for cell in row]
            assert {match[2] for match in columns if match} == {row.get("r")}
            order = [(len(match[1]), match[1]) for match in columns if match]
            assert order == sorted(set(order))


def test_every_formula_has_a_stored_value(folder: Path) -> None:
    for sheet in sheets(folder / "book.schedules.xlsx"):
        for formula in sheet.iter(f"{MAIN}f"):
            assert formula.getparent().find(f"{MAIN}v").text


def test_same_input_same_bytes(tmp_path: Path) -> None:
    book = book_of([note(), note("B", currency="EUR")])
    files = []
    for name in ("one", "two"):
        write_schedules(book, tmp_path / name, "book", csv=True, now=NOW)
        files.append({path.name: path.read_bytes() for path in (tmp_path / name).iterdir()})
    assert files[0] == files[1]
    assert len(files[0]) == 5


@pytest.mark.parametrize("text", HOSTILE)
def test_text_from_the_input_never_becomes_a_formula(tmp_path: Path, text: str) -> None:
    loan = note(text, counterparty=text, description=text, carried={text: text})
    write_schedules(book_of([loan], (text,)), tmp_path, "book", csv=True, now=NOW)
    book = openpyxl.load_workbook(tmp_path / "book.schedules.xlsx")
    found = [c for sheet in book for row in sheet.iter_rows() for c in row if c.value == text]
    assert len(found) >= 4
    assert {cell.data_type for cell in found} == {"s"}
    for name in ("schedules", "summary", "exceptions"):
        lines = (tmp_path / f"book.{name}.csv").read_text(encoding="utf-8").splitlines()
        assert not [line for line in lines if line.lstrip('"').startswith(("=", "+", "-", "@", "\t"))]


def test_values_only_has_no_formula(tmp_path: Path) -> None:
    book = book_of([note()])
    write_schedules(book, tmp_path / "live", "book", now=NOW)
    write_schedules(book, tmp_path / "values", "book", values_only=True, now=NOW)
    live, plain = (tmp_path / name / "book.schedules.xlsx" for name in ("live", "values"))
    assert not [formula for sheet in sheets(plain) for formula in sheet.iter(f"{MAIN}f")]
    assert values(live) == values(plain)


def values(path: Path) -> dict[str, list[Any]]:
    book = openpyxl.load_workbook(path, data_only=True)
    return {
        sheet.title: [cell for row in sheet.iter_rows(values_only=True) for cell in row] for sheet in book
    }


def test_set_up_for_screen_and_print(folder: Path) -> None:
    sheet = openpyxl.load_workbook(folder / "book.schedules.xlsx")["plain"]
    header = next(row[0].row for row in sheet.iter_rows() if row[0].value == "No.")
    assert sheet.freeze_panes == f"A{header + 1}"
    assert header <= 16
    assert sheet.print_title_rows == f"${header}:${header}"
    assert sheet.page_setup.orientation == "landscape"
    assert sheet.sheet_properties.pageSetUpPr
    assert sheet.sheet_properties.pageSetUpPr.fitToPage
    assert (sheet.page_setup.fitToWidth or 1, sheet.page_setup.fitToHeight) == (1, 0)
    assert sheet.oddFooter
    assert sheet.oddFooter.right.text == "Page &P of &N"
    assert sheet["A3"].hyperlink.location == "'Summary'!A1"


def test_large_books_come_in_volumes(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr("tenorbook.jobs.outputs.MOST_LOANS", 2)
    loans = [note(f"L{number}") for number in range(4)] + [note("bad", principal=None, annual_rate=None)]
    done: list[int] = []
    written = write_schedules(book_of(loans), tmp_path, "book", now=NOW, progress=done.append)
    names = [path.name for path in written.paths]
    assert names == [*(f"book.schedules-0{number}.xlsx" for number in (1, 2, 3)), "book.summary.xlsx"]
    assert done == [1, 2, 3, 4]
    volume = openpyxl.load_workbook(tmp_path / "book.schedules-02.xlsx")
    assert volume.sheetnames == ["Summary", "Exceptions", "Maturities", "L2", "L3"]
    whole = openpyxl.load_workbook(tmp_path / "book.summary.xlsx")["Summary"]
    targets = [cell.hyperlink.target for row in whole.iter_rows() for cell in row if cell.hyperlink]
    assert targets == ["book.schedules-01.xlsx"] * 2 + ["book.schedules-02.xlsx"] * 2


def test_parquet_keeps_amounts_exact(tmp_path: Path) -> None:
    parquet = pytest.importorskip("pyarrow.parquet")
    write_schedules(book_of([note(), note("Y", currency="JPY")]), tmp_path, "book", parquet=True, now=NOW)
    table = parquet.read_table(tmp_path / "book.schedules.parquet")
    assert str(table.schema.field("interest").type) == "decimal128(38, 2)"
    assert str(table["interest"][1].as_py()) == "1302.08"
    assert str(table.schema.field("date").type) == "date32[day]"
