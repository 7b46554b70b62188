"""Flat tables to CSV: UTF-8, one header line, plain decimals, ISO dates, no text that a spreadsheet runs."""

import csv
from datetime import date
from decimal import Decimal
from pathlib import Path
from typing import Any

from tenorbook.tables.stream import Kind, Stream

_STARTS = ("=", "+", "-", "@", "\t", "\r")


def write_csv(path: Path, stream: Stream) -> None:
    """Writes a flat table; lines end in CR LF, as RFC 4180 has it.

    Args:
        path: the file to write.
        stream: the table; consumed.
    """
    texts = {index for index, field in enumerate(stream.fields) if field.kind is Kind.TEXT}
    with path.open("w", encoding="utf-8", newline="", errors="replace") as file:
        writer = csv.writer(file)
        writer.writerow([guarded(field.header) for field in stream.fields])
        for row in stream.rows:
            writer.writerow([_text(value, index in texts) for index, value in enumerate(row)])


def guarded(text: str) -> str:
    """Text that a spreadsheet could take for a formula, after an apostrophe; numbers stay as they are."""
    return f"'{text}" if text.startswith(_STARTS) and not is_number(text) else text


def is_number(text: str) -> bool:
    """Whether a text is a plain number: `-5.00` is, `-5+1` is not."""
    return text.isascii() and text.lstrip("+-").replace(".", "", 1).isdigit() and text.count("-") < 2


def _text(value: Any, guard: bool) -> str:
    match value:
        case None:
            return ""
        case Decimal():
            return f"{value:f}"
        case date():
            return value.isoformat()
        case _:
            return guarded(str(value)) if guard else str(value)
