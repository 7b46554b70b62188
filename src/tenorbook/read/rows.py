"""Which rows under a header row are entries, and which only look like it: blank, total, repeated header."""

from collections.abc import Iterator, Mapping
from dataclasses import dataclass

from tenorbook.basis.problem import Place, note
from tenorbook.read.columns import LOAN_ID
from tenorbook.read.files.grid import Cell, Kind, Row, Span
from tenorbook.read.findings import Findings
from tenorbook.read.headers import Table
from tenorbook.read.spellings import normal, total_words

_DATES = ("Funding date", "First payment", "Maturity", "Date", "From")
_WORDS = ("Counterparty", "Description", "Note", "Entity", "Side", "Currency")


@dataclass(frozen=True, slots=True)
class Entry:
    """One row of a table that is an entry.

    Attributes:
        cells: canonical header -> cell, of the columns that are known and not blank here.
        carried: header -> cell, of the others.
    """

    number: int
    cells: Mapping[str, Cell]
    carried: Mapping[str, Cell]

    def cell(self, table: Table, header: str) -> Cell:
        """The cell under a header, blank or not; in the Loan ID's column if the table lacks the header."""
        column = table.columns.get(header) or table.columns[LOAN_ID]
        return self.cells.get(header) or table.sheet.cell(self.number, column.number)


def entries(table: Table, findings: Findings) -> list[Entry]:
    """The entries of a table in order; what was left out or is hidden is noted once."""
    found: list[Entry] = []
    totals: list[Entry] = []
    hidden: list[Row] = []
    for row in _below(table):
        entry = _entry(table, row)
        if not entry.cells or _repeats_headers(table, row):
            continue
        if is_total(entry):
            totals.append(entry)
        else:
            found.append(entry)
            if row.hidden:
                hidden.append(row)
    _note_totals(table, totals, findings)
    _note_hidden(table, hidden, findings)
    return found


def _repeats_headers(table: Table, row: Row) -> bool:
    """Whether the row is the header row again, as on every printed page of an export."""
    headers = [column.header for column in table.columns.values()]
    same = sum(
        header.text == row.cells[header.column].text for header in headers if header.column in row.cells
    )
    return same >= 2 and same > len(headers) / 2


def _below(table: Table) -> Iterator[Row]:
    return (row for number, row in table.sheet.rows.items() if number > table.header_row)


def _entry(table: Table, row: Row) -> Entry:
    known = {
        name: row.cells[column.number] for name, column in table.columns.items() if column.number in row.cells
    }
    carried = {header: row.cells[number] for number, header in table.unknown.items() if number in row.cells}
    return Entry(row.number, known, carried)


def is_total(entry: Entry) -> bool:
    """Whether a row adds up others: it says so or sums by formula, and has neither date nor ID of its own.

    A company whose name begins with Total is no total: the whole text must be a word for a sum.
    """
    cells = sorted((*entry.cells.values(), *entry.carried.values()), key=lambda cell: cell.column)
    first = next((cell for cell in cells if cell.text), None)
    says_total = first is not None and normal(first.text) in total_words()
    loan_id = entry.cells.get(LOAN_ID)
    if any(name in entry.cells for name in _DATES) or (loan_id is not None and loan_id is not first):
        return False
    if says_total:
        return True
    return loan_id is None and any(_is_sum(cell) for cell in entry.cells.values())


def _is_sum(cell: Cell) -> bool:
    formula = normal(cell.formula)
    return formula.startswith(("sum", "subtotal", "aggregate"))


def has_terms(entry: Entry) -> bool:
    """Whether a row holds more than remarks: anything in a column of terms."""
    return any(name not in _WORDS and name != LOAN_ID for name in entry.cells)


def covering(table: Table, row: int, column: int) -> Span | None:
    """The merged range that hides a blank cell: its value stands in another row only."""
    for span in table.sheet.merged:
        inside = span.first_row < row <= span.last_row and span.first_column <= column <= span.last_column
        if inside and span.first_row > table.header_row:
            return span
    return None


def values_of(cells: Mapping[str, Cell]) -> dict[str, object]:
    """Carried cells as plain values, untouched; of an error or an unstored formula, its text."""
    return {
        header: cell.shown if cell.kind in (Kind.ERROR, Kind.NO_VALUE) else cell.value
        for header, cell in cells.items()
    }


def _note_totals(table: Table, totals: list[Entry], findings: Findings) -> None:
    if not totals:
        return
    shown = ", ".join(str(entry.number) for entry in totals[:10]) + (", ..." if len(totals) > 10 else "")
    rows = f"row {shown} adds up others and is" if len(totals) == 1 else f"rows {shown} add up others and are"
    findings.add(note("", Place(table.sheet.name), f"{rows} not read as an entry"))


def _note_hidden(table: Table, hidden: list[Row], findings: Findings) -> None:
    if hidden:
        what = (
            "1 hidden or filtered row is"
            if len(hidden) == 1
            else f"{len(hidden)} hidden or filtered rows are"
        )
        first = f"row {hidden[0].number}" if len(hidden) == 1 else f"first of them row {hidden[0].number}"
        findings.add(note("", Place(table.sheet.name), f"{what} read like any other: {first}"))
