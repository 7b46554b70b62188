"""One loan on one sheet: terms, key figures, conventions in words, the dated table, and checks."""

from collections.abc import Iterator

from tenorbook.basis.conventions import Repayment
from tenorbook.reports.force import AmountInForce, Force
from tenorbook.reports.loan_table import LoanTable, loan_table
from tenorbook.reports.result import LoanResult
from tenorbook.reports.standing import CHECKS, Standing
from tenorbook.reports.words import CAUTION, conventions, day
from tenorbook.schedule.ledger import Schedule
from tenorbook.tables.sheet import Block, Blocks, Entry, Lines, Part, Sheet
from tenorbook.tables.table import Role
from tenorbook.terms.terms import Terms

_FEW = 4
"""Later rates or payments that still stand among the terms; more of them go below the table."""


def loan_sheet(result: LoanResult, name: str, back: str, book: str) -> Sheet:
    """The sheet of a loan that has a schedule.

    Args:
        result: of the loan; its terms and schedule are there.
        name: of the sheet, unique in the workbook.
        back: name of the sheet the link at the top leads to.
        book: the book's name, for the printed page.
    """
    schedule = _schedule(result)
    made = loan_table(schedule)
    standing = Standing(result, made)
    parts: list[Part] = [
        Blocks(
            (
                _terms_block(result, made),
                _shape_block(schedule),
                _key_figures(result),
                Block(standing.title(), tuple(standing.entries()), 8, min(len(made.table.columns) - 1, 10)),
            )
        ),
        Lines((" ".join(conventions(schedule)),), quiet=True),
        made.table,
        standing.checks(),
    ]
    later = _later_block(schedule, made.force)
    if later:
        parts.append(Blocks((later,)))
    loan = result.loan
    return Sheet(
        name=name,
        title=" \u2013 ".join(filter(None, (loan.loan_id, loan.description))),
        subtitle=_subtitle(result),
        parts=parts,
        back=back,
        print_header=book,
        print_footer=CAUTION,
    )


def _schedule(result: LoanResult) -> Schedule:
    if result.schedule is None:
        raise ValueError(f"loan {result.loan.loan_id} has no schedule")
    return result.schedule


def _subtitle(result: LoanResult) -> str:
    terms = _schedule(result).terms
    return " \u00b7 ".join(filter(None, (result.loan.counterparty, str(terms.side), terms.currency)))


def _money(schedule: Schedule, label: str, units: int, **more: str | None) -> Entry:
    """An amount of a loan as an entry."""
    terms = schedule.terms
    return Entry(
        label=label,
        value=units,
        role=Role.BALANCE,
        digits=schedule.digits,
        shown_digits=terms.currency_digits,
        name=more.get("name") or "",
        formula=more.get("formula"),
        note=more.get("note") or "",
    )


def _terms_block(result: LoanResult, made: LoanTable) -> Block:
    """The figures that the table's formulas rest on."""
    schedule = _schedule(result)
    terms, force = schedule.terms, made.force
    entries = [_money(schedule, "Principal", terms.principal, name="loan_principal")]
    entries += _rates(force, 1)
    entries += _amounts(schedule, force, 1)
    if terms.balloon:
        entries.append(_money(schedule, "Balloon", terms.balloon, name="balloon"))
    if terms.each_payment:
        entries.append(_money(schedule, "Extra each payment", terms.each_payment, name="extra_each_payment"))
    entries.append(_effective(result))
    return Block("Terms", tuple(entries), 0, 2)


def _rates(force: Force, first: int) -> list[Entry]:
    """Rates in force, unless they are so many that they stand below the table."""
    rates = force.rates[: 1 if len(force.rates) > _FEW else None]
    return [
        Entry(
            label="Annual rate" if number == 1 else f"Annual rate {number}",
            value=rate.rate,
            role=Role.RATE,
            name=rate.name,
        )
        for number, rate in enumerate(rates, first)
    ]


def _amounts(schedule: Schedule, force: Force, first: int) -> list[Entry]:
    amounts = force.amounts[: 1 if len(force.amounts) > _FEW else None]
    return [_amount(schedule, number, each) for number, each in enumerate(amounts, first)]


def _amount(schedule: Schedule, number: int, each: AmountInForce) -> Entry:
    level = schedule.terms.repayment is Repayment.LEVEL_PAYMENT
    label = ("Level payment" if level else "Level principal") + (f" {number}" if number > 1 else "")
    return _money(schedule, label, each.amount, name=each.name)


def _later_block(schedule: Schedule, force: Force) -> Block | None:
    """Since when each rate and payment is in force, and why."""
    entries: list[Entry] = []
    for number, rate in enumerate(force.rates[1:], 2):
        since = f"from {day(schedule.date[min(rate.row, schedule.last_row)])}"
        named = rate.name if len(force.rates) > _FEW else ""
        entries.append(
            Entry(label=f"Annual rate {number}", value=rate.rate, role=Role.RATE, name=named, note=since)
        )
    if len(force.amounts) > 1:
        entries += _later_amounts(schedule, force)
    return Block("In force from", tuple(entries), 0, 2) if entries else None


def _later_amounts(schedule: Schedule, force: Force) -> Iterator[Entry]:
    for number, each in enumerate(force.amounts, 1):
        entry = _amount(schedule, number, each)
        named = each.name if number > 1 and len(force.amounts) > _FEW else ""
        why = f"with the payment of {day(schedule.date[each.row])}: {each.why}"
        yield _money(schedule, entry.label, each.amount, name=named, note=why)


def _shape_block(schedule: Schedule) -> Block:
    """Dates and shape of the loan."""
    terms = schedule.terms
    entries = [
        Entry(label="Funding date", value=terms.funding, role=Role.DATE, name="funding_date"),
        Entry(label="First payment", value=terms.due[1], role=Role.DATE),
        Entry(label="Frequency", value=str(terms.frequency)),
        Entry(label="Repayment", value=_repayment(terms)),
        Entry(label="Day count", value=str(terms.day_count)),
    ]
    if terms.amortized_over:
        entries.append(Entry(label="Amortized over", value=f"{terms.amortized_over} payments"))
    return Block("Dates and shape", tuple(entries), 3, 5)


def _repayment(terms: Terms) -> str:
    return f"{terms.repayment}, in advance" if terms.in_advance else str(terms.repayment)


def _key_figures(result: LoanResult) -> Block:
    """What someone looks for first."""
    schedule = _schedule(result)
    interest, paid = sum(schedule.interest), sum(schedule.payment)
    entries = [
        _money(schedule, "Total interest", interest, name="total_interest", formula="[interest:total]"),
        _money(schedule, "Total paid", paid, name="total_paid", formula="[payment:total]"),
        Entry(label="Last row", value=schedule.date[-1], role=Role.DATE, formula="[date:last]"),
        Entry(label="Checks, see below", value="PASS", formula=CHECKS),
    ]
    return Block("Key figures", tuple(entries), 6, 7)


def _effective(result: LoanResult) -> Entry:
    rate = result.effective_annual_rate
    return Entry(label="Effective annual rate", value=rate, role=Role.RATE, shown_digits=4)
