"""`.ods` to plain cells, from its `content.xml`.

The common readers lose the percent type and blank out error values; the file itself has both.
Repeated rows and cells are written out only as far as they hold something, within limits.
"""

import re
from collections.abc import Iterator, Mapping
from dataclasses import replace
from typing import TYPE_CHECKING

from tenorbook.read.files import limits
from tenorbook.read.files.grid import Cell, Kind, Row, Sheet, Source, clip, index, number_cell, text_cell
from tenorbook.read.files.package import Package
from tenorbook.read.files.refuse import damaged, refusal, too_large
from tenorbook.read.files.serials import text_day

if TYPE_CHECKING:
    from lxml.etree import _Element

_OFFICE = "{urn:oasis:names:tc:opendocument:xmlns:office:1.0}"
_TABLE = "{urn:oasis:names:tc:opendocument:xmlns:table:1.0}"
_TEXT = "{urn:oasis:names:tc:opendocument:xmlns:text:1.0}"
_CALCEXT = "{urn:org:documentfoundation:names:experimental:calc:xmlns:calcext:1.0}"
_NAMESPACE = re.compile(r"^[a-z]+:(?==)")
_SKIPPED = frozenset((f"{_OFFICE}annotation", f"{_TEXT}note"))


def open_ods(package: Package) -> Source:
    """The sheets of an OpenDocument spreadsheet.

    Raises:
        BookError: damaged, encrypted, or beyond the limits.
    """
    if "META-INF/manifest.xml" in package and b"encryption-data" in package.read("META-INF/manifest.xml"):
        raise refusal(package.name, "is protected by a password", "save it without a password")
    sheets = _read(package)
    if not sheets:
        raise damaged(package.name)
    return Source(package.name, tuple(sheets), lambda name: Sheet(name, sheets[name]))


def _read(package: Package) -> Mapping[str, dict[int, Row]]:
    """All sheets in one pass: they share one part."""
    sheets: dict[str, dict[int, Row]] = {}
    following: dict[str, int] = {}
    count = 0
    for element in package.stream("content.xml", "table-row"):
        table = next(element.iterancestors(f"{_TABLE}table"), None)
        if table is None:
            continue
        name = str(table.get(f"{_TABLE}name", ""))
        number = following.get(name, 1)
        repeats = _repeats(element, "rows")
        following[name] = number + repeats
        rows = sheets.setdefault(name, {})
        for row in _rows(element, number, repeats):
            rows[row.number] = row
            count += len(row.cells)
            if count > limits.MAX_CELLS:
                raise too_large(package.name, f"has more than {limits.MAX_CELLS:,} cells")
    return sheets


def _repeats(element: "_Element", what: str) -> int:
    return index(str(element.get(f"{_TABLE}number-{what}-repeated", "1"))) or 1


def _rows(element: "_Element", number: int, repeats: int) -> Iterator[Row]:
    """The row as often as it is repeated; nothing at all for blank rows, however many."""
    cells = _cells(element, number)
    hidden = element.get(f"{_TABLE}visibility", "visible") != "visible"
    if not cells:
        return
    for copy in range(number, min(number + repeats, limits.MAX_ROWS + 1)):
        yield Row(copy, {column: replace(cell, row=copy) for column, cell in cells.items()}, hidden)


def _cells(element: "_Element", row: int) -> dict[int, Cell]:
    cells: dict[int, Cell] = {}
    column = 1
    for node in element:
        if node.tag not in (f"{_TABLE}table-cell", f"{_TABLE}covered-table-cell"):
            continue
        repeats = _repeats(node, "columns")
        cell = _cell(node, row, column)
        if cell is not None:
            for copy in range(column, min(column + repeats, limits.MAX_COLUMNS + 1)):
                cells[copy] = replace(cell, column=copy)
        column += repeats
    return cells


def _cell(node: "_Element", row: int, column: int) -> Cell | None:
    """One cell, `None` for a blank one."""
    formula = _NAMESPACE.sub("", str(node.get(f"{_TABLE}formula", "")))
    kind = str(node.get(f"{_OFFICE}value-type", ""))
    shown = _shown(node)
    if node.get(f"{_CALCEXT}value-type") == "error" or (formula and shown.startswith(("#", "Err:"))):
        return Cell(row, column, Kind.ERROR, clip(shown), clip(shown), "", formula)
    if not kind:
        if formula and not shown:
            return Cell(row, column, Kind.NO_VALUE, None, clip(formula), "", formula)
        return text_cell(row, column, shown, formula)
    return _typed(node, kind, shown, formula, row, column)


def _typed(node: "_Element", kind: str, shown: str, formula: str, row: int, column: int) -> Cell | None:
    stored = str(node.get(f"{_OFFICE}value", ""))
    match kind:
        case "percentage":
            return number_cell(row, column, stored, "0.00%", formula, percent=True)
        case "float" | "currency":
            code = str(node.get(f"{_OFFICE}currency", ""))
            number_format = f"[${code}]" if code else ""
            return number_cell(row, column, stored, number_format, formula, percent=False)
        case "boolean":
            truth = node.get(f"{_OFFICE}boolean-value") == "true"
            return Cell(row, column, Kind.BOOL, truth, str(truth).upper(), "", formula)
        case "date":
            day = text_day(str(node.get(f"{_OFFICE}date-value", "")))
            if day is not None:
                return Cell(row, column, Kind.DATE, day, day.isoformat(), "", formula)
    return text_cell(row, column, shown or str(node.get(f"{_OFFICE}string-value", "")), formula)


def _shown(node: "_Element") -> str:
    """The text of a cell's paragraphs, without the comment that may hang on it."""
    paragraphs = [_paragraph(child) for child in node if child.tag == f"{_TEXT}p"]
    return "\n".join(paragraphs)[: limits.MAX_TEXT]


def _paragraph(node: "_Element") -> str:
    """A paragraph's text; runs of spaces are written as elements."""
    parts = [node.text or ""]
    for child in node:
        if child.tag == f"{_TEXT}s":
            parts.append(" " * min(index(str(child.get(f"{_TEXT}c", "1"))) or 1, 1000))
        elif isinstance(child.tag, str) and child.tag not in _SKIPPED:
            parts.append(_paragraph(child))
        parts.append(child.tail or "")
    return "".join(parts)
