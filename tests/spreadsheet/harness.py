"""Opens a workbook in LibreOffice, has it recalculated from scratch, and reads what comes out."""

import shutil
import subprocess
import warnings
from collections.abc import Iterator
from pathlib import Path
from typing import Any, NamedTuple

import pytest

PROFILE = """<?xml version="1.0" encoding="UTF-8"?>
<oor:items xmlns:oor="http://openoffice.org/2001/registry">
<item oor:path="/org.openoffice.Office.Calc/Formula/Load">
<prop oor:name="OOXMLRecalcMode" oor:op="fuse"><value>0</value></prop></item>
</oor:items>
"""
"""A user profile that says: recalculate always on load; the default keeps the stored values."""

needs_soffice = pytest.mark.skipif(
    shutil.which("soffice") is None, reason="LibreOffice (soffice) is not on this machine"
)


class Difference(NamedTuple):
    """A cell whose recalculated value is not the stored one."""

    sheet: str
    cell: str
    stored: Any
    recalculated: Any


def recalculate(path: Path, folder: Path) -> Any:
    """The workbook's values after a full recalculation, as an openpyxl workbook."""
    profile = folder / "profile"
    (profile / "user").mkdir(parents=True, exist_ok=True)
    (profile / "user" / "registrymodifications.xcu").write_text(PROFILE, encoding="utf-8")
    out = folder / "recalculated"
    command = ["soffice", f"-env:UserInstallation={profile.as_uri()}", "--headless", "--convert-to"]
    command += ["xlsx:Calc MS Excel 2007 XML", "--outdir", str(out), str(path)]
    subprocess.run(command, check=True, capture_output=True, timeout=300)
    return _open(out / path.name, data_only=True)


def stored(path: Path) -> Any:
    """The workbook's values as written."""
    return _open(path, data_only=True)


def _open(path: Path, data_only: bool) -> Any:
    """Opens a workbook with openpyxl, which knows neither sparklines nor all charts, and says so."""
    import openpyxl

    with warnings.catch_warnings():
        warnings.filterwarnings("ignore", message="Sparkline Group extension|Unable to read chart")
        return openpyxl.load_workbook(path, data_only=data_only)


def differences(before: Any, after: Any, digits: int = 2) -> Iterator[Difference]:
    """Cells that differ by as much as half a unit of the last digit, or are not of the same type."""
    for sheet in before:
        other = after[sheet.title]
        for row in sheet.iter_rows():
            for cell in row:
                value = other[cell.coordinate].value
                if not _same(cell.value, value, digits):
                    yield Difference(sheet.title, cell.coordinate, cell.value, value)


def _same(stored: Any, value: Any, digits: int) -> bool:
    if isinstance(stored, int | float) and isinstance(value, int | float):
        return abs(stored - value) < 10.0**-digits / 2
    return bool(stored == value) or (stored in (None, "") and value in (None, ""))


def formulas(path: Path) -> Iterator[tuple[str, str, str]]:
    """Sheet, cell and text of every formula."""
    for sheet in _open(path, data_only=False):
        for row in sheet.iter_rows():
            for cell in row:
                if isinstance(cell.value, str) and cell.data_type == "f":
                    yield sheet.title, cell.coordinate, cell.value
