"""The checked copy: faulty cells coloured and commented, everything else as it was."""

from pathlib import Path

import pytest
from openpyxl import Workbook, load_workbook
from openpyxl.comments import Comment
from openpyxl.worksheet.worksheet import Worksheet

from read.books import A_1, HEADERS, START, workbook
from tenorbook.basis.problem import Place, error, note, warning
from tenorbook.read import read_book, read_cells
from tenorbook.write.checked import write_checked

RED, AMBER, BLUE = "FFF4B6B6", "FFFFE3A3", "FFD6E6F5"


def opened(path: Path) -> Workbook:
    book = load_workbook(path)
    assert isinstance(book, Workbook)
    return book


def comment(sheet: Worksheet, address: str) -> str:
    found = sheet[address].comment
    return "" if found is None else found.text


def test_faulty_cells_are_marked_by_severity(tmp_path: Path) -> None:
    source = workbook(
        tmp_path / "book.xlsx", Loans=(("Loan no.", *HEADERS[1:]), ("A-1", -5, "40%", START, 360))
    )
    before = source.read_bytes()
    target = tmp_path / "book.checked.xlsx"
    write_checked(source, read_book(source).problems, target)
    sheet = opened(target)["Loans"]
    colours = {address: sheet[address].fill.fgColor.rgb for address in ("A1", "B2", "C2", "D2")}
    assert colours == {"A1": BLUE, "B2": RED, "C2": AMBER, "D2": "00000000"}
    assert (
        comment(sheet, "B2") == "error: principal is negative; enter the amount advanced as a positive number"
    )
    assert comment(sheet, "D2") == ""
    assert [cell.value for cell in sheet[2]][:3] == ["A-1", -5, "40%"]
    assert source.read_bytes() == before
    assert sorted(path.name for path in tmp_path.iterdir()) == ["book.checked.xlsx", "book.xlsx"]


def test_several_problems_of_a_cell_and_a_comment_that_was_there(tmp_path: Path) -> None:
    source = workbook(tmp_path / "book.xlsx", Loans=(HEADERS, A_1))
    made = opened(source)
    made["Loans"]["B2"].comment = Comment("ask the bank", "Ada")
    made.save(source)
    place, other = Place("Loans", "B2", "1"), Place("Loans", "B1", "x")
    problems = [
        note("", place, "first"),
        warning("A-1", place, "second", "do this"),
        error("A-1", place, "third", "", other),
    ]
    write_checked(source, problems, tmp_path / "out.xlsx")
    sheet = opened(tmp_path / "out.xlsx")["Loans"]
    assert comment(sheet, "B2") == "ask the bank\n\nnote: first\n\nwarning: second; do this\n\nerror: third"
    assert comment(sheet, "B1") == "error: third"
    assert sheet["B2"].fill.fgColor.rgb == RED


def test_a_problem_inside_a_merged_range_is_marked_on_its_first_cell(tmp_path: Path) -> None:
    source = workbook(tmp_path / "book.xlsx", Loans=(HEADERS, A_1, ("A-2", 5, None, START, 12)))
    made = opened(source)
    made["Loans"].merge_cells("C2:C3")
    made.save(source)
    write_checked(source, read_book(source).problems, tmp_path / "out.xlsx")
    assert "is covered by a merged cell" in comment(opened(tmp_path / "out.xlsx")["Loans"], "C2")


def test_problems_of_the_book_as_a_whole_mark_nothing(tmp_path: Path) -> None:
    source = workbook(tmp_path / "book.xlsx", Loans=(HEADERS, A_1))
    write_checked(
        source, [note("", Place("Loans"), "x"), note("", Place("Gone", "A1"), "x")], tmp_path / "out.xlsx"
    )
    sheet = opened(tmp_path / "out.xlsx")["Loans"]
    assert [cell.comment for row in sheet.iter_rows() for cell in row if cell.comment] == []


def test_a_csv_becomes_a_workbook_of_plain_cells(tmp_path: Path) -> None:
    source = tmp_path / "book.csv"
    source.write_text(
        "Loan ID,Principal,Annual rate,Funding date\n=1+1,-5,6%,2026-01-15\n@x,+5,none,\x07ever\n"
    )
    write_checked(source, read_book(source).problems, tmp_path / "out.xlsx", read_cells(source))
    sheet = opened(tmp_path / "out.xlsx")["Loans"]
    assert [cell.value for cell in sheet["A"]] == ["Loan ID", "=1+1", "@x"]
    assert {cell.data_type for row in sheet.iter_rows() for cell in row} == {"s"}
    assert sheet["D3"].value == "ever"
    assert "principal is negative" in comment(sheet, "B2")


def test_texts_of_a_rebuilt_copy_are_no_formulas_to_a_spreadsheet_program(tmp_path: Path) -> None:
    source = tmp_path / "book.csv"
    source.write_text("Loan ID,Principal,Annual rate,Funding date\n=1+1,5,6%,2026-01-15\n")
    write_checked(source, (), tmp_path / "out.xlsx", read_cells(source))
    (sheet,) = read_cells(tmp_path / "out.xlsx")
    cell = sheet.cell(2, 1)
    assert (cell.value, cell.formula) == ("=1+1", "")


def test_an_opendocument_book_keeps_its_values_and_formats(tmp_path: Path) -> None:
    source = Path(__file__).parent.parent / "broken" / "opendocument.ods"
    write_checked(source, read_book(source).problems, tmp_path / "out.xlsx", read_cells(source))
    sheet = opened(tmp_path / "out.xlsx")["Loans"]
    assert (sheet["C2"].value, sheet["C2"].number_format) == (0.0625, "0.00%")
    assert (sheet["D2"].is_date, sheet["B2"].value, sheet["E2"].value) == (True, "#DIV/0!", "=6+6")
    assert sheet["E2"].data_type == "s"
    assert sheet["B2"].fill.fgColor.rgb == RED


def test_a_workbook_that_cannot_be_loaded_is_rebuilt(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    source = workbook(tmp_path / "book.xlsx", Loans=(HEADERS, A_1))
    monkeypatch.setattr("tenorbook.write.checked._LOADABLE_BYTES", 10)
    write_checked(source, (), tmp_path / "out.xlsx", read_cells(source))
    assert opened(tmp_path / "out.xlsx")["Loans"]["B2"].value == 250000


def test_nothing_is_left_behind_when_saving_fails(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    source = workbook(tmp_path / "book.xlsx", Loans=(HEADERS, A_1))
    (tmp_path / "out.xlsx").write_text("older")

    def fail(*_: object) -> None:
        raise OSError("no room")

    monkeypatch.setattr("os.replace", fail)
    with pytest.raises(OSError, match="no room"):
        write_checked(source, (), tmp_path / "out.xlsx")
    assert sorted(path.name for path in tmp_path.iterdir()) == ["book.xlsx", "out.xlsx"]
    assert (tmp_path / "out.xlsx").read_text() == "older"


def test_a_copy_of_a_csv_needs_its_cells(tmp_path: Path) -> None:
    with pytest.raises(ValueError, match="needs its plain cells"):
        write_checked(tmp_path / "book.csv", (), tmp_path / "out.xlsx")
