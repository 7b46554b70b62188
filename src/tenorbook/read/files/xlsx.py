"""`.xlsx` and `.xlsm` to plain cells, straight from the sheet's XML.

The common reader does not tell hidden rows or a formula without a value, refuses whole books over a
bad decoration, and needs a quarter of a minute for a million formatted empty rows. Nothing in the file
is believed about its own extent; formulas, links and macros are never run or followed.
"""

import re
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from functools import partial
from typing import TYPE_CHECKING

from tenorbook.read.files import limits
from tenorbook.read.files.blanks import without_blanks
from tenorbook.read.files.grid import (
    Cell,
    Kind,
    Row,
    Sheet,
    Source,
    Span,
    clip,
    index,
    number_cell,
    text_cell,
)
from tenorbook.read.files.package import Package
from tenorbook.read.files.refuse import damaged, too_large
from tenorbook.read.files.serials import serial_date, text_day
from tenorbook.read.files.styles import Formats, read_formats

if TYPE_CHECKING:
    from lxml.etree import _Element

_ADDRESS = re.compile(r"\$?([A-Z]{1,3})\$?([0-9]{1,7})$")


@dataclass(frozen=True, slots=True)
class _Context:
    """What the cells of every sheet of a workbook need."""

    package: Package
    texts: tuple[str, ...]
    formats: Formats
    from_1904: bool


def open_xlsx(package: Package) -> Source:
    """The worksheets of a workbook, each read when asked for.

    Raises:
        BookError: the container holds no usable workbook.
    """
    main = _main_part(package)
    book = package.tree(main)
    targets = _related(package, main, "worksheet")
    sheets = {}
    for sheet in book.iterfind("{*}sheets/{*}sheet"):
        target = targets.get(_relation(sheet))
        if target is not None:
            sheets[str(sheet.get("name", ""))] = target
    if not sheets:
        raise damaged(package.name)
    properties = book.find("{*}workbookPr")
    flag = "" if properties is None else properties.get("date1904", "")
    texts = _shared_texts(package, _only(package, main, "sharedStrings"))
    formats = read_formats(package, _only(package, main, "styles"))
    context = _Context(package, texts, formats, flag in ("1", "true"))
    return Source(package.name, tuple(sheets), partial(_load, context, sheets))


def _main_part(package: Package) -> str:
    """The part that lists the sheets; some exporters do not call it `xl/workbook.xml`."""
    if "_rels/.rels" in package:
        for relation in package.tree("_rels/.rels"):
            if str(relation.get("Type", "")).endswith("/officeDocument"):
                return str(relation.get("Target", ""))
    return "xl/workbook.xml"


def _related(package: Package, main: str, kind: str) -> Mapping[str, str]:
    """Relation id -> part, for the parts of one kind; nothing outside the file is ever followed."""
    folder, _, file = main.rpartition("/")
    return {
        str(relation.get("Id", "")): _beside(main, str(relation.get("Target", "")))
        for relation in package.tree(f"{folder}/_rels/{file}.rels")
        if str(relation.get("Type", "")).endswith(f"/{kind}") and relation.get("TargetMode") != "External"
    }


def _only(package: Package, main: str, kind: str) -> str:
    """The one part of a kind that a workbook may have; an empty name if it has none."""
    return next(iter(_related(package, main, kind).values()), "")


def _beside(main: str, target: str) -> str:
    """A target named from the main part; one that begins with a slash is named from the root."""
    return target if target.startswith("/") else f"{main.rpartition('/')[0]}/{target}"


def _relation(sheet: "_Element") -> str:
    return next((str(value) for key, value in sheet.items() if str(key).endswith("}id")), "")


def _shared_texts(package: Package, part: str) -> tuple[str, ...]:
    """The workbook's table of texts; pronunciation marks are no part of a text."""
    if part not in package:
        return ()
    texts: list[str] = []
    for item in package.stream(part, "si"):
        texts.append(_item_text(item))
        if len(texts) > limits.MAX_STRINGS:
            raise too_large(package.name, "holds millions of texts")
    return tuple(texts)


def _item_text(item: "_Element") -> str:
    runs = [node.text or "" for node in item.iterfind("{*}t")]
    runs += [node.text or "" for node in item.iterfind("{*}r/{*}t")]
    return "".join(runs)[: limits.MAX_TEXT]


