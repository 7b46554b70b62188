"""Makes the broken books of this folder: `python tests/broken/make.py`.

Each book has one fault (or one family of them) and a text file beside it with the exact messages. The
messages are written by hand, never by this script; the same bytes come out every time.
"""

import io
import re
import zipfile
from collections.abc import Callable, Sequence
from datetime import date
from pathlib import Path

from openpyxl import Workbook
from openpyxl.utils.datetime import CALENDAR_MAC_1904
from openpyxl.worksheet.worksheet import Worksheet

HERE = Path(__file__).parent
HEADERS = ("Loan ID", "Principal", "Annual rate", "Funding date", "Term")
START = date(2026, 1, 15)
GOOD = ("GOOD-1", 250000, 0.0625, START, 360)

Row = Sequence[object]


def book(rows: Sequence[Row], headers: Row = HEADERS, title: str = "Loans") -> Workbook:
    """A workbook with one table; numbers under 1 in the third column are formatted as percent."""
    workbook = Workbook()
    sheet = workbook.worksheets[0]
    sheet.title = title
    fill(sheet, (headers, *rows))
    return workbook


def fill(sheet: Worksheet, rows: Sequence[Row]) -> None:
    for row in rows:
        sheet.append(list(row))
        rate = sheet.cell(sheet.max_row, 3)
        if isinstance(rate.value, float):
            rate.number_format = "0.00%"


def packed(workbook: Workbook, change: Callable[[str, bytes], bytes] = lambda _, data: data) -> bytes:
    """A workbook's bytes with fixed times, each part passed through `change`."""
    buffer, settled = io.BytesIO(), io.BytesIO()
    workbook.save(buffer)
    with zipfile.ZipFile(buffer) as before, zipfile.ZipFile(settled, "w", zipfile.ZIP_DEFLATED) as after:
        for info in before.infolist():
            data = before.read(info)
            if info.filename == "docProps/core.xml":
                data = re.sub(rb">\d{4}-\d\d-\d\dT[^<]*<", b">2026-01-01T00:00:00Z<", data)
            after.writestr(
                zipfile.ZipInfo(info.filename, (1980, 1, 1, 0, 0, 0)),
                change(info.filename, data),
                zipfile.ZIP_DEFLATED,
            )
    return settled.getvalue()


def loans(*rows: Row) -> bytes:
    """A book of one good loan and the rows given."""
    return packed(book((GOOD, *rows)))


def with_sheet(
    title: str, rows: Sequence[Row], loan_rows: Sequence[Row] = (GOOD,), headers: Row = HEADERS
) -> bytes:
    workbook = book(loan_rows, headers)
    fill(workbook.create_sheet(title), rows)
    return packed(workbook)


def two_other_sheets() -> bytes:
    workbook = book((("Ada", 1),), ("Name", "Phone"), "Contacts")
    workbook.create_sheet("Rents")
    return packed(workbook)


def with_error_cells() -> bytes:
    workbook = book((GOOD, ("E-1", 1, 0.05, START, 12), ("E-2", 1000, 0.05, START, 12)))
    sheet = workbook.worksheets[0]
    for address, value in (("B3", "#REF!"), ("C4", "#N/A"), ("E4", "#DIV/0!")):
        sheet[address].value = value
        sheet[address].data_type = "e"
    return packed(workbook)


def from_1904() -> bytes:
    workbook = book((GOOD,))
    workbook.epoch = CALENDAR_MAC_1904
    return packed(workbook)


def false_dimension(name: str, data: bytes) -> bytes:
    return re.sub(rb'<dimension ref="[^"]*"', b'<dimension ref="A1"', data) if "sheet1" in name else data


def document_type(name: str, data: bytes) -> bytes:
    entities = b'<!DOCTYPE x [<!ENTITY a "ha"><!ENTITY b "&a;&a;&a;&a;">]>'
    return re.sub(rb"(<\?xml[^>]*\?>)?", rb"\1" + entities, data, count=1) if "sheet1" in name else data


def merged_column() -> bytes:
    workbook = book((GOOD, ("M-1", 1000, 0.05, START, 12), ("M-2", 2000, None, START, 12)))
    workbook.worksheets[0].merge_cells("C3:C4")
    return packed(workbook)


def many_words() -> bytes:
    headers = (
        *HEADERS,
        "Frequency",
        "Day count",
        "Repayment",
        "Side",
        "Currency",
        "Month-end",
        "Payment rounding",
    )
    rows = (
        ("W-1", 1000, 0.05, START, 12, "bimonthly", "Act/Act", "ballon", "owed?", "US", "maybe", "up zero"),
        (
            "W-2",
            1000,
            0.05,
            START,
            12,
            "Monthly",
            "act/360",
            "Level Payment",
            "PAYABLE",
            "usd",
            "AUTO",
            "up 1.00",
        ),
    )
    return packed(book(rows, headers))


