"""A runner of the command line at a fixed moment, and the books it runs on."""

from collections.abc import Callable
from datetime import datetime
from pathlib import Path

import pytest
from click.testing import CliRunner, Result

from tenorbook.cli import clock
from tenorbook.cli.main import main

NOW = datetime(2026, 7, 1, 9, 30)
ROOT = Path(__file__).parent.parent.parent

Run = Callable[..., Result]


@pytest.fixture
def run(monkeypatch: pytest.MonkeyPatch) -> Run:
    """Calls the command line as a shell would; whatever went wrong must end in an exit code."""
    monkeypatch.setattr(clock, "now", lambda: NOW)
    monkeypatch.delenv("TENORBOOK_DEBUG", raising=False)

    def call(*arguments: str | Path) -> Result:
        result = CliRunner().invoke(main, [str(each) for each in arguments])
        assert result.exception is None or isinstance(result.exception, SystemExit)
        assert "Traceback" not in result.output
        return result

    return call


@pytest.fixture
def book(tmp_path: Path) -> Path:
    """A small book in a folder of its own, without an as-of date."""
    path = tmp_path / "loans.csv"
    path.write_text(
        "Loan ID,Principal,Annual rate,Funding date,Term\n"
        "A-1,12000,6%,2026-01-15,12\nA-2,9000,5%,2026-02-01,6\n"
    )
    return path
