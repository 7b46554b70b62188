"""Who may import whom, and the one home of each outside library."""

import ast
import re
import sys
from pathlib import Path

import pytest
from importlinter import api  # noqa: F401 (configures the library)
from importlinter.application.use_cases import lint_imports

from repository.tree import ROOT, SOURCE, imports, modules, name_of

_ALL = ("basis", "calendar", "terms", "read", "schedule", "yields", "owed", "tables", "reports", "write")
ALLOWED: dict[str, tuple[str, ...]] = {
    "basis": (),
    "calendar": ("basis",),
    "terms": ("basis", "calendar"),
    "read": ("basis", "calendar", "terms"),
    "schedule": ("basis", "calendar", "terms"),
    "yields": ("basis", "calendar", "terms", "schedule"),
    "owed": ("basis", "calendar", "terms", "schedule", "yields"),
    "tables": ("basis",),
    "reports": ("basis", "calendar", "terms", "schedule", "yields", "owed", "tables"),
    "write": ("basis", "tables"),
    "jobs": _ALL,
    "cli": (*_ALL, "jobs"),
}
"""The table of DEVELOPERS.md: what each package may import of ours."""

HOMES: dict[str, tuple[str, ...]] = {
    "click": ("cli",),
    "rich": ("cli", "jobs"),
    "openpyxl": ("read", "write"),
    "xlsxwriter": ("write", "jobs/blank_book/workbook.py"),
    "isal": ("write",),
    "pyarrow": ("write",),
    "pandas": ("schedule/frame.py", "write", "bulk"),
    "numpy": ("bulk",),
    "lxml": ("read", "write"),
    "defusedxml": ("read", "write"),
    "iso4217": ("basis",),
    "dateutil": ("read",),
    "tomllib": ("read",),
}
"""Where each library may be imported: packages, or one module."""

THIN = ("basis", "calendar", "terms", "schedule", "owed", "yields", "tables")
"""Packages that work on the standard library alone, but for what `HOMES` gives them."""


def contracts(allowed: dict[str, tuple[str, ...]]) -> str:
    """The table in the words of import-linter."""
    lines = ["[importlinter]", "root_package = tenorbook", "exclude_type_checking_imports = True", ""]
    for package, may in allowed.items():
        forbidden = [other for other in allowed if other != package and other not in may]
        if forbidden:
            lines += [
                f"[importlinter:contract:{package}]",
                f"name = {package} imports only {', '.join(may) or 'nothing'} of ours",
                "type = forbidden",
                "allow_indirect_imports = True",
                f"source_modules =\n    tenorbook.{package}",
                "forbidden_modules =\n" + "\n".join(f"    tenorbook.{other}" for other in forbidden),
                "",
            ]
    return "\n".join(lines)


def kept(allowed: dict[str, tuple[str, ...]], folder: Path) -> bool:
    """Whether the imports keep to a table."""
    config = folder / "contracts.ini"
    config.write_text(contracts(allowed), encoding="utf-8")
    return lint_imports(config_filename=str(config), cache_dir=str(folder / "cache"))


def test_packages_import_only_what_the_table_says(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert kept(ALLOWED, tmp_path), capsys.readouterr().out


def test_a_forbidden_import_is_found(tmp_path: Path) -> None:
    stricter = ALLOWED | {"schedule": ("basis", "calendar")}  # it does import terms
    assert not kept(stricter, tmp_path)


def test_the_table_has_every_package() -> None:
    packages = {path.parent.name for path in SOURCE.glob("*/__init__.py")}
    assert packages - {"bulk", "reconcile", "intake"} == set(ALLOWED)


def test_developers_read_the_same_table() -> None:
    text = (ROOT / "DEVELOPERS.md").read_text(encoding="utf-8")
    rows = re.findall(r"^\| (`\w+`(?:, `\w+`)*) \| .+ \| (.+) \|$", text, re.MULTILINE)
    table = {package: may for packages, may in rows for package in re.findall(r"`(\w+)`", packages)}
    for package, may in ALLOWED.items():
        assert package in table
        said = table[package]
        if not said.startswith(("nothing", "the above", "all of the above", "everything")):
            assert tuple(re.findall(r"\w+", said)) == may, package


def outside(path: Path) -> set[str]:
    """The libraries that a module imports: neither ours nor Python's."""
    names = {name.split(".")[0] for name in imports(path)}
    return {name for name in names if name != "tenorbook" and (name not in sys.stdlib_module_names)}


def test_every_library_has_one_home() -> None:
    strays = [
        f"{name_of(path)} imports {library}"
        for path in modules()
        for library in outside(path)
        if not name_of(path).startswith(HOMES.get(library, ()))
    ]
    assert strays == []


def test_the_engine_stands_on_the_standard_library() -> None:
    found = {
        (name_of(path), library)
        for path in modules()
        if name_of(path).startswith(THIN)
        for library in outside(path)
    }
    assert found <= {("basis/money.py", "iso4217"), ("schedule/frame.py", "pandas")}


def test_the_oracle_imports_nothing_of_ours() -> None:
    for path in sorted((ROOT / "tests" / "oracle").glob("*.py")):
        tree = ast.parse(path.read_text(encoding="utf-8"))
        for node in ast.walk(tree):
            names = [alias.name for alias in node.names] if isinstance(node, ast.Import) else []
            if isinstance(node, ast.ImportFrom) and not node.level:
                names = [node.module or ""]
            allowed = sys.stdlib_module_names | ({"pytest"} if path.name.startswith("test_") else set())
            assert all(name.split(".")[0] in allowed for name in names), f"{path.name}: {names}"
