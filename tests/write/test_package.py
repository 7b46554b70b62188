"""The zip file: rows in their places, any reader unpacks them, with ISA-L or without."""

import zipfile
import zlib
from pathlib import Path

import openpyxl
import pytest

from tenorbook.write import package
from tenorbook.write.package import PackedRows, QuickWriter
from tenorbook.write.row_sheet import RowSheet

ROWS = [f'<row r="{n}"><c r="A{n}"><v>{n * n}</v></c></row>' for n in range(1, 3001)]


def write(path: Path) -> Path:
    workbook = QuickWriter(str(path), {"in_memory": True})
    sheet, empty = workbook.add_worksheet("One", RowSheet), workbook.add_worksheet("Two", RowSheet)
    sheet.put_rows(iter(ROWS), 3000, 1)
    empty.put_rows(iter(()), 1, 1)
    workbook.close()
    return path


@pytest.mark.parametrize("quick", [True, False])
def test_rows_are_unpacked_as_they_were_put(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, quick: bool
) -> None:
    if not quick:
        monkeypatch.setattr(package, "_quick", None)
    path = write(tmp_path / "x.xlsx")
    with zipfile.ZipFile(path) as archive:
        assert archive.testzip() is None
        assert "".join(ROWS) in archive.read("xl/worksheets/sheet1.xml").decode()
    sheet = openpyxl.load_workbook(path)["One"]
    assert (sheet.max_row, sheet["A3000"].value) == (3000, 9_000_000)


def test_the_same_bytes_twice(tmp_path: Path) -> None:
    assert write(tmp_path / "a.xlsx").read_bytes() == write(tmp_path / "b.xlsx").read_bytes()


def test_a_file_is_at_most_a_quarter_larger_than_with_the_usual_compressor() -> None:
    plain = "".join(ROWS).encode()
    assert len(PackedRows(ROWS).packed) < 1.25 * len(zlib.compress(plain))


def test_the_library_is_left_as_it_was(tmp_path: Path) -> None:
    import xlsxwriter.workbook

    write(tmp_path / "x.xlsx")
    assert xlsxwriter.workbook.ZipFile is zipfile.ZipFile
