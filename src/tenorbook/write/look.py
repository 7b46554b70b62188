"""How the workbooks look: one typeface, few sizes, one accent colour, thin rules.

A style is asked for by what it is for; each is made once a workbook and known by its number.
"""

from typing import Any

from tenorbook.tables.table import Role, Tone
from tenorbook.write.design import Design

_STANDARD = Design()
FONT, INK, QUIET = _STANDARD.font, _STANDARD.ink, _STANDARD.quiet
ACCENT, TINT = _STANDARD.accent, _STANDARD.tint
RULE = "#C9D2D2"
HAIR = "#E6EBEA"
ALARM = "#B3261E"
"""Only for FAIL, which is a word as well."""

RATE = "0.00######%"
INTEGER = "#,##0;-#,##0;0"

_RIGHT = (Role.AMOUNT, Role.BALANCE, Role.RATE, Role.INTEGER)


def number_format(role: Role, digits: int, design: Design = _STANDARD) -> str:
    """The number format of a role; an amount shows `digits` decimals.

    A rate shows as many decimals as it has, at least two; with `digits`, exactly so many. In brackets a
    negative amount keeps its decimal mark under those above it.
    """
    places = "0." + "0" * digits if digits else "0"
    after = "_)" if design.negative == "brackets" else ""
    below = f"(#,##{places})" if after else f"-#,##{places}"
    match role:
        case Role.AMOUNT:
            return f'#,##{places}{after};{below};"{design.nothing}"{after}'
        case Role.BALANCE:
            return f"#,##{places}{after};{below};{places}{after}"
        case Role.RATE:
            return f"{places}%" if digits else RATE
        case Role.DATE:
            return design.date
        case Role.INTEGER:
            return INTEGER
        case _:
            return "General"


class Look:
    """The styles of one workbook.

    Args:
        workbook: the XlsxWriter workbook that owns the formats.
        design: the chosen look.
    """

    def __init__(self, workbook: Any, design: Design = _STANDARD) -> None:
        self._workbook = workbook
        self.design = design
        self._styles: dict[tuple[Any, ...], int] = {}
        self._tones, self._named = _tones(design), _named(design)
        self.alarm = workbook.add_format({"font_color": ALARM, "bold": True})

    def named(self, name: str) -> int:
        """The style of a title, subtitle, link, heading, label, line, quiet line, or verdict of a check."""
        return self._style(("named", name), self._named[name])

    def header(self, role: Role, wrap: bool = True) -> int:
        """The style of a column's header; headers of numbers stand to the right, over them."""
        accent = self.design.accent
        properties = {
            "bold": True,
            "font_color": accent,
            "bg_color": self.design.tint,
            "top": 1,
            "top_color": accent,
            "bottom": 1,
            "bottom_color": accent,
            "align": "right" if role in _RIGHT else "left",
            "indent": 1,
            "valign": "vcenter",
            "text_wrap": wrap,
        }
        return self._style(("header", role in _RIGHT), properties)

    def body(self, role: Role, digits: int, tone: Tone, wrap: bool = False, link: bool = False) -> int:
        """The style of a table's cell."""
        right = role in _RIGHT
        key = ("body", role, digits if right else 0, tone, wrap, link)
        if key in self._styles:
            return self._styles[key]
        form = number_format(role, digits, self.design)
        properties = dict(self._tones[tone], num_format=form, valign="vcenter", indent=1)
        properties |= {"align": "right" if right else "left"}
        if wrap:
            properties["text_wrap"] = True
        if link:
            properties |= self._named["link"]
        return self._style(key, properties)

    def value(self, role: Role, digits: int) -> int:
        """The style of a labelled value: to the right, so that the figures of a block line up."""
        key = ("value", role, digits if role in _RIGHT else 0)
        form = number_format(Role.BALANCE if role is Role.AMOUNT else role, digits, self.design)
        return self._style(key, self._named["label"] | {"font_color": self.design.ink} | _value(form))

    def _style(self, key: tuple[Any, ...], properties: dict[str, Any]) -> int:
        if key not in self._styles:
            chosen = self.design
            base = {"font_name": chosen.font, "font_size": chosen.text_size, "font_color": chosen.ink}
            made = self._workbook.add_format(base | properties)
            self._styles[key] = made._get_xf_index()
        return self._styles[key]


def _value(form: str) -> dict[str, Any]:
    return {"align": "right", "indent": 1, "num_format": form}


def _tones(design: Design) -> dict[Tone, dict[str, Any]]:
    """What sets the rows of a table apart."""
    thin = {"top": 1, "top_color": RULE, "bottom": 1, "bottom_color": RULE}
    return {
        Tone.PLAIN: {"bottom": 1, "bottom_color": HAIR},
        Tone.SPECIAL: {"bottom": 1, "bottom_color": HAIR, "bg_color": design.tint, "italic": True},
        Tone.SUBTOTAL: {"bold": True, **thin},
        Tone.TOTAL: {"bold": True, "top": 1, "top_color": design.accent, "bottom": 6}
        | {"bottom_color": design.accent},
    }


def _named(design: Design) -> dict[str, dict[str, Any]]:
    accent, small = design.accent, design.text_size - 1
    heading = {"bold": True, "font_size": design.text_size + 1, "font_color": accent}
    return {
        "title": {"bold": True, "font_size": design.title_size, "font_color": accent},
        "subtitle": {"font_size": design.text_size + 1, "font_color": design.quiet},
        "link": {"font_color": accent, "underline": 1},
        "heading": heading | {"bottom": 1, "bottom_color": accent, "indent": 1},
        "right heading": {"font_color": design.quiet, "align": "right", "indent": 1, "bottom": 1}
        | {"bottom_color": accent},
        "label": {"font_color": design.quiet, "bottom": 1, "bottom_color": HAIR, "indent": 1},
        "line": {},
        "quiet": {"font_color": design.quiet, "font_size": small},
        "verdict": {"bold": True, "font_color": accent, "bottom": 1, "bottom_color": HAIR, "align": "right"}
        | {"indent": 1},
    }
