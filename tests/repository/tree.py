"""The files of the project, parsed once, for the tests of the tree itself."""

import ast
from collections.abc import Iterator
from functools import cache
from pathlib import Path

ROOT = Path(__file__).resolve().parents[2]
SOURCE = ROOT / "src" / "tenorbook"
MADE_BY_TOOLS = ("__pycache__", ".hypothesis", ".git", ".venv", ".mypy_cache", ".pytest_cache", ".ruff_cache",
                 ".import_linter_cache", "dist", "build")  # fmt: skip


@cache
def modules() -> tuple[Path, ...]:
    """Every module of the package."""
    return tuple(sorted(path for path in SOURCE.rglob("*.py") if not made_by_tools(path)))


def made_by_tools(path: Path) -> bool:
    """Whether a file was left by a tool, and is not of the project."""
    parts = path.relative_to(ROOT).parts
    return any(part in MADE_BY_TOOLS or part.endswith((".egg-info", "-results")) for part in parts)


def name_of(path: Path) -> str:
    """`schedule/walk.py`: a module as messages name it."""
    return path.relative_to(SOURCE).as_posix()


@cache
def parsed(path: Path) -> ast.Module:
    """The syntax tree of a module."""
    return ast.parse(path.read_text(encoding="utf-8"))


def imports(path: Path) -> Iterator[str]:
    """The full names of the modules that a module imports when it runs, wherever in it that stands."""
    pending: list[ast.AST] = [parsed(path)]
    while pending:
        node = pending.pop()
        if isinstance(node, ast.If) and "TYPE_CHECKING" in ast.unparse(node.test):
            pending += node.orelse
            continue
        if isinstance(node, ast.Import):
            yield from (alias.name for alias in node.names)
        elif isinstance(node, ast.ImportFrom) and node.module and not node.level:
            yield node.module
        pending += ast.iter_child_nodes(node)


def functions(path: Path) -> Iterator[ast.FunctionDef]:
    """Every function and method of a module."""
    for node in ast.walk(parsed(path)):
        if isinstance(node, ast.FunctionDef):
            yield node


def body_lines(function: ast.FunctionDef) -> int:
    """Lines of a function's body, its docstring left out."""
    body = function.body[1:] if ast.get_docstring(function) is not None else function.body
    if not body:
        return 0
    last = body[-1].end_lineno
    assert last is not None
    return last - body[0].lineno + 1
