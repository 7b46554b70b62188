"""Where results go: the folder asked for, or the one beside the book, if it can be had."""

import os
from pathlib import Path

from tenorbook.basis.problem import BookError, Place, error


def output_folder(book: Path, asked: Path | None) -> Path:
    """The folder for the results of a book; it need not exist yet.

    Raises:
        BookError: what has its name is not a folder, or nothing can be written there.
    """
    folder = asked if asked is not None else book.parent / f"{book.stem}-results"
    nearest = next((each for each in (folder, *folder.absolute().parents) if each.exists()), folder)
    if not nearest.is_dir():
        raise no_output(folder, f"{nearest} is a file, not a folder")
    if not os.access(nearest, os.W_OK | os.X_OK):
        raise no_output(folder, f"nothing may be written in {nearest}")
    return folder


def no_output(target: Path, why: str) -> BookError:
    """The refusal when results cannot be written."""
    problem = f"the results cannot be written to {target}: {why}"
    return BookError(error("", Place(value=str(target)), problem, "name another place with --out"))


def in_words(fault: OSError) -> str:
    """What the operating system said, as part of a sentence."""
    said = fault.strerror or str(fault) or type(fault).__name__
    return said[:1].lower() + said[1:]
