"""The main job: a book of loans in, dated schedules out."""

from dataclasses import dataclass, replace
from datetime import date, datetime
from pathlib import Path

from tenorbook.basis.problem import NOWHERE, Problem, note
from tenorbook.jobs.checked_copy import write_checked_copy
from tenorbook.jobs.compute import Computed, Progress, compute, silent
from tenorbook.jobs.folder import in_words, no_output, output_folder
from tenorbook.jobs.outputs import write_schedules
from tenorbook.read import read_book
from tenorbook.reports.result import BookResult
from tenorbook.terms.book import Book
from tenorbook.write.design import Design, read_design


@dataclass(frozen=True, slots=True, kw_only=True)
class Options:
    """What the job is asked for.

    Attributes:
        out: folder of the results; `None`: beside the book.
        as_of: date of the summary's figures; `None`: the book's, else the day of the run.
        loan_ids: only these loans; all when empty.
        csv: CSV files too.
        parquet: Parquet files too.
        values_only: figures instead of live formulas.
        look: a file that describes the look of the workbooks; `None`: the usual one.
        paper: `A4` or `Letter`; `None`: as the look says.
        processes: at most so many write the volumes of a large book at once. More than one needs a main
            module that can be imported again, as the command line's can.
    """

    out: Path | None = None
    as_of: date | None = None
    loan_ids: tuple[str, ...] = ()
    csv: bool = False
    parquet: bool = False
    values_only: bool = False
    look: Path | None = None
    paper: str | None = None
    processes: int = 1


@dataclass(frozen=True, slots=True, kw_only=True)
class Done:
    """What came of a job.

    Attributes:
        result: of every loan.
        failed: IDs of loans on which the program itself failed.
        folder: of the files.
        files: written, in the order of their making.
        checked: the copy of the book with the marked cells, if there was anything to mark.
        remarks: on the files: kept, renamed or left out.
    """

    result: BookResult
    failed: tuple[str, ...] = ()
    folder: Path | None = None
    files: tuple[Path, ...] = ()
    checked: Path | None = None
    remarks: tuple[Problem, ...] = ()


def schedule_book(path: Path, options: Options, now: datetime, progress: Progress = silent) -> Done:
    """Reads a book, computes every loan and writes the results.

    Args:
        path: of the book.
        options: what is asked for.
        now: the moment of the run; the clock is read by the caller.
        progress: told what is being done.

    Raises:
        BookError: the book, a Loan ID, the look or the output folder cannot be used; nothing was written.
    """
    design = _design(options)
    folder = output_folder(path, options.out)
    book = read_book(path)
    as_of, remark = settle_as_of(book, options.as_of, now)
    computed = compute(_with_remark(book, remark), as_of, options.loan_ids, progress)
    return _written(path, folder, computed, options, design, now, progress)


def _design(options: Options) -> Design:
    """The look asked for."""
    design = read_design(options.look) if options.look else Design()
    return replace(design, paper=options.paper) if options.paper else design


def settle_as_of(book: Book, asked: date | None, now: datetime) -> tuple[date, Problem | None]:
    """The date of the figures, and the note that belongs to it.

    The option first, then the sheet Settings, then the day of the run.
    """
    stated = book.settings.as_of
    if asked is not None:
        text = f"the figures stand as of {asked}, as asked; Settings says {stated}"
        return asked, note("", NOWHERE, text) if stated not in (None, asked) else None
    if stated is not None:
        return stated, None
    text = f"no as-of date is given; the figures stand as of {now.date()}, the day of the run"
    return now.date(), note("", NOWHERE, text, "enter As-of date on the sheet Settings, or give --as-of")


def _with_remark(book: Book, remark: Problem | None) -> Book:
    return replace(book, problems=(remark, *book.problems)) if remark else book


def _written(
    path: Path,
    folder: Path,
    computed: Computed,
    options: Options,
    design: Design,
    now: datetime,
    progress: Progress,
) -> Done:
    """The results as files: the schedules, and the copy of the book with the marked cells."""
    result = computed.result
    total = sum(each.schedule is not None for each in result.results)
    try:
        written = write_schedules(
            result,
            folder,
            path.stem,
            values_only=options.values_only,
            csv=options.csv,
            parquet=options.parquet,
            design=design,
            processes=options.processes,
            now=now,
            progress=lambda count: progress("writing", count, total),
        )
        checked = write_checked_copy(path, result.problems, folder, now)
    except OSError as fault:
        raise no_output(folder, in_words(fault)) from fault
    return Done(
        result=result,
        failed=computed.failed,
        folder=folder,
        files=(*written.paths, *checked.paths),
        checked=checked.paths[0] if checked.paths else None,
        remarks=(*written.problems, *checked.problems),
    )
