"""Principal by when it falls due: by calendar year, by bands of twelve months, and the run-off by month.

Only what is owed on the as-of date counts; currencies, and what we owe and are owed, stand apart.
"""

from collections.abc import Callable, Sequence
from dataclasses import dataclass, field
from datetime import date

from tenorbook.basis.conventions import Frequency
from tenorbook.basis.money import currency_digits
from tenorbook.calendar.due_dates import DueDates
from tenorbook.reports.groups import Group, groups, ledger_digits, members, rescaled
from tenorbook.reports.result import BookResult, LoanResult
from tenorbook.reports.words import CAUTION, day
from tenorbook.tables.sheet import Lines, Part, Sheet
from tenorbook.tables.table import Column, Role, Table

NAME = "Maturities"

_BANDS = 5
"""Bands of twelve months after the as-of date; one more takes the rest."""

_MOST_CHARTED = 3
"""Groups that get a run-off of their own."""


@dataclass(frozen=True, slots=True)
class RunOff:
    """The loans of one group over time.

    Attributes:
        group: currency and side.
        digits: unit of the amounts.
        shown_digits: digits of the currency.
        months: the first of each month from the as-of date on.
        balance: owed at the end of each month.
        years: calendar years with payments.
        interest: paid in each year.
        principal: paid in each year, extra principal included.
    """

    group: Group
    digits: int
    shown_digits: int
    months: list[date] = field(default_factory=list)
    balance: list[int] = field(default_factory=list)
    years: list[int] = field(default_factory=list)
    interest: list[int] = field(default_factory=list)
    principal: list[int] = field(default_factory=list)


def run_offs(result: BookResult, results: Sequence[LoanResult]) -> list[RunOff]:
    """The run-off of each of the main groups."""
    return [_run_off(result.as_of, results, group) for group in groups(results)[:_MOST_CHARTED]]


def _run_off(as_of: date, results: Sequence[LoanResult], group: Group) -> RunOff:
    digits = ledger_digits(results, group.currency)
    found = RunOff(group, digits, currency_digits(group.currency) or 0)
    changes: dict[tuple[int, int], int] = {}
    paid: dict[int, list[int]] = {}
    for each in members(results, group):
        _add_changes(each, found.digits, changes)
        _add_paid(each, found.digits, paid)
    for year in sorted(paid):
        found.years.append(year)
        found.interest.append(paid[year][0])
        found.principal.append(paid[year][1])
    _fill_months(found, as_of, changes)
    return found


def _add_changes(each: LoanResult, digits: int, changes: dict[tuple[int, int], int]) -> None:
    """What the balance changes by in each month."""
    schedule = each.schedule
    if schedule is None:
        return
    scale = rescaled(1, schedule.digits, digits)
    moves = zip(schedule.date, schedule.opening, schedule.closing, strict=True)
    for moment, opening, closing in moves:
        month = (moment.year, moment.month)
        changes[month] = changes.get(month, 0) + (closing - opening) * scale


def _add_paid(each: LoanResult, digits: int, paid: dict[int, list[int]]) -> None:
    schedule = each.schedule
    if schedule is None:
        return
    scale = rescaled(1, schedule.digits, digits)
    rows = zip(
        schedule.date, schedule.interest, schedule.principal, schedule.extra, schedule.payment, strict=True
    )
    for moment, interest, principal, extra, payment in rows:
        if payment:
            year = paid.setdefault(moment.year, [0, 0])
            year[0] += interest * scale
            year[1] += (principal + extra) * scale


def _fill_months(found: RunOff, as_of: date, changes: dict[tuple[int, int], int]) -> None:
    """Balances at the end of each month, from the as-of month to the first without a balance after it."""
    if not changes:
        return
    first = min((as_of.year, as_of.month), max(changes))
    balance = sum(change for month, change in changes.items() if month < first)
    last = max(changes)
    month = first
    while month <= last:
        balance += changes.get(month, 0)
        found.months.append(date(*month, 1))
        found.balance.append(balance)
        month = (month[0] + 1, 1) if month[1] == 12 else (month[0], month[1] + 1)


def maturities_sheet(result: BookResult, results: Sequence[LoanResult], back: str) -> Sheet:
    """Maturities of the loans, a table a group and kind of band, and what the charts are drawn from.

    Args:
        result: of the book.
        results: the loans of the workbook.
        back: name of the sheet the link at the top leads to.
    """
    parts: list[Part] = []
    for group in groups(results):
        loans = [each for each in members(results, group) if each.position and each.position.balance]
        digits = ledger_digits(results, group.currency)
        if loans:
            parts.append(_bands_table(result.as_of, loans, group, digits))
            parts.append(_years_table(result.as_of, loans, group, digits))
    for run_off in run_offs(result, results):
        parts += [_paid_table(run_off), _run_off_table(run_off)]
    if not parts:
        parts.append(Lines(("No loan of this workbook owes anything on the as-of date.",)))
    return Sheet(
        name=NAME,
        title="Maturities",
        subtitle=f"Principal owed on {day(result.as_of)} by when it falls due, by the contract schedules",
        parts=parts,
        back=back,
        print_header=result.book.name,
        print_footer=CAUTION,
    )


