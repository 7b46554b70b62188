"""Words that name a convention, read by the spelling table."""

import re
from collections.abc import Callable
from difflib import get_close_matches
from enum import Enum
from typing import TypeVar

from tenorbook.basis.conventions import PaymentChange, PaymentRounding
from tenorbook.basis.money import currency_digits
from tenorbook.basis.problem import Severity
from tenorbook.read.files.grid import Cell, Kind
from tenorbook.read.spellings import is_canonical, lookup, normal, section, tidy
from tenorbook.read.values.numbers import clean, more_than_zero, unsigned_number
from tenorbook.read.values.reading import Reading, Remark, Rules, Unreadable, number_of, warn
from tenorbook.terms.loan import PaymentStep

E = TypeVar("E", bound=Enum)
_KEPT = 10**15
"""Numbers from here on have lost digits: a spreadsheet keeps fifteen."""
_PADDED = re.compile(r"0{2,}$")
"""A number format that shows leading zeros."""


def word(convention: type[E], header: str) -> Callable[[Cell, Rules], Reading[E]]:
    """A parser for the words of one convention, listed in the spelling table under its header."""

    def parse(cell: Cell, _: Rules) -> Reading[E]:
        shown = _spelled(cell)
        canonical = lookup(shown, "words", header)
        if canonical is None:
            raise Unreadable("is a word that is not known here", _choices(shown, header))
        return Reading(_member(convention, canonical), _other_spelling(shown, canonical))

    return parse


def _member(convention: type[E], canonical: str) -> E:
    """The member whose value is a canonical word; the spelling table knows no word that is none."""
    return next(member for member in convention if member.value == canonical)


def _spelled(cell: Cell) -> str:
    """The text of a cell; TRUE and FALSE are words here."""
    return cell.shown if cell.kind is Kind.BOOL else tidy(cell.text) or cell.shown


def _choices(shown: str, header: str) -> str:
    """The words that would do, the likeliest one alone where one is close."""
    ambiguous = lookup(shown, "ambiguous", header) if header in section("ambiguous") else None
    if ambiguous is not None:
        return f"enter {ambiguous}"
    words = list(section("words", header))
    close = get_close_matches(normal(shown), [normal(word) for word in words], 1, 0.75)
    if close:
        return f"enter {next(word for word in words if normal(word) == close[0])}, if that is meant"
    return f"enter one of: {', '.join(words)}"


def _other_spelling(shown: str, canonical: str) -> tuple[Remark, ...]:
    if is_canonical(shown, canonical):
        return ()
    return (Remark(Severity.NOTE, f'"{shown}" is read as {canonical}', once=True),)


def yes_or_no(cell: Cell, _: Rules) -> Reading[bool]:
    """A yes or a no; TRUE and FALSE count."""
    shown = _spelled(cell)
    canonical = lookup(shown, "words", "Yes or no")
    if canonical is None:
        raise Unreadable("is neither yes nor no", "enter yes or no")
    return Reading(canonical == "yes")


def free_text(cell: Cell, _: Rules) -> Reading[str]:
    """Any text; a number or a date as it is shown."""
    return Reading(tidy(cell.text) or cell.shown)


def identifier(cell: Cell, _: Rules) -> Reading[str]:
    """A Loan ID: text as it stands, a number as its digits, with the leading zeros its format shows."""
    if cell.kind is Kind.BOOL:
        raise Unreadable("is not a Loan ID", "enter the loan's number or name as text")
    if cell.kind is Kind.DATE:
        remark = warn(
            "is a date to the spreadsheet program",
            "if it is a number such as 2026-01, format the cell as text",
        )
        return Reading(cell.shown, (remark,))
    number = number_of(cell)
    if number is not None and abs(number) >= _KEPT:
        raise Unreadable(
            "is a number of more digits than a spreadsheet keeps", "format the cell as text and type it again"
        )
    if number is not None and _PADDED.match(cell.number_format):
        return Reading(cell.shown.zfill(len(cell.number_format)))
    return free_text(cell, _)


def currency(cell: Cell, _: Rules) -> Reading[str]:
    """An ISO 4217 code."""
    code = tidy(cell.text).upper()
    if len(code) == 3 and currency_digits(code) is not None:
        return Reading(code)
    raise Unreadable("is not a currency code", "enter the three letters of ISO 4217, such as USD")


def payment_step(cell: Cell, rules: Rules) -> Reading[PaymentStep]:
    """`nearest`, `up`, `down`, each with a step after it if there is one: `up 1.00`."""
    shown = clean(_spelled(cell))
    name, _, step = shown.rpartition(" ")
    if not name or not step[:1].isdigit():
        name, step = shown, ""
    canonical = lookup(name, "words", "Payment rounding")
    if canonical is None:
        raise Unreadable(
            "is a word that is not known here",
            f"{_choices(name, 'Payment rounding')}, and a step if any: up 1.00",
        )
    size = unsigned_number(step, rules.decimal_mark) if step else None
    if size == 0:
        raise Unreadable("rounds to a step of 0", "enter a step above 0, such as up 1.00")
    return Reading(PaymentStep(_member(PaymentRounding, canonical), size), _other_spelling(name, canonical))


def payment_change(cell: Cell, rules: Rules) -> Reading[object]:
    """`re-amortize`, `keep`, or the new payment."""
    canonical = lookup(cell.text, "words", "Payment") if cell.text else None
    if canonical is not None:
        return Reading(_member(PaymentChange, canonical), _other_spelling(cell.text, canonical))
    try:
        return more_than_zero("enter the new payment, re-amortize or keep")(cell, rules)
    except Unreadable as fault:
        remedy = "enter re-amortize, keep, or the new payment as an amount"
        raise Unreadable(
            fault.problem.replace("is not a number", "is neither a known word nor an amount"), remedy
        ) from fault
