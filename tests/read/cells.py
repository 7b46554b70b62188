"""Plain cells for tests of the parsers."""

from datetime import date
from decimal import Decimal

from tenorbook.read.files.grid import Cell, Kind, number_cell


def text(value: str) -> Cell:
    return Cell(2, 3, Kind.TEXT, value, value)


def number(value: str, number_format: str = "General") -> Cell:
    return number_cell(2, 3, value, number_format, "", percent=False)


def percent(value: str) -> Cell:
    return number_cell(2, 3, value, "0.00%", "", percent=True)


def day(value: date) -> Cell:
    return Cell(2, 3, Kind.DATE, value, value.isoformat())


TRUE = Cell(2, 3, Kind.BOOL, True, "TRUE")
D = Decimal
