"""Real files: workbooks made by other means, hostile ones, `.ods` and `.csv`."""

import subprocess
import tracemalloc
import zipfile
from collections.abc import Iterator
from datetime import date
from decimal import Decimal
from pathlib import Path

import pytest
from openpyxl import load_workbook

from broken.make import opendocument, text_cells
from read.books import A_1, HEADERS, START, changed, in_sheet, messages, read, refusal, workbook
from tenorbook.read import read_book, read_cells
from tenorbook.read.files import limits
from tenorbook.read.files.blanks import without_blanks
from tenorbook.read.files.grid import Kind, column_letters
from tenorbook.read.files.styles import classify
from tenorbook.terms.loan import Length

D = Decimal
BROKEN = Path(__file__).parent.parent / "broken"


@pytest.fixture
def book(tmp_path: Path) -> Path:
    return workbook(tmp_path / "book.xlsx", Loans=(HEADERS, A_1))


@pytest.fixture
def shared(tmp_path: Path) -> Path:
    """A book by another writer: its texts stand in a table of their own."""
    from xlsxwriter import Workbook

    with Workbook(tmp_path / "shared.xlsx") as made:
        sheet = made.add_worksheet("Loans")
        sheet.write_row(0, 0, HEADERS)
        sheet.write_row(1, 0, ("A-1", 250000, 0.0625))
        sheet.write_datetime(1, 3, START, made.add_format({"num_format": "d mmm yyyy"}))
        sheet.write_formula(1, 4, "=300+60", None, 360)
        bold = made.add_format({"bold": True})
        sheet.write_rich_string(2, 0, "A-", bold, "2")
        sheet.write_row(2, 1, (1, 0.05, "2026-01-15", 12))
    return tmp_path / "shared.xlsx"


def test_a_book_by_another_writer(shared: Path) -> None:
    first, second = read_book(shared).loans
    assert (first.loan_id, second.loan_id) == ("A-1", "A-2")
    assert (first.funding_date, first.term) == (START, Length(360))


def test_dates_counted_from_1904_are_the_same_dates() -> None:
    (loan,) = read_book(BROKEN / "counted-from-1904.xlsx").loans
    assert loan.funding_date == date(2026, 1, 15)


def test_a_false_dimension_hides_nothing() -> None:
    (loan,) = read_book(BROKEN / "false-dimension.xlsx").loans
    assert loan.principal == 250000


def rows_of_blanks(first: int, last: int) -> Iterator[bytes]:
    for number in range(first, last + 1):
        yield f'<row r="{number}" ht="15"><c r="A{number}" s="1"/><c r="B{number}" s="1" /></row>'.encode()


def test_a_million_formatted_empty_rows_take_no_room(book: Path) -> None:
    """A painted sheet: the rows are dropped before they are parsed, and what follows them is read."""
    last = limits.MAX_ROWS
    blanks = b"".join(rows_of_blanks(3, last - 1))
    loan = f'<row r="{last}"><c r="A{last}" t="inlineStr"><is><t>LAST</t></is></c></row>'.encode()
    changed(book, in_sheet(b"</sheetData>", blanks + loan + b"</sheetData>"))
    tracemalloc.start()
    found = read_book(book)
    _, peak = tracemalloc.get_traced_memory()
    tracemalloc.stop()
    assert [loan.loan_id for loan in found.loans] == ["A-1"]
    assert [problem.cell for problem in found.problems] == [f"A{last}"]
    assert peak < 64 * 2**20


@pytest.mark.parametrize(
    ("xml", "kept"),
    [
        (
            b'<sheetData><row r="1"><c r="A1" s="1"/></row><row r="2"><c r="A2"/></row></sheetData>',
            b"<sheetData></sheetData>",
        ),
        (
            b'<row r="1"><c r="A1" s="1"/><c r="B1"><v>5</v></c></row>',
            b'<row r="1"><c r="B1"><v>5</v></c></row>',
        ),
        (b'<row r="1"/><row r="2"><c r="A2"><v>1</v></c></row>', b'<row r="2"><c r="A2"><v>1</v></c></row>'),
        (b'<x:row r="1"><x:c r="A1"/></x:row>', b""),
        (b'<row r="1"/><row r="2"/>', b""),
        (b'<row><c s="1"/></row>', b'<row><c s="1"/></row>'),  # counted by position: must stay
        (
            b'<row r="1"><c s="1"/><c r="B1" t="n"><f>A1</f></c></row>',
            b'<row r="1"><c s="1"/><c r="B1" t="n"><f>A1</f></c></row>',
        ),
    ],
)
def test_blanks_taken_out_of_the_xml(xml: bytes, kept: bytes) -> None:
    assert without_blanks(xml) == kept


