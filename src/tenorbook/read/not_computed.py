"""Terms of the book format that would change a schedule and that this version does not compute yet.

A loan that uses one is set aside: a schedule without the term would be wrong without saying so. Taking
a line away here is the last step of adding its term.
"""

from collections.abc import Iterator, Mapping

from tenorbook.read.files.grid import Cell, Kind
from tenorbook.read.spellings import lookup, normal

COLUMNS: dict[str, tuple[str, ...]] = {
    "Compounding": ("per payment", "each payment", "none"),
    "Business days": ("none", "no", "unadjusted"),
    "Interest to rolled date": ("no", "none"),
    "Index": ("none", "fixed"),
    "Margin": ("none", "0"),
    "Rate floor": ("none",),
    "Rate cap": ("none",),
    "Reset step cap": ("none",),
    "Reset every": ("none",),
    "Reset payment": ("none",),
    "Lookback days": ("none", "0"),
    "Interest method": ("simple",),
    "Negative amortization cap": ("none",),
    "Rate rounding": ("none",),
}
"""Header of `Loans` -> the entries that change nothing."""

SHEETS = ("Payment changes", "Draws", "Fees")
"""Sheets each row of which changes the schedule of the loan it names."""

RECORDS_ONLY = ("Receipts",)
"""Sheets that say what happened and leave the contract schedule as it is: noted once."""


def unused_terms(cells: Mapping[str, Cell]) -> Iterator[tuple[str, Cell]]:
    """The terms of one loan (header, cell) that would change its schedule and are not computed."""
    for header, harmless in COLUMNS.items():
        cell = cells.get(header)
        if cell is None or cell.kind in (Kind.ERROR, Kind.NO_VALUE):
            continue
        if not _is_harmless(cell, harmless):
            yield header, cell


def _is_harmless(cell: Cell, harmless: tuple[str, ...]) -> bool:
    shown = normal(cell.shown)
    no = "no" in harmless and lookup(cell.shown, "words", "Yes or no") == "no"
    return no or shown in {normal(word) for word in harmless}
