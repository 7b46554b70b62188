"""The command line: one verb a job, exit codes that a script can rely on, never a traceback."""

import logging
import os
import sys
from collections.abc import Callable
from datetime import date
from pathlib import Path
from typing import Any, TypeVar

import click

from tenorbook import __version__
from tenorbook.basis.problem import BookError
from tenorbook.cli import clock
from tenorbook.cli.arguments import Day, processors
from tenorbook.cli.console import forgive_encodings, warn
from tenorbook.cli.progress import Bar

UNUSABLE, FAULT, INTERRUPTED = 2, 3, 130
DEBUG = "TENORBOOK_DEBUG"

F = TypeVar("F", bound=Callable[..., Any])


class Program(click.Group):
    """The group of verbs; whatever happens below ends in an exit code and at most a few plain lines."""

    def main(self, *args: Any, **extra: Any) -> Any:
        """Runs the command line and exits.

        Raises:
            SystemExit: always, with the exit code of the verb: 0 to 3, or 130 when interrupted.
        """
        forgive_encodings()
        if os.environ.get(DEBUG):
            logging.basicConfig(level=logging.DEBUG)
        extra["standalone_mode"] = False
        sys.exit(self._guarded(*args, **extra))

    def _guarded(self, *args: Any, **extra: Any) -> int:
        """The exit code of a call."""
        try:
            return super().main(*args, **extra) or 0
        except click.ClickException as misuse:
            misuse.show()
            return misuse.exit_code
        except BookError as refused:
            from tenorbook.cli.ending import refusals

            refusals(refused.problems)
            return UNUSABLE
        except (click.Abort, KeyboardInterrupt):
            warn("stopped; no result was left half written")
            return INTERRUPTED
        except Exception as fault:
            if os.environ.get(DEBUG):
                raise
            return _report(fault)


def _report(fault: Exception) -> int:
    said = f"{type(fault).__name__}: {fault}".rstrip(": ")
    warn(f"error: the program failed ({said}); please report this with the command you gave")
    return FAULT


def _json(verb: F) -> F:
    """The option that every verb has."""
    return click.option("--json", "with_json", is_flag=True, help="Print the end table as JSON.")(verb)


_BOOK = click.argument("book", type=click.Path(path_type=Path))


@click.group(cls=Program, context_settings={"help_option_names": ["-h", "--help"]})
@click.version_option(__version__, message="tenorbook %(version)s")
def main() -> None:
    """A workbook of loans in, exact dated schedules out.

    \b
    Exit codes: 0  all done
                1  done, but some loans were set aside
                2  the call or the file is unusable; nothing was written
                3  a fault of the program itself
    """


@main.command()
@_BOOK
@click.option(
    "--out", type=click.Path(path_type=Path), metavar="DIR", help="Folder of the results. [BOOK-results/]"
)
@click.option("--as-of", type=Day(), metavar="DATE", help="Date of balances and accruals: 2026-01-31.")
@click.option("--loan", "loans", multiple=True, metavar="ID", help="Only this loan; may be repeated.")
@click.option("--csv", is_flag=True, help="CSV files as well.")
@click.option("--parquet", is_flag=True, help="Parquet files as well.")
@click.option("--values", is_flag=True, help="Figures instead of live formulas.")
@click.option(
    "--look", type=click.Path(path_type=Path), metavar="FILE", help="Your copy of templates/look.toml."
)
@click.option("--paper", type=click.Choice(["A4", "Letter"], case_sensitive=False), help="Paper. [A4]")
@_json
def schedule(
    book: Path,
    out: Path | None,
    as_of: date | None,
    loans: tuple[str, ...],
    csv: bool,
    parquet: bool,
    values: bool,
    look: Path | None,
    paper: str | None,
    with_json: bool,
) -> int:
    """Write a dated schedule for every loan of BOOK.

    BOOK is an .xlsx, .xlsm or .ods workbook with a sheet Loans, or a .csv. The
    results go to a folder beside it: a workbook with a sheet a loan, a summary
    and every exception, and a copy of BOOK with doubtful cells marked. A loan
    that cannot be computed is set aside and named; the others come out.
    """
    from tenorbook.cli.ending import finish
    from tenorbook.jobs.schedule import Options, schedule_book

    options = Options(
        out=out,
        as_of=as_of,
        loan_ids=loans,
        csv=csv,
        parquet=parquet,
        values_only=values,
        look=look,
        paper=paper,
        processes=processors(),
    )
    with Bar() as bar:
        done = schedule_book(book, options, clock.now(), bar)
    return finish("schedule", done, with_json=with_json, everything=False)


@main.command()
@_BOOK
@_json
def check(book: Path, with_json: bool) -> int:
    """Read BOOK and report every problem; write nothing."""
    from tenorbook.cli.ending import finish
    from tenorbook.jobs.check import check_book

    with Bar() as bar:
        done = check_book(book, clock.now(), bar)
    return finish("check", done, with_json=with_json, everything=True)


@main.command()
@click.argument("path", type=click.Path(path_type=Path))
@_json
def blank(path: Path, with_json: bool) -> int:
    """Write an empty book to PATH: lists to choose from, notes, a sample row.

    PATH ends in .xlsx. A file that is there already is never overwritten.
    """
    import json

    from tenorbook.cli.console import say
    from tenorbook.cli.ending import table
    from tenorbook.cli.outcome import shown
    from tenorbook.jobs.blank import write_blank_book

    write_blank_book(path)
    if with_json:
        say(json.dumps({"verb": "blank", "files": [str(path)], "exit_code": 0}, indent=2))
    else:
        rows = [
            ("Written", shown(path)),
            ("Next", f"put each loan in a row of its sheet Loans, then: tenorbook schedule {path.name}"),
        ]
        table("An empty book", rows)
    return 0
