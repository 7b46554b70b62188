"""What the number formats of an `.xlsx` workbook say: percent, date, or neither."""

import re
from dataclasses import dataclass

from tenorbook.read.files.grid import index
from tenorbook.read.files.package import Package

_LITERALS = re.compile(r'"[^"]*"|\\.|_.|\[[^\]]*\]')
_LOCAL_DATES = frozenset((*range(27, 37), *range(50, 59)))
"""Built-in formats that are dates in East Asian versions and are not listed in the file."""


@dataclass(frozen=True, slots=True)
class Format:
    """One number format: its code, and what it makes of a number."""

    code: str
    is_percent: bool
    is_date: bool


GENERAL = Format("General", is_percent=False, is_date=False)


@dataclass(frozen=True, slots=True)
class Formats:
    """The number formats of a workbook's cell styles, by style number."""

    by_style: tuple[Format, ...]

    def of(self, style: str) -> Format:
        """The format of a cell's style number; the general one if the number leads nowhere."""
        number = index(style) or 0
        return self.by_style[number] if number < len(self.by_style) else GENERAL


def read_formats(package: Package, part: str) -> Formats:
    """The formats of a workbook; decoration in the same part, sound or not, is never looked at."""
    if part not in package:
        return Formats(())
    root = package.tree(part)
    codes = {
        str(node.get("numFmtId", "")): str(node.get("formatCode", ""))
        for node in root.iterfind("{*}numFmts/{*}numFmt")
    }
    return Formats(
        tuple(_format(str(node.get("numFmtId", "0")), codes) for node in root.iterfind("{*}cellXfs/{*}xf"))
    )


def _format(identity: str, codes: dict[str, str]) -> Format:
    if identity in codes:
        return classify(codes[identity])
    number = index(identity) or 0
    if number in _LOCAL_DATES:
        return Format("yyyy/m/d", is_percent=False, is_date=True)
    from openpyxl.styles.numbers import BUILTIN_FORMATS

    return classify(BUILTIN_FORMATS.get(number, "General"))


def classify(code: str) -> Format:
    """What a format code makes of a positive number; quoted text, colours and escapes do not count."""
    from openpyxl.styles.numbers import is_date_format

    bare = _LITERALS.sub("", code.split(";")[0])
    return Format(code, is_percent="%" in bare, is_date="%" not in bare and bool(is_date_format(code)))
