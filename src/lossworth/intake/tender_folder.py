"""Which files a tender consists of: the tender file, the bids, and where the papers go."""

from __future__ import annotations

import os.path
from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass
from pathlib import Path

from ..findings import Finding, Place

__all__ = ["BIDS", "PAPERS", "TENDER_FILE", "InputFile", "Inputs", "find_inputs", "find_tender"]

TENDER_FILE = "tender.toml"
BIDS = "bids"
PAPERS = "papers"

#: Files of a spreadsheet program that has the bid open, and what other programs leave behind.
_IGNORED_PREFIXES = (".", "~$")


@dataclass(frozen=True, slots=True)
class InputFile:
    """One file that is read.

    Parameters
    ----------
    path : Path
        Where it is.
    shown_as : str
        Its name in findings and papers, relative to the tender's folder.
    """

    path: Path
    shown_as: str


@dataclass(frozen=True, slots=True)
class Inputs:
    """All files of a tender.

    Parameters
    ----------
    tender : InputFile
        The tender file.
    bids : tuple of InputFile
        Bid files in the order of their names, also those whose type is not read.
    papers : Path
        Folder of the papers, which need not exist.
    """

    tender: InputFile
    bids: tuple[InputFile, ...]
    papers: Path


def find_tender(place: Path) -> tuple[InputFile | None, tuple[Finding, ...]]:
    """Tender file alone.

    Parameters
    ----------
    place : Path
        The tender's folder, or the tender file.

    Returns
    -------
    file : InputFile or None
        None where there is none.
    findings : tuple of Finding
        Why there is none.
    """
    kind = _kind_of_path(place)
    tender = place / TENDER_FILE if kind == "folder" else place
    if _kind_of_path(tender) == "file":
        return InputFile(tender, tender.name), ()
    if kind == "folder":
        return None, (Finding("file-missing", "tender file", f"must be in the folder {place}", Place(TENDER_FILE)),)
    return None, (Finding("file-missing", "tender", "must be a folder or a file that exists", Place(str(place))),)


def find_inputs(place: Path, bids: Sequence[Path] = ()) -> tuple[Inputs | None, tuple[Finding, ...]]:
    """Files of a tender.

    Parameters
    ----------
    place : Path
        The tender's folder, or the tender file.
    bids : sequence of Path
        Bid files or folders of them, in place of those in the folder ``bids``.

    Returns
    -------
    inputs : Inputs or None
        None where there is no tender file. That no bid is there is for `read_bids` to say.
    findings : tuple of Finding
        Files that are missing, folders that are not entered.
    """
    tender, missing = find_tender(place)
    folder = place if _kind_of_path(place) == "folder" else place.parent
    named = bids or ([folder / BIDS] if _kind_of_path(folder / BIDS) == "folder" else [])
    files, findings = _bid_files(folder, named)
    if tender is None:
        return None, (*missing, *findings)
    return Inputs(tender, files, folder / PAPERS), findings


def _bid_files(folder: Path, named: Iterable[Path]) -> tuple[tuple[InputFile, ...], tuple[Finding, ...]]:
    files: dict[Path, InputFile] = {}
    findings: list[Finding] = []
    for path in named:
        for member in _members(path):
            kind = _kind_of_path(member)
            shown = _shown(folder, member)
            if kind == "file":
                files.setdefault(member.resolve(), InputFile(member, shown))  # a file named twice is one file
            elif kind == "nothing":
                findings.append(Finding("file-missing", "bid file", "must exist", Place(shown)))
            else:
                rule = f"is a {kind} inside the bids, and is not entered"
                findings.append(Finding("file-not-read", "bid file", rule, Place(shown)))
    return tuple(files.values()), tuple(findings)


def _members(path: Path) -> Iterator[Path]:
    """The path itself, or what a folder holds."""
    if _kind_of_path(path) != "folder":
        yield path
        return
    try:
        names = sorted(path.iterdir(), key=lambda member: member.name)
    except OSError:
        names = []
    yield from (member for member in names if not member.name.startswith(_IGNORED_PREFIXES))


def _kind_of_path(path: Path) -> str:
    try:
        if path.is_file():
            return "file"
        if path.is_dir():
            return "folder"
        return "special file" if path.exists() else "nothing"
    except (OSError, ValueError):
        return "nothing"


def _shown(folder: Path, path: Path) -> str:
    """Path relative to the tender's folder, as it is written and not where a link leads; else as it was given."""
    try:
        return _absolute(path).relative_to(_absolute(folder)).as_posix()
    except ValueError:
        return path.as_posix()


def _absolute(path: Path) -> Path:
    return Path(os.path.abspath(path))  # noqa: PTH100 - resolve() would follow links
