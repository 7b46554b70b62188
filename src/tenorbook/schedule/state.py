"""Where a loan stands while its schedule is being walked, and the rows written so far."""

import datetime as dt
from dataclasses import dataclass
from decimal import Decimal

from tenorbook.basis.conventions import Repayment, RowKind, UnpaidInterest
from tenorbook.basis.problem import Place, note, warning
from tenorbook.schedule.accrual import Accrual
from tenorbook.schedule.columns import Columns
from tenorbook.schedule.ledger import Instalment, Part
from tenorbook.schedule.sizing import Plan, Sizer
from tenorbook.schedule.steps import Steps
from tenorbook.terms.terms import Extra, Repricing, Terms

_AMORTIZING = (Repayment.LEVEL_PAYMENT, Repayment.LEVEL_PRINCIPAL)


@dataclass(slots=True)
class State:
    """The running figures of one loan; amounts in the ledger's unit.

    Attributes:
        steps: dated steps.
        terms: resolved terms.
        plan: number of payments and balloon that sizing aims at.
        sizer: sizes payments on the steps.
        columns: the rows so far.
        accrual: interest run and not posted.
        rate: annual rate in force from now on.
        rate_before: annual rate in force over the days up to now, which the rows of today show.
        extras: extra payments still to come, the next one last.
        repricings: rate changes still to come, the next one last.
        balance: principal owed.
        instalment: the scheduled amount in force.
        paid: scheduled payments made.
        at: boundary reached.
        ahead: paid ahead, still to reduce instalments.
        carried: unpaid interest that bears none.
        pending: a payment to set (int), or the reason to re-amortize (text); `None`: neither.
        capitalized: whether the odd days have been added to principal.
        resized: whether the payment has been re-amortized.
        reduced: whether an extra has put the balance below the contract's.
        balloon_next: whether only the balloon is left (payments in advance).
        left_at_end: principal that the regular payments did not reach.
        over: whether the last row is written.
    """

    steps: Steps
    terms: Terms
    plan: Plan
    sizer: Sizer
    columns: Columns
    accrual: Accrual
    rate: Decimal
    rate_before: Decimal
    extras: list[Extra]
    repricings: list[Repricing]
    balance: int = 0
    instalment: int = 0
    paid: int = 0
    at: int = 0
    ahead: int = 0
    carried: int = 0
    pending: int | str | None = None
    capitalized: bool = False
    resized: bool = False
    reduced: bool = False
    balloon_next: bool = False
    left_at_end: int = 0
    over: bool = False

    @classmethod
    def before_funding(cls, steps: Steps, plan: Plan) -> "State":
        """Nothing has happened yet."""
        terms = steps.terms
        return cls(
            steps=steps,
            terms=terms,
            plan=plan,
            sizer=Sizer(steps, plan),
            columns=Columns(),
            accrual=Accrual(steps, terms.interest_rounding),
            rate=terms.rate,
            rate_before=terms.rate,
            extras=list(reversed(terms.extras)),
            repricings=list(reversed(terms.repricings)),
        )

    def add_row(
        self,
        kind: RowKind,
        day: dt.date,
        *,
        interest: int = 0,
        principal: int = 0,
        extra: int = 0,
        draw: int = 0,
        parts: tuple[Part, ...] = (),
        paid_before: tuple[int, ...] | None = None,
    ) -> None:
        """Writes a row and moves the balance; see `Columns.add`.

        By default interest was paid before in the rows that the accrual remembers.
        """
        if paid_before is None:
            paid_before = tuple(self.accrual.paid_rows)
        self.balance = self.columns.add(
            kind,
            day,
            self.rate_before,
            opening=self.balance,
            interest=interest,
            principal=principal,
            extra=extra,
            draw=draw,
            parts=parts,
            paid_before=paid_before if parts else (),
        )
        if self.carried:
            self.columns.carried[len(self.columns.date) - 1] = self.carried

    def set_instalment(self, amount: int, why: str) -> None:
        """A scheduled amount comes into force with the next row."""
        self.instalment = amount
        self.columns.instalments.append(Instalment(len(self.columns.date), amount, why))

    def next_event(self) -> dt.date | None:
        """The day of the next extra payment or rate change; `None` if there is none."""
        heads = [events[-1].date for events in (self.extras, self.repricings) if events]
        return min(heads, default=None)

    def end_if_repaid(self) -> None:
        """Marks the end once nothing is owed."""
        self.over = self.over or (self.balance == 0 and not self.carried)

    def amortizing(self, payment: int) -> bool:
        """Whether payment number `payment` repays principal."""
        return self.terms.repayment in _AMORTIZING and payment > self.terms.interest_only

    def pays_level(self) -> bool:
        """Whether the next payment is a level payment, interest included."""
        return self.terms.repayment is Repayment.LEVEL_PAYMENT and self.amortizing(self.paid + 1)

    def carries_interest(self) -> bool:
        """Whether interest that a payment does not cover is kept apart, without interest."""
        return self.terms.unpaid_interest is UnpaidInterest.CARRY

    def owed_interest(self) -> int:
        """Interest accrued and unpaid, as if posted now; negative where more was paid in advance."""
        return self.accrual.due() + self.carried

    def prepays(self, payment: int) -> bool:
        """Whether payment number `payment` is the interest of the period that it starts."""
        return self.terms.in_advance and not self.amortizing(payment)

    def note(self, place: Place, text: str) -> None:
        """Something to know, at a cell."""
        self.columns.problems.append(note(self.terms.loan_id, place, text))

    def warn(self, place: Place, text: str, remedy: str) -> None:
        """Something to look at, at a cell."""
        self.columns.problems.append(warning(self.terms.loan_id, place, text, remedy))
