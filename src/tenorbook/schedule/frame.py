"""A schedule as a pandas frame, for people who go on from there in Python."""

from decimal import Decimal
from typing import TYPE_CHECKING, Any

from tenorbook.basis.money import to_decimal

if TYPE_CHECKING:
    import pandas as pd

    from tenorbook.schedule.ledger import Schedule

AMOUNTS = {
    "opening_balance": "opening",
    "interest": "interest",
    "principal": "principal",
    "extra_principal": "extra",
    "charges": "charges",
    "payment": "payment",
    "closing_balance": "closing",
}
"""Column of the frame -> column of the schedule."""


def to_frame(schedule: "Schedule", exact: bool = False) -> "pd.DataFrame":
    """The rows of a schedule under the column names of `schedules.csv`; see `Schedule.frame`."""
    import pandas as pd

    def amounts(units: Any) -> Any:
        decimals = [to_decimal(unit, schedule.digits) for unit in units]
        return decimals if exact else pd.Series(decimals, dtype="float64")

    def rates(values: Any) -> Any:
        return [Decimal(value) for value in values] if exact else pd.Series(list(values), dtype="float64")

    columns: dict[str, Any] = {
        "row": range(len(schedule)),
        "kind": [str(kind) for kind in schedule.kind],
        "date": pd.to_datetime(list(schedule.date)),
        "days": list(schedule.days),
        "annual_rate": rates(schedule.annual_rate),
    }
    columns |= {name: amounts(getattr(schedule, source)) for name, source in AMOUNTS.items()}
    columns |= {"due_date": pd.to_datetime(list(schedule.due_date)), "draw": amounts(schedule.draw)}
    return pd.DataFrame(columns)
