"""From a note as entered to the terms its schedule is built from: defaults filled, contradictions named."""

from datetime import date
from decimal import Decimal

from tenorbook.basis.conventions import (
    DayCount,
    FirstPeriod,
    Frequency,
    InterestRounding,
    LongFirst,
    PaymentBasis,
    PaymentChange,
    Repayment,
    Side,
    Timing,
    UnpaidInterest,
)
from tenorbook.basis.money import currency_digits
from tenorbook.basis.problem import Problem
from tenorbook.terms.amounts import Ledger
from tenorbook.terms.book import Settings
from tenorbook.terms.dating import MOST_YEARS, Dating, settle_dates
from tenorbook.terms.findings import Findings
from tenorbook.terms.happenings import check_rate, settle_extras, settle_repricings
from tenorbook.terms.lengths import payments_in
from tenorbook.terms.loan import Length, Loan, PaymentStep
from tenorbook.terms.terms import Extra, Repricing, Terms

NO_PAYMENT = (Repayment.INTEREST_ONLY, Repayment.AT_MATURITY)


def resolve(loan: Loan, settings: Settings | None = None) -> tuple[Terms | None, tuple[Problem, ...]]:
    """The terms of a loan with every blank filled by its default, and what was found on the way.

    Args:
        loan: the note as entered.
        settings: of the book; gives the currency of loans that state none.

    Returns:
        The terms, or `None` when a problem is an error; and all problems, in the order found.

    Raises:
        TypeError: an amount or rate is a float; the exact figure is wanted.
    """
    settings = settings or Settings()
    findings = Findings(loan)
    currency = (loan.currency or settings.currency).upper()
    digits = currency_digits(currency)
    if digits is None:
        findings.error(
            "Currency", f"{currency} is not a currency code of ISO 4217", "give a code such as USD"
        )
        digits = 2
    carried = loan.interest_rounding is InterestRounding.NONE
    ledger = Ledger(currency, digits, carried)
    dating = settle_dates(loan, loan.frequency or Frequency.MONTHLY, loan.timing or Timing.ARREARS, findings)
    principal = _principal(loan, ledger, findings)
    _check_annual_rate(loan, findings)
    if dating is None or principal is None or loan.annual_rate is None:
        return None, tuple(findings.problems)
    terms = _Resolution(loan, ledger, findings, principal, loan.annual_rate, dating).terms()
    return (None if findings.failed else terms), tuple(findings.problems)


def _principal(loan: Loan, ledger: Ledger, findings: Findings) -> int | None:
    if loan.principal is None:
        findings.error("Principal", "Principal is blank", "give the amount advanced")
        return None
    principal = ledger.amount(loan.principal, loan.place("Principal"), findings)
    if principal is not None and principal <= 0:
        findings.error("Principal", f"a principal of {loan.principal} cannot be", "give an amount above zero")
        return None
    return principal


def _check_annual_rate(loan: Loan, findings: Findings) -> None:
    if loan.annual_rate is None:
        findings.error("Annual rate", "Annual rate is blank", "give the note's rate; 0 is a rate")
    else:
        check_rate(loan.annual_rate, loan.place("Annual rate"), findings)


