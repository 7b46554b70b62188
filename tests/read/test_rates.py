"""Rates: the rule for a whole column, and every way of writing one."""

from collections.abc import Sequence
from dataclasses import replace
from decimal import Decimal

import pytest

from read.cells import TRUE, D, number, percent, text
from tenorbook.read.files.grid import Cell
from tenorbook.read.values.rates import RateColumn, read_rates
from tenorbook.read.values.reading import Rules, Unreadable
from tenorbook.terms.book import DecimalMark

POINT = Rules()


def column(
    *cells: Cell, header: bool = False, rules: Rules = POINT, fits: tuple[bool, bool] = (False, False)
) -> RateColumn:
    """The cells one below the other, from row 1."""
    placed = [replace(cell, row=row) for row, cell in enumerate(cells, start=1)]
    return read_rates(placed, rules, header_percent=header, confirm=lambda row, value: fits)


def outcome(found: RateColumn) -> list[Decimal | str]:
    return [
        reading.problem if isinstance(reading, Unreadable) else reading.value
        for _, reading in sorted(found.readings.items())
    ]


def said(found: RateColumn) -> list[tuple[str, str]]:
    return [
        (str(remark.severity), remark.problem)
        for _, reading in sorted(found.readings.items())
        if not isinstance(reading, Unreadable)
        for remark in reading.remarks
    ]


@pytest.mark.parametrize(
    ("cell", "rate"),
    [
        (percent("0.0625"), "0.0625"),
        (percent("0.061500000000000006"), "0.0615"),
        (percent("0.005"), "0.005"),
        (text("6.25%"), "0.0625"),
        (text("6.25 %"), "0.0625"),
        (text("6 1/4 %"), "0.0625"),
        (text("6 1/4%"), "0.0625"),
        (text("6-1/4%"), "0.0625"),
        (text("6\u00bc %"), "0.0625"),
        (text("6 1\u20444 %"), "0.0625"),
        (text("1/2 %"), "0.005"),
        (text("6.25 percent"), "0.0625"),
        (text("6.25% p.a."), "0.0625"),
        (text("6.25 % per annum"), "0.0625"),
        (text("6.25\xa0%"), "0.0625"),
        (text("0%"), "0"),
        (number("0"), "0"),
        (percent("0"), "0"),
    ],
)
def test_cells_that_mean_what_they_show(cell: Cell, rate: str) -> None:
    found = column(cell)
    assert outcome(found) == [D(rate)]
    assert said(found) == []


@pytest.mark.parametrize(
    ("cell", "problem"),
    [
        (text("6 1/3 %"), "is not exact as a decimal"),
        (text("6 1/0 %"), "is not a rate"),
        (text("Prime + 2"), "is not a rate"),
        (text("1% a month"), "is not a rate"),
        (text("6.25%%"), "is not a rate"),
        (text("625 bps"), "is not a rate"),
        (text("6,25%"), "is not a number with a decimal point"),
        (TRUE, "is not a rate"),
        (percent("-1"), "is -100%, which cannot be"),
        (percent("10.01"), "is 1001%, which cannot be"),
        (text("2000%"), "is 2000%, which cannot be"),
    ],
)
def test_what_is_no_rate(cell: Cell, problem: str) -> None:
    assert outcome(column(cell)) == [problem]


def test_a_decimal_comma() -> None:
    assert outcome(column(text("6,25 %"), rules=Rules(decimal_mark=DecimalMark.COMMA))) == [D("0.0625")]


def plain(*values: str) -> Sequence[Cell]:
    return [number(value) for value in values]


PERCENTAGES = ("note", "is a column of plain numbers, read as percentages: 6.25 is 6.25%")
FRACTIONS = ("note", "is a column of plain numbers, read as fractions: 0.0625 is 6.25%")


def test_a_column_of_numbers_of_1_or_more_is_percent() -> None:
    found = column(*plain("6.25", "1", "0", "12"))
    assert outcome(found) == [D("0.0625"), D("0.01"), 0, D("0.12")]
    assert said(found) == [PERCENTAGES] * 3  # shown once for the book: the remark is marked so


def test_a_column_of_numbers_under_1_is_fractions() -> None:
    found = column(*plain("0.0625", "0", "0.35"))
    assert outcome(found) == [D("0.0625"), 0, D("0.35")]
    assert said(found) == [FRACTIONS] * 2


def test_percent_cells_do_not_decide_for_plain_ones() -> None:
    assert outcome(column(percent("0.05"), number("6.25"))) == [D("0.05"), D("0.0625")]
    assert outcome(column(text("5%"), number("0.0625"))) == [D("0.05"), D("0.0625")]


def test_a_header_that_says_percent_decides() -> None:
    found = column(*plain("6.25", "0.5", "0.0625"), header=True)
    assert outcome(found) == [D("0.0625"), D("0.005"), D("0.000625")]
    assert said(found) == [("warning", "is read as 0.0625%, because the header says percent")]


def test_plain_texts_are_plain_numbers() -> None:
    assert outcome(column(text("6.25"), text("6 1/4"), text("5 p.a."))) == [
        D("0.0625"),
        D("0.0625"),
        D("0.05"),
    ]


MIXED = "is a plain number in a column that mixes percentages and fractions; it is read as "


def test_a_mixed_column_goes_by_size_and_says_so() -> None:
    found = column(*plain("6.25", "0.0625", "1", "0.29"))
    assert outcome(found) == [D("0.0625"), D("0.0625"), D("0.01"), D("0.29")]
    assert said(found) == [("note", MIXED + shown) for shown in ("6.25%", "6.25%", "1%", "29%")]


@pytest.mark.parametrize(
    ("value", "problem"),
    [("0.5", "could be 0.5% or 50%"), ("0.3", "could be 0.3% or 30%"), ("-0.5", "could be -0.5% or -50%")],
)
def test_a_mixed_column_asks_for_what_lies_between(value: str, problem: str) -> None:
    assert outcome(column(*plain("6.25", value)))[1] == problem


@pytest.mark.parametrize(
    ("value", "fits", "rate", "remark"),
    [
        (
            "0.5",
            (True, False),
            "0.005",
            ("note", "is a plain number, read as 0.5%; confirmed by the payment that the note gives"),
        ),
        (
            "0.25",
            (False, True),
            "0.25",
            ("note", "is a plain number, read as 25%; confirmed by the payment that the note gives"),
        ),
        (
            "0.25",
            (True, False),
            "0.0025",
            ("warning", "is a plain number, read as 0.25%, because only that gives the note's payment"),
        ),
        ("0.25", (True, True), "0.25", ("note", MIXED + "25%")),
    ],
)
def test_the_payment_confirms_a_reading(
    value: str, fits: tuple[bool, bool], rate: str, remark: tuple[str, str]
) -> None:
    found = column(number("6.25"), number(value), fits=fits)
    assert outcome(found)[1] == D(rate)
    assert said(found)[-1] == remark


@pytest.mark.parametrize(
    ("stored", "doubt"),
    [
        ("-0.005", "is -0.5%, which is below 0"),
        ("0.3601", "is 36.01%, which is above 36%"),
        ("10", "is 1000%, which is above 36%"),
    ],
)
def test_doubtful_rates_are_warnings(stored: str, doubt: str) -> None:
    found = column(percent(stored))
    assert outcome(found) == [D(stored)]
    assert said(found) == [("warning", doubt)]


def test_36_percent_is_not_doubtful() -> None:
    assert said(column(percent("0.36"))) == []


def test_a_fault_leaves_the_other_rates_alone() -> None:
    assert outcome(column(text("soon"), number("6"))) == ["is not a rate", D("0.06")]
