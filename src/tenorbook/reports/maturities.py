"""Principal by when it falls due: by bands of twelve months, by calendar year, and the run-off by month.

Only what is owed on the as-of date counts; currencies, and what we owe and are owed, stand apart.
"""

from collections.abc import Mapping, Sequence
from datetime import date

from tenorbook.reports.loan_table import FIRST_SERIAL
from tenorbook.reports.outlook import Band, Maturities, Outlook, RunOff
from tenorbook.reports.result import BookResult, LoanResult
from tenorbook.reports.standing import falling_due
from tenorbook.reports.words import CAUTION, day
from tenorbook.tables.sheet import Lines, Part, Printed, Sheet
from tenorbook.tables.table import Column, Role, Table

NAME = "Maturities"
DUE, PAID, RUN_OFF = "due", "paid", "run_off"
"""Keys of the tables that the charts are drawn from."""

_WIDTH = 16.0


def owed_name(key: str) -> str:
    """The name of the cell with all that a group owes, by twelve months.

    Args:
        key: of the group.
    """
    return f"owed_{key}"


def maturities_sheet(
    result: BookResult,
    outlook: Outlook,
    back: str,
    sheets: Mapping[str, str] | None = None,
    *,
    live: bool = False,
) -> Sheet:
    """Maturities of the loans, a table a group and kind of band, and what the charts are drawn from.

    Args:
        result: of the book.
        outlook: of the loans of the workbook.
        back: name of the sheet the link at the top leads to.
        sheets: loan ID -> its sheet; `file#sheet` where it stands in another workbook.
        live: whether the loans' sheets stand in this workbook, so that figures can refer to them.
    """
    parts: list[Part] = []
    for each in outlook.maturities:
        makers = _BandTables(each, sheets or {}, live)
        parts.append(makers.table("bands", "by twelve months", outlook.twelve_months, each.by_twelve_months))
        parts.append(makers.table("years", "by calendar year", outlook.years, each.by_year))
    if not parts:
        parts.append(Lines(("No loan of this workbook owes anything on the as-of date.",)))
    if outlook.run_offs:
        parts += [_due_table(outlook)] if outlook.maturities else []
        parts.append(_paid_table(outlook.run_offs))
    printed = len(parts)
    if outlook.run_offs:
        parts.append(_run_off_table(outlook.run_offs))
    return Sheet(
        name=NAME,
        title="Maturities",
        subtitle=f"Principal owed on {day(result.as_of)} by when it falls due, by the contract schedules",
        parts=parts,
        back=back,
        print_header=result.book.name,
        print_footer=CAUTION,
        printed=Printed(parts=printed),
    )


class _BandTables:
    """The tables of one group: a row a loan, a column a band, and both sums."""

    def __init__(self, maturities: Maturities, sheets: Mapping[str, str], live: bool) -> None:
        self._its, self._live = maturities, live
        ids = [each.loan.loan_id for each in maturities.loans]
        self._ids = ids
        self._links = {row: sheets[loan_id] for row, loan_id in enumerate(ids) if loan_id in sheets}

    def table(self, kind: str, words: str, bands: Sequence[Band], spread: list[list[int]]) -> Table:
        """One kind of band."""
        its, names = self._its, [f"band_{number}" for number in range(len(bands))]
        columns = [
            Column(key="loan", header="Loan", role=Role.TEXT, values=self._ids, width=18, links=self._links)
        ]
        for number, (name, band) in enumerate(zip(names, bands, strict=True)):
            values = [sums[number] for sums in spread]
            formulas = {row: self._formula(row, band) for row in range(len(values))}
            columns.append(_amounts(name, band.header, values, its, exceptions=formulas))
        total = "+".join(f"[{name}]" for name in names)
        sums = [sum(each) for each in spread]
        columns.append(_amounts("total", "Total", sums, its, formula=f"ROUND({total},{its.digits})"))
        return Table(
            key=f"{kind}_{its.group.key}",
            columns=tuple(columns),
            title=f"{its.group.label}: {words}",
            total_label="Total",
            label_column="loan",
            names={owed_name(its.group.key): "[total:total]"} if kind == "bands" else {},
        )

    def _formula(self, row: int, band: Band) -> str | None:
        """A loan's principal in a band, from its own sheet."""
        loan = self._its.loans[row]
        if not self._live or row not in self._links or not _dated(loan):
            return None
        extras = loan.schedule is not None and any(loan.schedule.extra)
        until = _literal(band.until) if band.until else ""
        text = falling_due(_literal(band.after), until, f"'{self._links[row]}'!", extras=extras)
        return f"ROUND({text},{self._its.digits})"


