"""One workbook of loans: which sheets it has, and how they are written one after the other."""

from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace
from datetime import datetime, time
from pathlib import Path

from tenorbook.basis.problem import Problem
from tenorbook.reports.exceptions import NAME as EXCEPTIONS
from tenorbook.reports.exceptions import exceptions_sheet
from tenorbook.reports.loan_sheet import loan_sheet
from tenorbook.reports.maturities import NAME as MATURITIES
from tenorbook.reports.maturities import maturities_sheet
from tenorbook.reports.outlook import Outlook
from tenorbook.reports.result import BookResult
from tenorbook.reports.summary import NAME as SUMMARY
from tenorbook.reports.summary import summary_sheet
from tenorbook.reports.volumes import NAME as VOLUMES
from tenorbook.reports.volumes import VolumeEntry, volumes_sheet
from tenorbook.schedule.build import build
from tenorbook.tables.names import SheetNames
from tenorbook.write.design import Design
from tenorbook.write.workbook import Workbook

Progress = Callable[[int], None]
"""Told the number of loans written so far."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Style:
    """How workbooks are written.

    Attributes:
        design: the chosen look.
        values_only: figures instead of formulas.
    """

    design: Design
    values_only: bool


@dataclass(frozen=True, slots=True, kw_only=True)
class Volume:
    """One workbook of loans, ready to be written here or in another process.

    Attributes:
        file: its name.
        result: of the book; where there are several volumes, of this one's loans only.
        problems: what its sheet of exceptions says.
        back: file and sheet that its summary leads back to; empty: it is the whole book.
        style: how it is written.
    """

    file: str
    result: BookResult
    problems: tuple[Problem, ...]
    back: str
    style: Style

    def sheets(self) -> dict[str, str]:
        """Loan ID -> name of its sheet, for the loans that have a schedule."""
        names = SheetNames()
        for front in (SUMMARY, EXCEPTIONS, MATURITIES):
            names.take(front)
        loans = [each.loan.loan_id for each in self.result.results if each.schedule is not None]
        return {loan_id: names.take(loan_id) for loan_id in loans}

    def entry(self) -> VolumeEntry:
        """Its line in the index."""
        loans = [each.loan.loan_id for each in self.result.results]
        aside = sum(each.schedule is None for each in self.result.results)
        return VolumeEntry(self.file, loans[0], loans[-1], len(loans), aside)

    def write(self, path: Path, progress: Progress, before: int = 0) -> None:
        """Writes the workbook, a sheet at a time.

        Args:
            path: of the file.
            progress: told the number of loans written so far.
            before: loans written before these.
        """
        result, sheets = self.result, self.sheets()
        names = [SUMMARY, EXCEPTIONS, MATURITIES, *sheets.values()]
        shown = [each for each in result.results if each.schedule is not None]
        with open_workbook(path, result, names, self.style) as book:
            for number, each in enumerate(shown, before + 1):
                book.fill(loan_sheet(each, sheets[each.loan.loan_id], SUMMARY, result.book.name))
                progress(number)
            _fill_front(book, result, self.problems, sheets, style=self.style, live=True, back=self.back)

    def stripped(self) -> "Volume":
        """The same without its schedules, which are sooner worked out again than handed over."""
        bare = [replace(each, schedule=None) if each.terms else each for each in self.result.results]
        book = replace(self.result.book, loans=(), set_aside=(), problems=())
        return replace(self, result=replace(self.result, book=book, results=bare, problems=()))

    def restored(self) -> "Volume":
        """A stripped volume with its schedules."""
        whole = [
            replace(each, schedule=build(each.terms)) if each.terms else each for each in self.result.results
        ]
        return replace(self, result=replace(self.result, results=whole))


def write_summary(
    path: Path, result: BookResult, links: dict[str, str], volumes: Sequence[VolumeEntry], style: Style
) -> None:
    """The whole book without its loans' sheets.

    Args:
        path: of the file.
        result: of the book.
        links: loan ID -> `file#sheet`.
        volumes: the index.
        style: how it is written.
    """
    names = [SUMMARY, EXCEPTIONS, MATURITIES, VOLUMES]
    with open_workbook(path, result, names, style) as book:
        _fill_front(book, result, result.problems, links, style=style, live=False, back="")
        book.fill(volumes_sheet(result, volumes, SUMMARY, SUMMARY))


def _fill_front(
    book: Workbook,
    result: BookResult,
    problems: tuple[Problem, ...],
    sheets: dict[str, str],
    *,
    style: Style,
    live: bool,
    back: str,
) -> None:
    """The sheets before those of the loans."""
    outlook = Outlook(result.as_of, result.results)
    title = style.design.title
    book.fill(summary_sheet(result, result.results, outlook, sheets, live, title=title, back=back))
    book.fill(exceptions_sheet(result, problems, SUMMARY, sheets))
    book.fill(maturities_sheet(result, outlook, SUMMARY, sheets, live=live))


def open_workbook(path: Path, result: BookResult, sheets: list[str], style: Style) -> Workbook:
    """A workbook dated as of the book's date, so that the same input gives the same bytes."""
    created = datetime.combine(result.as_of, time())
    title = f"Loan schedules of {result.book.name}"
    return Workbook(
        path, sheets, title=title, created=created, design=style.design, values_only=style.values_only
    )
