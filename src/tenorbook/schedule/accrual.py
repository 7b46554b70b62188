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

    def against(self, prepaid: tuple[Part, ...]) -> tuple[Part, ...]:
        """The stretches that ran, and those prepaid for them taken back: items of their own."""
        ran = [part._replace(item=Item.AS_RUN) for part in self.parts]
        taken_back = [part._replace(item=Item.TAKEN_BACK, sign=-1) for part in prepaid]
        return (*ran, *taken_back)

    def rounded(self, item: Item) -> int:
        """What an item would be if it were posted now."""
        return round_fraction(self.amounts.get(item, ZERO), self.rounding)

    def due(self) -> int:
        """All items as if posted now, each rounded by itself."""
        return sum(self.rounded(item) for item in self.amounts)

    def pay(self, amount: int) -> None:
        """Takes off interest that is paid before it is due, the odd days first."""
        for item in sorted(self.amounts, key=lambda item: item is not Item.ODD_DAYS):
            paid = min(amount, max(0, self.rounded(item)))
            self.amounts[item] -= paid
            amount -= paid
        if amount:
            self.amounts[Item.PERIOD] = self.amounts.get(Item.PERIOD, ZERO) + -amount

    def drop(self, item: Item) -> None:
        """Forgets an item that is posted elsewhere, or never."""
        self.amounts.pop(item, None)
        self.parts = [part for part in self.parts if part.item is not item]

    def clear(self) -> tuple[Part, ...]:
        """Starts anew after posting; returns the stretches that were posted."""
        parts = tuple(self.parts)
        self.amounts, self.parts, self.paid_rows = {}, [], []
        return parts
