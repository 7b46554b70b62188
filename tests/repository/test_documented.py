"""Every convention says what it means, in fields that can be printed."""

import pytest

from tenorbook.basis import conventions
from tenorbook.basis.conventions import DayCount
from tenorbook.basis.documented import Documented

ENUMS = [
    value
    for value in vars(conventions).values()
    if isinstance(value, type) and issubclass(value, Documented) and value is not Documented
]
MEMBERS = [member for enum in ENUMS for member in enum]


def test_the_enums_are_found() -> None:
    assert len(ENUMS) >= 12
    assert len(MEMBERS) >= 60


@pytest.mark.parametrize("member", MEMBERS, ids=lambda member: f"{type(member).__name__}.{member.name}")
def test_a_member_has_a_rule_in_words(member: Documented) -> None:
    rule, word = member.doc.rule, str(member.value)
    assert rule.endswith(".")
    assert rule[0].isupper()
    assert len(rule) >= 7
    assert rule.strip(".").lower() != word.lower()
    assert member.doc.source
    assert word == word.strip() != ""


@pytest.mark.parametrize("enum", ENUMS)
def test_words_and_other_names_are_not_shared(enum: type[Documented]) -> None:
    words = [str(member.value).casefold() for member in enum]
    assert len(set(words)) == len(words)
    others = [name.casefold() for member in enum for name in member.doc.also]
    assert not set(words) & set(others)


@pytest.mark.parametrize("day_count", list(DayCount))
def test_a_day_count_says_what_stands_above_and_below_the_line(day_count: DayCount) -> None:
    doc = day_count.doc
    assert all((doc.numerator, doc.denominator, doc.source, doc.example))
    assert any(character.isdigit() for character in doc.example)


@pytest.mark.parametrize("enum", ENUMS)
def test_an_enum_says_what_it_is_for(enum: type[Documented]) -> None:
    assert enum.__doc__
    assert enum.__doc__ != Documented.__doc__
