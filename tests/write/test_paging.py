"""Where the pages of a printed sheet end."""

from datetime import datetime
from decimal import Decimal
from pathlib import Path
from typing import Any

import openpyxl
import pytest

from reports.samples import book_of, note
from tenorbook.jobs.outputs import write_schedules
from tenorbook.tables.sheet import Check, Checks, Lines, Part, Printed, Sheet
from tenorbook.tables.table import Column, Role, Subtotal, Table
from tenorbook.terms.loan import Length
from tenorbook.write.design import Design
from tenorbook.write.heights import Heights
from tenorbook.write.layout import arrange
from tenorbook.write.paging import Paging

pytestmark = pytest.mark.filterwarnings("ignore:Sparkline Group extension")


def table(rows: int, years: int = 0, key: str = "t") -> Table:
    """A table of so many rows, in so many years."""
    column = Column(key="a", header="A", role=Role.INTEGER, values=list(range(rows)), width=100)
    each = rows // years if years else 0
    runs = tuple(Subtotal(n * each, (n + 1) * each - 1, f"Total {n}") for n in range(years))
    return Table(key=key, columns=(column,), title="Title", subtotals=runs, total_label="Total")


def paging(*parts: Part, paper: str = "A4", **printed: Any) -> Paging:
    place = arrange(Sheet(name="S", title="T", subtitle="", parts=parts, printed=Printed(**printed)))
    return Paging(place, Heights(place, Design()), place.widths, paper, 0)


def test_a_page_ends_after_a_year() -> None:
    made = paging(table(120, 10))
    place = made._place.tables["t"]
    assert made.breaks()
    assert set(made.breaks()) <= set(place.subtotal_rows)


def test_pages_hold_as_many_years_as_they_have_room_for() -> None:
    # a row is 13.5 points, a year of 12 rows and a subtotal 175.5; a page holds 0.98 x (595.3 - 72) = 512.8
    place = paging(table(120, 10))._place.tables["t"]
    assert paging(table(120, 10)).breaks()[1:3] == [place.subtotal_rows[3], place.subtotal_rows[5]]


def test_a_table_that_fits_on_a_page_is_not_split() -> None:
    made = paging(table(20, key="one"), table(20, key="two"))
    title = made._place.tables["two"].title_row
    assert made.breaks() == [title - 1]


def test_a_long_table_keeps_its_header_with_rows_and_its_total_with_rows() -> None:
    made = paging(Lines(("text",) * 28), table(200))
    place = made._place.tables["t"]
    assert made.breaks()[0] == place.title_row - 1
    assert all(after <= place.rows[-3] for after in made.breaks())


def test_checks_are_not_alone_on_a_page() -> None:
    # both years fill the page so far that the checks do not fit; the second goes along with them
    checks = Checks("Checks", (Check(label="One", formula=None),) * 4, "checks", 0, 0)
    made = paging(table(24, 2), checks)
    assert made.breaks() == [made._place.tables["t"].subtotal_rows[0]]


def test_a_year_taller_than_a_page_flows() -> None:
    made = paging(table(106, 2))
    assert made.breaks() == []


@pytest.mark.parametrize(("rows", "whole"), [(20, True), (80, False)])
def test_what_is_legible_on_one_page_is_printed_on_one(rows: int, whole: bool) -> None:
    made = paging(table(rows), Lines(("text",)), table(100, key="u"), on_one_page=2)
    assert made.whole is whole
    assert (made.last_row < made._place.tables["u"].header_row) is whole


def test_what_there_is_room_for_is_printed_too() -> None:
    made = paging(table(5), table(5, key="u"), table(90, key="v"), on_one_page=1)
    assert made.last_row == made._place.tables["u"].last_row


@pytest.mark.parametrize(("paper", "number"), [("A4", 9), ("Letter", 1)])
def test_a_summary_is_one_page_and_a_loan_breaks_by_years(tmp_path: Path, paper: str, number: int) -> None:
    loans = [note(f"L{n}", term=Length(240), principal=Decimal(90_000 + n)) for n in range(20)]
    result = book_of(loans)
    made = write_schedules(result, tmp_path, "b", design=Design(paper=paper), now=datetime(2026, 1, 2))
    book = openpyxl.load_workbook(made.paths[0])
    summary, loan = book["Summary"], book["L0"]
    assert (summary.page_setup.fitToHeight or 1, summary.page_setup.paperSize) == (1, number)
    assert summary.print_area.startswith("'Summary'!$A$1:$O$")
    labels = [loan.cell(each.id, 2).value for each in loan.row_breaks.brk]
    assert labels
    assert all(str(label).startswith("Total ") for label in labels[:-1])
    outlined = [row for row, size in loan.row_dimensions.items() if size.outlineLevel]
    assert len(outlined) == 241
    assert str(loan.cell(outlined[0], 2).value).startswith("2025-01-15")