class _Resolution:
    """One loan on its way from entered to resolved; each method settles one group of terms."""

    def __init__(
        self,
        loan: Loan,
        ledger: Ledger,
        findings: Findings,
        principal: int,
        rate: Decimal,
        dating: Dating,
    ) -> None:
        self.loan, self.ledger, self.findings = loan, ledger, findings
        self.principal, self.rate, self.dating = principal, rate, dating
        self.frequency = loan.frequency or Frequency.MONTHLY
        self.timing = loan.timing or Timing.ARREARS
        self.repayment = loan.repayment or Repayment.LEVEL_PAYMENT
        if self.frequency is Frequency.AT_MATURITY:
            self.repayment = Repayment.AT_MATURITY

    def terms(self) -> Terms:
        """The resolved terms; only to be used when no error was found."""
        loan, step = self.loan, self.loan.payment_rounding or PaymentStep()
        payment = self._payment()
        interest_only = self._interest_only()
        day_count, odd, odd_given = self._day_counts()
        self._check_single_payment()
        return Terms(
            loan=loan,
            loan_id=loan.loan_id,
            side=loan.side or Side.PAYABLE,
            currency=self.ledger.currency,
            currency_digits=self.ledger.currency_digits,
            digits=self.ledger.digits,
            principal=self.principal,
            rate=self.rate,
            funding=self.dating.funding,
            due=self.dating.due,
            count=self._settled_count(payment),
            frequency=self.frequency,
            timing=self.timing,
            repayment=self.repayment,
            payment=payment,
            balloon=self._balloon(),
            amortized_over=self._amortized_over(interest_only),
            interest_only=interest_only,
            day_count=day_count,
            odd_day_count=odd,
            odd_day_count_given=odd_given,
            first_period=self._first_period(),
            long_first=loan.long_first_period or LongFirst.SIMPLE,
            payment_basis=loan.payment_basis or PaymentBasis.AS_ACCRUED,
            payment_rounding=step.rounding,
            payment_step=self._payment_step(step),
            interest_rounding=loan.interest_rounding or InterestRounding.HALF_UP,
            unpaid_interest=loan.unpaid_interest or UnpaidInterest.ADD,
            each_payment=self._each_payment(),
            each_from=loan.extra_from or date.min,
            each_until=loan.extra_until or date.max,
            extras=self._extras(),
            repricings=self._repricings(),
        )

    def _extras(self) -> tuple[Extra, ...]:
        dating = self.dating
        return settle_extras(
            self.loan.extra_payments, self.ledger, dating.funding, self._last_day(), dating.due, self.findings
        )

    def _repricings(self) -> tuple[Repricing, ...]:
        default = self._payment_after_repricing()
        changes, funding = self.loan.rate_changes, self.dating.funding
        return settle_repricings(changes, self.ledger, funding, default, self.findings)

    def _payment(self) -> int | None:
        loan = self.loan
        if loan.payment is None:
            return None
        if self.repayment in NO_PAYMENT:
            self.findings.warning(
                "Payment",
                f"Repayment is {self.repayment}, so the payment given is not used",
                "leave Payment blank, or change Repayment",
                "Repayment",
            )
            return None
        payment = self.ledger.amount(loan.payment, loan.place("Payment"), self.findings)
        if payment is not None and payment <= 0:
            self.findings.error("Payment", "a payment must be above zero", "correct it, or leave it blank")
        if self.repayment is Repayment.LEVEL_PRINCIPAL:
            self.findings.note(
                "Payment", "with level principal, Payment is the principal part of each payment"
            )
        return payment

    def _settled_count(self, payment: int | None) -> int | None:
        blank = self.loan.term is None and self.loan.maturity is None
        if self.dating.count is None and payment is None and blank:
            self.findings.error(
                "Term",
                "Term and Maturity are blank, and no payment is given that would settle them",
                "give the number of payments, a duration, or the maturity date",
                "Maturity",
            )
        return self.dating.count

    def _balloon(self) -> int | None:
        loan = self.loan
        if loan.balloon is None:
            return None
        balloon = self.ledger.amount(loan.balloon, loan.place("Balloon"), self.findings)
        if self.repayment in NO_PAYMENT:
            if balloon != self.principal:
                self.findings.warning(
                    "Balloon",
                    f"Repayment is {self.repayment}: all principal is left to the end, whatever Balloon says",
                    "leave Balloon blank",
                    "Repayment",
                )
            return None
        if balloon is not None and not 0 <= balloon <= self.principal:
            self.findings.error(
                "Balloon",
                f"a balloon of {loan.balloon} does not lie between 0 and the principal of {loan.principal}"
                f"{self.findings.cell('Principal')}",
                "correct one of the two amounts",
                "Principal",
            )
        return balloon

    def _interest_only(self) -> int:
        number = self.loan.interest_only_payments or 0
        if number < 0:
            self.findings.error("Interest-only payments", "cannot be negative", "give 0 or more")
        elif number and self.repayment in NO_PAYMENT:
            self.findings.warning(
                "Interest-only payments",
                f"Repayment is {self.repayment}: the number is not used",
                "leave it blank",
            )
            return 0
        elif self.dating.count is not None and number >= self.dating.count:
            self.findings.error(
                "Interest-only payments",
                f"{number} interest-only payments leave none of the {self.dating.count} to repay principal",
                "correct the number, or set Repayment to interest only",
                "Term",
            )
        return number

    def _amortized_over(self, interest_only: int) -> int | None:
        length = self.loan.amortized_over
        if length is None:
            return None
        number = self._length_in_payments(length)
        if number is None:
            return None
        if self.repayment in NO_PAYMENT or self.dating.count is None:
            self.findings.warning("Amortized over", "has no effect on these terms", "leave it blank")
            return None
        left = self.dating.count - interest_only
        if number < left:
            self.findings.warning(
                "Amortized over",
                f"{number} payments are fewer than the {left} the term leaves, and have no effect",
                "give more, or leave it blank",
                "Term",
            )
        return number if number > left else None

    def _length_in_payments(self, length: Length) -> int | None:
        number = payments_in(length, self.frequency)
        if number is None:
            self.findings.error(
                "Amortized over",
                f"{length} is no whole number of payments {self.frequency}",
                "give the number of payments",
                "Frequency",
            )
        elif not 1 <= number <= 12_000:
            self.findings.error("Amortized over", f"{number:,} payments cannot be", "correct the number")
            return None
        return number

    def _day_counts(self) -> tuple[DayCount, DayCount, bool]:
        """The day count, the odd-day count, and whether the loan names the latter."""
        default = DayCount.ACTUAL_365_FIXED if self.frequency.days else DayCount.THIRTY_360
        day_count = self.loan.day_count or default
        odd = self.loan.odd_day_count
        if odd is None or odd is DayCount.EQUAL_PERIODS:
            equal = day_count is DayCount.EQUAL_PERIODS
            return day_count, (DayCount.ACTUAL_365_FIXED if equal else day_count), False
        return day_count, odd, True

    def _first_period(self) -> FirstPeriod:
        """The treatment; a short first period has nothing to pay, capitalize or waive."""
        asked = self.loan.first_period or FirstPeriod.ACCRUE
        if self.frequency is Frequency.AT_MATURITY or self.timing is Timing.ADVANCE:
            return FirstPeriod.ACCRUE
        short = self.dating.funding > self.dating.due[0]
        if short and asked not in (FirstPeriod.ACCRUE, FirstPeriod.ADD_TO_FIRST):
            self.findings.note(
                "First period",
                f"the first period is short and has no odd days to {_verb(asked)}: the first payment is "
                f"lowered by the interest of the missing days instead",
            )
            return FirstPeriod.ADD_TO_FIRST
        return asked

    def _payment_step(self, step: PaymentStep) -> int:
        if step.step is None:
            return self.ledger.minor_unit
        amount = self.ledger.step(step.step, self.loan.place("Payment rounding"), self.findings)
        if amount is not None and amount <= 0:
            self.findings.error("Payment rounding", "the step must be above zero", "give a step such as 1.00")
            return 1
        return amount or 1

    def _each_payment(self) -> int:
        loan = self.loan
        if loan.extra_each_payment is None:
            for header, given in (("Extra from", loan.extra_from), ("Extra until", loan.extra_until)):
                if given is not None:
                    self.findings.warning(
                        header, "has no effect without Extra each payment", "give the amount"
                    )
            return 0
        amount = self.ledger.amount(loan.extra_each_payment, loan.place("Extra each payment"), self.findings)
        if amount is not None and amount < 0:
            self.findings.error("Extra each payment", "an extra payment cannot be negative", "correct it")
        if loan.extra_from and loan.extra_until and loan.extra_until < loan.extra_from:
            self.findings.error(
                "Extra until", f"{loan.extra_until} is before Extra from, {loan.extra_from}", "correct one",
                "Extra from",
            )  # fmt: skip
        return amount or 0

    def _payment_after_repricing(self) -> PaymentChange:
        """A level payment is re-amortized; a payment that decides the term is kept."""
        level = self.repayment is Repayment.LEVEL_PAYMENT
        return PaymentChange.REAMORTIZE if level and self.dating.count else PaymentChange.KEEP

    def _last_day(self) -> date:
        """The last day anything can happen: in advance a balloon falls one period after the last payment."""
        count, due = self.dating.count, self.dating.due
        if count is None:
            return self.dating.funding.replace(year=self.dating.funding.year + MOST_YEARS, day=1)
        return due[count + 1] if self.timing is Timing.ADVANCE else due[count]

    def _check_single_payment(self) -> None:
        if self.repayment is Repayment.AT_MATURITY and self.timing is Timing.ADVANCE:
            self.findings.error(
                "Timing",
                "a loan paid at maturity has no payments in advance",
                "set Timing to arrears, or change Repayment",
                "Repayment",
            )


def _verb(treatment: FirstPeriod) -> str:
    return {FirstPeriod.PAY_AT_FUNDING: "pay at funding"}.get(treatment, str(treatment))
