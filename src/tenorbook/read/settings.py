"""The sheet `Settings`: names beside values, with or without a header row."""

from collections.abc import Callable, Iterator, Mapping
from dataclasses import replace
from typing import Any, TypeAlias

from tenorbook.basis.problem import Problem, error, note, warning
from tenorbook.read.files.grid import Cell, Row, Sheet
from tenorbook.read.findings import named
from tenorbook.read.spellings import is_canonical, lookup, normal, section, tidy
from tenorbook.read.values.dates import day, month_and_day
from tenorbook.read.values.numbers import at_least_zero
from tenorbook.read.values.reading import Rules, Unreadable, refuse_valueless
from tenorbook.read.values.words import currency, word
from tenorbook.terms.book import DayOrder, DecimalMark, Settings

_Read: TypeAlias = Callable[[Cell, Rules], object]

_FIRST: Mapping[str, tuple[str, _Read]] = {
    "Day order": ("day_order", lambda cell, rules: word(DayOrder, "Day order")(cell, rules).value),
    "Decimal mark": (
        "decimal_mark",
        lambda cell, rules: word(DecimalMark, "Decimal mark")(cell, rules).value,
    ),
}
"""Read before all others, which are read by them."""

_OTHERS: Mapping[str, tuple[str, _Read]] = {
    "As-of date": ("as_of", lambda cell, rules: day(cell, rules).value),
    "Fiscal year end": ("fiscal_year_end", month_and_day),
    "Currency": ("currency", lambda cell, rules: currency(cell, rules).value),
    "Tolerance": ("tolerance", lambda cell, rules: at_least_zero(cell, rules).value),
    "Period-end day": ("period_end_counted", lambda cell, _: _counted(cell)),
}


def read_settings(sheet: Sheet) -> tuple[Settings, list[Problem]]:
    """The settings of a book. An error here concerns the whole book, since every loan is read by them."""
    problems: list[Problem] = []
    found = dict(_rows(sheet, problems))
    values: dict[str, Any] = {}
    for readers in (_FIRST, _OTHERS):
        rules = Rules(values.get("day_order"), values.get("decimal_mark", DecimalMark.POINT))
        for name, (attribute, read) in readers.items():
            if name in found:
                _take(sheet, name, found[name], rules, attribute, read, values, problems)
    accounts = {name: cell.shown for name, cell in found.items() if name not in (*_FIRST, *_OTHERS)}
    return replace(Settings(), **values, accounts=accounts), problems


def _take(
    sheet: Sheet,
    name: str,
    cell: Cell,
    rules: Rules,
    attribute: str,
    read: _Read,
    values: dict[str, Any],
    problems: list[Problem],
) -> None:
    try:
        refuse_valueless(cell)
        values[attribute] = read(cell, rules)
    except Unreadable as fault:
        problems.append(error("", cell.place(sheet.name), f"{named(name)} {fault.problem}", fault.remedy))


def _rows(sheet: Sheet, problems: list[Problem]) -> Iterator[tuple[str, Cell]]:
    """Canonical name -> value cell. Names of accounts are kept as written."""
    seen: dict[str, Cell] = {}
    for row in sheet.rows.values():
        name, value = _pair(row)
        if name is None or value is None or normal(name.text) == "name":
            continue
        setting = lookup(name.text, "settings") or _account(name.text)
        if setting is None:
            problems.append(_unknown(sheet, name))
        elif setting in seen:
            problems.append(_twice(sheet, name, seen[setting], setting))
        else:
            seen[setting] = name
            if lookup(name.text, "settings") and not is_canonical(name.text, setting):
                problems.append(note("", name.place(sheet.name), f"this setting is read as {setting}"))
            yield setting, value


def _pair(row: Row) -> tuple[Cell | None, Cell | None]:
    """The first text of a row and the cell to its right."""
    cells = [cell for _, cell in sorted(row.cells.items())]
    name = next((cell for cell in cells if cell.text), None)
    value = None if name is None else next((cell for cell in cells if cell.column > name.column), None)
    return name, value


def _account(text: str) -> str | None:
    """`Interest expense account` names an account; the name itself is its key."""
    words = tidy(text).casefold().split()
    return tidy(text) if "account" in words or "accounts" in words else None


def _counted(cell: Cell) -> bool:
    canonical = lookup(cell.shown, "words", "Period-end day")
    if canonical is None:
        raise Unreadable("is a word that is not known here", "enter counted or not counted")
    return canonical == "counted"


def _unknown(sheet: Sheet, name: Cell) -> Problem:
    known = ", ".join(section("settings"))
    return warning(
        "", name.place(sheet.name), "this setting is not known and has no effect", f"known are: {known}"
    )


def _twice(sheet: Sheet, name: Cell, first: Cell, setting: str) -> Problem:
    return error(
        "",
        name.place(sheet.name),
        f"the setting {setting} stands in {first.address} and in {name.address}",
        "keep one of the two",
        first.place(sheet.name),
    )
