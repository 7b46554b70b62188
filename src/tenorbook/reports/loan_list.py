"""The table of loans on the summary: what one looks for first at the left, the rest beyond the print."""

from collections.abc import Callable, Mapping, Sequence

from tenorbook.basis.conventions import Side
from tenorbook.reports.figures import Figures
from tenorbook.reports.loan_table import TABLE
from tenorbook.reports.result import BookResult, LoanResult
from tenorbook.reports.standing import ACCRUED, AFTER, BALANCE, CHECKS, WITHIN
from tenorbook.reports.words import MARK
from tenorbook.tables.table import Column, Role, Sparklines, Table, Tone

LOANS = "loans"
"""Key of the table."""

LAID_OUT = (
    ("loan", "Loan", 14),
    ("counterparty", "Counterparty", 22),
    ("side", "Side", 10.5),
    ("currency", "Currency", 9.5),
    ("principal", "Principal", 0),
    ("rate", "Annual rate", 9),
    ("payment", "Payment", 0),
    ("last", "Last payment", 12.5),
    ("balance", "Balance", 0),
    ("accrued", "Accrued interest", 0),
    ("within", "Due within 12 months", 0),
    ("after", "Due after 12 months", 0),
    ("line", "Balance over time", 12),
    ("status", "Status", 10.5),
    ("checks", "Checks", 8),
    ("payments", "Payments", 11),
    ("first", "First payment", 13),
    ("total_interest", "Total interest", 0),
    ("total_paid", "Total paid", 0),
    ("effective", "Effective annual rate", 11),
)
"""Key, header and width of each column; 0: as its amounts need. The tables below are laid out alike."""

PRINTED_COLUMNS = 15
"""Columns, from the left, that are printed."""

SUMS = {
    "principal": "principal",
    "balance": "balance",
    "accrued": "accrued_interest",
    "within": "due_within_12_months",
    "after": "due_after_12_months",
    "total_interest": "total_interest",
    "total_paid": "total_paid",
}
"""Columns that may be added up, and their figure."""

_AMOUNTS = {**SUMS, "payment": "payment"}
_LIVE = {
    "principal": "loan_principal",
    "balance": BALANCE,
    "accrued": ACCRUED,
    "within": WITHIN,
    "after": AFTER,
    "total_interest": "total_interest",
    "total_paid": "total_paid",
}
"""Columns that refer to a name on the loan's sheet."""

_PLAIN: dict[str, tuple[Role, str]] = {
    "rate": (Role.RATE, "annual_rate"),
    "last": (Role.DATE, "last_payment"),
    "payments": (Role.INTEGER, "payments"),
    "first": (Role.DATE, "first_payment"),
    "effective": (Role.RATE, "effective_annual_rate"),
}


class LoanList:
    """Puts the table of loans together.

    Args:
        result: of the book.
        results: the loans, in the book's order.
        rows: their figures.
        sheets: loan ID -> its sheet; `file#sheet` where it stands in another workbook.
        live: whether the loans' sheets stand in this workbook, so that figures can refer to them.
    """

    def __init__(
        self,
        result: BookResult,
        results: Sequence[LoanResult],
        rows: Sequence[Figures],
        sheets: Mapping[str, str],
        live: bool,
    ) -> None:
        self._headers = result.book.carried_headers
        self._results, self._rows, self._live = results, rows, live
        self._linked = {
            row: sheets[each.loan.loan_id]
            for row, each in enumerate(results)
            if each.loan.loan_id in sheets and each.schedule is not None
        }

    def table(self) -> Table:
        """A row a loan, in the order of the book; unknown columns of the book at the end."""
        lines = {row: (sheet, TABLE, "closing") for row, sheet in self._linked.items() if self._live}
        columns = [self._column(key, header, width) for key, header, width in LAID_OUT]
        return Table(
            key=LOANS,
            columns=(*columns, *self._carried()),
            tones={row: Tone.SPECIAL for row, each in enumerate(self._results) if each.status == "error"},
            frozen=True,
            filtered=True,
            sparkline=Sparklines("line", lines) if lines else None,
        )

    def _column(self, key: str, header: str, width: float) -> Column:
        if key in _AMOUNTS:
            return self._money(key, header)
        if key in _PLAIN:
            role, attribute = _PLAIN[key]
            values = [getattr(row, attribute) for row in self._rows]
            shown = 4 if key == "effective" else None
            return Column(key=key, header=header, role=role, values=values, width=width, shown_digits=shown)
        links = self._linked if key == "loan" else {}
        formulas = self._formulas(CHECKS) if key == "checks" else {}
        texts = list(map(self._words(key), self._results, self._rows))
        return Column(
            key=key,
            header=header,
            role=Role.TEXT,
            values=texts,
            width=width,
            links=links,
            exceptions=formulas,
        )

    def _words(self, key: str) -> Callable[[LoanResult, Figures], str]:
        return {
            "loan": lambda each, _: each.loan.loan_id,
            "counterparty": lambda each, _: each.loan.counterparty,
            "side": lambda each, _: str(each.loan.side or Side.PAYABLE),
            "currency": lambda _, row: row.currency,
            "status": lambda each, _: status_words(each),
            "line": lambda *_: "",
            "checks": lambda each, _: "PASS" if each.schedule else "",
        }[key]

    def _formulas(self, name: str) -> dict[int, str | None]:
        """Row -> the name on the loan's sheet, where that stands in this workbook."""
        return {row: f"'{sheet}'!{name}" for row, sheet in self._linked.items()} if self._live else {}

    def _money(self, key: str, header: str) -> Column:
        """An amount, each row with its own currency's digits; live where the loan's sheet names it."""
        values = [getattr(row, _AMOUNTS[key]) for row in self._rows]
        digits = [row.digits for row in self._rows]
        return Column(
            key=key,
            header=header,
            role=Role.BALANCE,
            values=values,
            width=money_width(values, digits),
            row_digits=digits,
            row_shown_digits=[row.shown_digits for row in self._rows],
            exceptions=self._formulas(_LIVE[key]) if key in _LIVE else {},
        )

    def _carried(self) -> list[Column]:
        found = [each.loan.carried for each in self._results]
        return [
            Column(
                key=f"carried_{number}",
                header=header,
                role=Role.ANY,
                values=[carried.get(header) for carried in found],
                width=15,
            )
            for number, header in enumerate(self._headers)
        ]


def status_words(each: LoanResult) -> str:
    """The status of a loan, marked where someone should look."""
    return each.status if each.status == "ok" else MARK + each.status


def money_width(values: Sequence[int | None], digits: Sequence[int]) -> float:
    """Wide enough for the largest amount of a column in bold, its marks and some air."""
    shown = (abs(value or 0) // 10**each for value, each in zip(values, digits, strict=True))
    whole = len(str(max(shown, default=0)))
    return max(11.5, whole + 0.6 * (whole // 3) + 5.5)
