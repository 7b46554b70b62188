"""The samples and a book of random loans: recalculated, no figure changes; other readers read them."""

from collections.abc import Iterator
from dataclasses import replace
from datetime import datetime
from pathlib import Path
from typing import Any

import pytest
from hypothesis import HealthCheck, Phase, given, settings

from reports.samples import book_of, result_of
from samples import make
from spreadsheet.harness import differences, needs_soffice, recalculate, stored
from strategies import loans
from tenorbook.jobs.outputs import write_schedules
from tenorbook.jobs.schedule import Options, schedule_book
from tenorbook.terms.loan import Loan

NOW = datetime(2026, 11, 30)
COUNT = 60


def random_loans() -> Iterator[Loan]:
    """Sixty loans that can be computed, the same ones on every run."""
    found: list[Loan] = []

    @settings(
        max_examples=4 * COUNT,
        derandomize=True,
        database=None,
        deadline=None,
        phases=[Phase.generate],
        suppress_health_check=list(HealthCheck),
    )
    @given(loans())
    def draw(loan: Loan) -> None:
        if len(found) < COUNT and result_of(loan).schedule is not None:
            found.append(loan)

    draw()
    assert len(found) == COUNT
    for number, loan in enumerate(found):
        yield replace(loan, loan_id=f"R{number:02d}")


def written(name: str, folder: Path) -> Path:
    """The workbook of a book."""
    if name == "random":
        (path,) = write_schedules(book_of(list(random_loans())), folder, name, now=NOW).paths
        return path
    done = schedule_book(make.ROOT / "samples" / f"{name}.xlsx", Options(out=folder), NOW)
    return done.files[0]


@pytest.fixture(scope="module", params=["harbour-book", "messy-book", "random"])
def workbook(request: pytest.FixtureRequest, tmp_path_factory: pytest.TempPathFactory) -> Path:
    return written(request.param, tmp_path_factory.mktemp("book"))


@pytest.mark.spreadsheet
@needs_soffice
def test_recalculated_no_figure_changes(workbook: Path) -> None:
    after = recalculate(workbook, workbook.parent)
    assert list(differences(stored(workbook), after, digits=3)) == []
    cells = [cell for sheet in after for row in sheet.iter_rows() for cell in row]
    assert [cell.coordinate for cell in cells if cell.data_type == "e"] == []
    verdicts = [cell.value for cell in cells if cell.value in ("PASS", "FAIL")]
    assert verdicts.count("FAIL") == 0
    assert len(verdicts) > 4 * len(after.sheetnames)


def test_another_reader_reads_every_sheet(workbook: Path) -> None:
    calamine: Any = pytest.importorskip("python_calamine")
    names = stored(workbook).sheetnames
    book = calamine.CalamineWorkbook.from_path(str(workbook))
    assert book.sheet_names == names
    for name in names:
        rows = book.get_sheet_by_name(name).to_python()
        sheet = stored(workbook)[name] if name == "Summary" else None
        assert len(rows) > 3
        assert sheet is None or rows[0][0] == sheet["A1"].value
