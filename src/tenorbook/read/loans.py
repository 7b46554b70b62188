"""The rows of `Loans` to loans, each with its cells and its problems."""

from collections import defaultdict
from collections.abc import Callable, Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass
from decimal import Decimal
from typing import Any

from tenorbook.basis.problem import Problem, error, warning
from tenorbook.read import columns
from tenorbook.read.checks import count_unit_problems, currency_problems, length_problems
from tenorbook.read.columns import LOAN_ID, RATE
from tenorbook.read.confirm import fits
from tenorbook.read.findings import Findings
from tenorbook.read.headers import Table
from tenorbook.read.not_computed import unused_terms
from tenorbook.read.record import read_fields, where
from tenorbook.read.rows import Entry, entries, has_terms, values_of
from tenorbook.read.values.rates import read_rates
from tenorbook.read.values.reading import Reading, Rules, Unreadable, refuse_valueless
from tenorbook.read.values.words import identifier
from tenorbook.terms.loan import Loan

_ATTRIBUTES = {header: field.attribute for header, field in columns.LOANS.items()}
NOT_COMPUTED = "is not computed yet; the loan is set aside rather than computed without it"


@dataclass(frozen=True, slots=True)
class Draft:
    """One row on its way to a loan."""

    entry: Entry
    loan_id: str
    values: dict[str, Reading[object]]


def read_loans(table: Table, rules: Rules, currency: str, findings: Findings) -> list[Loan]:
    """All loans of the sheet, in order, those with an error filled as far as they could be read.

    Args:
        table: the sheet with its headers.
        rules: how texts are read.
        currency: of loans that state none.
        findings: takes every problem.
    """
    drafts = [
        Draft(entry, loan_id, read_fields(table, entry, columns.LOANS, rules, loan_id, findings))
        for entry, loan_id in _identified(table, rules, findings)
    ]
    findings.add(*_duplicates(table, drafts))
    _add_rates(table, drafts, rules, findings)
    for draft in drafts:
        findings.add(*_checks(table, draft, currency))
    return [_loan(table, draft) for draft in drafts]


def _identified(table: Table, rules: Rules, findings: Findings) -> Iterator[tuple[Entry, str]]:
    """The rows that are loans, each with its ID; a row without one is called by its number."""
    for entry in entries(table, findings):
        if LOAN_ID not in entry.cells and not has_terms(entry):
            continue
        if not has_terms(entry):
            cell = entry.cells[LOAN_ID]
            text = "the row has a Loan ID and no terms; it is not read as a loan"
            findings.add(warning("", table.place(cell), text, "fill in its terms, or clear the cell"))
            continue
        yield entry, read_loan_id(table, entry, rules, findings)


def read_loan_id(table: Table, entry: Entry, rules: Rules, findings: Findings) -> str:
    """The Loan ID of a row; `(row 7)`, with an error, where there is none to be read."""
    unnamed = f"(row {entry.number})"
    cell = entry.cells.get(LOAN_ID)
    if cell is None:
        blank = table.place(entry.cell(table, LOAN_ID))
        findings.add(
            error(unnamed, blank, "the row has no Loan ID", "enter the ID of its loan, or clear the row")
        )
        return unnamed
    try:
        refuse_valueless(cell)
        reading = identifier(cell, rules)
    except Unreadable as fault:
        findings.unreadable(table, LOAN_ID, cell, unnamed, fault)
        return unnamed
    for remark in reading.remarks:
        findings.remark(table, LOAN_ID, cell, reading.value, remark)
    return reading.value


def _duplicates(table: Table, drafts: Iterable[Draft]) -> Iterator[Problem]:
    """The second and later uses of an ID; all loans that share it are set aside."""
    by_id: dict[str, list[Entry]] = defaultdict(list)
    for draft in drafts:
        by_id[draft.loan_id].append(draft.entry)
    for loan_id, (first, *others) in by_id.items():
        for other in others:
            here, there = other.cells[LOAN_ID], first.cells[LOAN_ID]
            yield error(
                loan_id,
                table.place(here),
                f"the Loan ID stands in {there.address} and in {here.address}",
                "give each loan an ID of its own, or remove the row that is there twice",
                table.place(there),
            )


def _add_rates(table: Table, drafts: Sequence[Draft], rules: Rules, findings: Findings) -> None:
    """The rate of each loan, read with its whole column."""
    by_row = {draft.entry.number: draft for draft in drafts}

    def confirm(row: int, number: Decimal) -> tuple[bool, bool]:
        return fits(by_row[row].values, number)

    rows = [(draft.entry, draft.loan_id, draft.values) for draft in drafts]
    add_rates(table, rows, rules, findings, confirm)


def add_rates(
    table: Table,
    rows: Iterable[tuple[Entry, str, dict[str, Reading[object]]]],
    rules: Rules,
    findings: Findings,
    confirm: Callable[[int, Decimal], tuple[bool, bool]],
) -> None:
    """Put the rates of a table's column `Annual rate` into the values of its rows (entry, loan, values)."""
    column = table.columns.get(RATE)
    if column is None:
        return
    rated = [row for row in rows if RATE in row[0].cells]
    cells = [entry.cells[RATE] for entry, _, _ in rated]
    readings = read_rates(cells, rules, header_percent=column.percent, confirm=confirm).readings
    for entry, loan_id, values in rated:
        reading, cell = readings[entry.number], entry.cells[RATE]
        if isinstance(reading, Unreadable):
            findings.unreadable(table, RATE, cell, loan_id, reading)
            continue
        values["annual_rate"] = Reading(reading.value)
        for remark in reading.remarks:
            findings.remark(table, RATE, cell, loan_id, remark)


def _checks(table: Table, draft: Draft, currency: str) -> Iterator[Problem]:
    entry, loan_id, values = draft.entry, draft.loan_id, draft.values
    stated = values.get("currency")
    own = str(stated.value) if stated is not None else currency
    yield from length_problems(table, entry, values, loan_id)
    yield from count_unit_problems(table, entry, values, loan_id)
    yield from currency_problems(table, entry, _ATTRIBUTES, values, own, loan_id)
    for header, cell in unused_terms(entry.cells):
        yield error(
            loan_id,
            table.place(cell),
            f"the term {header} {NOT_COMPUTED}",
            "compute this loan elsewhere for now",
        )


def _loan(table: Table, draft: Draft) -> Loan:
    values: dict[str, Any] = {name: reading.value for name, reading in draft.values.items()}
    return Loan(
        loan_id=draft.loan_id,
        **values,
        where=where(table, draft.entry),
        carried=values_of(_carried(table, draft.entry)),
    )


def _carried(table: Table, entry: Entry) -> Mapping[str, Any]:
    """The columns that are not read, in the order of the sheet: unknown, or known and without a use yet."""
    through = set(carried_columns(table))
    known = {name: cell for name, cell in entry.cells.items() if name in through}
    return dict(sorted({**known, **entry.carried}.items(), key=lambda pair: pair[1].column))


def carried_columns(table: Table) -> tuple[str, ...]:
    """Headers of the columns that go through to the summary, in the order of the sheet."""
    read = {LOAN_ID, RATE, *columns.LOANS}
    known = {column.number: name for name, column in table.columns.items() if name not in read}
    return tuple(header for _, header in sorted({**known, **table.unknown}.items()))
