"""How lines reach the person: to which stream, in which colour, free of what a terminal would obey."""

import os
import sys
from typing import IO

import click

from tenorbook.basis.problem import Problem, Severity

WIDTH = 80
_COLOURS = {Severity.ERROR: "red", Severity.WARNING: "yellow", Severity.NOTE: "cyan"}
_LONGEST = 600
"""Characters of a message; a cell can hold 32,767."""


def forgive_encodings() -> None:
    """Let a console that lacks a letter show its number instead of failing."""
    for stream in (sys.stdout, sys.stderr):
        reconfigure = getattr(stream, "reconfigure", None)
        if reconfigure is not None:
            reconfigure(errors="backslashreplace")


def coloured(stream: IO[str]) -> bool:
    """Whether colour is wanted there: a terminal, and NO_COLOR not set."""
    return stream.isatty() and not os.environ.get("NO_COLOR")


def say(text: str = "", *, colour: str | None = None, bold: bool = False) -> None:
    """One line of the end table, to standard output."""
    click.echo(_styled(text, colour, bold) if coloured(sys.stdout) else text)


def tell(problem: Problem) -> None:
    """One message, to standard error."""
    text = harmless(str(problem))
    if coloured(sys.stderr):
        text = (
            _styled(problem.severity.value, _COLOURS[problem.severity], True) + text[len(problem.severity) :]
        )
    click.echo(text, err=True)


def warn(text: str) -> None:
    """One line that belongs to no message, to standard error."""
    click.echo(harmless(text), err=True)


def harmless(text: str) -> str:
    """Text from a file on one line, without the characters that steer a terminal, and not too long."""
    clean = "".join(character if character.isprintable() else " " for character in text)
    return clean if len(clean) <= _LONGEST else clean[: _LONGEST - 3] + "..."


def _styled(text: str, colour: str | None, bold: bool) -> str:
    return click.style(text, fg=colour, bold=bold or None)
