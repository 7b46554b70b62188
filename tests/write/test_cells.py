"""Cells as XML: escapes, lengths, column letters, dates."""

from datetime import date

import pytest
from hypothesis import given
from hypothesis import strategies as st
from lxml import etree

from tenorbook.write.cells import LONGEST_TEXT, letters, quoted, serial, shortened, text_cell


@pytest.mark.parametrize(
    ("column", "expected"), [(0, "A"), (25, "Z"), (26, "AA"), (701, "ZZ"), (702, "AAA"), (16_383, "XFD")]
)
def test_letters(column: int, expected: str) -> None:
    assert letters(column) == expected


@pytest.mark.parametrize(
    ("day", "expected"),
    [
        (date(1900, 3, 1), 61),
        (date(1970, 1, 1), 25_569),
        (date(2000, 1, 1), 36_526),
        (date(2026, 1, 2), 46_024),
    ],
)
def test_serial_numbers_of_dates(day: date, expected: int) -> None:
    assert serial(day) == expected


def test_an_apostrophe_in_a_sheet_name_is_doubled_in_formulas() -> None:
    assert quoted("Owner's note") == "'Owner''s note'"


@given(st.text(min_size=1))
def test_any_text_makes_well_formed_cells(text: str) -> None:
    cell = etree.fromstring(text_cell("A1", 1, text).encode("utf-8"))
    assert cell.get("t") == "inlineStr"


@given(
    st.text(st.characters(exclude_categories=["Cc", "Cs"], exclude_characters="_\ufffe\uffff"), min_size=1)
)
def test_ordinary_text_is_kept_as_it_is(text: str) -> None:
    cell = etree.fromstring(text_cell("A1", 1, text).encode("utf-8"))
    assert "".join(cell.itertext()) == text


@pytest.mark.parametrize(
    ("text", "expected"),
    [("\x07", "_x0007_"), ("_x0007_", "_x005F_x0007_"), ("\ud800", "\ufffd"), ("a_b", "a_b")],
)
def test_what_xml_cannot_hold_is_spelled_out(text: str, expected: str) -> None:
    assert f">{expected}</t>" in text_cell("A1", 1, text)


def test_a_text_too_long_for_a_cell_is_cut_and_marked() -> None:
    cut = shortened("\U0001f4b6" * LONGEST_TEXT)
    assert len(cut.encode("utf-16-le")) // 2 <= LONGEST_TEXT
    assert cut.endswith("\u2026")
