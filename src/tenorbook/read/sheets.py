"""Which sheet of a workbook is which, and whether it holds the table it should."""

from collections.abc import Mapping
from difflib import get_close_matches

from tenorbook.basis.problem import BookError, Place, Problem, error, note, warning
from tenorbook.read.columns import LOAN_ID, REQUIRED
from tenorbook.read.files.grid import Sheet, Source
from tenorbook.read.files.refuse import refusal
from tenorbook.read.findings import Findings
from tenorbook.read.headers import LOOKED_AT, Table, find_header_row, known_headers, nearest, read_headers
from tenorbook.read.spellings import is_canonical, lookup, normal, section

LOANS = "Loans"


def find_sheets(source: Source, findings: Findings) -> Mapping[str, str]:
    """Canonical sheet name -> name in the book.

    Raises:
        BookError: no sheet of loans, or two sheets that could both be one.
    """
    found: dict[str, str] = {}
    for name in source.sheet_names:
        kind = lookup(name, "sheets")
        if kind is None:
            findings.add(*_look_alike(name))
        elif kind not in found or is_canonical(name, kind):
            _displace(found, kind, name, findings)
        elif is_canonical(found[kind], kind):
            findings.add(_left_out(name, kind))
        else:
            raise _two_sheets(source, kind, found[kind], name)
    if LOANS not in found:
        found[LOANS] = _only_sheet(source, findings)
    findings.add(
        *(
            _synonym(kind, name)
            for kind, name in found.items()
            if lookup(name, "sheets") == kind and not is_canonical(name, kind)
        )
    )
    return found


def _displace(found: dict[str, str], kind: str, name: str, findings: Findings) -> None:
    """The sheet with the canonical name counts; one with another spelling of it is left out, and said."""
    if kind in found:
        findings.add(_left_out(found[kind], kind))
    found[kind] = name


def _left_out(name: str, kind: str) -> Problem:
    text = f"this sheet is not read, because the book has a sheet {kind}"
    return warning("", Place(name), text, f"move what belongs there to {kind}")


def _look_alike(name: str) -> list[Problem]:
    kinds = {normal(kind): kind for kind in section("sheets")}
    close = get_close_matches(normal(name), kinds, 1, 0.8)
    if not close:
        return []
    return [warning("", Place(name), "this sheet is not read", f"if it means {kinds[close[0]]}, name it so")]


def _synonym(kind: str, name: str) -> Problem:
    return note("", Place(name), f"this sheet is read as {kind}")


def _two_sheets(source: Source, kind: str, first: str, second: str) -> BookError:
    return refusal(
        source.name,
        f"has two sheets that could be {kind}: {first} and {second}",
        f"name the right one {kind}",
    )


def _only_sheet(source: Source, findings: Findings) -> str:
    """The one sheet of a book, when it holds a table of loans under another name."""
    names = source.sheet_names
    if len(names) == 1:
        row = find_header_row(source.sheet(names[0]), LOANS)
        if row is not None and known_headers([cell.text for cell in row.cells.values()]) > 2:
            findings.add(
                note("", Place(names[0]), "this sheet is read as Loans, since the book has no other")
            )
            return names[0]
    listed = ", ".join(names[:10]) + (", ..." if len(names) > 10 else "")
    raise refusal(
        source.name,
        f"has no sheet Loans; its {'sheet is' if len(names) == 1 else 'sheets are'} {listed}",
        "name the sheet with the table of loans Loans",
    )


def find_table(source: Source, kind: str, name: str, findings: Findings) -> Table | None:
    """The table of one sheet; `None` for a sheet without anything on it, other than `Loans`.

    Raises:
        BookError: no header row, two headers for one column, or a column that must be there is not.
    """
    sheet = source.sheet(name)
    row = find_header_row(sheet, kind)
    if row is None:
        if not sheet.rows and kind != LOANS:
            return None
        raise _no_headers(source, kind, sheet)
    table, problems = read_headers(sheet, kind, row)
    if any(problem.severity == "error" for problem in problems):
        raise BookError([problem for problem in problems if problem.severity == "error"])
    _require(source, table)
    findings.add(*problems)
    return table


def _require(source: Source, table: Table) -> None:
    """All missing columns in one line."""
    missing = [
        " or ".join(names)
        for names in REQUIRED[table.kind]
        if not any(name in table.columns for name in names)
    ]
    if missing:
        raise BookError(
            error(
                "",
                Place(value=source.name),
                f"{source.name} has no column {', '.join(missing)} on the sheet {table.sheet.name}; "
                f"its headers are read from row {table.header_row}",
                "add the column, or give it this name",
            )
        )


def _no_headers(source: Source, kind: str, sheet: Sheet) -> BookError:
    wanted = ", ".join(" or ".join(names) for names in REQUIRED[kind])
    like = [f"{cell.shown} in {cell.address} ({name})" for cell, name in nearest(sheet, kind)]
    found = f"; nearest found: {', '.join(like[:5])}" if like else "; nothing like them was found"
    return refusal(
        source.name,
        f"has no header row in the first {LOOKED_AT} rows of the sheet {sheet.name}; "
        f"looked for {wanted}{found}",
        f"put the headers of the sheet {kind} into one row above its entries",
    )


def is_used(table: Table) -> bool:
    """Whether anything stands under the headers."""
    column = table.columns[LOAN_ID].number
    return any(n > table.header_row and column in row.cells for n, row in table.sheet.rows.items())