def _load(context: _Context, sheets: Mapping[str, str], name: str) -> Sheet:
    rows: dict[int, Row] = {}
    merged: list[Span] = []
    count = last = 0
    for element in context.package.stream(sheets[name], "row", "mergeCell", sieve=without_blanks):
        if not str(element.tag).endswith("row"):
            merged += _span(str(element.get("ref", "")))
            continue
        row = _row(context, element, last)
        last = row.number
        count += len(row.cells)
        if count > limits.MAX_CELLS:
            raise too_large(context.package.name, f"has more than {limits.MAX_CELLS:,} cells on a sheet")
        if row.cells:
            rows[row.number] = row
    return Sheet(name, rows, tuple(merged))


def _row(context: _Context, element: "_Element", last: int) -> Row:
    number = index(str(element.get("r", ""))) or last + 1
    hidden = element.get("hidden") in ("1", "true")
    cells: dict[int, Cell] = {}
    column = 0
    if number <= limits.MAX_ROWS:
        for node in element.iterfind("{*}c"):
            column = _column(str(node.get("r", ""))) or column + 1
            cell = _cell(context, node, number, column)
            if cell is not None and column <= limits.MAX_COLUMNS:
                cells[column] = cell
    return Row(number, cells, hidden)


def _column(address: str) -> int:
    """The column number of an address; 0 if it says none."""
    number = 0
    for letter in address[:9]:
        if not "A" <= letter <= "Z":
            break
        number = number * 26 + ord(letter) - ord("A") + 1
    return number


def _span(reference: str) -> Iterator[Span]:
    first, _, last = reference.partition(":")
    start, end = _ADDRESS.match(first), _ADDRESS.match(last)
    if start and end:
        yield Span(int(start[2]), _column(start[1]), int(end[2]), _column(end[1]))


def _cell(context: _Context, node: "_Element", row: int, column: int) -> Cell | None:
    """One cell, `None` for a blank one."""
    kind = node.get("t", "n")
    if kind == "inlineStr":
        inline = node.find("{*}is")
        return text_cell(row, column, "" if inline is None else _item_text(inline))
    stored = node.findtext("{*}v") or ""
    formula = _formula(node)
    if kind == "str":
        return text_cell(row, column, stored[: limits.MAX_TEXT], formula)
    if not stored:
        return Cell(row, column, Kind.NO_VALUE, None, clip(formula), "", formula) if formula else None
    return _typed(context, node, str(kind), stored, formula, row, column)


def _formula(node: "_Element") -> str:
    """The formula with its equals sign; only that where the file keeps its text in another cell."""
    found = node.find("{*}f")
    return "" if found is None else f"={(found.text or '')[: limits.MAX_TEXT]}"


def _typed(
    context: _Context, node: "_Element", kind: str, stored: str, formula: str, row: int, column: int
) -> Cell | None:
    """A cell that stores something, by the type it declares."""
    match kind:
        case "s":
            return text_cell(row, column, _shared(context, stored), formula)
        case "b":
            truth = stored == "1"
            return Cell(row, column, Kind.BOOL, truth, str(truth).upper(), "", formula)
        case "e":
            return Cell(row, column, Kind.ERROR, clip(stored), clip(stored), "", formula)
        case "d":
            day = text_day(stored)
            if day is not None:
                return Cell(row, column, Kind.DATE, day, day.isoformat(), "", formula)
            return text_cell(row, column, stored, formula)
        case _:
            return _number(context, node, stored, formula, row, column)


def _shared(context: _Context, stored: str) -> str:
    number = index(stored)
    if number is None or number >= len(context.texts):
        raise damaged(context.package.name)
    return context.texts[number]


def _number(context: _Context, node: "_Element", stored: str, formula: str, row: int, column: int) -> Cell:
    style = context.formats.of(str(node.get("s", "0")))
    if style.is_date:
        day = serial_date(stored, from_1904=context.from_1904)
        if day is not None:
            return Cell(row, column, Kind.DATE, day, day.isoformat(), style.code, formula)
    return number_cell(row, column, stored, style.code, formula, style.is_percent)
