"""What a finished schedule shows that someone should look at."""

from collections.abc import Iterator

from tenorbook.basis.conventions import Repayment, RowKind
from tenorbook.basis.money import to_words
from tenorbook.basis.problem import Problem, note, warning
from tenorbook.schedule.ledger import Schedule


def exceptions_of(schedule: Schedule) -> Iterator[Problem]:
    """Warnings and notes: interest not covered, the last payment, an early balloon, a term decided."""
    yield from _uncovered_interest(schedule)
    yield from _last_payment(schedule)
    yield from _early_balloon(schedule)
    yield from _decided_term(schedule)


def _uncovered_interest(schedule: Schedule) -> Iterator[Problem]:
    """Payments below the interest due with them."""
    if min(schedule.principal) >= 0:
        return
    short = [
        row
        for row, (kind, principal) in enumerate(zip(schedule.kind, schedule.principal, strict=True))
        if kind is RowKind.PAYMENT and principal < 0
    ]
    if not short:
        return
    terms = schedule.terms
    yield warning(
        terms.loan_id,
        terms.loan.place("Payment"),
        f"{_counted(len(short))} not cover the interest, the first on {schedule.date[short[0]]}; what is "
        "unpaid is added to the balance",
        "check the payment and the rate",
    )


def _early_balloon(schedule: Schedule) -> Iterator[Problem]:
    """A stated balloon that extra payments bring forward."""
    terms, end = schedule.terms, schedule.date[-1]
    if not terms.balloon or terms.count is None or schedule.principal[-1] < terms.balloon:
        return
    contract = terms.due[terms.count + (1 if terms.in_advance else 0)]
    if end < contract:
        yield warning(
            terms.loan_id,
            terms.loan.place("Balloon"),
            f"extra payments bring the loan down to its balloon early: "
            f"{to_words(terms.balloon, terms.digits)} falls due on {end} instead of {contract}",
            "use the effect lower payment where the note fixes the date of the balloon",
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
    shown = [to_words(amount, terms.digits) for amount in (last, last - expected, level)]
    text = (
        f"the last payment of {shown[0]} on {schedule.date[-1]} is {shown[1]} more than the payment of "
        f"{shown[2]}: what the payments leave falls due with it"
    )
    if terms.amortized_over:
        yield note(terms.loan_id, terms.loan.place("Amortized over"), text)
    else:
        yield warning(
            terms.loan_id, terms.loan.place("Payment"), text, "check the terms if no balloon is meant"
        )


def _decided_term(schedule: Schedule) -> Iterator[Problem]:
    terms = schedule.terms
    if terms.count is None:
        number = sum(kind is RowKind.PAYMENT for kind in schedule.kind)
        yield note(
            terms.loan_id,
            terms.loan.place("Term"),
            f"Term is blank: the payment of {to_words(terms.payment or 0, terms.digits)} repays the loan in "
            f"{number} payments, the last on {schedule.date[-1]}",
        )


def _counted(payments: int) -> str:
    return "1 payment does" if payments == 1 else f"{payments:,} payments do"
