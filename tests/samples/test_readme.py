"""The README tells the truth: its commands run, its tables are those of the program."""

import re
import shlex
from pathlib import Path

import pytest
from click.testing import CliRunner

from samples.make import ROOT
from tenorbook.basis.conventions import DayCount
from tenorbook.cli.main import main
from tenorbook.jobs.blank_book.columns import Column, plans, settings

README = (ROOT / "README.md").read_text("utf-8")


def blocks(language: str) -> list[str]:
    return re.findall(rf"```{language}\n(.*?)```", README, re.DOTALL)


def row(column: Column) -> str:
    """A column's line: its words are listed where the sentence does not say them all."""
    words = [word for word in column.words if column.choice != "Day count"]
    said = all(word in column.takes for word in words)
    listed = "" if said else " " + ", ".join(f"`{word}`" for word in words)
    return f"| {column.header} | {column.takes}{listed} | {column.blank} |"


def test_it_opens_with_the_job_and_two_commands() -> None:
    setup, tests, *_ = blocks("sh")
    assert README.startswith("# tenorbook\n\nYou keep a book of loans")
    assert setup.count("\n") == tests.count("\n") == 1
    assert setup.rstrip().endswith("tenorbook schedule samples/harbour-book.xlsx")
    assert "pytest" in tests
    assert all(block.startswith("python3 -m venv .venv && ") for block in (setup, tests))


@pytest.mark.parametrize("line", blocks("sh")[2].splitlines())
def test_each_example_runs(line: str, tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    for folder in ("samples", "templates"):
        (tmp_path / folder).symlink_to(ROOT / folder)
    monkeypatch.chdir(tmp_path)
    program, *arguments = shlex.split(line)
    assert program == "tenorbook"
    assert CliRunner().invoke(main, arguments).exit_code == 0


def test_the_python_example_runs(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.chdir(ROOT)
    (code,) = blocks("python")
    exec(compile(code, "README.md", "exec"), {})


@pytest.mark.parametrize("column", [*(c for plan in plans() for c in plan.columns), *settings()])
def test_each_column_is_in_its_table(column: Column) -> None:
    assert row(column) in README


def test_each_day_count_is_in_its_table() -> None:
    for day_count in DayCount:
        assert f"| {day_count.value} | {day_count.doc.numerator} | {day_count.doc.denominator} |" in README


def test_each_exit_code_is_told() -> None:
    help_text = CliRunner().invoke(main, ["--help"]).stdout
    for code in range(4):
        assert f"| {code} | " in README
        assert re.search(rf"^ .*\b{code}  \w", help_text, re.MULTILINE)
