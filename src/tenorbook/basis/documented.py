"""Enums whose members carry their own documentation as data.

Docstrings under enum members vanish at run time; what a report or an explanation prints about a
convention must be stored. A member is written ``NAME = "word on the sheet", Doc(...)``: its value is
the canonical word of the loan book, its `doc` the convention in full.
"""

from dataclasses import dataclass
from enum import Enum
from typing import Self


@dataclass(frozen=True, slots=True)
class Doc:
    """What a convention means.

    Attributes:
        rule: one sentence: what it does.
        numerator: for a fraction of a year, what stands above the line.
        denominator: for a fraction of a year, what stands below it.
        also: other names in use; none of them is read unless the spelling table lists it.
        source: the published definition, or "common practice".
        example: one worked example with its figures.
    """

    rule: str
    numerator: str = ""
    denominator: str = ""
    also: tuple[str, ...] = ()
    source: str = "common practice"
    example: str = ""


class Documented(Enum):
    """Base of every convention enum: the value is the word on the sheet, `doc` its meaning."""

    doc: Doc

    def __new__(cls, word: str, doc: Doc) -> Self:
        """A member from its word and its documentation."""
        member = object.__new__(cls)
        member._value_ = word
        member.doc = doc
        return member

    def __str__(self) -> str:
        return str(self.value)
