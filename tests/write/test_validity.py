"""What a spreadsheet program would offer to repair, checked by ourselves."""

import posixpath
import re
import zipfile
from collections.abc import Iterator
from datetime import datetime

import pytest
from lxml import etree

from golden.books import kinds
from tenorbook.jobs.outputs import write_schedules

MAIN = "{http://schemas.openxmlformats.org/spreadsheetml/2006/main}"
RELATION = "{http://schemas.openxmlformats.org/officeDocument/2006/relationships}id"
ORDER = re.findall(
    r"\w+",
    """sheetPr dimension sheetViews sheetFormatPr cols sheetData sheetCalcPr sheetProtection protectedRanges
    scenarios autoFilter sortState dataConsolidate customSheetViews mergeCells phoneticPr
    conditionalFormatting dataValidations hyperlinks printOptions pageMargins pageSetup headerFooter
    rowBreaks colBreaks customProperties cellWatches ignoredErrors smartTags drawing legacyDrawing
    legacyDrawingHF picture oleObjects controls webPublishItems tableParts extLst""",
)
"""The children of a worksheet, in the order of the schema (ECMA-376, CT_Worksheet)."""


@pytest.fixture(scope="module")
def parts(tmp_path_factory: pytest.TempPathFactory) -> dict[str, bytes]:
    folder = tmp_path_factory.mktemp("book")
    (path,) = write_schedules(kinds(), folder, "book", now=datetime(2026, 1, 2)).paths
    with zipfile.ZipFile(path) as archive:
        assert archive.testzip() is None
        assert len(set(archive.namelist())) == len(archive.namelist())
        return {name: archive.read(name) for name in archive.namelist()}


def sheets(parts: dict[str, bytes]) -> Iterator[tuple[str, etree._Element]]:
    for name, content in parts.items():
        if name.startswith("xl/worksheets/sheet"):
            yield name, etree.fromstring(content)


def test_a_sheet_has_its_elements_in_order(parts: dict[str, bytes]) -> None:
    for _, sheet in sheets(parts):
        found = [ORDER.index(str(child.tag).removeprefix(MAIN)) for child in sheet]
        assert found == sorted(found)


def test_every_part_has_a_content_type(parts: dict[str, bytes]) -> None:
    types = etree.fromstring(parts["[Content_Types].xml"])
    named = {str(each.get("PartName")).lstrip("/") for each in types if each.get("PartName")}
    endings = {each.get("Extension") for each in types if each.get("Extension")}
    assert named <= set(parts)
    for name in set(parts) - {"[Content_Types].xml"}:
        assert name in named or name.rpartition(".")[2] in endings


def test_every_relation_leads_somewhere(parts: dict[str, bytes]) -> None:
    for name in (name for name in parts if name.endswith(".rels")):
        folder, file = posixpath.split(name.replace("_rels/", "").removesuffix(".rels"))
        relations = etree.fromstring(parts[name])
        for each in relations:
            if each.get("TargetMode") != "External":
                target = str(each.get("Target"))
                inside = target.lstrip("/") if target.startswith("/") else posixpath.join(folder, target)
                assert posixpath.normpath(inside) in parts
        if file:
            used = re.findall(rb'r:(?:id|embed)="(\w+)"', parts[posixpath.join(folder, file)])
            assert {each.decode() for each in used} <= {each.get("Id") for each in relations}
            assert used


def test_names_are_unique_on_their_sheets_and_lead_to_cells(parts: dict[str, bytes]) -> None:
    workbook = etree.fromstring(parts["xl/workbook.xml"])
    titles = {str(sheet.get("name")) for sheet in workbook.iter(f"{MAIN}sheet")}
    names = [
        (each.get("name"), each.get("localSheetId"), each.text)
        for each in workbook.iter(f"{MAIN}definedName")
    ]
    assert len({(str(name).lower(), sheet) for name, sheet, _ in names}) == len(names)
    for _, sheet, text in names:
        assert sheet is not None
        found = re.fullmatch(r"'?(.+?)'?!(\$[A-Z]+)?(\$\d+)(:(\$[A-Z]+)?\$\d+)?", str(text))
        assert found is not None, text
        assert found[1] in titles


def test_formulas_use_no_name_that_is_not_there(parts: dict[str, bytes]) -> None:
    workbook = etree.fromstring(parts["xl/workbook.xml"])
    names = {str(each.get("name")) for each in workbook.iter(f"{MAIN}definedName")}
    for _, sheet in sheets(parts):
        for formula in sheet.iter(f"{MAIN}f"):
            plain = re.sub(r'"[^"]*"|\'[^\']*\'!|\b[A-Z]+\(', " ", str(formula.text))
            words = {
                word for word in re.findall(r"[A-Za-z_]\w+", plain) if not re.fullmatch(r"[A-Z]+\d+", word)
            }
            assert words <= {*names, "Maturities", "E"}, formula.text


def test_links_and_conditions_point_at_what_is_there(parts: dict[str, bytes]) -> None:
    styles = etree.fromstring(parts["xl/styles.xml"])
    conditions = len(styles.find(f"{MAIN}dxfs"))
    titles = {str(s.get("name")) for s in etree.fromstring(parts["xl/workbook.xml"]).iter(f"{MAIN}sheet")}
    links = 0
    for _, sheet in sheets(parts):
        for rule in sheet.iter(f"{MAIN}cfRule"):
            assert int(rule.get("dxfId")) < conditions
        for link in sheet.iter(f"{MAIN}hyperlink"):
            links += 1
            assert str(link.get("location")).rpartition("!")[0].strip("'") in titles
        breaks = sheet.find(f"{MAIN}rowBreaks")
        assert breaks is None or int(breaks.get("count")) == len(breaks)
    assert links > 10
