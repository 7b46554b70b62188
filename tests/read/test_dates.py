"""Dates: every way of writing one, its day or its message."""

from datetime import date

import pytest

from read.cells import TRUE, day, number, percent, text
from tenorbook.basis.problem import Severity
from tenorbook.read.files.grid import Cell
from tenorbook.read.files.serials import serial_date, text_day
from tenorbook.read.values.dates import day as read_day
from tenorbook.read.values.dates import month_and_day
from tenorbook.read.values.reading import Rules, Unreadable
from tenorbook.read.values.until import until
from tenorbook.terms.book import DayOrder

NONE, MONTH, DAY, YEAR = (
    Rules(),
    Rules(DayOrder.MONTH_FIRST),
    Rules(DayOrder.DAY_FIRST),
    Rules(DayOrder.YEAR_FIRST),
)
JAN_31 = date(2026, 1, 31)
ENTER = "enter a date, such as 2026-01-31"


@pytest.mark.parametrize("rules", [NONE, MONTH, DAY, YEAR])
@pytest.mark.parametrize(
    "written",
    [
        "2026-01-31",
        "2026-1-31",
        "2026/01/31",
        "2026.01.31",
        "20260131",
        "2026-01-31T00:00:00",
        "2026-01-31 14:30",
        "31 Jan 2026",
        "31 January 2026",
        "31-Jan-2026",
        "31/Jan/2026",
        "31jan2026",
        "31st of January, 2026",
        "Jan 31, 2026",
        "JANUARY 31 2026",
        "Jan. 31st, 2026",
        " 31\xa0Jan\xa02026 ",
    ],
)
def test_texts_that_settle_themselves(written: str, rules: Rules) -> None:
    assert read_day(text(written), rules).value == JAN_31


@pytest.mark.parametrize(
    ("written", "rules", "found"),
    [
        ("03/04/2026", MONTH, date(2026, 3, 4)),
        ("03/04/2026", DAY, date(2026, 4, 3)),
        ("3-4-2026", MONTH, date(2026, 3, 4)),
        ("03.04.2026", DAY, date(2026, 4, 3)),
        ("03/04/2026 10:00 AM", DAY, date(2026, 4, 3)),
        ("31/01/2026", NONE, JAN_31),  # only one reading is a date
        ("01/31/2026", NONE, JAN_31),
        ("05/05/2026", NONE, date(2026, 5, 5)),  # both readings are the same
        ("29/02/2024", DAY, date(2024, 2, 29)),
    ],
)
def test_texts_in_the_day_order(written: str, rules: Rules, found: date) -> None:
    assert read_day(text(written), rules).value == found


@pytest.mark.parametrize(
    ("cell", "rules", "problem", "remedy"),
    [
        (
            text("03/04/2026"),
            NONE,
            "could be 2026-03-04 or 2026-04-03",
            "set Day order on the sheet Settings, or enter the date as 2026-01-31",
        ),
        (
            text("03/04/2026"),
            YEAR,
            "could be 2026-03-04 or 2026-04-03",
            "set Day order on the sheet Settings, or enter the date as 2026-01-31",
        ),
        (text("31/01/2026"), MONTH, "is no date when read month first, as Settings says", ENTER),
        (text("01/31/2026"), DAY, "is no date when read day first, as Settings says", ENTER),
        (text("30 Feb 2026"), NONE, "is not a day of the calendar", ENTER),
        (text("2026-02-30"), NONE, "is not a day of the calendar", ENTER),
        (text("30/02/2026"), DAY, "is not a day of the calendar", ENTER),
        (text("29 Feb 2026"), NONE, "is not a day of the calendar", ENTER),
        (text("2026-13-01"), NONE, "is not a day of the calendar", ENTER),
        (text("1/15/26"), MONTH, "has a year of two digits, which does not say its century", ENTER),
        (text("15-Jan-26"), NONE, "has a year of two digits, which does not say its century", ENTER),
        (text("March"), NONE, "is not a date", ENTER),
        (text("March 2026"), NONE, "is not a date", ENTER),
        (text("12/31"), MONTH, "is not a date", ENTER),
        (text("6.25"), NONE, "is not a date", ENTER),
        (text("31 Foo 2026"), NONE, "is not a date", ENTER),
        (text("31 Jan 2026 or so"), NONE, "is not a date", ENTER),
        (text("2026-01/31"), NONE, "is not a date", ENTER),
        (text("31 Jan 0026"), NONE, "is in the year 26", "look at the year"),
        (day(date(2926, 1, 1)), NONE, "is in the year 2926", "look at the year"),
        (number("6.25"), NONE, "is not a date", ENTER),
        (number("2026"), NONE, "is not a date", ENTER),
        (number("0"), NONE, "is not a date", ENTER),
        (percent("45000"), NONE, "is not a date", ENTER),
        (TRUE, NONE, "is not a date", ENTER),
    ],
)
def test_what_is_no_date(cell: Cell, rules: Rules, problem: str, remedy: str) -> None:
    with pytest.raises(Unreadable) as refused:
        read_day(cell, rules)
    assert (refused.value.problem, refused.value.remedy) == (problem, remedy)


