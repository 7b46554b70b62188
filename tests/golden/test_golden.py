"""Workbooks against the ones kept here, part by part; refreshed by hand only (see `books`)."""

import re
from pathlib import Path

import pytest

from golden.books import BOOKS, FORGIVEN, HERE, parts, write


@pytest.mark.parametrize("name", BOOKS)
def test_every_part_is_as_it_was(name: str, tmp_path: Path) -> None:
    made, kept = parts(write(name, tmp_path)), parts(HERE / f"{name}.xlsx")
    assert list(made) == list(kept)
    for part in kept:
        if part not in FORGIVEN:
            assert lines(made[part]) == lines(kept[part]), part


def lines(content: bytes) -> list[str]:
    """A part an element a line, so that a difference is shown where it is."""
    return re.sub(r"(?<=>)(?=<)", "\n", content.decode("utf-8")).splitlines()


def test_a_difference_is_seen(tmp_path: Path) -> None:
    made, other = parts(write("plain", tmp_path)), parts(HERE / "values.xlsx")
    assert [part for part in made if made[part] != other.get(part)]
    assert set(FORGIVEN) <= set(made)
