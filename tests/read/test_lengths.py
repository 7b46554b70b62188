"""Terms: a number of payments or a duration."""

import pytest

from read.cells import TRUE, number, percent, text
from tenorbook.read.files.grid import Cell
from tenorbook.read.values.lengths import length
from tenorbook.read.values.reading import Rules, Unreadable
from tenorbook.terms.loan import Length, LengthUnit

PAYMENTS, MONTHS, WEEKS, DAYS = LengthUnit.PAYMENTS, LengthUnit.MONTHS, LengthUnit.WEEKS, LengthUnit.DAYS


@pytest.mark.parametrize(
    ("cell", "rules", "count", "unit"),
    [
        (number("120"), Rules(), 120, PAYMENTS),
        (text("120"), Rules(), 120, PAYMENTS),
        (text("1,200"), Rules(), 1200, PAYMENTS),
        (text("10 payments"), Rules(), 10, PAYMENTS),
        (text("10 Pmts."), Rules(), 10, PAYMENTS),
        (text("30 years"), Rules(), 360, MONTHS),
        (text("30yrs"), Rules(), 360, MONTHS),
        (text("1 year"), Rules(), 12, MONTHS),
        (text("30-year"), Rules(), 360, MONTHS),
        (text("2.5 years"), Rules(), 30, MONTHS),
        (text("84 months"), Rules(), 84, MONTHS),
        (text("84 mo."), Rules(), 84, MONTHS),
        (text("7y 6m"), Rules(), 90, MONTHS),
        (text("8 quarters"), Rules(), 24, MONTHS),
        (text("7 years and 6 months"), Rules(), 90, MONTHS),
        (text("7 years, 6 months"), Rules(), 90, MONTHS),
        (text("7 years 0 months"), Rules(), 84, MONTHS),
        (text("26 weeks"), Rules(), 26, WEEKS),
        (text("90 days"), Rules(), 90, DAYS),
        (number("30", '0" years"'), Rules(), 360, MONTHS),
        (number("30"), Rules(time="years"), 360, MONTHS),
        (number("84"), Rules(time="months"), 84, MONTHS),
        (text("84"), Rules(time="months"), 84, MONTHS),
        (text("84 months"), Rules(time="years"), 84, MONTHS),
        (number("84"), Rules(time="payments"), 84, PAYMENTS),
    ],
)
def test_lengths(cell: Cell, rules: Rules, count: int, unit: LengthUnit) -> None:
    assert length(cell, rules).value == Length(count, unit)


def test_a_unit_from_the_header_or_the_format_is_noted() -> None:
    (by_header,) = length(number("30"), Rules(time="years")).remarks
    (by_format,) = length(number("30", '0" years"'), Rules()).remarks
    assert by_header.problem == "is a column of plain numbers, read as years, as the header says"
    assert (
        by_format.problem == "is a column of plain numbers, read as years, as the cell's number format says"
    )


@pytest.mark.parametrize(
    ("cell", "problem"),
    [
        (number("0"), "is 0"),
        (text("0 years"), "is 0"),
        (text("0y 0m"), "is 0"),
        (number("-12"), "is negative"),
        (number("12.5"), "is not a whole number of payments"),
        (text("0.3 years"), "is not a whole number of months"),
        (text("2 years 3 weeks"), "mixes units that do not add up"),
        (text("10 weeks 3 days"), "mixes units that do not add up"),
        (text("3 fortnights"), "is not a length of time"),
        (text("about 3 years"), "is not a length of time"),
        (text("years"), "is not a length of time"),
        (percent("0.1"), "is not a length of time"),
        (TRUE, "is not a length of time"),
    ],
)
def test_what_is_no_length(cell: Cell, problem: str) -> None:
    with pytest.raises(Unreadable) as refused:
        length(cell, Rules())
    assert refused.value.problem == problem
    assert refused.value.remedy == "enter a number of payments, or a duration such as 30 years or 84 months"
