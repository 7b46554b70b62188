"""Events and conventions in words."""

from collections.abc import Collection
from datetime import date
from decimal import Decimal
from typing import NamedTuple

from tenorbook.basis.conventions import (
    DayCount,
    FirstPeriod,
    Frequency,
    InterestRounding,
    LongFirst,
    PaymentBasis,
    PaymentRounding,
    Repayment,
    RowKind,
    UnpaidInterest,
)
from tenorbook.basis.money import to_text
from tenorbook.schedule.ledger import Schedule
from tenorbook.terms.terms import Terms

MARK = "\u25c6 "
"""Before the words of a row that is not an ordinary payment."""

CAUTION = (
    "Figures follow the terms as entered; the note and the holder's own statement govern. "
    "Rate disclosures, tax and accounting treatment are for licensed practice and local law."
)
"""What every output says where someone might act on it."""


class Event(NamedTuple):
    """What a row is, in words, and whether it is set apart from ordinary payments."""

    text: str
    marked: bool


_KINDS = {
    RowKind.FUNDING: "Funding",
    RowKind.EXTRA: "Extra payment",
    RowKind.DRAW: "Draw",
    RowKind.RATE: "Rate change",
    RowKind.SKIP: "No payment",
    RowKind.BALLOON: "Balloon",
    RowKind.CAPITALIZE: "Interest capitalized",
    RowKind.CHARGE: "Charge",
}


def event_words(schedule: Schedule, reduced: Collection[int] = ()) -> list[Event]:
    """The words of each row.

    Args:
        schedule: the schedule.
        reduced: rows whose payment is less because of what was paid ahead.
    """
    changes = iter(schedule.terms.repricings)
    plain, telling = Event("Payment", False), _telling_rows(schedule, reduced)
    events = []
    for row, kind in enumerate(schedule.kind):
        if kind is RowKind.PAYMENT and row not in telling:
            events.append(plain)
        elif kind is RowKind.RATE:
            change = next(changes, None)
            events.append(Event(MARK + f"Rate change{_to_rate(change.rate) if change else ''}", True))
        else:
            events.append(_event(schedule, row, kind, row in reduced))
    return events


def _telling_rows(schedule: Schedule, reduced: Collection[int]) -> set[int]:
    """Rows of which more is to be said than that they are payments; few of most loans."""
    columns = zip(schedule.extra, schedule.principal, strict=True)
    telling = {row for row, (extra, principal) in enumerate(columns) if extra or principal < 0}
    return telling | {schedule.last_row, *reduced}


def _to_rate(rate: Decimal) -> str:
    return f" to {percent(rate)}"


def _event(schedule: Schedule, row: int, kind: RowKind, reduced: bool) -> Event:
    last = row == schedule.last_row
    if kind is RowKind.FUNDING:
        return Event(_KINDS[kind], False)
    if kind is not RowKind.PAYMENT:
        ending = ", paid off" if last and kind is RowKind.EXTRA else ""
        return Event(MARK + _KINDS[kind] + ending, True)
    words = "Last payment" if last else "Payment"
    if schedule.extra[row]:
        words += " and extra"
    elif reduced:
        words += ", less paid ahead"
    elif schedule.principal[row] < 0:
        words = "Payment below interest"
    marked = words != "Payment"
    return Event(MARK * marked + words, marked)


def percent(rate: Decimal) -> str:
    """A rate as percent, with at least two digits after the point: 6.25%, 5.125%."""
    shown = (rate * 100).normalize()
    exponent = shown.as_tuple().exponent
    digits = max(2, -exponent if isinstance(exponent, int) else 0)
    return f"{shown:.{digits}f}%"


def day(moment: date) -> str:
    """A date for a sentence, the month in letters: 15 Jan 2026."""
    return f"{moment.day} {moment:%b %Y}"


def amount(units: int, digits: int) -> str:
    """An amount for a sentence, with thousands marks."""
    text = to_text(abs(units), digits)
    whole, _, rest = text.partition(".")
    sign = "-" if units < 0 else ""
    return f"{sign}{int(whole):,}" + (f".{rest}" if rest else "")


def conventions(schedule: Schedule) -> tuple[str, ...]:
    """How the figures were computed, a sentence a convention."""
    terms = schedule.terms
    sentences = [
        _repayment(terms),
        _day_count(terms),
        _first_period(schedule),
        _rounding(terms),
        _sizing(terms),
    ]
    if terms.unpaid_interest is UnpaidInterest.CARRY:
        sentences.append("Interest that a payment does not cover is carried without interest.")
    return tuple(sentence for sentence in sentences if sentence)


