"""Reads and computes a book and reports; writes nothing."""

from datetime import datetime
from pathlib import Path

from tenorbook.jobs.compute import Progress, compute, silent
from tenorbook.jobs.schedule import Done, settle_as_of
from tenorbook.read import read_book


def check_book(path: Path, now: datetime, progress: Progress = silent) -> Done:
    """Every problem of a book, those that only a computed schedule shows included.

    Args:
        path: of the book.
        now: the moment of the run; the clock is read by the caller.
        progress: told what is being done.

    Raises:
        BookError: the book cannot be used.
    """
    book = read_book(path)
    as_of, _ = settle_as_of(book, None, now)
    computed = compute(book, as_of, (), progress)
    return Done(result=computed.result, failed=computed.failed)
