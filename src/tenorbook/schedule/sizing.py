"""Sizing a level payment on the factors of the dated schedule.

After n payments a balance B0 has become ``B0 x G - P x S``: G is the growth of 1, S what payments of 1
have grown to. Setting that to the balloon gives the payment. G and S are built period by period in
Decimal with 50 digits; where all factors are equal the sum closes to the ordinary annuity (in
advance: the annuity due).
"""

from collections.abc import Sequence
from dataclasses import dataclass
from decimal import Context, Decimal, localcontext
from fractions import Fraction
from typing import NamedTuple

from tenorbook.basis.conventions import PaymentBasis, Repayment
from tenorbook.basis.rounding import round_payment
from tenorbook.schedule.steps import Steps, exact

PRECISION = Context(prec=50)
_BLOCKS = (48, 12, 1)  # months of a leap-year cycle, of a year: their patterns of days recur


class Growth(NamedTuple):
    """What a run of periods does: a balance becomes balance x `balance` - payment x `payments`."""

    balance: Decimal
    payments: Decimal

    def then(self, later: "Growth") -> "Growth":
        """This run followed by a later one."""
        return Growth(self.balance * later.balance, self.payments * later.balance + later.payments)


_NOTHING = Growth(Decimal(1), Decimal(0))
_PAYMENT_AT_ONCE = Growth(Decimal(1), Decimal(1))


def one_period(factor: Fraction) -> Growth:
    """A period of interest with a payment at its end."""
    return Growth(1 + Decimal(factor.numerator) / Decimal(factor.denominator), Decimal(1))


def equal_periods(factor: Fraction, count: int) -> Growth:
    """`count` periods of the same factor, in closed form."""
    rate = Decimal(factor.numerator) / Decimal(factor.denominator)
    if rate == 0:
        return Growth(Decimal(1), Decimal(count))
    growth = (1 + rate) ** count
    return Growth(growth, (growth - 1) / rate)


def dated_periods(numerators: Sequence[int], denominator: int, rate: Fraction) -> Growth:
    """Periods of uneven factors; blocks with the same pattern of days are worked out once."""
    if numerators and numerators.count(numerators[0]) == len(numerators):
        return equal_periods(rate * Fraction(numerators[0], denominator), len(numerators))
    below = Decimal(denominator * rate.denominator)
    known: dict[tuple[int, ...], Growth] = {
        (numerator,): Growth(1 + numerator * rate.numerator / below, Decimal(1))
        for numerator in set(numerators)
    }
    return _composed(tuple(numerators), _BLOCKS, known)


def _composed(
    pattern: tuple[int, ...], sizes: tuple[int, ...], known: dict[tuple[int, ...], Growth]
) -> Growth:
    """A run of periods as blocks of a size, those as blocks of the next size, down to single periods."""
    balance, payments = _NOTHING
    size, smaller = sizes[0], sizes[1:]
    for start in range(0, len(pattern), size):
        block = pattern[start : start + size]
        if block not in known:
            known[block] = _composed(block, smaller, known)
        grown, paid = known[block]
        balance, payments = balance * grown, payments * grown + paid
    return Growth(balance, payments)


@dataclass(frozen=True, slots=True)
class Plan:
    """What the contract comes to if nothing happens.

    Attributes:
        count: number of payments; `None` while a fixed payment is still to decide it.
        balloon: principal to be left after the last of them, in the ledger's unit.
    """

    count: int | None
    balloon: int


@dataclass(frozen=True, slots=True)
class Sizer:
    """Sizes the scheduled amount of one loan, at funding and whenever it is re-amortized."""

    steps: Steps
    plan: Plan

    def remaining(self, paid: int) -> int:
        """Amortizing payments still to come after `paid` payments, by the number that sizes them."""
        terms = self.steps.terms
        return self._sized_to() - max(paid, terms.interest_only)

    def _sized_to(self) -> int:
        terms = self.steps.terms
        over = terms.amortized_over
        return terms.interest_only + over if over else self.plan.count or self.steps.last

    def amount(self, balance: int, balloon: int, rate: Decimal, paid: int) -> int:
        """The level payment, or with level principal the principal part, rounded as the loan says.

        Args:
            balance: after `paid` payments, in the ledger's unit.
            balloon: principal to be left after the last payment that sizes it.
            rate: annual rate in force.
            paid: payments already made, interest-only ones included.
        """
        terms = self.steps.terms
        with localcontext(PRECISION):
            if terms.repayment is Repayment.LEVEL_PRINCIPAL:
                unrounded = Decimal(balance - balloon) / self.remaining(paid)
            else:
                growth = self._growth(rate, paid)
                unrounded = (balance * growth.balance - balloon) / growth.payments
        return round_payment(unrounded, terms.payment_rounding, terms.payment_step)

    def _growth(self, rate: Decimal, paid: int) -> Growth:
        """From the payment numbered `paid` (or the last interest-only one) to the last that sizes."""
        steps, terms = self.steps, self.steps.terms
        start, end = max(paid, terms.interest_only), self._sized_to()
        annual, growth = exact(rate), _NOTHING
        if terms.in_advance:
            # Payment k is made at the start of period k, so it has the factor of period k - 1; for the
            # first one that amortizes no interest has run, or it was prepaid.
            end -= 1
            if start == terms.interest_only:
                growth = _PAYMENT_AT_ONCE
            else:
                start -= 1
        if terms.payment_basis is PaymentBasis.EQUAL_PERIODS:
            return growth.then(equal_periods(annual / terms.frequency.per_year, end - start))
        if start == 0 and self._first_is_odd():
            growth, start = one_period(steps.first[0].factor(rate)), 1
        return growth.then(dated_periods(steps.numerators[start:end], steps.denominator, annual))

    def _first_is_odd(self) -> bool:
        """Whether the first payment is sized on an odd first period, and not as if it were regular."""
        return len(self.steps.first) == 1
