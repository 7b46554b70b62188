"""What a finished schedule shows that someone should look at."""

from collections.abc import Iterator

from tenorbook.basis.conventions import Repayment, RowKind
from tenorbook.basis.money import to_text
from tenorbook.basis.problem import Problem, note, warning
from tenorbook.schedule.ledger import Schedule


def exceptions_of(schedule: Schedule) -> Iterator[Problem]:
    """Warnings and notes on interest not covered, the last payment, and a term the payment decides."""
    yield from _uncovered_interest(schedule)
    yield from _last_payment(schedule)
    yield from _decided_term(schedule)


def _uncovered_interest(schedule: Schedule) -> Iterator[Problem]:
    if min(schedule.principal) >= 0:
        return
    payments = zip(schedule.kind, schedule.principal, schedule.date, strict=True)
    short = [day for kind, principal, day in payments if kind is RowKind.PAYMENT and principal < 0]
    if short:
        terms = schedule.terms
        yield warning(
            terms.loan_id,
            terms.loan.place("Payment"),
            f"{_counted(len(short))} not cover the interest, the first on {short[0]}; what is unpaid is "
            "added to the balance",
            "check the payment and the rate",
        )


def _last_payment(schedule: Schedule) -> Iterator[Problem]:
    """The rest that falls due with the last payment, where it is more than one level payment."""
    terms = schedule.terms
    if terms.repayment is not Repayment.LEVEL_PAYMENT or terms.one_payment:
        return
    level, last = schedule.instalments[-1].amount, schedule.payment[-1]
    expected = level + (terms.balloon or 0)
    if schedule.kind[-1] is not RowKind.PAYMENT or last - expected <= level:
        return
    shown, digits = to_text(last, terms.digits), terms.digits
    yield warning(
        terms.loan_id,
        terms.loan.place("Balloon"),
        f"the last payment of {shown} on {schedule.date[-1]} is "
        f"{to_text(last - expected, digits)} more than the payment of {to_text(level, digits)}: "
        "what the payments leave falls due with it",
        "expected where the payment is amortized over a longer time; else check the terms",
    )


def _decided_term(schedule: Schedule) -> Iterator[Problem]:
    terms = schedule.terms
    if terms.count is None:
        number = sum(kind is RowKind.PAYMENT for kind in schedule.kind)
        yield note(
            terms.loan_id,
            terms.loan.place("Term"),
            f"Term is blank: the payment of {to_text(terms.payment or 0, terms.digits)} repays the loan in "
            f"{number} payments, the last on {schedule.date[-1]}",
        )


def _counted(payments: int) -> str:
    return "1 payment does" if payments == 1 else f"{payments:,} payments do"