def _bands_table(as_of: date, loans: list[LoanResult], group: Group, digits: int) -> Table:
    """Twelve months after twelve months; a band includes its last day."""
    starts = DueDates.after(as_of, Frequency.YEARLY)
    ends = [starts[number] for number in range(1, _BANDS + 1)]
    headers = [f"to {day(end)}" for end in ends] + ["thereafter"]

    def band(moment: date) -> int:
        return next((number for number, end in enumerate(ends) if moment <= end), _BANDS)

    spread = [_spread(each, as_of, digits, band, len(headers)) for each in loans]
    title = f"{group.label}: by twelve months"
    return _maturity_table(f"bands_{group.key}", title, loans, headers, spread, digits)


def _years_table(as_of: date, loans: list[LoanResult], group: Group, digits: int) -> Table:
    """Calendar years; the first is the rest of the as-of date's year."""
    years = [as_of.year + number for number in range(_BANDS + 1)]
    headers = [f"rest of {years[0]}", *map(str, years[1:]), "thereafter"]

    def band(moment: date) -> int:
        return min(moment.year - as_of.year, len(years))

    spread = [_spread(each, as_of, digits, band, len(headers)) for each in loans]
    title = f"{group.label}: by calendar year"
    return _maturity_table(f"years_{group.key}", title, loans, headers, spread, digits)


def _spread(each: LoanResult, as_of: date, digits: int, band: Callable[[date], int], count: int) -> list[int]:
    """Principal of one loan after the as-of date, by band."""
    sums, schedule = [0] * count, each.schedule
    if schedule is None:
        return sums
    scale = rescaled(1, schedule.digits, digits)
    for moment, principal, extra in zip(schedule.date, schedule.principal, schedule.extra, strict=True):
        if moment > as_of:
            sums[band(moment)] += (principal + extra) * scale
    return sums


def _maturity_table(
    key: str, title: str, loans: list[LoanResult], headers: list[str], spread: list[list[int]], digits: int
) -> Table:
    """A row a loan, a column a band, and both sums."""
    shown = loans[0].terms.currency_digits if loans[0].terms else digits
    names = [f"band_{number}" for number in range(len(headers))]
    loan_ids = [each.loan.loan_id for each in loans]
    columns = [Column(key="loan", header="Loan", role=Role.TEXT, values=loan_ids, width=18)]
    for number, (name, header) in enumerate(zip(names, headers, strict=True)):
        values = [sums[number] for sums in spread]
        columns.append(_amounts(name, header, values, digits, shown))
    total = "+".join(f"[{name}]" for name in names)
    sums = [sum(each) for each in spread]
    columns.append(_amounts("total", "Total", sums, digits, shown, f"ROUND({total},{digits})"))
    return Table(key=key, columns=tuple(columns), title=title, total_label="Total", label_column="loan")


def _amounts(
    key: str, header: str, values: list[int], digits: int, shown: int, formula: str | None = None
) -> Column:
    return Column(
        key=key,
        header=header,
        role=Role.AMOUNT,
        values=values,
        width=16,
        digits=digits,
        shown_digits=shown,
        formula=formula,
        totalled=True,
    )


def _paid_table(run_off: RunOff) -> Table:
    digits, shown = run_off.digits, run_off.shown_digits
    years = Column(key="year", header="Year", role=Role.TEXT, values=[*map(str, run_off.years)], width=18)
    return Table(
        key=f"paid_{run_off.group.key}",
        columns=(
            years,
            _amounts("interest", "Interest", run_off.interest, digits, shown),
            _amounts("principal", "Principal", run_off.principal, digits, shown),
        ),
        title=f"{run_off.group.label}: payments by calendar year, over the whole life of the loans",
        total_label="Total",
        label_column="year",
    )


def _run_off_table(run_off: RunOff) -> Table:
    months = Column(key="month", header="Month of", role=Role.DATE, values=run_off.months, width=18)
    balance = Column(
        key="balance",
        header="Balance at its end",
        role=Role.BALANCE,
        values=run_off.balance,
        width=16,
        digits=run_off.digits,
        shown_digits=run_off.shown_digits,
    )
    title = f"{run_off.group.label}: balance of the loans by month"
    return Table(key=f"run_off_{run_off.group.key}", columns=(months, balance), title=title)
