"""Every problem of the book, on one sheet."""

from tenorbook.basis.problem import Problem, Severity
from tenorbook.reports.result import BookResult
from tenorbook.reports.words import CAUTION, MARK
from tenorbook.tables.sheet import Lines, Part, Sheet
from tenorbook.tables.table import Column, Role, Table, Tone

NAME = "Exceptions"

_MOST_SHOWN = 1_048_000
"""Rows a sheet holds, less what stands above them."""


def exceptions_sheet(result: BookResult, problems: tuple[Problem, ...], back: str) -> Sheet:
    """The sheet of problems: severity, loan, place, what stood there, why it cannot be, what would do.

    Args:
        result: of the book.
        problems: those of the workbook's loans.
        back: name of the sheet the link at the top leads to.
    """
    parts: list[Part] = []
    if problems:
        parts.append(_table(problems[:_MOST_SHOWN]))
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


def _table(problems: tuple[Problem, ...]) -> Table:
    def text(key: str, header: str, values: list[str], width: float, wrap: bool = False) -> Column:
        return Column(key=key, header=header, role=Role.TEXT, values=values, width=width, wrap=wrap)

    return Table(
        key="exceptions",
        columns=(
            text("severity", "Severity", [_severity(p) for p in problems], 12),
            text("loan", "Loan", [p.loan_id for p in problems], 16),
            text("sheet", "Sheet", [p.sheet for p in problems], 15),
            text("cell", "Cell", [p.cell for p in problems], 8),
            text("value", "Value", [p.value for p in problems], 18, wrap=True),
            text("problem", "Problem", [p.problem for p in problems], 60, wrap=True),
            text("remedy", "Remedy", [p.remedy for p in problems], 42, wrap=True),
        ),
        tones={row: Tone.SPECIAL for row, p in enumerate(problems) if p.severity is Severity.ERROR},
        frozen=True,
    )


def _severity(problem: Problem) -> str:
    return (MARK if problem.severity is Severity.ERROR else "") + str(problem.severity)
