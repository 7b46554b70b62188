"""Principal, extra principal and what is kept beside them, as formulas that follow the contract.

For each row the rule that made the figure is found by trying the few rules there are, exact figures
against exact figures; the formula written is the one of the rule that holds.
"""

from collections.abc import Collection
from dataclasses import dataclass, field

from tenorbook.basis.conventions import ExtraEffect, Repayment, RowKind
from tenorbook.basis.money import to_text
from tenorbook.reports.carried import Carried
from tenorbook.reports.force import Force
from tenorbook.schedule.ledger import Schedule


@dataclass(slots=True)
class Beside:
    """Running columns that only some loans have, and formulas for them.

    Attributes:
        ahead: what is paid ahead and not used up, after each row.
        ahead_formulas: row -> formula.
        reduced: rows whose payment is less for it.
    """

    ahead: list[int] = field(default_factory=list)
    ahead_formulas: dict[int, str | None] = field(default_factory=dict)
    reduced: set[int] = field(default_factory=set)


class PrincipalFormulas:
    """Writes the formulas for principal and extra principal of one schedule.

    Args:
        schedule: the schedule.
        force: the names of what is in force when.
        carried: the columns of interest carried unpaid, if the loan has them.
    """

    def __init__(self, schedule: Schedule, force: Force, carried: Carried | None) -> None:
        self._schedule = schedule
        self._force = force
        self._carried = carried
        self._digits = schedule.digits
        self._level = schedule.terms.repayment is Repayment.LEVEL_PAYMENT
        payments = [row for row, kind in enumerate(schedule.kind) if kind is RowKind.PAYMENT]
        only = min(schedule.terms.interest_only, len(payments))
        self._last_only_interest = payments[only - 1] if only else -1
        self._ahead = 0
        self.beside = Beside()
        self.unexplained: list[int] = []
        self._paying_ahead = any(e.effect is ExtraEffect.PAY_AHEAD for e in schedule.terms.extras)

    def of_plain_rows(self, odd_rows: Collection[int]) -> dict[int, str]:
        """The formulas of all payments that are the instalment in force, less the interest where it is level.

        Args:
            odd_rows: rows with odd-day interest, which are not plain.
        """
        found: dict[int, str] = {}
        if self._paying_ahead or self._carried is not None:
            return found
        schedule, amounts = self._schedule, self._force.amounts
        ends = [*(each.row for each in amounts[1:]), schedule.last_row]
        for each, end in zip(amounts, ends, strict=False):
            text = self._round(f"{each.name}-[interest]") if self._level else each.name
            rows = range(max(each.row, self._last_only_interest + 1), min(end, schedule.last_row))
            for row in rows:
                part = schedule.interest[row] if self._level else 0
                if schedule.principal[row] == each.amount - part and schedule.kind[row] is RowKind.PAYMENT:
                    found[row] = text
        for row in odd_rows:
            found.pop(row, None)
        return found

    def principal(self, row: int, odd: tuple[str, int]) -> str | None:
        """The formula for the principal of a row; `None` for none.

        Args:
            row: of the schedule.
            odd: formula and amount of the odd-day interest in the row, paid on top of a level payment.
        """
        schedule = self._schedule
        amount, kind = schedule.principal[row], schedule.kind[row]
        used = self._use_ahead(row, odd)
        if kind is RowKind.CAPITALIZE:
            formula: str | None = "-[interest]"
        elif row == schedule.last_row and amount and amount == schedule.opening[row]:
            formula = "[opening]"
        elif kind is RowKind.PAYMENT:
            formula = self._scheduled(row, amount, used, odd)
        elif amount and amount == schedule.opening[row]:
            formula = "[opening]"
        else:
            formula = self._otherwise(row, amount) if amount else None
        self._note_ahead(row, used, odd)
        return formula

    def _scheduled(self, row: int, amount: int, used: int, odd: tuple[str, int]) -> str | None:
        """A scheduled payment that does not clear the balance on the last row."""
        due, _, base = self._due(row, odd)
        interest = self._schedule.interest[row] if self._level else self._interest_owed(row)[0]
        if amount == due - used - interest and (base or used):
            less = f"-MIN([ahead<],{self._principal_due(row, odd)[1]})" if used else ""
            after = "-[interest]" if self._level and base else ""
            return self._round(base + less + after) if less or after else base
        if amount == self._schedule.opening[row] and amount:
            return "[opening]"
        return self._otherwise(row, amount) if amount else None

    def _due(self, row: int, odd: tuple[str, int]) -> tuple[int, str, str]:
        """What falls due by the instalment in force: the figure, its formula, and the instalment's part."""
        instalment = self._force.instalment(row)
        if instalment is None or self._only_interest(row):
            return *self._interest_owed(row), ""
        amount, name = instalment
        if not self._level:
            interest, interest_text = self._interest_owed(row)
            return amount + interest, f"{name}+{interest_text}", name
        text = f"{name}+{odd[0]}" if odd[0] else name
        return amount + odd[1], text, text

    def _interest_owed(self, row: int) -> tuple[int, str]:
        """The interest that a payment should cover: what is posted, or with what is carried unpaid."""
        if self._carried is None:
            return self._schedule.interest[row], "[interest]"
        before = self._carried.left[row - 1] if row else 0
        return self._carried.accrued[row] + before, "[accrued]+[carried<]" if row else "[accrued]"

    def _only_interest(self, row: int) -> bool:
        """Whether a payment is one of the interest-only ones at the start."""
        return row <= self._last_only_interest

    def _use_ahead(self, row: int, odd: tuple[str, int]) -> int:
        """How much of the payment due is taken from what was paid ahead."""
        schedule = self._schedule
        if schedule.kind[row] is not RowKind.PAYMENT or not self._ahead:
            return 0
        if schedule.principal[row] == schedule.opening[row]:
            return 0
        return min(self._ahead, max(0, self._principal_due(row, odd)[0]))

    def _principal_due(self, row: int, odd: tuple[str, int]) -> tuple[int, str]:
        """The principal in the payment due, of which what was paid ahead is taken: figure, formula."""
        due, text, base = self._due(row, odd)
        interest, interest_text = self._interest_owed(row)
        owed = f"({interest_text})" if "+" in interest_text else interest_text
        return due - interest, f"{text}-{owed}" if self._level else base

    def _note_ahead(self, row: int, used: int, odd: tuple[str, int]) -> None:
        """Keeps the running column of what is paid ahead."""
        if not self._paying_ahead:
            return
        if used:
            self.beside.reduced.add(row)
        added, added_text = self._paid_ahead(row)
        self._ahead += added - used
        self.beside.ahead.append(self._ahead)
        text = "[ahead<]" if row else ""
        text += f"-MIN([ahead<],{self._principal_due(row, odd)[1]})" if used else ""
        text += f"+{added_text}" if added else ""
        self.beside.ahead_formulas[row] = self._round(text.removeprefix("+")) if text else None

    def _paid_ahead(self, row: int) -> tuple[int, str]:
        """How much of a row's extra payment pays ahead, and how to say so."""
        schedule = self._schedule
        extras = [extra for extra in schedule.terms.extras if extra.date == schedule.date[row]]
        ahead = sum(extra.amount for extra in extras if extra.effect is ExtraEffect.PAY_AHEAD)
        added = min(ahead, schedule.extra[row])
        return added, "[extra]" if added == schedule.extra[row] else self._units(added)

    def _otherwise(self, row: int, amount: int) -> str:
        """What the balloon leaves, stated or not; failing that, what was paid less its interest."""
        schedule = self._schedule
        balloon = schedule.terms.balloon or 0
        if amount == schedule.opening[row] - balloon:
            return self._round("[opening]-balloon") if balloon else "[opening]"
        if row < schedule.last_row and schedule.kind[row + 1] is RowKind.BALLOON:
            return self._round(f"[opening]-{self._units(schedule.closing[row])}")
        self.unexplained.append(row)
        return self._round(f"{self._units(amount + schedule.interest[row])}-[interest]")

    def extra(self, row: int) -> str | None:
        """The formula for extra principal; `None` where it is an input."""
        schedule = self._schedule
        amount = schedule.extra[row]
        if not amount:
            return None
        if amount == schedule.opening[row] - schedule.principal[row]:
            return self._round("[opening]-[principal]") if schedule.principal[row] else "[opening]"
        terms = schedule.terms
        each = terms.each_payment if schedule.kind[row] is RowKind.PAYMENT else 0
        if each and terms.each_from <= schedule.date[row] <= terms.each_until and amount >= each:
            more = f"+{self._units(amount - each)}" if amount > each else ""
            return self._round(f"extra_each_payment{more}") if more else "extra_each_payment"
        if schedule.interest[row] and schedule.kind[row] is RowKind.EXTRA:
            return self._round(f"{self._units(amount + schedule.interest[row])}-[interest]")
        return None

    def _round(self, text: str) -> str:
        return f"ROUND({text},{self._digits})"

    def _units(self, amount: int) -> str:
        return to_text(amount, self._digits)
