"""From the rows of a table to offers, each value with its cell, each fault with bidder and lot."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field
from decimal import Decimal
from typing import Any

from ..findings import Finding, Place
from ..money import ARITHMETIC, is_currency_code
from ..records.bid import Offer
from ..records.quantity import Entry, Quantity
from ..records.tender import Lot, Tender
from .cells import Cell, Content, Marks, NoNumber, collapsed, number_in
from .columns import COLUMN_OF
from .labels import Labels
from .offer_checks import CHECKS, is_needed
from .sheet import Row, Sheet
from .suggestions import did_you_mean
from .table_header import Header

__all__ = ["Table", "read_offers"]

_NUMBERS = (
    "unit_price",
    "no_load_loss_kw",
    "load_loss_kw",
    "auxiliary_loss_kw",
    "total_loss_kw",
    "load_loss_rating_kva",
    "reference_temperature_c",
    "resistive_loss_kw",
    "stray_loss_kw",
    "cooling_power_no_load_kw",
    "cooling_power_rated_kw",
    "impedance_percent",
    "delivery_weeks",
    "quantity",
)
#: Basis of a guarantee, which a buyer's form may hold before any bidder fills it in.
_NO_OFFER_ALONE = ("load_loss_rating_kva", "reference_temperature_c")
#: Figures of which zero is possible.
_MAY_BE_0 = ("auxiliary_loss_kw", "stray_loss_kw", "cooling_power_no_load_kw", "cooling_power_rated_kw")
_NAMES = (Content.TEXT, Content.NUMBER)  # not a date, an error or a formula without value
_ALWAYS_NEEDED = ("unit_price", "no_load_loss_kw", "load_loss_kw")


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


def read_offers(table: Table) -> tuple[tuple[Offer, ...], tuple[Finding, ...]]:
    """Offers of a table.

    Parameters
    ----------
    table : Table
        The table.

    Returns
    -------
    offers : tuple of Offer
        Of the rows whose bidder and lot are known.
    findings : tuple of Finding
        Everything that is wrong with the rows.
    """
    readings = [_RowReading(table, row) for row in table.rows]
    offers = [reading.offer() for reading in readings]
    findings = [finding for reading in readings for finding in reading.findings]
    return tuple(offer for offer in offers if offer is not None), tuple(findings)


@dataclass
class _RowReading:
    table: Table
    row: Row
    findings: list[Finding] = field(default_factory=list)
    who: tuple[str | None, str | None] = (None, None)  # bidder and lot, as findings name them

    def offer(self) -> Offer | None:
        if not any(self.states(name) for name in _NUMBERS if name not in _NO_OFFER_ALONE):
            self.note_row()
            return None
        bidder, lot_entry, lot = self.bidder(), *self.lot()
        self.who = (bidder.value if bidder else None, lot_entry.value if lot_entry else None)
        currency = self.currency()
        in_header = [name for name in _NUMBERS if name in self.table.header.headings]
        numbers: dict[str, Any] = {name: self.number(name, lot, currency) for name in in_header}
        if bidder is None or lot_entry is None:
            return None
        offer = Offer(
            bidder=bidder,
            lot=lot_entry,
            currency=currency,
            cooling=self.entry("cooling"),
            remark=self.entry("remark"),
            place=self.table.sheet.place_of_row(self.row),
            columns={name: self.place(name) for name in self.table.header.headings},
            **numbers,
        )
        if lot is not None and self.table.tender is not None:
            self.findings += [f for check in CHECKS for f in check(offer, lot, self.table.tender)]
        return offer

    # What stands in the row

    def states(self, name: str) -> bool:
        return not self.cell(name).is_blank

    def cell(self, name: str) -> Cell:
        heading = self.table.header.headings.get(name)
        return self.row.cell(heading.at) if heading else Cell(Content.BLANK, "")

    def place(self, name: str) -> Place:
        heading = self.table.header.headings.get(name)
        if heading is None:
            return self.table.sheet.place_of_row(self.row)
        return self.table.sheet.place_of(self.row, heading.at)

    def entry(self, name: str) -> Entry | None:
        cell = self.cell(name)
        return None if cell.is_blank else Entry(value=collapsed(cell.text), place=self.place(name))

    def report(self, kind: str, name: str, rule: str, got: str | None, fix: str = "") -> None:
        bidder, lot = self.who
        field_name = COLUMN_OF[name].name
        self.findings.append(Finding(kind, field_name, rule, self.place(name), got, bidder, lot, fix))

    def note_row(self) -> None:
        if self.is_blank_row_of_form():
            return
        text = "; ".join(cell.text for cell in self.row.cells if not cell.is_blank)
        rule = "states no price, loss or other figure"
        self.findings.append(Finding("row-not-read", "row", rule, self.table.sheet.place_of_row(self.row), got=text))

    def is_blank_row_of_form(self) -> bool:
        """Whether the row names a lot of the tender and answers nothing: the lot is not offered.

        What a form prints beside the lot, and a column that checks the row, have no heading in the header row.
        """
        header, tender = self.table.header, self.table.tender
        lot = header.headings.get("lot")
        if lot is None or tender is None or _lot_named(collapsed(self.cell("lot").text), tender) is None:
            return False
        printed = {header.headings[name].at for name in _NO_OFFER_ALONE if name in header.headings} | {lot.at}
        asked = [at for at, heading in enumerate(header.row.cells) if not heading.is_blank and at not in printed]
        return all(self.row.cell(at).is_blank for at in asked)

    # Whose offer, and for what

    def bidder(self) -> Entry | None:
        stated = self.cell("bidder")
        if stated.is_blank or stated.content in _NAMES:
            entry = self.entry("bidder") or self.table.labels.bidder
            if entry is not None or "bidder" in self.table.header.twice:
                return entry
        rule = "must be stated, in a column or beside a label Bidder"
        self.findings.append(Finding("bidder-missing", "bidder", rule, self.place("bidder"), got=stated.text))
        return None

    def lot(self) -> tuple[Entry | None, Lot | None]:
        if "lot" not in self.table.header.headings:
            return None, None  # reported with the header
        stated = self.cell("lot")
        text, tender = collapsed(stated.text), self.table.tender
        usable = stated.content in _NAMES
        if tender is None and usable:
            return Entry(value=text, place=self.place("lot")), None
        lot = _lot_named(text, tender) if tender and usable else None
        if lot is None:
            ids = [lot.id for lot in tender.lots] if tender else []
            rule = f"must be one of the tender's lots ({', '.join(ids)})" if ids else "must be stated"
            fix = did_you_mean(text, ids) if usable else ""
            self.findings.append(Finding("lot-unknown", "lot", rule, self.place("lot"), got=text, fix=fix))
            return None, None
        return Entry(value=lot.id, place=self.place("lot")), lot

    # Figures

    def number(self, name: str, lot: Lot | None, currency: Entry | None) -> Quantity | None:
        heading, cell = self.table.header.headings[name], self.cell(name)
        if cell.is_blank:
            total_instead = name == "load_loss_kw" and self.states("total_loss_kw")  # for the evaluation to judge
            if name in _ALWAYS_NEEDED and not total_instead:
                self.report("value-missing", name, "must be stated", "")
            return None
        if heading.times is None:
            return None  # reported with the header
        unit = heading.unit or (currency.value if currency and name == "unit_price" else "")
        number = number_in(cell, self.table.marks, unit)
        if isinstance(number, NoNumber):
            self.refuse(name, lot, number)
            return None
        value = ARITHMETIC.multiply(number, heading.times)
        if refusal := _out_of_bounds(name, value, unit):
            self.refuse(name, lot, refusal)
            return None
        return Quantity(value=value, stated=number, unit=unit, text=cell.text, place=self.place(name))

    def refuse(self, name: str, lot: Lot | None, refusal: NoNumber) -> None:
        """Finding on a figure; only a note where nothing in the evaluation of the lot needs it."""
        needed = is_needed(name, lot, self.table.tender)
        self.report(refusal.kind if needed else "value-not-read", name, refusal.rule, self.cell(name).text, refusal.fix)

    def currency(self) -> Entry | None:
        price = self.table.header.headings.get("unit_price")
        of_header = None
        if price is not None and price.unit:
            of_header = Entry(value=price.unit, place=self.table.sheet.place_of(self.table.header.row, price.at))
        sources = [entry for entry in (self.entry("currency"), self.table.labels.currency, of_header) if entry]
        if "currency" in self.table.header.twice:
            return None
        if not sources:
            rule = "must be stated, in a column, beside a label Currency, or with the price as in: unit price [NCU]"
            self.report("value-missing", "currency", rule, "")
            return None
        first = sources[0]
        other = next((entry for entry in sources if entry.value != first.value), None)
        if other is not None:
            rule = f'must be the same everywhere; {other.place} has "{other.value}"'
        elif not is_currency_code(first.value):
            rule = "must be a currency code of three capital letters"
        else:
            return first
        self.currency_unreadable(first, rule)
        return None

    def currency_unreadable(self, entry: Entry, rule: str) -> None:
        bidder, lot = self.who
        fix = "Ask the bidder in which currency the price is meant; it is never assumed."
        self.findings.append(Finding("value-unreadable", "currency", rule, entry.place, entry.value, bidder, lot, fix))


def _lot_named(text: str, tender: Tender) -> Lot | None:
    """Lot by its id, to which a bidder may add the word; the first where the tender has it twice."""
    return next(
        (lot for lot in tender.lots if text.casefold() in (lot.id.casefold(), f"lot {lot.id}".casefold())), None
    )


def _out_of_bounds(name: str, value: Decimal, unit: str) -> NoNumber | None:
    """Bounds of a figure whatever the lot."""
    if name in _MAY_BE_0:
        return NoNumber("value-out-of-bounds", "must not be negative") if value < 0 else None
    if value > 0:
        return None
    return NoNumber("value-out-of-bounds", f"must be above 0 {unit}".rstrip())
