"""The result files of a book: reports to tables, tables to files, whole or not at all."""

from collections.abc import Callable, Sequence
from datetime import datetime, time
from functools import partial
from pathlib import Path

from tenorbook.basis.problem import NOWHERE, Problem, warning
from tenorbook.reports.exceptions import NAME as EXCEPTIONS
from tenorbook.reports.exceptions import exceptions_sheet
from tenorbook.reports.flat import streams
from tenorbook.reports.loan_sheet import loan_sheet
from tenorbook.reports.maturities import NAME as MATURITIES
from tenorbook.reports.maturities import maturities_sheet
from tenorbook.reports.result import BookResult, LoanResult
from tenorbook.reports.summary import NAME as SUMMARY
from tenorbook.reports.summary import summary_sheet
from tenorbook.tables.names import SheetNames
from tenorbook.write.csv_file import write_csv
from tenorbook.write.parquet_file import parquet_available, write_parquet
from tenorbook.write.whole import WholeFiles, Written
from tenorbook.write.workbook import Workbook

MOST_LOANS = 250
"""Loans in one workbook; a larger book comes in volumes."""

Progress = Callable[[int], None]
"""Told the number of loans written so far."""


def write_schedules(
    result: BookResult,
    folder: Path,
    stem: str,
    *,
    values_only: bool = False,
    csv: bool = False,
    parquet: bool = False,
    now: datetime,
    progress: Progress | None = None,
) -> Written:
    """Writes the schedules of a book: the workbook or its volumes, and the flat files asked for.

    Args:
        result: of the book.
        folder: where the files appear; made if need be.
        stem: the book's name without ending; all files begin with it.
        values_only: figures instead of formulas.
        csv: CSV files too.
        parquet: Parquet files too; a warning where that is not installed.
        now: for dated names of files that had to be kept.
        progress: told the number of loans written so far.

    Returns:
        The files and what there is to say about them.
    """
    with WholeFiles(folder, now) as files:
        notes: list[Problem] = []
        _add_workbooks(files, result, stem, values_only, progress or _silent)
        if csv:
            for stream in streams(result):
                files.add(f"{stem}.{stream.name}.csv", partial(write_csv, stream=stream))
        if parquet and parquet_available():
            for stream in streams(result):
                files.add(f"{stem}.{stream.name}.parquet", partial(write_parquet, stream=stream))
        elif parquet:
            notes.append(_no_parquet())
        written = files.commit()
    return Written(written.paths, (*notes, *written.problems))


def _silent(count: int) -> None:
    """Progress that nobody watches."""


def _no_parquet() -> Problem:
    text = "Parquet files were not written: pyarrow is not installed"
    return warning("", NOWHERE, text, "install tenorbook with its optional part parquet")


def _add_workbooks(
    files: WholeFiles, result: BookResult, stem: str, values_only: bool, progress: Progress
) -> None:
    """One workbook, or volumes and a summary of the whole book."""
    loans = list(result.results)
    if len(loans) <= MOST_LOANS:
        volume = _Volume(result, loans, f"{stem}.schedules.xlsx", values_only)
        files.add(volume.file, lambda path: volume.write(path, result.problems, progress, 0))
        return
    links: dict[str, str] = {}
    for number, start in enumerate(range(0, len(loans), MOST_LOANS), 1):
        part = loans[start : start + MOST_LOANS]
        volume = _Volume(result, part, f"{stem}.schedules-{number:02d}.xlsx", values_only)
        _add_volume(files, volume, progress, start)
        links |= {loan_id: f"{volume.file}#{sheet}" for loan_id, sheet in volume.sheets.items()}
    files.add(f"{stem}.summary.xlsx", lambda path: _write_summary(path, result, links, values_only))


def _add_volume(files: WholeFiles, volume: "_Volume", progress: Progress, before: int) -> None:
    own = {each.loan.loan_id for each in volume.loans}
    problems = tuple(problem for problem in volume.result.problems if problem.loan_id in own)
    files.add(volume.file, lambda path: volume.write(path, problems, progress, before))


class _Volume:
    """One workbook of loans.

    Args:
        result: of the book.
        loans: those of this workbook.
        file: its name.
        values_only: figures instead of formulas.
    """

    def __init__(self, result: BookResult, loans: Sequence[LoanResult], file: str, values_only: bool) -> None:
        self.result, self.loans, self.file, self._values_only = result, loans, file, values_only
        names = SheetNames()
        self._front = [names.take(name) for name in (SUMMARY, EXCEPTIONS, MATURITIES)]
        self._shown = [each for each in loans if each.schedule is not None]
        taken = [names.take(each.loan.loan_id) for each in self._shown]
        self.sheets = {each.loan.loan_id: name for each, name in zip(self._shown, taken, strict=True)}

    def write(self, path: Path, problems: tuple[Problem, ...], progress: Progress, before: int) -> None:
        """Writes the workbook, a sheet at a time."""
        result = self.result
        with _workbook(path, result, [*self._front, *self.sheets.values()], self._values_only) as book:
            for number, each in enumerate(self._shown, 1):
                name = self.sheets[each.loan.loan_id]
                book.fill(loan_sheet(each, name, SUMMARY, result.book.name))
                progress(before + number)
            book.fill(summary_sheet(result, self.loans, self.sheets, live=True))
            book.fill(exceptions_sheet(result, problems, SUMMARY))
            book.fill(maturities_sheet(result, self.loans, SUMMARY))


def _workbook(path: Path, result: BookResult, sheets: list[str], values_only: bool) -> Workbook:
    """A workbook dated as of the book's date, so that the same input gives the same bytes."""
    created = datetime.combine(result.as_of, time())
    title = f"Loan schedules of {result.book.name}"
    return Workbook(path, sheets, title=title, created=created, values_only=values_only)


def _write_summary(path: Path, result: BookResult, links: dict[str, str], values_only: bool) -> None:
    """The whole book without its loans' sheets."""
    with _workbook(path, result, [SUMMARY, EXCEPTIONS, MATURITIES], values_only) as book:
        book.fill(summary_sheet(result, result.results, links, live=False))
        book.fill(exceptions_sheet(result, result.problems, SUMMARY))
        book.fill(maturities_sheet(result, result.results, SUMMARY))
