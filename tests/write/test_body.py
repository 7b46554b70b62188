"""Tables as rows: references find their cells, subtotals are stepped over, values keep their digits."""

from datetime import date
from decimal import Decimal
from pathlib import Path
from typing import Any

import pytest
from lxml import etree
from xlsxwriter import Workbook as Writer

from tenorbook.tables.formula import Reference, template
from tenorbook.tables.sheet import Block, Blocks, Entry, Lines, Sheet
from tenorbook.tables.table import Column, Role, Subtotal, Table, Tone
from tenorbook.write.design import Design
from tenorbook.write.heights import Heights
from tenorbook.write.layout import arrange
from tenorbook.write.look import Look
from tenorbook.write.sheet_rows import sheet_rows


def amounts(key: str, values: list[int], **more: Any) -> Column:
    return Column(key=key, header=key, role=Role.AMOUNT, values=values, width=12, digits=2, **more)


def table(**more: Any) -> Table:
    days = [date(2025, 11, 1), date(2025, 12, 1), date(2026, 1, 1)]
    columns = (
        Column(key="day", header="Day", role=Role.DATE, values=days, width=12),
        amounts("open", [0, 1000, 900], formula="[close<]", exceptions={0: None}),
        amounts("paid", [0, 100, 905], totalled=True, formula="ROUND([open]*10%,2)", exceptions={0: None}),
        amounts(
            "close", [1000, 900, -5], formula="[open]-[paid]", exceptions={0: "start", 2: "[open]-[paid@2]"}
        ),
    )
    return Table(key="t", columns=columns, label_column="day", **more)


def cells(tmp_path: Path, *parts: Any) -> dict[str, tuple[str, str]]:
    """Address -> formula and value (or text) of every cell of a sheet of these parts."""
    look = Look(Writer(tmp_path / "never.xlsx"))
    sheet = Sheet(name="S", title="Title", subtitle="", parts=parts)
    found = {}
    place = arrange(sheet)
    rows = sheet_rows(place, look, Heights(place, Design()), values_only=False)
    for row in etree.fromstring(f"<sheetData>{''.join(rows)}</sheetData>"):
        for cell in row:
            texts = {part.tag: "".join(part.itertext()) for part in cell}
            found[cell.get("r")] = (texts.get("f", ""), texts.get("v", texts.get("is", "")))
    return found


def test_a_formula_taken_apart() -> None:
    text, references = template("ROUND([a]*[b<]+[c@12]-[t.d:total]*5%,2)")
    assert text == "ROUND(%s*%s+%s-%s*5%%,2)"
    assert references == (
        Reference("", "a", "", 0),
        Reference("", "b", "<", 0),
        Reference("", "c", "@", 12),
        Reference("t", "d", "total", 0),
    )


def test_references_without_subtotals(tmp_path: Path) -> None:
    found = cells(tmp_path, table())
    assert found["A4"] == ("", "Day")
    assert found["B5"] == ("", "0.0")
    assert found["B6"] == ("D5", "10.00")
    assert found["C6"] == ("ROUND(B6*10%,2)", "1.0")
    assert found["D5"] == ("start", "10.00")
    assert found["D7"] == ("B7-C7", "-0.05")
    assert found["A5"] == ("", "45962")


def test_references_step_over_subtotals(tmp_path: Path) -> None:
    found = cells(
        tmp_path, table(subtotals=(Subtotal(0, 1, "2025"), Subtotal(2, 2, "2026")), total_label="All")
    )
    assert found["A7"] == ("", "2025")
    assert found["C7"] == ("ROUND(SUM(C5:C6),2)", "1.0")
    assert found["B8"] == ("D6", "9.0")
    assert found["C9"] == ("ROUND(SUM(C8:C8),2)", "9.05")
    assert found["A10"] == ("", "All")
    assert found["C10"] == ("ROUND(SUM(C7,C9),2)", "10.05")


def test_a_tone_changes_the_style_and_nothing_else(tmp_path: Path) -> None:
    assert cells(tmp_path, table(tones={1: Tone.SPECIAL})) == cells(tmp_path, table())


def test_entries_refer_to_a_table_below_them(tmp_path: Path) -> None:
    entries = (
        Entry(label="All", value=1005, role=Role.AMOUNT, digits=2, formula="[paid:total]"),
        Entry(label="Rate", value=Decimal("0.0625"), role=Role.RATE, name="annual_rate"),
        Entry(label="Column", value=0, role=Role.AMOUNT, digits=2, formula="SUM([t.close:all])"),
    )
    found = cells(tmp_path, Blocks((Block("Terms", entries),)), table(total_label="All"))
    assert found["A4"] == ("", "Terms")
    assert found["C5"] == ("C13", "10.05")
    assert found["C6"] == ("", "0.0625")
    assert found["C7"] == ("SUM(D$10:D$12)", "0.0")


def test_sentences_are_broken_to_the_width_of_the_sheet(tmp_path: Path) -> None:
    found = cells(tmp_path, Lines(("word " * 40,)), table())
    lines = [value for address, (_, value) in found.items() if value.startswith("word")]
    assert len(lines) == 4
    assert max(map(len, lines)) <= 53


@pytest.mark.parametrize(
    ("value", "expected"), [(5, "5"), ("5", "5"), (True, "yes"), (None, ""), (Decimal("1.50"), "1.5")]
)
def test_carried_values_keep_their_type(tmp_path: Path, value: object, expected: str) -> None:
    column = Column(key="x", header="X", role=Role.ANY, values=[value], width=9)
    assert cells(tmp_path, Table(key="t", columns=(column,)))["A5"] == ("", expected)


def test_a_date_before_march_1900_is_text(tmp_path: Path) -> None:
    column = Column(key="x", header="X", role=Role.DATE, values=[date(1900, 2, 1)], width=9)
    assert cells(tmp_path, Table(key="t", columns=(column,)))["A5"] == ("", "1900-02-01")
