"""Sheet names that every spreadsheet program takes."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from tenorbook.tables.names import LIMIT, SheetNames, units

TEXTS = st.one_of(
    st.text(max_size=60),
    st.sampled_from(
        ["History", "HISTORY", "", "'", "''a'", "a/b", "A/B", "[x]", "\U0001f4b6" * 20, "ẞ", "ß", "SS"]
    ),
)


@given(st.lists(TEXTS, max_size=30))
def test_names_keep_the_rules_and_are_unique(wanted: list[str]) -> None:
    names = SheetNames()
    taken = [names.take(text) for text in wanted]
    for name in taken:
        assert 1 <= units(name) <= LIMIT
        assert not set(name) & set("/\\?*:[]!'")
        assert name == name.strip()
        assert name.lower() != "history"
    assert len({name.lower() for name in taken}) == len({name.upper() for name in taken}) == len(taken)


@pytest.mark.parametrize(
    ("wanted", "expected"),
    [
        (["Loan 7"], ["Loan 7"]),
        (["a", "A", "a"], ["a", "A (2)", "a (3)"]),
        (["x" * 40, "x" * 41], ["x" * 31, "x" * 27 + " (2)"]),
        (["a/b:c"], ["a-b-c"]),
        (["  "], ["Loan"]),
        (["History"], ["History (2)"]),
        (["O'Brien"], ["O\u2019Brien"]),
    ],
)
def test_names(wanted: list[str], expected: list[str]) -> None:
    names = SheetNames()
    assert [names.take(text) for text in wanted] == expected
