"""How a workbook's parts get into its zip file: rows kept small until then, and deflated by ISA-L where it is
installed, many times as fast as zlib does it.

XlsxWriter makes the parts and hands them to the standard library's `ZipFile`. Here it is handed one that
puts the rows of our sheets in their places and may use another compressor. The parts inside are the same
bytes either way.
"""

import zlib
from collections.abc import Iterable, Mapping
from functools import partial
from itertools import islice
from typing import Any, cast
from zipfile import ZipFile, ZipInfo

import xlsxwriter.workbook
from xlsxwriter.workbook import Workbook as Writer

try:
    from isal import isal_zlib as _quick
except ImportError:
    _quick = None  # type: ignore[assignment]  # a module where it is installed

ROWS_HERE = "<!--rows-->"
"""Where the rows belong in a sheet's part."""

_LEVEL = 2
"""ISA-L's own middle level: a fifth larger than zlib's usual one, at a tenth of its time."""

_AT_ONCE = 100
"""Pieces of rows that are compressed together."""


def _packer() -> Any:
    """A compressor for a stretch of a zip member."""
    if _quick is not None:
        return _quick.compressobj(_LEVEL, zlib.DEFLATED, -zlib.MAX_WBITS)
    return zlib.compressobj(zlib.Z_DEFAULT_COMPRESSION, zlib.DEFLATED, -zlib.MAX_WBITS)


class PackedRows:
    """The rows of a sheet, compressed as they will stand in the zip file.

    Args:
        rows: `<row>` elements.

    Attributes:
        packed: a stretch of a deflated stream that begins and ends on whole bytes.
    """

    def __init__(self, rows: Iterable[str]) -> None:
        packer, waiting = _packer(), iter(rows)
        pieces = []
        while chunk := "".join(islice(waiting, _AT_ONCE)):
            pieces.append(packer.compress(chunk.encode()))
        pieces.append(packer.flush(zlib.Z_SYNC_FLUSH))
        self.packed = b"".join(pieces)

    def unpacked(self) -> bytes:
        """The rows again."""
        module = _quick if _quick is not None else zlib
        rows: bytes = module.decompressobj(-zlib.MAX_WBITS).decompress(self.packed)
        return rows


class _Splice:
    """Stands in for a zip member's compressor: what comes before and after the rows is compressed, the rows
    are put in as they are."""

    def __init__(self, packed: bytes) -> None:
        self._packed = packed
        self._written = 0

    def compress(self, data: bytes) -> bytes:
        """The three stretches of a sheet's part, in order."""
        self._written += 1
        if self._written == 2:
            return self._packed
        packer = _packer()
        start: bytes = packer.compress(data)
        return start + cast(bytes, packer.flush(zlib.Z_SYNC_FLUSH if self._written == 1 else zlib.Z_FINISH))

    def flush(self) -> bytes:
        """Nothing is left over."""
        return b""


class QuickZip(ZipFile):
    """A zip file that puts rows in their places, and deflates with ISA-L if it can.

    Args:
        arguments: of `ZipFile`.
        rows: name of a part -> the rows that belong in it.
        more: of `ZipFile`.
    """

    def __init__(self, *arguments: Any, rows: Mapping[str, PackedRows], **more: Any) -> None:
        self._rows = rows
        super().__init__(*arguments, **more)

    def open(self, *arguments: Any, **more: Any) -> Any:
        """As `ZipFile.open`."""
        member = super().open(*arguments, **more)
        if isinstance(getattr(member, "_compressor", None), type(zlib.compressobj())):
            # The one attribute to exchange; a zip file offers no way to name a compressor of one's own.
            member._compressor = _packer()  # type: ignore[attr-defined]
        return member

    def writestr(self, zinfo_or_arcname: ZipInfo | str, data: Any, *arguments: Any, **more: Any) -> None:
        """As `ZipFile.writestr`; a sheet's part gets its rows."""
        part = zinfo_or_arcname
        rows = self._rows.get(part.filename if isinstance(part, ZipInfo) else part)
        if rows is None:
            super().writestr(part, data, *arguments, **more)
            return
        before, after = data.split(ROWS_HERE.encode())
        with self.open(part, "w") as member:
            member._compressor = _Splice(rows.packed)
            for stretch in (before, rows.unpacked(), after):
                member.write(stretch)


class QuickWriter(Writer):  # type: ignore[misc]  # the library is not typed
    """XlsxWriter's workbook, packed by `QuickZip`; its sheets are `RowSheet`s."""

    def _store_workbook(self) -> None:
        names = (f"xl/worksheets/sheet{number}.xml" for number, _ in enumerate(self.worksheets(), 1))
        rows = {name: sheet.rows for name, sheet in zip(names, self.worksheets(), strict=True)}
        standard = xlsxwriter.workbook.ZipFile
        xlsxwriter.workbook.ZipFile = partial(QuickZip, rows=rows)
        try:
            super()._store_workbook()
        finally:
            xlsxwriter.workbook.ZipFile = standard
