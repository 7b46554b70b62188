"""Books over 250 loans: volumes with an index, written by one process or several, the same bytes."""

from datetime import datetime
from pathlib import Path
from typing import Any

import openpyxl
import pytest

from reports.samples import book_of, note
from tenorbook.jobs import crew
from tenorbook.jobs.outputs import write_schedules
from tenorbook.jobs.volume import Volume
from tenorbook.reports.result import BookResult

NOW = datetime(2026, 1, 2)

pytestmark = pytest.mark.filterwarnings("ignore:Sparkline Group extension")


@pytest.fixture(autouse=True)
def small_volumes(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr("tenorbook.jobs.outputs.MOST_LOANS", 3)


def book() -> BookResult:
    bad = note("bad", principal=None, annual_rate=None)
    return book_of([*(note(f"L{number}") for number in range(6)), bad])


def written(folder: Path, processes: int) -> dict[str, bytes]:
    write_schedules(book(), folder, "book", processes=processes, now=NOW)
    return {path.name: path.read_bytes() for path in folder.glob("*.xlsx")}


def test_the_index_leads_to_each_volume_and_each_volume_back(tmp_path: Path) -> None:
    written(tmp_path, 1)
    index: Any = openpyxl.load_workbook(tmp_path / "book.summary.xlsx")["Volumes"]
    rows = [row for row in index.iter_rows(min_row=5) if str(row[0].value).startswith("book.")]
    assert [[cell.value for cell in row[:5]] for row in rows] == [
        ["book.schedules-01.xlsx", "L0", "L2", 3, 0],
        ["book.schedules-02.xlsx", "L3", "L5", 3, 0],
        ["book.schedules-03.xlsx", "bad", "bad", 1, 1],
    ]
    assert [row[0].hyperlink.target for row in rows] == [row[0].value for row in rows]
    volume: Any = openpyxl.load_workbook(tmp_path / "book.schedules-02.xlsx")["Summary"]
    assert volume["A3"].value == "\u2190 book.summary.xlsx"
    assert volume["A3"].hyperlink.target == "book.summary.xlsx"


def test_the_bytes_are_the_same_whatever_the_number_of_processes(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    alone = written(tmp_path / "one", 1)
    monkeypatch.setattr(crew, "WORTH_IT", 1)
    assert written(tmp_path / "two", 2) == alone
    assert sorted(alone) == [*(f"book.schedules-0{n}.xlsx" for n in (1, 2, 3)), "book.summary.xlsx"]


def test_where_no_process_can_be_started_one_writes_all(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    def refused(*_: object, **__: object) -> None:
        raise PermissionError("no semaphores here")

    alone = written(tmp_path / "one", 1)
    monkeypatch.setattr(crew, "WORTH_IT", 1)
    monkeypatch.setattr(crew, "ProcessPoolExecutor", refused)
    assert written(tmp_path / "two", 2) == alone


def test_a_small_book_starts_no_process(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    started: list[object] = []
    monkeypatch.setattr(crew, "ProcessPoolExecutor", lambda *each, **_: started.append(each))
    written(tmp_path, 2)
    assert started == []


def test_a_fault_in_one_volume_leaves_nothing_behind(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    def full(*_: object) -> None:
        raise OSError("no space left")

    monkeypatch.setattr(Volume, "write", full)
    with pytest.raises(OSError, match="no space"):
        written(tmp_path, 1)
    assert [path.name for path in tmp_path.iterdir()] == []
