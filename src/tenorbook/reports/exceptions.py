"""Every problem of the book, on one sheet."""

from collections.abc import Mapping
from itertools import islice

from tenorbook.basis.problem import Problem, Severity
from tenorbook.reports.result import BookResult
from tenorbook.reports.words import CAUTION, MARK
from tenorbook.tables.sheet import Lines, Part, Sheet
from tenorbook.tables.table import Column, Role, Table, Tone

NAME = "Exceptions"

_MOST_SHOWN = 1_048_000
"""Rows a sheet holds, less what stands above them."""

_MOST_LINKS = 60_000
"""Links on one sheet; spreadsheet programs take 65,530."""


def exceptions_sheet(
    result: BookResult, problems: tuple[Problem, ...], back: str, sheets: Mapping[str, str] | None = None
) -> Sheet:
    """The sheet of problems: severity, loan, place, what stood there, why it cannot be, what would do.

    Args:
        result: of the book.
        problems: those of the workbook's loans.
        back: name of the sheet the link at the top leads to.
        sheets: loan ID -> its sheet; `file#sheet` where it stands in another workbook.
    """
    parts: list[Part] = []
    if problems:
        parts.append(_table(problems[:_MOST_SHOWN], sheets or {}))
    else:
        parts.append(Lines(("Nothing to report: every loan was read and computed as entered.",)))
    return Sheet(
        name=NAME,
        title="Exceptions",
        subtitle=_counts(problems),
        parts=parts,
        back=back,
        print_header=result.book.name,
        print_footer=CAUTION,
    )


def _counts(problems: tuple[Problem, ...]) -> str:
    """How many of each: `2 errors, 1 warning, 3 notes`."""
    counts = [(sum(p.severity is severity for p in problems), str(severity)) for severity in Severity]
    words = [f"{count:,} {word}{'s' if count != 1 else ''}" for count, word in counts]
    return ", ".join(words)


def _table(problems: tuple[Problem, ...], sheets: Mapping[str, str]) -> Table:
    def text(key: str, header: str, values: list[str], width: float) -> Column:
        return Column(key=key, header=header, role=Role.TEXT, values=values, width=width, wrap=True)

    return Table(
        key="exceptions",
        columns=(
            text("severity", "Severity", [_severity(p) for p in problems], 12),
            Column(
                key="loan",
                header="Loan",
                role=Role.TEXT,
                values=[p.loan_id for p in problems],
                width=16,
                wrap=True,
                links=_links(problems, sheets),
            ),
            text("sheet", "Sheet", [p.sheet for p in problems], 15),
            text("cell", "Cell", [p.cell for p in problems], 8),
            text("value", "Value", [p.value for p in problems], 18),
            text("problem", "Problem", [p.problem for p in problems], 60),
            text("remedy", "Remedy", [p.remedy for p in problems], 42),
        ),
        tones={row: Tone.SPECIAL for row, p in enumerate(problems) if p.severity is Severity.ERROR},
        frozen=True,
        filtered=True,
    )


def _links(problems: tuple[Problem, ...], sheets: Mapping[str, str]) -> dict[int, str]:
    """Row -> the sheet of its loan; a sheet takes no more than so many links."""
    linked = ((row, sheets[p.loan_id]) for row, p in enumerate(problems) if p.loan_id in sheets)
    return dict(islice(linked, _MOST_LINKS))


def _severity(problem: Problem) -> str:
    return (MARK if problem.severity is Severity.ERROR else "") + str(problem.severity)
