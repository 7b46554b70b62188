"""The checked copy: a user's workbook with the faulty cells coloured and commented.

For `.xlsx` and `.xlsm` it is the workbook itself, loaded and saved again without macros and links; for
anything else, and for a workbook too large or too odd to be loaded whole, a new one of the plain cells.
The original is never written to.
"""

import os
import re
import zipfile
from collections import defaultdict
from collections.abc import Iterable, Mapping, Sequence
from datetime import datetime
from io import BytesIO
from pathlib import Path
from typing import TYPE_CHECKING, Protocol

from tenorbook.basis.problem import Place, Problem, Severity

if TYPE_CHECKING:
    from openpyxl import Workbook
    from openpyxl.cell.cell import Cell as OpenpyxlCell
    from openpyxl.worksheet.worksheet import Worksheet

_FILLS = {Severity.ERROR: "FFF4B6B6", Severity.WARNING: "FFFFE3A3", Severity.NOTE: "FFD6E6F5"}
_ORDER = (Severity.ERROR, Severity.WARNING, Severity.NOTE)
_AUTHOR = "tenorbook"
_LOADABLE_BYTES = 30 * 2**20
"""Unpacked size above which a workbook is not loaded whole: formatted blanks cost memory there."""
_MOST_TEXT = 32_767
_LONG_AGO = datetime(2000, 1, 1)
_SAVED_AT = re.compile(rb"(<dcterms:modified[^>]*>)[^<]*")
_FORMULA_MARKS = ("=", "+", "-", "@", "\t", "\r")


class PlainCell(Protocol):
    """One cell that is not blank: row and column from 1, and its value (text, decimal, date, truth)."""

    @property
    def row(self) -> int:
        """Row from 1."""

    @property
    def column(self) -> int:
        """Column from 1."""

    @property
    def value(self) -> object:
        """Text, exact decimal, date or truth value; `None` for a formula without a stored value."""

    @property
    def shown(self) -> str:
        """What stood there, as text."""

    @property
    def number_format(self) -> str:
        """The number format's code, or nothing."""


class PlainRow(Protocol):
    """One row of plain cells."""

    @property
    def cells(self) -> Mapping[int, PlainCell]:
        """Column -> cell."""


class PlainSheet(Protocol):
    """One sheet of plain cells."""

    @property
    def name(self) -> str:
        """Name of the sheet."""

    @property
    def rows(self) -> Mapping[int, PlainRow]:
        """Row number -> row."""


def write_checked(
    source: Path, problems: Iterable[Problem], target: Path, sheets: Sequence[PlainSheet] = ()
) -> None:
    """Write a copy of a workbook with its problems marked where they are.

    Args:
        source: the user's file; only read.
        problems: those with a sheet and a cell are marked, their further cells too.
        target: the copy, an `.xlsx`; written whole or not at all.
        sheets: the plain cells, for sources that cannot be loaded and saved as a workbook.

    Raises:
        OSError: the target cannot be written.
        ValueError: the source needs plain cells and there are none.
    """
    workbook = _loaded(source) or _rebuilt(sheets)
    _mark(workbook, problems)
    _save(workbook, target)


def _loaded(source: Path) -> "Workbook | None":
    """The user's workbook, or `None` where it is none or will not go through loading and saving."""
    from openpyxl import load_workbook

    if source.suffix.lower() not in (".xlsx", ".xlsm"):
        return None
    try:
        with zipfile.ZipFile(source) as package:
            if sum(part.file_size for part in package.infolist()) > _LOADABLE_BYTES:
                return None
        return load_workbook(source, keep_links=False, keep_vba=False, rich_text=True)
    except Exception:
        # Loading fails in many ways over decoration alone; the plain cells are then the copy.
        return None


def _rebuilt(sheets: Sequence[PlainSheet]) -> "Workbook":
    """A new workbook of plain cells; nothing in it is a formula."""
    from openpyxl import Workbook

    if not sheets:
        raise ValueError("a copy of this file needs its plain cells")
    workbook = Workbook()
    workbook.properties.created = _LONG_AGO
    workbook.remove(workbook.worksheets[0])
    for sheet in sheets:
        worksheet = workbook.create_sheet(_sheet_name(sheet.name))
        for row in sheet.rows.values():
            for cell in row.cells.values():
                _write_plain(worksheet, cell)
    return workbook


