"""The look that a user chooses: what it changes, and what is said of a file that cannot be used."""

import re
import tomllib
import zipfile
import zlib
from dataclasses import fields
from datetime import datetime
from pathlib import Path
from typing import Any

import openpyxl
import pytest
from click.testing import CliRunner

from reports.samples import book_of, note
from samples.make import ROOT
from tenorbook.basis.problem import BookError
from tenorbook.cli.main import main
from tenorbook.jobs.outputs import write_schedules
from tenorbook.tables.table import Role
from tenorbook.write.design import KEYS, Design, read_design
from tenorbook.write.look import number_format

TEMPLATE = ROOT / "templates" / "look.toml"

pytestmark = pytest.mark.filterwarnings("ignore:Sparkline Group extension")


def look(folder: Path, text: str) -> Path:
    path = folder / "my-look.toml"
    path.write_text(text, encoding="utf-8")
    return path


def picture(path: Path) -> Path:
    """A small PNG of one colour."""

    def chunk(kind: bytes, data: bytes) -> bytes:
        return len(data).to_bytes(4, "big") + kind + data + zlib.crc32(kind + data).to_bytes(4, "big")

    header = (40).to_bytes(4, "big") + (20).to_bytes(4, "big") + b"\x08\x02\x00\x00\x00"
    pixels = zlib.compress((b"\x00" + b"\x1d\x5c\x63" * 40) * 20)
    body = chunk(b"IHDR", header) + chunk(b"IDAT", pixels) + chunk(b"IEND", b"")
    path.write_bytes(b"\x89PNG\r\n\x1a\n" + body)
    return path


def test_the_template_is_the_usual_look_and_has_every_key() -> None:
    assert read_design(TEMPLATE) == Design()
    chosen = tomllib.loads(TEMPLATE.read_text(encoding="utf-8"))
    assert {f"{table}.{key}" for table, keys in chosen.items() for key in keys} == set(KEYS)
    assert {each.name for each in fields(Design)} == {key.attribute for key in KEYS.values()}


def test_a_look_changes_what_it_names_and_nothing_else(tmp_path: Path) -> None:
    picture(tmp_path / "logo.png")
    path = look(
        tmp_path,
        '[page]\npaper = "Letter"\nfooter = "Harbour & Sons"\nlogo = "logo.png"\n'
        '[title]\ntext = "Notes of {book}"\n[font]\nname = "Arial"\nsize = 11\nwiden = 1.2\n'
        '[colour]\naccent = "#334455"\n[format]\ndate = "yyyy-mm-dd"\nnegative = "brackets"\n',
    )
    design = read_design(path)
    assert design.ink == Design().ink
    (made,) = write_schedules(book_of([note()]), tmp_path, "b", design=design, now=datetime(2026, 1, 2)).paths
    book: Any = openpyxl.load_workbook(made)
    summary, loan = book["Summary"], book["EQ-101"]
    assert summary["A1"].value == "Notes of book.xlsx"
    assert (summary["A1"].font.name, summary["A1"].font.color.rgb) == ("Arial", "FF334455")
    assert (loan.page_setup.paperSize, loan.oddFooter.left.text) == (1, "Harbour && Sons")
    with zipfile.ZipFile(made) as archive:
        assert "xl/media/image1.png" in archive.namelist()
    dated = next(cell for row in loan.iter_rows() for cell in row if cell.is_date)
    assert dated.number_format == "yyyy-mm-dd"
    assert loan.column_dimensions["C"].width > 25 * 1.2


@pytest.mark.parametrize(
    ("text", "said"),
    [
        ('[page]\npaper = "Legal"', r"page\.paper \[Legal\].*A4 or Letter"),
        ('[page]\npapr = "A4"', r"page\.papr .*no such key.*page\.paper"),
        ('[colour]\naccent = "red"', r"colour\.accent \[red\].*#1D5C63"),
        ("[font]\nsize = 40", r"font\.size \[40\].*7 to 14"),
        ("[font]\nsize = true", r"font\.size \[True\]"),
        ('[format]\ndate = "dd mmm"', r"format\.date \[dd mmm\].*yyyy"),
        ('[format]\nnegative = "red"', r"format\.negative .*minus or brackets"),
        ('[page]\nlogo = "none.png"', r"page\.logo \[none\.png\].*cannot be read"),
        ('paper = "A4"', r"paper \[A4\].*no such key"),
        ("[page", r"is not a TOML file"),
    ],
)
def test_a_bad_value_is_named_with_what_would_do(tmp_path: Path, text: str, said: str) -> None:
    with pytest.raises(BookError) as refused:
        read_design(look(tmp_path, text))
    assert re.search(said, str(refused.value))


def test_every_bad_value_is_named_at_once(tmp_path: Path) -> None:
    with pytest.raises(BookError) as refused:
        read_design(look(tmp_path, '[page]\npaper = 1\n[colour]\nink = ""\ntint = "#12"'))
    assert len(refused.value.problems) == 3


def test_a_logo_that_is_no_picture_is_refused(tmp_path: Path) -> None:
    (tmp_path / "logo.png").write_text("GIF89a")
    with pytest.raises(BookError, match="no PNG or JPEG"):
        read_design(look(tmp_path, '[page]\nlogo = "logo.png"'))


def test_a_look_that_cannot_be_used_writes_nothing(tmp_path: Path) -> None:
    path = look(tmp_path, '[page]\npaper = "Legal"')
    book = ROOT / "samples" / "harbour-book.xlsx"
    arguments = ["schedule", str(book), "--look", str(path), "--out", str(tmp_path / "out")]
    result = CliRunner().invoke(main, arguments)
    assert result.exit_code == 2
    assert not (tmp_path / "out").exists()
    missing = CliRunner().invoke(main, ["schedule", str(book), "--look", str(tmp_path / "none.toml")])
    assert (missing.exit_code, "cannot be read" in missing.stderr) == (2, True)


def test_brackets_keep_the_decimal_marks_under_each_other() -> None:
    assert number_format(Role.AMOUNT, 2, Design(negative="brackets")) == '#,##0.00_);(#,##0.00);"\u2013"_)'
