"""Writes a book as a person would fill it in: the empty one, and the samples, from the same columns.

The bytes depend on the arguments alone.
"""

from collections.abc import Mapping, Sequence
from dataclasses import replace
from datetime import date, datetime
from decimal import Decimal
from pathlib import Path
from typing import Any

from tenorbook.jobs.blank_book.columns import Column, SheetPlan, plans, sample_hint, settings
from tenorbook.write.look import ACCENT, FONT, INK, QUIET, RULE, TINT

Row = Mapping[str, Any]
"""Header -> value, of the cells that are not blank."""

CREATED = datetime(2026, 1, 1)
"""In the document's properties, so that the same book gives the same bytes."""

HEADER_ROW = 3
"""Of every table, counted from 0: title, hint and groups stand above it."""
_LAST_ROW = 2_000
"""Of the cells that drop down, counted from 0."""

_WIDTHS = {"amount": 16, "rate": 12, "date": 14, "length": 13, "whole": 13, "until": 14}
_FORMATS = {
    "text": "@",
    "amount": "#,##0.00#;-#,##0.00#",
    "rate": "0.00####%",
    "date": "dd mmm yyyy",
    "whole": "0",
}
_RIGHT = ("amount", "rate", "whole", "date", "length", "until")


def write_sample_book(path: Path) -> None:
    """Writes the empty book: a sample row on every sheet, and the default of every setting."""
    rows = {plan.name: [_samples(plan.columns)] for plan in plans()}
    write_book(path, rows, sample_settings(), remark=sample_hint())


def sample_settings() -> Row:
    """Setting -> its sample."""
    return _samples(settings())


def _samples(columns: Sequence[Column]) -> Row:
    return {column.header: column.sample for column in columns if column.sample is not None}


def write_book(
    path: Path, rows: Mapping[str, Sequence[Row]], values: Row, title: str = "", remark: str = ""
) -> None:
    """Writes a book.

    Args:
        path: the file; overwritten.
        rows: sheet -> its rows.
        values: setting -> value.
        title: above the table of loans; the plan's own when empty.
        remark: after the hint under that title.
    """
    from xlsxwriter import Workbook

    options = {"strings_to_formulas": False, "strings_to_urls": False, "strings_to_numbers": False}
    with Workbook(str(path), options) as book:
        book.set_properties({"title": title or "Loan book", "author": "tenorbook", "created": CREATED})
        styles = _Styles(book)
        for plan in plans():
            if plan.name == "Loans":
                plan = replace(plan, title=title or plan.title, hint=f"{plan.hint} {remark}".strip())
            _write_sheet(book, styles, plan, rows.get(plan.name, ()))
        _write_settings(book, styles, values)


class _Styles:
    """The formats of one workbook, each made once."""

    def __init__(self, book: Any) -> None:
        self._book = book
        self._made: dict[tuple[tuple[str, Any], ...], Any] = {}

    def get(self, **properties: Any) -> Any:
        """The format with these properties."""
        key = tuple(sorted(properties.items()))
        if key not in self._made:
            base = {"font_name": FONT, "font_size": 10, "font_color": INK, "valign": "vcenter"}
            self._made[key] = self._book.add_format(base | properties)
        return self._made[key]

    def title(self) -> Any:
        """Of the line above everything."""
        return self.get(bold=True, font_size=16, font_color=ACCENT, indent=1)

    def quiet(self) -> Any:
        """Of the line under the title."""
        return self.get(font_color=QUIET, indent=1)

    def group(self) -> Any:
        """Of the headings above columns that belong together."""
        return self.get(bold=True, font_color=ACCENT, bottom=1, bottom_color=RULE, indent=1)

    def header(self, kind: str) -> Any:
        """Of a header; of numbers and dates to the right, over them."""
        colours = {"font_color": "#FFFFFF", "bg_color": ACCENT}
        return self.get(bold=True, text_wrap=True, **colours, **_aligned(kind))

    def entry(self, kind: str) -> Any:
        """Of the cells to fill in."""
        return self.get(num_format=_FORMATS.get(kind, "General"), **_aligned(kind))

    def label(self) -> Any:
        """Of the name of a setting."""
        return self.get(bg_color=TINT, bottom=1, bottom_color=RULE, indent=1)


def _aligned(kind: str) -> dict[str, Any]:
    """Figures to the right, words to the left with a little room before them."""
    return {"align": "right"} if kind in _RIGHT else {"align": "left", "indent": 1}


def _write_sheet(book: Any, styles: _Styles, plan: SheetPlan, rows: Sequence[Row]) -> None:
    """One table: title, hint, groups, headers with their notes, rows."""
    sheet = book.add_worksheet(plan.name)
    sheet.write_string(0, 0, plan.title, styles.title())
    sheet.write_string(1, 0, plan.hint, styles.quiet())
    sheet.set_row(0, 26)
    sheet.set_row(HEADER_ROW, 32)
    _write_groups(sheet, styles, plan.columns)
    for number, column in enumerate(plan.columns):
        _write_column(sheet, styles, number, column)
    for offset, row in enumerate(rows, HEADER_ROW + 1):
        for number, column in enumerate(plan.columns):
            _write_value(sheet, styles, offset, number, column.kind, row.get(column.header))
    sheet.freeze_panes(HEADER_ROW + 1, 1)
    _set_up_page(sheet, plan, len(rows))


