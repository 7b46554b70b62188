"""The spelling table `spellings.toml`, indexed. Code elsewhere knows canonical names only."""

import re
import tomllib
import unicodedata
from collections.abc import Mapping, Sequence
from functools import cache, lru_cache
from importlib.resources import files
from typing import TypeAlias, cast

Section: TypeAlias = Mapping[str, Sequence[str]]

_SHORT = 100


def normal(text: str) -> str:
    """A name without case, spaces, punctuation and accents of form: `Loan no.` is `loanno`.

    The same few words come thousands of times in a book; long texts are not worth keeping.
    """
    return _normal(text) if len(text) < _SHORT else _normal.__wrapped__(text)


@lru_cache(maxsize=50_000)
def _normal(text: str) -> str:
    return "".join(c for c in unicodedata.normalize("NFKC", text).casefold() if c.isalnum())


def tidy(text: str) -> str:
    """A text with every kind of white space made one plain space, and none at the ends."""
    return " ".join(re.sub("[\u200b\ufeff]", "", text).split())


@cache
def _table() -> Mapping[str, object]:
    return tomllib.loads(files("tenorbook.read").joinpath("spellings.toml").read_text("utf-8"))


def section(*path: str) -> Section:
    """One section of the table: canonical name -> other spellings."""
    found: object = _table()
    for name in path:
        found = cast("Mapping[str, object]", found)[name]
    return cast("Section", found)


@cache
def index(*path: str) -> Mapping[str, str]:
    """One section as normalized spelling -> canonical name.

    A spelling that is all punctuation (the decimal mark `,`) stands for itself.
    """
    return {
        normal(spelling) or spelling: canonical
        for canonical, others in section(*path).items()
        for spelling in (canonical, *others)
    }


def lookup(text: str, *path: str) -> str | None:
    """The canonical name of a spelling; `None` if the section does not know it."""
    cleaned = tidy(text)
    return index(*path).get(normal(cleaned) or cleaned)


def is_canonical(text: str, canonical: str) -> bool:
    """Whether a text is the canonical name itself, but for case, spaces and punctuation."""
    return normal(text) == normal(canonical)


@cache
def total_words() -> frozenset[str]:
    """First texts of rows that add up other rows, normalized."""
    return frozenset(normal(word) for word in section("totals")["words"])


@cache
def month_number(word: str) -> int | None:
    """1 to 12 for an English month name or its usual short form; `None` if it is none.

    Only the vocabulary is dateutil's: its parser would fill what a text leaves out from the clock.
    """
    from dateutil.parser import parserinfo

    return parserinfo().month(word.rstrip("."))
