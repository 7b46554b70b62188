"""What kind of file this is, by its content and not by its name; and its plain cells."""

from pathlib import Path

from tenorbook.read.files import limits
from tenorbook.read.files.delimited import open_csv
from tenorbook.read.files.grid import Source
from tenorbook.read.files.package import Package
from tenorbook.read.files.refuse import damaged, refusal, too_large

_OLE = bytes.fromhex("d0cf11e0a1b11ae1")
_ZIP = b"PK"
_TEXT_SUFFIXES = (".csv", ".txt", ".tsv")
_SUFFIXES = (".xlsx", ".xlsm", ".ods", *_TEXT_SUFFIXES)


def open_source(path: Path) -> Source:
    """A file's sheets as plain cells.

    Raises:
        BookError: there is no such file, or it is not a sound workbook or CSV.
    """
    data = _bytes(path)
    name = path.name
    suffix = path.suffix.lower()
    if data.startswith(_OLE):
        raise refusal(name, "is encrypted or an old .xls workbook", "save it as .xlsx without a password")
    if suffix not in _SUFFIXES:
        raise refusal(name, "is not an .xlsx, .xlsm, .ods or .csv file", "save the book as .xlsx")
    if data.startswith(_ZIP):
        return _open_zip(Package(name, data))
    if suffix in _TEXT_SUFFIXES:
        return _open_text(name, data)
    raise _not_a_workbook(name, data)


def _bytes(path: Path) -> bytes:
    name = path.name
    if path.is_dir():
        raise refusal(name, "is a folder", "name the workbook itself")
    try:
        if path.stat().st_size > limits.MAX_FILE_BYTES:
            raise too_large(name, "is larger than any book of loans")
        data = path.read_bytes()
    except FileNotFoundError as fault:
        raise refusal(name, "was not found", "look at the name and the folder") from fault
    except OSError as fault:
        remedy = "close it in other programs and see that you may read it"
        raise refusal(name, "cannot be opened", remedy) from fault
    if not data.strip():
        raise refusal(name, "is empty", "save the book again, or pick the right file")
    return data


def _open_zip(package: Package) -> Source:
    from tenorbook.read.files.ods import open_ods
    from tenorbook.read.files.xlsx import open_xlsx

    if "content.xml" in package and "mimetype" in package:
        if b"opendocument.spreadsheet" in package.read("mimetype"):
            return open_ods(package)
        raise refusal(package.name, "is a document, not a workbook", "save the book as .xlsx")
    if "xl/workbook.bin" in package:
        raise refusal(package.name, "is a binary workbook (.xlsb)", "save it as .xlsx")
    if "[Content_Types].xml" not in package:
        raise refusal(package.name, "is a zip archive, not a workbook", "save the book as .xlsx")
    if "word/document.xml" in package or "ppt/presentation.xml" in package:
        raise refusal(package.name, "is a document, not a workbook", "save the book as .xlsx")
    return open_xlsx(package)


def _open_text(name: str, data: bytes) -> Source:
    from tenorbook.read.headers import known_headers

    if b"\0" in data and not data.startswith((b"\xff\xfe", b"\xfe\xff")):
        raise damaged(name)
    return open_csv(name, data, known_headers)


def _not_a_workbook(name: str, data: bytes) -> Exception:
    """Text or a web page under a workbook's name is what many web exports are."""
    start = data[:512].lstrip(b"\xef\xbb\xbf \t\r\n").lower()
    if start.startswith((b"<", b"<!doctype", b"<?xml")):
        return refusal(
            name,
            "is a web page or XML, not a workbook",
            "open it in a spreadsheet program and save it as .xlsx",
        )
    if b"\0" not in data[:512]:
        return refusal(
            name,
            "is plain text, not a workbook",
            "name it .csv, or save it as .xlsx from a spreadsheet program",
        )
    return refusal(name, "is not a workbook", "save the book as .xlsx from a spreadsheet program")
