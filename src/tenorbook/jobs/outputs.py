"""The result files of a book: reports to tables, tables to files, whole or not at all."""

from collections.abc import Iterator
from dataclasses import replace
from datetime import datetime
from functools import partial
from pathlib import Path

from tenorbook.basis.problem import NOWHERE, Problem, warning
from tenorbook.jobs.crew import write_volumes
from tenorbook.jobs.volume import Progress, Style, Volume, write_summary
from tenorbook.reports.flat import streams
from tenorbook.reports.result import BookResult
from tenorbook.reports.summary import NAME as SUMMARY
from tenorbook.write.csv_file import write_csv
from tenorbook.write.design import Design
from tenorbook.write.parquet_file import parquet_available, write_parquet
from tenorbook.write.whole import WholeFiles, Written

MOST_LOANS = 250
"""Loans in one workbook; a larger book comes in volumes."""


def write_schedules(
    result: BookResult,
    folder: Path,
    stem: str,
    *,
    values_only: bool = False,
    csv: bool = False,
    parquet: bool = False,
    design: Design | None = None,
    processes: int = 1,
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
        design: the look of the workbooks; `None`: the usual one.
        processes: at most so many write volumes at once; the files are the same whatever it is.
        now: for dated names of files that had to be kept.
        progress: told the number of loans written so far.

    Returns:
        The files and what there is to say about them.
    """
    style = Style(design=design or Design(), values_only=values_only)
    with WholeFiles(folder, now) as files:
        notes: list[Problem] = []
        _add_workbooks(files, result, stem, style, processes, progress or _silent)
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
    files: WholeFiles, result: BookResult, stem: str, style: Style, processes: int, progress: Progress
) -> None:
    """One workbook, or volumes and a summary of the whole book."""
    if len(result.results) <= MOST_LOANS:
        file = f"{stem}.schedules.xlsx"
        volume = Volume(file=file, result=result, problems=result.problems, back="", style=style)
        files.add(file, lambda path: volume.write(path, progress))
        return
    volumes = list(_volumes(result, stem, style))
    links = {loan_id: f"{v.file}#{sheet}" for v in volumes for loan_id, sheet in v.sheets().items()}
    index = [volume.entry() for volume in volumes]
    places = [(volume, files.reserve(volume.file)) for volume in volumes]
    summary = files.reserve(_summary_file(stem))
    write_volumes(places, processes, lambda: write_summary(summary, result, links, index, style), progress)


def _volumes(result: BookResult, stem: str, style: Style) -> Iterator[Volume]:
    """The volumes of a large book, each with its own loans and what is to be said about them."""
    for number, start in enumerate(range(0, len(result.results), MOST_LOANS), 1):
        loans = result.results[start : start + MOST_LOANS]
        own = {each.loan.loan_id for each in loans}
        yield Volume(
            file=f"{stem}.schedules-{number:02d}.xlsx",
            result=replace(result, results=loans),
            problems=tuple(problem for problem in result.problems if problem.loan_id in own),
            back=f"{_summary_file(stem)}#{SUMMARY}",
            style=style,
        )


def _summary_file(stem: str) -> str:
    return f"{stem}.summary.xlsx"
