"""The book on one sheet: a row a loan, totals by currency, charts."""

from collections.abc import Callable, Mapping, Sequence
from typing import Any

from tenorbook.basis.conventions import Side
from tenorbook.basis.money import currency_digits
from tenorbook.reports.figures import Figures, figures
from tenorbook.reports.groups import Group, groups, ledger_digits, rescaled
from tenorbook.reports.loan_table import TABLE
from tenorbook.reports.maturities import NAME as MATURITIES
from tenorbook.reports.maturities import RunOff, run_offs
from tenorbook.reports.result import BookResult, LoanResult
from tenorbook.reports.words import CAUTION, MARK, day
from tenorbook.tables.sheet import Chart, Charts, Lines, Part, Series, Sheet
from tenorbook.tables.table import Column, Role, Sparklines, Table, Tone

NAME = "Summary"


def summary_sheet(
    result: BookResult,
    results: Sequence[LoanResult],
    sheets: Mapping[str, str],
    live: bool,
) -> Sheet:
    """The summary of the loans of a workbook.

    Args:
        result: of the book.
        results: the loans of this workbook, in the book's order.
        sheets: loan ID -> its sheet; `file#sheet` where it stands in another workbook.
        live: whether the loans' sheets stand in this workbook, so that figures can refer to them.
    """
    rows = [figures(each, result.book.settings.currency) for each in results]
    parts: list[Part] = []
    if results:
        parts.append(_Loans(result, results, rows, sheets, live).table())
        totals = _totals_table(results, rows)
        parts += [totals] if totals else []
        parts += [_charts(run_off) for run_off in run_offs(result, results) if run_off.months]
    parts.append(Lines((CAUTION, *_footnotes(result)), quiet=True))
    return Sheet(
        name=NAME,
        title=f"Loan book {result.book.name}",
        subtitle=_subtitle(result, results),
        parts=parts,
        print_header=result.book.name,
        print_footer=CAUTION,
    )


def _subtitle(result: BookResult, results: Sequence[LoanResult]) -> str:
    counts = [
        (f"{len(results):,} loan" + "s" * (len(results) != 1)),
        f"as of {day(result.as_of)}",
        "that day's interest " + ("counted" if result.book.settings.period_end_counted else "not counted"),
    ]
    aside = sum(each.status == "error" for each in results)
    if aside:
        counts.append(f"{aside:,} set aside, see Exceptions")
    return " \u00b7 ".join(counts)


def _footnotes(result: BookResult) -> list[str]:
    versions = ", ".join(result.versions)
    return [f"Computed with {versions}."] if versions else []


