"""How the workbooks look: one typeface, few sizes, one accent colour, thin rules.

A style is asked for by what it is for; each is made once a workbook and known by its number.
"""

from typing import Any

from tenorbook.tables.table import Role, Tone

FONT = "Calibri"
INK = "#1F2A30"
QUIET = "#66747B"
ACCENT = "#1D5C63"
TINT = "#F1F5F4"
RULE = "#C9D2D2"
HAIR = "#E6EBEA"
SECOND = "#C58B3B"
"""Only in charts, beside the accent."""

DATE = "dd mmm yyyy"
RATE = "0.00######%"
INTEGER = "#,##0;-#,##0;0"
DASH = '"\u2013"'

_RIGHT = (Role.AMOUNT, Role.BALANCE, Role.RATE, Role.INTEGER)
_TONES: dict[Tone, dict[str, Any]] = {
    Tone.PLAIN: {"bottom": 1, "bottom_color": HAIR},
    Tone.SPECIAL: {"bottom": 1, "bottom_color": HAIR, "bg_color": TINT, "italic": True},
    Tone.SUBTOTAL: {"bold": True, "top": 1, "top_color": RULE, "bottom": 1, "bottom_color": RULE},
    Tone.TOTAL: {"bold": True, "top": 1, "top_color": ACCENT, "bottom": 6, "bottom_color": ACCENT},
}
_NAMED: dict[str, dict[str, Any]] = {
    "title": {"bold": True, "font_size": 16, "font_color": ACCENT},
    "subtitle": {"font_size": 11, "font_color": QUIET},
    "link": {"font_color": ACCENT, "underline": 1},
    "heading": {"bold": True, "font_size": 11, "font_color": ACCENT, "bottom": 1, "bottom_color": ACCENT},
    "label": {"font_color": QUIET},
    "line": {},
    "quiet": {"font_color": QUIET, "font_size": 9},
}


def number_format(role: Role, digits: int) -> str:
    """The number format of a role; an amount shows `digits` decimals, a minus before negatives.

    A rate shows as many decimals as it has, at least two; with `digits`, exactly so many.
    """
    places = "0." + "0" * digits if digits else "0"
    match role:
        case Role.AMOUNT:
            return f"#,##{places};-#,##{places};{DASH}"
        case Role.BALANCE:
            return f"#,##{places};-#,##{places};{places}"
        case Role.RATE:
            return f"{places}%" if digits else RATE
        case Role.DATE:
            return DATE
        case Role.INTEGER:
            return INTEGER
        case _:
            return "General"


class Look:
    """The styles of one workbook.

    Args:
        workbook: the XlsxWriter workbook that owns the formats.
    """

    def __init__(self, workbook: Any) -> None:
        self._workbook = workbook
        self._styles: dict[tuple[Any, ...], int] = {}

    def named(self, name: str) -> int:
        """The style of a title, subtitle, link, heading, label, line or quiet line."""
        return self._style(("named", name), _NAMED[name])

    def header(self, role: Role) -> int:
        """The style of a column's header; headers of numbers stand to the right, over them."""
        align = "right" if role in _RIGHT else "left"
        properties = {
            "bold": True,
            "font_color": "#FFFFFF",
            "bg_color": ACCENT,
            "align": align,
            "indent": 0 if role in _RIGHT else 1,
            "valign": "vcenter",
            "text_wrap": True,
        }
        return self._style(("header", align), properties)

    def body(self, role: Role, digits: int, tone: Tone, wrap: bool = False, link: bool = False) -> int:
        """The style of a table's cell."""
        key = ("body", role, digits if role in _RIGHT else 0, tone, wrap, link)
        properties = dict(_TONES[tone], num_format=number_format(role, digits), valign="top")
        properties |= {"align": "right"} if role in _RIGHT else {"align": "left", "indent": 1}
        if wrap:
            properties["text_wrap"] = True
        if link:
            properties |= _NAMED["link"]
        return self._style(key, properties)

    def value(self, role: Role, digits: int) -> int:
        """The style of a labelled value: to the left, next to its label."""
        key = ("value", role, digits if role in _RIGHT else 0)
        form = number_format(Role.BALANCE if role is Role.AMOUNT else role, digits)
        return self._style(key, {"align": "left", "num_format": form})

    def _style(self, key: tuple[Any, ...], properties: dict[str, Any]) -> int:
        if key not in self._styles:
            base = {"font_name": FONT, "font_size": 10, "font_color": INK}
            made = self._workbook.add_format(base | properties)
            self._styles[key] = made._get_xf_index()
        return self._styles[key]
