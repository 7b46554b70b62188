"""Any valid loan: the generators that property tests draw from, to be grown with every new term.

Nothing hard is filtered out: odd first periods of either kind, month-ends, payments in advance with
balloons, zero and negative rates, payments that do not cover interest, several events on one day. `loans`
draws from all of it; `REGIONS` names the hard corners, each with a strategy that draws from nothing else.
"""

from collections.abc import Mapping
from dataclasses import dataclass
from datetime import date, timedelta
from decimal import Decimal
from enum import Enum
from typing import Any, TypeVar

from hypothesis import strategies as st

from tenorbook.basis.conventions import (
    AppliesTo,
    DayCount,
    ExtraEffect,
    FirstPeriod,
    Frequency,
    InterestRounding,
    LongFirst,
    MonthEnd,
    PaymentBasis,
    PaymentChange,
    PaymentRounding,
    Repayment,
    Timing,
    UnpaidInterest,
)
from tenorbook.basis.money import currency_digits
from tenorbook.calendar.due_dates import DueDates, is_month_end
from tenorbook.terms.loan import ExtraPayment, Length, LengthUnit, Loan, PaymentStep, RateChange

T = TypeVar("T")
E = TypeVar("E", bound=Enum)
Fixed = Mapping[str, st.SearchStrategy[Any]]
"""Choices that a region makes instead of the default strategy, by name."""

