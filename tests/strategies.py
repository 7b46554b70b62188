"""Any valid loan: the generators that property tests draw from, to be grown with every new term.

Nothing hard is filtered out: odd first periods of either kind, month-ends, payments in advance with
balloons, zero and negative rates, payments that do not cover interest, several events on one day.
"""

from datetime import date, timedelta
from decimal import Decimal

from typing import TypeVar

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
)
from tenorbook.basis.money import currency_digits
from tenorbook.terms.loan import ExtraPayment, Length, LengthUnit, Loan, PaymentStep, RateChange

T = TypeVar("T")

CURRENCIES = ("USD", "EUR", "JPY", "KWD")
PERIOD_DAYS = {frequency: 365 // frequency.per_year for frequency in Frequency}
REPEATING = tuple(frequency for frequency in Frequency if frequency is not Frequency.AT_MATURITY)


def dates() -> st.SearchStrategy[date]:
    """Funding dates: any day, with the ends of months met more often than by chance."""
    anywhere = st.dates(date(1995, 1, 1), date(2045, 12, 31))
    month_ends = st.builds(
        lambda year, month: date(year, month, 1) - timedelta(1),
        st.integers(1996, 2045),
        st.integers(1, 12),
    )
    late = st.builds(date, st.integers(1996, 2045), st.just(1), st.integers(28, 31))
    return st.one_of(anywhere, month_ends, late)


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


@st.composite
def loans(draw: st.DrawFn) -> Loan:
    """Any valid loan of the terms that the program computes."""
    frequency = draw(st.sampled_from(Frequency))
    currency = draw(st.sampled_from(CURRENCIES))
    digits = currency_digits(currency)
    assert digits is not None
    principal = draw(st.integers(1_000, 10**draw(st.integers(4, 11))))
    count = 1 if frequency is Frequency.AT_MATURITY else draw(st.integers(1, min(120, 20 * frequency.per_year)))
    repayment = draw(st.sampled_from(Repayment))
    advance = draw(st.booleans()) and repayment is not Repayment.AT_MATURITY and count > 1
    advance = advance and frequency is not Frequency.AT_MATURITY
    funding = draw(dates())
    rate = draw(st.one_of(rates(), rates(), rates("-0.05", "0.9")))
    amortizes = repayment in (Repayment.LEVEL_PAYMENT, Repayment.LEVEL_PRINCIPAL)
    interest_only = draw(st.integers(0, count - 1)) if amortizes and draw(st.booleans()) else None
    left = count - (interest_only or 0)
    first, month_end = draw(_dating(frequency, funding, advance))
    end = funding + timedelta(PERIOD_DAYS[frequency] * (count + 1))
    payment = draw(_payment(repayment, principal, rate, frequency, left, digits))
    return Loan(
        loan_id="L1",
        currency=currency,
        principal=Decimal(principal).scaleb(-digits),
        annual_rate=rate,
        funding_date=funding,
        first_payment=first,
        term=draw(_term(frequency, count)),
        frequency=frequency,
        timing=Timing.ADVANCE if advance else draw(maybe(st.just(Timing.ARREARS))),
        repayment=repayment,
        payment=payment,
        balloon=draw(maybe(amounts(digits, 0, principal))) if amortizes else None,
        amortized_over=draw(maybe(st.integers(left, left + 60).map(Length)))
        if amortizes and payment is None
        else None,
        interest_only_payments=interest_only,
        day_count=draw(maybe(st.sampled_from(DayCount))),
        odd_day_count=draw(maybe(st.sampled_from(DayCount))),
        first_period=draw(maybe(st.sampled_from(FirstPeriod))),
        long_first_period=draw(maybe(st.sampled_from(LongFirst))),
        payment_basis=draw(maybe(st.sampled_from(PaymentBasis))),
        payment_rounding=draw(maybe(_payment_rounding(digits, principal))),
        interest_rounding=draw(maybe(st.sampled_from(InterestRounding))),
        month_end=month_end,
        extra_each_payment=draw(st.one_of(st.none(), st.none(), amounts(digits, 1, principal // 20 + 1))),
        extra_payments=tuple(draw(st.lists(_extra(funding, end, principal, digits), max_size=3))),
        rate_changes=draw(_rate_changes(funding, end, principal, digits)),
    )


@st.composite
def _dating(
    draw: st.DrawFn, frequency: Frequency, funding: date, advance: bool
) -> tuple[date | None, MonthEnd | None]:
    """First payment and month-end rule."""
    month_end = draw(maybe(st.sampled_from([MonthEnd.AUTO, MonthEnd.NO])))
    if frequency is Frequency.AT_MATURITY or advance:
        return None, month_end
    first = draw(maybe(st.integers(1, 5 * PERIOD_DAYS[frequency] // 2).map(lambda days: funding + timedelta(days))))
    if first is not None and (first + timedelta(1)).day == 1:
        month_end = draw(maybe(st.sampled_from(MonthEnd)))
    return first, month_end


def _term(frequency: Frequency, count: int) -> st.SearchStrategy[Length]:
    if frequency is Frequency.AT_MATURITY:
        return st.one_of(
            st.integers(1, 120).map(lambda months: Length(months, LengthUnit.MONTHS)),
            st.integers(1, 2000).map(lambda days: Length(days, LengthUnit.DAYS)),
        )
    return st.just(Length(count))


@st.composite
def _payment(
    draw: st.DrawFn,
    repayment: Repayment,
    principal: int,
    rate: Decimal,
    frequency: Frequency,
    left: int,
    digits: int,
) -> Decimal | None:
    """The note's payment in one loan of three: near the level payment, or well off it."""
    if repayment is not Repayment.LEVEL_PAYMENT or draw(st.integers(0, 2)):
        return None
    interest = int(principal * max(rate, Decimal(0)) / frequency.per_year)
    level = principal // left + interest * 6 // 10
    percent = draw(st.one_of(st.integers(90, 110), st.integers(20, 300)))
    return Decimal(max(1, level * percent // 100)).scaleb(-digits)


def _payment_rounding(digits: int, principal: int) -> st.SearchStrategy[PaymentStep]:
    steps = st.sampled_from([Decimal(1).scaleb(-digits), Decimal(1), Decimal("5")])
    return st.builds(
        PaymentStep,
        st.sampled_from(PaymentRounding),
        st.one_of(st.none(), steps) if principal > 10**6 else st.none(),
    )


@st.composite
def _extra(draw: st.DrawFn, funding: date, end: date, principal: int, digits: int) -> ExtraPayment:
    day = draw(st.dates(funding, max(end, funding)))
    return ExtraPayment(
        date=day,
        amount=draw(
            st.one_of(
                amounts(digits, 1, principal // 10 + 1),
                amounts(digits, principal // 2, principal * 2),
            )
        ),
        every=draw(st.one_of(st.none(), st.none(), st.sampled_from(REPEATING))),
        until=draw(st.one_of(st.none(), st.integers(1, 12))),
        effect=draw(maybe(st.sampled_from(ExtraEffect))),
        applies_to=draw(maybe(st.sampled_from(AppliesTo))),
    )


@st.composite
def _rate_changes(
    draw: st.DrawFn, funding: date, end: date, principal: int, digits: int
) -> tuple[RateChange, ...]:
    days = draw(st.lists(st.dates(funding, max(end, funding)), max_size=3, unique=True))
    payment = st.one_of(
        st.none(), st.sampled_from(PaymentChange), amounts(digits, principal // 100 + 1, principal // 5 + 1)
    )
    return tuple(
        RateChange(from_date=day, annual_rate=draw(rates()), payment=draw(payment)) for day in days
    )
