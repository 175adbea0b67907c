"""A table of offers with what is known beside it, and one row of it: cells, places, findings."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import NamedTuple

from ..findings import Finding, Place
from ..records.quantity import Entry
from ..records.rule_profiles import profile_named, settled_rules
from ..records.rules import AnnouncedRules
from ..records.tender import Lot, Tender
from .cells import BLANK, Cell, Content, Marks, NoNumber, collapsed
from .columns import COLUMN_OF
from .heading import Heading
from .labels import Labels
from .needed import is_needed
from .sheet import Row, Sheet, column_letters
from .table_header import Header

__all__ = ["LONGEST_NAME", "RowReading", "Stated", "Table"]

#: Bound of the name of a bidder, a lot or an alternative, which stands in every paper. [character]
LONGEST_NAME = 200


class Stated(NamedTuple):
    """What a row states in one column, or a label for all rows."""

    heading: Heading
    cell: Cell
    place: Place


@dataclass(frozen=True)
class Table:
    """One table of offers, and what is known beside it.

    Parameters
    ----------
    sheet : Sheet
        Where it stands.
    header : Header
        Its header row.
    rows : tuple of Row
        The rows below.
    labels : Labels
        What the file says beside its tables.
    marks : sequence of Marks
        How numbers stand in text.
    tender : Tender or None
        None where the tender could not be read.
    """

    sheet: Sheet
    header: Header
    rows: tuple[Row, ...]
    labels: Labels
    marks: Sequence[Marks]
    tender: Tender | None

    @cached_property
    def lots(self) -> Mapping[str, Lot]:
        """Lots of the tender by what a bidder may call them; the first where the tender has one twice."""
        lots: dict[str, Lot] = {}
        for lot in self.tender.lots if self.tender else ():
            for name in (lot.id, f"lot {lot.id}"):
                lots.setdefault(name.casefold(), lot)
        return lots

    @cached_property
    def rules(self) -> AnnouncedRules:
        """Rules that the tender announces, those of its profile included; none where they cannot be read."""
        announced = self.tender.rules.announced if self.tender else AnnouncedRules()
        profile = announced.profile
        return announced if profile is None or profile_named(profile.value) is None else settled_rules(announced)

    @cached_property
    def header_currency(self) -> Entry | None:
        """Currency that stands with the unit price in the header."""
        price = self.header.headings.get("unit_price")
        return Entry(value=price.unit, place=self.header_place(price)) if price is not None and price.unit else None

    @cached_property
    def _columns(self) -> tuple[tuple[str, int, str], ...]:
        """Field, column, and how a place names the column."""
        named = self.sheet.name is not None
        return tuple(
            (field, heading.at, column_letters(heading.at) if named else self.sheet.heading(heading.at))
            for field, heading in self.header.headings.items()
        )

    def header_place(self, heading: Heading) -> Place:
        """Place of a header cell."""
        return self.sheet.place_of(self.header.row, heading.at)

    def places(self, row: Row) -> dict[str, Place]:
        """Where each field of a row stands, also the empty ones."""
        file, sheet, number = self.sheet.file, self.sheet.name, row.number
        if sheet is None:
            return {field: Place(file, None, None, number, text) for field, _, text in self._columns}
        return {field: Place(file, sheet, f"{letters}{number}") for field, _, letters in self._columns}


class RowReading:
    """One row while it is read.

    Parameters
    ----------
    table : Table
        The table.
    row : Row
        The row.
    """

    __slots__ = ("findings", "lot", "places", "row", "table", "who")

    def __init__(self, table: Table, row: Row) -> None:
        self.table, self.row = table, row
        self.places = table.places(row)
        self.findings: list[Finding] = []
        self.lot: Lot | None = None
        self.who: tuple[str | None, str | None] = (None, None)  # bidder and lot, as findings name them

    def cell(self, name: str) -> Cell:
        """Cell of a field; blank where the table has no such column."""
        heading = self.table.header.headings.get(name)
        return self.row.cell(heading.at) if heading else BLANK

    def place(self, name: str) -> Place:
        """Place of a field; of the row where the table has no such column."""
        return self.places[name] if name in self.places else self.table.sheet.place_of_row(self.row)

    def stated(self, name: str) -> Stated | None:
        """What the row states, else what a label states for all rows; None where nothing stands there."""
        heading = self.table.header.headings.get(name)
        if heading is not None:
            cell = self.row.cell(heading.at)
            if not cell.is_blank:
                return Stated(heading, cell, self.places[name])
        label = self.table.labels.terms.get(name)
        return Stated(label.heading, label.cell, label.place) if label is not None else None

    def entry(self, name: str) -> Entry | None:
        """Text of a field of the row."""
        cell = self.cell(name)
        return None if cell.is_blank else Entry(value=collapsed(cell.text), place=self.places[name])

    def report(self, kind: str, name: str, rule: str, got: str | None, fix: str = "") -> None:
        """Note a finding on a field of the row."""
        self.findings.append(Finding(kind, COLUMN_OF[name].name, rule, self.place(name), got, *self.who, fix))

    def refuse(self, stated: Stated, refusal: NoNumber) -> None:
        """Note a value that cannot be used; only a note where nothing in the evaluation of the lot needs it."""
        column = stated.heading.column
        needed = is_needed(column.field, self.lot, self.table.tender, self.table.rules)
        kind = refusal.kind if needed else "value-not-read"
        got = stated.cell.text
        self.findings.append(Finding(kind, column.name, refusal.rule, stated.place, got, *self.who, refusal.fix))

    def refuse_payment(self, stated: Stated) -> None:
        """Note that a payment at delivery hangs on a blank cell of this row."""
        needed = is_needed(stated.heading.column.field, self.lot, self.table.tender, self.table.rules)
        rule = f"must be stated, since a payment falls due then ({stated.place})"
        self.report("value-missing" if needed else "value-not-read", "delivery_weeks", rule, "")

    def text(self, stated: Stated) -> Entry | None:
        """Words of the bidder; refused where an error or a formula without value stands there."""
        if stated.cell.content in (Content.ERROR, Content.FORMULA):
            rule = "must be a text; there is an error, or a formula without a computed value"
            self.refuse(stated, NoNumber("value-unreadable", rule))
            return None
        return Entry(value=collapsed(stated.cell.text), place=stated.place)