class _Loans:
    """Puts the table of loans together."""

    def __init__(
        self,
        result: BookResult,
        results: Sequence[LoanResult],
        rows: Sequence[Figures],
        sheets: Mapping[str, str],
        live: bool,
    ) -> None:
        self.book = result.book
        self.results, self.rows, self.sheets, self.live = results, rows, sheets, live
        self.linked = {
            row: sheets[each.loan.loan_id]
            for row, each in enumerate(results)
            if each.loan.loan_id in sheets and each.schedule is not None
        }

    def table(self) -> Table:
        """A row a loan, in the order of the book; unknown columns of the book at the end."""
        lines = self._lines()
        columns = [*self._who(), *self._terms(), *self._owed()]
        if lines:
            blank = [""] * len(self.rows)
            columns.append(
                Column(key="line", header="Balance over time", role=Role.TEXT, values=blank, width=18)
            )
        return Table(
            key="loans",
            columns=(*columns, *self._carried()),
            tones={row: Tone.SPECIAL for row, each in enumerate(self.results) if each.status == "error"},
            frozen=True,
            sparkline=Sparklines("line", lines) if lines else None,
        )

    def _who(self) -> list[Column]:
        loans = [each.loan for each in self.results]
        return [
            self._text("loan", "Loan", [loan.loan_id for loan in loans], 16, self.linked),
            self._text("status", "Status", [_status(each) for each in self.results], 11),
            self._text("counterparty", "Counterparty", [loan.counterparty for loan in loans], 24),
            self._text("side", "Side", [str(loan.side or Side.PAYABLE) for loan in loans], 10),
            self._text("currency", "Currency", [row.currency for row in self.rows], 9),
        ]

    def _terms(self) -> list[Column]:
        return [
            self._money("principal", "Principal", lambda row: row.principal, "loan_principal"),
            self._plain("rate", "Annual rate", Role.RATE, lambda row: row.annual_rate, 10),
            self._money("payment", "Payment", lambda row: row.payment),
            self._plain("payments", "Payments", Role.INTEGER, lambda row: row.payments, 10),
            self._plain("first", "First payment", Role.DATE, lambda row: row.first_payment, 12),
            self._plain("last", "Last payment", Role.DATE, lambda row: row.last_payment, 12),
            self._money("total_interest", "Total interest", lambda row: row.total_interest, "total_interest"),
            self._money("total_paid", "Total paid", lambda row: row.total_paid, "total_paid"),
            self._plain(
                "effective", "Effective annual rate", Role.RATE, lambda row: row.effective_annual_rate, 11, 4
            ),
        ]

    def _owed(self) -> list[Column]:
        return [
            self._money("balance", "Balance", lambda row: row.balance),
            self._money("accrued", "Accrued interest", lambda row: row.accrued_interest),
            self._money("within", "Due within 12 months", lambda row: row.due_within_12_months),
            self._money("after", "Due after 12 months", lambda row: row.due_after_12_months),
        ]

    def _carried(self) -> list[Column]:
        return [
            Column(
                key=f"carried_{number}",
                header=header,
                role=Role.ANY,
                values=[each.loan.carried.get(header) for each in self.results],
                width=14,
            )
            for number, header in enumerate(self.book.carried_headers)
        ]

    def _lines(self) -> dict[int, tuple[str, str, str]]:
        if not self.live:
            return {}
        return {row: (sheet, TABLE, "closing") for row, sheet in self.linked.items()}

    def _text(
        self, key: str, header: str, values: list[str], width: float, links: Mapping[int, str] | None = None
    ) -> Column:
        return Column(key=key, header=header, role=Role.TEXT, values=values, width=width, links=links or {})

    def _plain(
        self,
        key: str,
        header: str,
        role: Role,
        value: Callable[[Figures], Any],
        width: float,
        shown: int | None = None,
    ) -> Column:
        values = [value(row) for row in self.rows]
        return Column(key=key, header=header, role=role, values=values, width=width, shown_digits=shown)

    def _money(self, key: str, header: str, value: Callable[[Figures], int | None], name: str = "") -> Column:
        """An amount, each row with its own currency's digits; live where the loan's sheet names it."""
        formulas: dict[int, str | None] = {}
        if name and self.live:
            formulas = {row: f"'{sheet}'!{name}" for row, sheet in self.linked.items()}
        return Column(
            key=key,
            header=header,
            role=Role.BALANCE,
            values=[value(row) for row in self.rows],
            width=_width([value(row) for row in self.rows], [row.digits for row in self.rows]),
            row_digits=[row.digits for row in self.rows],
            row_shown_digits=[row.shown_digits for row in self.rows],
            exceptions=formulas,
        )


