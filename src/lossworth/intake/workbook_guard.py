"""Is a file a workbook that is safe to open? Asked before anything parses it, by streaming what it unpacks to."""

from __future__ import annotations

import re
import zipfile
import zlib
from collections.abc import Iterator
from dataclasses import dataclass, field
from io import BytesIO
from typing import IO
from xml.parsers import expat

from ..findings import Finding, Place
from .file_bytes import MEGABYTE
from .sheet import MOST_CELLS, MOST_COLUMNS, MOST_ROWS

__all__ = ["LARGEST_MEMBER", "LARGEST_UNPACKED", "LARGEST_WORKBOOK", "MOST_MEMBERS", "Extent", "guarded_extent"]

#: Bounds of a workbook file, of one member and of all members together. [byte]
LARGEST_WORKBOOK = 64 * MEGABYTE
LARGEST_MEMBER = 48 * MEGABYTE
LARGEST_UNPACKED = 64 * MEGABYTE
MOST_MEMBERS = 500
#: Every element costs memory in the parser, whatever it is for.
_MOST_ELEMENTS = 3_000_000

_CHUNK = 64 * 1024
_OLD_WORKBOOK_OR_PASSWORD = b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1"
_ZIP = b"PK\x03\x04"
_REFERENCE = re.compile(r"([A-Z]{1,3})([1-9][0-9]{0,6})")
_SAVE_AS_XLSX = "Open it in a spreadsheet program and save it as .xlsx without a password, or as csv in UTF-8."


@dataclass(frozen=True, slots=True)
class Extent:
    """How far the worksheets reach with cells that hold something.

    Parameters
    ----------
    rows, columns : int
        The last of any sheet, from 1; 0 where all are empty.
    formulas_without_value : bool
        Whether a formula has no computed value.
    """

    rows: int
    columns: int
    formulas_without_value: bool


class _TooLarge(Exception):
    """A bound is exceeded; the message says which."""


class _Damaged(Exception):
    """The content contradicts itself; the message says how."""


def guarded_extent(data: bytes, shown_as: str) -> Extent | Finding:
    """Extent of a workbook, if it keeps all bounds.

    Parameters
    ----------
    data : bytes
        The file.
    shown_as : str
        Its name in findings.

    Returns
    -------
    Extent or Finding
        Or why the file is not opened.
    """
    place = Place(shown_as)
    if data.startswith(_OLD_WORKBOOK_OR_PASSWORD):
        got = "the older .xls format, or a password"
        return Finding("file-unreadable", "file", "must be an .xlsx workbook", place, got, fix=_SAVE_AS_XLSX)
    if not data.startswith(_ZIP):
        return Finding("file-unreadable", "file", "must be an .xlsx workbook", place, _beginning(data))
    try:
        with zipfile.ZipFile(BytesIO(data)) as archive:
            return _scanned(archive)
    except _TooLarge as error:
        return Finding("file-too-large", "file", str(error), place)
    except _Damaged as error:
        return Finding("file-unreadable", "file", str(error), place)
    except (zipfile.BadZipFile, zlib.error, EOFError, OSError):
        return Finding("file-unreadable", "file", "must be complete; it is cut off or damaged", place)
    except (NotImplementedError, RuntimeError, ValueError, LookupError):  # a foreign compression, a password
        rule = "must be an .xlsx workbook without password, packed in the usual way"
        return Finding("file-unreadable", "file", rule, place, fix=_SAVE_AS_XLSX)
    except expat.ExpatError as error:
        return Finding("file-unreadable", "file", f"must be well-formed inside ({error})", place)


def _beginning(data: bytes) -> str:
    return data[:20].decode("ascii", errors="backslashreplace")


def _scanned(archive: zipfile.ZipFile) -> Extent:
    members = archive.infolist()
    if len(members) > MOST_MEMBERS:
        raise _TooLarge(f"must unpack to at most {MOST_MEMBERS} parts")
    names = [member.filename for member in members]
    if len(set(names)) < len(names):
        raise _Damaged("must not have two parts of one name")
    if "[Content_Types].xml" not in names:
        raise _Damaged("must be an .xlsx workbook; it is another kind of zip file")
    scan, total = _Scan(), 0
    for member in members:
        total = _scan_member(archive, member, scan, total)
    return Extent(scan.rows, scan.columns, scan.formulas_without_value)


