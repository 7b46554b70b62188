"""How a formula speaks of cells before anybody knows where they will stand.

A report writes `ROUND([opening]*[rate]*30/360,2)`; the writer, which alone knows rows and columns,
puts the addresses in. A reference is one of

==============  ======================================================
`[key]`         this row's cell in the column `key`
`[key<]`        the cell one row of the table above; subtotals are stepped over
`[key@12]`      the cell in row 12 of the table, counted from 0
`[key:last]`    the last row of the table
`[key:total]`   the table's total
`[key:all]`     the whole column of the table, subtotals included
==============  ======================================================

A key may name another table of the same sheet: `[loans.balance:all]`. Everything outside brackets
stands as it is; defined names are written plainly.
"""

import re
from functools import lru_cache
from typing import NamedTuple

_REFERENCE = re.compile(r"\[(?:(\w+)\.)?(\w+)(<|@\d+|:last|:total|:all)?\]")


class Reference(NamedTuple):
    """One bracket of a formula.

    Attributes:
        table: key of the table; empty for the table the formula stands in.
        column: key of the column.
        where: `""`, `"<"`, `"@"`, `"last"`, `"total"` or `"all"`.
        row: the row for `"@"`, else 0.
    """

    table: str
    column: str
    where: str
    row: int


class Template(NamedTuple):
    """A formula taken apart: `text` has one `%s` for each of `references`."""

    text: str
    references: tuple[Reference, ...]


@lru_cache(maxsize=4096)
def template(formula: str) -> Template:
    """A formula taken apart into its text and its references."""
    references = tuple(_reference(match) for match in _REFERENCE.finditer(formula))
    return Template(_REFERENCE.sub("%s", formula.replace("%", "%%")), references)


def _reference(match: re.Match[str]) -> Reference:
    table, column, where = match.group(1) or "", match.group(2), match.group(3) or ""
    if where.startswith("@"):
        return Reference(table, column, "@", int(where[1:]))
    return Reference(table, column, where.removeprefix(":"), 0)
