"""Prints what came of a job: its messages, then the end table or the same as JSON."""

import json
from collections.abc import Sequence
from textwrap import wrap

from tenorbook.basis.problem import Problem, Severity
from tenorbook.cli.console import WIDTH, harmless, say, tell, warn
from tenorbook.cli.outcome import Line, as_json, exit_code, lines
from tenorbook.jobs.schedule import Done
from tenorbook.reports.words import day

MOST_SHOWN = 20
"""Messages shown after a job that writes them into the results as well."""
_LABEL = 12


def finish(verb: str, done: Done, *, with_json: bool, everything: bool) -> int:
    """Prints the end of a job.

    Args:
        verb: of the command.
        done: what came of it.
        with_json: JSON instead of the end table.
        everything: every message, notes included; else the gravest, and where the others are.

    Returns:
        The exit code.
    """
    messages(done, everything)
    if with_json:
        say(json.dumps(as_json(verb, done), indent=2))
    else:
        dated = f", as of {day(done.result.as_of)}" if done.files else ""
        table(f"{done.result.book.name}{dated}", lines(done))
    return exit_code(done)


def messages(done: Done, everything: bool) -> None:
    """The messages, to standard error."""
    problems = done.result.problems
    if everything:
        chosen, rest = list(problems), 0
    else:
        grave = [problem for problem in problems if problem.severity is not Severity.NOTE]
        chosen, rest = grave[:MOST_SHOWN], len(grave) - MOST_SHOWN
    for problem in (*chosen, *done.remarks):
        tell(problem)
    if rest > 0:
        warn(f"... and {rest:,} more on the sheet Exceptions")


def refusals(problems: Sequence[Problem]) -> None:
    """Why a book or a call cannot be used, to standard error."""
    for problem in problems[:MOST_SHOWN]:
        tell(problem)
    if len(problems) > MOST_SHOWN:
        warn(f"... and {len(problems) - MOST_SHOWN:,} more")


def table(title: str, rows: Sequence[Line]) -> None:
    """The end table, to standard output: labels beside what they say, within 80 columns."""
    say(harmless(title), bold=True)
    for label, text in rows:
        parts = wrap(harmless(text), WIDTH - _LABEL - 2, break_long_words=False, break_on_hyphens=False)
        for number, part in enumerate(parts or [""]):
            shown = label if number == 0 else ""
            say(f"  {shown:<{_LABEL}}{part}")