def test_cells_without_positions_are_counted(book: Path) -> None:
    def strip(name: str, data: bytes) -> bytes:
        import re

        return re.sub(rb' r="[A-Z]*\d+"', b"", data) if name.endswith("sheet1.xml") else data

    (loan,) = read_book(changed(book, strip)).loans
    assert (loan.principal, loan.term) == (D(250000), Length(360))


def test_every_kind_of_cell(book: Path) -> None:
    cells = (
        b'<row r="9" hidden="1"><c r="A9" t="b"><v>1</v></c><c r="B9" t="e"><v>#REF!</v></c>'
        b'<c r="C9"><f>1+1</f></c><c r="D9"><f>1+1</f><v>2</v></c><c r="E9" t="str"><f>A1</f><v>x</v></c>'
        b'<c r="F9" t="str"><f>A1</f><v></v></c><c r="G9" t="d"><v>2026-01-31</v></c>'
        b'<c r="H9" t="inlineStr"><is><r><t>a</t></r><r><t>b</t></r></is></c><c r="I9"><v>1e999</v></c>'
        b'<c r="J9" t="inlineStr"><is><t>\xc2\xa0 </t></is></c>'
        b'<c r="K9"><f t="shared" si="0"/><v>3</v></c></row></sheetData>'
    )
    (sheet,) = read_cells(changed(book, in_sheet(b"</sheetData>", cells)))
    row = sheet.rows[9]
    assert row.hidden
    assert [(cell.address, cell.kind, cell.value) for cell in row.cells.values()] == [
        ("A9", Kind.BOOL, True),
        ("B9", Kind.ERROR, "#REF!"),
        ("C9", Kind.NO_VALUE, None),
        ("D9", Kind.NUMBER, D(2)),
        ("E9", Kind.TEXT, "x"),
        ("G9", Kind.DATE, date(2026, 1, 31)),
        ("H9", Kind.TEXT, "ab"),
        ("I9", Kind.ERROR, "1e999"),
        ("K9", Kind.NUMBER, D(3)),
    ]
    assert [row.cells[column].formula for column in (3, 4, 11)] == ["=1+1", "=1+1", "="]


@pytest.mark.parametrize(
    ("code", "percent", "is_date"),
    [
        ("General", False, False),
        ("0.00%", True, False),
        ("0.000 %", True, False),
        ('0.00"%"', False, False),
        ("0.00\\%", False, False),
        ("#,##0.00;[Red]-#,##0.00", False, False),
        ("[Red]0.00", False, False),
        ("yyyy-mm-dd", False, True),
        ("[$-409]d\\-mmm\\-yy;@", False, True),
        ('#,##0 "days"', False, False),
        ("_($* #,##0.00_)", False, False),
        ("@", False, False),
    ],
)
def test_number_formats(code: str, percent: bool, is_date: bool) -> None:
    found = classify(code)
    assert (found.is_percent, found.is_date) == (percent, is_date)


@pytest.mark.parametrize(("number", "letters"), [(1, "A"), (26, "Z"), (27, "AA"), (16384, "XFD")])
def test_column_letters(number: int, letters: str) -> None:
    assert column_letters(number) == letters


def test_a_workbook_whose_decoration_is_broken_is_read(book: Path) -> None:
    def spoil(name: str, data: bytes) -> bytes:
        return (
            data.replace(b"<fills", b"<fills><fill><nonsense/></fill></fills><fills")
            if "styles" in name
            else data
        )

    assert len(read_book(changed(book, spoil)).loans) == 1


