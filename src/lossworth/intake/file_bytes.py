"""Bytes of a user's file within a stated bound, and text in UTF-8 or the place where it is none."""

from __future__ import annotations

from pathlib import Path

from ..findings import Finding, Place

__all__ = ["MEGABYTE", "bounded_bytes", "utf8_text"]

MEGABYTE = 1024 * 1024

_SAVE_AS_UTF8 = "Save the file anew as UTF-8 (in a spreadsheet program: CSV UTF-8); no other encoding is guessed."


def bounded_bytes(path: Path, shown_as: str, bound: int) -> bytes | Finding:
    """Content of a file that is neither empty nor larger than the bound.

    Parameters
    ----------
    path : Path
        The file.
    shown_as : str
        Its name in findings.
    bound : int
        Greatest size. [byte]

    Returns
    -------
    bytes or Finding
        The content, or why there is none.
    """
    try:
        with path.open("rb") as stream:
            data = stream.read(bound + 1)
    except FileNotFoundError:
        return Finding("file-missing", "file", "must exist", Place(shown_as))
    except (OSError, ValueError) as error:
        reason = getattr(error, "strerror", None) or "the path is not valid"
        return Finding("file-unreadable", "file", "must be readable", Place(shown_as), got=reason)
    if not data:
        return Finding("file-unreadable", "file", "must not be empty", Place(shown_as), got="0 bytes")
    if len(data) > bound:
        rule = f"must be at most {bound // MEGABYTE} MB"
        return Finding("file-too-large", "file", rule, Place(shown_as), got=f"more than {bound:,} bytes")
    return data


def utf8_text(data: bytes, shown_as: str) -> str | Finding:
    """Text of bytes in UTF-8, with or without byte order mark.

    Parameters
    ----------
    data : bytes
        Content of a text file.
    shown_as : str
        Its name in findings.

    Returns
    -------
    str or Finding
        The text without byte order mark, or the first place that is no text in UTF-8.
    """
    if data.startswith((b"\xff\xfe", b"\xfe\xff")):
        return _not_utf8(shown_as, 1, "a byte order mark of UTF-16 at byte 0")
    try:
        text = data.decode("utf-8-sig")
    except UnicodeDecodeError:
        return _first_wrong_byte(data, shown_as)
    if "\0" in text:
        offset = data.index(b"\0")
        return _not_utf8(shown_as, _line(data, offset), f"a NUL at byte {offset}")
    return text


def _first_wrong_byte(data: bytes, shown_as: str) -> Finding:
    try:
        data.decode("utf-8")
    except UnicodeDecodeError as error:
        offset = error.start
        return _not_utf8(shown_as, _line(data, offset), f"byte 0x{data[offset]:02X} at byte {offset}")
    raise AssertionError("unreachable: the bytes did not decode a moment ago")


def _line(data: bytes, offset: int) -> int:
    before = data[:offset].replace(b"\r\n", b"\n")
    return before.count(b"\n") + before.count(b"\r") + 1


def _not_utf8(shown_as: str, line: int, got: str) -> Finding:
    return Finding(
        "file-unreadable", "file", "must be text in UTF-8", Place(shown_as, line=line), got=got, fix=_SAVE_AS_UTF8
    )
