"""Published date schedules: unadjusted dates, month-ends, and periods counted from a fixed date."""

from datetime import date
from typing import Any

import pytest

from published.printed import records, said
from tenorbook.basis.conventions import Frequency, MonthEnd
from tenorbook.calendar.due_dates import DueDates

Case = dict[str, Any]
CASES: list[Case] = records("due_dates.json")
MAKE = {"first payment": DueDates.of, "funding": DueDates.after}


def _due(case: Case) -> DueDates:
    frequency, month_end = said(Frequency, case["frequency"]), said(MonthEnd, case["month_end"])
    return MAKE[case["counted_from"]](date.fromisoformat(case["anchor"]), frequency, month_end)


@pytest.mark.parametrize("case", CASES, ids=lambda case: str(case["id"]))
def test_published_dates(case: Case) -> None:
    make = MAKE[case["counted_from"]]
    due = make(
        date.fromisoformat(case["anchor"]),
        said(Frequency, case["frequency"]),
        said(MonthEnd, case["month_end"]),
    )
    expected = [date.fromisoformat(text) for text in case["dates"]]
    first = case.get("first_number", 1)
    assert [due[number] for number in range(first, first + len(expected))] == expected


@pytest.mark.parametrize("case", CASES, ids=lambda case: str(case["id"]))
def test_each_date_has_its_own_number(case: Case) -> None:
    """A published date is found again, and the day before it belongs to the period before."""
    make = MAKE[case["counted_from"]]
    due = make(
        date.fromisoformat(case["anchor"]),
        said(Frequency, case["frequency"]),
        said(MonthEnd, case["month_end"]),
    )
    first = case.get("first_number", 1)
    for number, text in enumerate(case["dates"], first):
        day = date.fromisoformat(text)
        assert due.number_on_or_before(day) == number
        assert due.number_on_or_before(date.fromordinal(day.toordinal() - 1)) == number - 1
