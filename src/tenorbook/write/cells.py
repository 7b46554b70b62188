"""The XML of single cells, and addresses.

Every text of a cell goes through `escaped`: it is written as an inline string, which no spreadsheet
program takes for a formula.
"""

import re
from datetime import date
from functools import cache

LONGEST_TEXT = 32_767
"""Most UTF-16 units a cell holds."""

FIRST_SERIAL_DATE = date(1900, 3, 1)
"""Before this day spreadsheet programs disagree about the serial number of a date."""

DAY_ZERO = 693_594
"""Ordinal of the day before serial number 1, as if 1900 had been a leap year."""

_SPECIAL = re.compile(r"[&<>\x00-\x08\x0b-\x1f\ud800-\udfff\ufffe\uffff]|_x")
_ESCAPE_LIKE = re.compile(r"_(?=x[0-9a-fA-F]{4}_)")
_CONTROL = re.compile(r"[\x00-\x08\x0b-\x1f\ufffe\uffff]")
_SURROGATE = re.compile(r"[\ud800-\udfff]")


@cache
def letters(column: int) -> str:
    """The letters of a column counted from 0: 0 is A, 26 is AA."""
    name = ""
    column += 1
    while column:
        column, rest = divmod(column - 1, 26)
        name = chr(65 + rest) + name
    return name


def quoted(sheet: str) -> str:
    """A sheet name as a formula spells it: in apostrophes, its own doubled."""
    return "'" + sheet.replace("'", "''") + "'"


def escaped(text: str) -> str:
    """Text fit for XML; what XML cannot hold is spelled as spreadsheet programs spell it, `_x0007_`."""
    if not _SPECIAL.search(text):
        return text
    text = _ESCAPE_LIKE.sub("_x005F_", text)
    text = _CONTROL.sub(lambda match: f"_x{ord(match[0]):04X}_", text)
    text = _SURROGATE.sub("\ufffd", text)
    return text.replace("&", "&amp;").replace("<", "&lt;").replace(">", "&gt;")


def shortened(text: str) -> str:
    """Text cut to what a cell holds, the cut marked with an ellipsis."""
    if len(text) * 2 <= LONGEST_TEXT or len(text.encode("utf-16-le", "replace")) // 2 <= LONGEST_TEXT:
        return text
    return text[: LONGEST_TEXT // 2] + "\u2026"


def text_cell(address: str, style: int, text: str) -> str:
    """A cell with text."""
    if not text:
        return blank_cell(address, style)
    body = escaped(shortened(text))
    return f'<c r="{address}" s="{style}" t="inlineStr"><is><t xml:space="preserve">{body}</t></is></c>'


def number_cell(address: str, style: int, number: str) -> str:
    """A cell with a number, given as text."""
    return f'<c r="{address}" s="{style}"><v>{number}</v></c>'


def formula_cell(address: str, style: int, formula: str, value: str) -> str:
    """A cell with a formula and the number it comes to."""
    return f'<c r="{address}" s="{style}"><f>{escaped(formula)}</f><v>{value}</v></c>'


def text_formula_cell(address: str, style: int, formula: str, value: str) -> str:
    """A cell with a formula and the text it comes to."""
    body = f"<f>{escaped(formula)}</f><v>{escaped(value)}</v>"
    return f'<c r="{address}" s="{style}" t="str">{body}</c>'


def blank_cell(address: str, style: int) -> str:
    """An empty cell that has a format."""
    return f'<c r="{address}" s="{style}"/>'


def serial(day: date) -> int:
    """The serial number of a date in the 1900 system; right from 1 March 1900."""
    return day.toordinal() - DAY_ZERO
