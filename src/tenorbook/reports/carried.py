"""Unpaid interest that is carried without interest: what accrued, what was paid, what is left over."""

from dataclasses import dataclass

from tenorbook.basis.conventions import RowKind
from tenorbook.basis.money import to_text
from tenorbook.reports.force import Force
from tenorbook.reports.interest_formula import InterestFormulas
from tenorbook.schedule.ledger import Schedule


@dataclass(frozen=True, slots=True)
class Carried:
    """Two columns beside the interest paid, and the formulas of all three.

    Attributes:
        accrued: interest that became due in each row.
        accrued_formulas: row -> formula.
        left: unpaid after each row.
        interest_formulas: row -> formula of the interest paid.
    """

    accrued: list[int]
    accrued_formulas: dict[int, str]
    left: list[int]
    interest_formulas: dict[int, str]


def carried_interest(schedule: Schedule, interest: InterestFormulas, force: Force) -> Carried | None:
    """The columns of a loan whose payments did not always cover the interest; `None` for any other."""
    if not any(schedule.carried.values()):
        return None
    found = Carried([], {}, [], {})
    for row in range(len(schedule)):
        _add_row(found, row, schedule, interest, force)
    return found


def _add_row(found: Carried, row: int, schedule: Schedule, interest: InterestFormulas, force: Force) -> None:
    before = found.left[-1] if found.left else 0
    paid = schedule.interest[row]
    text, came_to = interest.of_items(row)
    if schedule.kind[row] is RowKind.EXTRA:
        from_before = min(before, paid)
        found.accrued.append(paid - from_before)
        if paid:
            found.accrued_formulas[row] = f"ROUND([interest]-MIN([carried<],[interest]),{schedule.digits})"
            found.interest_formulas[row] = _bounded(f"{text}+[carried<]", came_to + before, paid, schedule)
    else:
        earlier = dict.fromkeys(schedule.paid_before.get(row, ()))
        found.accrued.append(came_to - sum(found.accrued[other] for other in earlier))
        less = "".join(f"-[accrued@{other}]" for other in earlier)
        if text:
            found.accrued_formulas[row] = f"ROUND({text}{less},{schedule.digits})" if less else text
        if found.accrued[-1] or before:
            found.interest_formulas[row] = _paid(row, found.accrued[-1] + before, schedule, force)
    found.left.append(schedule.carried.get(row, 0))


def _paid(row: int, due: int, schedule: Schedule, force: Force) -> str:
    """All that is due, or as much as the payment covers."""
    all_due = f"ROUND([accrued]+[carried<],{schedule.digits})" if row else "[accrued]"
    instalment, paid = force.instalment(row), schedule.interest[row]
    if paid == due:
        return all_due
    if instalment is not None and paid == instalment[0]:
        return f"MIN({instalment[1]},{all_due})"
    return f"MIN({to_text(paid, schedule.digits)},{all_due})"


def _bounded(text: str, due: int, paid: int, schedule: Schedule) -> str:
    """Interest that an extra payment takes, no more than the payment itself."""
    whole = f"ROUND({text},{schedule.digits})"
    return whole if paid == due else f"MIN({to_text(paid, schedule.digits)},{whole})"
