"""Opened and recalculated in a real spreadsheet program, no figure changes."""

import re
import shutil
import zipfile
from datetime import datetime
from pathlib import Path
from typing import Any

import pytest

from reports.samples import book_of, every_kind, note
from spreadsheet.harness import differences, formulas, needs_soffice, recalculate, stored
from tenorbook.jobs.outputs import write_schedules

pytestmark = [pytest.mark.spreadsheet, needs_soffice]
NOW = datetime(2026, 1, 2, 3, 4, 5)


@pytest.fixture(scope="module")
def written(tmp_path_factory: pytest.TempPathFactory) -> Path:
    folder = tmp_path_factory.mktemp("book")
    write_schedules(book_of(list(every_kind())), folder, "book", now=NOW)
    return folder / "book.schedules.xlsx"


@pytest.fixture(scope="module")
def recalculated(written: Path) -> Any:
    return recalculate(written, written.parent)


def test_every_cell_comes_to_its_stored_value(written: Path, recalculated: Any) -> None:
    assert list(differences(stored(written), recalculated, digits=8)) == []


def test_no_cell_is_an_error(recalculated: Any) -> None:
    cells = [cell for sheet in recalculated for row in sheet.iter_rows() for cell in row]
    assert [cell.coordinate for cell in cells if cell.data_type == "e"] == []
    assert len(cells) > 20_000


def test_every_amount_of_a_schedule_is_a_formula(written: Path) -> None:
    live = {(sheet, cell) for sheet, cell, _ in formulas(written)}
    sheet = stored(written)["plain"]
    header = next(row for row in sheet.iter_rows() if row[0].value == "No.")
    names = {cell.value: cell.column_letter for cell in header}
    rows = range(header[0].row + 2, header[0].row + 10)
    for name in ("Days", "Annual rate", "Opening balance", "Interest", "Principal", "Payment"):
        assert {("plain", f"{names[name]}{row}") for row in rows} <= live
    assert ("plain", f"{names['Closing balance']}{header[0].row + 2}") in live


def test_every_check_passes(written: Path, recalculated: Any) -> None:
    """Each difference is nothing, each verdict PASS, on the summary and on every loan's sheet."""
    live = {(sheet, cell) for sheet, cell, _ in formulas(written)}
    for name in (sheet for sheet in recalculated.sheetnames if sheet not in ("Exceptions", "Maturities")):
        sheet = recalculated[name]
        cells = [cell for row in sheet.iter_rows() for cell in row]
        head = next(cell for cell in cells if cell.value == "Verdict")
        last = next(cell for cell in cells if cell.value == "All of them")
        for row in range(head.row + 1, last.row + 1):
            verdict, difference = sheet.cell(row, head.column), sheet.cell(row, head.column - 1)
            assert verdict.value == "PASS", sheet.cell(row, 1).value
            assert not difference.value
            assert (name, verdict.coordinate) in live
        assert last.row - head.row - 1 >= 4


def test_a_wrong_stored_value_is_found(tmp_path: Path) -> None:
    """The comparison can fail: a corrupted stored value is recalculated away."""
    write_schedules(book_of([note()]), tmp_path, "book", now=NOW)
    path, broken = tmp_path / "book.schedules.xlsx", tmp_path / "broken.xlsx"
    corrupt(path, broken)
    found = list(differences(stored(broken), recalculate(broken, tmp_path)))
    assert [(each.sheet, each.stored) for each in found] == [("EQ-101", 123456789)]
    shutil.rmtree(tmp_path / "profile")


def corrupt(path: Path, broken: Path) -> None:
    """Changes one stored interest figure of the loan's sheet, leaving its formula."""
    with zipfile.ZipFile(path) as whole, zipfile.ZipFile(broken, "w") as copy:
        for name in whole.namelist():
            content = whole.read(name)
            if name == "xl/worksheets/sheet4.xml":
                text, count = re.subn(
                    r"(<f>ROUND\(F\d+\*E\d+\*30/360,2\)</f><v>)[^<]+",
                    r"\g<1>123456789",
                    content.decode(),
                    count=1,
                )
                assert count == 1
                content = text.encode()
            copy.writestr(name, content)
