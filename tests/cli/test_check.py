"""The verb `check`: everything wrong in one pass, nothing written."""

import json
from pathlib import Path

import pytest

from cli.conftest import Run

FAULTY = "A-3,0,6%,2026-01-15,12\nA-4,100,6%,2026-01-15,700\nA-5,1000,45%,2026-01-15,12\n"


def test_a_sound_book(run: Run, book: Path) -> None:
    result = run("check", book)
    assert (result.exit_code, result.stderr) == (0, "")
    assert (
        result.stdout
        == "loans.csv\n  Computed    2 loans\n  Messages    none\n  Next        nothing to correct\n"
    )
    assert [path.name for path in book.parent.iterdir()] == ["loans.csv"]


def test_every_problem_is_said_once(run: Run, book: Path) -> None:
    """The reader and the terms both look at rates and lengths; one message a cell is enough."""
    book.write_text(book.read_text() + FAULTY)
    data = json.loads(run("check", book, "--json").stdout)
    assert [(each["severity"], each["loan_id"]) for each in data["problems"]] == [
        ("error", "A-3"),
        ("warning", "A-5"),
    ]
    assert data["exit_code"] == 1


def test_a_loan_set_aside_shows_what_else_is_wrong(run: Run, tmp_path: Path) -> None:
    """A day count that cannot be read must not hide that the balloon is more than the principal."""
    book = tmp_path / "two.csv"
    book.write_text(
        "Loan ID,Principal,Annual rate,Funding date,Term,Day count,Balloon\n"
        "A-1,1000,6%,2026-01-15,12,moon phases,2000\n"
    )
    data = json.loads(run("check", book, "--json").stdout)
    assert [each["cell"] for each in data["problems"]] == ["F2", "G2"]


def test_no_false_alarm_while_a_date_cannot_be_read(run: Run, tmp_path: Path) -> None:
    """A maturity cannot be judged by a first payment that nobody can read."""
    book = tmp_path / "two.csv"
    book.write_text(
        "Loan ID,Principal,Annual rate,Funding date,First payment,Maturity\n"
        "A-1,1000,6%,2026-01-15,2026-02-31,2027-02-20\n"
    )
    data = json.loads(run("check", book, "--json").stdout)
    assert [each["cell"] for each in data["problems"]] == ["E2"]


def test_a_folder_is_no_book(run: Run, tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.chdir(tmp_path)
    for verb in ("check", "schedule"):
        result = run(verb, ".")
        assert result.exit_code == 2
        assert result.stderr.endswith(" is a folder; name the workbook itself\n")


def test_files_that_are_no_book(run: Run, tmp_path: Path) -> None:
    missing = run("check", tmp_path / "none.xlsx")
    assert missing.exit_code == 2
    assert missing.stderr == "error: none.xlsx was not found; look at the name and the folder\n"
    (tmp_path / "broken.xlsx").write_bytes(b"PK\x03\x04 nothing")
    broken = run("check", tmp_path / "broken.xlsx")
    assert (broken.exit_code, broken.stdout) == (2, "")
    assert broken.stderr.count("\n") == 1
