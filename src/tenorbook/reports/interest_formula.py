"""The interest of a row as a formula: balance x rate x fraction, each item rounded by itself."""

from collections import Counter
from collections.abc import Iterator, Sequence
from fractions import Fraction
from itertools import groupby
from operator import attrgetter, ne

from tenorbook.basis.conventions import DayCount
from tenorbook.basis.rounding import round_fraction
from tenorbook.reports.fraction_formula import fraction_text
from tenorbook.reports.rounding_formula import are_plain, ordinary, rounded
from tenorbook.schedule.ledger import Item, Part, Schedule
from tenorbook.schedule.steps import Span, make_steps


class InterestFormulas:
    """Writes the interest formulas of one schedule.

    Args:
        schedule: the schedule.
    """

    def __init__(self, schedule: Schedule) -> None:
        terms = schedule.terms
        self._schedule = schedule
        self._rounding = terms.interest_rounding
        self._digits = schedule.digits
        self._counts: tuple[DayCount, ...] = (terms.day_count, terms.odd_day_count)
        self._regular: dict[tuple[int, int, int, bool], str] = {}

    def of_regular_rows(self) -> dict[int, str]:
        """The formulas of all rows whose interest is one stretch on the opening balance."""
        schedule, plain = self._schedule, self._are_plain()
        years = [day.year for day in schedule.date]
        crossing = [False, *map(ne, years, years[1:])]
        keys = zip(schedule.numerators, schedule.denominators, schedule.days, crossing, strict=True)
        found: dict[int, str] = {}
        for row, key in enumerate(keys):
            if not key[0] or row in schedule.irregular:
                continue
            if not plain[row]:
                found[row] = self.of_items(row)[0]
            else:
                found[row] = self._regular.get(key) or self._ordinary(row, key)
        return found

    def _are_plain(self) -> list[bool]:
        """Whether the ordinary form of the rounding does, row by row."""
        schedule = self._schedule
        first = schedule.annual_rate[0]
        if schedule.annual_rate.count(first) == len(schedule):
            rates = [float(first)] * len(schedule)
        else:
            known = {rate: float(rate) for rate in set(schedule.annual_rate)}
            rates = [known[rate] for rate in schedule.annual_rate]
        columns = (schedule.opening, rates, schedule.numerators, schedule.denominators)
        products = (
            opening * rate * numerator / denominator
            for opening, rate, numerator, denominator in zip(*columns, strict=True)
        )
        return are_plain(products, self._rounding)

    def _ordinary(self, row: int, key: tuple[int, int, int, bool]) -> str:
        """The ordinary form, kept for the rows that are alike."""
        schedule = self._schedule
        fraction = Fraction(key[0], key[1])
        text = fraction_text(fraction, schedule.date[row - 1], schedule.date[row], self._counts, "[days]")
        self._regular[key] = ordinary(f"[opening]*[rate]*{text}", self._digits, self._rounding)
        return self._regular[key]

    def of_items(self, row: int, only: Item | None = None) -> tuple[str, int]:
        """The interest a row's stretches come to: the formula, and the figure in the ledger's unit.

        Args:
            row: of the schedule.
            only: one item of the interest; `None`: all of them, added up.

        Returns:
            An empty formula and 0 where there are no stretches.
        """
        texts, total = [], 0
        for item, parts in self._items(row):
            if only is None or item is only:
                text, amount = self._of_item(row, parts)
                texts.append(text)
                total += amount
        if len(texts) < 2:
            return "".join(texts), total
        return f"ROUND({'+'.join(texts)},{self._digits})", total

    def _items(self, row: int) -> Iterator[tuple[Item, Sequence[Part]]]:
        parts = sorted(self._schedule.parts(row), key=lambda part: list(Item).index(part.item))
        for item, group in groupby(parts, key=attrgetter("item")):
            yield item, list(group)

    def _of_item(self, row: int, parts: Sequence[Part]) -> tuple[str, int]:
        texts, exact = [], Fraction(0)
        for part in parts:
            sign = "-" if part.sign < 0 else "+"
            texts.append(sign + self._product(row, part))
            exact += part.sign * self._schedule.closing[part.balance_row] * part.factor
        text = "".join(texts).removeprefix("+")
        amount = round_fraction(exact, self._rounding)
        return rounded(text, exact, self._digits, self._rounding), amount

    def _product(self, row: int, part: Part) -> str:
        """Balance x rate x fraction of one stretch."""
        balance = self._balance(row, part.balance_row)
        rate = self._rate(row, part)
        if part.factor != Fraction(part.rate) * part.fraction:
            return f"{balance}*{self._compounding(rate, part)}"
        whole = part.end == self._schedule.date[row] and (part.end - part.start).days
        days = "[days]" if whole and whole == self._schedule.days[row] else ""
        return f"{balance}*{rate}*{fraction_text(part.fraction, part.start, part.end, self._counts, days)}"

    def _balance(self, row: int, balance_row: int) -> str:
        if balance_row == row:
            return "[closing]"
        return "[opening]" if balance_row == row - 1 else f"[closing@{balance_row}]"

    def _rate(self, row: int, part: Part) -> str:
        """The cell with the rate of a stretch: in the row itself, or the nearest row that has it."""
        rates = self._schedule.annual_rate
        if rates[row] == part.rate:
            return "[rate]"
        having = (other for other in range(len(rates)) if rates[other] == part.rate)
        nearest = min(having, key=lambda other: abs(other - row), default=None)
        return str(part.rate) if nearest is None else f"[rate@{nearest}]"

    def _compounding(self, rate: str, part: Part) -> str:
        """The factor of a long first period whose whole periods compound.

        `((1+rate*30/360)^2*(1+rate*10/360)-1)`; where an event split it, less the interest of the
        days before, which ran simple.
        """
        steps = make_steps(self._schedule.terms)
        for span in steps.first:
            before = Fraction(0) if part.start == span.start else steps.counted_to(span, part.start)
            if span.factor(part.rate) - Fraction(part.rate) * before == part.factor:
                less = f"-{rate}*{self._fraction(before)}" if before else ""
                return f"({self._growth(rate, span)}-1{less})"
        return f"{part.factor.numerator}/{part.factor.denominator}"

    def _growth(self, rate: str, span: Span) -> str:
        """Whole periods compounding, odd days simple."""
        growth = []
        for fraction, times in Counter(span.compounding).items():
            power = f"^{times}" if times > 1 else ""
            growth.append(f"(1+{rate}*{self._fraction(fraction)}){power}")
        if span.odd:
            growth.append(f"(1+{rate}*{self._fraction(span.odd)})")
        return "*".join(growth)

    def _fraction(self, fraction: Fraction) -> str:
        day = self._schedule.terms.funding
        return fraction_text(fraction, day, day, self._counts, "")
