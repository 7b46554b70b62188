"""Builds the columns of a schedule, a row or a whole run of rows at a time."""

import datetime as dt
from collections.abc import Sequence
from dataclasses import dataclass, field
from decimal import Decimal

from tenorbook.basis.conventions import RowKind
from tenorbook.basis.problem import Problem
from tenorbook.schedule.kernel import Run
from tenorbook.schedule.ledger import Instalment, Item, Part, Schedule
from tenorbook.terms.terms import Terms

_NO_DAYS = (0, 1)


@dataclass(slots=True)
class Columns:
    """The rows so far; see `ledger.Row` for what each column means."""

    kind: list[RowKind] = field(default_factory=list)
    date: list[dt.date] = field(default_factory=list)
    days: list[int] = field(default_factory=list)
    annual_rate: list[Decimal] = field(default_factory=list)
    opening: list[int] = field(default_factory=list)
    interest: list[int] = field(default_factory=list)
    principal: list[int] = field(default_factory=list)
    extra: list[int] = field(default_factory=list)
    payment: list[int] = field(default_factory=list)
    closing: list[int] = field(default_factory=list)
    draw: list[int] = field(default_factory=list)
    numerators: list[int] = field(default_factory=list)
    denominators: list[int] = field(default_factory=list)
    irregular: dict[int, tuple[Part, ...]] = field(default_factory=dict)
    paid_before: dict[int, tuple[int, ...]] = field(default_factory=dict)
    carried: dict[int, int] = field(default_factory=dict)
    instalments: list[Instalment] = field(default_factory=list)
    problems: list[Problem] = field(default_factory=list)

    def add(
        self,
        kind: RowKind,
        date: dt.date,
        rate: Decimal,
        *,
        opening: int,
        interest: int = 0,
        principal: int = 0,
        extra: int = 0,
        draw: int = 0,
        parts: tuple[Part, ...] = (),
        paid_before: tuple[int, ...] = (),
    ) -> int:
        """Adds one row; returns the balance after it.

        Args:
            kind: what the row is.
            date: the day it happens.
            rate: in force over the days before the row.
            opening: balance before it.
            interest: posted with it.
            principal: scheduled.
            extra: extra principal.
            draw: money advanced.
            parts: the stretches of accrual behind the interest; empty where none is posted.
            paid_before: rows that posted some of that interest already.
        """
        row = len(self.date)
        if paid_before:
            self.paid_before[row] = paid_before
        fraction = self._single_fraction(parts, row, date, rate)
        self.numerators.append(fraction[0])
        self.denominators.append(fraction[1])
        if parts and fraction is _NO_DAYS:
            self.irregular[row] = parts
        self.days.append((date - self.date[-1]).days if self.date else 0)
        self.kind.append(kind)
        self.date.append(date)
        self.annual_rate.append(rate)
        self.opening.append(opening)
        self.interest.append(interest)
        self.principal.append(principal)
        self.extra.append(extra)
        self.payment.append(interest + principal + extra)
        closing = opening + draw - principal - extra
        self.closing.append(closing)
        self.draw.append(draw)
        return closing

    def _single_fraction(
        self, parts: tuple[Part, ...], row: int, date: dt.date, rate: Decimal
    ) -> tuple[int, int]:
        """The year fraction of a row whose interest is one plain stretch since the row before."""
        if len(parts) != 1:
            return _NO_DAYS
        part = parts[0]
        plain = part.item is Item.PERIOD and part.sign == 1 and not part.compounds
        since = self.date[-1] if self.date else date
        same = (part.balance_row, part.start, part.end, part.rate) == (row - 1, since, date, rate)
        if not plain or not same:
            return _NO_DAYS
        return (part.fraction.numerator, part.fraction.denominator)

    def add_run(
        self,
        run: Run,
        dates: Sequence[dt.date],
        days: Sequence[int],
        rate: Decimal,
        numerators: Sequence[int],
        denominator: int,
    ) -> None:
        """Adds consecutive plain payment rows.

        Args:
            run: their figures.
            dates: of the rows.
            days: actual days of each period.
            rate: in force throughout.
            numerators: year fraction of each period, over the denominator.
            denominator: common to all.
        """
        count = len(dates)
        self.days += days
        self.kind += [RowKind.PAYMENT] * count
        self.date += dates
        self.annual_rate += [rate] * count
        self.opening += run.opening
        self.interest += run.interest
        self.principal += run.principal
        self.extra += [0] * count
        self.payment += run.payment
        self.closing += run.closing
        self.draw += [0] * count
        self.numerators += numerators
        self.denominators += [denominator] * count

    def schedule(self, terms: Terms) -> Schedule:
        """The finished schedule."""
        return Schedule(
            terms=terms,
            digits=terms.digits,
            kind=self.kind,
            date=self.date,
            days=self.days,
            annual_rate=self.annual_rate,
            opening=self.opening,
            interest=self.interest,
            principal=self.principal,
            extra=self.extra,
            charges=[0] * len(self.date),
            payment=self.payment,
            closing=self.closing,
            draw=self.draw,
            numerators=self.numerators,
            denominators=self.denominators,
            irregular=self.irregular,
            paid_before=self.paid_before,
            carried=self.carried,
            instalments=self.instalments,
            problems=tuple(self.problems),
        )