def test_a_plain_number_is_a_date_only_with_a_word_about_it() -> None:
    serial = read_day(number("46053"), NONE)  # 2026-01-31 is day 46,053 from 1899-12-30
    assert (serial.value, [remark.severity for remark in serial.remarks]) == (JAN_31, [Severity.WARNING])
    digits = read_day(number("20260131"), NONE)
    assert (digits.value, [remark.severity for remark in digits.remarks]) == (JAN_31, [Severity.NOTE])


@pytest.mark.parametrize(
    ("stored", "from_1904", "found"),
    [
        ("46053", False, JAN_31),
        ("44591", True, JAN_31),  # 46,053 - 1,462
        ("46053.75", False, JAN_31),
        ("46052.999999994", False, JAN_31),  # midnight, as arithmetic leaves it
        ("61", False, date(1900, 3, 1)),
        ("60", False, None),  # 29 February 1900 never was
        ("0", False, None),
        ("0", True, None),
        ("-5", False, None),
        ("2958466", False, None),
        ("1e300", False, None),
        ("nan", False, None),
    ],
)
def test_serials(stored: str, from_1904: bool, found: date | None) -> None:
    assert serial_date(stored, from_1904=from_1904) == found


@pytest.mark.parametrize(
    ("stored", "found"),
    [("2026-01-31", JAN_31), ("2026-01-31T10:00:00", JAN_31), ("2026-02-30", None), ("31 Jan", None)],
)
def test_dates_in_a_files_own_notation(stored: str, found: date | None) -> None:
    assert text_day(stored) == found


@pytest.mark.parametrize(
    ("cell", "rules", "found"),
    [
        (day(date(2025, 6, 30)), NONE, (6, 30)),
        (text("31 Dec"), NONE, (12, 31)),
        (text("Dec 31"), NONE, (12, 31)),
        (text("June"), NONE, (6, 30)),
        (text("February"), NONE, (2, 28)),
        (text("December"), NONE, (12, 31)),
        (text("12/31"), NONE, (12, 31)),
        (text("06-30"), NONE, (6, 30)),
        (text("5/6"), DAY, (6, 5)),
        (text("30 June 2026"), NONE, (6, 30)),
    ],
)
def test_fiscal_year_ends(cell: Cell, rules: Rules, found: tuple[int, int]) -> None:
    assert month_and_day(cell, rules) == found


@pytest.mark.parametrize("written", ["5/6", "whenever", "31 Foo"])
def test_what_is_no_fiscal_year_end(written: str) -> None:
    with pytest.raises(Unreadable, match="is not one day of the year"):
        month_and_day(text(written), NONE)


@pytest.mark.parametrize(
    ("cell", "found"),
    [(number("12"), 12), (text("12"), 12), (day(JAN_31), JAN_31), (text("31 Jan 2026"), JAN_31)],
)
def test_until(cell: Cell, found: date | int) -> None:
    assert until(cell, NONE).value == found


@pytest.mark.parametrize("cell", [number("0"), number("46053"), number("1.5"), text("payoff")])
def test_what_is_no_until(cell: Cell) -> None:
    with pytest.raises(Unreadable):
        until(cell, NONE)
