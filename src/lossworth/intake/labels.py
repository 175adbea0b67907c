"""Labels with their values beside a table of offers: who bids, and in which currency."""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from dataclasses import dataclass

from ..findings import Finding
from ..records.quantity import Entry
from .cells import Cell, Content, collapsed
from .sheet import Row, Sheet

__all__ = ["Labels", "read_labels"]

_FIELD_OF = {
    "bidder": "bidder",
    "bidder name": "bidder",
    "name of bidder": "bidder",
    "tenderer": "bidder",
    "currency": "currency",
    "currency code": "currency",
    "currency of prices": "currency",
    "price currency": "currency",
}


@dataclass(frozen=True, slots=True)
class Labels:
    """What the labels of a file say about all its offers.

    Parameters
    ----------
    bidder, currency : Entry or None
        None where the file has no such label.
    """

    bidder: Entry | None = None
    currency: Entry | None = None


def read_labels(rows: Iterable[tuple[Sheet, Row]]) -> tuple[Labels, tuple[Finding, ...]]:
    """Labels of a file.

    Parameters
    ----------
    rows : iterable of tuple of Sheet and Row
        All rows of the file outside of its tables of offers.

    Returns
    -------
    labels : Labels
        What they say; the first where two disagree.
    findings : tuple of Finding
        Labels that disagree.
    """
    found: dict[str, Entry] = {}
    findings: list[Finding] = []
    for field, entry in _entries(rows):
        first = found.setdefault(field, entry)
        if first.value.casefold() != entry.value.casefold():
            rule = f'must be the same in the whole file; {first.place} has "{first.value}"'
            findings.append(Finding("column-twice", f"label {field}", rule, entry.place, got=entry.value))
    return Labels(found.get("bidder"), found.get("currency")), tuple(findings)


def _entries(rows: Iterable[tuple[Sheet, Row]]) -> Iterator[tuple[str, Entry]]:
    for sheet, row in rows:
        stated: list[tuple[int, Cell]] = [(at, cell) for at, cell in enumerate(row.cells) if not cell.is_blank][:2]
        if len(stated) < 2:
            continue
        (_, label), (at, value) = stated
        field = _FIELD_OF.get(collapsed(label.text).rstrip(": *").casefold())
        if field is not None and value.content is Content.TEXT:
            yield field, Entry(value=collapsed(value.text), place=sheet.place_of(row, at))