def _write_groups(sheet: Any, styles: _Styles, columns: Sequence[Column]) -> None:
    """The heading above each first column of a group, ruled to the last one."""
    grouped = any(column.group for column in columns)
    for number, column in enumerate(columns):
        if column.group:
            sheet.write_string(HEADER_ROW - 1, number, column.group, styles.group())
        elif grouped:
            sheet.write_blank(HEADER_ROW - 1, number, None, styles.group())


def _write_column(sheet: Any, styles: _Styles, number: int, column: Column) -> None:
    """Width and format of a column, its header with a note, and the words that drop down."""
    width = column.width or _WIDTHS.get(column.kind) or _widest(column)
    sheet.set_column(number, number, width, styles.entry(column.kind))
    sheet.write_string(HEADER_ROW, number, column.header, styles.header(column.kind))
    _write_note(sheet, HEADER_ROW, number, column)
    sheet.data_validation(HEADER_ROW + 1, number, _LAST_ROW, number, _validation(column))


def _widest(column: Column) -> int:
    """Wide enough for the longest word, and for the arrow beside it."""
    return max(14, *(len(word) + 4 for word in (column.header, *column.words)))


def _write_note(sheet: Any, row: int, number: int, column: Column) -> None:
    """What the column takes and what a blank means, shown when someone points at the header."""
    text = f"{column.takes}\nBlank: {column.blank}."
    if column.words:
        text += "\nOne of: " + ", ".join(column.words) + "."
    lines = sum(1 + len(line) // 42 for line in text.split("\n"))
    options = {"author": "tenorbook", "x_scale": 2.2, "y_scale": max(0.7, 0.24 * lines), "font_size": 9}
    sheet.write_comment(row, number, text, options)


def _validation(column: Column) -> dict[str, Any]:
    """The list that drops down; elsewhere only what the cell takes, shown when it is selected."""
    shown = {
        "input_title": column.header[:32],
        "input_message": f"{column.takes} Blank: {column.blank}."[:255],
    }
    if not column.words:
        return {"validate": "any", **shown}
    return {
        "validate": "list",
        "source": list(column.words),
        "show_error": column.kind == "choice",
        "error_type": "warning",
        "error_title": column.header[:32],
        "error_message": f"The list has the words that {column.header} takes.",
        **shown,
    }


def _write_value(sheet: Any, styles: _Styles, row: int, number: int, kind: str, value: Any) -> None:
    """One cell as a person would enter it."""
    style = styles.entry(kind)
    match value:
        case None:
            return
        case date():
            sheet.write_datetime(row, number, value, styles.entry("date"))
        case int() | float() | Decimal():
            if kind == "suggestion":
                style = styles.entry("amount")
            sheet.write_number(row, number, value, style)
        case _:
            sheet.write_string(row, number, str(value), style)


def _set_up_page(sheet: Any, plan: SheetPlan, count: int) -> None:
    """Landscape; a wide table goes on beside itself, with its header and Loan IDs on every page."""
    sheet.set_landscape()
    sheet.set_paper(0)
    sheet.set_margins(left=0.5, right=0.5, top=0.6, bottom=0.6)
    sheet.repeat_rows(HEADER_ROW - 1, HEADER_ROW)
    sheet.set_footer("&L&8&A&R&8Page &P of &N")
    sheet.print_across()
    last = HEADER_ROW + max(count, 1)
    sheet.print_area(0, 0, last, len(plan.columns) - 1)
    if len(plan.columns) > 10:
        sheet.repeat_columns(0, 0)
        sheet.set_print_scale(70)
    else:
        sheet.fit_to_pages(1, 0)


def _write_settings(book: Any, styles: _Styles, values: Row) -> None:
    """Names beside their values; what is blank has its default."""
    sheet = book.add_worksheet("Settings")
    sheet.write_string(0, 0, "Settings", styles.title())
    sheet.write_string(
        1, 0, "What holds for the whole book. Point at a name to see what it takes.", styles.quiet()
    )
    sheet.set_row(0, 26)
    sheet.set_column(0, 0, 24, styles.get())
    sheet.set_column(1, 1, 22, styles.get(align="left"))
    for number, header in enumerate(("Name", "Value")):
        sheet.write_string(HEADER_ROW, number, header, styles.header("text"))
    for row, column in enumerate(settings(), HEADER_ROW + 1):
        sheet.write_string(row, 0, column.header, styles.label())
        _write_note(sheet, row, 0, column)
        sheet.data_validation(row, 1, row, 1, _validation(column))
        _write_setting(sheet, styles, row, column, values.get(column.header))
    sheet.freeze_panes(HEADER_ROW + 1, 0)
    sheet.set_footer("&L&8&A&R&8Page &P of &N")


def _write_setting(sheet: Any, styles: _Styles, row: int, column: Column, value: Any) -> None:
    style = {"align": "left", "indent": 1, "bottom": 1, "bottom_color": RULE}
    if value is None:
        sheet.write_blank(row, 1, None, styles.get(num_format=_FORMATS.get(column.kind, "General"), **style))
    elif isinstance(value, date):
        sheet.write_datetime(row, 1, value, styles.get(num_format=_FORMATS["date"], **style))
    else:
        sheet.write_string(row, 1, str(value), styles.get(num_format="@", **style))
