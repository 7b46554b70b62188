"""Single published figures of one loan: payments after a rate change, balloons, totals, odd first periods.

Rate changes and balloons are those of Regulation Z and its commentary; odd first periods those of the
Treasury's bond formulas and of a toolbox's documentation.
"""

from typing import Any

import pytest

from published.helpers import Figures, differences, schedule
from published.printed import records

Record = dict[str, Any]
FIGURES: list[Record] = records("figures.json")


@pytest.mark.parametrize("case", FIGURES, ids=lambda case: str(case["id"]))
def test_published_figures(case: Record) -> None:
    found = Figures(schedule(case["terms"], case["rounding"]))
    expected = [(line["figure"], line["at"], line["value"]) for line in case["expect"]]
    assert differences(found, expected) == []
