"""From the rows of `Extra payments` and `Rate changes` to dated events of one loan."""

from collections.abc import Iterator
from datetime import date
from decimal import Decimal

from tenorbook.basis.conventions import AppliesTo, ExtraEffect, Frequency, MonthEnd, PaymentChange
from tenorbook.basis.problem import NOWHERE, Place
from tenorbook.calendar.due_dates import DueDates, is_month_end
from tenorbook.terms.amounts import Ledger
from tenorbook.terms.findings import Findings
from tenorbook.terms.loan import ExtraPayment, RateChange
from tenorbook.terms.terms import Extra, Repricing

LOWEST_RATE = Decimal(-1)
HIGHEST_RATE = Decimal(10)


def settle_extras(
    entries: tuple[ExtraPayment, ...],
    ledger: Ledger,
    funding: date,
    last: date,
    due: DueDates,
    findings: Findings,
) -> tuple[Extra, ...]:
    """Every extra payment as one dated event, by date and then in the book's order.

    Args:
        entries: rows of the sheet.
        ledger: turns amounts into the ledger's unit.
        funding: an extra may fall on this day, not before.
        last: the last day of the loan; repetition stops there.
        due: the loan's due dates, which a repeating extra follows when it starts on one of them at the
            loan's own frequency.
        findings: receives the errors and warnings.
    """
    extras: list[Extra] = []
    for entry in entries:
        place = entry.where.get("Date", NOWHERE)
        amount = ledger.amount(entry.amount, entry.where.get("Amount", NOWHERE), findings)
        if amount is None or not _usable(entry, amount, funding, place, findings):
            continue
        if entry.date > last:
            findings.warning_at(
                place, f"the extra payment of {entry.date} falls after the last payment, {last}"
            )
        extras += [
            Extra(
                day,
                amount,
                entry.effect or ExtraEffect.SHORTEN,
                entry.applies_to or AppliesTo.PRINCIPAL,
                entry.every is not None,
                place,
            )
            for day in _dates(entry, last, due)
        ]
    return tuple(sorted(extras, key=lambda extra: extra.date))


def _usable(entry: ExtraPayment, amount: int, funding: date, place: Place, findings: Findings) -> bool:
    if amount <= 0:
        findings.error_at(
            entry.where.get("Amount", NOWHERE), "an extra payment must be above zero", "correct the amount"
        )
    elif entry.date < funding:
        findings.error_at(
            place,
            f"the extra payment of {entry.date} is before the funding date "
            f"{funding}{findings.cell('Funding date')}",
            "correct one of the two dates",
            findings.loan.place("Funding date"),
        )
    elif entry.every is Frequency.AT_MATURITY:
        findings.error_at(
            entry.where.get("Every", NOWHERE),
            "at maturity does not repeat",
            "name a frequency, or leave blank",
        )
    else:
        return True
    return False


def _dates(entry: ExtraPayment, last: date, due: DueDates) -> Iterator[date]:
    """The dates of one entry, up to the loan's last day."""
    if entry.every is None:
        yield entry.date
        return
    until = min(entry.until, last) if isinstance(entry.until, date) else last
    count = entry.until if isinstance(entry.until, int) else None
    grid, number = _grid(entry.date, entry.every, due)
    paid = 0
    while (count is None or paid < count) and grid[number + paid] <= until:
        yield grid[number + paid]
        paid += 1


def _grid(start: date, every: Frequency, due: DueDates) -> tuple[DueDates, int]:
    """The dates a repeating extra falls on, and the number of its first.

    Those of the loan where it starts on one of them at the loan's frequency; else counted from its own
    date, at month-ends only where the loan's payments are.
    """
    if every is due.frequency:
        number = due.number_on_or_before(start)
        if due[number] == start:
            return due, number
    sticks = due.month_end and is_month_end(start)
    return DueDates.of(start, every, MonthEnd.YES if sticks else MonthEnd.NO), 1


def settle_repricings(
    entries: tuple[RateChange, ...],
    ledger: Ledger,
    funding: date,
    default: PaymentChange,
    findings: Findings,
) -> tuple[Repricing, ...]:
    """Every rate change, by date.

    Args:
        entries: rows of the sheet.
        ledger: turns set payments into the ledger's unit.
        funding: a change may fall on this day, not before.
        default: what becomes of the payment where the row does not say.
        findings: receives the errors.
    """
    changes: dict[date, Repricing] = {}
    for entry in entries:
        place = entry.where.get("From", NOWHERE)
        check_rate(entry.annual_rate, entry.where.get("Annual rate", NOWHERE), findings)
        if entry.from_date < funding:
            findings.error_at(
                place,
                f"the rate change of {entry.from_date} is before the funding date "
                f"{funding}{findings.cell('Funding date')}",
                "enter the rate at funding as Annual rate, and later changes here",
                findings.loan.place("Funding date"),
            )
        if entry.from_date in changes:
            findings.error_at(
                place,
                f"two rate changes start on {entry.from_date}",
                "keep one of them",
                changes[entry.from_date].place,
            )
        payment = _payment_after(entry, ledger, default, findings)
        changes[entry.from_date] = Repricing(entry.from_date, entry.annual_rate, payment, place)
    return tuple(changes[day] for day in sorted(changes))


def _payment_after(
    entry: RateChange, ledger: Ledger, default: PaymentChange, findings: Findings
) -> PaymentChange | int:
    if not isinstance(entry.payment, Decimal):
        return entry.payment or default
    amount = ledger.amount(entry.payment, entry.where.get("Payment", NOWHERE), findings)
    if amount is not None and amount <= 0:
        findings.error_at(
            entry.where.get("Payment", NOWHERE), "a payment must be above zero", "correct the amount"
        )
    return amount or default


def check_rate(rate: Decimal, place: Place, findings: Findings) -> None:
    """Errors and warnings for an annual rate (a fraction) that cannot be, or is doubtful."""
    if isinstance(rate, float):
        raise TypeError("a rate must be a Decimal, not a float")
    shown = f"{(rate * 100).normalize():f} %"
    if not rate.is_finite() or not LOWEST_RATE < rate <= HIGHEST_RATE:
        findings.error_at(
            place, f"an annual rate of {shown} cannot be", "give a rate above -100 % and up to 1,000 %"
        )
    elif rate < 0 or rate > Decimal("0.36"):
        findings.warning_at(
            place, f"an annual rate of {shown} is unusual", "check it, and whether percent was meant"
        )
