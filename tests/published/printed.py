"""The data files, and the comparison of an exact figure with a printed one."""

import csv
import json
from decimal import Decimal
from enum import Enum
from fractions import Fraction
from pathlib import Path
from typing import Any, TypeVar

E = TypeVar("E", bound=Enum)
DATA = Path(__file__).parent / "data"

CARRIED = Decimal("0.000001")
"""What a figure carried to a millionth of a cent may be off after a few hundred roundings."""


def records(name: str) -> list[dict[str, Any]]:
    """The records of a data file, `.json` or `.csv`."""
    path = DATA / name
    if path.suffix == ".json":
        loaded: list[dict[str, Any]] = json.loads(path.read_text(encoding="utf-8"))
        return loaded
    with path.open(encoding="utf-8", newline="") as lines:
        return list(csv.DictReader(lines))


def said(kind: type[E], word: str) -> E:
    """The member of a convention enum that the loan book writes as `word`."""
    return kind(word)


def agrees(value: Decimal | Fraction, printed: str, slack: Decimal | float = CARRIED) -> bool:
    """Whether an exact figure rounds to the printed one (either way at a tie)."""
    shown = Decimal(printed)
    half = Decimal(5).scaleb(-decimals(printed) - 1)
    return abs(Fraction(value) - Fraction(shown)) <= Fraction(half) + Fraction(slack)


def decimals(printed: str) -> int:
    """Digits after the decimal point as printed; `97e-3` has three."""
    exponent = Decimal(printed).as_tuple().exponent
    assert isinstance(exponent, int)
    return max(-exponent, 0)
