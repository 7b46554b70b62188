"""How tall the rows of a sheet are: all as usual, but for titles, headers and texts of several lines."""

from textwrap import wrap

from tenorbook.write.design import Design
from tenorbook.write.layout import SheetPlace, TablePlace
from tenorbook.write.values import plain_text

_USUAL_SIZE = 10
_ROW, _TITLE, _SUBTITLE, _BACK, _HEADER, _LINE = 13.5, 1.5, 16.5, 18, 27, 13.5
"""In points at the usual text size; a header has two lines; a title's is a multiple of its size."""

_TALLEST = 400
"""Of a row, in points; spreadsheet programs take 409."""

_CHARACTERS = 1.05
"""Characters of text to a unit of column width, with some left over."""


class Heights:
    """The heights of a sheet's rows, in points.

    Attributes:
        usual: of every row that is not in `others`.
        others: row -> its height.
    """

    def __init__(self, place: SheetPlace, design: Design) -> None:
        factor = design.text_size / _USUAL_SIZE
        self.usual = _ROW * factor
        self.others = {1: design.title_size * _TITLE, 2: _SUBTITLE * factor}
        if place.sheet.back:
            self.others[3] = _BACK * factor
        for table in place.tables.values():
            self.others[table.header_row] = _HEADER * factor
            tall = _tall_rows(table, factor)
            self.others |= {table.rows[row]: height for row, height in tall.items()}

    def of(self, first: int, last: int) -> float:
        """The rows from `first` to `last` (inclusive) together."""
        usual = (last - first + 1) * self.usual
        return usual + sum(h - self.usual for row, h in self.others.items() if first <= row <= last)


def _tall_rows(table: TablePlace, factor: float) -> dict[int, float]:
    """Rows whose text runs over several lines -> their height; not every program finds it by itself."""
    tall: dict[int, float] = {}
    for column in (column for column in table.table.columns if column.wrap):
        longest = int(column.width * _CHARACTERS)
        for row, value in enumerate(column.values):
            lines = sum(len(wrap(line, longest)) or 1 for line in plain_text(value).splitlines())
            if lines > 1:
                tall[row] = max(tall.get(row, 0), min(lines * _LINE * factor, _TALLEST))
    return tall
