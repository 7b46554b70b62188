"""Files that appear whole or not at all, and never over someone's edits."""

import os
from datetime import datetime
from functools import partial
from pathlib import Path

import pytest

from tenorbook.write.whole import MANIFEST, WholeFiles, Written

NOW = datetime(2026, 1, 31, 15, 30)


def write(folder: Path, **contents: str) -> Written:
    with WholeFiles(folder, NOW) as files:
        for name, content in contents.items():
            files.add(f"{name}.txt", partial(Path.write_text, data=content))
        return files.commit()


def names(folder: Path) -> set[str]:
    return {path.name for path in folder.iterdir()} - {MANIFEST}


def test_files_take_their_place_together(tmp_path: Path) -> None:
    written = write(tmp_path / "new", a="1", b="2")
    assert [path.name for path in written.paths] == ["a.txt", "b.txt"]
    assert names(tmp_path / "new") == {"a.txt", "b.txt"}
    assert written.problems == ()


def test_nothing_appears_when_one_of_them_fails(tmp_path: Path) -> None:
    write(tmp_path, a="old")

    def fail(path: Path) -> None:
        path.write_text("half")
        raise OSError("the disk is full")

    def all_of_it() -> None:
        with WholeFiles(tmp_path, NOW) as files:
            files.add("a.txt", partial(Path.write_text, data="new"))
            files.add("b.txt", fail)

    with pytest.raises(OSError, match="disk is full"):
        all_of_it()
    assert names(tmp_path) == {"a.txt"}
    assert (tmp_path / "a.txt").read_text() == "old"


def test_our_own_result_is_replaced(tmp_path: Path) -> None:
    write(tmp_path, a="1")
    written = write(tmp_path, a="2")
    assert names(tmp_path) == {"a.txt"}
    assert (tmp_path / "a.txt").read_text() == "2"
    assert written.problems == ()


def test_an_edited_result_is_kept_under_a_dated_name(tmp_path: Path) -> None:
    write(tmp_path, a="1")
    (tmp_path / "a.txt").write_text("my remarks")
    written = write(tmp_path, a="2")
    kept = "a (kept 2026-01-31 15.30.00).txt"
    assert names(tmp_path) == {"a.txt", kept}
    assert (tmp_path / kept).read_text() == "my remarks"
    assert [str(problem) for problem in written.problems] == [
        f"note: a.txt was edited since it was written; it is kept as {kept}"
    ]


def test_two_edits_in_the_same_second_are_both_kept(tmp_path: Path) -> None:
    for edit in ("first", "second"):
        write(tmp_path, a="1")
        (tmp_path / "a.txt").write_text(edit)
    write(tmp_path, a="2")
    kept = names(tmp_path) - {"a.txt"}
    assert {(tmp_path / name).read_text() for name in kept} == {"first", "second"}


def test_a_file_that_is_not_known_to_be_ours_is_kept(tmp_path: Path) -> None:
    (tmp_path / "a.txt").write_text("someone else's")
    write(tmp_path, a="1")
    assert len(names(tmp_path)) == 2


def test_a_damaged_list_of_hashes_errs_on_the_safe_side(tmp_path: Path) -> None:
    write(tmp_path, a="1")
    (tmp_path / MANIFEST).write_text("[not json")
    write(tmp_path, a="2")
    assert len(names(tmp_path)) == 2


def test_a_file_open_elsewhere_gets_a_dated_sibling(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    write(tmp_path, a="1")
    replace = os.replace

    def locked(source: Path, target: Path) -> None:
        if Path(target).name == "a.txt":
            raise PermissionError("in use")
        replace(source, target)

    monkeypatch.setattr(os, "replace", locked)
    written = write(tmp_path, a="2")
    assert [path.name for path in written.paths] == ["a (2026-01-31 15.30.00).txt"]
    assert written.paths[0].read_text() == "2"
    assert (tmp_path / "a.txt").read_text() == "1"
    assert "open in another program" in written.problems[0].problem
