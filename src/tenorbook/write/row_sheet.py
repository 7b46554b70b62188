"""A worksheet that takes finished rows, beside all that XlsxWriter does.

XlsxWriter turns cells into XML one call a cell, 20 to 27 thousand formulas a second. Here rows arrive
as XML, ten and more times as fast. Formats, charts, links, names, print set-up and packaging stay with it.
"""

from collections.abc import Iterable

from xlsxwriter.worksheet import Worksheet

from tenorbook.write.package import ROWS_HERE, PackedRows


class RowSheet(Worksheet):  # type: ignore[misc]  # the library is not typed
    """A worksheet filled with `put_rows` only.

    Attributes:
        rows: that were put.
    """

    rows = PackedRows(())

    def put_rows(self, rows: Iterable[str], height: int, width: int) -> None:
        """Writes the rows of the sheet, all of them, once.

        Args:
            rows: `<row>` elements with ascending numbers.
            height: number of the last row, counted from 1.
            width: number of columns.
        """
        self._check_dimensions(0, 0)
        self._check_dimensions(height - 1, width - 1)
        self.rows = PackedRows(rows)

    def _write_sheet_data(self) -> None:
        self._xml_start_tag("sheetData")
        self.fh.write(ROWS_HERE)
        self._xml_end_tag("sheetData")

    def put_link(self, row: int, column: int, target: str) -> None:
        """Makes a cell that is written otherwise a link; row and column counted from 0.

        Args:
            row: of the cell.
            column: of the cell.
            target: as XlsxWriter spells it: `internal:'Sheet'!A1`.
        """
        self.ignore_write_string = True
        self.write_url(row, column, target)
        self.ignore_write_string = False