CURRENCIES = ("USD", "EUR", "JPY", "KWD")
PERIOD_DAYS = {frequency: 365 // frequency.per_year for frequency in Frequency}
REPEATING = tuple(frequency for frequency in Frequency if frequency is not Frequency.AT_MATURITY)
OF_MONTHS = tuple(frequency for frequency in REPEATING if not frequency.days)
AMORTIZING = (Repayment.LEVEL_PAYMENT, Repayment.LEVEL_PRINCIPAL)


def dates() -> st.SearchStrategy[date]:
    """Funding dates: any day, with the ends of months met more often than by chance."""
    anywhere = st.dates(date(1995, 1, 1), date(2045, 12, 31))
    return st.one_of(anywhere, month_ends(), st.builds(date, _years(), st.just(1), st.integers(28, 31)))


def month_ends() -> st.SearchStrategy[date]:
    """The last day of any month."""
    return st.builds(lambda year, month: date(year, month, 1) - timedelta(1), _years(), st.integers(1, 12))


def _years() -> st.SearchStrategy[int]:
    return st.integers(1996, 2045)


def rates(lowest: str = "0", highest: str = "0.25") -> st.SearchStrategy[Decimal]:
    """Annual rates as fractions, to six decimals; zero and the round ones met often."""
    return st.one_of(
        st.sampled_from([Decimal("0"), Decimal("0.06"), Decimal("0.0625"), Decimal("0.12")]),
        st.decimals(Decimal(lowest), Decimal(highest), places=6, allow_nan=False),
        st.decimals(Decimal(lowest), Decimal(highest), places=4, allow_nan=False),
    )


def amounts(digits: int, lowest: int, highest: int) -> st.SearchStrategy[Decimal]:
    """Amounts in currency units between two numbers of minor units."""
    return st.integers(lowest, max(lowest, highest)).map(lambda minor: Decimal(minor).scaleb(-digits))


def maybe(strategy: st.SearchStrategy[T]) -> st.SearchStrategy[T | None]:
    """A value, or a blank cell."""
    return st.one_of(st.none(), strategy)


def one_of_the(enum: type[E]) -> st.SearchStrategy[E | None]:
    """A member of an enum, or a blank cell."""
    return maybe(st.sampled_from(enum))


@dataclass(frozen=True)
class Outline:
    """What the other terms of a loan depend on.

    Attributes:
        principal: in minor units.
        due: the due dates by number.
        first: the first payment as entered; `None`: blank.
        count: number of payments, or about as many where the payment decides.
        open_ended: neither Term nor Maturity is entered.
        funding_blank: the funding date follows from the first payment.
    """

    digits: int
    principal: int
    rate: Decimal
    frequency: Frequency
    repayment: Repayment
    advance: bool
    funding: date
    first: date | None
    month_end: MonthEnd | None
    due: DueDates
    count: int
    open_ended: bool
    funding_blank: bool

    @property
    def amortizes(self) -> bool:
        """Whether scheduled payments repay principal."""
        return self.repayment in AMORTIZING and self.frequency is not Frequency.AT_MATURITY

    def days(self) -> st.SearchStrategy[date]:
        """Days from funding to past the end; funding, due dates and the days beside them met often."""
        last = self.due[self.count + 1]
        due = st.integers(1, self.count + 1).map(lambda number: self.due[number])
        return st.one_of(
            st.dates(self.funding, max(last, self.funding)),
            due,
            st.sampled_from([self.funding, max(self.funding, self.due[0]), self.due[1]]),
        )


@st.composite
def loans(draw: st.DrawFn, fixed: Fixed | None = None) -> Loan:
    """Any valid loan of the terms that the program computes.

    Args:
        draw: given by hypothesis.
        fixed: choices made instead of the usual ones, by the names in the code.
    """
    fixed = fixed or {}
    currency = draw(fixed.get("currency", st.sampled_from(CURRENCIES)))
    outline = draw(_outlines(currency, fixed))
    principal, digits = outline.principal, outline.digits
    return Loan(
        loan_id="L1",
        currency=currency,
        principal=Decimal(principal).scaleb(-digits),
        annual_rate=outline.rate,
        frequency=outline.frequency,
        timing=Timing.ADVANCE if outline.advance else draw(maybe(st.just(Timing.ARREARS))),
        repayment=outline.repayment,
        **draw(_dates_entered(outline)),
        **draw(_sizes(outline, fixed)),
        day_count=draw(fixed.get("day_count", one_of_the(DayCount))),
        odd_day_count=draw(fixed.get("odd_day_count", one_of_the(DayCount))),
        first_period=draw(fixed.get("first_period", one_of_the(FirstPeriod))),
        long_first_period=draw(fixed.get("long_first_period", one_of_the(LongFirst))),
        payment_rounding=draw(maybe(_payment_rounding(digits, principal))),
        interest_rounding=draw(fixed.get("interest_rounding", one_of_the(InterestRounding))),
        unpaid_interest=draw(fixed.get("unpaid_interest", one_of_the(UnpaidInterest))),
        **draw(_each_payment(outline)),
        extra_payments=draw(_extras(outline, fixed)),
        rate_changes=draw(_rate_changes(outline, fixed)),
    )


def _principals() -> st.SearchStrategy[int]:
    """Minor units, from a single one up."""
    return st.one_of(st.integers(1, 10**4), st.integers(1, 10**7), st.integers(10**6, 10**11))


@st.composite
def _outlines(draw: st.DrawFn, currency: str, fixed: Fixed) -> Outline:
    digits = currency_digits(currency)
    assert digits is not None
    frequency = draw(fixed.get("frequency", st.sampled_from(Frequency)))
    repayment = draw(fixed.get("repayment", st.sampled_from(Repayment)))
    single = frequency is Frequency.AT_MATURITY
    most = min(120, 20 * frequency.per_year)
    count = 1 if single else draw(fixed.get("count", st.integers(1, most)))
    advance = draw(fixed.get("advance", st.booleans())) and repayment is not Repayment.AT_MATURITY
    advance = advance and not single
    level = repayment in AMORTIZING and not single
    open_ended = level and draw(fixed.get("open_ended", st.sampled_from([False, False, False, True])))
    funding = draw(fixed.get("funding", dates()))
    first, month_end = draw(_dating(frequency, funding, advance, fixed))
    due = _due_dates(frequency, funding, first, month_end, advance)
    derived = first is not None and not {"funding", "days_ahead"} & fixed.keys()
    funding_blank = derived and draw(st.sampled_from([False, False, True]))
    if funding_blank:
        funding = due[1] if advance else due[0]
    return Outline(
        digits=digits,
        principal=draw(fixed.get("principal", _principals())),
        rate=draw(fixed.get("rate", st.one_of(rates(), rates(), rates("-0.05", "0.9")))),
        frequency=frequency,
        repayment=repayment,
        advance=advance,
        funding=funding,
        first=first,
        month_end=month_end,
        due=due,
        count=count,
        open_ended=open_ended,
        funding_blank=funding_blank,
    )


@st.composite
def _dating(
    draw: st.DrawFn, frequency: Frequency, funding: date, advance: bool, fixed: Fixed
) -> tuple[date | None, MonthEnd | None]:
    """First payment and month-end rule; `yes` may move a first payment to the end of its month."""
    month_end = draw(fixed.get("month_end", maybe(st.sampled_from([MonthEnd.AUTO, MonthEnd.NO]))))
    if frequency is Frequency.AT_MATURITY:
        return None, month_end
    if advance:
        if is_month_end(funding) and "month_end" not in fixed:
            month_end = draw(one_of_the(MonthEnd))
        return draw(maybe(st.just(funding))), month_end
    period = PERIOD_DAYS[frequency]
    regular = DueDates.after(funding, frequency)[1]
    ahead = fixed.get("days_ahead", st.integers(1, 5 * period // 2)).map(
        lambda days: funding + timedelta(days)
    )
    first = draw(ahead if "days_ahead" in fixed else st.one_of(ahead, ahead, st.just(regular), st.none()))
    if first is not None and "month_end" not in fixed:
        month_end = draw(one_of_the(MonthEnd))
    return first, month_end


def _due_dates(
    frequency: Frequency, funding: date, first: date | None, month_end: MonthEnd | None, advance: bool
) -> DueDates:
    """The due dates as the program will count them, to lay events and a maturity on them."""
    if first is not None:
        return DueDates.of(first, frequency, month_end or MonthEnd.AUTO)
    after = DueDates.after(funding, frequency, month_end or MonthEnd.AUTO)
    return DueDates(after.anchor, 1, frequency, after.month_end) if advance else after


@st.composite
def _dates_entered(draw: st.DrawFn, outline: Outline) -> dict[str, Any]:
    """Funding date, first payment, and a term: as payments, a duration or the maturity, or not at all."""
    entered: dict[str, Any] = {
        "funding_date": None if outline.funding_blank else outline.funding,
        "first_payment": outline.first,
        "month_end": outline.month_end,
    }
    if outline.frequency is Frequency.AT_MATURITY:
        return {**entered, **draw(_single_date(outline.funding))}
    if outline.open_ended:
        return entered
    ways: list[dict[str, Any]] = [
        {"term": Length(outline.count)},
        {"term": _duration(outline)},
        {"maturity": outline.due[outline.count]},
        {"term": Length(outline.count), "maturity": outline.due[outline.count]},
    ]
    return {**entered, **draw(st.sampled_from(ways))}


def _duration(outline: Outline) -> Length:
    """The term in words where the frequency divides it, else as a number of payments."""
    count, frequency = outline.count, outline.frequency
    if frequency.days:
        return Length(count * frequency.days // 7, LengthUnit.WEEKS)
    if frequency.months:
        return Length(count * frequency.months, LengthUnit.MONTHS)
    return Length(count // 2, LengthUnit.MONTHS) if count % 2 == 0 else Length(count)


def _single_date(funding: date) -> st.SearchStrategy[dict[str, Any]]:
    """The date of a loan with one payment, in one of its four ways."""
    days = st.integers(1, 3000)
    return st.one_of(
        st.integers(1, 120).map(lambda months: {"term": Length(months, LengthUnit.MONTHS)}),
        days.map(lambda number: {"term": Length(number, LengthUnit.DAYS)}),
        days.map(lambda number: {"maturity": funding + timedelta(number)}),
        days.map(lambda number: {"first_payment": funding + timedelta(number)}),
    )


@st.composite
def _sizes(draw: st.DrawFn, outline: Outline, fixed: Fixed) -> dict[str, Any]:
    """Payment, balloon, interest-only payments and what the payment is sized over."""
    sizes: dict[str, Any] = {"payment_basis": draw(fixed.get("payment_basis", one_of_the(PaymentBasis)))}
    if not outline.amortizes:
        return sizes
    most = min(outline.count - 1, 6 if outline.open_ended else outline.count)
    interest_only = draw(fixed.get("interest_only", maybe(st.integers(0, most))))
    interest_only = min(interest_only or 0, most) or None
    left = outline.count - (interest_only or 0)
    payment = draw(_payment(outline, left, fixed))
    balloon = draw(fixed.get("balloon", maybe(amounts(outline.digits, 0, outline.principal))))
    over = None
    if payment is None:
        over = draw(fixed.get("amortized_over", maybe(st.integers(left, left + 60).map(Length))))
    return sizes | {
        "interest_only_payments": interest_only,
        "payment": payment,
        "balloon": None if balloon is None else min(balloon, _units(outline.principal, outline.digits)),
        "amortized_over": over,
    }


def _units(minor: int, digits: int) -> Decimal:
    return Decimal(minor).scaleb(-digits)


@st.composite
def _payment(draw: st.DrawFn, outline: Outline, left: int, fixed: Fixed) -> Decimal | None:
    """The note's payment in one loan of three: near what repays the loan, or well off it.

    Where it decides the term it covers the interest of a long period, so that the loan ends.
    """
    level = outline.repayment is Repayment.LEVEL_PAYMENT
    interest = int(outline.principal * max(outline.rate, Decimal(0)) / outline.frequency.per_year)
    if outline.open_ended:
        part = outline.principal // draw(st.integers(1, 120)) + 1
        payment = part + interest * draw(st.integers(112, 150)) // 100 if level else part
        return _units(payment, outline.digits)
    if not draw(fixed.get("payment_given", st.sampled_from([False, False, True]))):
        return None
    percent = draw(fixed.get("percent", st.one_of(st.integers(90, 110), st.integers(20, 300))))
    needed = outline.principal // left + (interest * 6 // 10 if level else 0)
    return _units(max(1, needed * percent // 100), outline.digits)


def _payment_rounding(digits: int, principal: int) -> st.SearchStrategy[PaymentStep]:
    steps = st.sampled_from([Decimal(1).scaleb(-digits), Decimal(1), Decimal("5")])
    return st.builds(
        PaymentStep,
        st.sampled_from(PaymentRounding),
        st.one_of(st.none(), steps) if principal > 10**6 else st.none(),
    )


@st.composite
def _each_payment(draw: st.DrawFn, outline: Outline) -> dict[str, Any]:
    """An extra with each payment in one loan of three, now and then between two dates."""
    if draw(st.integers(0, 2)):
        return {}
    start, end = sorted((draw(outline.days()), draw(outline.days())))
    return {
        "extra_each_payment": draw(amounts(outline.digits, 1, outline.principal // 20 + 1)),
        "extra_from": draw(maybe(st.just(start))),
        "extra_until": draw(maybe(st.just(end))),
    }


def _extras(outline: Outline, fixed: Fixed) -> st.SearchStrategy[tuple[ExtraPayment, ...]]:
    least, most = (1, 3) if "with_extras" in fixed else (0, 3)
    return st.lists(_extra(outline, fixed), min_size=least, max_size=most).map(tuple)


@st.composite
def _extra(draw: st.DrawFn, outline: Outline, fixed: Fixed) -> ExtraPayment:
    day, digits, principal = draw(fixed.get("day", outline.days())), outline.digits, outline.principal
    every = draw(st.one_of(st.none(), st.none(), st.sampled_from(REPEATING)))
    part = amounts(digits, 1, principal // 10 + 1)
    big = amounts(digits, principal // 2 + 1, principal * 2)
    until = st.one_of(st.none(), st.integers(1, 12), outline.days().map(lambda last: max(day, last)))
    return ExtraPayment(
        date=max(day, outline.funding),
        amount=draw(fixed.get("extra_amount", st.one_of(part, part, big))),
        every=every,
        until=draw(until) if every else None,
        effect=draw(fixed.get("effect", one_of_the(ExtraEffect))),
        applies_to=draw(one_of_the(AppliesTo)),
    )


@st.composite
def _rate_changes(draw: st.DrawFn, outline: Outline, fixed: Fixed) -> tuple[RateChange, ...]:
    least = 1 if "with_rates" in fixed else 0
    days = st.lists(fixed.get("day", outline.days()), min_size=least, max_size=3, unique=True)
    payment = st.one_of(
        st.none(),
        st.sampled_from(PaymentChange),
        amounts(outline.digits, outline.principal // 100 + 1, outline.principal // 5 + 1),
    )
    return tuple(
        RateChange(from_date=max(day, outline.funding), annual_rate=draw(rates()), payment=draw(payment))
        for day in draw(days)
    )


_YES, _NO = st.just(True), st.just(False)
_LONG = {
    "advance": _NO,
    "frequency": st.sampled_from([Frequency.EVERY_2_WEEKS, Frequency.MONTHLY, Frequency.QUARTERLY]),
    "days_ahead": st.integers(100, 260),
    "count": st.integers(1, 24),
}
_SIZEABLE = {
    "principal": st.integers(10**5, 10**9),
    "rate": rates("0.01", "0.25").map(lambda rate: rate or Decimal("0.05")),
}
_ONE_DAY = date(2024, 3, 15)

REGIONS: dict[str, st.SearchStrategy[Loan]] = {
    "compound long first period": loans(_LONG | {"long_first_period": st.just(LongFirst.COMPOUND)}),
    "odd days capitalized": loans(
        _LONG | _SIZEABLE | {"first_period": st.just(FirstPeriod.CAPITALIZE)},
    ),
    "odd days paid at funding, with events": loans(
        _LONG | {"first_period": st.just(FirstPeriod.PAY_AT_FUNDING), "with_extras": _YES, "with_rates": _YES}
    ),
    "short first period": loans(
        {"advance": _NO, "frequency": st.just(Frequency.MONTHLY), "days_ahead": st.integers(1, 27)}
    ),
    "in advance with a balloon": loans(
        {
            "advance": _YES,
            "frequency": st.sampled_from(REPEATING),
            "repayment": st.sampled_from(AMORTIZING),
            "open_ended": _NO,
            "balloon": amounts(0, 300, 900),
            **_SIZEABLE,
        }
    ),
    "payment that decides the term": loans(
        {
            "open_ended": _YES,
            "repayment": st.sampled_from(AMORTIZING),
            "frequency": st.sampled_from(REPEATING),
        }
    ),
    "interest only in advance": loans(
        {
            "advance": _YES,
            "repayment": st.just(Repayment.INTEREST_ONLY),
            "frequency": st.sampled_from(REPEATING),
        }
    ),
    "month-ends": loans(
        {
            "frequency": st.sampled_from(OF_MONTHS),
            "funding": month_ends(),
            "month_end": st.sampled_from([MonthEnd.YES, MonthEnd.YES, MonthEnd.AUTO]),
        }
    ),
    "twice a month": loans({"frequency": st.just(Frequency.TWICE_A_MONTH)}),
    "interest carried unrounded": loans({"interest_rounding": st.just(InterestRounding.NONE)}),
    "pay ahead": loans(
        {
            "with_extras": _YES,
            "effect": st.just(ExtraEffect.PAY_AHEAD),
            "repayment": st.sampled_from(AMORTIZING),
            "frequency": st.sampled_from(REPEATING),
        }
    ),
    "several events on one day": loans(
        {
            "with_extras": _YES,
            "with_rates": _YES,
            "day": st.just(_ONE_DAY),
            "funding": st.dates(date(2023, 12, 1), _ONE_DAY),
            "count": st.integers(3, 30),
            "frequency": st.sampled_from(OF_MONTHS),
        }
    ),
    "payments that do not cover interest": loans(
        {
            "principal": _SIZEABLE["principal"],
            "rate": st.decimals(Decimal("0.3"), Decimal("0.9"), places=4),
            "count": st.integers(24, 60),
            "payment_given": _YES,
            "percent": st.integers(5, 60),
            "open_ended": _NO,
            "repayment": st.just(Repayment.LEVEL_PAYMENT),
            "frequency": st.sampled_from(OF_MONTHS),
        }
    ),
    "one payment at maturity": loans({"frequency": st.just(Frequency.AT_MATURITY)}),
    "payment on equal periods": loans(
        {
            "payment_basis": st.just(PaymentBasis.EQUAL_PERIODS),
            "day_count": st.just(DayCount.ACTUAL_360),
            "repayment": st.just(Repayment.LEVEL_PAYMENT),
        }
    ),
}
"""The hard corners of the terms, each with loans that lie (nearly all) in it."""
