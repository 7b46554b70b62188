"""Amounts and counts: every way of writing one, its value or its message."""

from decimal import Decimal

import pytest

from read.cells import TRUE, D, number, percent, text
from tenorbook.read.files.grid import Cell, exact, plain
from tenorbook.read.values.numbers import amount, at_least_zero, count, more_than_zero
from tenorbook.read.values.reading import Rules, Unreadable
from tenorbook.terms.book import DecimalMark

POINT, COMMA = Rules(), Rules(decimal_mark=DecimalMark.COMMA)


@pytest.mark.parametrize(
    ("written", "value"),
    [
        ("1234.50", "1234.50"),
        ("1,234.50", "1234.50"),
        ("$1,234.50", "1234.50"),
        ("$ 1,234.50", "1234.50"),
        ("-$1,234.50", "-1234.50"),
        ("$-42.55", "-42.55"),
        ("($1,234.50)", "-1234.50"),
        ("$(1,234.50)", "-1234.50"),
        ("(1,234.50)", "-1234.50"),
        ("( 1,234.50 )", "-1234.50"),
        ("1234.50-", "-1234.50"),
        ("1,234.50 -", "-1234.50"),
        ("\u22121234.50", "-1234.50"),
        ("+5", "5"),
        ("1\xa0234.50", "1234.50"),
        ("1\u202f234\u202f567", "1234567"),
        ("1\u2009234.5", "1234.5"),
        ("1'234.50", "1234.50"),
        ("1\u2019234\u2019567.50", "1234567.50"),
        ("USD 1,234.50", "1234.50"),
        ("usd1234.50", "1234.50"),
        ("1,234.50 USD", "1234.50"),
        ("1,234,567.89", "1234567.89"),
        ("12,34,567.89", "1234567.89"),
        (" 250000 ", "250000"),
        ("250000.", "250000"),
        (".5", "0.5"),
        ("-0", "0"),
        ("\uff11\uff12\uff13", "123"),
    ],
)
def test_text_amounts(written: str, value: str) -> None:
    assert amount(text(written), POINT).value == D(value)


@pytest.mark.parametrize(
    ("written", "value"),
    [
        ("1.234,50", "1234.50"),
        ("1 234,50 \u20ac", "1234.50"),
        ("1234,5-", "-1234.5"),
        ("1.234", "1234"),
        ("1,234", "1.234"),
    ],
)
def test_text_amounts_with_a_decimal_comma(written: str, value: str) -> None:
    assert amount(text(written), COMMA).value == D(value)


SETTINGS = "set Decimal mark to {} on the sheet Settings"


@pytest.mark.parametrize(
    ("cell", "rules", "problem", "remedy"),
    [
        (
            text("1234,50"),
            POINT,
            "is not a number with a decimal point",
            "write it as 1234.5, or " + SETTINGS.format("comma"),
        ),
        (
            text("1.234,50"),
            POINT,
            "is not a number with a decimal point",
            "write it as 1234.5, or " + SETTINGS.format("comma"),
        ),
        (
            text("1234.50"),
            COMMA,
            "is not a number with a decimal comma",
            "write it as 1234,5, or " + SETTINGS.format("point"),
        ),
        (text("12.3.4"), POINT, "is not a number", "enter digits only, such as 1234.50"),
        (text("1,23,45"), POINT, "is not a number", "enter digits only, such as 1234.50"),
        (text("1 234,567.00"), POINT, "is not a number", "enter digits only, such as 1234.50"),
        (text("--5"), POINT, "is not a number", "enter digits only, such as 1234.50"),
        (text("(5)-"), POINT, "is not a number", "enter digits only, such as 1234.50"),
        (text("1.2E+05"), POINT, "is not a number", "enter digits only, such as 1234.50"),
        (text("5%"), POINT, "is not a number", "enter digits only, such as 1234.50"),
        (text("$"), POINT, "is not a number", "enter digits only, such as 1234.50"),
        (text("none"), POINT, "is not a number", "enter digits only, such as 1234.50"),
        (TRUE, POINT, "is not an amount", "enter digits only, such as 1234.50"),
        (percent("0.05"), POINT, "is a percentage, not an amount", "enter digits only, such as 1234.50"),
    ],
)
def test_what_is_no_amount(cell: Cell, rules: Rules, problem: str, remedy: str) -> None:
    with pytest.raises(Unreadable) as refused:
        amount(cell, rules)
    assert (refused.value.problem, refused.value.remedy) == (problem, remedy)


@pytest.mark.parametrize(
    ("cell", "codes"),
    [
        (text("EUR 5"), {"EUR"}),
        (text("5 \u20ac"), {"EUR"}),
        (text("US$5"), {"USD"}),
        (text("C$5"), {"CAD"}),
        (text("5"), set()),
        (number("5", "[$\u20ac-407] #,##0.00"), {"EUR"}),
        (number("5", "[$CHF] #,##0.00"), {"CHF"}),
        (number("5", '"USD" #,##0.00'), {"USD"}),
        (number("5", "[$-409]#,##0.00"), set()),
        (number("5", '"$"#,##0.00'), set()),
        (number("5", "#,##0.00;[Red]-#,##0.00"), set()),
    ],
)
def test_currencies_that_a_cell_shows(cell: Cell, codes: set[str]) -> None:
    assert amount(cell, POINT).signs == codes


def test_a_dollar_may_be_any_dollar() -> None:
    signs = amount(text("$5"), POINT).signs
    assert {"USD", "CAD", "AUD"} <= signs
    assert "EUR" not in signs


@pytest.mark.parametrize(
    ("stored", "value"),
    [
        ("0.0625", "0.0625"),
        ("0.061500000000000006", "0.0615"),  # what 6.15 % is stored as
        ("0.30000000000000004", "0.3"),
        ("1234.5", "1234.5"),
        ("250000", "250000"),
        ("2.5E5", "250000"),
        ("1e-7", "0.0000001"),
        ("20.399999999999999", "20.4"),
        ("-0.0", "0"),
        ("1498.8759868321829", "1498.87598683218"),
    ],
)
def test_doubles_are_read_as_what_they_show(stored: str, value: str) -> None:
    found = exact(stored)
    assert found is not None
    assert plain(found) == value


@pytest.mark.parametrize("stored", ["nan", "inf", "1e999", "abc", ""])
def test_what_is_no_finite_number(stored: str) -> None:
    assert exact(stored) is None


@pytest.mark.parametrize("cell", [number("0"), number("-1"), text("(1)")])
def test_amounts_that_must_be_positive(cell: Cell) -> None:
    with pytest.raises(Unreadable, match=r"is 0|is negative"):
        more_than_zero("remedy")(cell, POINT)


def test_zero_may_stand_where_only_negatives_are_wrong() -> None:
    assert at_least_zero(number("0"), POINT).value == 0
    with pytest.raises(Unreadable, match="is negative"):
        at_least_zero(number("-0.01"), POINT)


@pytest.mark.parametrize(
    ("cell", "value"), [(number("12"), 12), (text("12"), 12), (text("1,200"), 1200), (number("0"), 0)]
)
def test_counts(cell: Cell, value: int) -> None:
    assert count(cell, POINT).value == value


@pytest.mark.parametrize("cell", [number("1.5"), number("-1"), percent("1"), TRUE])
def test_what_is_no_count(cell: Cell) -> None:
    with pytest.raises(Unreadable, match="is not a whole number"):
        count(cell, POINT)


def test_amounts_are_decimals() -> None:
    assert type(amount(number("0.1"), POINT).value) is Decimal
