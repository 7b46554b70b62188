"""A workbook to a book of loans, from top to bottom."""

from collections.abc import Mapping
from pathlib import Path

from tenorbook.basis.problem import BookError, Problem, Severity
from tenorbook.read.columns import REQUIRED
from tenorbook.read.events import note_records, read_events
from tenorbook.read.files.grid import Source
from tenorbook.read.files.refuse import refusal
from tenorbook.read.files.source import open_source
from tenorbook.read.findings import Findings
from tenorbook.read.headers import Table
from tenorbook.read.loans import carried_columns, read_loans
from tenorbook.read.not_computed import RECORDS_ONLY
from tenorbook.read.settings import read_settings
from tenorbook.read.sheets import LOANS, find_sheets, find_table
from tenorbook.read.values.reading import Rules
from tenorbook.terms.book import Book, Settings
from tenorbook.terms.loan import Loan


def read_book(path: Path, given: Settings | None = None) -> Book:
    """The loans of a workbook; see `tenorbook.read.read_book`."""
    source = open_source(path)
    findings = Findings(source.notes)
    sheets = find_sheets(source, findings)
    settings, tables = _open(source, sheets, given or Settings(), findings)
    rules = Rules(settings.day_order, settings.decimal_mark)
    loans = read_loans(tables[LOANS], rules, settings.currency, findings)
    if not loans:
        raise _no_loans(source, tables[LOANS])
    events = read_events(tables, [loan.loan_id for loan in loans], rules, findings)
    note_records({kind: name for kind, name in sheets.items() if _holds(source, kind, name)}, findings)
    return _book(source, [events.attach(loan) for loan in loans], settings, findings, tables[LOANS])


def _open(
    source: Source, sheets: Mapping[str, str], settings: Settings, findings: Findings
) -> tuple[Settings, Mapping[str, Table]]:
    """The settings and the tables; what makes the whole file unusable is said in one go."""
    fatal: list[Problem] = []
    if "Settings" in sheets:
        settings, problems = read_settings(source.sheet(sheets["Settings"]))
        fatal += [problem for problem in problems if problem.severity is Severity.ERROR]
        findings.add(*problems)
    tables: dict[str, Table] = {}
    for kind in REQUIRED:
        try:
            table = find_table(source, kind, sheets[kind], findings) if kind in sheets else None
        except BookError as fault:
            fatal += fault.problems
            continue
        if table is not None:
            tables[kind] = table
    if fatal:
        raise BookError(fatal)
    return settings, tables


def _holds(source: Source, kind: str, name: str) -> bool:
    """Whether a sheet of records has more on it than a header row."""
    return kind in RECORDS_ONLY and len(source.sheet(name).rows) > 1


def _no_loans(source: Source, table: Table) -> BookError:
    return refusal(
        source.name,
        f"has no loans under the headers in row {table.header_row} of the sheet {table.sheet.name}",
        "enter one loan in each row below the headers",
    )


def _book(source: Source, loans: list[Loan], settings: Settings, findings: Findings, table: Table) -> Book:
    faulty = findings.faulty()
    return Book(
        name=source.name,
        loans=tuple(loan for loan in loans if loan.loan_id not in faulty),
        set_aside=tuple(loan for loan in loans if loan.loan_id in faulty),
        settings=settings,
        problems=findings.ordered(source.sheet_names),
        carried_headers=carried_columns(table),
    )
