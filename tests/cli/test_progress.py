"""The bar: on a terminal, after a second, and gone at the end."""

import io
import sys
import time

import pytest

from tenorbook.cli import progress


class Terminal(io.StringIO):
    def isatty(self) -> bool:
        return True


def test_it_waits_a_second(monkeypatch: pytest.MonkeyPatch) -> None:
    moments = iter((0.0, 0.5, 1.5))
    monkeypatch.setattr(sys, "stderr", Terminal())
    monkeypatch.setattr(time, "monotonic", lambda: next(moments, 2.0))
    with progress.Bar() as bar:
        bar("computing", 1, 10)
        assert bar._progress is None
        bar("computing", 5, 10)
        bar("writing", 1, 10)
        shown = bar._progress
        assert shown is not None
        assert [(task.description, task.completed) for task in shown.tasks] == [
            ("computing", 5),
            ("writing", 1),
        ]


def test_nothing_where_nobody_watches(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(sys, "stderr", io.StringIO())
    monkeypatch.setattr(time, "monotonic", iter((0.0, 9.0)).__next__)
    with progress.Bar() as bar:
        bar("computing", 1, 10)
        assert bar._progress is None
