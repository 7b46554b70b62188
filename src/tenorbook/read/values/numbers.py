"""Amounts and counts, as numbers or as the texts that people and exports write.

A text is read only in a form that has one meaning under the book's decimal mark; anything else is
refused with the two readings it could have.
"""

import re
import unicodedata
from collections.abc import Callable
from decimal import Decimal

from tenorbook.basis.money import currency_digits
from tenorbook.read.files.grid import Cell, Kind, plain
from tenorbook.read.spellings import section, tidy
from tenorbook.read.values.reading import Reading, Rules, Unreadable, number_of
from tenorbook.terms.book import DecimalMark

_AMOUNT = "enter digits only, such as 1234.50"
_LONGEST = 100
_MOST_DIGITS = 18
_MINUS = re.compile("[\u2212\u2013\u2010\u2011\ufe63\uff0d]")
_APOSTROPHES = re.compile("['\u2018\u2019\u02bc\u00b4`]")
_CODE = re.compile(r"^([A-Za-z]{3})(?=[\d\s(.,-])|(?<=[\d\s).,-])([A-Za-z]{3})$")
_BRACKETED = re.compile(r"\((.*)\)$")
_PLAIN = {
    DecimalMark.POINT: re.compile(r"(\d*)(?:\.(\d*))?$"),
    DecimalMark.COMMA: re.compile(r"(\d*)(?:,(\d*))?$"),
}
_GROUPED = {
    DecimalMark.POINT: re.compile(
        r"(\d{1,3}(?:([ ',])\d{3})(?:\2\d{3})*|\d{1,2}(?:,\d{2})+,\d{3})(?:\.(\d*))?$"
    ),
    DecimalMark.COMMA: re.compile(r"(\d{1,3}(?:([ '.])\d{3})(?:\2\d{3})*)(?:,(\d*))?$"),
}
_FORMAT_SIGN = re.compile(r"\[\$([^\]-]+)(?:-[^\]]*)?\]|\"([^\"]*)\"|(US\$|[€£¥₹₩₪])")


def amount(cell: Cell, rules: Rules) -> Reading[Decimal]:
    """An amount in currency units, of either sign.

    Raises:
        Unreadable: not a number, or a text with two meanings.
    """
    number = number_of(cell)
    if cell.kind is Kind.PERCENT:
        raise Unreadable("is a percentage, not an amount", _AMOUNT)
    if number is not None:
        return Reading(number, signs=_format_signs(cell.number_format))
    if not cell.text:
        raise Unreadable("is not an amount", _AMOUNT)
    bare, signs = _without_currency(clean(cell.text))
    return Reading(signed_number(bare, rules), signs=signs)


def at_least_zero(cell: Cell, rules: Rules) -> Reading[Decimal]:
    """An amount that may be 0 and may not be negative."""
    reading = amount(cell, rules)
    if reading.value < 0:
        raise Unreadable("is negative", "enter it without the minus sign or brackets")
    return reading


def more_than_zero(remedy: str) -> Callable[[Cell, Rules], Reading[Decimal]]:
    """A parser of amounts that must be positive; `remedy` says what would do instead of 0 or less."""

    def parse(cell: Cell, rules: Rules) -> Reading[Decimal]:
        reading = amount(cell, rules)
        if reading.value <= 0:
            raise Unreadable("is negative" if reading.value < 0 else "is 0", remedy)
        return reading

    return parse


def count(cell: Cell, rules: Rules) -> Reading[int]:
    """A whole number, 0 or more."""
    if cell.kind is Kind.PERCENT or (number_of(cell) is None and not cell.text):
        raise Unreadable("is not a whole number", "enter a whole number, such as 12")
    number = number_of(cell)
    value = signed_number(clean(cell.text), rules) if number is None else number
    if value != int(value) or value < 0:
        raise Unreadable("is not a whole number", "enter a whole number, such as 12")
    return Reading(int(value))


def clean(text: str) -> str:
    """A text with one kind of space, minus and apostrophe; nothing that is read is very long."""
    if len(tidy(text)) > _LONGEST:
        raise Unreadable("is a text of more than a line", "enter the value alone")
    folded = unicodedata.normalize("NFKC", _APOSTROPHES.sub("'", text))
    return _MINUS.sub("-", tidy(folded))


def signed_number(text: str, rules: Rules) -> Decimal:
    """A number with at most one sign: a minus on either end, or brackets around it."""
    negative = False
    bracketed = _BRACKETED.match(text)
    if bracketed:
        text, negative = bracketed[1].strip(), True
    elif text.startswith(("-", "+")):
        text, negative = text[1:].strip(), text.startswith("-")
    elif text.endswith("-"):
        text, negative = text[:-1].strip(), True
    value = unsigned_number(text, rules.decimal_mark)
    return -value if negative and value else value


def unsigned_number(text: str, mark: DecimalMark) -> Decimal:
    """Digits, with thousands marks in the right places or none, and one decimal mark or none."""
    if sum(character.isdigit() for character in text) > _MOST_DIGITS:
        raise Unreadable("has too many digits", _AMOUNT)
    value = _parse(text, mark)
    if value is not None:
        return value
    other = DecimalMark.COMMA if mark is DecimalMark.POINT else DecimalMark.POINT
    elsewhere = _parse(text, other)
    if elsewhere is None:
        raise Unreadable("is not a number", _AMOUNT)
    raise Unreadable(
        f"is not a number with a decimal {mark}",
        f"write it as {_shown(elsewhere, mark)}, or set Decimal mark to {other} on the sheet Settings",
    )


def _shown(value: Decimal, mark: DecimalMark) -> str:
    return plain(value) if mark is DecimalMark.POINT else plain(value).replace(".", ",")


def _parse(text: str, mark: DecimalMark) -> Decimal | None:
    grouped = _GROUPED[mark].match(text)
    if grouped:
        return Decimal(f"{re.sub('[^0-9]', '', grouped[1])}.{grouped[3] or '0'}")
    simple = _PLAIN[mark].match(text)
    if simple and (simple[1] or simple[2]):
        return Decimal(f"{simple[1] or '0'}.{simple[2] or '0'}")
    return None


def _without_currency(text: str) -> tuple[str, frozenset[str]]:
    """A text without its currency sign or code, and the codes that either allows."""
    for sign, codes in sorted(section("currency_signs").items(), key=lambda pair: -len(pair[0])):
        if sign in text:
            return _tight(text.replace(sign, " ", 1)), frozenset(codes)
    match = _CODE.search(text)
    if match:
        code = (match[1] or match[2]).upper()
        if currency_digits(code) is not None:
            return _tight(text[: match.start()] + text[match.end() :]), frozenset((code,))
    return text, frozenset()


def _tight(text: str) -> str:
    """Spaces between a sign and its digits closed: `- 1,200` and `( 1,200 )` after a currency is gone."""
    return re.sub(r"(?<=[-+(])\s+|\s+(?=[-)])", "", text.strip())


def _format_signs(number_format: str) -> frozenset[str]:
    """The currency codes that a number format's sign allows; a lone dollar says nothing."""
    for match in _FORMAT_SIGN.finditer(number_format):
        sign = next(part for part in match.groups() if part).strip()
        if sign == "$":
            continue
        codes = section("currency_signs").get(sign)
        if codes is not None:
            return frozenset(codes)
        if len(sign) == 3 and sign.isalpha() and currency_digits(sign.upper()) is not None:
            return frozenset((sign.upper(),))
    return frozenset()