def _repayment(terms: Terms) -> str:
    shape = {
        Repayment.LEVEL_PAYMENT: "Level payments, interest first",
        Repayment.LEVEL_PRINCIPAL: "Level principal, and interest on top",
        Repayment.INTEREST_ONLY: "Interest only, principal at the end",
        Repayment.AT_MATURITY: "Principal and interest in one payment at maturity",
    }[terms.repayment]
    if terms.one_payment:
        return "Principal and interest in one payment at maturity."
    first = f"; the first {terms.interest_only} are interest only" if terms.interest_only else ""
    timing = "in advance" if terms.in_advance else "in arrears"
    return f"{shape}, {terms.frequency}, {timing}{first}."


def _day_count(terms: Terms) -> str:
    words = {
        DayCount.THIRTY_360: "Interest on a year of twelve 30-day months (30/360)",
        DayCount.THIRTY_360_BY_DATES: "Interest on 30-day months by dates (30/360)",
        DayCount.THIRTY_360_US_EOM: "Interest on 30-day months by dates, February's end as day 30 (30/360)",
        DayCount.THIRTY_E_360: "Interest on 30-day months by dates (30E/360)",
        DayCount.THIRTY_E_360_ISDA: "Interest on 30-day months by dates (30E/360 ISDA)",
        DayCount.ACTUAL_360: "Interest on actual days over 360",
        DayCount.ACTUAL_365_FIXED: "Interest on actual days over 365",
        DayCount.ACTUAL_365_25: "Interest on actual days over 365.25",
        DayCount.ACTUAL_365_LEAP: "Interest on actual days over 365, or 366 in a leap year",
        DayCount.ACTUAL_ACTUAL_ISDA: "Interest on actual days, each over the days of its own year (ISDA)",
        DayCount.ACTUAL_ACTUAL_ICMA: "Interest on actual days over those of the regular period (ICMA)",
        DayCount.NL_365: "Interest on actual days without 29 February, over 365",
        DayCount.EQUAL_PERIODS: f"Interest in equal periods, {terms.frequency.per_year} to the year",
    }[terms.day_count]
    odd = f"; odd days by {terms.odd_day_count}" if terms.odd_day_count is not terms.day_count else ""
    return f"{words}{odd}."


def _first_period(schedule: Schedule) -> str:
    """What the first period is like, and what became of its odd days."""
    terms = schedule.terms
    if terms.in_advance or terms.frequency is Frequency.AT_MATURITY or terms.funding == terms.due[0]:
        return ""
    length = (terms.due[1] - terms.funding).days
    size = "short" if terms.funding > terms.due[0] else "long"
    odd = {
        FirstPeriod.ACCRUE: "interest accrued for all of them",
        FirstPeriod.ADD_TO_FIRST: "odd-day interest added to the first payment",
        FirstPeriod.PAY_AT_FUNDING: "odd-day interest paid at funding",
        FirstPeriod.CAPITALIZE: "odd-day interest added to principal",
        FirstPeriod.WAIVE: "odd-day interest not charged",
    }[terms.first_period]
    if size == "short" and terms.first_period is FirstPeriod.ADD_TO_FIRST:
        odd = "the interest of the missing days taken off the first payment"
    compound = (
        ", whole periods compounding" if terms.long_first is LongFirst.COMPOUND and size == "long" else ""
    )
    return f"A {size} first period of {length} days: {odd}{compound}."


def _rounding(terms: Terms) -> str:
    unit = to_text(1, terms.currency_digits)
    words = {
        InterestRounding.HALF_UP: f"to the nearest {unit}, halves away from zero",
        InterestRounding.HALF_EVEN: f"to the nearest {unit}, halves to even",
        InterestRounding.DOWN: f"down to {unit}",
        InterestRounding.UP: f"up to {unit}",
        InterestRounding.NONE: "to a millionth of the smallest unit, so that in effect it is not rounded",
    }[terms.interest_rounding]
    return f"Interest is rounded {words}, each time it is posted; the last payment takes the rest."


def _sizing(terms: Terms) -> str:
    """How a solved payment was sized and rounded."""
    solved = terms.repayment in (Repayment.LEVEL_PAYMENT, Repayment.LEVEL_PRINCIPAL) and terms.payment is None
    if not solved or terms.one_payment:
        return ""
    step = to_text(terms.payment_step, terms.digits)
    way = {
        PaymentRounding.NEAREST: "to the nearest",
        PaymentRounding.UP: "up to the next",
        PaymentRounding.DOWN: "down to the",
    }[terms.payment_rounding]
    equal = terms.payment_basis is PaymentBasis.EQUAL_PERIODS
    basis = " as if all periods were equal" if equal else " on the periods as they accrue"
    if terms.repayment is Repayment.LEVEL_PRINCIPAL:
        basis = ""
    return f"The payment is solved{basis} and rounded {way} {_trimmed(step)}."


def _trimmed(step: str) -> str:
    """A step without the digits that carry nothing beyond the second: 0.01000000 is 0.01."""
    if "." not in step:
        return step
    whole, rest = step.split(".")
    return f"{whole}.{rest[:2]}{rest[2:].rstrip('0')}"
