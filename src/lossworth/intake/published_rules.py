"""The rules file kept at publication: read whole, bounded, and never changed."""

from __future__ import annotations

from pathlib import Path

from ..findings import Finding, Place
from ..records.rules import PUBLISHED_RULES
from .tender_folder import InputFile

__all__ = ["LARGEST_RULES_FILE", "find_published_rules", "read_published_rules"]

#: Bytes; a rules sheet of 1,000 lots has less.
LARGEST_RULES_FILE = 16 * 1024 * 1024


def find_published_rules(folder: Path) -> InputFile | None:
    """File of the rules as published.

    Parameters
    ----------
    folder : Path
        Where the tender file is.

    Returns
    -------
    InputFile or None
        None where none was kept.
    """
    path = folder / PUBLISHED_RULES
    return InputFile(path, PUBLISHED_RULES) if path.is_file() else None


def read_published_rules(file: InputFile) -> tuple[str | None, tuple[Finding, ...]]:
    """Text of the kept file.

    Parameters
    ----------
    file : InputFile
        The kept file.

    Returns
    -------
    text : str or None
        None where it cannot be read.
    findings : tuple of Finding
        Why not; stops the evaluation, since a proof that cannot be read is none.
    """
    if file.path.stat().st_size > LARGEST_RULES_FILE:
        rule = f"must have at most {LARGEST_RULES_FILE:,} bytes"
        return None, (Finding("file-too-large", "published rules", rule, Place(file.shown_as)),)
    try:
        return file.path.read_bytes().decode("utf-8"), ()
    except UnicodeDecodeError as error:
        rule = "must be UTF-8 text, as it was kept"
        got = f"byte 0x{error.object[error.start]:02X} at byte {error.start}"
        fix = "Put the file back as it was published."
        return None, (Finding("file-unreadable", "published rules", rule, Place(file.shown_as), got, fix=fix),)
