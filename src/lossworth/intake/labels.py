"""Labels with their values beside a table of offers: what holds for the whole bid, said once."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass, field, replace
from types import MappingProxyType

from ..findings import Finding, Place
from ..records.quantity import Entry
from .cells import Cell, Content, collapsed
from .columns import PAYMENT
from .heading import Heading, heading_of
from .sheet import Row, Sheet

__all__ = ["LABELS", "Label", "Labels", "read_labels"]

#: Fields that a label may give for all offers of a file, beside those of payments.
LABELS = (
    "bidder",
    "currency",
    "delivery_term",
    "price_basis",
    "tax_included",
    "valid_until",
    "unconditional_discount_percent",
    "prompt_payment_discount_percent",
    "claimed_tolerance_percent",
    "origin",
    "insulating_liquid",
    "pcb_free",
    "deviations",
)
_NAMES = ("bidder", "currency")


@dataclass(frozen=True, slots=True)
class Label:
    """One label with its value.

    Parameters
    ----------
    heading : Heading
        What it means.
    cell : Cell
        The value.
    place : Place
        Where the value stands.
    """

    heading: Heading
    cell: Cell
    place: Place

    def finding(self, kind: str, rule: str, got: str | None = None, fix: str = "") -> Finding:
        """Finding on the label, with its value where nothing else stood there."""
        shown = self.cell.text if got is None else got
        return Finding(kind, f"label {self.heading.column.name}", rule, self.place, shown, fix=fix)


@dataclass(frozen=True, slots=True)
class Labels:
    """What the labels of a file say about all its offers.

    Parameters
    ----------
    bidder, currency : Entry or None
        None where the file has no such label.
    terms : mapping of str to Label
        Commercial terms and payments, by field.
    """

    bidder: Entry | None = None
    currency: Entry | None = None
    terms: Mapping[str, Label] = field(default_factory=dict)


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
        Labels that disagree, have several values, or stand where nobody sees them.
    """
    found: dict[str, Label] = {}
    findings: list[Finding] = []
    for sheet, row in rows:
        stated = [(at, cell) for at, cell in enumerate(row.cells) if not cell.is_blank]
        label = _label(sheet, row, stated)
        if label is None:
            continue
        wrong = _not_usable(label, [cell for _, cell in stated[1:]])
        if wrong is not None:
            findings.append(wrong)
            continue
        first = found.setdefault(label.heading.column.field, label)
        if _plain(first.cell) != _plain(label.cell):
            rule = f'must be the same in the whole file; {first.place} has "{first.cell.text}"'
            findings.append(label.finding("column-twice", rule))
        findings += _hidden(sheet, row, label)
    entries = {name: _entry(found[name]) for name in _NAMES if name in found}
    terms = {name: label for name, label in found.items() if name not in _NAMES}
    return Labels(entries.get("bidder"), entries.get("currency"), MappingProxyType(terms)), tuple(findings)


def _label(sheet: Sheet, row: Row, stated: Sequence[tuple[int, Cell]]) -> Label | None:
    """Label of a row with the next cell that is not blank; None where the row has none."""
    if len(stated) < 2 or stated[0][1].content is not Content.TEXT:
        return None
    (_, name), (at, value) = stated[:2]
    heading = heading_of(name.text.rstrip(": *"))
    if heading is None or not (heading.column.field in LABELS or heading.column.field.startswith(PAYMENT)):
        return None
    is_text = value.content is Content.TEXT
    if (heading.column.field in _NAMES and not is_text) or (is_text and heading_of(value.text) is not None):
        return None  # headings side by side are a table
    if heading.times is None and "%" in heading.column.units and value.text.endswith("%"):
        heading = replace(heading, unit="%", times=heading.column.units["%"])  # the unit stands with the value
    return Label(heading, value, sheet.place_of(row, at))


def _not_usable(label: Label, values: Sequence[Cell]) -> Finding | None:
    """Why a label of the commercial terms holds for nothing."""
    heading = label.heading
    if heading.column.field in _NAMES:
        return None
    if any(_plain(value) != _plain(label.cell) for value in values):
        fix = "Ask the bidder for one value, or for a column of the table of offers."
        rule = "must have one value for the whole bid; it is not read"
        return label.finding("row-not-read", rule, "; ".join(value.text for value in values), fix)
    if heading.times is None:
        return label.finding("column-unit", f"must state its unit: {' or '.join(heading.column.units)}", heading.text)
    return None


def _plain(cell: Cell) -> str:
    return collapsed(cell.text).casefold()


def _entry(label: Label) -> Entry:
    return Entry(value=collapsed(label.cell.text), place=label.place)


def _hidden(sheet: Sheet, row: Row, label: Label) -> Iterator[Finding]:
    looks = sheet.looks
    if looks.is_hidden or row.number in looks.hidden_rows:
        what = "a hidden sheet" if looks.is_hidden else "a hidden row"
        yield label.finding("offers-hidden", f"stands on {what}, and is read")
