"""Each law that a schedule asserts of itself is really enforced: break one column, and it must object."""

from collections.abc import Callable
from dataclasses import replace
from datetime import date
from decimal import Decimal
from typing import Any

import pytest

from engine.support import built
from tenorbook.basis.conventions import RowKind
from tenorbook.basis.problem import InvariantError
from tenorbook.schedule import build as door
from tenorbook.schedule.invariants import assert_invariants
from tenorbook.schedule.ledger import Schedule
from tenorbook.terms.loan import ExtraPayment

LAWS: dict[str, Callable[[Schedule], dict[str, Any]]] = {
    "a balance does not roll forward": lambda good: {"closing": _moved(good.closing, 2, 1)},
    "a row does not open where the row before closed": lambda good: {
        "opening": _moved(good.opening, 2, 1),
        "closing": _moved(good.closing, 2, 1),
    },
    "principal repaid is not principal advanced": lambda good: {"draw": _moved(good.draw, 0, 1)},
    "the last balance is not zero": lambda good: {"closing": _moved(good.closing, -1, 1)},
    "a payment is not the sum of its parts": lambda good: {"payment": _moved(good.payment, 1, -1)},
    "the rows are not in order of date": lambda good: {"date": [*good.date[:-1], date(2024, 1, 2)]},
    "two rows of one kind fall on one date": lambda good: {"date": [*good.date[:-1], good.date[-2]]},
}
"""What each law says when it is broken, and a fault that breaks it."""

OTHER_FAULTS: list[tuple[str, Callable[[Schedule], dict[str, Any]]]] = [
    ("a payment is not the sum of its parts", lambda good: {"interest": _moved(good.interest, 1, 1)}),
    ("a payment is not the sum of its parts", lambda good: {"charges": _moved(good.charges, 3, 500)}),
    ("a payment is not the sum of its parts", lambda good: {"extra": _moved(good.extra, 1, 1)}),
    ("a balance does not roll forward", lambda good: {"principal": _moved(good.principal, 1, 1)}),
    ("a balance does not roll forward", lambda good: {"extra": _moved(good.extra, 2, -1)}),
    ("principal repaid is not principal advanced", lambda good: {"principal": _moved(good.principal, 1, 1)}),
    ("a row does not open where the row before closed", lambda good: {"opening": _moved(good.opening, 0, 1)}),
]


def _moved(column: Any, row: int, by: int) -> list[Any]:
    changed = list(column)
    changed[row] += by
    return changed


def good() -> Schedule:
    """Four payments and an extra between the second and the third."""
    extra = ExtraPayment(date=date(2024, 3, 11), amount=Decimal(1000))
    return built(extra_payments=(extra,))


def test_a_good_schedule_passes() -> None:
    schedule = good()
    assert [str(kind) for kind in schedule.kind] == [
        "funding",
        "payment",
        "payment",
        "extra",
        "payment",
        "payment",
    ]
    assert_invariants(schedule)


@pytest.mark.parametrize(
    ("law", "fault"),
    [*LAWS.items(), *OTHER_FAULTS],
)
def test_a_broken_law_is_named(law: str, fault: Callable[[Schedule], dict[str, Any]]) -> None:
    schedule = good()
    with pytest.raises(InvariantError) as raised:
        assert_invariants(replace(schedule, **fault(schedule)))
    problem = raised.value.problems[0]
    assert law in problem.problem
    assert problem.loan_id == "L1"
    assert problem.remedy == "please report this with the loan's terms: it is a fault of the program"


def test_two_extras_on_one_day_share_a_row_so_kinds_never_collide() -> None:
    extra = ExtraPayment(date=date(2024, 3, 11), amount=Decimal(500))
    assert built(extra_payments=(extra, extra)).kind.count(RowKind.EXTRA) == 1


def test_the_engine_asks_on_every_run(monkeypatch: pytest.MonkeyPatch) -> None:
    asked: list[Schedule] = []
    monkeypatch.setattr(door, "assert_invariants", asked.append)
    schedule = good()
    assert len(asked) == 1
    assert asked[0].closing == schedule.closing
