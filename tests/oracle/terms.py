"""From a row of the book, keyed by its headers, to the terms the ledger needs. It takes clean input only."""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass
from datetime import date, timedelta
from decimal import Decimal
from fractions import Fraction

from .dates import STEPS, Grid, Step, add_months
from .money import PaymentRounding, currency_digits

MAX_PAYMENTS = 2600


@dataclass(frozen=True)
class Terms:
    """The note. Amounts are integer units; `count` is None when the term is to be run until paid off."""

    digits: int
    principal: int
    rate: Decimal
    funding: date
    grid: Grid
    count: int | None
    single: bool  # frequency "at maturity": one period, one payment
    whole_months: int | None  # of that one period, when it is a whole number of months
    advance: bool
    repayment: str
    payment: int | None
    balloon: int
    amortized_over: int | None
    interest_only: int
    day_count: str
    odd_day_count: str | None
    first_period: str
    compound: bool
    equal_basis: bool
    payment_rounding: PaymentRounding
    interest_rounding: str
    carries: bool  # interest that a payment does not cover is kept apart, bearing none
    extra_each: int
    extra_from: date | None
    extra_until: date | None

    @property
    def per_year(self) -> int:
        """Regular periods a year."""
        return self.grid.step.per_year

    @property
    def open_ended(self) -> bool:
        """True when nothing but the amount of the payment says how long the loan runs."""
        return self.count is None


def _text(loan: Mapping[str, object], header: str, default: str) -> str:
    value = loan.get(header)
    return default if value is None or value == "" else str(value).strip()


def _day(loan: Mapping[str, object], header: str) -> date | None:
    value = loan.get(header)
    if value is None or isinstance(value, date):
        return value
    raise ValueError(f"{header}: {value!r} is not a date")


def to_units(value: object, digits: int) -> int:
    """Currency units to integer ledger units; refuses what the ledger cannot hold exactly."""
    if isinstance(value, float) or not isinstance(value, int | str | Decimal):
        raise ValueError(f"not an exact amount: {value!r}")
    units = Fraction(value) * 10**digits
    if units.denominator != 1:
        raise ValueError(f"{value} has more than {digits} decimals")
    return int(units)


def duration(text: str) -> tuple[int, int] | None:
    """(months, days) of "30 years", "7y 6m", "26 weeks"; None for a plain number."""
    parts = re.findall(r"(\d+)\s*([a-z]+)", text.lower())
    if not parts:
        return None
    months = days = 0
    for number, unit in parts:
        if unit.startswith("y"):
            months += 12 * int(number)
        elif unit.startswith("m"):
            months += int(number)
        elif unit.startswith("w"):
            days += 7 * int(number)
        else:
            days += int(number)
    return months, days


def payments_in(value: object, step: Step) -> int:
    """A number of payments, given as such or as a duration."""
    span = duration(str(value))
    if span is None:
        return int(str(value))
    months, days = span
    count = Fraction(months * step.per_year, 12)
    if days:
        if not step.days:
            raise ValueError(f"{value}: days or weeks do not make a number of month-based payments")
        count += Fraction(days, step.days)
    if count.denominator != 1:
        raise ValueError(f"{value} is not a whole number of payments")
    return int(count)


def payment_rounding(text: str, digits: int, scale: int) -> PaymentRounding:
    """`nearest`, `up`, `down`, each with an optional step in currency units."""
    words = text.split()
    rule = words[0] if words[0] in ("nearest", "up", "down") else "nearest"
    steps = [word for word in words if word not in ("nearest", "up", "down")]
    return PaymentRounding(rule, to_units(steps[0], digits) if steps else scale)


def _month_span(d1: date, d2: date) -> int | None:
    """k when d2 is d1 plus k whole months (clipped), else None."""
    k = 12 * (d2.year - d1.year) + d2.month - d1.month
    return k if k > 0 and add_months(d1, k) == d2 else None


def _single(loan: Mapping[str, object], funding: date | None) -> tuple[date, Grid, int | None]:
    """Funding, yearly grid counted back from maturity, and whole months, of a loan paid once, at maturity."""
    maturity = _day(loan, "Maturity") or _day(loan, "First payment")
    if funding is None:
        raise ValueError("a loan due at maturity needs its funding date")
    if maturity is None:
        span = duration(_text(loan, "Term", ""))
        if span is None:
            raise ValueError("a loan due at maturity needs its maturity")
        maturity = add_months(funding, span[0]) + timedelta(days=span[1])
    return funding, Grid(maturity, STEPS["yearly"], "auto"), _month_span(funding, maturity)


