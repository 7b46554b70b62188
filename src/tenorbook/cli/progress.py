"""A bar for work over a second, on a terminal only."""

import sys
import time
from types import TracebackType
from typing import TYPE_CHECKING, Self

if TYPE_CHECKING:
    from rich.progress import Progress, TaskID

_PATIENCE = 1.0
"""Seconds of work without a bar."""


class Bar:
    """Told what is being done and how much of it; used in a `with` block."""

    def __init__(self) -> None:
        self._start = time.monotonic()
        self._watched = sys.stderr.isatty()
        self._progress: Progress | None = None
        self._tasks: dict[str, TaskID] = {}

    def __call__(self, what: str, done: int, of: int) -> None:
        """Shows the state of one stage, once a second has gone by.

        Args:
            what: the stage, such as `computing`.
            done: loans done.
            of: loans in all.
        """
        if not self._watched or (self._progress is None and time.monotonic() - self._start < _PATIENCE):
            return
        progress = self._progress or self._shown()
        if what not in self._tasks:
            self._tasks[what] = progress.add_task(what, total=of)
        progress.update(self._tasks[what], completed=done)

    def _shown(self) -> "Progress":
        from rich.console import Console
        from rich.progress import BarColumn, MofNCompleteColumn, Progress, TextColumn, TimeRemainingColumn

        self._progress = Progress(
            TextColumn("{task.description:<10}"),
            BarColumn(),
            MofNCompleteColumn(),
            TextColumn("loans"),
            TimeRemainingColumn(),
            console=Console(stderr=True),
            transient=True,
        )
        self._progress.start()
        return self._progress

    def __enter__(self) -> Self:
        return self

    def __exit__(
        self, kind: type[BaseException] | None, value: BaseException | None, trace: TracebackType | None
    ) -> None:
        if self._progress is not None:
            self._progress.stop()
