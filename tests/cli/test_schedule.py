"""The verb `schedule`: files, messages, exit codes."""

import csv
import json
from collections.abc import Callable
from pathlib import Path

import pytest

from cli.conftest import NOW, Run
from tenorbook.basis.problem import NOWHERE, InvariantError, error
from tenorbook.cli.main import main
from tenorbook.schedule.build import build
from tenorbook.schedule.ledger import Schedule
from tenorbook.terms.terms import Terms

FAULTY = "A-3,0,6%,2026-01-15,12\n"


def names(folder: Path) -> set[str]:
    return {path.name for path in folder.iterdir() if not path.name.startswith(".")}


def test_results_go_beside_the_book(run: Run, book: Path) -> None:
    result = run("schedule", book)
    assert result.exit_code == 0
    assert names(book.parent / "loans-results") == {"loans.schedules.xlsx"}
    assert "loans.csv, as of 1 Jul 2026" in result.stdout
    assert "Computed    2 loans" in result.stdout
    assert "Owed by us  USD" in result.stdout


def test_a_folder_that_is_missing_is_made(run: Run, book: Path, tmp_path: Path) -> None:
    out = tmp_path / "deep" / "er"
    assert run("schedule", book, "--out", out, "--csv", "--parquet").exit_code == 0
    flat = {
        f"loans.{name}.{form}"
        for name in ("schedules", "summary", "exceptions")
        for form in ("csv", "parquet")
    }
    assert names(out) == {"loans.schedules.xlsx", *flat}


def test_a_loan_set_aside_does_not_hide_the_others(run: Run, book: Path) -> None:
    book.write_text(book.read_text() + FAULTY)
    result = run("schedule", book, "--csv")
    assert result.exit_code == 1
    assert result.stderr.startswith("error: ")
    assert "loan A-3: " in result.stderr
    assert "Set aside   1: A-3" in result.stdout
    folder = book.parent / "loans-results"
    assert "loans.checked.xlsx" in names(folder)
    with (folder / "loans.schedules.csv").open() as file:
        assert {row["loan_id"] for row in csv.DictReader(file)} == {"A-1", "A-2"}


def test_the_date_of_the_figures(run: Run, book: Path) -> None:
    run_date = json.loads(run("schedule", book, "--json").stdout)
    assert run_date["as_of"] == NOW.date().isoformat()
    assert [each["problem"] for each in run_date["problems"]] == [
        "no as-of date is given; the figures stand as of 2026-07-01, the day of the run"
    ]
    given = json.loads(run("schedule", book, "--as-of", "2026-03-31", "--json").stdout)
    assert (given["as_of"], given["problems"]) == ("2026-03-31", [])


def test_json_is_the_end_table(run: Run, book: Path) -> None:
    book.write_text(book.read_text() + FAULTY)
    result = run("schedule", book, "--as-of", "2026-01-15", "--json")
    data = json.loads(result.stdout)
    assert data["exit_code"] == result.exit_code == 1
    assert list(data) == [
        "verb", "book", "as_of", "loans", "computed", "set_aside", "messages", "owed", "folder", "files",
        "problems", "exit_code",
    ]  # fmt: skip
    assert (data["loans"], data["computed"], data["set_aside"]) == (3, 2, ["A-3"])
    assert data["owed"] == [{"side": "payable", "currency": "USD", "balance": "12000.00"}]
    assert data["files"] == ["loans.schedules.xlsx", "loans.checked.xlsx"]
    assert set(data["problems"][0]) == {
        "severity", "loan_id", "sheet", "cell", "value", "problem", "remedy"
    }  # fmt: skip


def test_chosen_loans_only(run: Run, book: Path) -> None:
    data = json.loads(run("schedule", book, "--loan", "A-2", "--json").stdout)
    assert (data["loans"], data["computed"]) == (1, 1)


def test_a_loan_that_is_not_there(run: Run, book: Path) -> None:
    result = run("schedule", book, "--loan", "B-9", "--loan", "A-1")
    assert result.exit_code == 2
    assert result.stderr == "error: loans.csv has no loan B-9; its loans are A-1, A-2\n"
    assert names(book.parent) == {"loans.csv"}


def test_output_that_is_a_file(run: Run, book: Path) -> None:
    result = run("schedule", book, "--out", book)
    assert result.exit_code == 2
    assert result.stderr == (
        f"error: the results cannot be written to {book}: {book} is a file, not a folder; "
        "name another place with --out\n"
    )


