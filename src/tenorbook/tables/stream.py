"""A flat table on its way to a file of rows: typed columns and an iterator of rows."""

from collections.abc import Iterable
from dataclasses import dataclass
from enum import StrEnum
from typing import Any


class Kind(StrEnum):
    """The type of a flat column's values; `None` is an empty field in all of them."""

    TEXT = "text"
    INTEGER = "integer"
    DECIMAL = "decimal"
    """Exact decimals; amounts carry the digits of their currency."""
    DATE = "date"


@dataclass(frozen=True, slots=True)
class Field:
    """A column of a flat table."""

    header: str
    kind: Kind


@dataclass(frozen=True, slots=True)
class Stream:
    """A flat table.

    Attributes:
        name: of the file, without book and ending: `schedules`.
        fields: the columns.
        rows: tuples in the order of the columns; may be consumed once only.
        digits: the most digits after the point that a decimal of the table can have.
    """

    name: str
    fields: tuple[Field, ...]
    rows: Iterable[tuple[Any, ...]]
    digits: int
