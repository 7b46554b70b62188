"""The only place that reads a clock; everything below is told the time."""

from datetime import datetime


def now() -> datetime:
    """The moment of the run, by the clock of the machine."""
    return datetime.now()
