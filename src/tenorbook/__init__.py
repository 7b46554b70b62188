"""A workbook of loans in, exact dated schedules out.

The public names, and nothing else, are those of `__all__`; what they need is imported when they are
first used, so that `import tenorbook` costs next to nothing. The conventions that a `Loan` names are
the enums of `tenorbook.basis.conventions`.

>>> from datetime import date
>>> from decimal import Decimal
>>> import tenorbook
>>> loan = tenorbook.Loan(
...     loan_id="N-1",
...     principal=Decimal("250000"),
...     annual_rate=Decimal("0.0625"),
...     funding_date=date(2026, 1, 1),
...     term=tenorbook.Length(360),
... )
>>> schedule = tenorbook.build_schedule(loan)
>>> float(schedule.frame()["payment"][1])
1539.29
"""

from importlib import import_module
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from os import PathLike

    from tenorbook.basis.problem import BookError, Problem, TenorbookError, TermsError
    from tenorbook.schedule.ledger import Schedule
    from tenorbook.terms.book import Book, Settings
    from tenorbook.terms.loan import ExtraPayment, Length, Loan, RateChange

__version__ = "0.1.0"

__all__ = [
    "Book",
    "BookError",
    "ExtraPayment",
    "Length",
    "Loan",
    "Problem",
    "RateChange",
    "Schedule",
    "Settings",
    "TenorbookError",
    "TermsError",
    "build_schedule",
    "read_book",
]

_HOMES = {
    "Book": "terms.book",
    "BookError": "basis.problem",
    "ExtraPayment": "terms.loan",
    "Length": "terms.loan",
    "Loan": "terms.loan",
    "Problem": "basis.problem",
    "RateChange": "terms.loan",
    "Schedule": "schedule.ledger",
    "Settings": "terms.book",
    "TenorbookError": "basis.problem",
    "TermsError": "basis.problem",
}


def read_book(path: "str | PathLike[str]") -> "Book":
    """The loans of a workbook (.xlsx, .xlsm, .ods) or CSV, with every problem found in one pass.

    Args:
        path: of the book; it is only read.

    Raises:
        BookError: the file as a whole is unusable.
    """
    from pathlib import Path

    from tenorbook.read import read_book as read

    return read(Path(path))


def build_schedule(loan: "Loan", settings: "Settings | None" = None) -> "Schedule":
    """The dated schedule of one loan.

    Args:
        loan: the note as entered; amounts in currency units and rates as fractions, both Decimals.
        settings: of the book; gives the currency of a loan that states none (else USD).

    Returns:
        The schedule; its `problems` are what someone should know: warnings and notes, those of the
        terms included.

    Raises:
        TermsError: the loan cannot be computed as entered; carries every problem found.
        TypeError: an amount or rate is a float.
    """
    from dataclasses import replace

    from tenorbook.basis.problem import TermsError
    from tenorbook.schedule.build import build
    from tenorbook.terms.resolve import resolve

    terms, problems = resolve(loan, settings)
    if terms is None:
        raise TermsError(problems)
    schedule = build(terms)
    return replace(schedule, problems=tuple(dict.fromkeys((*problems, *schedule.problems))))


def __getattr__(name: str) -> Any:
    """A public name, from its home, when it is first used."""
    if name not in _HOMES:
        raise AttributeError(f"module 'tenorbook' has no attribute {name!r}")
    found = getattr(import_module(f"tenorbook.{_HOMES[name]}"), name)
    globals()[name] = found
    return found


def __dir__() -> list[str]:
    return sorted({*globals(), *__all__})
