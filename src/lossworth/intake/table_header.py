"""The header row of a table of offers: which column means what, and in which unit."""

from __future__ import annotations

from collections.abc import Collection, Iterable, Iterator, Mapping
from dataclasses import dataclass
from types import MappingProxyType

from ..findings import Finding
from ..records.bid_columns import ITEM_HEADING
from .cells import Content
from .columns import COLUMNS
from .header_text import name_of
from .heading import Heading, heading_of
from .sheet import Row, Sheet
from .suggestions import nearest

__all__ = ["Header", "find_header", "is_header", "recognized_columns"]

_TELLING = ("unit_price", "no_load_loss_kw", "load_loss_kw")


@dataclass(frozen=True, slots=True)
class Header:
    """Header of a table of offers.

    Parameters
    ----------
    row : Row
        The header row.
    headings : mapping of str to Heading
        By field of an offer.
    twice : frozenset of str
        Fields whose column is given twice, so that neither can be taken.
    """

    row: Row
    headings: Mapping[str, Heading]
    twice: frozenset[str]


def is_header(row: Row) -> bool:
    """Whether a row is the header of a table of offers.

    Parameters
    ----------
    row : Row
        Any row.

    Returns
    -------
    bool
        True if two columns are known, one of them the price or a loss.
    """
    known = recognized_columns(cell.text for cell in row.cells if cell.content is Content.TEXT)
    return len(known) >= 2 and any(field in known for field in _TELLING)


def recognized_columns(headers: Iterable[str]) -> set[str]:
    """Fields of an offer that some headers name.

    Parameters
    ----------
    headers : iterable of str
        Texts of header cells.

    Returns
    -------
    set of str
        Fields, each once.
    """
    return {found.column.field for text in headers if (found := heading_of(text)) is not None}


def find_header(sheet: Sheet, row: Row, items: Collection[str] | None = None) -> tuple[Header, tuple[Finding, ...]]:
    """Header of a table of offers with everything that is wrong with it.

    Parameters
    ----------
    sheet : Sheet
        The sheet, for places.
    row : Row
        The header row.
    items : collection of str, optional
        Names of the further items of all lots; None where the tender is not known, and then any name will do.

    Returns
    -------
    header : Header
        Columns that are understood; of two with one meaning, neither.
    findings : tuple of Finding
        Columns missing, given twice, without unit, or not read.
    """
    found: dict[str, list[Heading]] = {}
    unread: list[Finding] = []
    for at, cell in enumerate(row.cells):
        heading = heading_of(cell.text, at, items)
        if heading is not None:
            found.setdefault(heading.column.field, []).append(heading)
        elif not cell.is_blank:
            unread.append(_not_read(sheet, row, at, cell.text, items or ()))
    twice = {field: headings for field, headings in found.items() if len(headings) > 1}
    once = {field: headings[0] for field, headings in found.items() if len(headings) == 1}
    findings = [
        *_missing(sheet, row, found),
        *(_twice(sheet, row, headings) for headings in twice.values()),
        *_unit_findings(sheet, row, once.values()),
        *unread,
    ]
    return Header(row, MappingProxyType(once), frozenset(twice)), tuple(findings)


def _missing(sheet: Sheet, row: Row, found: Mapping[str, object]) -> Iterator[Finding]:
    headers = [cell.text for cell in row.cells if not cell.is_blank and heading_of(cell.text) is None]
    for column in COLUMNS:
        if column.is_needed and column.field not in found:
            folded = {name_of(header): header for header in headers}
            near = nearest(column.name, folded)
            fix = f'Did the bidder mean this by "{folded[near]}"? Then write: {column.example}.' if near else ""
            rule = f"must be there, with a header such as: {column.example}"
            yield Finding("column-missing", f"column {column.name}", rule, sheet.place_of_row(row), fix=fix)


def _twice(sheet: Sheet, row: Row, headings: list[Heading]) -> Finding:
    first, second = headings[:2]
    rule = f'must be given once; "{first.text}" means the same'
    return Finding("column-twice", f"column {first.column.name}", rule, sheet.place_of(row, second.at), got=second.text)


def _unit_findings(sheet: Sheet, row: Row, headings: Iterable[Heading]) -> Iterator[Finding]:
    for heading in headings:
        if heading.times is not None:
            continue
        column, place = heading.column, sheet.place_of(row, heading.at)
        if column.is_price:
            rule = "must have a currency code of three capital letters for its unit, or none"
        else:
            rule = f"must state its unit: {' or '.join(column.units)}"
        fix = f"Write the header as: {column.example}." if column.needs_unit else ""
        yield Finding("column-unit", f"column {column.name}", rule, place, got=heading.text, fix=fix)


def _not_read(sheet: Sheet, row: Row, at: int, text: str, items: Collection[str]) -> Finding:
    names = (*(column.name for column in COLUMNS), *(f"{ITEM_HEADING}{item}" for item in items))
    near = nearest(name_of(text), names) or nearest(text.partition("[")[0], names)
    fix = f'Did the bidder mean "{near}"?' if near else ""
    return Finding(
        "column-not-read", "column", "is not used by the evaluation", sheet.place_of(row, at), got=text, fix=fix
    )
