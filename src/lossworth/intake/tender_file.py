"""The tender file: TOML in, the tender's record and all findings out."""

from __future__ import annotations

from dataclasses import replace

from ..findings import Finding
from ..records.tender import Tender
from .file_bytes import MEGABYTE, bounded_bytes, utf8_text
from .linked_files import with_linked_files
from .tender_checks import CHECKS
from .tender_folder import InputFile
from .tender_reading import read_draft
from .tender_record import record_of
from .toml_places import find_spots
from .toml_values import parse_toml

__all__ = ["LARGEST_TENDER_FILE", "read_tender"]

#: Greatest size of a tender file. [byte]
LARGEST_TENDER_FILE = MEGABYTE


def read_tender(file: InputFile) -> tuple[Tender | None, tuple[Finding, ...]]:
    """Tender of a file, with everything that is wrong with it.

    Parameters
    ----------
    file : InputFile
        The tender file.

    Returns
    -------
    tender : Tender or None
        None where a value is missing, unreadable or out of bounds. Where keys contradict each other the record
        stands, so that the bids can be read in the same run; the findings then stop the evaluation.
    findings : tuple of Finding
        All of the file and of those that it names, in the order of lines.
    """
    data = bounded_bytes(file.path, file.shown_as, LARGEST_TENDER_FILE)
    if isinstance(data, Finding):
        return None, (_of_the_buyer(data),)
    source = utf8_text(data, file.shown_as)
    if isinstance(source, Finding):
        return None, (source,)
    document = parse_toml(source, file.shown_as)
    if isinstance(document, Finding):
        return None, (document,)
    written, unread = read_draft(document, find_spots(source), file.shown_as)
    draft, about_files = with_linked_files(written, file.path.parent)
    tender, out_of_bounds = record_of(draft)
    contradictions = (finding for check in CHECKS for finding in check(draft))
    return tender, _in_order_of_lines((*unread, *about_files, *out_of_bounds, *contradictions), file.shown_as)


def _of_the_buyer(finding: Finding) -> Finding:
    """Finding on a file with a remedy for the buyer, whose file this is."""
    return replace(
        finding, fix="Mend the tender file; `lossworth start` writes an example in which each key is explained."
    )


def _in_order_of_lines(findings: tuple[Finding, ...], file: str) -> tuple[Finding, ...]:
    """Findings of the tender file by line, then those of other files; each once: two checks may ask for one key."""

    def order(finding: Finding) -> tuple[bool, str, int]:
        place = finding.place
        return (place.file != file, place.file, place.line or 0) if place else (False, "", 0)

    return tuple(sorted(dict.fromkeys(findings), key=order))
