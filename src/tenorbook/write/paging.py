"""Where the pages of a printed sheet end: between years, between tables, never after a heading.

Spreadsheet programs break pages where the paper ends. Here breaks are set where a reader would set them,
from the heights of the rows and the scale at which the sheet is as wide as its page.
"""

from collections.abc import Iterator
from math import floor
from typing import NamedTuple

from tenorbook.tables.sheet import Checks, Part
from tenorbook.tables.table import Table
from tenorbook.write.heights import Heights
from tenorbook.write.layout import SheetPlace, TablePlace, height_of, place_table

SIDE_MARGIN, MARGIN = 36.0, 36.0
"""Left and right, and top and bottom margin, in points."""

LEAST_SCALE = 0.70
"""Text of 10 points is printed in 7 at least, where a sheet is fitted on one page."""

_PAPERS = {"A4": (841.9, 595.3), "Letter": (792.0, 612.0)}
"""Width and height in points, landscape."""

_SPARE = 0.98
"""Share of the page that is filled; programs differ a little in how tall a row is."""

_WIDOW = 1 / 3
"""A run of rows taller than a page begins where it stands only if this share of the page is left."""

_FIRST, _LAST = 4, 2
"""Rows that stay with a table's header, and with its end."""

_MOST_BREAKS = 1000
"""Page breaks of a sheet; spreadsheet programs take 1,023."""


class _Run(NamedTuple):
    """Rows of the sheet, first to last (inclusive), that belong on one page."""

    first: int
    last: int


class Paging:
    """The pages of one sheet.

    Args:
        place: where everything on the sheet stands.
        heights: of its rows.
        widths: of its columns, in characters.
        paper: `A4` or `Letter`.
        repeated: the row repeated on each page; 0: none.

    Attributes:
        columns: how many are printed.
        last_row: the last row that is printed.
        whole: whether all of that stands on one page.
        restricted: whether less than the whole sheet is printed.
    """

    def __init__(
        self, place: SheetPlace, heights: Heights, widths: list[float], paper: str, repeated: int
    ) -> None:
        self._place, self._heights = place, heights
        printed = place.sheet.printed
        self.columns = min(printed.columns or len(widths), len(widths))
        width, height = _PAPERS[paper]
        self._width, self._height = width - 2 * SIDE_MARGIN, height - 2 * MARGIN
        self._needed = sum(map(_points, widths[: self.columns]))
        self._repeated = heights.of(repeated, repeated) if repeated else 0.0
        ends = [_end(row, part) for row, part in place.parts]
        on_one = printed.on_one_page
        self.whole = bool(on_one) and self._fits(ends[on_one - 1], LEAST_SCALE)
        last = (ends[: printed.parts] or [place.height])[-1]
        if self.whole:
            further = (end for end in reversed(ends[on_one:]) if self._fits(end, self._by_width()))
            last = next(further, ends[on_one - 1])
        self.last_row = min(last, place.height)
        self.restricted = self.columns < len(widths) or self.last_row < place.height

    def _fits(self, last: int, scale: float) -> bool:
        """Whether the rows to `last` are on one page at no less than a scale."""
        tall = self._height * _SPARE / self._heights.of(1, last)
        return min(tall, self._by_width()) >= scale

    def _by_width(self) -> float:
        """The scale at which the printed columns are as wide as the page; never enlarged."""
        return min(1.0, self._width / self._needed)

    def breaks(self) -> list[int]:
        """Rows after which a page ends."""
        scale = floor(100 * self._by_width()) / 100
        page = self._height * _SPARE / scale
        following = page - self._repeated
        found: list[int] = []
        left, before = page, _Run(0, 0)
        for run in self._runs(following):
            height, gap = self._heights.of(*run), self._heights.of(before.last + 1, run.first - 1)
            if gap + height > left and (height <= following or left < following * _WIDOW) and before.last:
                taken = self._taken_along(before, run, found, following)
                found.append((taken or run).first - 1)
                left, gap = following, self._heights.of(taken.first, run.first - 1) if taken else 0.0
            left -= gap + height
            while left < 0:
                left += following
            before = run
        return found[:_MOST_BREAKS]

    def _taken_along(self, before: _Run, run: _Run, found: list[int], page: float) -> _Run | None:
        """The last rows of a table, where what stands below it would be alone on its page."""
        parts = dict(self._place.parts)
        follows = isinstance(parts.get(run.first), Checks)
        fits = self._heights.of(before.first, run.last) <= page
        begins_page = before.first in (1, *(row + 1 for row in found[-1:]))
        return before if follows and fits and not begins_page else None

    def _runs(self, page: float) -> Iterator[_Run]:
        """The rows that belong together, in order; what stands above the first part goes with it."""
        for number, (row, part) in enumerate(self._place.parts):
            if row > self.last_row:
                return
            for nth, run in enumerate(self._runs_of(row, part, page)):
                yield run if number or nth else _Run(1, run.last)

    def _runs_of(self, row: int, part: Part, page: float) -> Iterator[_Run]:
        end = _end(row, part)
        if isinstance(part, Table) and (part.subtotals or self._heights.of(row, end) > page):
            yield from _table_runs(self._place.tables[part.key], row)
        else:
            yield _Run(row, end)


def _table_runs(table: TablePlace, row: int) -> Iterator[_Run]:
    """A year at a time where there are years; else row by row, but for the first few and the last."""
    if table.subtotal_rows:
        ends = [*table.subtotal_rows[:-1], table.last_row]
    else:
        ends = [*table.rows[_FIRST - 1 : -_LAST], table.last_row]
    for end in ends:
        yield _Run(row, end)
        row = end + 1


def _end(row: int, part: Part) -> int:
    """The last row of a part, without the empty one below it."""
    return place_table(part, row).last_row if isinstance(part, Table) else row + height_of(part) - 2


def _points(width: float) -> float:
    """A column's width in points, from characters: 7 pixels each and 5 more, 96 pixels to the inch."""
    return floor(width * 7 + 5) * 0.75