def opendocument(cells: str) -> bytes:
    """A minimal `.ods` with a sheet of loans; `cells` are its table rows."""
    names = "".join(
        f'xmlns:{prefix}="urn:oasis:names:tc:opendocument:xmlns:{prefix}:1.0" '
        for prefix in ("office", "table", "text")
    )
    content = (
        f'<office:document-content {names}xmlns:calcext="urn:org:documentfoundation:names:experimental:calc:'
        f'xmlns:calcext:1.0"><office:body><office:spreadsheet><table:table table:name="Loans">{cells}'
        "</table:table></office:spreadsheet></office:body></office:document-content>"
    )
    buffer = io.BytesIO()
    with zipfile.ZipFile(buffer, "w", zipfile.ZIP_DEFLATED) as package:
        for name, text in (
            ("mimetype", "application/vnd.oasis.opendocument.spreadsheet"),
            ("content.xml", content),
        ):
            package.writestr(zipfile.ZipInfo(name, (1980, 1, 1, 0, 0, 0)), text, zipfile.ZIP_DEFLATED)
    return buffer.getvalue()


def text_cells(*texts: str) -> str:
    cells = (
        f'<table:table-cell office:value-type="string"><text:p>{text}</text:p></table:table-cell>'
        for text in texts
    )
    return f"<table:table-row>{''.join(cells)}</table:table-row>"


def broken_opendocument() -> bytes:
    error = (
        '<table:table-cell table:formula="of:=1/0" office:value-type="string" office:string-value="" '
        'calcext:value-type="error"><text:p>#DIV/0!</text:p></table:table-cell>'
    )
    percent, day = 'office:value-type="percentage" office:value="0.0625"', 'office:value-type="date"'
    rest = (
        f"<table:table-cell {percent}><text:p>6.25%</text:p></table:table-cell>"
        f'<table:table-cell {day} office:date-value="2026-01-15"><text:p>x</text:p></table:table-cell>'
        '<table:table-cell table:formula="of:=6+6"/>'
    )
    first = '<table:table-cell office:value-type="string"><text:p>O-1</text:p></table:table-cell>'
    return opendocument(text_cells(*HEADERS) + f"<table:table-row>{first}{error}{rest}</table:table-row>")


def unused_terms() -> bytes:
    headers = (
        *HEADERS,
        "Compounding",
        "Business days",
        "Index",
        "Interest method",
        "Rate rounding",
        "Classification",
    )
    return packed(
        book(
            (
                (*GOOD, "per payment", "none", None, "simple", "none", "on demand"),
                ("N-1", 1000, 0.05, START, 12, "daily", "following", None, None, None, None),
                ("N-2", 1000, 0.05, START, 12, None, None, "SOFR", "add-on", "1/8", None),
            ),
            headers,
        )
    )


