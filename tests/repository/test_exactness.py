"""No binary float in the engine: not a literal, not a conversion, not a float function of the library."""

import ast
from collections.abc import Iterator
from pathlib import Path

import pytest

from repository.tree import imports, modules, name_of, parsed

ENGINE = ("basis", "calendar", "terms", "schedule", "owed")
WITH_FLOATS_AT_THE_EDGE = ("schedule/frame.py",)
"""Where figures leave for a frame."""
FLOAT_LIBRARIES = {"math", "cmath", "random", "statistics", "numpy", "time"}


def engine() -> list[Path]:
    """The modules in which every figure is exact."""
    return [
        path
        for path in modules()
        if name_of(path).startswith(ENGINE) and name_of(path) not in WITH_FLOATS_AT_THE_EDGE
    ]


def floats(tree: ast.AST) -> Iterator[str]:
    """Where a syntax tree makes a float. `isinstance(value, float)` refuses one, and is welcome."""
    for node in ast.walk(tree):
        if isinstance(node, ast.Constant) and isinstance(node.value, float | complex):
            yield f"line {node.lineno}: the literal {node.value}"
        if isinstance(node, ast.Call) and isinstance(node.func, ast.Name) and node.func.id == "float":
            yield f"line {node.lineno}: float(...)"
        if isinstance(node, ast.Attribute) and node.attr in ("total_seconds", "from_float"):
            yield f"line {node.lineno}: .{node.attr}"
        if isinstance(node, ast.BinOp) and isinstance(node.op, ast.Div) and _days(node):
            yield f"line {node.lineno}: a true division of days"


def _days(division: ast.BinOp) -> bool:
    """Whether a division is of plain whole numbers, such as a number of days."""
    return any(
        isinstance(side, ast.Attribute) and side.attr == "days" for side in (division.left, division.right)
    )


@pytest.mark.parametrize("path", engine(), ids=name_of)
def test_no_float_in_the_engine(path: Path) -> None:
    assert list(floats(parsed(path))) == []
    assert not FLOAT_LIBRARIES & {name.split(".")[0] for name in imports(path)}


def test_a_float_would_be_found() -> None:
    for line in ("x = 0.5", "x = float(y)", "x = (a - b).days / 365", "x = d.total_seconds()"):
        assert list(floats(ast.parse(line))), line
    assert list(floats(ast.parse("isinstance(x, float)"))) == []


def test_nothing_of_the_engine_knows_the_clock() -> None:
    for path in engine():
        text = path.read_text(encoding="utf-8")
        for clock in ("date.today", "datetime.now", ".utcnow"):
            assert clock not in text, name_of(path)
