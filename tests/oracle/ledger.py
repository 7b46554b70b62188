"""The ledger: walks a loan day by day of interest, due date by due date, and writes its rows.

Interest accrues exactly, in two piles that are each rounded when they are posted: the period's interest, and
the odd-day item of the first period. What happens inside a period changes the balance at once; the interest
is carried unrounded.
"""

from __future__ import annotations

from bisect import bisect_left
from dataclasses import dataclass
from datetime import date
from decimal import Decimal
from fractions import Fraction

from .events import Events, Extra, RateChange
from .money import round_units
from .periods import Periods, Stretch
from .sizing import level_payment, level_principal
from .terms import MAX_PAYMENTS, Terms

RE_AMORTIZE = "re-amortize"


@dataclass
class Row:
    """One row of the schedule, in units; `rate` was in force over the days before it."""

    kind: str
    day: date
    rate: Decimal
    opening: int
    closing: int
    interest: int = 0
    principal: int = 0
    extra: int = 0
    draw: int = 0

    @property
    def payment(self) -> int:
        """Cash paid in this row."""
        return self.interest + self.principal + self.extra


class Ledger:
    """One run of one loan.

    count: the contract's number of payments, solved by the caller when it was blank; implied_balloon: what a
    given payment leaves at the end of a given term.
    """

    def __init__(
        self, terms: Terms, periods: Periods, events: Events, count: int, implied_balloon: int
    ) -> None:
        self.terms, self.periods, self.events = terms, periods, events
        self.count = count
        self.rows: list[Row] = []
        self.event_dates = events.dates()
        self.balance = 0
        self.rate = terms.rate
        self.rate_before = terms.rate  # over the days accrued last; a change today does not show yet
        # exact interest accrued and not yet posted
        self.accrued = Fraction(0)
        self.accrued_odd = Fraction(0)
        self.prepaid_odd = Fraction(0)
        self.bearing = Fraction(0)  # accrued interest that bears interest (long first period, compound)
        # the instalment, and what has changed it
        self.instalment = 0
        self.pending: str | int | None = None
        self.resized = False
        self.shortened = False
        self.credit = 0  # paid ahead, to be taken off the next instalments
        self.balloon_next = False  # in advance: the last instalment is paid, the balloon is due next
        self.left_at_end = 0  # principal that the instalments did not reach
        # principal the instalments are sized to leave: the note's balloon, else what a given payment leaves
        self.balloon = terms.balloon or implied_balloon
        amortizing = count - terms.interest_only
        over = terms.amortized_over
        self.stretched = over is not None and over > amortizing and terms.repayment.startswith("level")
        self.amortizing = over if over is not None and self.stretched else amortizing

    # ------------------------------------------------------------------ the run

    def run(self) -> list[Row]:
        """All rows, from the funding row to the last."""
        self._fund()
        i = 1
        while self.balance:
            if i > MAX_PAYMENTS + 1:
                raise ValueError("the payment never pays the loan off")
            self._period(i)
            i += 1
        return self.rows

    def _fund(self) -> None:
        """The advance, odd days paid on that date, and the first sizing."""
        terms, periods = self.terms, self.periods
        for start in sorted(day for day in self.events.rates if day <= terms.funding):
            change = self.events.rates[start]
            self.rate = self.rate_before = change.rate
            self.pending = change.payment if isinstance(change.payment, int) else self.pending
        rate = Fraction(self.rate)
        odd = terms.principal * periods.growth(rate, odd_item=True)
        row = Row("funding", terms.funding, self.rate, 0, terms.principal, draw=terms.principal)
        if periods.treatment == "pay at funding" and odd:
            row.interest = self._round(odd)
            self.prepaid_odd = odd
        self.rows.append(row)
        self.balance = terms.principal
        # a short first period charged as regular: the days before funding go in, and out in the odd-day item
        if periods.unearned_days:
            before = terms.principal * rate
            self.accrued = before * periods.part(periods.first[0], terms.funding)
            self.accrued_odd = -before * periods.unearned_days
        sized_on = terms.principal + (self._round(odd) if periods.treatment == "capitalize" else 0)
        first = terms.payment if terms.payment is not None else self._sized(sized_on, 0)
        self.instalment = self.pending if isinstance(self.pending, int) else first
        self.pending = None
        if not (terms.advance and terms.grid.due(1) == terms.funding):
            self._extras(terms.funding)

    def _period(self, i: int) -> None:
        """The days up to due date i, and what happens on it."""
        due = self.terms.grid.due(i)
        stretches = self.periods.of(i)
        for stretch in stretches:
            self._stretch(stretch)
            if not self.balance:
                return
            if stretch is not stretches[-1]:
                self._change_rate(stretch.end)
                self._between_stretches(stretch.end, self._ends_odd_days(stretch))
                self._extras(stretch.end)
                if not self.balance:
                    return
        if stretches:
            self._change_rate(due)
            if stretches[-1].odd_item:
                self._between_stretches(due, True)
        self.bearing = Fraction(0)
        if self.terms.repayment == "at maturity" and i < self.count:
            self._extras(due)
            return
        self._pay(i, due)
        if self.balance:
            self._extras(due, self.rows[-1])
        if self.balance:
            self._resize(i)

    def _stretch(self, stretch: Stretch) -> None:
        """Accrue through a stretch, stopping at every event inside it."""
        charged = not (stretch.odd_item and self.periods.treatment == "waive")
        done = self.periods.part(stretch, stretch.opens)
        at = bisect_left(self.event_dates, stretch.opens)
        for day in self.event_dates[at:]:
            if day >= stretch.end:
                break
            if day <= stretch.opens:
                continue
            upto = self.periods.part(stretch, day)
            self._accrue(upto - done, stretch.odd_item, charged)
            done = upto
            self._change_rate(day)
            self._extras(day)
            if not self.balance:
                return
        self._accrue(stretch.whole - done, stretch.odd_item, charged)

    def _accrue(self, fraction: Fraction, odd_item: bool, charged: bool) -> None:
        self.rate_before = self.rate
        if not charged:
            return
        growth = Fraction(self.rate) * fraction
        if odd_item:
            self.accrued_odd += (self.balance + self.bearing) * growth
        else:
            self.accrued += self.balance * growth
            if self.periods.charged_as_odd:
                self.accrued_odd += self.bearing * growth
            else:
                self.accrued += self.bearing * growth

    def _ends_odd_days(self, stretch: Stretch) -> bool:
        """True at the date one regular period before the first payment (in advance: at the first payment)."""
        odd = [other for other in self.periods.first if other.odd_item]
        return bool(odd) and odd[-1] is stretch

    def _between_stretches(self, day: date, odd_ends: bool) -> None:
        """Inside a long first period: capitalize the odd days where they end; compound what has accrued."""
        treatment = self.periods.treatment
        if odd_ends and treatment == "capitalize":
            amount = self._round(self.accrued_odd)
            if amount:
                opening, self.balance = self.balance, self.balance + amount
                self._row(Row("capitalize", day, self.rate_before, opening, self.balance, amount, -amount))
            self.accrued_odd = Fraction(0)
            self.bearing = Fraction(0)
        elif odd_ends and treatment == "pay at funding":
            self.bearing = Fraction(0)
        elif self.terms.compound:
            self.bearing = self.accrued + self.accrued_odd

    # ------------------------------------------------------------------ payments

    def _pay(self, i: int, day: date) -> None:
        """The scheduled payment of due date i, or the balloon one period after the last one in advance.

        An interest-only payment in advance prepays the period that begins, on the balance and at the rate of
        this moment; what an event then changes is settled, unrounded, with the next payment.
        """
        terms, opening = self.terms, self.balance
        prepays = terms.advance and self._is_interest_only(i) and not self.balloon_next
        ahead = self.balance * self.periods.factor(i + 1, Fraction(self.rate)) if prepays else Fraction(0)
        odd_item = self._round(self.accrued_odd - self.prepaid_odd)
        interest = self._round(self.accrued + ahead) + odd_item
        self.accrued, self.accrued_odd, self.prepaid_odd = -ahead, Fraction(0), Fraction(0)
        owed = self.balance + interest
        kind, instalment, final, clears = "payment", owed, True, True
        if self.balloon_next:
            kind = "balloon"
        else:
            instalment, final, clears = self._instalment(i, interest, odd_item, owed)
        used = 0 if clears else min(self.credit, max(0, instalment))
        self.credit -= used
        self.balloon_next = terms.advance and final and (used == 0 or self._is_last(i))
        principal = instalment - used - interest
        self.balance -= principal
        self._row(Row(kind, day, self.rate_before, opening, self.balance, interest, principal))

    def _is_interest_only(self, i: int) -> bool:
        return self.terms.repayment == "interest only" or i <= self.terms.interest_only

    def _is_last(self, i: int) -> bool:
        return i == self.count and (not self.terms.open_ended or self.resized)

    def _instalment(self, i: int, interest: int, odd_item: int, owed: int) -> tuple[int, bool, bool]:
        """(what falls due on due date i, is it the last, does it clear the loan whatever was paid ahead)."""
        regular = self._regular_instalment(interest, odd_item)
        if self._is_last(i) and not self.terms.advance:
            self.left_at_end = max(0, owed - regular)
            return owed, True, True
        if self._is_interest_only(i):
            return interest, self._is_last(i), False
        regular = min(regular, owed)
        if self._is_last(i):
            return self._last_in_advance(regular, owed)
        if self.terms.open_ended and not self.resized and owed - regular <= self.terms.balloon:
            # the fewest payments: this is the one that reaches the balloon, or nothing
            return (owed - self.terms.balloon if self.terms.advance else owed), True, False
        return regular, False, False

    def _regular_instalment(self, interest: int, odd_item: int) -> int:
        """The instalment, the loan's end not yet looked at; the odd-day item comes on top of a level one."""
        if self.terms.repayment == "level payment":
            return self.instalment + odd_item
        return self.instalment + interest if self.terms.repayment == "level principal" else interest

    def _last_in_advance(self, regular: int, owed: int) -> tuple[int, bool, bool]:
        """The last payment in advance: it clears the loan, or leaves the balloon due one period later."""
        left = self.left_at_end = owed - regular
        given = self.terms.payment is not None and not self.resized
        if self.stretched or (given and (self.terms.balloon or left > regular)):
            return regular, True, False
        if not self.balloon:
            return owed, True, True
        if self.shortened or given or self.balance < self.balloon:
            return regular, True, False
        return owed - self.balloon, True, False

    # ------------------------------------------------------------------ sizing

    def _sized(self, balance: int, after: int) -> int:
        """The instalment sized on `balance` as it stands after due date `after`, at the rate now in force."""
        terms = self.terms
        start = max(after, terms.interest_only)
        payments = terms.interest_only + self.amortizing - start
        left = self.terms.balloon if self.stretched else self.balloon
        if terms.repayment == "level principal":
            return level_principal(balance, left, payments, terms.payment_rounding)
        if terms.repayment != "level payment":
            return 0
        rate = Fraction(self.rate)
        if terms.equal_basis:
            factors = [rate / terms.per_year] * payments
        else:
            factors = [self.periods.factor(i, rate) for i in range(start + 1, start + payments + 1)]
        if terms.advance and (start == terms.interest_only and (start > 0 or terms.equal_basis)):
            factors[0] = Fraction(0)  # nothing has run at the first payment, or it was prepaid
        return level_payment(balance, left, factors, terms.payment_rounding)

    def _resize(self, i: int) -> None:
        """After all of due date i: the new instalment that an extra payment or a rate change asked for."""
        pending, self.pending = self.pending, None
        if pending is None:
            return
        if isinstance(pending, int):
            self.instalment = pending
        elif max(i, self.terms.interest_only) < self.terms.interest_only + self.amortizing:
            self.instalment = self._sized(self.balance, i)
            self.resized = True

    # ------------------------------------------------------------------ events

    def _change_rate(self, day: date) -> None:
        change: RateChange | None = self.events.rates.get(day)
        if change is None or day <= self.terms.funding:
            return
        self._row(Row("rate", day, self.rate_before, self.balance, self.balance))
        self.rate = change.rate
        if change.payment != "keep":
            self.pending = change.payment

    def _extras(self, day: date, payment_row: Row | None = None) -> None:
        """The extra payments of a date: in the payment's row when there is one, else in their own row."""
        due = list(self.events.extras.get(day, ()))
        terms = self.terms
        in_window = (terms.extra_from or day) <= day <= (terms.extra_until or day)
        if payment_row is not None and payment_row.kind == "payment" and terms.extra_each and in_window:
            due.insert(0, Extra(terms.extra_each, "shorten term", interest_first=False))
        row = payment_row or Row("extra", day, self.rate_before, self.balance, self.balance)
        for extra in due:
            if not self.balance:
                break
            interest, principal = self._apply_extra(extra)
            row.interest += interest
            row.extra += principal
            row.closing = self.balance
        if payment_row is None and due and (row.interest or row.extra):
            self._row(row)

    def _apply_extra(self, extra: Extra) -> tuple[int, int]:
        """(interest, principal) that one extra payment pays; more than the payoff amount is cut off."""
        accrued = self._round(self.accrued) + self._round(self.accrued_odd - self.prepaid_odd)
        interest, principal = 0, extra.amount
        if extra.amount >= max(self.balance, self.balance + accrued):
            interest, principal = accrued, self.balance
        elif extra.interest_first or extra.amount >= self.balance:
            interest = min(extra.amount, max(accrued, 0))
            principal = extra.amount - interest
            self._take_interest(interest, paid_in_full=0 < interest == accrued)
        self.balance -= principal
        self.shortened = self.shortened or extra.effect == "shorten term"
        if extra.effect == "lower payment":
            self.pending = RE_AMORTIZE
        elif extra.effect == "pay ahead":
            self.credit += interest + principal
        return interest, principal

    def _take_interest(self, interest: int, paid_in_full: bool) -> None:
        """Interest paid inside a period. Paid to the day it is posted, and accrual starts anew at nothing."""
        if paid_in_full:
            self.accrued = self.accrued_odd = self.prepaid_odd = self.bearing = Fraction(0)
            return
        from_odd = min(Fraction(interest), max(Fraction(0), self.accrued_odd - self.prepaid_odd))
        self.accrued_odd -= from_odd
        self.accrued -= interest - from_odd
        self.bearing = max(Fraction(0), self.bearing - interest)

    # ------------------------------------------------------------------ small things

    def _round(self, exact: Fraction) -> int:
        return round_units(exact, self.terms.interest_rounding)

    def _row(self, row: Row) -> None:
        self.rows.append(row)
