"""From a workbook (or a CSV) of loans to a `Book`: cells, headers, values, loans, problems.

Importing the package costs nothing: what reads files is imported when a file is read.
"""

from collections.abc import Sequence
from pathlib import Path
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from tenorbook.read.files.grid import Sheet
    from tenorbook.terms.book import Book, Settings

__all__ = ["read_book", "read_cells"]


def read_book(path: Path, settings: "Settings | None" = None) -> "Book":
    """The loans of a workbook, with every problem found in one pass.

    Args:
        path: an .xlsx, .xlsm or .ods workbook, or a .csv with a single table of loans.
        settings: what holds for a book without a sheet `Settings`, which a .csv never has; one
            with the sheet is read by the sheet alone.

    Raises:
        BookError: the file as a whole is unusable; each problem has the file's name as its place's
            value, or the cell that makes the whole file unusable.
    """
    from tenorbook.read.book import read_book as read

    return read(path, settings)


def read_cells(path: Path) -> "Sequence[Sheet]":
    """Every sheet of a workbook (or the one table of a CSV) as plain cells, in order.

    Raises:
        BookError: the file is unusable, or too large to be held as cells.
    """
    from tenorbook.read.files.source import open_source

    source = open_source(path)
    return tuple(source.sheet(name) for name in source.sheet_names)
