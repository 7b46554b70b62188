"""Charts of the loans in one currency: the balance by month, payments and maturities by year."""

from collections.abc import Sequence
from datetime import date

from tenorbook.reports.maturities import DUE, NAME, PAID, RUN_OFF
from tenorbook.reports.outlook import Outlook, RunOff
from tenorbook.tables.sheet import Chart, Charts, Series

_UNITS = ("", " thousand", " million", " billion")
_READABLE = 10_000
"""From this amount on an axis is in thousands, and so on."""


def run_off_charts(outlook: Outlook, number: int) -> Charts:
    """The charts of one of the main groups.

    Args:
        outlook: of the loans of the workbook.
        number: of the group, from 0.
    """
    run_off = outlook.run_offs[number]
    charts = [_balance(outlook, run_off), _payments(outlook, run_off)]
    due = _falling_due(outlook, run_off)
    return Charts(tuple([*charts, due] if due else charts))


def _balance(outlook: Outlook, run_off: RunOff) -> Chart:
    months = max((each.months for each in outlook.run_offs), key=len)
    balance = run_off.balance + [0] * (len(months) - len(run_off.balance))
    series = _series("Balance", RUN_OFF, run_off.group.key, balance, run_off)
    return _chart("area", "Balance by month", run_off, _along(RUN_OFF, "month", months), (series,), balance)


def _payments(outlook: Outlook, run_off: RunOff) -> Chart:
    years = sorted({year for each in outlook.run_offs for year in each.years})
    parts, tops = [], [0] * len(years)
    for name, amounts in (("Principal", run_off.principal), ("Interest", run_off.interest)):
        by_year = dict(zip(run_off.years, amounts, strict=True))
        values = [by_year.get(year, 0) for year in years]
        tops = [top + value for top, value in zip(tops, values, strict=True)]
        parts.append(_series(name, PAID, f"{name.lower()}_{run_off.group.key}", values, run_off))
    along = _along(PAID, "year", [*map(str, years)])
    return _chart("stacked column", "Payments by year", run_off, along, tuple(parts), tops)


def _falling_due(outlook: Outlook, run_off: RunOff) -> Chart | None:
    its = next((each for each in outlook.maturities if each.group == run_off.group), None)
    if its is None:
        return None
    values = [sum(sums[number] for sums in its.by_year) for number in range(len(outlook.years))]
    series = _series("Principal", DUE, run_off.group.key, values, run_off)
    along = _along(DUE, "year", [band.header for band in outlook.years])
    return _chart("column", "Principal falling due by year", run_off, along, (series,), values)


def _series(name: str, table: str, column: str, values: Sequence[int], run_off: RunOff) -> Series:
    scale = 10**run_off.digits
    return Series(name, NAME, table, column, [value / scale for value in values])


def _along(table: str, column: str, values: Sequence[str | date]) -> Series:
    return Series("", NAME, table, column, values)


def _chart(
    kind: str, title: str, run_off: RunOff, along: Series, series: tuple[Series, ...], tops: Sequence[int]
) -> Chart:
    """A chart with its title and axis in words: `Balance by month, USD`, `USD thousand`."""
    highest = max(map(abs, tops), default=0) // 10**run_off.digits
    thousands = 0
    while highest >= _READABLE * 1000**thousands and thousands + 1 < len(_UNITS):
        thousands += 1
    unit = run_off.group.currency + _UNITS[thousands]
    return Chart(kind, f"{title}, {run_off.group.label}", unit, thousands, along, series)
