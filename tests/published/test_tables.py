"""Amortization tables of textbooks, agencies and documentation, row by row and at the printed digits."""

from typing import Any

import pytest

from published.helpers import Figures, differences, schedule
from published.printed import records

Record = dict[str, Any]
TABLES: list[Record] = records("tables.json")


def _cells(table: Record) -> list[tuple[str, int, str]]:
    """Every printed cell: column, number of the payment, figure as printed."""
    return [
        (column, row[0], printed)
        for row in table["rows"]
        for column, printed in zip(table["columns"][1:], row[1:], strict=True)
        if printed is not None
    ]


@pytest.mark.parametrize("table", TABLES, ids=lambda table: str(table["id"]))
def test_printed_table(table: Record) -> None:
    found = Figures(schedule(table["terms"], table["rounding"]))
    assert differences(found, _cells(table)) == []


@pytest.mark.parametrize("table", TABLES, ids=lambda table: str(table["id"]))
def test_table_ends_at_nothing(table: Record) -> None:
    found = Figures(schedule(table["terms"], table["rounding"]))
    count = table.get("payments") or table["terms"]["term"]
    assert found.figure("payments", None) == count
    assert found.figure("closing", count) == 0