def _dated(
    loan: Mapping[str, object], funding: date | None, step: Step, month_end: str, advance: bool
) -> tuple[date, Grid]:
    """Funding date and due dates, whichever of funding and first payment was given."""
    first = _day(loan, "First payment")
    if first is not None:
        grid = Grid(first, step, month_end)
        funding = funding or grid.due(1 if advance else 0)
        if advance and funding != first:
            raise ValueError("in advance the first payment is due on the funding date")
        return funding, grid
    if funding is None:
        raise ValueError("neither funding date nor first payment")
    return funding, Grid(funding, step, month_end, number=1 if advance else 0, derived=True)


def _count(loan: Mapping[str, object], grid: Grid) -> int | None:
    """Number of payments, from Term or from Maturity."""
    term = loan.get("Term")
    if term is not None and term != "":
        return payments_in(term, grid.step)
    maturity = _day(loan, "Maturity")
    if maturity is None:
        return None
    count = 1
    while grid.due(count) < maturity:
        count += 1
    if grid.due(count) != maturity:
        raise ValueError("maturity is not a due date")
    return count


def resolve(loan: Mapping[str, object]) -> Terms:
    """The row of the book, its blanks filled by the book's defaults."""
    minor = currency_digits(_text(loan, "Currency", "USD"))
    interest_rounding = _text(loan, "Interest rounding", "half up")
    digits = minor + 6 if interest_rounding == "none" else minor
    scale = 10**6 if interest_rounding == "none" else 1
    advance = _text(loan, "Timing", "arrears") == "advance"
    frequency = _text(loan, "Frequency", "monthly")
    month_end = _text(loan, "Month-end", "auto")
    funding = _day(loan, "Funding date")
    single = frequency == "at maturity"
    whole_months: int | None = None
    count: int | None
    if single:
        funding, grid, whole_months = _single(loan, funding)
        count = 1
    else:
        funding, grid = _dated(loan, funding, STEPS[frequency], month_end, advance)
        count = _count(loan, grid)
    repayment = "at maturity" if single else _text(loan, "Repayment", "level payment")
    if advance and repayment == "at maturity":
        raise ValueError("a loan due at maturity has no payments in advance")
    if grid.due(1) < funding or (grid.due(1) == funding and not advance):
        raise ValueError("first payment not after funding")
    payment, balloon, over = loan.get("Payment"), loan.get("Balloon"), loan.get("Amortized over")
    interest_only = int(str(loan.get("Interest-only payments") or 0))
    if count is not None and repayment.startswith("level") and interest_only >= count:
        repayment = "interest only"
    default_count = "30/360" if single or grid.step.of_months else "Actual/365 Fixed"
    odd = _text(loan, "Odd-day count", "")
    terms = Terms(
        digits=digits,
        principal=to_units(loan["Principal"], digits),
        rate=Decimal(str(loan["Annual rate"])),
        funding=funding,
        grid=grid,
        count=count,
        single=single,
        whole_months=whole_months,
        advance=advance,
        repayment=repayment,
        payment=None if payment is None else to_units(payment, digits),
        balloon=0 if balloon is None else to_units(balloon, digits),
        amortized_over=None if over is None else payments_in(over, grid.step),
        interest_only=interest_only if repayment.startswith("level") else 0,
        day_count=_text(loan, "Day count", default_count),
        odd_day_count=None if odd in ("", "Equal periods") else odd,
        first_period=_text(loan, "First period", "accrue"),
        compound=not single and _text(loan, "Long first period", "simple") == "compound",
        equal_basis=_text(loan, "Payment basis", "as accrued") == "equal periods",
        payment_rounding=payment_rounding(_text(loan, "Payment rounding", "nearest"), digits, scale),
        interest_rounding=interest_rounding,
        carries=_text(loan, "Unpaid interest", "add to balance") == "carry",
        extra_each=to_units(loan.get("Extra each payment") or 0, digits),
        extra_from=_day(loan, "Extra from"),
        extra_until=_day(loan, "Extra until"),
    )
    if terms.open_ended and (terms.payment is None or not repayment.startswith("level")):
        raise ValueError("no term: only a level loan with its payment given can be run until paid off")
    return terms