def test_odd_part_names_are_followed(book: Path, tmp_path: Path) -> None:
    def rename(data: bytes) -> bytes:
        return data.replace(b"xl/workbook.xml", b"xl/Book1.xml")

    other = tmp_path / "other.xlsx"
    with zipfile.ZipFile(book) as before, zipfile.ZipFile(other, "w") as after:
        for info in before.infolist():
            name = info.filename.replace("xl/workbook.xml", "XL/Book1.xml")
            after.writestr(name.replace("/workbook.xml.rels", "/Book1.xml.rels"), rename(before.read(info)))
    assert len(read_book(other).loans) == 1


# Hostile files: one clear line each.


def test_a_missing_file(tmp_path: Path) -> None:
    assert (
        refusal(tmp_path / "gone.xlsx") == "error: gone.xlsx was not found; look at the name and the folder"
    )


def test_a_folder(tmp_path: Path) -> None:
    (tmp_path / "x.xlsx").mkdir()
    assert refusal(tmp_path / "x.xlsx") == "error: x.xlsx is a folder; name the workbook itself"


def test_another_kind_of_file(tmp_path: Path) -> None:
    path = tmp_path / "x.pdf"
    path.write_bytes(b"%PDF-1.7")
    assert refusal(path) == "error: x.pdf is not an .xlsx, .xlsm, .ods or .csv file; save the book as .xlsx"


def zipped(path: Path, **parts: bytes) -> Path:
    with zipfile.ZipFile(path, "w", zipfile.ZIP_DEFLATED) as package:
        for name, data in parts.items():
            package.writestr(name.replace("__", "/").replace("_", "."), data)
    return path


def test_a_zip_that_is_no_workbook(tmp_path: Path) -> None:
    path = zipped(tmp_path / "x.xlsx", a_txt=b"hello")
    assert refusal(path) == "error: x.xlsx is a zip archive, not a workbook; save the book as .xlsx"


def test_a_zip_that_unpacks_to_gigabytes(book: Path) -> None:
    with zipfile.ZipFile(book, "a", zipfile.ZIP_DEFLATED) as package:
        package.writestr("xl/media/x.bin", bytes(64 * 2**20))
    assert book.stat().st_size < 2**20
    assert refusal(book) == (
        "error: book.xlsx unpacks to far more than a book of loans; "
        "remove what does not belong to the loans, and save it again"
    )


