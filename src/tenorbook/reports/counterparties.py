"""The loans of the summary by counterparty, within each currency and side."""

import re
from collections.abc import Sequence

from tenorbook.reports.figures import Figures
from tenorbook.reports.groups import Group, groups
from tenorbook.reports.loan_list import LOANS
from tenorbook.reports.result import LoanResult
from tenorbook.reports.totals import SAME_GROUP, Sums, counted
from tenorbook.tables.table import Table

COUNTERPARTIES = "counterparties"
"""Key of the table."""

_NAMELESS = "(no counterparty)"
_A_PATTERN = re.compile(r"[*?~]|^[=<>]|^.{256}", re.DOTALL)
"""Names that SUMIFS would take for a pattern or a comparison, or would not take at all."""


def counterparties_table(results: Sequence[LoanResult], rows: Sequence[Figures]) -> Table | None:
    """A row a counterparty in each currency and side; `None` where nobody is named."""
    found = _found(results, rows)
    names = [name for name, _ in found]
    if not any(names):
        return None

    def formula(row: int, key: str) -> str:
        wanted = f"[{LOANS}.{key}:all]"
        if names[row] and not _A_PATTERN.search(names[row]):
            return f"SUMIFS({wanted},[{LOANS}.counterparty:all],[counterparty],{SAME_GROUP})"
        name = "[counterparty]" if names[row] else '""'
        same = f"[{LOANS}.counterparty:all]={name}"
        group = f"([{LOANS}.currency:all]=[currency])*([{LOANS}.side:all]=[side])"
        return f"SUMPRODUCT(({same})*{group},{wanted})"

    members = list(found.values())
    sums = Sums(results, [group for _, group in found], members, formula)
    columns = sums.columns(
        ("", [counted(len(each)) for each in members]),
        ("Counterparty", [name or _NAMELESS for name in names]),
    )
    return Table(key=COUNTERPARTIES, columns=columns, title="By counterparty")


def _found(results: Sequence[LoanResult], rows: Sequence[Figures]) -> dict[tuple[str, Group], list[Figures]]:
    """(counterparty, group) -> figures of its loans; group by group, names in order."""
    found: dict[tuple[str, Group], list[Figures]] = {}
    spelled: dict[str, str] = {}
    for group in groups(results):
        its: dict[str, list[Figures]] = {}
        for each, row in zip(results, rows, strict=True):
            if each.schedule and each.terms and _is_in(each, group):
                name = spelled.setdefault(each.loan.counterparty.casefold(), each.loan.counterparty)
                its.setdefault(name, []).append(row)
        found |= {(name, group): its[name] for name in sorted(its, key=str.casefold)}
    return found


def _is_in(each: LoanResult, group: Group) -> bool:
    terms = each.terms
    return terms is not None and (terms.currency, terms.side) == (group.currency, group.side)
