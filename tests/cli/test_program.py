"""The program as installed: help, version, cost of starting, and that a shell gets its exit codes."""

import os
import subprocess
import sys
from pathlib import Path

import pytest

from cli.conftest import ROOT, Run
from tenorbook import __version__
from tenorbook.cli.console import coloured

VERBS = ("blank", "check", "schedule")


def shell(*arguments: str | Path, **environment: str) -> subprocess.CompletedProcess[str]:
    command = [sys.executable, "-c", "from tenorbook.cli.main import main; main()", *map(str, arguments)]
    return subprocess.run(
        command, capture_output=True, text=True, timeout=120, env={**os.environ, **environment}, check=False
    )


@pytest.mark.parametrize("arguments", [("--help",), *((verb, "--help") for verb in VERBS)])
def test_help_fits_a_terminal(run: Run, arguments: tuple[str, ...]) -> None:
    result = run(*arguments)
    assert result.exit_code == 0
    assert all(len(line) <= 80 for line in result.stdout.splitlines())
    assert all(each in result.stdout for each in ("Usage:", "--help"))


def test_only_the_verbs_that_exist_are_listed(run: Run) -> None:
    listed = run("--help").stdout.partition("Commands:\n")[2]
    assert tuple(line.split()[0] for line in listed.splitlines()) == VERBS


def test_version(run: Run) -> None:
    assert run("--version").stdout == f"tenorbook {__version__}\n"


@pytest.mark.parametrize(
    "arguments",
    [("nothing",), ("schedule",), ("schedule", "x.xlsx", "--as-of", "01/31/2026"), ("check", "--what")],
)
def test_a_wrong_call(run: Run, arguments: tuple[str, ...]) -> None:
    result = run(*arguments)
    assert result.exit_code == 2
    assert "Error: " in result.stderr


def test_a_date_is_written_one_way(run: Run) -> None:
    result = run("schedule", "x.xlsx", "--as-of", "01/31/2026")
    assert "'01/31/2026' is not a date; write it as 2026-01-31" in result.stderr


def test_help_imports_nothing_heavy() -> None:
    code = (
        "import sys\nfrom tenorbook.cli.main import main\n"
        "try:\n    main(['--help'])\nexcept SystemExit:\n    pass\n"
        "print(sorted({'pandas', 'openpyxl', 'rich', 'xlsxwriter', 'lxml', 'numpy'} & set(sys.modules)))"
    )
    done = subprocess.run(
        [sys.executable, "-c", code], capture_output=True, text=True, timeout=60, check=True
    )
    assert done.stdout.splitlines()[-1] == "[]"


def test_exit_codes_reach_the_shell(book: Path) -> None:
    assert shell("check", book).returncode == 0
    assert shell("check", ROOT / "samples" / "messy-book.xlsx").returncode == 1
    assert shell("check", book.with_name("none.xlsx")).returncode == 2
    done = shell("schedule", book, "--as-of", "2026-06-30")
    assert (done.returncode, done.stderr) == (0, "")
    assert all(len(line) <= 80 for line in done.stdout.splitlines() if "/" not in line)
    assert "\x1b" not in done.stdout


def test_a_console_of_few_letters(tmp_path: Path) -> None:
    book = tmp_path / "b.csv"
    book.write_text("Loan ID,Principal,Annual rate,Funding date,Term\nŁ-1,-5,6%,2026-01-15,12\n", "utf-8")
    done = shell("check", book, PYTHONIOENCODING="latin-1", PYTHONUTF8="0")
    assert done.returncode == 1
    assert "loan \\u0141-1" in done.stderr


def test_no_colour_when_asked(monkeypatch: pytest.MonkeyPatch) -> None:
    class Terminal:
        def isatty(self) -> bool:
            return True

    monkeypatch.delenv("NO_COLOR", raising=False)
    assert coloured(Terminal())  # type: ignore[arg-type]  # all of a terminal that is asked
    monkeypatch.setenv("NO_COLOR", "1")
    assert not coloured(Terminal())  # type: ignore[arg-type]  # all of a terminal that is asked
