"""Benchmark of the workbook writer: cells a CPU second, peak memory, and what a second processor brings.

    python tests/speed/workbook.py

500 loans x 360 payments, every column of the loan sheet, live formulas with stored values; summary,
maturities, charts and checks included. The baselines of the same run write a tenth as many cells: openpyxl in
write-only mode, once with a named style a cell (its public way of styling cheaply) and once with a font, a
border and a number format a cell, and XlsxWriter's `write_formula` in constant-memory mode with formulas of
the loan sheet. CPU is user + system, the quicker of two runs; schedules are computed and libraries imported
beforehand.
"""

import os
import subprocess
import sys
import tempfile
import time
import zipfile
from collections.abc import Callable
from datetime import date, datetime, timedelta
from decimal import Decimal
from pathlib import Path

from tenorbook.basis.conventions import DayCount
from tenorbook.jobs.loan import compute_loan
from tenorbook.jobs.outputs import write_schedules
from tenorbook.reports.result import BookResult
from tenorbook.terms.book import Book, Settings
from tenorbook.terms.loan import Length, Loan

AS_OF = date(2026, 11, 30)
COUNTS = (DayCount.THIRTY_360, DayCount.ACTUAL_360, DayCount.ACTUAL_365_FIXED, DayCount.ACTUAL_ACTUAL_ISDA)
LOANS, PAYMENTS, COLUMNS = 500, 360, 10
BASE_ROWS = LOANS * PAYMENTS // 10
MANY = 5_000


def loan(number: int) -> Loan:
    """A loan of 360 payments, no two with the same terms."""
    return Loan(
        loan_id=f"L{number:04d}",
        counterparty=f"Lender {number % 7}",
        principal=Decimal(100_000 + 997 * number),
        annual_rate=Decimal(3_000 + 13 * (number % 300)).scaleb(-5),
        funding_date=date(2020, 1, 1) + timedelta(3 * number % 700),
        term=Length(PAYMENTS),
        day_count=COUNTS[number % 4],
    )


def book(loans: int) -> BookResult:
    """The results of a book of these loans."""
    results = [compute_loan(loan(number), Settings(), AS_OF)[0] for number in range(loans)]
    whole = Book(name="speed.xlsx", loans=tuple(each.loan for each in results))
    return BookResult(book=whole, as_of=AS_OF, results=results, versions=("tenorbook",))


def written(folder: Path, loans: int, processes: int = 1) -> tuple[float, float]:
    """CPU and wall-clock seconds of writing a book's workbooks."""
    write_schedules(book(2), folder, "warm", now=datetime(2026, 12, 1))
    (folder / "warm.schedules.xlsx").unlink()
    result = book(loans)
    start, clock = time.process_time(), time.perf_counter()
    write_schedules(result, folder, "speed", now=datetime(2026, 12, 1), processes=processes)
    return time.process_time() - start, time.perf_counter() - clock


def cells(folder: Path) -> tuple[int, int, int]:
    """Cells and formulas in the workbooks of a folder, and their bytes."""
    count, live, size = 0, 0, 0
    for path in folder.glob("*.xlsx"):
        size += path.stat().st_size
        with zipfile.ZipFile(path) as archive:
            for name in archive.namelist():
                if name.startswith("xl/worksheets/sheet"):
                    content = archive.read(name)
                    count += content.count(b"<c ")
                    live += content.count(b"<f>")
    return count, live, size


def cpu(job: Callable[[], object]) -> float:
    """CPU seconds of the quicker of two runs of a job."""
    best = float("inf")
    for _ in range(2):
        start = time.process_time()
        job()
        best = min(best, time.process_time() - start)
    return best


