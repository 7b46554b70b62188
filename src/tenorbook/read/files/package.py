"""A workbook's zip container, opened with suspicion: sizes, ratios, encryption, document types.

Every part is read through a counter, and every XML part is refused when it declares a document type:
no workbook has one, and it is the door to entity tricks.
"""

import io
import re
import zipfile
import zlib
from collections.abc import Callable, Iterator
from typing import IO, TYPE_CHECKING, TypeAlias

from tenorbook.basis.problem import BookError
from tenorbook.read.files import limits
from tenorbook.read.files.refuse import damaged, refusal, too_large

if TYPE_CHECKING:
    from lxml.etree import _Element

_READ_ERRORS = (zipfile.BadZipFile, zlib.error, EOFError, NotImplementedError, OSError, RuntimeError)
_DOCTYPE = re.compile(rb"<!\s*(DOCTYPE|ENTITY)", re.IGNORECASE)
_CHUNK = 2**20

Sieve: TypeAlias = Callable[[bytes], bytes]


class Package:
    """A zip whose directory has been found acceptable. Part names are found whatever their case.

    Args:
        name: file name, for messages.
        data: the whole file.

    Raises:
        BookError: damaged, encrypted, or unpacking to more than the limits allow.
    """

    def __init__(self, name: str, data: bytes) -> None:
        self.name = name
        try:
            self._zip = zipfile.ZipFile(io.BytesIO(data))
        except _READ_ERRORS as fault:
            raise damaged(name) from fault
        self._check_directory(len(data))
        self._parts = {_plain_name(info.filename): info for info in self._zip.infolist()}

    def _check_directory(self, packed: int) -> None:
        """The declared sizes; `zipfile` never unpacks more of a part than it declares."""
        entries = self._zip.infolist()
        if any(info.flag_bits & 0x1 for info in entries):
            raise refusal(self.name, "is protected by a password", "save it without a password")
        unpacked = sum(info.file_size for info in entries)
        if len(entries) > limits.MAX_ENTRIES or unpacked > limits.MAX_UNPACKED_BYTES:
            raise too_large(self.name, "unpacks to far more than a book of loans")
        if unpacked > limits.RATIO_FREE_BYTES and unpacked > packed * limits.MAX_RATIO:
            raise too_large(self.name, "unpacks to far more than a book of loans")

    def __contains__(self, part: str) -> bool:
        return _plain_name(part) in self._parts

    def open(self, part: str) -> IO[bytes]:
        """A part as a stream; `KeyError` never leaves: a missing part is a damaged workbook."""
        info = self._parts.get(_plain_name(part))
        if info is None:
            raise damaged(self.name)
        try:
            return self._zip.open(info)
        except _READ_ERRORS as fault:
            raise damaged(self.name) from fault

    def read(self, part: str) -> bytes:
        """A small part as bytes."""
        with self.open(part) as stream:
            try:
                data = stream.read(limits.MAX_SMALL_PART_BYTES + 1)
            except _READ_ERRORS as fault:
                raise damaged(self.name) from fault
        if len(data) > limits.MAX_SMALL_PART_BYTES:
            raise too_large(self.name, "has a list of sheets or styles beyond any use")
        return data

    def tree(self, part: str) -> "_Element":
        """A small XML part as a tree."""
        from lxml import etree

        data = self.read(part)
        self.refuse_doctype(data)
        parser = etree.XMLParser(resolve_entities=False, no_network=True, load_dtd=False, huge_tree=False)
        try:
            root = etree.fromstring(data, parser)
        except etree.XMLSyntaxError as fault:
            raise damaged(self.name) from fault
        if root.getroottree().docinfo.doctype:
            raise self._doctype()
        return root

    def stream(self, part: str, *tags: str, sieve: Sieve | None = None) -> "Iterator[_Element]":
        """The elements of a large XML part with these local names, as each ends; then forgotten.

        Args:
            part: name of the part.
            tags: local names; some must end every few megabytes, or the part is refused.
            sieve: takes whole tags away from the bytes before they are parsed.
        """
        from lxml import etree

        with self.open(part) as raw:
            watched = _Watched(self, raw, sieve)
            events = etree.iterparse(
                watched,
                events=("end",),
                tag=[f"{{*}}{tag}" for tag in tags],
                resolve_entities=False,
                no_network=True,
                load_dtd=False,
                huge_tree=False,
            )
            try:
                for number, (_, element) in enumerate(events):
                    if number == 0 and element.getroottree().docinfo.doctype:
                        raise self._doctype()
                    watched.progress()
                    yield element
                    _forget(element)
            except (etree.XMLSyntaxError, *_READ_ERRORS) as fault:
                raise damaged(self.name) from fault

    def refuse_doctype(self, data: bytes) -> None:
        """Raise when the bytes declare a document type, in any of the usual encodings."""
        head = data[:65536].replace(b"\0", b"")
        if _DOCTYPE.search(head):
            raise self._doctype()

    def _doctype(self) -> BookError:
        return refusal(
            self.name,
            "contains an XML document type, which no spreadsheet program writes",
            "do not trust the file; ask its sender for one saved by a spreadsheet program",
        )


class _Watched(io.RawIOBase):
    """A part's bytes on their way to the parser: sieved, checked, and counted between elements."""

    def __init__(self, package: Package, raw: IO[bytes], sieve: Sieve | None) -> None:
        super().__init__()
        self._package, self._raw, self._sieve = package, raw, sieve
        self._tail = b""
        self._started = False
        self._since = 0
        self._total = 0

    def progress(self) -> None:
        """An element ended: the count of bytes without one starts anew."""
        self._since = 0

    def read(self, size: int = -1, /) -> bytes:
        """The next bytes, about a chunk; empty at the end. What is sieved away is not counted as stalling."""
        while True:
            block = self._raw.read(_CHUNK)
            if not block:
                rest, self._tail = self._tail, b""
                return rest
            kept = self._sift(block)
            if kept:
                return kept

    def _sift(self, block: bytes) -> bytes:
        if not self._started:
            self._package.refuse_doctype(block)
            self._started = True
        self._total += len(block)
        if self._sieve is not None:
            block = self._tail + block
            cut = block.rfind(b">") + 1
            block, self._tail = self._sieve(block[:cut]), block[cut:]
        self._since += len(block)
        if self._since + len(self._tail) > limits.MAX_STALL_BYTES or self._total > limits.MAX_UNPACKED_BYTES:
            raise too_large(self._package.name, "has a part with far more in it than cells")
        return block


def _plain_name(part: str) -> str:
    return part.replace("\\", "/").lstrip("/").casefold()


def _forget(element: "_Element") -> None:
    """Free an element that was handled, and its elder siblings, or the whole sheet stays in memory."""
    element.clear()
    parent = element.getparent()
    while parent is not None and element.getprevious() is not None:
        del parent[0]
