"""Is a file a workbook that is safe to open? Asked before anything parses it, by streaming what it unpacks to."""

from __future__ import annotations

import zipfile
import zlib
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from io import BytesIO
from types import MappingProxyType
from typing import IO
from xml.parsers import expat

from ..findings import Finding, Place
from .file_bytes import MEGABYTE
from .workbook_markup import Damaged, Part, Scan, SheetExtent, TooLarge

__all__ = ["LARGEST_MEMBER", "LARGEST_UNPACKED", "LARGEST_WORKBOOK", "MOST_MEMBERS", "Extent", "guarded_extent"]

#: Bounds of a workbook file, of one member and of all members together. [byte]
LARGEST_WORKBOOK = 64 * MEGABYTE
LARGEST_MEMBER = 48 * MEGABYTE
LARGEST_UNPACKED = 64 * MEGABYTE
MOST_MEMBERS = 500

_CHUNK = 64 * 1024
_OLD_WORKBOOK_OR_PASSWORD = b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1"
_PASSWORD = "EncryptedPackage".encode("utf-16-le")
_ZIP = b"PK\x03\x04"
_SAVE_AS_XLSX = "Open it in a spreadsheet program and save it as .xlsx without a password, or as csv in UTF-8."
#: Parts that hold programs, which an .xlsx workbook has none of; and parts that lead to other files.
_PROGRAMS = ("xl/vbaproject", "xl/macrosheets/")
_LINKS = ("xl/externallinks/", "xl/connections", "xl/querytables/")


@dataclass(frozen=True, slots=True)
class Extent:
    """How far the worksheets reach with cells that hold something, and what else they have.

    Parameters
    ----------
    sheets : mapping of str to SheetExtent
        By the part of the file that holds the worksheet.
    has_links : bool
        Whether the workbook leads to other files.
    """

    sheets: Mapping[str, SheetExtent]
    has_links: bool


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
        got = "a password" if _PASSWORD in data else "the older .xls format, or a password"
        return Finding("file-unreadable", "file", "must be an .xlsx workbook", place, got, fix=_SAVE_AS_XLSX)
    if not data.startswith(_ZIP):
        return Finding("file-unreadable", "file", "must be an .xlsx workbook", place, _beginning(data))
    try:
        with zipfile.ZipFile(BytesIO(data)) as archive:
            return _scanned(archive)
    except TooLarge as error:
        return Finding("file-too-large", "file", str(error), place)
    except Damaged as error:
        return Finding("file-unreadable", "file", str(error), place, error.got)
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
        raise TooLarge(f"must unpack to at most {MOST_MEMBERS} parts")
    names = [member.filename for member in members]
    if len(set(names)) < len(names):
        raise Damaged("must not have two parts of one name")
    if "[Content_Types].xml" not in names:
        raise Damaged("must be an .xlsx workbook; it is another kind of zip file")
    if program := next((name for name in names if name.casefold().startswith(_PROGRAMS)), None):
        raise Damaged("must have no macros, as an .xlsx workbook has none", program)
    scan, total, sheets = Scan(), 0, {}
    for member in members:
        total, extent = _scan_member(archive, member, scan, total)
        if extent is not None:
            sheets[member.filename] = extent
    has_links = any(name.casefold().startswith(_LINKS) for name in names)
    return Extent(MappingProxyType(sheets), has_links)


def _scan_member(
    archive: zipfile.ZipFile, member: zipfile.ZipInfo, scan: Scan, total: int
) -> tuple[int, SheetExtent | None]:
    """Total size after one member, whose markup is looked through while it unpacks; its extent if it is a worksheet."""
    size = 0
    started = Part(scan)
    part: Part | None = started
    with archive.open(member) as stream:
        for chunk in _chunks(stream):
            size += len(chunk)
            if size > LARGEST_MEMBER:
                raise TooLarge(f"must have no part that unpacks to more than {LARGEST_MEMBER // MEGABYTE} MB")
            if total + size > LARGEST_UNPACKED:
                raise TooLarge(f"must unpack to at most {LARGEST_UNPACKED // MEGABYTE} MB")
            part = _fed(part, chunk)
    _fed(part, b"")
    return total + size, started.extent if started.is_worksheet else None


def _fed(part: Part | None, chunk: bytes) -> Part | None:
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
