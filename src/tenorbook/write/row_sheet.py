"""A worksheet that takes finished rows, beside all that XlsxWriter does.

XlsxWriter turns cells into XML one call a cell, 20 to 27 thousand formulas a second. Here rows arrive
as XML, ten and more times as fast, through the temporary file that XlsxWriter itself uses for rows in
its constant-memory mode. Formats, charts, links, names, print set-up and packaging stay with it.
"""

from collections.abc import Iterable

from xlsxwriter.worksheet import Worksheet


class RowSheet(Worksheet):  # type: ignore[misc]
    """A worksheet of a workbook in constant-memory mode, filled with `put_rows` only."""

    def pause(self) -> None:
        """Closes the sheet's temporary file until it is needed again; hundreds of sheets wait at once."""
        self._opt_close()

    def put_rows(self, rows: Iterable[str], height: int, width: int) -> None:
        """Writes the rows of the sheet, all of them, once.

        Args:
            rows: `<row>` elements with ascending numbers.
            height: number of the last row, counted from 1.
            width: number of columns.
        """
        self._check_dimensions(0, 0)
        self._check_dimensions(height - 1, width - 1)
        self._opt_reopen()
        self.row_data_fh.writelines(rows)
        self._opt_close()

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
