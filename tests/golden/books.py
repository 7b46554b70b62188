"""The books behind the golden workbooks, and how two workbooks are compared part by part.

Refreshed by hand, after the pictures have been looked at, and never by a test:

    PYTHONPATH=tests python -m golden.books
"""

import zipfile
from datetime import date, datetime
from decimal import Decimal
from pathlib import Path

from reports.samples import book_of, extra, note
from tenorbook.basis.conventions import DayCount, ExtraEffect, Repayment, Side
from tenorbook.jobs.outputs import write_schedules
from tenorbook.reports.result import BookResult
from tenorbook.terms.loan import Length, RateChange
from tenorbook.write.design import Design

HERE = Path(__file__).parent
NOW = datetime(2026, 1, 2)

FORGIVEN = {
    "xl/theme/theme1.xml": "the packing library's own; every cell names its typeface and colours",
    "docProps/app.xml": "the packing library's own",
}
"""Parts that may differ, and why."""


def plain() -> BookResult:
    """One loan of a year, and nothing else."""
    return book_of([note(term=Length(12))])


def kinds() -> BookResult:
    """Two sides, two currencies, extras, a rate change, a counterparty with a wildcard, a loan set aside."""
    changed = RateChange(from_date=date(2026, 2, 15), annual_rate=Decimal("0.07"))
    return book_of(
        [
            note("A", term=Length(24), rate_changes=(changed,)),
            note("B", term=Length(18), side=Side.RECEIVABLE, counterparty="Any*one"),
            note(
                "C & D",
                currency="JPY",
                day_count=DayCount.ACTUAL_ACTUAL_ISDA,
                repayment=Repayment.LEVEL_PRINCIPAL,
                term=Length(12),
            ),
            note(
                "E",
                term=Length(20),
                extra_payments=(extra(date(2025, 6, 20), 9000, effect=ExtraEffect.LOWER),),
                carried={"Cost centre": "=4100"},
            ),
            note("bad", principal=None, annual_rate=None),
        ],
        ("Cost centre",),
    )


BOOKS = {
    "plain": (plain, Design(), False),
    "kinds": (kinds, Design(), False),
    "letter": (plain, Design(paper="Letter", negative="brackets", accent="#5B2A86", text_size=11), False),
    "values": (plain, Design(), True),
}
"""Name -> the book, its look, and whether it holds values only."""


def write(name: str, folder: Path) -> Path:
    """Writes the workbook of one of the books."""
    book, design, values_only = BOOKS[name]
    made = write_schedules(book(), folder, name, design=design, values_only=values_only, now=NOW)
    return made.paths[0]


def parts(path: Path) -> dict[str, bytes]:
    """Name -> content of every part."""
    with zipfile.ZipFile(path) as archive:
        return {name: archive.read(name) for name in archive.namelist()}


def refresh() -> None:
    """Writes all golden workbooks anew."""
    import tempfile

    for name in BOOKS:
        with tempfile.TemporaryDirectory() as folder:
            (HERE / f"{name}.xlsx").write_bytes(write(name, Path(folder)).read_bytes())


if __name__ == "__main__":
    refresh()