def _dated(loan: LoanResult) -> bool:
    """Whether the dates of a loan's sheet are dates and no text."""
    return loan.schedule is not None and loan.schedule.date[0] >= FIRST_SERIAL


def _literal(moment: date) -> str:
    return f"DATE({moment.year},{moment.month},{moment.day})"


def _amounts(
    key: str,
    header: str,
    values: Sequence[int | None],
    its: Maturities | RunOff,
    *,
    formula: str | None = None,
    exceptions: Mapping[int, str | None] | None = None,
    role: Role = Role.AMOUNT,
) -> Column:
    return Column(
        key=key,
        header=header,
        role=role,
        values=values,
        width=_WIDTH,
        digits=its.digits,
        shown_digits=its.shown_digits,
        formula=formula,
        exceptions=exceptions or {},
        totalled=role is Role.AMOUNT,
    )


def _due_table(outlook: Outlook) -> Table:
    """The totals by calendar year once more, a row a year."""
    bands = outlook.years
    columns = [_label("year", "Year", [band.header for band in bands])]
    charted = {run_off.group.key for run_off in outlook.run_offs}
    for each in (each for each in outlook.maturities if each.group.key in charted):
        key = each.group.key
        values = [sum(sums[number] for sums in each.by_year) for number in range(len(bands))]
        formulas: dict[int, str | None] = {
            row: f"[years_{key}.band_{row}:total]" for row in range(len(bands))
        }
        columns.append(_amounts(key, each.group.label, values, each, exceptions=formulas))
    title = "Principal falling due by calendar year"
    return Table(key=DUE, columns=tuple(columns), title=title, total_label="Total", label_column="year")


def _paid_table(run_offs: Sequence[RunOff]) -> Table:
    """Payments by calendar year; a year without any is left out."""
    years = sorted({year for each in run_offs for year in each.years})
    columns = [_label("year", "Year", [*map(str, years)])]
    for each in run_offs:
        for name, amounts in (("interest", each.interest), ("principal", each.principal)):
            by_year = dict(zip(each.years, amounts, strict=True))
            values = [by_year.get(year, 0) for year in years]
            columns.append(_amounts(f"{name}_{each.group.key}", f"{each.group.label} {name}", values, each))
    title = "Payments by calendar year, over the whole life of the loans"
    return Table(key=PAID, columns=tuple(columns), title=title, total_label="Total", label_column="year")


def _run_off_table(run_offs: Sequence[RunOff]) -> Table:
    """Balances at the end of each month, until the last loan is repaid."""
    months = max((each.months for each in run_offs), key=len)
    columns = [Column(key="month", header="Month of", role=Role.DATE, values=months, width=18)]
    for each in run_offs:
        by_month = dict(zip(each.months, each.balance, strict=True))
        values = [by_month.get(month, 0) for month in months]
        columns.append(_amounts(each.group.key, each.group.label, values, each, role=Role.BALANCE))
    return Table(key=RUN_OFF, columns=tuple(columns), title="Balance at the end of each month")


def _label(key: str, header: str, values: list[str]) -> Column:
    return Column(key=key, header=header, role=Role.TEXT, values=values, width=18)
