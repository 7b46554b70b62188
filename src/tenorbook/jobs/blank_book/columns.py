"""The columns of an empty book, from their table `columns.toml`."""

import tomllib
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from enum import Enum
from functools import cache
from importlib.resources import files
from typing import Any

from tenorbook.basis import conventions
from tenorbook.terms.book import DayOrder, DecimalMark

_CONVENTIONS: Mapping[str, type[Enum]] = {
    "Side": conventions.Side,
    "Frequency": conventions.Frequency,
    "Every": conventions.Frequency,
    "Timing": conventions.Timing,
    "Repayment": conventions.Repayment,
    "Day count": conventions.DayCount,
    "First period": conventions.FirstPeriod,
    "Long first period": conventions.LongFirst,
    "Unpaid interest": conventions.UnpaidInterest,
    "Payment basis": conventions.PaymentBasis,
    "Payment rounding": conventions.PaymentRounding,
    "Interest rounding": conventions.InterestRounding,
    "Month-end": conventions.MonthEnd,
    "Effect": conventions.ExtraEffect,
    "Applies to": conventions.AppliesTo,
    "Payment change": conventions.PaymentChange,
    "Day order": DayOrder,
    "Decimal mark": DecimalMark,
}


@dataclass(frozen=True, slots=True, kw_only=True)
class Column:
    """One column, or one setting.

    Attributes:
        header: as the book format spells it.
        kind: decides format and width.
        takes: what it takes, a sentence.
        blank: what a blank cell means.
        group: heading above the first column of several that belong together.
        choice: the convention whose words drop down.
        width: in characters; 0: by kind.
        sample: what the sample row holds.
    """

    header: str
    kind: str
    takes: str
    blank: str
    group: str = ""
    choice: str = ""
    width: int = 0
    sample: Any = None

    @property
    def words(self) -> tuple[str, ...]:
        """The words that drop down; none for a column that takes no word."""
        if self.choice == "Period-end day":
            return ("counted", "not counted")
        words = tuple(str(member.value) for member in _CONVENTIONS[self.choice]) if self.choice else ()
        return tuple(word for word in words if self.choice != "Every" or word != "at maturity")


@dataclass(frozen=True, slots=True, kw_only=True)
class SheetPlan:
    """One sheet of an empty book.

    Attributes:
        name: of the sheet.
        title: above the table.
        hint: under the title.
        columns: from left to right.
    """

    name: str
    title: str
    hint: str
    columns: Sequence[Column]


@cache
def plans() -> tuple[SheetPlan, ...]:
    """The sheets with a table, in order."""
    return tuple(
        SheetPlan(
            name=sheet["name"],
            title=sheet["title"],
            hint=sheet["hint"],
            columns=tuple(Column(**column) for column in sheet["column"]),
        )
        for sheet in _data()["sheet"]
    )


@cache
def settings() -> tuple[Column, ...]:
    """The names of the sheet Settings, in order."""
    return tuple(Column(header=each.pop("name"), **each) for each in map(dict, _data()["setting"]))


def sample_hint() -> str:
    """What is said of the sample rows."""
    return str(_data()["sample_hint"])


@cache
def _data() -> dict[str, Any]:
    return tomllib.loads(files("tenorbook.jobs.blank_book").joinpath("columns.toml").read_text("utf-8"))
