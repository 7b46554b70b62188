"""Where a table's header row is, and which column holds what.

Names are matched by the spelling table; a unit in brackets is no part of a name, but it is kept,
because it can decide what a plain number means (percent, months).
"""

import re
from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass
from difflib import get_close_matches

from tenorbook.basis.money import currency_digits
from tenorbook.basis.problem import Place, Problem, error, note, warning
from tenorbook.read.files.grid import Cell, Row, Sheet
from tenorbook.read.spellings import index, is_canonical, normal, section, tidy

LOOKED_AT = 30
"""Rows of a sheet in which the header row must stand."""
_ENOUGH = 2
"""Known names that make a row a header row."""
_NAMES = frozenset(
    ("Loan ID", "Counterparty", "Description", "Entity", "Loan account", "Classification", "Note")
)
"""Columns that decide no figure."""
_BRACKETS = re.compile(r"[(\[]([^)\]]*)[)\]]")
_PERCENT = re.compile(r"%|\bpercent\b|\bpct\b", re.IGNORECASE)
_TIMES = ("years", "months", "weeks", "days", "payments")


@dataclass(frozen=True, slots=True)
class Column:
    """A column that the program knows.

    Attributes:
        name: canonical header.
        number: from 1.
        header: the header cell.
        percent: whether the header says that plain numbers are percentages.
        time: the unit of time that the header gives to plain numbers; empty: none.
        currency: the currency code in the header; empty: none.
    """

    name: str
    number: int
    header: Cell
    percent: bool = False
    time: str = ""
    currency: str = ""


@dataclass(frozen=True, slots=True)
class Table:
    """A sheet with its header row found.

    Attributes:
        kind: canonical name of the sheet.
        header_row: its number.
        columns: canonical header -> column.
        unknown: column number -> header, of the columns that have one which the program does not know.
    """

    sheet: Sheet
    kind: str
    header_row: int
    columns: Mapping[str, Column]
    unknown: Mapping[int, str]

    def place(self, cell: Cell) -> Place:
        """Where a cell of the table stands."""
        return cell.place(self.sheet.name)


def known_headers(texts: Sequence[str], kind: str = "Loans") -> int:
    """How many different known headers a row of texts holds."""
    return len({name for text in texts if (name := _name(text, kind)) is not None})


def find_header_row(sheet: Sheet, kind: str) -> Row | None:
    """The row among the first ones that holds most known names; the upper one of equals."""
    best, most = None, _ENOUGH - 1
    for row in _first_rows(sheet):
        count = known_headers([cell.text for cell in row.cells.values()], kind)
        if count > most:
            best, most = row, count
    return best


def read_headers(sheet: Sheet, kind: str, row: Row) -> tuple[Table, list[Problem]]:
    """The columns under a header row, and what should be said about them.

    Two headers that mean the same column are an error that belongs to the file: which of them counts
    would be a guess for every row. Only of a name or description the column with the canonical header
    counts, and the other (a lender's own account number beside `Loan ID`) is carried through.
    """
    columns: dict[str, Column] = {}
    unknown: dict[int, str] = {}
    problems: list[Problem] = []
    canonical = {name for name, cell in _named_cells(row, kind) if _is_itself(cell, name)}
    for number, cell in sorted(row.cells.items()):
        name = _name(cell.text, kind)
        if name is None or (name in _NAMES and name in canonical and not _is_itself(cell, name)):
            unknown[number] = _fresh(tidy(cell.shown), unknown.values())
        elif name in columns:
            problems.append(_twice(sheet, name, columns[name].header, cell))
        else:
            columns[name] = _column(name, cell)
            problems += _synonym(sheet, columns[name])
    table = Table(sheet, kind, row.number, columns, dict(sorted(unknown.items())))
    return table, problems + list(_look_alikes(table, row))


def _named_cells(row: Row, kind: str) -> Iterator[tuple[str, Cell]]:
    for cell in row.cells.values():
        name = _name(cell.text, kind)
        if name is not None:
            yield name, cell


def _is_itself(cell: Cell, name: str) -> bool:
    """Whether a header is the canonical name, units aside."""
    return is_canonical(_split(cell.text)[0], name)


def nearest(sheet: Sheet, kind: str) -> Iterator[tuple[Cell, str]]:
    """Cells of the first rows that resemble a name that was looked for, with that name."""
    names = {normal(name): name for name in section("headers", kind)}
    for row in _first_rows(sheet):
        for cell in row.cells.values():
            close = get_close_matches(normal(cell.text), names, 1, 0.7) if cell.text else []
            if close:
                yield cell, names[close[0]]


def _first_rows(sheet: Sheet) -> Iterator[Row]:
    return (row for number, row in sheet.rows.items() if number <= LOOKED_AT)


def _name(text: str, kind: str) -> str | None:
    """The canonical header of a text, without its units; `None` if it is not known."""
    if not text:
        return None
    known = index("headers", kind)
    return known.get(normal(text)) or known.get(normal(_split(text)[0]))


def _split(text: str) -> tuple[str, list[str]]:
    """A header's name and the units in its brackets; brackets that hold no unit stay in the name."""
    units: list[str] = []

    def take(match: re.Match[str]) -> str:
        unit = _unit(match[1])
        if unit:
            units.append(unit)
            return " "
        return match[0]

    return _BRACKETS.sub(take, text), units


def _unit(text: str) -> str:
    """The kind of a unit (`percent`, `months`...), a currency code itself, or nothing."""
    cleaned = tidy(text).casefold()
    for kind, words in section("units").items():
        if cleaned in (word.casefold() for word in words):
            return kind
    code = cleaned.upper()
    return code if len(code) == 3 and code.isalpha() and currency_digits(code) is not None else ""


def _column(name: str, cell: Cell) -> Column:
    _, units = _split(cell.text)
    words = {word.casefold() for word in re.findall(r"[^\W\d_]+", cell.text)}
    times = [time for time in _TIMES if time in units or time in words]
    currency = next((unit for unit in units if unit.isupper()), "")
    percent = "percent" in units or bool(_PERCENT.search(cell.text))
    return Column(name, cell.column, cell, percent, times[0] if times else "", currency)


def _fresh(text: str, taken: Iterable[str]) -> str:
    """A header made different from those that stand there already."""
    used = set(taken)
    number, fresh = 2, text
    while fresh in used:
        fresh, number = f"{text} ({number})", number + 1
    return fresh


def _twice(sheet: Sheet, name: str, first: Cell, second: Cell) -> Problem:
    return error(
        "",
        second.place(sheet.name),
        f"the headers in {first.address} and {second.address} both mean {name}",
        "keep one of the two columns, or rename the one that means something else",
        first.place(sheet.name),
    )


def _synonym(sheet: Sheet, column: Column) -> Iterator[Problem]:
    """Each other spelling is said once: the header is where the reader shows what it took it for."""
    if not _is_itself(column.header, column.name):
        yield note("", column.header.place(sheet.name), f"this column is read as {column.name}")


def _look_alikes(table: Table, row: Row) -> Iterator[Problem]:
    """Unknown columns are carried; one that resembles a known name may be a slip that costs a term."""
    free = {normal(name): name for name in section("headers", table.kind) if name not in table.columns}
    for number, header in table.unknown.items():
        close = get_close_matches(normal(header), free, 1, 0.85)
        if close and number in row.cells:
            yield warning(
                "",
                table.place(row.cells[number]),
                "this column is not known and is carried through unread",
                f"if it means {free[close[0]]}, name it so",
            )
