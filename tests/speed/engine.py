"""Benchmark of the engine: rows a second against numpy-financial, in one run.

    python tests/speed/engine.py

The baseline is `ipmt` + `ppmt` broadcast over 2,000 loans x 360 periods: undated, unrounded. The engine
works the same number of loans and periods three times: the kernel alone, and the whole build from
resolved terms to checked rows, for equal periods (30/360) and for counted days (Actual/360, Actual/Actual
ISDA, where every period has a factor of its own and the payment is sized on all of them).
"""

import time
from collections.abc import Callable
from datetime import date, timedelta
from decimal import Decimal
from functools import partial

import numpy as np
import numpy_financial as npf

from tenorbook.basis.conventions import DayCount, InterestRounding
from tenorbook.schedule.build import build
from tenorbook.schedule.kernel import level_payment_run
from tenorbook.terms.loan import Length, Loan
from tenorbook.terms.resolve import resolve
from tenorbook.terms.terms import Terms

LOANS, PERIODS, REPEATS = 2_000, 360, 3
ROWS = LOANS * PERIODS
DAYS = [31, 28, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31] * (PERIODS // 12)
DENOMINATOR = 36_000_000
GROWTHS = [[DENOMINATOR + (3_000 + 3 * number) * days for days in DAYS] for number in range(LOANS)]


def cpu(job: Callable[[], object]) -> float:
    """CPU seconds of the quickest of a few runs."""
    best = float("inf")
    for _ in range(REPEATS):
        start = time.process_time()
        job()
        best = min(best, time.process_time() - start)
    return best


def baseline() -> None:
    """Interest and principal of every period, by broadcasting."""
    rates = np.linspace(0.03, 0.09, LOANS)[:, None] / 12
    periods = np.arange(1, PERIODS + 1)[None, :]
    npf.ipmt(rates, periods, PERIODS, 250_000.0)
    npf.ppmt(rates, periods, PERIODS, 250_000.0)


def kernel() -> None:
    """The recurrence alone: interest, principal and balances, on the factors of counted days."""
    for growths in GROWTHS:
        level_payment_run(25_000_000, 180_000, growths, DENOMINATOR, InterestRounding.HALF_UP)


def terms(day_count: DayCount) -> list[Terms]:
    """Resolved terms of loans that differ in rate, amount, day of the month and year."""
    resolved = []
    for number in range(LOANS):
        loan = Loan(
            loan_id=str(number),
            principal=Decimal(20_000_000 + 997 * number).scaleb(-2),
            annual_rate=Decimal(3_000 + 3 * number).scaleb(-5),
            funding_date=date(2000, 1, 1) + timedelta(7 * number),
            term=Length(PERIODS),
            day_count=day_count,
        )
        found, problems = resolve(loan)
        assert found is not None, problems
        resolved.append(found)
    return resolved


def build_all(loans: list[Terms]) -> None:
    """Every schedule, one after the other."""
    for loan in loans:
        build(loan)


def main() -> None:
    """Prints each figure as a ratio to the baseline."""
    base = ROWS / cpu(baseline)
    print(f"numpy-financial ipmt + ppmt        {base / 1e6:6.2f} M rows/s   1.00")
    speed = ROWS / cpu(kernel)
    print(
        f"kernel alone                       {speed / 1e6:6.2f} M rows/s   {speed / base:.2f}  (at least 0.5)"
    )
    for day_count in (DayCount.THIRTY_360, DayCount.ACTUAL_360, DayCount.ACTUAL_ACTUAL_ISDA):
        loans = terms(day_count)
        speed = ROWS / cpu(partial(build_all, loans))
        print(
            f"terms to rows, {day_count.value:<20}{speed / 1e6:6.2f} M rows/s   {speed / base:.2f}  "
            "(at least 0.12)"
        )


if __name__ == "__main__":
    main()
