"""Benchmark of the program as it is run: help, a small book end to end, a large book's memory.

    python tests/speed/book.py

Each run is a process of its own, so that imports count. CPU is user + system. The small book is 12 loans x
360 payments with day counts and rates that differ, every workbook formula live; the baseline of the same run
is openpyxl writing the same number of plain values, which is the least any tool must do.
"""

import os
import resource
import subprocess
import sys
import tempfile
import time
from datetime import date, timedelta
from pathlib import Path

import openpyxl

HEADERS = ["Loan ID", "Counterparty", "Principal", "Annual rate", "Funding date", "Term", "Day count"]
DAY_COUNTS = ["30/360", "Actual/360", "Actual/365 Fixed", "Actual/Actual ISDA"]


def book(path: Path, loans: int) -> Path:
    """A book of loans of 360 payments, no two with the same terms."""
    workbook = openpyxl.Workbook()
    sheet = workbook.active
    assert sheet is not None
    sheet.title = "Loans"
    sheet.append(HEADERS)
    for number in range(loans):
        sheet.append(
            [
                f"L{number:04d}",
                f"Lender {number % 7}",
                100_000 + 997 * number,
                round(0.03 + 0.00013 * (number % 300), 5),
                date(2020, 1, 1) + timedelta(3 * number % 700),
                360,
                DAY_COUNTS[number % 4],
            ]
        )
    workbook.save(path)
    return path


def run(*arguments: str) -> tuple[float, float]:
    """CPU seconds and peak megabytes of one run of the program."""
    process = subprocess.Popen(
        [sys.executable, "-m", "tenorbook", *arguments],
        stdout=subprocess.DEVNULL,
        stderr=subprocess.DEVNULL,
    )
    _, status, usage = os.wait4(process.pid, 0)
    if status:
        raise SystemExit(f"tenorbook {' '.join(arguments)} ended with status {status}")
    return usage.ru_utime + usage.ru_stime, usage.ru_maxrss / 1024


def plain_values(cells: int) -> float:
    """CPU seconds of openpyxl writing plain values, ten a row."""
    start = time.process_time()
    workbook = openpyxl.Workbook(write_only=True)
    sheet = workbook.create_sheet()
    for row in range(cells // 10):
        sheet.append([row * 10.25 + column for column in range(10)])
    with tempfile.TemporaryFile() as file:
        workbook.save(file)
    return time.process_time() - start


def main() -> None:
    """Prints every measurement of one run."""
    with tempfile.TemporaryDirectory() as folder:
        root = Path(folder)
        small, large = book(root / "small.xlsx", 12), book(root / "large.xlsx", 500)
        cpu, _ = run("--help")
        print(f"tenorbook --help                     {cpu:6.2f} s of CPU   (under 0.3)")
        cpu, peak = run("schedule", str(small), "--as-of", "2026-11-30", "--out", str(root / "s"))
        base = plain_values(12 * 360 * 10)
        print(f"12 loans x 360, book to workbook     {cpu:6.2f} s of CPU   {peak:4.0f} MB   (under 1.5 s)")
        print(f"  openpyxl, as many plain values     {base:6.2f} s of CPU   ratio {base / cpu:.2f}")
        cpu, peak = run("schedule", str(large), "--as-of", "2026-11-30", "--csv", "--out", str(root / "l"))
        print(f"500 loans x 360, workbooks and CSV   {cpu:6.2f} s of CPU   {peak:4.0f} MB   (under 400 MB)")
    own = resource.getrusage(resource.RUSAGE_SELF).ru_maxrss / 1024
    print(f"this benchmark itself: {own:.0f} MB")


if __name__ == "__main__":
    main()
