"""Interest that has run but is not posted yet: exact, item by item, with the stretches behind it."""

from collections.abc import Iterable
from dataclasses import dataclass, field
from datetime import date
from decimal import Decimal
from fractions import Fraction

from tenorbook.basis.conventions import InterestRounding
from tenorbook.basis.rounding import round_fraction
from tenorbook.schedule.ledger import Item, Part
from tenorbook.schedule.steps import Span, Steps

ZERO = Fraction(0)


@dataclass(slots=True)
class Accrual:
    """Accrued interest of the running period.

    Attributes:
        steps: of the loan; count the days of parts of a stretch.
        rounding: of each item when it is posted.
        amounts: exact interest by item, in the ledger's unit, less what was posted already.
        parts: the stretches it came from, since interest was last posted in full.
        paid_rows: rows that posted some of it ahead of the due date.
        progress: how far each stretch of the period has accrued.
    """

    steps: Steps
    rounding: InterestRounding
    amounts: dict[Item, Fraction] = field(default_factory=dict)
    parts: list[Part] = field(default_factory=list)
    paid_rows: list[int] = field(default_factory=list)
    progress: dict[Span, date] = field(default_factory=dict)

    def run_to(self, spans: Iterable[Span], day: date, balance: int, balance_row: int, rate: Decimal) -> None:
        """Accrues on a balance up to (not including) a day.

        A part between two events is the count to its end less the count to its start, both from the
        start of the stretch; so the last part is the whole less the parts before it.
        """
        for span in spans:
            start, end = self.progress.get(span, span.start), min(day, span.end)
            if end > start:
                self._add(span, start, end, balance, balance_row, rate)

    def _add(self, span: Span, start: date, end: date, balance: int, balance_row: int, rate: Decimal) -> None:
        factor, fraction = self.steps.factor(span, end, rate), self._fraction(span, end)
        if start > span.start:
            factor -= self.steps.factor(span, start, rate)
            fraction -= self._fraction(span, start)
        self.progress[span] = end
        compounds = len(span.compounding) if end == span.end else 0
        part = Part(start, end, balance_row, rate, fraction, factor, span.item, span.sign, compounds)
        self._remember(part)
        self.amounts[span.item] = self.amounts.get(span.item, ZERO) + span.sign * balance * factor

    def _remember(self, part: Part) -> None:
        """Keeps a stretch, as one with the stretch before it where only the calendar parts them."""
        if self.parts:
            before = self.parts[-1]
            same = before[2:4] == part[2:4] and before[6:] == part[6:] and not part.compounds
            if same and before.end == part.start:
                self.parts[-1] = before._replace(
                    end=part.end,
                    fraction=before.fraction + part.fraction,
                    factor=before.factor + part.factor,
                )
                return
        self.parts.append(part)

    def _fraction(self, span: Span, day: date) -> Fraction:
        return span.whole if day >= span.end else self.steps.counted_to(span, day)

    def start_period(self) -> None:
        """Forgets how far the stretches of the last period had accrued."""
        self.progress = {}

    def prepay(self, spans: Iterable[Span], balance: int, balance_row: int, rate: Decimal) -> "Accrual":
        """The interest of whole stretches still to run, as an accrual of its own; `settle` takes it off."""
        ahead = Accrual(self.steps, self.rounding)
        for span in spans:
            ahead.run_to((span,), span.end, balance, balance_row, rate)
        return ahead

    def forget_settled(self) -> None:
        """Drops what was paid in advance and ran just so: it has nothing left to post."""
        for item in [item for item, amount in self.amounts.items() if not amount]:
            self.drop(item)

    def add(self, other: "Accrual") -> None:
        """Interest of another accrual that is posted together with this one."""
        for item, amount in other.amounts.items():
            self.amounts[item] = self.amounts.get(item, ZERO) + amount
        self.parts += other.parts

    def settle(self, prepaid: "Accrual") -> None:
        """Takes off what was paid in advance; only an event inside the period then leaves a difference."""
        for item, amount in prepaid.amounts.items():
            self.amounts[item] = self.amounts.get(item, ZERO) - amount
        self.parts += [part._replace(sign=-part.sign) for part in prepaid.parts]

    @property
    def open(self) -> bool:
        """Whether any interest is accrued, or was paid in advance."""
        return any(self.amounts.values())

    def posted_parts(self) -> tuple[Part, ...]:
        """The stretches behind the interest; an item that comes to nothing has none."""
        return tuple(part for part in self.parts if self.amounts.get(part.item))

    def rounded(self, item: Item) -> int:
        """What an item would be if it were posted now."""
        return round_fraction(self.amounts.get(item, ZERO), self.rounding)

    def due(self) -> int:
        """All items as if posted now, each rounded by itself."""
        return sum(self.rounded(item) for item in self.amounts)

    def pay(self, amount: int) -> bool:
        """Takes off interest paid between due dates; True if that posts all of it and accrual starts anew.

        What is posted in full starts anew at nothing, so that its rounding stays where it was posted;
        a part payment leaves the exact rest, the odd days first.
        """
        if amount == self.due():
            self.clear()
            return True
        odd = min(amount, max(0, self.rounded(Item.ODD_DAYS)))
        for item, paid in ((Item.ODD_DAYS, odd), (Item.PERIOD, amount - odd)):
            if paid:
                self.amounts[item] = self.amounts.get(item, ZERO) - paid
        return False

    def drop(self, item: Item) -> None:
        """Forgets an item that has nothing left to post, or is never charged."""
        self.amounts.pop(item, None)
        self.parts = [part for part in self.parts if part.item is not item]

    def clear(self) -> None:
        """Starts anew after posting."""
        self.amounts, self.parts, self.paid_rows = {}, [], []
