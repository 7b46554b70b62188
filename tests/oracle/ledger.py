"""The ledger: walks a loan day by day of interest, due date by due date, and writes its rows.

Interest accrues exactly, in two piles that are each rounded when they are posted: the period's interest, and
the odd-day item of the first period. What happens inside a period changes the balance at once; the interest
is carried unrounded.
"""

from __future__ import annotations

from bisect import bisect_right
from dataclasses import dataclass
from datetime import date, timedelta
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


class _StopSignal(Exception):  # noqa: N818 (no error: it ends a run)
    """The day is reached that a run was to stop on."""


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
        self.stop: tuple[date, bool] | None = None  # a day, and whether its events are still to happen first
        self.balance = 0
        self.rate = terms.rate
        self.rate_before = terms.rate  # over the days accrued last; a change today does not show yet
        # exact interest accrued and not yet posted, less what was paid of it in advance
        self.accrued = Fraction(0)
        self.accrued_odd = Fraction(0)
        self.carried = 0  # interest posted but not covered, which bears none
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
        while self.balance or self.carried:
            if i > MAX_PAYMENTS + 1:
                raise ValueError("the payment never pays the loan off")
            self._period(i)
            i += 1
        return self.rows

    def accrued_on(self, day: date, day_counted: bool) -> int:
        """Interest run and not posted after all events of a day, that day itself counted or not, as if it
        were posted now; negative where more was paid in advance."""
        self.stop = (day + timedelta(days=1), False) if day_counted else (day, True)
        try:
            self.run()
        except _StopSignal:
            return self._round(self.accrued) + self._round(self.accrued_odd) + self.carried
        return 0

    def _fund(self) -> None:
        """The advance, odd days paid on that date, and the first sizing; then what else the date brings."""
        terms, periods, day = self.terms, self.periods, self.terms.funding
        row = Row("funding", day, self.rate, 0, terms.principal, draw=terms.principal)
        if periods.treatment == "pay at funding":
            prepaid = terms.principal * periods.odd_growth(Fraction(self.rate))
            row.interest = self._round(prepaid)
            self.accrued_odd = -prepaid
        self._row(row)
        self.balance = terms.principal
        self.instalment = terms.payment if terms.payment is not None else self._sized(0)
        self._change_rate(day)
        self._resize(0)
        if not terms.advance:
            self._extras(day)
            self._resize(0)

    def _period(self, i: int) -> None:
        """The days up to due date i, and what happens on it."""
        due = self.terms.grid.due(i)
        for stretch in self.periods.of(i):
            self._stretch(stretch)
            if not self._repaid() and self.terms.funding < stretch.end < due:
                self._change_rate(stretch.end)
                self._capitalize(stretch.end)
                self._extras(stretch.end)
            if self._repaid():
                return
        if due > self.terms.funding:
            self._change_rate(due)
        if self.terms.repayment == "at maturity" and i < self.count:
            self._extras(due)
            return
        self._pay(i, due)
        if not self._repaid():
            self._resize(i)

    def _repaid(self) -> bool:
        return self.balance == 0 and self.carried == 0

    def _stretch(self, stretch: Stretch) -> None:
        """Accrue through a stretch, stopping at every event inside it."""
        at = stretch.start
        for day in self.event_dates[bisect_right(self.event_dates, max(at, self.terms.funding)) :]:
            if day >= stretch.end:
                break
            self._accrue(stretch, at, day)
            at = day
            self._change_rate(day)
            self._extras(day)
            if self._repaid():
                return
        self._accrue(stretch, at, stretch.end)

    def _accrue(self, stretch: Stretch, start: date, end: date) -> None:
        """Interest from one day of a stretch to another, on the balance and at the rate of now."""
        if self.stop is not None:
            day, events_first = self.stop
            if start >= day:
                raise _StopSignal
            if day < end or (day == end and not events_first):
                self._add_interest(stretch, start, day)
                raise _StopSignal
        self._add_interest(stretch, start, end)

    def _add_interest(self, stretch: Stretch, start: date, end: date) -> None:
        self.rate_before = self.rate
        if stretch.odd_item and self.periods.treatment == "waive":
            return
        rate = Fraction(self.rate)
        growth = self.periods.growth_to(stretch, end, rate)
        if start > stretch.start:
            growth -= self.periods.growth_to(stretch, start, rate)
        interest = self.balance * (-growth if stretch.given_back else growth)
        if stretch.odd_item:
            self.accrued_odd += interest
        else:
            self.accrued += interest

    def _capitalize(self, day: date) -> None:
        """Where the odd days end: their interest is added to principal, if the note says so."""
        if self.periods.treatment != "capitalize":
            return
        amount = self._round(self.accrued_odd)
        self.accrued_odd = Fraction(0)
        if amount:
            opening, self.balance = self.balance, self.balance + amount
            self._row(Row("capitalize", day, self.rate_before, opening, self.balance, amount, -amount))

    # ------------------------------------------------------------------ payments

    def _pay(self, i: int, day: date) -> None:
        """The scheduled payment of due date i with the extras paid on that date, or the balloon one period
        after the last payment in advance.

        An interest-only payment in advance prepays the period that begins, on the balance and at the rate of
        this moment; what an event then changes is settled, unrounded, with the next payment. An extra that
        repays all on the same date leaves no period to prepay.
        """
        prepays = self.terms.advance and self._is_interest_only(i) and not self.balloon_next
        ahead = self.balance * self.periods.factor(i + 1, Fraction(self.rate)) if prepays else Fraction(0)
        odd_item = self._round(self.accrued_odd)
        without_ahead = self._round(self.accrued) + odd_item
        interest = self._round(self.accrued + ahead) + odd_item
        self.accrued, self.accrued_odd = -ahead, Fraction(0)
        row = self._settle(i, day, interest + self.carried, odd_item)
        if row.kind == "payment":
            self._extras_with(row)
        if prepays and not self.balance:
            row.interest += without_ahead - interest

    def _settle(self, i: int, day: date, interest: int, odd_item: int) -> Row:
        """The row of a payment: what falls due, less what was paid ahead; interest comes first."""
        opening, owed = self.balance, self.balance + interest
        kind, instalment, final, clears = "payment", owed, True, True
        if self.balloon_next:
            kind = "balloon"
        else:
            instalment, final, clears = self._instalment(i, interest, odd_item, owed)
        used = 0 if clears else min(self.credit, max(0, instalment - interest))
        self.credit -= used
        self.balloon_next = self.terms.advance and final and (used == 0 or self._is_last(i))
        paid = instalment - used
        self.carried = interest - paid if self.terms.carries and paid < interest else 0
        interest -= self.carried
        self.balance -= paid - interest
        row = Row(kind, day, self.rate_before, opening, self.balance, interest, paid - interest)
        self._row(row)
        return row

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
        early = self._may_end_early()
        # only the balloon is left, or less: now, or in advance one period after the interest
        if early and self.balance <= self.terms.balloon:
            return (interest if self.terms.advance else owed), True, False
        if self._is_interest_only(i):
            return interest, self._is_last(i), False
        regular = min(regular, owed)
        if self._is_last(i):
            return self._last_in_advance(regular, owed)
        if early and owed - regular <= self.terms.balloon:
            # the fewest payments: this is the one that reaches the stated balloon, or nothing
            return (owed - self.terms.balloon if self.terms.advance else owed), True, False
        return regular, False, False

    def _may_end_early(self) -> bool:
        """The payment decides the term, or extras shorten it: to the stated balloon, or to nothing."""
        open_ended = self.terms.open_ended and not self.resized
        return open_ended or (self.shortened and bool(self.terms.balloon))

    def _regular_instalment(self, interest: int, odd_item: int) -> int:
        """The instalment, the loan's end not yet looked at; the odd-day item comes on top of a level one."""
        if self.terms.repayment == "level payment":
            return self.instalment + odd_item
        return self.instalment + interest if self.terms.repayment == "level principal" else interest

    def _last_in_advance(self, regular: int, owed: int) -> tuple[int, bool, bool]:
        """The last payment in advance: it clears the loan, or leaves the balloon due one period later."""
        left = self.left_at_end = owed - regular
        given = self.terms.payment is not None and not self.resized
        if self.shortened and self.terms.balloon:
            return owed - self.terms.balloon, True, False
        if self.stretched or (given and (self.terms.balloon or left > regular)):
            return regular, True, False
        if not self.balloon:
            return owed, True, True
        if given or owed < self.balloon:
            return regular, True, False
        return owed - self.balloon, True, False

    # ------------------------------------------------------------------ sizing

    def _sized(self, after: int) -> int:
        """The instalment sized on the balance as it stands after due date `after`, at the rate now in force.

        Odd-day interest still to be capitalized will be in the balance by the first payment. What is to be
        left is at most the balance, so that no instalment is below nothing.
        """
        terms, rate, balance = self.terms, Fraction(self.rate), self.balance
        if after == 0 and self.periods.treatment == "capitalize":
            balance += self._round(balance * self.periods.odd_growth(rate))
        start = max(after, terms.interest_only)
        payments = terms.interest_only + self.amortizing - start
        left = min(self.terms.balloon if self.stretched else self.balloon, balance)
        if terms.repayment == "level principal":
            return level_principal(balance, left, payments, terms.payment_rounding)
        if terms.repayment != "level payment":
            return 0
        if terms.equal_basis:
            factors = [rate / terms.per_year] * payments
        else:
            factors = [self.periods.factor(i, rate) for i in range(start + 1, start + payments + 1)]
        if terms.advance and (start == terms.interest_only and (start > 0 or terms.equal_basis)):
            factors[0] = Fraction(0)  # nothing has run at the first payment, or it was prepaid
        return level_payment(balance, left, factors, terms.payment_rounding)

    def _resize(self, i: int) -> None:
        """After all of due date i (0: of the funding date): the new instalment that an extra payment or a
        rate change asked for."""
        pending, self.pending = self.pending, None
        if pending is None or self._repaid():
            return
        if isinstance(pending, int):
            self.instalment = pending
        elif max(i, self.terms.interest_only) < self.terms.interest_only + self.amortizing:
            self.instalment = self._sized(i)
            self.resized = True

    # ------------------------------------------------------------------ events

    def _change_rate(self, day: date) -> None:
        """A rate change of this day: its row still shows the rate of the days before it."""
        change: RateChange | None = self.events.rates.get(day)
        if change is None:
            return
        self._row(Row("rate", day, self.rate_before, self.balance, self.balance))
        self.rate = change.rate
        if change.payment != "keep":
            self.pending = change.payment

    def _extras(self, day: date) -> None:
        """The extra payments of a date without a scheduled payment, in a row of their own."""
        row = Row("extra", day, self.rate_before, self.balance, self.balance)
        for extra in self.events.extras.get(day, ()):
            if self._repaid():
                break
            self._take(extra, row, self._round(self.accrued) + self._round(self.accrued_odd))
        row.closing = self.balance
        if row.interest or row.extra:
            self._row(row)

    def _extras_with(self, row: Row) -> None:
        """The extra payments made with a scheduled payment. It has settled the interest of its date, but for
        what is carried unpaid: an extra that clears the loan, or pays interest first, pays that as well."""
        due = list(self.events.extras.get(row.day, ()))
        terms = self.terms
        if terms.extra_each and (terms.extra_from or row.day) <= row.day <= (terms.extra_until or row.day):
            due.insert(0, Extra(terms.extra_each, "shorten term", interest_first=False))
        for extra in due:
            self._take(extra, row, 0)
        row.closing = self.balance

    def _interest_taken(self, extra: Extra, accrued: int) -> int:
        """The interest that an extra payment pays: all of it where it clears the loan."""
        owed = accrued + self.carried
        if extra.amount >= max(self.balance, self.balance + owed):
            interest = owed
        elif extra.interest_first or extra.amount >= self.balance:
            interest = min(extra.amount, max(owed, 0))
        else:
            return 0
        from_carried = min(self.carried, max(interest, 0))
        self.carried -= from_carried
        if interest != from_carried:
            self._take_accrued(interest - from_carried, accrued)
        return interest

    def _take_accrued(self, interest: int, accrued: int) -> None:
        """Interest paid inside a period. Paid to the day it is posted, and accrual starts anew at nothing;
        a part payment is whole units off the exact amounts, odd days first."""
        if interest == accrued:
            self.accrued = self.accrued_odd = Fraction(0)
            return
        from_odd = min(interest, max(0, self._round(self.accrued_odd)))
        self.accrued_odd -= from_odd
        self.accrued -= interest - from_odd

    def _take(self, extra: Extra, row: Row, accrued: int) -> None:
        """One extra payment into its row, at most what is left; and what it does to instalments."""
        interest = self._interest_taken(extra, accrued)
        principal = min(extra.amount - interest, self.balance)
        row.interest += interest
        row.extra += principal
        self.balance -= principal
        self.shortened = self.shortened or extra.effect == "shorten term"
        if extra.effect == "lower payment":
            self.pending = RE_AMORTIZE
        elif extra.effect == "pay ahead":
            self.credit += principal

    # ------------------------------------------------------------------ small things

    def _round(self, exact: Fraction) -> int:
        return round_units(exact, self.terms.interest_rounding)

    def _row(self, row: Row) -> None:
        self.rows.append(row)
