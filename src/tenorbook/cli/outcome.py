"""What came of a job, in the words and figures of the end table; and its exit code."""

from collections import Counter
from collections.abc import Sequence
from pathlib import Path
from typing import Any, NamedTuple

from tenorbook.basis.conventions import InterestRounding, Side
from tenorbook.basis.money import to_text
from tenorbook.basis.problem import Problem, Severity
from tenorbook.basis.rounding import divide
from tenorbook.jobs.schedule import Done
from tenorbook.reports.result import LoanResult
from tenorbook.reports.words import amount

ALL_DONE, SOME_ASIDE, UNUSABLE, FAULT = 0, 1, 2, 3
"""The exit codes."""

_MOST_NAMED = 12

Line = tuple[str, str]
"""A label of the end table and what stands beside it."""


class Owed(NamedTuple):
    """The balances of one side in one currency, in minor units."""

    side: str
    currency: str
    digits: int
    balance: int

    @property
    def shown(self) -> str:
        """`USD 1,200.00`."""
        return f"{self.currency} {amount(self.balance, self.digits)}"

    def as_data(self) -> dict[str, str]:
        """With the balance as plain decimal text: no amount passes through a float."""
        balance = to_text(self.balance, self.digits)
        return {"side": self.side, "currency": self.currency, "balance": balance}


def exit_code(done: Done) -> int:
    """3 if the program failed on a loan, 1 if anything was set aside, else 0."""
    if done.failed:
        return FAULT
    return SOME_ASIDE if _count(done.result.problems)[Severity.ERROR] else ALL_DONE


def lines(done: Done) -> list[Line]:
    """The end table: what was computed and set aside, what is owed, where the files are, what next."""
    results = done.result.results
    aside = [each for each in results if each.status == "error"]
    table = [("Computed", _computed(results))]
    if aside:
        table.append(("Set aside", f"{len(aside):,}: {_named([each.loan.loan_id for each in aside])}"))
    table.append(("Messages", counted(done.result.problems)))
    if done.files:
        table += _owed_lines(results)
        table.append(("Files in", shown(done.folder or Path())))
        table += [("", path.name) for path in done.files]
    return [*table, ("Next", _next(done))]


def counted(problems: Sequence[Problem]) -> str:
    """How many of each: `2 errors, 1 warning, 3 notes`; `none`."""
    counts = _count(problems)
    words = [f"{counts[each]:,} {each}{'s' * (counts[each] != 1)}" for each in Severity if counts[each]]
    return ", ".join(words) or "none"


def shown(path: Path) -> str:
    """A path from the current folder where that is shorter."""
    try:
        return str(path.absolute().relative_to(Path.cwd()))
    except ValueError:
        return str(path)


def as_json(verb: str, done: Done) -> dict[str, Any]:
    """The end table as plain data, with every message."""
    results = done.result.results
    return {
        "verb": verb,
        "book": done.result.book.name,
        "as_of": done.result.as_of.isoformat(),
        "loans": len(results),
        "computed": sum(each.status != "error" for each in results),
        "set_aside": [each.loan.loan_id for each in results if each.status == "error"],
        "messages": {str(each): _count(done.result.problems)[each] for each in Severity},
        "owed": [each.as_data() for each in _owed(results)],
        "folder": str(done.folder) if done.folder else None,
        "files": [path.name for path in done.files],
        "problems": [_as_data(problem) for problem in (*done.result.problems, *done.remarks)],
        "exit_code": exit_code(done),
    }


def _as_data(problem: Problem) -> dict[str, str]:
    """A problem in the columns of `exceptions.csv`."""
    return {
        "severity": str(problem.severity),
        "loan_id": problem.loan_id,
        "sheet": problem.sheet,
        "cell": problem.cell,
        "value": problem.value,
        "problem": problem.problem,
        "remedy": problem.remedy,
    }


def _count(problems: Sequence[Problem]) -> Counter[Severity]:
    return Counter(problem.severity for problem in problems)


def _computed(results: Sequence[LoanResult]) -> str:
    good = [each for each in results if each.status != "error"]
    doubtful = sum(each.status == "warning" for each in good)
    loans = "1 loan" if len(results) == 1 else f"{len(results):,} loans"
    all_of = loans if len(good) == len(results) else f"{len(good):,} of {loans}"
    return all_of + (f", {doubtful:,} with a warning" if doubtful else "")


def _named(loan_ids: Sequence[str]) -> str:
    more = len(loan_ids) - _MOST_NAMED
    return ", ".join(loan_ids[:_MOST_NAMED]) + (f" and {more:,} more" if more > 0 else "")


def _owed(results: Sequence[LoanResult]) -> list[Owed]:
    """The balances by side and currency; never added across either."""
    totals: Counter[tuple[str, str, int]] = Counter()
    for each in results:
        if each.terms is not None and each.position is not None:
            terms = each.terms
            finer = 10 ** (terms.digits - terms.currency_digits)
            balance = divide(each.position.balance, finer, InterestRounding.HALF_UP)
            totals[terms.side.value, terms.currency, terms.currency_digits] += balance
    return [Owed(*key, total) for key, total in totals.items()]


def _owed_lines(results: Sequence[LoanResult]) -> list[Line]:
    """One line a side: `Owed by us  USD 1,200.00, EUR 300.00`."""
    owed = _owed(results)
    labels = {Side.PAYABLE.value: "Owed by us", Side.RECEIVABLE.value: "Owed to us"}
    return [
        (label, ", ".join(each.shown for each in owed if each.side == side))
        for side, label in labels.items()
        if any(each.side == side for each in owed)
    ]


def _next(done: Done) -> str:
    """The one thing to do now."""
    counts = _count(done.result.problems)
    if done.failed:
        return f"report the fault with the terms of loan {_named(done.failed)}; the other loans are sound"
    if counts[Severity.ERROR] and done.checked:
        return f"correct in your book the cells marked in {done.checked.name}, and run again"
    if counts[Severity.ERROR]:
        return "correct the cells named above, and run again"
    if not done.files:
        return "look at the warnings above" if counts[Severity.WARNING] else "nothing to correct"
    first = done.files[0].name
    return f"open {first}" + (", the sheet Exceptions first" if counts[Severity.WARNING] else "")
