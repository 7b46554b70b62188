"""Writes an empty book, ready to be filled in."""

import os
from pathlib import Path

from tenorbook.basis.problem import BookError, Place, error
from tenorbook.jobs.blank_book.workbook import write_sample_book
from tenorbook.jobs.folder import in_words


def write_blank_book(path: Path) -> None:
    """Writes an empty book with a sample row on every sheet, whole or not at all.

    Args:
        path: the new file; its folder is made if need be.

    Raises:
        BookError: the file exists, is no .xlsx by its name, or cannot be written.
    """
    if path.suffix.lower() != ".xlsx":
        raise _refused(path, f"{path} does not end in .xlsx", "name the new book so, such as loans.xlsx")
    if path.exists():
        raise _refused(path, f"{path} exists already and is left as it is", "name a new file")
    try:
        path.parent.mkdir(parents=True, exist_ok=True)
        _write_whole(path)
    except OSError as fault:
        raise _refused(path, f"{path} cannot be written: {in_words(fault)}", "name another place") from fault


def _write_whole(path: Path) -> None:
    temporary = path.with_name(f".{path.name}.{os.getpid()}.part")
    try:
        write_sample_book(temporary)
        temporary.rename(path)
    finally:
        temporary.unlink(missing_ok=True)


def _refused(path: Path, problem: str, remedy: str) -> BookError:
    return BookError(error("", Place(value=str(path)), problem, remedy))
