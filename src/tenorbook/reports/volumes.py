"""The index of a book that comes in volumes: which loans stand in which file."""

from collections.abc import Sequence
from typing import NamedTuple

from tenorbook.reports.result import BookResult
from tenorbook.reports.words import CAUTION
from tenorbook.tables.sheet import Sheet
from tenorbook.tables.table import Column, Role, Table

NAME = "Volumes"


class VolumeEntry(NamedTuple):
    """One volume: its file, the first and last loan in it, and how many there are and were set aside."""

    file: str
    first: str
    last: str
    loans: int
    set_aside: int


def volumes_sheet(result: BookResult, volumes: Sequence[VolumeEntry], front: str, back: str) -> Sheet:
    """The index.

    Args:
        result: of the book.
        volumes: in the order of the book.
        front: name of the sheet of each volume that its link leads to.
        back: name of the sheet the link at the top leads to.
    """
    columns = (
        Column(
            key="file",
            header="Volume",
            role=Role.TEXT,
            values=[each.file for each in volumes],
            width=44,
            links={row: f"{each.file}#{front}" for row, each in enumerate(volumes)},
        ),
        Column(key="first", header="First loan", role=Role.TEXT, values=[e.first for e in volumes], width=24),
        Column(key="last", header="Last loan", role=Role.TEXT, values=[e.last for e in volumes], width=24),
        _count("loans", "Loans", [each.loans for each in volumes]),
        _count("aside", "Of them set aside", [each.set_aside for each in volumes]),
    )
    return Sheet(
        name=NAME,
        title="Volumes",
        subtitle=f"Where the loans of {result.book.name} stand; keep the files in one folder",
        parts=[Table(key="volumes", columns=columns, total_label="Total", label_column="file", frozen=True)],
        back=back,
        print_header=result.book.name,
        print_footer=CAUTION,
    )


def _count(key: str, header: str, values: list[int]) -> Column:
    return Column(key=key, header=header, role=Role.INTEGER, values=values, width=14, totalled=True)