def _width(values: Sequence[int | None], digits: Sequence[int]) -> float:
    """Wide enough for the largest amount of a column, its marks and some air."""
    shown = (abs(value or 0) // 10**each for value, each in zip(values, digits, strict=True))
    whole = len(str(max(shown, default=0)))
    return max(11.5, whole + whole // 3 + 6.0)


def _status(each: LoanResult) -> str:
    return each.status if each.status == "ok" else MARK + each.status


def _totals_table(results: Sequence[LoanResult], rows: Sequence[Figures]) -> Table | None:
    """What each currency and side comes to, under the columns of the loans; they are never added up."""
    found = groups(results)
    if not found:
        return None
    members = [_figures_of(group, results, rows) for group in found]
    blank = [""] * len(found)
    counts = [f"{len(each):,} loan" + "s" * (len(each) != 1) for each in members]
    columns = [
        _label("what", "Totals", [group.label for group in found], 16),
        _label("s1", "", blank, 11),
        _label("count", "", counts, 24),
        _label("side", "Side", [str(group.side) for group in found], 10),
        _label("currency", "Currency", [group.currency for group in found], 9),
    ]
    for key, header, attribute in _LAID_OUT:
        if attribute:
            columns.append(_sums(key, header, attribute, results, found, members))
        else:
            columns.append(_label(key, "", blank, 10))
    return Table(key="totals", columns=tuple(columns), tones=dict.fromkeys(range(len(found)), Tone.SUBTOTAL))


def _figures_of(group: Group, results: Sequence[LoanResult], rows: Sequence[Figures]) -> list[Figures]:
    """The figures of the computed loans of a group."""
    return [
        row
        for each, row in zip(results, rows, strict=True)
        if each.schedule and each.terms and (row.currency, each.terms.side) == (group.currency, group.side)
    ]


_LAID_OUT = (
    ("principal", "Principal", "principal"),
    ("b1", "", ""),
    ("b2", "", ""),
    ("b3", "", ""),
    ("b4", "", ""),
    ("b5", "", ""),
    ("total_interest", "Total interest", "total_interest"),
    ("total_paid", "Total paid", "total_paid"),
    ("b6", "", ""),
    ("balance", "Balance", "balance"),
    ("accrued", "Accrued interest", "accrued_interest"),
    ("within", "Due within 12 months", "due_within_12_months"),
    ("after", "Due after 12 months", "due_after_12_months"),
)
"""Columns of the totals after the currency, in step with those of the loans: key, header, figure."""


def _label(key: str, header: str, values: Sequence[str], width: float) -> Column:
    return Column(key=key, header=header, role=Role.TEXT, values=values, width=width)


def _sums(
    key: str,
    header: str,
    attribute: str,
    results: Sequence[LoanResult],
    found: Sequence[Group],
    members: Sequence[Sequence[Figures]],
) -> Column:
    """One figure, summed a group at a time by the spreadsheet itself."""
    digits = [ledger_digits(results, group.currency) for group in found]
    values = [
        sum(rescaled(getattr(row, attribute) or 0, row.digits, wanted) for row in each)
        for each, wanted in zip(members, digits, strict=True)
    ]
    same_group = "[loans.currency:all],[currency],[loans.side:all],[side]"
    formulas: dict[int, str | None] = {
        row: f"ROUND(SUMIFS([loans.{key}:all],{same_group}),{each})"
        for row, each in enumerate(digits)
    }
    return Column(
        key=key,
        header=header,
        role=Role.BALANCE,
        values=values,
        width=_width(values, digits),
        row_digits=digits,
        row_shown_digits=[currency_digits(group.currency) or 0 for group in found],
        exceptions=formulas,
    )


def _charts(run_off: RunOff) -> Charts:
    """The balance by month, and payments by year split into interest and principal."""
    key, scale = run_off.group.key, 10**run_off.digits
    balance = Series(
        "Balance", MATURITIES, f"run_off_{key}", "balance", [each / scale for each in run_off.balance]
    )
    months = Series("", MATURITIES, f"run_off_{key}", "month", run_off.months)
    years = Series("", MATURITIES, f"paid_{key}", "year", [str(each) for each in run_off.years])
    parts = [
        Series(name, MATURITIES, f"paid_{key}", name.lower(), [each / scale for each in values])
        for name, values in (("Principal", run_off.principal), ("Interest", run_off.interest))
    ]
    return Charts(
        (
            Chart("line", f"Balance of the book, {run_off.group.label}", months, (balance,)),
            Chart("stacked column", f"Payments by year, {run_off.group.label}", years, tuple(parts)),
        )
    )
