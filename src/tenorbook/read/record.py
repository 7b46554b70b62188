"""One entry of a table to the values of its fields, with everything there is to say about them."""

from collections.abc import Mapping
from dataclasses import replace

from tenorbook.basis.problem import Place, Problem, error
from tenorbook.read.columns import LOAN_ID, RATE, Field
from tenorbook.read.files.grid import Kind
from tenorbook.read.findings import Findings, named
from tenorbook.read.headers import Column, Table
from tenorbook.read.rows import Entry, covering
from tenorbook.read.values.reading import Reading, Rules, Unreadable, refuse_valueless


def read_fields(
    table: Table,
    entry: Entry,
    fields: Mapping[str, Field],
    rules: Rules,
    loan_id: str,
    findings: Findings,
) -> dict[str, Reading[object]]:
    """Attribute -> reading, of the fields that are not blank and could be read."""
    values: dict[str, Reading[object]] = {}
    for header, field in fields.items():
        cell = entry.cells.get(header)
        if cell is None:
            continue
        column = table.columns[header]
        try:
            refuse_valueless(cell)
            reading = field.parse(cell, replace(rules, time=column.time) if column.time else rules)
        except Unreadable as fault:
            findings.unreadable(table, header, cell, loan_id, fault)
            continue
        values[field.attribute] = reading
        for remark in reading.remarks:
            findings.remark(table, header, cell, loan_id, remark)
    _check_other_columns(table, entry, fields, loan_id, findings)
    _check_merged(table, entry, loan_id, findings)
    return values


def _check_other_columns(
    table: Table, entry: Entry, fields: Mapping[str, Field], loan_id: str, findings: Findings
) -> None:
    """Known columns that are carried unread may still not hold an error value."""
    for header, cell in entry.cells.items():
        if cell.kind in (Kind.ERROR, Kind.NO_VALUE) and header not in (*fields, LOAN_ID, RATE):
            try:
                refuse_valueless(cell)
            except Unreadable as fault:
                findings.unreadable(table, header, cell, loan_id, fault)


def _check_merged(table: Table, entry: Entry, loan_id: str, findings: Findings) -> None:
    """A merged cell looks filled in every row it covers, and holds its value in the first only."""
    if not table.sheet.merged:
        return
    for header, column in table.columns.items():
        span = covering(table, entry.number, column.number) if header not in entry.cells else None
        if span is not None:
            findings.add(_merged(table, entry, column, span.first_row, loan_id))


def _merged(table: Table, entry: Entry, column: Column, first_row: int, loan_id: str) -> Problem:
    cell = table.sheet.cell(entry.number, column.number)
    return error(
        loan_id,
        table.place(cell),
        f"{named(column.name)} is covered by a merged cell, whose value belongs to row {first_row} only",
        "unmerge the cells and fill in every row",
    )


def where(table: Table, entry: Entry) -> dict[str, Place]:
    """Header -> place, of every cell of an entry that is not blank."""
    return {header: table.place(cell) for header, cell in (*entry.cells.items(), *entry.carried.items())}