def _scan_member(archive: zipfile.ZipFile, member: zipfile.ZipInfo, scan: _Scan, total: int) -> int:
    """Total size after one member, whose markup is looked through while it unpacks."""
    size = 0
    part: _Part | None = scan.part()
    with archive.open(member) as stream:
        for chunk in _chunks(stream):
            size += len(chunk)
            if size > LARGEST_MEMBER:
                raise _TooLarge(f"must have no part that unpacks to more than {LARGEST_MEMBER // MEGABYTE} MB")
            if total + size > LARGEST_UNPACKED:
                raise _TooLarge(f"must unpack to at most {LARGEST_UNPACKED // MEGABYTE} MB")
            part = _fed(part, chunk)
    _fed(part, b"")
    return total + size


def _fed(part: _Part | None, chunk: bytes) -> _Part | None:
    """Part after some more of it; None once it turns out to be an image or the like."""
    if part is None:
        return None
    try:
        part.feed(chunk)
    except expat.ExpatError:
        if part.is_worksheet:
            raise
        return None
    return part


def _chunks(stream: IO[bytes]) -> Iterator[bytes]:
    while chunk := stream.read(_CHUNK):
        yield chunk


@dataclass
class _Scan:
    rows: int = 0
    columns: int = 0
    cells: int = 0
    elements: int = 0
    formulas_without_value: bool = False

    def part(self) -> _Part:
        return _Part(self)


@dataclass
class _Part:
    """One part of the workbook in markup, streamed: counts, bounds and the order of the cells of a worksheet."""

    scan: _Scan
    depth: int = 0
    is_worksheet: bool = False
    row: int = 0
    column: int = 0
    holds: set[str] = field(default_factory=set)

    def __post_init__(self) -> None:
        self.parser = expat.ParserCreate()
        self.parser.StartElementHandler = self.start
        self.parser.EndElementHandler = self.end
        self.parser.CharacterDataHandler = self.text
        self.parser.StartDoctypeDeclHandler = self.doctype
        self.inside = ""

    def feed(self, chunk: bytes) -> None:
        self.parser.Parse(chunk, not chunk)

    def doctype(self, *_: object) -> None:
        raise _Damaged("must not declare document types, which no workbook does")

    def start(self, tag: str, attributes: dict[str, str]) -> None:
        self.scan.elements += 1
        if self.scan.elements > _MOST_ELEMENTS:
            raise _TooLarge("must have fewer parts; formatted cells without content count too")
        name = tag.rpartition(":")[2]
        if not self.depth:
            self.is_worksheet = name == "worksheet"
        self.depth += 1
        if self.is_worksheet:
            self.inside = name
            if name == "row":
                self.enter_row(attributes.get("r"))
            elif name == "c":
                self.enter_cell(attributes.get("r"), attributes.get("t"))
            elif name == "f":
                self.holds.add("f")

    def text(self, text: str) -> None:
        if self.is_worksheet and self.inside in ("v", "t") and text:
            self.holds.add("v")

    def end(self, tag: str) -> None:
        self.depth -= 1
        self.inside = ""
        if self.is_worksheet and tag.rpartition(":")[2] == "c":
            self.leave_cell()

    def enter_row(self, number: str | None) -> None:
        row = self.row + 1 if number is None else _whole(number)
        if row <= self.row:
            raise _Damaged(f"must have its rows in order; row {row} stands behind row {self.row}")
        self.row, self.column = row, 0

    def enter_cell(self, reference: str | None, kind: str | None) -> None:
        row, column = (self.row, self.column + 1) if reference is None else _row_and_column(reference)
        if row != self.row or column <= self.column:
            raise _Damaged(f"must have its cells in order; {reference} stands in row {self.row}")
        self.column = column
        self.holds = {"text result"} if kind == "str" else set()

    def leave_cell(self) -> None:
        if not self.holds & {"v", "f"}:
            return
        scan = self.scan
        scan.cells += 1
        scan.rows, scan.columns = max(scan.rows, self.row), max(scan.columns, self.column)
        scan.formulas_without_value |= self.holds == {"f"}
        for count, bound, what in (
            (scan.cells, MOST_CELLS, "cells that hold something"),
            (scan.rows, MOST_ROWS, "rows"),
            (scan.columns, MOST_COLUMNS, "columns"),
        ):
            if count > bound:
                raise _TooLarge(f"must have at most {bound:,} {what}")


def _whole(number: str) -> int:
    if not (number.isascii() and number.isdigit() and len(number) < 10):
        raise _Damaged(f"must number its rows; it has {number[:20]}")
    return int(number)


def _row_and_column(reference: str) -> tuple[int, int]:
    match = _REFERENCE.fullmatch(reference)
    if match is None:
        raise _Damaged(f"must name its cells; it has {reference[:20]}")
    column = 0
    for letter in match[1]:
        column = column * 26 + ord(letter) - ord("A") + 1
    return int(match[2]), column
