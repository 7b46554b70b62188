"""Checks of the whole summary: what came in is what is there, and every table ties to the others."""

from collections.abc import Iterator, Sequence

from tenorbook.basis.money import currency_digits
from tenorbook.reports.counterparties import COUNTERPARTIES
from tenorbook.reports.groups import computed, groups, ledger_digits
from tenorbook.reports.loan_list import LOANS
from tenorbook.reports.maturities import NAME as MATURITIES
from tenorbook.reports.maturities import owed_name
from tenorbook.reports.outlook import Outlook
from tenorbook.reports.result import LoanResult
from tenorbook.reports.standing import CHECKS
from tenorbook.reports.totals import TOTALS
from tenorbook.tables.sheet import Check, Checks


def book_checks(
    results: Sequence[LoanResult], outlook: Outlook, *, live: bool, by_counterparty: bool
) -> Checks:
    """The checks below the summary's tables.

    Args:
        results: the loans of the workbook.
        outlook: of these loans.
        live: whether the loans' sheets stand in this workbook.
        by_counterparty: whether the table by counterparty is there.
    """
    checks = [*_counts(results, live), *_ties(results, outlook, by_counterparty)]
    return Checks("Checks", tuple(checks), CHECKS, 0, 4)


def _counts(results: Sequence[LoanResult], live: bool) -> Iterator[Check]:
    good = sum(1 for _ in computed(results))
    aside = sum(each.status == "error" and each.schedule is None for each in results)
    empty = f'(RIGHT([{LOANS}.status:all],5)="error")*([{LOANS}.balance:all]="")'
    held = f"COUNT([{LOANS}.balance:all])-SUMPRODUCT({empty})"
    yield Check(
        label="Loans in the book less loans computed and set aside",
        formula=f"{len(results)}-{held}",
        value=len(results) - good - aside,
    )
    if live:
        yield Check(
            label="Loan sheets with a check that fails",
            formula=f'COUNTIF([{LOANS}.checks:all],"FAIL")',
        )


def _ties(results: Sequence[LoanResult], outlook: Outlook, by_counterparty: bool) -> Iterator[Check]:
    """Currency by currency: each total against the tables that break it down."""
    owing = {each.group.key for each in outlook.maturities}
    for row, group in enumerate(groups(results)):
        digits = ledger_digits(results, group.currency)
        balance = f"[{TOTALS}.balance@{row}]"
        ties = {"due within and after 12 months": f"[{TOTALS}.within@{row}]-[{TOTALS}.after@{row}]"}
        if by_counterparty:
            same = f"[{COUNTERPARTIES}.currency:all],[{TOTALS}.currency@{row}]"
            same += f",[{COUNTERPARTIES}.side:all],[{TOTALS}.side@{row}]"
            ties["the counterparties"] = f"SUMIFS([{COUNTERPARTIES}.balance:all],{same})"
        if group.key in owing:
            ties["the sheet Maturities"] = f"{MATURITIES}!{owed_name(group.key)}"
        for words, text in ties.items():
            yield Check(
                label=f"{group.label}: balance less {words}",
                formula=f"ROUND({balance}-{text},{digits})",
                digits=digits,
                shown_digits=currency_digits(group.currency) or 0,
            )