def openpyxl_styled(named: bool) -> None:
    """Styled values, write-only."""
    import openpyxl
    from openpyxl.cell import WriteOnlyCell
    from openpyxl.styles import Border, Font, NamedStyle, Side

    workbook = openpyxl.Workbook(write_only=True)
    sheet = workbook.create_sheet()
    font, border = Font(name="Calibri", size=10), Border(bottom=Side("thin", color="E6EBEA"))
    style = NamedStyle(name="amount", font=font, border=border, number_format="#,##0.00")
    if named:
        workbook.add_named_style(style)
    for row in range(BASE_ROWS):
        line = []
        for column in range(COLUMNS):
            cell = WriteOnlyCell(sheet, value=row * 10.25 + column)
            if named:
                cell.style = "amount"
            else:
                cell.font, cell.border, cell.number_format = font, border, "#,##0.00"
            line.append(cell)
        sheet.append(line)
    with tempfile.TemporaryFile() as file:
        workbook.save(file)


def xlsxwriter_formulas(path: Path) -> None:
    """Formulas with stored values, as XlsxWriter writes them."""
    import xlsxwriter

    workbook = xlsxwriter.Workbook(path, {"constant_memory": True})
    sheet, style = workbook.add_worksheet(), workbook.add_format({"num_format": "#,##0.00"})
    shapes = ("=J{0}", "=ROUND(F{1}*E{1}*30/360,2)", "=ROUND(level_payment-G{1},2)", "=ROUND(G{1}+H{1},2)")
    for row in range(1, BASE_ROWS + 1):
        for column in range(COLUMNS):
            formula = shapes[column % 4].format(row, row + 1)
            sheet.write_formula(row, column, formula, style, row * 10.25 + column)
    workbook.close()


def alone(*arguments: str) -> list[float]:
    """The figures that a run of this benchmark in a process of its own prints, and its peak megabytes."""
    command = [sys.executable, __file__, *arguments]
    process = subprocess.Popen(command, stdout=subprocess.PIPE, text=True)
    assert process.stdout is not None
    said = process.stdout.read()
    _, status, usage = os.wait4(process.pid, 0)
    if status:
        raise SystemExit(f"the benchmark's run {arguments} ended with status {status}")
    return [*map(float, said.split()), usage.ru_maxrss / 1024]


def main() -> None:
    """Prints every measurement of one run."""
    with tempfile.TemporaryDirectory() as name:
        root = Path(name)
        runs = [alone("write", str(root / "live"), str(LOANS)) for _ in range(2)]
        seconds, peak = min(run[0] for run in runs), runs[0][2]
        count, live, size = cells(root / "live")
        speed = count / seconds
        base = BASE_ROWS * COLUMNS
        named, single = base / cpu(lambda: openpyxl_styled(True)), base / cpu(lambda: openpyxl_styled(False))
        formulas = base / cpu(lambda: xlsxwriter_formulas(root / "x.xlsx"))
        print(f"{LOANS} loans x {PAYMENTS}: {count:,} cells, {live:,} formulas, {size / 1e6:.1f} MB")
        print(f"tenorbook                        {speed / 1e3:6.0f} k cells/s   {peak:4.0f} MB  (under 300)")
        for words, rate, least in (
            ("openpyxl, a named style a cell", named, 10),
            ("openpyxl, styled cell by cell", single, 10),
            ("XlsxWriter, write_formula", formulas, 15),
        ):
            print(f"{words:<33}{rate / 1e3:6.0f} k cells/s   ratio {speed / rate:4.1f}  (at least {least})")
        *_, small = alone("write", str(root / "small"), "250")
        print(f"memory for 250 and {LOANS} loans         {small:4.0f} and {peak:.0f} MB")
        _, one, _ = alone("write", str(root / "one"), str(MANY))
        _, two, most = alone("write", str(root / "two"), str(MANY), "2")
        print(
            f"{MANY:,} loans as volumes: {one:.1f} s with one process, {two:.1f} s with two, "
            f"ratio {one / two:.2f}  (at least 1.5), {most:.0f} MB"
        )


if __name__ == "__main__":
    if sys.argv[1:2] == ["write"]:
        print(*written(Path(sys.argv[2]), int(sys.argv[3]), int((sys.argv[4:] or ["1"])[0])))
    else:
        main()
