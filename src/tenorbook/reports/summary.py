"""The book on one sheet: a row a loan, totals, groups by counterparty, charts, checks."""

from collections.abc import Mapping, Sequence

from tenorbook.reports.book_charts import run_off_charts
from tenorbook.reports.book_checks import book_checks
from tenorbook.reports.counterparties import counterparties_table
from tenorbook.reports.figures import figures
from tenorbook.reports.loan_list import PRINTED_COLUMNS, LoanList
from tenorbook.reports.outlook import Outlook
from tenorbook.reports.result import BookResult, LoanResult
from tenorbook.reports.totals import totals_table
from tenorbook.reports.words import CAUTION, day
from tenorbook.tables.sheet import Lines, Part, Printed, Sheet

NAME = "Summary"


def summary_sheet(
    result: BookResult,
    results: Sequence[LoanResult],
    outlook: Outlook,
    sheets: Mapping[str, str],
    live: bool,
    *,
    title: str = "Loan book {book}",
    back: str = "",
) -> Sheet:
    """The summary of the loans of a workbook.

    The loans, their totals and the charts of the first currency make its printed page; the groups by
    counterparty, the checks and the charts of further currencies stand below.

    Args:
        result: of the book.
        results: the loans of this workbook, in the book's order.
        outlook: of these loans.
        sheets: loan ID -> its sheet; `file#sheet` where it stands in another workbook.
        live: whether the loans' sheets stand in this workbook, so that figures can refer to them.
        title: of the sheet; `{book}` stands for the book's name.
        back: file and sheet that the link at the top leads to; empty: none.
    """
    rows = [figures(each, result.book.settings.currency) for each in results]
    parts: list[Part] = []
    on_one_page = 0
    if results:
        charts = [run_off_charts(outlook, n) for n, off in enumerate(outlook.run_offs) if off.months]
        totals = totals_table(results, rows)
        parts = [LoanList(result, results, rows, sheets, live).table(), *filter(None, [totals]), *charts[:1]]
        on_one_page = len(parts)
        parties = counterparties_table(results, rows)
        checks = book_checks(results, outlook, live=live, by_counterparty=parties is not None)
        parts += [*filter(None, [parties]), checks, *charts[1:]]
    parts.append(Lines((CAUTION, *_footnotes(result)), quiet=True))
    return Sheet(
        name=NAME,
        title=title.replace("{book}", result.book.name),
        subtitle=_subtitle(result, results),
        parts=parts,
        back=back,
        print_header=result.book.name,
        print_footer=CAUTION,
        printed=Printed(columns=PRINTED_COLUMNS, on_one_page=on_one_page),
        logo=True,
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
