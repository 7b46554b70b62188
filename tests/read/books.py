"""Small real files for tests of the reader."""

import io
import re
import zipfile
from collections.abc import Callable, Sequence
from datetime import date
from pathlib import Path

from openpyxl import Workbook

from tenorbook.basis.problem import BookError
from tenorbook.read import read_book
from tenorbook.terms.book import Book
from tenorbook.terms.loan import Loan

HEADERS = ("Loan ID", "Principal", "Annual rate", "Funding date", "Term")
START = date(2026, 1, 15)
A_1 = ("A-1", 250000, "6.25%", START, 360)

Row = Sequence[object]


def workbook(path: Path, **sheets: Sequence[Row]) -> Path:
    """An `.xlsx` of the sheets given (underscores become spaces), rows from row 1."""
    made = Workbook()
    made.remove(made.worksheets[0])
    for title, rows in sheets.items():
        sheet = made.create_sheet(title.replace("_", " "))
        for row in rows:
            sheet.append(list(row))
    made.save(path)
    return path


def read(path: Path, **sheets: Sequence[Row]) -> Book:
    """The book of the sheets given."""
    return read_book(workbook(path / "book.xlsx", **sheets))


def loan(path: Path, **cells: object) -> Loan:
    """The one loan of a book, from A-1's terms and the columns given (underscores become spaces)."""
    headers = (*HEADERS, *(name.replace("_", " ") for name in cells))
    book = read(path, Loans=(headers, (*A_1, *cells.values())))
    (found,) = (*book.loans, *book.set_aside)
    return found


def messages(book: Book) -> list[str]:
    """The problems as lines."""
    return [str(problem) for problem in book.problems]


def refusal(path: Path) -> str:
    """The one line with which a file is refused."""
    try:
        read_book(path)
    except BookError as refused:
        return str(refused)
    raise AssertionError(f"{path.name} was read")


def changed(path: Path, change: Callable[[str, bytes], bytes]) -> Path:
    """The same package with each part passed through `change`."""
    buffer = io.BytesIO()
    with zipfile.ZipFile(path) as before, zipfile.ZipFile(buffer, "w", zipfile.ZIP_DEFLATED) as after:
        for info in before.infolist():
            after.writestr(info.filename, change(info.filename, before.read(info)))
    path.write_bytes(buffer.getvalue())
    return path


def in_sheet(pattern: bytes, replacement: bytes) -> Callable[[str, bytes], bytes]:
    """A change of the first sheet's XML, once, which must find its pattern."""

    def change(name: str, data: bytes) -> bytes:
        if not name.endswith("sheet1.xml"):
            return data
        result, count = re.subn(pattern, replacement, data, count=1)
        assert count == 1
        return result

    return change
