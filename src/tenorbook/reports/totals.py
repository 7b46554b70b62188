"""Sums over the loans of the summary, in tables laid out under its columns; the spreadsheet adds them up."""

from collections.abc import Callable, Sequence

from tenorbook.basis.money import currency_digits
from tenorbook.reports.figures import Figures
from tenorbook.reports.groups import Group, groups, ledger_digits, rescaled
from tenorbook.reports.loan_list import LAID_OUT, LOANS, SUMS, money_width
from tenorbook.reports.result import LoanResult
from tenorbook.tables.table import Column, Role, Table, Tone

TOTALS = "totals"
"""Key of the table of totals by currency and side."""

SAME_GROUP = f"[{LOANS}.currency:all],[currency],[{LOANS}.side:all],[side]"
"""What ties a row of sums to the loans in its currency and side, as arguments of SUMIFS."""


class Sums:
    """Rows of sums under the columns of the loans.

    Args:
        results: the loans.
        found: the group of each row.
        members: the figures of the loans of each row.
        formula: row number and column -> the sum as a formula, unrounded.
    """

    def __init__(
        self,
        results: Sequence[LoanResult],
        found: Sequence[Group],
        members: Sequence[Sequence[Figures]],
        formula: Callable[[int, str], str],
    ) -> None:
        self._found, self._members, self._formula = found, members, formula
        self._digits = [ledger_digits(results, group.currency) for group in found]

    def columns(self, first: tuple[str, list[str]], second: tuple[str, list[str]]) -> tuple[Column, ...]:
        """All columns, in step with those of the loans.

        Args:
            first: header and words of the column under the loans' IDs.
            second: header and words of the one under their counterparties.
        """
        words = {
            "loan": first,
            "counterparty": second,
            "side": ("Side", [str(group.side) for group in self._found]),
            "currency": ("Currency", [group.currency for group in self._found]),
        }
        columns = []
        for key, header, width in LAID_OUT:
            if key in SUMS:
                columns.append(self._sum(key, header))
            else:
                its, texts = words.get(key, ("", [""] * len(self._found)))
                columns.append(Column(key=key, header=its, role=Role.TEXT, values=texts, width=width))
        return tuple(columns)

    def _sum(self, key: str, header: str) -> Column:
        values = [
            sum(rescaled(getattr(row, SUMS[key]) or 0, row.digits, wanted) for row in each)
            for each, wanted in zip(self._members, self._digits, strict=True)
        ]
        formulas: dict[int, str | None] = {
            row: f"ROUND({self._formula(row, key)},{digits})" for row, digits in enumerate(self._digits)
        }
        return Column(
            key=key,
            header=header,
            role=Role.BALANCE,
            values=values,
            width=money_width(values, self._digits),
            row_digits=self._digits,
            row_shown_digits=[currency_digits(group.currency) or 0 for group in self._found],
            exceptions=formulas,
        )


def totals_table(results: Sequence[LoanResult], rows: Sequence[Figures]) -> Table | None:
    """What each currency and side comes to; they are never added up."""
    found = groups(results)
    if not found:
        return None
    members = [figures_of(group, results, rows) for group in found]
    sums = Sums(results, found, members, lambda _, key: f"SUMIFS([{LOANS}.{key}:all],{SAME_GROUP})")
    columns = sums.columns(
        ("Totals", [group.label for group in found]), ("", [counted(len(each)) for each in members])
    )
    return Table(key=TOTALS, columns=columns, tones=dict.fromkeys(range(len(found)), Tone.SUBTOTAL))


def figures_of(group: Group, results: Sequence[LoanResult], rows: Sequence[Figures]) -> list[Figures]:
    """The figures of the computed loans of a group."""
    return [
        row
        for each, row in zip(results, rows, strict=True)
        if each.schedule and each.terms and (row.currency, each.terms.side) == (group.currency, group.side)
    ]


def counted(loans: int) -> str:
    """`1 loan`, `2 loans`."""
    return f"{loans:,} loan" + "s" * (loans != 1)