BOOKS: dict[str, Callable[[], bytes]] = {
    # The file as a whole.
    "not-a-workbook.xlsx": lambda: b"\x00\x01\x02 not a workbook\x00",
    "plain-text.xlsx": lambda: b"Loan ID,Principal\nA,1\n",
    "web-page.xlsx": lambda: b"<html><body><table></table></body></html>",
    "encrypted.xlsx": lambda: bytes.fromhex("d0cf11e0a1b11ae1") + bytes(504),
    "empty.xlsx": lambda: b"",
    "truncated.xlsx": lambda: loans()[:3000],
    "document-type.xlsx": lambda: packed(book((GOOD,)), document_type),
    "no-loans-sheet.xlsx": two_other_sheets,
    "no-header-row.xlsx": lambda: packed(book((("A-1", 1000),), ("Ln. ID", "Principle", "Rat", "When"))),
    "missing-columns.xlsx": lambda: packed(book((("A-1", 12),), ("Loan ID", "Term"))),
    "two-headers-one-column.xlsx": lambda: packed(book(((*GOOD, 5),), (*HEADERS, "Amount"))),
    "no-loans.xlsx": lambda: packed(book(())),
    "settings.xlsx": lambda: with_sheet(
        "Settings",
        (
            ("Name", "Value"),
            ("Currency", "Dollars"),
            ("Day order", "sideways"),
            ("As-of date", "03/04/2026"),
            ("Colour", "blue"),
        ),
    ),
    # Cells.
    "unknown-words.xlsx": many_words,
    "impossible-dates.xlsx": lambda: loans(
        ("D-1", 1000, 0.05, "30 Feb 2026", 12),
        ("D-2", 1000, 0.05, "2026-02-30", 12),
        ("D-3", 1000, 0.05, "soon", 12),
        ("D-4", 1000, 0.05, "1/15/26", 12),
        ("D-5", 1000, 0.05, 6.25, 12),
    ),
    "ambiguous-dates.xlsx": lambda: loans(
        ("D-1", 1000, 0.05, "03/04/2026", 12), ("D-2", 1000, 0.05, "31/01/2026", 12)
    ),
    "dates-against-the-day-order.xlsx": lambda: with_sheet(
        "Settings",
        (("Name", "Value"), ("Day order", "month first")),
        (("D-1", 1000, 0.05, "03/04/2026", 12), ("D-2", 1000, 0.05, "31/01/2026", 12)),
    ),
    "principal.xlsx": lambda: loans(
        ("P-1", -1000, 0.05, START, 12), ("P-2", 0, 0.05, START, 12), ("P-3", "(1,000.00)", 0.05, START, 12)
    ),
    "rates.xlsx": lambda: loans(
        ("R-1", 1000, -1.0, START, 12),
        ("R-2", 1000, 4.0, START, 12),
        ("R-3", 1000, 20.0, START, 12),
        ("R-4", 1000, -0.005, START, 12),
        ("R-5", 1000, "6 1/3 %", START, 12),
        ("R-6", 1000, "Prime + 2", START, 12),
        ("R-7", 1000, "1% per month", START, 12),
    ),
    "mixed-rates.xlsx": lambda: packed(
        book(
            (
                ("R-1", 1000, 6, START, 12, None),
                ("R-2", 1000, "0.0625", START, 12, None),
                ("R-3", 1000, "0.5", START, 12, None),
                ("R-4", 100000, 6, START, 360, 599.55),
                ("R-5", 100000, "0.5", START, 360, 299.19),
                ("R-6", 100000, "0.25", START, 360, 288.35),
            ),
            (*HEADERS, "Payment"),
        )
    ),
    "terms.xlsx": lambda: loans(
        ("T-1", 1000, 0.05, START, 0),
        ("T-2", 1000, 0.05, START, 10000),
        ("T-3", 1000, 0.05, START, "101 years"),
        ("T-4", 1000, 0.05, START, "61 years"),
        ("T-5", 1000, 0.05, START, 12.5),
        ("T-6", 1000, 0.05, START, "a while"),
        ("T-7", 1000, 0.05, START, -12),
    ),
    "duplicate-ids.xlsx": lambda: loans(
        ("GOOD-1", 1000, 0.05, START, 12), (1001, 1000, 0.05, START, 12), ("1001", 5, 0.05, START, 12)
    ),
    "no-loan-id.xlsx": lambda: loans(
        (None, 1000, 0.05, START, 12), ("Total", 251000, None, None, None), ("A note",)
    ),
    "text-for-numbers.xlsx": lambda: loans(
        ("X-1", "a lot", 0.05, START, 12),
        ("X-2", "1234,50", 0.05, START, 12),
        ("X-3", "1,23", 0.05, START, 12),
        ("X-4", "12 apples", 0.05, START, 12),
        ("X-5", True, 0.05, START, 12),
        ("X-6", "EUR 1,000", 0.05, START, 12),
    ),
    "error-cells.xlsx": with_error_cells,
    "formulas-without-values.xlsx": lambda: loans(("F-1", "=500*2", 0.05, START, "=6+6")),
    "merged-cells.xlsx": merged_column,
    "terms-not-computed.xlsx": unused_terms,
    "opendocument.ods": broken_opendocument,
    "decimal-comma.csv": lambda: (
        b"Loan ID;Principal;Annual rate;Funding date\nC-1;1.234,50;6,25 %;2026-01-15\n"
    ),
    "old-encoding.csv": lambda: (
        "Loan ID,Lender,Principal,Annual rate,Funding date\nC-1,Caf\xe9,1000,6%,2026-01-15\n".encode("cp1252")
    ),
    # The other sheets.
    "extra-payments.xlsx": lambda: with_sheet(
        "Extra payments",
        (
            ("Loan ID", "Date", "Amount", "Every", "Until"),
            ("GOOD-1", START, 100, None, None),
            ("GOOD-1", START, 100, None, None),
            ("GOOD-2", START, 100, None, None),
            (None, START, 100, None, None),
            ("L-1", None, -5, "monthly", "3/4/2027"),
        ),
        (GOOD, ("L-1", 1000, 0.05, START, 12)),
    ),
    "rate-changes.xlsx": lambda: with_sheet(
        "Rate changes",
        (
            ("Loan ID", "From", "Annual rate", "Payment"),
            ("GOOD-1", START, None, "guess"),
            ("L-1", START, 0.07, "recast"),
        ),
        (GOOD, ("L-1", 1000, 0.05, START, 12)),
    ),
    "draws.xlsx": lambda: with_sheet(
        "Draws", (("Loan ID", "Date", "Amount"), ("L-1", START, 100)), (GOOD, ("L-1", 1000, 0.05, START, 12))
    ),
    # Sound, whatever they look like.
    "counted-from-1904.xlsx": from_1904,
    "false-dimension.xlsx": lambda: packed(book((GOOD,)), false_dimension),
}


def main(folder: Path = HERE) -> None:
    """Write every book of the table."""
    for name, make in BOOKS.items():
        (folder / name).write_bytes(make())


if __name__ == "__main__":
    main()
