"""From the dates of a note to its funding date, due dates and number of payments."""

from dataclasses import dataclass, replace
from datetime import date

from tenorbook.basis.conventions import Frequency, MonthEnd, Timing
from tenorbook.calendar.due_dates import DueDates
from tenorbook.terms.findings import Findings
from tenorbook.terms.lengths import date_after, payments_in
from tenorbook.terms.loan import Length, LengthUnit, Loan

MOST_PAYMENTS = 2_600
MOST_YEARS = 100
DOUBTFUL_YEARS = 60


@dataclass(frozen=True, slots=True)
class Dating:
    """When a loan starts and when its payments are due.

    Attributes:
        funding: first day that accrues.
        due: the due dates by number.
        count: number of payments; `None` when the note leaves it to a fixed payment.
    """

    funding: date
    due: DueDates
    count: int | None


def settle_dates(loan: Loan, frequency: Frequency, timing: Timing, findings: Findings) -> Dating | None:
    """Funding date, due dates and number of payments; `None` when the dates cannot stand.

    One of funding date and first payment may be blank (one regular period apart; in advance they are
    the same day), and one of term and maturity.
    """
    if frequency is Frequency.AT_MATURITY:
        start = _single_payment(loan, findings)
    elif timing is Timing.ADVANCE:
        start = _in_advance(loan, frequency, findings)
    else:
        start = _in_arrears(loan, frequency, findings)
    if start is None:
        return None
    funding, due = start
    try:
        count = 1 if frequency is Frequency.AT_MATURITY else _count(loan, due, findings)
        if count is not None and not _within_bounds(loan, funding, due, count, findings):
            return None
    except ValueError:
        findings.error("Term", "the last payment falls after the year 9999", "shorten the term")
        return None
    return Dating(funding, due, count)


def _in_advance(loan: Loan, frequency: Frequency, findings: Findings) -> tuple[date, DueDates] | None:
    funding = loan.funding_date or loan.first_payment
    if funding is None:
        _no_start(findings)
        return None
    month_end = loan.month_end or MonthEnd.AUTO
    first = loan.first_payment or funding
    due = DueDates.of(first, frequency, month_end)
    if loan.first_payment is None:  # derived, so it keeps its day number
        due = replace(DueDates.after(funding, frequency, month_end), anchor_number=1)
    if first != funding:
        findings.error(
            "First payment",
            f"in advance the first payment falls on the funding date, but First payment is "
            f"{first}{findings.cell('First payment')} and Funding date is "
            f"{funding}{findings.cell('Funding date')}",
            "make the two dates the same; payments that start later are payments in arrears with a short "
            "first period",
            "Funding date",
        )
        return None
    if due[1] != funding:
        findings.error(
            "Month-end",
            f"month-end due dates cannot start on {funding}, which is not the last day of its month",
            "set Month-end to auto, or start on a month-end",
            "Funding date",
        )
        return None
    return funding, due


def _in_arrears(loan: Loan, frequency: Frequency, findings: Findings) -> tuple[date, DueDates] | None:
    funding, first, month_end = loan.funding_date, loan.first_payment, loan.month_end or MonthEnd.AUTO
    if first is None:
        if funding is None:
            _no_start(findings)
            return None
        return funding, DueDates.after(funding, frequency, month_end)
    due = DueDates.of(first, frequency, month_end)
    if due[1] != first:
        findings.warning(
            "First payment",
            f"Month-end is yes, so the first payment is taken to fall on {due[1]} instead of {first}",
            "enter the last day of the month, or set Month-end to no",
            "Month-end",
        )
    funding = funding or due[0]
    if due[1] <= funding:
        _not_after_funding(loan, first, funding, findings)
        return None
    return funding, due


def _not_after_funding(loan: Loan, first: date, funding: date, findings: Findings) -> None:
    both = (
        f"the first payment {first}{findings.cell('First payment')} is "
        f"{'before' if first < funding else 'on'} the funding date {funding}"
        f"{findings.cell('Funding date')}"
    )
    remedy = "correct one of the two dates"
    if first == funding:
        remedy += ", or set Timing to advance"
    findings.error("First payment", both, remedy, "Funding date")


