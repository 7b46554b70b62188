"""The look that a user may choose: paper, words, typeface, colours, formats; read from a small TOML file.

The file's keys and what each takes are in `KEYS`; `templates/look.toml` holds them all with the values
used when nothing is chosen.
"""

import re
import tomllib
from collections.abc import Callable, Iterator
from dataclasses import dataclass, replace
from pathlib import Path
from typing import Any, NamedTuple

from tenorbook.basis.problem import BookError, Place, Problem, error


@dataclass(frozen=True, slots=True, kw_only=True)
class Design:
    """The chosen look of the workbooks.

    Attributes:
        paper: `A4` or `Letter`.
        title: of the summary; `{book}` stands for the book's name.
        logo: a picture at the top right of the summary; `None`: none.
        footer: at the bottom left of every printed page; empty: the caution.
        font: the typeface.
        text_size: of figures and words, in points.
        title_size: of a sheet's title, in points.
        widen: what all columns are multiplied by, for a broad typeface.
        accent: colour of titles, headers and charts.
        second: colour beside the accent in charts.
        ink: colour of figures and words.
        quiet: colour of labels and small print.
        tint: ground of headers and of rows of another kind.
        date: number format of dates.
        negative: `minus` or `brackets`.
        nothing: what a flow of nothing is shown as.
    """

    paper: str = "A4"
    title: str = "Loan book {book}"
    logo: Path | None = None
    footer: str = ""
    font: str = "Calibri"
    text_size: float = 10
    title_size: float = 16
    widen: float = 1
    accent: str = "#1D5C63"
    second: str = "#C58B3B"
    ink: str = "#1F2A30"
    quiet: str = "#66747B"
    tint: str = "#F1F5F4"
    date: str = "dd mmm yyyy"
    negative: str = "minus"
    nothing: str = "\u2013"


class _Key(NamedTuple):
    """What a key of the file sets, what it takes in words, and how a value is told to be one."""

    attribute: str
    takes: str
    right: Callable[[Any], bool]


def _text(longest: int, pattern: str = "") -> Callable[[Any], bool]:
    form = re.compile(pattern or ".*", re.DOTALL)
    return lambda value: isinstance(value, str) and len(value) <= longest and bool(form.fullmatch(value))


def _number(least: float, most: float) -> Callable[[Any], bool]:
    return lambda value: type(value) in (int, float) and least <= value <= most


def _one_of(*choices: str) -> Callable[[Any], bool]:
    return lambda value: value in choices


_COLOUR = ("a colour such as #1D5C63", _text(7, r"#[0-9A-Fa-f]{6}"))
_LONGEST_DATE = 30

KEYS = {
    "page.paper": _Key("paper", "A4 or Letter", _one_of("A4", "Letter")),
    "page.footer": _Key("footer", "a text of at most 180 characters", _text(180)),
    "page.logo": _Key("logo", "the name of a PNG or JPEG file", _text(500)),
    "title.text": _Key("title", "a text of at most 120 characters", _text(120, r".*\S.*")),
    "font.name": _Key("font", "the name of a typeface", _text(31, r"[^\x00-\x1f\"&<>]+")),
    "font.size": _Key("text_size", "points from 7 to 14", _number(7, 14)),
    "font.title_size": _Key("title_size", "points from 10 to 28", _number(10, 28)),
    "font.widen": _Key("widen", "a factor from 0.8 to 2", _number(0.8, 2)),
    "colour.accent": _Key("accent", *_COLOUR),
    "colour.second": _Key("second", *_COLOUR),
    "colour.ink": _Key("ink", *_COLOUR),
    "colour.quiet": _Key("quiet", *_COLOUR),
    "colour.tint": _Key("tint", *_COLOUR),
    "format.date": _Key(
        "date",
        "days, months and years such as dd mmm yyyy, yyyy-mm-dd or m/d/yyyy",
        _text(_LONGEST_DATE, r"(?=.*d)(?=.*m)(?=.*yy)[dmy .,/\-]+"),
    ),
    "format.negative": _Key("negative", "minus or brackets", _one_of("minus", "brackets")),
    "format.nothing": _Key("nothing", "at most 3 characters", _text(3, r'[^"\\]+')),
}
"""Every key of the file, with its table: what it sets, what it takes, and how that is told."""


def read_design(path: Path) -> Design:
    """The look described by a file; what it leaves out stays as it is.

    Args:
        path: a TOML file, in the form of `templates/look.toml`; a logo is looked for beside it.

    Raises:
        BookError: the file cannot be read, or has a key or value it cannot have; all are named at once.
    """
    try:
        chosen = tomllib.loads(path.read_text(encoding="utf-8-sig"))
    except OSError as fault:
        said = (fault.strerror or type(fault).__name__).lower()
        raise _refused(path, f"the look {path} cannot be read: {said}") from fault
    except (UnicodeDecodeError, tomllib.TOMLDecodeError) as fault:
        raise _refused(path, f"the look {path} is not a TOML file: {_small(str(fault))}") from fault
    found = dict(_entries(chosen))
    problems = [problem for key, value in found.items() if (problem := _judged(path, key, value))]
    if problems:
        raise BookError(problems)
    design = replace(Design(), **{KEYS[key].attribute: value for key, value in found.items()})
    return replace(design, logo=_logo(path, found.get("page.logo", "")))


def _entries(chosen: dict[str, Any]) -> Iterator[tuple[str, Any]]:
    """Each value with its table and key: `page.paper`."""
    for name, table in chosen.items():
        if isinstance(table, dict):
            yield from ((f"{name}.{key}", value) for key, value in table.items())
        else:
            yield name, table


def _judged(path: Path, key: str, value: Any) -> Problem | None:
    """What is wrong with one entry."""
    place = Place(path.name, key, str(value))
    if key not in KEYS:
        known = ", ".join(KEYS)
        return error("", place, "the look has no such key", f"its keys are {known}")
    if not KEYS[key].right(value):
        return error("", place, "this is not what the key takes", f"enter {KEYS[key].takes}")
    return None


def _logo(path: Path, name: str) -> Path | None:
    """The picture, if one is named; it must be there and be one."""
    if not name:
        return None
    logo = path.parent / name
    place = Place(path.name, "page.logo", name)
    try:
        with logo.open("rb") as file:
            start = file.read(8)
    except OSError as fault:
        text = f"the logo {logo} cannot be read"
        raise BookError(error("", place, text, "enter the name of a file beside the look")) from fault
    if not start.startswith((b"\x89PNG\r\n\x1a\n", b"\xff\xd8\xff")):
        raise BookError(
            error("", place, f"{logo} is no PNG or JPEG picture", "enter the name of one that is")
        )
    return logo


def _refused(path: Path, problem: str) -> BookError:
    return BookError(
        error("", Place(value=str(path)), problem, "copy templates/look.toml and change the copy")
    )


def _small(text: str) -> str:
    return text[:1].lower() + text[1:].rstrip(".")
