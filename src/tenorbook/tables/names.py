"""Sheet names that every spreadsheet program takes: short, plain, unique.

The rules: 1 to 31 UTF-16 units; none of ``/ \\ ? * : [ ]``; no apostrophe at either end; not
`History`; unique ignoring case. Beyond the rules, an exclamation mark becomes a hyphen and a straight
apostrophe a curly one, so that a name in a formula never needs escapes.
"""

import re

LIMIT = 31
"""Longest sheet name, in UTF-16 units (most emoji count two)."""

_FORBIDDEN = re.compile(r"[/\\?*:\[\]!\x00-\x1f\x7f\ud800-\udfff\ufffe\uffff]")


class SheetNames:
    """Hands out sheet names for one workbook, each once."""

    def __init__(self) -> None:
        self._taken = {"history"}

    def take(self, wanted: str) -> str:
        """The nearest permitted name that is still free; `Loan` where nothing of it is permitted."""
        plain = _FORBIDDEN.sub("-", wanted).strip().strip("'").strip().replace("'", "\u2019") or "Loan"
        name, number = _cut(plain, LIMIT), 1
        while _key(name) in self._taken:
            number += 1
            ending = f" ({number})"
            name = _cut(plain, LIMIT - len(ending)) + ending
        self._taken.add(_key(name))
        return name


def _key(name: str) -> str:
    """By what two names are the same; case folding grows some letters, which errs on the safe side."""
    return name.upper().casefold()


def units(text: str) -> int:
    """Length in UTF-16 units."""
    return len(text.encode("utf-16-le")) // 2


def _cut(text: str, limit: int) -> str:
    """The longest start of a text within a limit of UTF-16 units, without blanks at its end."""
    while units(text) > limit:
        text = text[:-1]
    return text.rstrip() or "Loan"
