"""Small modules, short functions: what can be read in one sitting."""

from pathlib import Path
from statistics import median

import pytest

from repository.tree import body_lines, functions, modules, name_of, parsed

LONGEST_MODULE = 400
LONGEST_FUNCTION = 40
MEDIAN_FUNCTION = 15


@pytest.mark.parametrize("path", modules(), ids=name_of)
def test_a_module_is_short_and_so_are_its_functions(path: Path) -> None:
    assert len(path.read_text(encoding="utf-8").splitlines()) <= LONGEST_MODULE
    long = {function.name: body_lines(function) for function in functions(path)}
    assert {name: lines for name, lines in long.items() if lines > LONGEST_FUNCTION} == {}


def test_half_the_functions_are_shorter_still() -> None:
    sizes = [body_lines(function) for path in modules() for function in functions(path)]
    assert len(sizes) > 300
    assert median(sizes) < MEDIAN_FUNCTION


@pytest.mark.parametrize("path", modules(), ids=name_of)
def test_a_module_says_what_it_is_for(path: Path) -> None:
    first = parsed(path).body[0]
    text = path.read_text(encoding="utf-8")
    assert text.startswith('"""'), first