def _no_start(findings: Findings) -> None:
    findings.error(
        "Funding date",
        "neither Funding date nor First payment is given",
        "give one of the two dates",
    )


def _single_payment(loan: Loan, findings: Findings) -> tuple[date, DueDates] | None:
    """A loan with one payment: its date is Maturity, First payment or Funding date plus Term."""
    funding = loan.funding_date
    if funding is None:
        findings.error("Funding date", "is blank, and interest has no day to run from", "give the date")
        return None
    by_term = date_after(funding, loan.term) if loan.term else None
    stated = {"Maturity": loan.maturity, "First payment": loan.first_payment, "Term": by_term}
    days = {header: day for header, day in stated.items() if day is not None}
    if loan.term and loan.term.unit is LengthUnit.PAYMENTS and loan.term.count != 1:
        findings.error(
            "Term", "a loan paid at maturity has one payment", "give a duration, or the maturity date"
        )
        return None
    if not days:
        findings.error("Maturity", "the date of the one payment is missing", "give Maturity or Term")
        return None
    if len(set(days.values())) > 1:
        said = ", ".join(f"{header} says {day}" for header, day in days.items())
        first, *others = days
        findings.error(first, f"the one payment has several dates: {said}", "keep one", *others)
        return None
    maturity = next(iter(days.values()))
    if maturity <= funding:
        _not_after_funding(loan, maturity, funding, findings)
        return None
    return funding, DueDates(maturity, 1, Frequency.AT_MATURITY, False)


def _count(loan: Loan, due: DueDates, findings: Findings) -> int | None:
    """The number of payments by Term and Maturity; `None` when both are blank or they cannot stand."""
    by_term = _by_term(loan.term, due, findings) if loan.term else None
    by_maturity = _by_maturity(loan.maturity, due, findings) if loan.maturity else None
    if by_term and by_maturity and by_term != by_maturity:
        findings.error(
            "Maturity",
            f"Term{findings.cell('Term')} makes {by_term} payments, the last on {due[by_term]}, but "
            f"Maturity{findings.cell('Maturity')} {loan.maturity} makes {by_maturity}",
            "correct one of them, or leave one blank",
            "Term",
        )
    return by_term or by_maturity


def _by_term(term: Length, due: DueDates, findings: Findings) -> int | None:
    payments = payments_in(term, due.frequency)
    if payments is None:
        findings.error(
            "Term",
            f"{term} is no whole number of payments {due.frequency}",
            "give the number of payments, or a term that the frequency divides",
            "Frequency",
        )
    elif not 1 <= payments <= MOST_PAYMENTS:
        findings.error(
            "Term",
            f"makes {payments:,} payments, and a schedule has 1 to {MOST_PAYMENTS:,}",
            "correct the term",
        )
        return None
    return payments


def _by_maturity(maturity: date, due: DueDates, findings: Findings) -> int | None:
    if maturity < due[1]:
        findings.error(
            "Maturity", f"{maturity} is before the first payment {due[1]}", "correct one of the two dates",
            "First payment",
        )  # fmt: skip
        return None
    number = due.number_on_or_before(maturity)
    if due[number] != maturity:
        findings.error(
            "Maturity",
            f"{maturity} is not a due date: the due dates around it are {due[number]} and {due[number + 1]}",
            "give the unrolled date of the last payment, or use Term",
            "First payment",
        )
        return None
    if number > MOST_PAYMENTS:
        findings.error(
            "Maturity", f"makes {number:,} payments, and a schedule has 1 to {MOST_PAYMENTS:,}",
            "correct the date",
        )  # fmt: skip
        return None
    return number


def _within_bounds(loan: Loan, funding: date, due: DueDates, count: int, findings: Findings) -> bool:
    quarter_days = 4 * (due[count] - funding).days  # a year has 1,461 of them
    header = "Term" if loan.term else "Maturity"
    if quarter_days > 1461 * MOST_YEARS:
        findings.error(
            header,
            f"the last payment, {due[count]}, is more than {MOST_YEARS} years after funding",
            "correct it",
        )
        return False
    if quarter_days > 1461 * DOUBTFUL_YEARS:
        findings.warning(header, f"the loan runs more than {DOUBTFUL_YEARS} years, to {due[count]}")
    return True