def test_a_sheet_of_something_else_than_rows_is_given_up(book: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(limits, "MAX_STALL_BYTES", 2**20)
    changed(book, in_sheet(b"<sheetData>", b"<x/>" * 600_000 + b"<sheetData>"))
    assert "has a part with far more in it than cells" in refusal(book)


def test_too_many_cells_are_given_up(book: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(limits, "MAX_CELLS", 9)
    assert "has more than 9 cells on a sheet" in refusal(book)


@pytest.mark.parametrize("part", ["sheet1.xml", "workbook.xml", "styles.xml", "sharedStrings.xml"])
@pytest.mark.parametrize("encoding", ["utf-8", "utf-16"])
def test_a_document_type_in_any_part_is_refused(shared: Path, part: str, encoding: str) -> None:
    def add(name: str, data: bytes) -> bytes:
        if not name.endswith(part):
            return data
        body = data.decode().partition("?>")[2] if data.startswith(b"<?xml") else data.decode()
        return f'<!DOCTYPE x [<!ENTITY a SYSTEM "file:///etc/hostname">]>{body}'.encode(encoding)

    assert "contains an XML document type" in refusal(changed(shared, add))


def test_a_document_type_behind_a_long_comment_is_refused(book: Path) -> None:
    start = b"<!--" + b"x" * 100_000 + b"--><!DOCTYPE x [<!ENTITY a 'b'>]>"
    changed(book, in_sheet(rb"^", start))
    assert "contains an XML document type" in refusal(book)


def test_a_locked_package(tmp_path: Path, book: Path) -> None:
    data = bytearray(book.read_bytes())
    at = data.rindex(b"PK\x01\x02")
    data[at + 8] |= 1
    book.write_bytes(bytes(data))
    assert refusal(book) == "error: book.xlsx is protected by a password; save it without a password"


def test_a_workbook_with_a_hole_in_its_data(book: Path) -> None:
    data = bytearray(book.read_bytes())
    with zipfile.ZipFile(book) as package:
        at = package.getinfo("xl/worksheets/sheet1.xml").header_offset
    data[at + 60 : at + 90] = bytes(30)
    book.write_bytes(bytes(data))
    assert "book.xlsx is damaged or incomplete" in refusal(book)


@pytest.mark.parametrize("length", [4, 100, 1000, 4000])
def test_truncated_files(book: Path, length: int) -> None:
    book.write_bytes(book.read_bytes()[:length])
    assert "book.xlsx is damaged or incomplete" in refusal(book)


def test_a_text_that_is_not_in_the_table_is_damage(shared: Path) -> None:
    changed(shared, in_sheet(rb'<c r="A1" t="s"><v>\d+</v>', b'<c r="A1" t="s"><v>999</v>'))
    assert "shared.xlsx is damaged or incomplete" in refusal(shared)


# OpenDocument.


def ods(path: Path, cells: str) -> Path:
    path.write_bytes(opendocument(text_cells(*HEADERS) + cells))
    return path


def typed(kind: str, attributes: str, content: str = "") -> str:
    return f'<table:table-cell office:value-type="{kind}" {attributes}>{content}</table:table-cell>'


def row(*cells: str, attributes: str = "") -> str:
    return f"<table:table-row {attributes}>{''.join(cells)}</table:table-row>"


PERCENT = typed("percentage", 'office:value="0.0625"', "<text:p>6.25%</text:p>")
AMOUNT = typed("float", 'office:value="1000"', "<text:p>1,000</text:p>")
EUROS = typed("currency", 'office:currency="EUR" office:value="1000"')
DAY = typed("date", 'office:date-value="2026-01-15"')
REMARK = "<office:annotation><text:p>remark</text:p></office:annotation>"
NAME = typed("string", "", f'{REMARK}<text:p>O<text:s text:c="2"/><text:span>1</text:span></text:p>')
BLANK = "<table:table-cell/>"


def repeated(times: int, what: str = "rows") -> str:
    return f'table:number-{what}-repeated="{times}"'


def test_an_opendocument_book(tmp_path: Path) -> None:
    blanks = row('<table:table-cell table:number-columns-repeated="9"/>', attributes=repeated(1000))
    hidden = row(NAME, AMOUNT, PERCENT, DAY, attributes='table:visibility="filter"')
    endless = row(BLANK, attributes=repeated(9_999_999))
    book = read_book(ods(tmp_path / "book.ods", blanks + hidden + endless))
    (loan,) = book.loans
    assert (loan.loan_id, loan.principal, loan.annual_rate) == ("O 1", D(1000), D("0.0625"))
    assert loan.where["Principal"].cell == "B1002"
    assert messages(book) == ["note: Loans: 1 hidden or filtered row is read like any other: row 1002"]


def test_an_opendocument_currency_must_be_the_loans(tmp_path: Path) -> None:
    book = read_book(ods(tmp_path / "book.ods", row(NAME, EUROS, PERCENT, DAY)))
    assert [str(problem.severity) for problem in book.problems] == ["warning"]


def test_repeated_rows_are_written_out(tmp_path: Path) -> None:
    book = read_book(ods(tmp_path / "book.ods", row(NAME, AMOUNT, PERCENT, DAY, attributes=repeated(2))))
    assert [problem.cell for problem in book.problems] == ["A3"]


def test_repetition_is_no_way_to_fill_memory(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(limits, "MAX_CELLS", 10_000)
    wide = typed("float", f'office:value="1" {repeated(9_999_999, "columns")}')
    path = ods(tmp_path / "book.ods", row(wide, attributes=repeated(9_999_999)))
    assert "has more than 10,000 cells" in refusal(path)


def test_a_locked_opendocument_book(tmp_path: Path) -> None:
    path = tmp_path / "book.ods"
    with zipfile.ZipFile(path, "w") as package:
        package.writestr("mimetype", "application/vnd.oasis.opendocument.spreadsheet")
        package.writestr("META-INF/manifest.xml", "<m:encryption-data/>")
        package.writestr("content.xml", b"\x00\x01")
    assert refusal(path) == "error: book.ods is protected by a password; save it without a password"


@pytest.mark.spreadsheet
def test_a_book_saved_by_a_real_spreadsheet_program(tmp_path: Path) -> None:
    path = workbook(
        tmp_path / "book.xlsx",
        Loans=(
            HEADERS,
            ("A-1", 250000, 0.0625, START, "=300+60"),
            ("A-2", "=1/0", 0.0615, START, 12),
            ("A-3", 1, 0.05, START, 1),
        ),
    )
    made = load_workbook(path)
    for row in (2, 3, 4):
        made["Loans"].cell(row, 3).number_format = "0.00%"
    made["Loans"].row_dimensions[4].hidden = True
    made.save(path)
    for kind in ("ods", "xlsx"):
        out = tmp_path / kind
        profile = f"-env:UserInstallation=file://{tmp_path}/profile"
        subprocess.run(
            ["soffice", profile, "--headless", "--convert-to", kind, "--outdir", str(out), str(path)],
            check=True,
            capture_output=True,
            timeout=180,
        )
        book = read_book(out / f"book.{kind}")
        assert [(loan.loan_id, loan.annual_rate) for loan in book.loans] == [
            ("A-1", D("0.0625")),
            ("A-3", D("0.05")),
        ]
        assert book.loans[0].term is not None
        assert book.loans[0].term.count == 360
        assert [(loan.loan_id, loan.annual_rate) for loan in book.set_aside] == [("A-2", D("0.0615"))]
        assert messages(book) == [
            "note: Loans: 1 hidden or filtered row is read like any other: row 4",
            "error: Loans!B3 [#DIV/0!]: loan A-2: principal is an error value; "
            "repair the formula, or type the value itself",
        ]


# CSV.


@pytest.mark.parametrize("delimiter", [",", ";", "\t"])
@pytest.mark.parametrize("encoding", ["utf-8", "utf-8-sig", "utf-16"])
def test_a_csv(tmp_path: Path, delimiter: str, encoding: str) -> None:
    lines = (
        ("A title, with a comma; and more",),
        (),
        ("Loan ID", "Counterparty", "Principal", "Annual rate", "Funding date"),
        ("A-1", "Café Süd", '"$1,234.50"', "6.25%", "2026-01-15"),
    )
    path = tmp_path / "book.csv"
    path.write_text("\r\n".join(delimiter.join(line) for line in lines), encoding)
    book = read_book(path)
    (loan,) = book.loans
    assert (loan.counterparty, loan.principal, loan.annual_rate) == ("Café Süd", D("1234.50"), D("0.0625"))
    assert loan.where["Loan ID"].cell == "A4"
    assert book.problems == ()


def test_a_csv_with_nul_bytes_is_damaged(tmp_path: Path) -> None:
    path = tmp_path / "book.csv"
    path.write_bytes(b"Loan ID,Principal\n\0\0")
    assert "book.csv is damaged or incomplete" in refusal(path)


def test_a_csv_field_without_end_is_damaged(tmp_path: Path) -> None:
    path = tmp_path / "book.csv"
    path.write_text('Loan ID,Principal,Annual rate,Funding date\nA,"' + "x" * 200_000)
    assert "book.csv is damaged or incomplete" in refusal(path)


def test_what_a_package_costs_to_import() -> None:
    """Importing the reader brings in nothing that reads files."""
    import sys

    code = (
        "import sys, tenorbook.read; print([m for m in ('openpyxl', 'lxml', 'pandas') if m in sys.modules])"
    )
    done = subprocess.run([sys.executable, "-c", code], check=True, capture_output=True, text=True)
    assert done.stdout.strip() == "[]"


def test_the_same_book_reads_the_same_twice(tmp_path: Path) -> None:
    first = read(tmp_path, Loans=(HEADERS, A_1, ("B", "x", "y", "z")))
    assert first == read_book(tmp_path / "book.xlsx")
