"""The logo at the top right of a sheet."""

from typing import Any

from tenorbook.write.design import Design
from tenorbook.write.heights import Heights
from tenorbook.write.layout import SheetPlace
from tenorbook.write.page import pixels

_ROWS = 3
"""Rows above a sheet's first part; the logo is as tall as they are."""

_DPI = 96
_PIXELS_PER_POINT = _DPI / 72
_WIDEST = 240
"""Of a logo, in pixels."""


def insert_logo(target: Any, place: SheetPlace, heights: Heights, design: Design) -> None:
    """Puts the logo above the last printed columns, as large as the room above the first part lets it be.

    Args:
        target: XlsxWriter's worksheet.
        place: where everything on the sheet stands.
        heights: of its rows.
        design: the chosen look; it has a logo.
    """
    from xlsxwriter.image import Image

    picture = Image(str(design.logo))
    width, height = picture.width * _DPI / picture.x_dpi, picture.height * _DPI / picture.y_dpi
    room = heights.of(1, _ROWS) * _PIXELS_PER_POINT - 6
    scale = min(room / height, _WIDEST / width)
    left = int(pixels(place, design) - width * scale) - 4
    for row in range(1, _ROWS + 1):
        target.set_row(row - 1, heights.of(row, row))
    options = {"x_scale": scale, "y_scale": scale, "x_offset": left, "y_offset": 2, "object_position": 3}
    target.insert_image(0, 0, str(design.logo), {**options, "description": "Logo"})