def _sheet_name(name: str) -> str:
    """A name that the format allows; a `.ods` may have others."""
    return "".join("_" if character in "[]:*?/\\" else character for character in name)[:31] or "Sheet"


def _write_plain(worksheet: "Worksheet", plain: PlainCell) -> None:
    """A value as it is; text always as text, whatever it begins with."""
    from openpyxl.cell.cell import ILLEGAL_CHARACTERS_RE

    cell = worksheet.cell(plain.row, plain.column)
    value = plain.shown if plain.value is None else plain.value
    if not isinstance(value, str):
        cell.value = value  # type: ignore[assignment]  # the stubs know fewer kinds of value than the cell
        if plain.number_format:
            cell.number_format = plain.number_format
        return
    text = ILLEGAL_CHARACTERS_RE.sub("", value)[:_MOST_TEXT]
    cell.value = text
    cell.data_type = "s"
    cell.quotePrefix = text.startswith(_FORMULA_MARKS)


def _mark(workbook: "Workbook", problems: Iterable[Problem]) -> None:
    """Colour and comment every cell that a problem names."""
    names = {_sheet_name(worksheet.title): worksheet for worksheet in workbook.worksheets}
    for (sheet, address), found in _by_cell(problems).items():
        worksheet = names.get(_sheet_name(sheet))
        if worksheet is not None:
            _mark_cell(_anchor(worksheet, address), found)


def _by_cell(problems: Iterable[Problem]) -> dict[tuple[str, str], list[Problem]]:
    cells: dict[tuple[str, str], list[Problem]] = defaultdict(list)
    for problem in problems:
        places: tuple[Place, ...] = (problem.place, *problem.also)
        for place in places:
            if place.sheet and place.cell:
                cells[place.sheet, place.cell].append(problem)
    return cells


def _anchor(worksheet: "Worksheet", address: str) -> "OpenpyxlCell":
    """The cell itself, or the first one of the merged range that it lies in: only that can be marked."""
    for merged in worksheet.merged_cells.ranges:
        if address in merged:
            return worksheet.cell(merged.min_row, merged.min_col)  # type: ignore[return-value]  # the top left of a merge is a cell
    return worksheet[address]  # type: ignore[no-any-return]  # one address gives one cell


def _mark_cell(cell: "OpenpyxlCell", problems: Sequence[Problem]) -> None:
    """The colour of the gravest problem; all texts, after what a comment there already says."""
    from openpyxl.comments import Comment
    from openpyxl.styles import PatternFill

    gravest = min(problems, key=lambda problem: _ORDER.index(problem.severity)).severity
    cell.fill = PatternFill("solid", fgColor=_FILLS[gravest])
    texts = [cell.comment.text] if cell.comment is not None else []
    texts += [_sentence(problem) for problem in problems]
    comment = Comment("\n\n".join(dict.fromkeys(texts)), _AUTHOR)
    comment.width, comment.height = 320, min(60 + 50 * len(texts), 400)
    cell.comment = comment


def _sentence(problem: Problem) -> str:
    remedy = f"; {problem.remedy}" if problem.remedy else ""
    return f"{problem.severity}: {problem.problem}{remedy}"


def _save(workbook: "Workbook", target: Path) -> None:
    """Whole or not at all, and the same bytes for the same book: no time of saving is kept."""
    saved = BytesIO()
    workbook.save(saved)
    temporary = target.with_name(f".{target.name}.{os.getpid()}.part")
    try:
        _write_timeless(saved, temporary)
        os.replace(temporary, target)
    finally:
        temporary.unlink(missing_ok=True)


def _write_timeless(saved: BytesIO, target: Path) -> None:
    """The package again, its parts and properties dated alike in every run."""
    with zipfile.ZipFile(saved) as package, zipfile.ZipFile(target, "w", zipfile.ZIP_DEFLATED) as copy:
        for part in package.infolist():
            content = package.read(part)
            if part.filename == "docProps/core.xml":
                content = _SAVED_AT.sub(rb"\g<1>" + f"{_LONG_AGO:%Y-%m-%dT%H:%M:%SZ}".encode(), content)
            timeless = zipfile.ZipInfo(part.filename)
            timeless.compress_type = zipfile.ZIP_DEFLATED
            copy.writestr(timeless, content)
