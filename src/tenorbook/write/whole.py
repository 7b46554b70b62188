"""Files that appear whole or not at all, and never over someone's edits.

Everything is first written under temporary names in the output folder. Only when all of it is there does
each file take its place. A small list of content hashes in the folder tells whether a result was
edited since it was written; such a file is kept under a dated name.
"""

import json
import os
from collections.abc import Callable
from dataclasses import dataclass
from datetime import datetime
from hashlib import file_digest
from pathlib import Path
from types import TracebackType
from typing import Self

from tenorbook.basis.problem import NOWHERE, Problem, note, warning

MANIFEST = ".tenorbook.json"
"""Name of the list of content hashes in an output folder."""


@dataclass(frozen=True, slots=True)
class Written:
    """What came of a set of files.

    Attributes:
        paths: the files as they are now named, in the order they were added.
        problems: files kept aside, and files that could not take their place.
    """

    paths: tuple[Path, ...]
    problems: tuple[Problem, ...]


class WholeFiles:
    """A set of files that appear together; used in a `with` block, then `commit`.

    Args:
        folder: where they appear; made if need be.
        now: for dated names; nothing here reads a clock.
    """

    def __init__(self, folder: Path, now: datetime) -> None:
        self._folder, self._now = folder, now
        self._pending: dict[str, Path] = {}
        self._hashes: dict[str, str] = {}
        self._problems: list[Problem] = []

    def __enter__(self) -> Self:
        self._folder.mkdir(parents=True, exist_ok=True)
        self._hashes = _read_manifest(self._folder / MANIFEST)
        return self

    def __exit__(
        self, kind: type[BaseException] | None, value: BaseException | None, trace: TracebackType | None
    ) -> None:
        for temporary in self._pending.values():
            temporary.unlink(missing_ok=True)

    def add(self, name: str, write: Callable[[Path], object]) -> None:
        """Writes one file under a temporary name.

        Args:
            name: the file's name in the folder.
            write: writes the content to the path it is given.
        """
        write(self.reserve(name))

    def reserve(self, name: str) -> Path:
        """The temporary name of a file, for someone else to write before the commit."""
        temporary = self._folder / f".{name}.{os.getpid()}.part"
        self._pending[name] = temporary
        return temporary

    def commit(self) -> Written:
        """Lets every file take its place; a file that someone edited or has open is stepped around."""
        paths = []
        for name, temporary in list(self._pending.items()):
            digest = _digest(temporary)
            path = self._place(name, temporary, digest)
            self._hashes[path.name] = digest
            paths.append(path)
            del self._pending[name]
        self._write_manifest()
        return Written(tuple(paths), tuple(self._problems))

    def _place(self, name: str, temporary: Path, digest: str) -> Path:
        """Moves one file to its name, or to a dated one if that name cannot be had."""
        target = self._folder / name
        known = (digest, self._hashes.get(name))
        if target.exists() and _digest(target) not in known and not self._keep(target):
            return self._beside(target, temporary)
        try:
            os.replace(temporary, target)
        except PermissionError:
            return self._beside(target, temporary)
        return target

    def _keep(self, target: Path) -> bool:
        """Moves an edited result out of the way; False if it cannot be moved."""
        kept = self._dated(target, "kept ")
        try:
            os.replace(target, kept)
        except PermissionError:
            return False
        text = f"{target.name} was edited since it was written; it is kept as {kept.name}"
        self._problems.append(note("", NOWHERE, text))
        return True

    def _beside(self, target: Path, temporary: Path) -> Path:
        """Puts a file under a dated name because its own is in use."""
        dated = self._dated(target, "")
        os.replace(temporary, dated)
        text = f"{target.name} is open in another program; the new results are in {dated.name}"
        self._problems.append(warning("", NOWHERE, text, "close the file and run again"))
        return dated

    def _dated(self, target: Path, word: str) -> Path:
        """A free name with the date and time: `book.schedules (kept 2026-01-31 15.30.00).xlsx`."""
        stem, dot, ending = target.name.rpartition(".")
        stem, ending = (stem, dot + ending) if dot else (target.name, "")
        moment = f"{word}{self._now:%Y-%m-%d %H.%M.%S}"
        path, number = target.with_name(f"{stem} ({moment}){ending}"), 1
        while path.exists():
            number += 1
            path = target.with_name(f"{stem} ({moment}, {number}){ending}")
        return path

    def _write_manifest(self) -> None:
        """The hashes of all results that are still there."""
        present = {name: digest for name, digest in self._hashes.items() if (self._folder / name).exists()}
        temporary = self._folder / f"{MANIFEST}.{os.getpid()}.part"
        text = json.dumps({"written": present}, indent=1, sort_keys=True, ensure_ascii=False)
        temporary.write_text(text, encoding="utf-8")
        os.replace(temporary, self._folder / MANIFEST)


def _digest(path: Path) -> str:
    with path.open("rb") as file:
        return file_digest(file, "sha256").hexdigest()


def _read_manifest(path: Path) -> dict[str, str]:
    """The hashes as last written; none if the list is missing or damaged."""
    try:
        written = json.loads(path.read_text(encoding="utf-8"))["written"]
    except (OSError, ValueError, KeyError, TypeError):
        return {}
    if not isinstance(written, dict):
        return {}
    return {name: digest for name, digest in written.items() if isinstance(digest, str)}
