"""Where a loan stands on the as-of date, and the checks of its sheet: live formulas on the dated table."""

from datetime import date

from tenorbook.reports.loan_table import FIRST_SERIAL, LoanTable
from tenorbook.reports.result import LoanResult
from tenorbook.reports.words import day
from tenorbook.schedule.ledger import Schedule
from tenorbook.tables.sheet import Check, Checks, Entry
from tenorbook.tables.table import Role

CHECKS = "checks"
"""Name of the cell that says whether all checks of a sheet pass."""

BALANCE, ACCRUED, WITHIN, AFTER = "balance", "accrued_interest", "due_within_12_months", "due_after_12_months"
"""Names of the cells with the loan's figures on the as-of date."""


def falling_due(after: str, until: str, sheet: str = "", *, extras: bool) -> str:
    """A formula for the principal of a loan's table that falls due in a stretch of time.

    Args:
        after: the day before its first, as a formula writes it; empty: from the beginning.
        until: its last day; empty: to the end.
        sheet: of the loan, as a formula spells it with its mark: `'MP-01'!`; empty: the formula's own.
        extras: whether the table has a column of extra principal.
    """
    bounds = f',{sheet}dates,">"&{after}' if after else ""
    bounds += f',{sheet}dates,"<="&{until}' if until else ""
    columns = ("principals", "extras") if extras else ("principals",)
    return "+".join(f"SUMIFS({sheet}{column}{bounds})" for column in columns)


class Standing:
    """Figures on the as-of date, and checks.

    Args:
        result: of the loan; its terms and schedule are there.
        made: its table.
    """

    def __init__(self, result: LoanResult, made: LoanTable) -> None:
        schedule = result.schedule
        if schedule is None:
            raise ValueError(f"loan {result.loan.loan_id} has no schedule")
        self._schedule: Schedule = schedule
        self._position = result.position
        self._extras = any(schedule.extra)
        self._draws = any(schedule.draw[1:])
        self._charges = any(schedule.charges)
        as_of = result.position.as_of if result.position else date.min
        self._live = schedule.date[0] >= FIRST_SERIAL and as_of >= schedule.date[0]

    def title(self) -> str:
        """The heading of the figures."""
        return f"On {day(self._position.as_of)}" if self._position else "Position"

    def entries(self) -> list[Entry]:
        """The as-of date, and the balance, accrued interest and maturities on it."""
        position = self._position
        if position is None:
            return []
        digits = self._schedule.digits
        within = falling_due("as_of", "EDATE(as_of,12)", extras=self._extras)
        after = falling_due("EDATE(as_of,12)", "", extras=self._extras) + self._less_later_draws()
        balance = f"{self._advanced()}-({falling_due('', 'as_of', extras=self._extras)})"
        return [
            Entry(label="As-of date", value=position.as_of, role=Role.DATE, name="as_of"),
            self._money("Balance", position.balance, BALANCE, f"ROUND({balance},{digits})"),
            self._money("Accrued interest", position.accrued_interest, ACCRUED, ""),
            self._money("Due within a year", position.due_within_12_months, WITHIN, _round(within, digits)),
            self._money("Due after a year", position.due_after_12_months, AFTER, _round(after, digits)),
        ]

    def _advanced(self) -> str:
        return 'SUMIFS(draws,dates,"<="&as_of)' if self._draws else "loan_principal"

    def _money(self, label: str, units: int, name: str, formula: str) -> Entry:
        schedule = self._schedule
        return Entry(
            label=label,
            value=units,
            role=Role.BALANCE,
            digits=schedule.digits,
            shown_digits=schedule.terms.currency_digits,
            name=name,
            formula=formula if self._live and formula else None,
        )

    def checks(self) -> Checks:
        """Differences that must be nothing."""
        advanced = "[draw:total]" if self._draws else "loan_principal"
        extra = "-[extra:total]" if self._extras else ""
        charges = "-[charges:total]" if self._charges else ""
        found = [
            self._check("Principal advanced less principal repaid", f"{advanced}-[principal:total]{extra}"),
            self._check("Balance after the last row", "[closing:last]"),
            self._check(
                "Payments less the interest, principal, extra principal and charges in them"
                if extra or charges
                else "Payments less the interest and principal in them",
                f"[payment:total]-[interest:total]-[principal:total]{extra}{charges}",
            ),
        ]
        if self._live and self._position:
            text = f"Balance on {day(self._position.as_of)} less what falls due within and after 12 months"
            found.append(self._check(text, f"{BALANCE}-{WITHIN}-{AFTER}"))
        return Checks("Checks", tuple(found), CHECKS, 0, 5)

    def _less_later_draws(self) -> str:
        """What is advanced after the as-of date is repaid after it, and no part of the balance."""
        return '-SUMIFS(draws,dates,">"&as_of)' if self._draws else ""

    def _check(self, label: str, formula: str) -> Check:
        schedule = self._schedule
        return Check(
            label=label,
            formula=_round(formula, schedule.digits),
            digits=schedule.digits,
            shown_digits=schedule.terms.currency_digits,
        )


def _round(formula: str, digits: int) -> str:
    return f"ROUND({formula},{digits})"
