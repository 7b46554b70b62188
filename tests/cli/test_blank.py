"""The verb `blank`, and the empty book itself."""

import json
from pathlib import Path

import openpyxl
from openpyxl.utils import get_column_letter

from cli.conftest import ROOT, Run
from samples.make import parts
from tenorbook.jobs.blank_book.columns import plans, settings
from tenorbook.read import columns, read_book
from tenorbook.read.settings import _FIRST, _OTHERS


def test_it_passes_check(run: Run, tmp_path: Path) -> None:
    path = tmp_path / "new" / "mine.xlsx"
    result = run("blank", path)
    assert result.exit_code == 0
    assert "tenorbook schedule mine.xlsx" in " ".join(result.stdout.split())
    checked = json.loads(run("check", path, "--json").stdout)
    assert (checked["exit_code"], checked["computed"], checked["problems"]) == (0, 1, [])
    assert [each.name for each in path.parent.iterdir()] == ["mine.xlsx"]


def test_json(run: Run, tmp_path: Path) -> None:
    path = tmp_path / "mine.xlsx"
    assert json.loads(run("blank", path, "--json").stdout) == {
        "verb": "blank", "files": [str(path)], "exit_code": 0
    }  # fmt: skip


def test_a_file_that_is_there_is_left_alone(run: Run, tmp_path: Path) -> None:
    path = tmp_path / "mine.xlsx"
    path.write_bytes(b"mine")
    result = run("blank", path)
    assert result.exit_code == 2
    assert result.stderr == f"error: {path} exists already and is left as it is; name a new file\n"
    assert path.read_bytes() == b"mine"


def test_other_endings_and_places_are_refused(run: Run, tmp_path: Path) -> None:
    assert run("blank", tmp_path / "mine.csv").exit_code == 2
    (tmp_path / "file").write_text("")
    result = run("blank", tmp_path / "file" / "mine.xlsx")
    assert result.exit_code == 2
    assert "cannot be written: " in result.stderr


def test_the_template_is_what_the_command_writes(run: Run, tmp_path: Path) -> None:
    run("blank", tmp_path / "mine.xlsx")
    assert parts(tmp_path / "mine.xlsx") == parts(ROOT / "templates" / "blank-book.xlsx")


def test_its_columns_are_those_of_the_reader() -> None:
    tables = {plan.name: {column.header for column in plan.columns} for plan in plans()}
    assert tables == {
        "Loans": {columns.LOAN_ID, columns.RATE, *columns.LOANS},
        "Extra payments": {columns.LOAN_ID, *columns.EXTRA_PAYMENTS},
        "Rate changes": {columns.LOAN_ID, columns.RATE, *columns.RATE_CHANGES},
    }
    assert {column.header for column in settings()} == {*_FIRST, *_OTHERS} - {"Tolerance"}


def test_every_header_has_its_note_and_every_choice_its_list() -> None:
    book = openpyxl.load_workbook(ROOT / "templates" / "blank-book.xlsx")
    for plan in plans():
        sheet = book[plan.name]
        headers = {cell.value: cell for cell in sheet[4]}
        lists = {
            str(each.sqref).split(":")[0]: each.formula1 for each in sheet.data_validations.dataValidation
        }
        for number, column in enumerate(plan.columns, 1):
            cell = headers[column.header]
            assert cell.comment is not None
            assert column.takes in cell.comment.text
            listed = lists[f"{get_column_letter(number)}5"]
            assert listed == ('"' + ",".join(column.words) + '"' if column.words else None)
        assert sheet.freeze_panes == "B5"


def test_every_word_on_a_list_is_read_without_a_remark(tmp_path: Path) -> None:
    """Each word of each list, put into the sample row of its sheet in turn."""
    for plan in plans():
        for number, column in enumerate(plan.columns, 1):
            for word in column.words:
                book = openpyxl.load_workbook(ROOT / "templates" / "blank-book.xlsx")
                book[plan.name].cell(5, number).value = word
                book.save(tmp_path / "one.xlsx")
                problems = read_book(tmp_path / "one.xlsx").problems
                assert not problems, (column.header, word)
