"""What the options take."""

import os
from datetime import date
from typing import TYPE_CHECKING, Any

import click

if TYPE_CHECKING:
    _Type = click.ParamType[date]
else:  # not generic in every version of the library
    _Type = click.ParamType


class Day(_Type):
    """A date, written as 2026-01-31 and no other way: nothing about it is to be guessed."""

    name = "date"

    def convert(self, value: Any, param: click.Parameter | None, ctx: click.Context | None) -> date:
        """The date of an option's text.

        Raises:
            click.BadParameter: the text is no date.
        """
        if isinstance(value, date):
            return value
        try:
            year, month, day = value.split("-")
            return date(int(year), int(month), int(day))
        except ValueError:
            self.fail(f"{value!r} is not a date; write it as 2026-01-31", param, ctx)


def processors() -> int:
    """How many processors this process may use."""
    allowed = getattr(os, "sched_getaffinity", None)
    return len(allowed(0)) if allowed else os.cpu_count() or 1
