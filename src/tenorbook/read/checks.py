"""What can be said about the values of one loan without knowing how they fit together."""

from collections.abc import Iterator, Mapping
from decimal import Decimal
from typing import TypeAlias

from tenorbook.basis.conventions import Frequency
from tenorbook.basis.problem import Problem, error, warning
from tenorbook.read.files.grid import Kind
from tenorbook.read.findings import named
from tenorbook.read.headers import Table
from tenorbook.read.rows import Entry
from tenorbook.read.values.reading import Reading
from tenorbook.terms.loan import Length, LengthUnit

MOST_PAYMENTS = 2_600
MOST_YEARS = 100
USUAL_YEARS = 60
_A_YEAR = {LengthUnit.MONTHS: Decimal(12), LengthUnit.WEEKS: Decimal(52), LengthUnit.DAYS: Decimal("365.25")}
_LENGTHS = {"Term": "term", "Amortized over": "amortized_over"}

Values: TypeAlias = Mapping[str, Reading[object]]


def length_problems(table: Table, entry: Entry, values: Values, loan_id: str) -> Iterator[Problem]:
    """Terms of more payments or years than any note has, and unusually long ones."""
    frequency = _frequency(values)
    for header, attribute in _LENGTHS.items():
        reading = values.get(attribute)
        if reading is None or not isinstance(reading.value, Length):
            continue
        place = table.place(entry.cells[header])
        years = _years(reading.value, frequency)
        payments = _payments(reading.value, years, frequency)
        if payments > MOST_PAYMENTS:
            text = f"{named(header)} is more than {MOST_PAYMENTS:,} payments"
            yield error(loan_id, place, text, "look at the number and at its unit")
        elif years > MOST_YEARS:
            text = f"{named(header)} is longer than {MOST_YEARS} years"
            yield error(loan_id, place, text, "look at the number and at its unit")
        elif years > USUAL_YEARS:
            text = f"{named(header)} is longer than {USUAL_YEARS} years"
            yield warning(loan_id, place, text, "look at the number and at its unit")


def _frequency(values: Values) -> Frequency:
    reading = values.get("frequency")
    found = reading.value if reading is not None else None
    return found if isinstance(found, Frequency) else Frequency.MONTHLY


def _years(length: Length, frequency: Frequency) -> Decimal:
    per_year = Decimal(frequency.per_year) if length.unit is LengthUnit.PAYMENTS else _A_YEAR[length.unit]
    return length.count / per_year


def _payments(length: Length, years: Decimal, frequency: Frequency) -> Decimal:
    """Payments in a length, about; a loan paid at maturity has one."""
    if length.unit is LengthUnit.PAYMENTS:
        return Decimal(length.count)
    return Decimal(1) if frequency is Frequency.AT_MATURITY else years * frequency.per_year


def count_unit_problems(table: Table, entry: Entry, values: Values, loan_id: str) -> Iterator[Problem]:
    """A header that counts interest-only months, on a loan that is not paid monthly."""
    header = "Interest-only payments"
    cell = entry.cells.get(header)
    if cell is None or table.columns[header].time not in ("months", "years", "weeks"):
        return
    unit = table.columns[header].time
    if unit != "months" or _frequency(values) is not Frequency.MONTHLY:
        text = (
            f"{named(header)} are counted in {unit} by the header, and this loan is paid {_frequency(values)}"
        )
        yield error(
            loan_id, table.place(cell), text, "enter the number of payments under Interest-only payments"
        )


def currency_problems(
    table: Table, entry: Entry, fields: Mapping[str, str], values: Values, currency: str, loan_id: str
) -> Iterator[Problem]:
    """Amounts that show another currency than the loan's.

    Args:
        fields: header -> attribute.
        currency: the loan's, or the book's where the loan states none.
    """
    for header, attribute in fields.items():
        reading, cell = values.get(attribute), entry.cells.get(header)
        if reading is None or cell is None or not isinstance(reading.value, Decimal):
            continue
        stated = table.columns[header].currency
        if reading.signs and currency not in reading.signs:
            say = error if cell.kind is Kind.TEXT else warning
            text = f"{named(header)} shows {_codes(reading.signs)}, and the loan's currency is {currency}"
            yield say(
                loan_id, table.place(cell), text, "state the right code under Currency, or change the cell"
            )
        elif stated and stated != currency:
            text = f"{named(header)} is in {stated} by its header, and the loan's currency is {currency}"
            yield error(
                loan_id, table.place(cell), text, "state the right code under Currency, or change the header"
            )


def _codes(codes: frozenset[str]) -> str:
    return " or ".join(sorted(codes)[:2])
