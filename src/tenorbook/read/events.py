"""The rows of the other sheets, each attached to the loan it names."""

from collections import defaultdict
from collections.abc import Callable, Iterable, Iterator, Mapping
from dataclasses import dataclass, field, replace
from decimal import Decimal
from difflib import get_close_matches
from typing import Any, TypeVar

from tenorbook.basis.problem import Place, error, note, warning
from tenorbook.read import columns
from tenorbook.read.columns import LOAN_ID, RATE, Field
from tenorbook.read.findings import Findings, named
from tenorbook.read.headers import Table
from tenorbook.read.loans import NOT_COMPUTED, add_rates, read_loan_id
from tenorbook.read.not_computed import RECORDS_ONLY, SHEETS
from tenorbook.read.record import read_fields, where
from tenorbook.read.rows import Entry, entries
from tenorbook.read.values.reading import Reading, Rules
from tenorbook.terms.loan import ExtraPayment, Loan, RateChange

E = TypeVar("E", ExtraPayment, RateChange)
_GUESSES = 20
"""Unknown IDs of a sheet that a likely one is looked for: comparing with thousands of IDs takes long."""


@dataclass(slots=True)
class Events:
    """The events of a book: Loan ID -> its rows, in the book's order."""

    extra_payments: Mapping[str, list[ExtraPayment]] = field(default_factory=dict)
    rate_changes: Mapping[str, list[RateChange]] = field(default_factory=dict)

    def attach(self, loan: Loan) -> Loan:
        """The loan with the events that name it."""
        return replace(
            loan,
            extra_payments=tuple(self.extra_payments.get(loan.loan_id, ())),
            rate_changes=tuple(self.rate_changes.get(loan.loan_id, ())),
        )


def read_events(
    tables: Mapping[str, Table], known: Iterable[str], rules: Rules, findings: Findings
) -> Events:
    """Every sheet that changes a loan.

    Args:
        tables: canonical sheet name -> table, of the sheets that the book has.
        known: the Loan IDs of the book.
        rules: how texts are read.
        findings: takes every problem.
    """
    ids = dict.fromkeys(known)
    events = Events()
    if "Extra payments" in tables:
        events.extra_payments = _read(
            tables["Extra payments"], columns.EXTRA_PAYMENTS, ExtraPayment, ids, rules, findings
        )
    if "Rate changes" in tables:
        events.rate_changes = _read(
            tables["Rate changes"], columns.RATE_CHANGES, RateChange, ids, rules, findings
        )
    for kind in SHEETS:
        if kind in tables:
            _set_aside(tables[kind], ids, rules, findings)
    return events


def _read(
    table: Table,
    fields: Mapping[str, Field],
    make: Callable[..., E],
    known: Mapping[str, None],
    rules: Rules,
    findings: Findings,
) -> Mapping[str, list[E]]:
    """One sheet of events. A row that lacks something, or names no loan of the book, is an error."""
    drafts: list[tuple[Entry, str, dict[str, Reading[object]]]] = []
    for entry, loan_id in _named_rows(table, known, rules, findings):
        drafts.append((entry, loan_id, read_fields(table, entry, fields, rules, loan_id, findings)))
    add_rates(table, drafts, rules, findings, _unconfirmed)
    events: dict[str, list[E]] = defaultdict(list)
    for entry, loan_id, values in drafts:
        if not _complete(table, entry, loan_id, values, findings):
            continue
        found: dict[str, Any] = {name: reading.value for name, reading in values.items()}
        event = make(**found, where=where(table, entry))
        _warn_if_twice(table, entry, loan_id, events[loan_id], event, findings)
        events[loan_id].append(event)
    return events


def _unconfirmed(_row: int, _number: Decimal) -> tuple[bool, bool]:
    """No payment stands beside a later rate that could confirm its reading."""
    return False, False


def _named_rows(
    table: Table, known: Mapping[str, None], rules: Rules, findings: Findings
) -> Iterator[tuple[Entry, str]]:
    """The rows with the loan they name; that it is not in the book is said here."""
    unknown = 0
    for entry in entries(table, findings):
        loan_id = read_loan_id(table, entry, rules, findings)
        if LOAN_ID in entry.cells and loan_id not in known:
            guess = _resembling(loan_id, known) if unknown < _GUESSES else ""
            unknown += 1
            remedy = (
                f"enter {guess}, if that is meant" if guess else "enter an ID that stands on the sheet Loans"
            )
            cell = entry.cells[LOAN_ID]
            findings.add(error(loan_id, table.place(cell), "no loan of the book has this ID", remedy))
        yield entry, loan_id


def _resembling(loan_id: str, known: Iterable[str]) -> str:
    return next(iter(get_close_matches(loan_id, list(known), 1, 0.75)), "")


def _complete(
    table: Table, entry: Entry, loan_id: str, values: Mapping[str, Reading[object]], findings: Findings
) -> bool:
    """Whether all that an event needs could be read; what is blank is said here."""
    complete = True
    attributes = {"Date": "date", "Amount": "amount", "From": "from_date", RATE: "annual_rate"}
    for (header,) in columns.REQUIRED[table.kind]:
        if header == LOAN_ID or attributes[header] in values:
            continue
        complete = False
        if header not in entry.cells:
            place = table.place(entry.cell(table, header))
            text = f"{named(header)} is missing"
            findings.add(error(loan_id, place, text, f"fill in {header}, or clear the row"))
    return complete


def _warn_if_twice(
    table: Table, entry: Entry, loan_id: str, before: list[E], event: E, findings: Findings
) -> None:
    for other in before:
        if other == event:
            first, here = other.where[LOAN_ID], table.place(entry.cells[LOAN_ID])
            text = f"the row says the same as the row of {first.cell}; both count"
            findings.add(warning(loan_id, here, text, "remove one of them if it stands there twice", first))
            return


def _set_aside(table: Table, known: Mapping[str, None], rules: Rules, findings: Findings) -> None:
    """Rows of a sheet that is not computed yet: the loans they name are set aside."""
    for entry, loan_id in _named_rows(table, known, rules, findings):
        if loan_id in known:
            cell = entry.cells[LOAN_ID]
            text = f"an entry on the sheet {table.kind} {NOT_COMPUTED}"
            findings.add(error(loan_id, table.place(cell), text, "compute this loan elsewhere for now"))


def note_records(sheets: Mapping[str, str], findings: Findings) -> None:
    """Say once of each sheet of records that the contract schedule does not use it.

    Args:
        sheets: canonical name -> name in the book, of the sheets that hold something.
        findings: takes the notes.
    """
    for kind in RECORDS_ONLY:
        if kind in sheets:
            text = "the entries of this sheet do not change the contract schedule and are not used by it"
            findings.add(note("", Place(sheets[kind]), text))
