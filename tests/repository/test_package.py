"""The package as a user meets it: public names, what importing it costs, and words that stay inside."""

import importlib
import pkgutil
import re
import subprocess
import sys
from pathlib import Path

import pytest

import tenorbook
from repository.tree import ROOT, made_by_tools

EXPENSIVE = ("pandas", "numpy", "openpyxl", "xlsxwriter", "lxml", "rich", "click", "pyarrow", "dateutil")


def loaded_by(statement: str) -> set[str]:
    """The modules that a statement loads in a fresh interpreter."""
    done = subprocess.run(
        [sys.executable, "-X", "importtime", "-c", statement], capture_output=True, text=True, check=True
    )
    return {line.rsplit("|", 1)[1].strip() for line in done.stderr.splitlines() if line.count("|") == 2}


def test_importing_the_package_loads_nothing_expensive() -> None:
    loaded = loaded_by("import tenorbook")
    assert "tenorbook" in loaded
    assert {name.split(".")[0] for name in loaded} & set(EXPENSIVE) == set()


def test_building_a_schedule_loads_nothing_expensive() -> None:
    loaded = loaded_by("import tenorbook.schedule.build, tenorbook.owed.position, tenorbook.terms.resolve")
    assert "tenorbook.schedule.walk" in loaded
    assert {name.split(".")[0] for name in loaded} & set(EXPENSIVE) == set()


def test_the_command_line_starts_without_frames_and_workbooks() -> None:
    loaded = {name.split(".")[0] for name in loaded_by("import tenorbook.cli.main")}
    assert "click" in loaded
    assert loaded & {"pandas", "numpy", "openpyxl", "xlsxwriter", "lxml", "pyarrow"} == set()


MODULES = sorted(
    found.name
    for found in pkgutil.walk_packages(tenorbook.__path__, "tenorbook.")
    if "__main__" not in found.name
)


@pytest.mark.parametrize("name", MODULES)
def test_every_module_imports(name: str) -> None:
    assert importlib.import_module(name).__doc__


def test_public_names_are_there_and_documented() -> None:
    for name in getattr(tenorbook, "__all__", ()):
        assert getattr(tenorbook, name).__doc__, name
    assert re.fullmatch(r"\d+\.\d+\.\d+", tenorbook.__version__)


TEXT = {".py", ".md", ".toml", ".txt", ".csv", ".json", ".ini", ".cfg", ".yml", ".yaml", ".sh"}
OURS = "|".join(("work", "tmp", "root", "home", "mnt", "Users", "opt"))
MACHINE_PATH = re.compile(rf"(?<![\w.:/-])/(?:{OURS})/\w|[A-Z]:\\Users\\")


def texts() -> list[Path]:
    """Every text file of the project."""
    folders = [ROOT, *(ROOT / name for name in ("src", "tests", "templates", "samples", ".ci"))]
    found = {path for folder in folders[1:] if folder.exists() for path in folder.rglob("*")}
    found |= set(ROOT.glob("*"))
    return sorted(
        path
        for path in found
        if path.is_file() and not made_by_tools(path) and (path.suffix in TEXT or path.suffix == "")
    )


def test_no_text_names_a_place_on_a_machine() -> None:
    assert len(texts()) > 100
    found = [
        f"{path.relative_to(ROOT)}:{number}: {match.group()}"
        for path in texts()
        for number, line in enumerate(path.read_text(encoding="utf-8", errors="replace").splitlines(), 1)
        for match in MACHINE_PATH.finditer(line)
    ]
    assert found == []


def test_a_place_on_a_machine_would_be_found() -> None:
    assert MACHINE_PATH.search("open('/" + "tmp/x')")
    assert MACHINE_PATH.search("see C:\\" + "Users\\someone")
    assert not MACHINE_PATH.search("https://example.org/" + "work/x and 30/360 and and/or")