def test_output_that_the_system_refuses(run: Run, book: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    def refuse(*_: object, **__: object) -> None:
        raise PermissionError(13, "Permission denied")

    monkeypatch.setattr(Path, "mkdir", refuse)
    result = run("schedule", book)
    assert result.exit_code == 2
    assert "permission denied; name another place with --out" in result.stderr
    assert result.stderr.count("\n") == 1
    assert names(book.parent) == {"loans.csv"}


def test_a_result_that_someone_edited_is_kept(run: Run, book: Path) -> None:
    run("schedule", book)
    folder = book.parent / "loans-results"
    (folder / "loans.schedules.xlsx").write_bytes(b"edited")
    result = run("schedule", book)
    assert result.exit_code == 0
    assert "is kept as loans.schedules (kept 2026-07-01 09.30.00).xlsx" in result.stderr
    assert len(names(folder)) == 2


def test_a_checked_copy_that_outlived_its_marks(run: Run, book: Path) -> None:
    sound = book.read_text()
    book.write_text(sound + FAULTY)
    run("schedule", book)
    book.write_text(sound)
    result = run("schedule", book)
    assert result.exit_code == 0
    assert result.stderr == (
        "note: loans.checked.xlsx is from an earlier run: nothing in the book is marked any more; delete it\n"
    )


def test_a_checked_copy_that_cannot_be_made(run: Run, book: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """It costs a warning, never the results."""

    def fail(*_: object) -> None:
        raise KeyError("style")

    monkeypatch.setattr("tenorbook.jobs.checked_copy.write_checked", fail)
    book.write_text(book.read_text() + FAULTY)
    result = run("schedule", book)
    assert result.exit_code == 1
    assert "warning: the copy with the marked cells was not written (KeyError: 'style')" in result.stderr
    assert names(book.parent / "loans-results") == {"loans.schedules.xlsx"}


def test_the_same_run_gives_the_same_bytes(run: Run, book: Path) -> None:
    written = []
    for name in ("one", "two"):
        out = book.parent / name
        run("schedule", book, "--as-of", "2026-06-30", "--out", out)
        written.append((out / "loans.schedules.xlsx").read_bytes())
    assert written[0] == written[1]


def breaks(terms: Terms) -> Schedule:
    raise InvariantError(
        error(terms.loan_id, NOWHERE, "the schedule breaks its own laws", "please report it")
    )


def fails(_: Terms) -> Schedule:
    raise ZeroDivisionError("division by zero")


@pytest.mark.parametrize(
    ("fault", "said"),
    [(breaks, "the schedule breaks its own laws"), (fails, "ZeroDivisionError: division by zero")],
)
def test_a_fault_on_one_loan(
    run: Run, book: Path, monkeypatch: pytest.MonkeyPatch, fault: Callable[[Terms], Schedule], said: str
) -> None:
    """The others are written, and the exit code says that the program failed."""

    def one_faulty(terms: Terms) -> Schedule:
        return fault(terms) if terms.loan_id == "A-1" else build(terms)

    monkeypatch.setattr("tenorbook.jobs.loan.build", one_faulty)
    result = run("schedule", book, "--json")
    data = json.loads(result.stdout)
    assert result.exit_code == 3
    assert said in result.stderr
    assert (data["computed"], data["set_aside"]) == (1, ["A-1"])
    assert "loans.schedules.xlsx" in data["files"]


def test_a_fault_of_everything(run: Run, book: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    def fail(*_: object) -> None:
        raise RuntimeError("no such luck")

    monkeypatch.setattr("tenorbook.jobs.schedule.compute", fail)
    result = run("schedule", book)
    assert result.exit_code == 3
    assert result.stderr == (
        "error: the program failed (RuntimeError: no such luck); "
        "please report this with the command you gave\n"
    )
    assert result.stdout == ""


def test_someone_stops_it(run: Run, book: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    def stop(*_: object) -> None:
        raise KeyboardInterrupt

    monkeypatch.setattr("tenorbook.jobs.schedule.compute", stop)
    result = run("schedule", book)
    assert (result.exit_code, result.stderr.strip()) == (130, "stopped; no result was left half written")


def test_whoever_looks_for_a_fault_sees_it(book: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    def fail(*_: object) -> None:
        raise RuntimeError("no such luck")

    monkeypatch.setattr("tenorbook.jobs.schedule.compute", fail)
    monkeypatch.setattr("logging.basicConfig", lambda **_: None)
    monkeypatch.setenv("TENORBOOK_DEBUG", "1")
    with pytest.raises(RuntimeError, match="no such luck"):
        main.main(["schedule", str(book)])


def test_many_messages_are_capped(run: Run, book: Path) -> None:
    faulty = "".join(f"B-{number},-1,6%,2026-01-15,12\n" for number in range(30))
    book.write_text(book.read_text() + faulty)
    result = run("schedule", book)
    lines = result.stderr.splitlines()
    assert len(lines) == 21
    assert lines[-1] == "... and 10 more on the sheet Exceptions"


def test_what_a_cell_says_cannot_steer_the_terminal(run: Run, book: Path) -> None:
    book.write_text(book.read_text() + "\x1b[2JX,-1,6%,2026-01-15,12\n")
    result = run("schedule", book)
    assert "\x1b" not in result.output
