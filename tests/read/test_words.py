"""Words, and the spelling table behind them."""

from collections.abc import Iterator
from enum import Enum

import pytest

from read.cells import TRUE, D, number, text
from tenorbook.basis import conventions
from tenorbook.basis.conventions import Frequency, MonthEnd, PaymentChange, PaymentRounding
from tenorbook.read import columns
from tenorbook.read.files.grid import Cell
from tenorbook.read.spellings import lookup, month_number, normal, section
from tenorbook.read.values.reading import Rules, Unreadable
from tenorbook.read.values.words import currency, payment_change, payment_step, word, yes_or_no
from tenorbook.terms.loan import PaymentStep

RULES = Rules()
CONVENTIONS: dict[str, type[Enum]] = {
    "Side": conventions.Side,
    "Frequency": conventions.Frequency,
    "Timing": conventions.Timing,
    "Repayment": conventions.Repayment,
    "Day count": conventions.DayCount,
    "First period": conventions.FirstPeriod,
    "Long first period": conventions.LongFirst,
    "Payment basis": conventions.PaymentBasis,
    "Payment rounding": conventions.PaymentRounding,
    "Interest rounding": conventions.InterestRounding,
    "Month-end": conventions.MonthEnd,
    "Unpaid interest": conventions.UnpaidInterest,
    "Effect": conventions.ExtraEffect,
    "Applies to": conventions.AppliesTo,
    "Payment": conventions.PaymentChange,
}


@pytest.mark.parametrize("header", CONVENTIONS)
def test_every_convention_has_its_words(header: str) -> None:
    assert list(section("words", header)) == [member.value for member in CONVENTIONS[header]]


def sections() -> Iterator[tuple[str, ...]]:
    yield ("sheets",)
    yield ("settings",)
    yield from (("headers", kind) for kind in section("headers"))
    yield from (("words", header) for header in section("words"))
    yield from (("ambiguous", header) for header in section("ambiguous"))


@pytest.mark.parametrize("path", list(sections()), ids="/".join)
def test_no_spelling_means_two_things(path: tuple[str, ...]) -> None:
    spellings = [
        normal(spelling) or spelling
        for canonical, others in section(*path).items()
        for spelling in {normal(one) or one for one in (canonical, *others)}
    ]
    assert len(spellings) == len(set(spellings))


@pytest.mark.parametrize("header", section("ambiguous"))
def test_no_ambiguous_word_is_read(header: str) -> None:
    for remedy, words in section("ambiguous", header).items():
        assert [lookup(spelling, "words", header) for spelling in words] == [None] * len(words), remedy


def test_every_field_is_a_known_header() -> None:
    assert set(columns.LOANS) <= set(section("headers", "Loans"))
    assert set(columns.EXTRA_PAYMENTS) <= set(section("headers", "Extra payments"))
    assert set(columns.RATE_CHANGES) <= set(section("headers", "Rate changes"))


@pytest.mark.parametrize(
    ("written", "frequency", "noted"),
    [
        ("monthly", Frequency.MONTHLY, False),
        (" Monthly ", Frequency.MONTHLY, False),
        ("EVERY 2 WEEKS", Frequency.EVERY_2_WEEKS, False),
        ("biweekly", Frequency.EVERY_2_WEEKS, True),
        ("semi-annually", Frequency.TWICE_A_YEAR, True),
        ("Half-yearly", Frequency.TWICE_A_YEAR, True),
        ("annual", Frequency.YEARLY, True),
    ],
)
def test_frequencies(written: str, frequency: Frequency, noted: bool) -> None:
    reading = word(Frequency, "Frequency")(text(written), RULES)
    assert reading.value is frequency
    assert [remark.problem for remark in reading.remarks] == [f'"{written}" is read as {frequency}'] * noted


@pytest.mark.parametrize(
    ("written", "remedy"),
    [
        ("montly", "enter monthly, if that is meant"),
        ("bi-monthly", "enter twice a month or every 2 months"),
        ("biannual", "enter twice a year or yearly"),
        (
            "sometimes",
            "enter one of: weekly, every 2 weeks, every 4 weeks, twice a month, monthly, every 2 months, "
            "quarterly, every 4 months, twice a year, yearly, at maturity",
        ),
    ],
)
def test_unknown_words(written: str, remedy: str) -> None:
    with pytest.raises(Unreadable) as refused:
        word(Frequency, "Frequency")(text(written), RULES)
    assert (refused.value.problem, refused.value.remedy) == ("is a word that is not known here", remedy)


def test_a_truth_value_is_a_word() -> None:
    assert word(MonthEnd, "Month-end")(TRUE, RULES).value is MonthEnd.YES
    assert yes_or_no(TRUE, RULES).value is True


@pytest.mark.parametrize(("written", "value"), [("Yes", True), ("n", False), ("X", True)])
def test_yes_or_no(written: str, value: bool) -> None:
    assert yes_or_no(text(written), RULES).value is value


def test_neither_yes_nor_no() -> None:
    with pytest.raises(Unreadable, match="is neither yes nor no"):
        yes_or_no(text("perhaps"), RULES)


@pytest.mark.parametrize(
    ("written", "step"),
    [
        ("nearest", PaymentStep()),
        ("Up", PaymentStep(PaymentRounding.UP)),
        ("up 1.00", PaymentStep(PaymentRounding.UP, D("1.00"))),
        ("round down 0.05", PaymentStep(PaymentRounding.DOWN, D("0.05"))),
    ],
)
def test_payment_rounding(written: str, step: PaymentStep) -> None:
    assert payment_step(text(written), RULES).value == step


@pytest.mark.parametrize("written", ["sideways", "up zero", "up 0", "1.00"])
def test_what_is_no_payment_rounding(written: str) -> None:
    with pytest.raises(Unreadable, match=r"not known here|step of 0"):
        payment_step(text(written), RULES)


@pytest.mark.parametrize(
    ("cell", "value"),
    [
        (text("re-amortize"), PaymentChange.REAMORTIZE),
        (text("Keep"), PaymentChange.KEEP),
        (number("1800"), D(1800)),
        (text("$1,800.00"), D("1800.00")),
    ],
)
def test_payment_changes(cell: Cell, value: object) -> None:
    assert payment_change(cell, RULES).value == value


@pytest.mark.parametrize(
    ("cell", "problem"),
    [
        (text("guess"), "is neither a known word nor an amount"),
        (number("0"), "is 0"),
        (number("-5"), "is negative"),
    ],
)
def test_what_is_no_payment_change(cell: Cell, problem: str) -> None:
    with pytest.raises(Unreadable) as refused:
        payment_change(cell, RULES)
    assert refused.value.problem == problem


@pytest.mark.parametrize("written", ["US", "XYZ", "dollars", "XAU"])
def test_what_is_no_currency(written: str) -> None:
    with pytest.raises(Unreadable, match="is not a currency code"):
        currency(text(written), RULES)


@pytest.mark.parametrize(
    ("written", "number"),
    [
        ("jan", 1),
        ("Sept", 9),
        ("September", 9),
        ("DECEMBER", 12),
        ("ja", None),
        ("janet", None),
        ("mars", None),
    ],
)
def test_month_names(written: str, number: int | None) -> None:
    assert month_number(written) == number
