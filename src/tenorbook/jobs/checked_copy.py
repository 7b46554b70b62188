"""The copy of a book with its faulty cells marked, beside the results."""

import logging
from datetime import datetime
from functools import partial
from pathlib import Path

from tenorbook.basis.problem import NOWHERE, Problem, note, warning
from tenorbook.jobs.problems import to_mark
from tenorbook.read import read_cells
from tenorbook.write.checked import write_checked
from tenorbook.write.whole import WholeFiles, Written

_LOG = logging.getLogger(__name__)


def write_checked_copy(source: Path, problems: tuple[Problem, ...], folder: Path, now: datetime) -> Written:
    """Writes `NAME.checked.xlsx` when an error or warning names a cell.

    A copy that cannot be made is a warning: it never costs the results.

    Args:
        source: the book; only read.
        problems: of the book.
        folder: of the results.
        now: for dated names of files that had to be kept.

    Raises:
        OSError: the folder cannot be written to.
    """
    name = f"{source.stem}.checked.xlsx"
    marked = to_mark(problems)
    if not marked:
        return Written((), _outlived(folder / name))
    try:
        with WholeFiles(folder, now) as files:
            files.add(name, partial(_write, source, marked))
            return files.commit()
    except OSError:
        raise
    except Exception as fault:
        _LOG.debug("checked copy of %s", source.name, exc_info=True)
        text = f"the copy with the marked cells was not written ({type(fault).__name__}: {fault})"
        return Written((), (warning("", NOWHERE, text, "go by the messages, which name each cell"),))


def _outlived(earlier: Path) -> tuple[Problem, ...]:
    """The note that a copy from an earlier run marks what has been put right since."""
    if not earlier.exists():
        return ()
    text = f"{earlier.name} is from an earlier run: nothing in the book is marked any more"
    return (note("", NOWHERE, text, "delete it"),)


def _write(source: Path, marked: tuple[Problem, ...], target: Path) -> None:
    plain = () if source.suffix.lower() in (".xlsx", ".xlsm") else read_cells(source)
    try:
        write_checked(source, marked, target, plain)
    except ValueError:
        write_checked(source, marked, target, read_cells(source))
