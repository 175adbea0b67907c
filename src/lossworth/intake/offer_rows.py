"""From the rows of a table to offers, each value with its cell, each fault with bidder and lot."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from ..findings import Finding
from ..money import is_currency_code
from ..records.bid import Offer
from ..records.bid_columns import ITEM_HEADING
from ..records.quantity import Entry
from .cells import Content, collapsed
from .offer_checks import CHECKS
from .offer_numbers import FIGURES, read_figure
from .offer_table import LONGEST_NAME, RowReading, Table
from .offer_terms import read_terms
from .sheet import Row
from .suggestions import did_you_mean

__all__ = ["Table", "read_offers", "rows_with_figures"]

#: Basis of a guarantee, which a buyer's form may hold before any bidder fills it in.
_NO_OFFER_ALONE = ("load_loss_rating_kva", "reference_temperature_c")
_NAMES = (Content.TEXT, Content.NUMBER)  # not a date, an error or a formula without value
_ALWAYS_NEEDED = ("unit_price", "no_load_loss_kw", "load_loss_kw")
#: Words by which a row says that it is the base offer and no alternative.
_BASE_OFFER = frozenset({"base", "base offer", "no", "none", "-", "\u2013", "\u2014"})
_TOO_LONG = f"must be a name of at most {LONGEST_NAME} characters"


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
    figures = tuple(name for name in FIGURES if name in table.header.headings)
    telling = {row.number for row in rows_with_figures(table)}
    offers: list[Offer] = []
    findings: list[Finding] = []
    for row in table.rows:
        if row.number not in telling:
            findings += _note_row(table, row)
            continue
        reading = RowReading(table, row)
        offer = _offer(reading, figures)
        findings += reading.findings
        if offer is not None:
            offers.append(offer)
    return tuple(offers), tuple(findings)


def rows_with_figures(table: Table) -> tuple[Row, ...]:
    """Rows that state a unit price, a loss or another figure of a unit, and so are offers.

    Parameters
    ----------
    table : Table
        The table.

    Returns
    -------
    tuple of Row
        In their order. A total or the price of an item makes an offer only in a row that names a lot: else it is the
        line of sums below a table.
    """
    headings = table.header.headings
    figures = [headings[name].at for name in FIGURES if name in headings and name not in _NO_OFFER_ALONE]
    sums = [each.at for name, each in headings.items() if name == "total_price" or name.startswith(ITEM_HEADING)]
    return tuple(row for row in table.rows if _states(row, figures) or (_states(row, sums) and _names_lot(table, row)))


def _states(row: Row, columns: Sequence[int]) -> bool:
    return any(not row.cell(at).is_blank for at in columns)


def _names_lot(table: Table, row: Row) -> bool:
    lot = table.header.headings.get("lot")
    return lot is not None and collapsed(row.cell(lot.at).text).casefold() in table.lots


def _offer(reading: RowReading, figures: tuple[str, ...]) -> Offer | None:
    bidder, lot = _bidder(reading), _lot(reading)
    alternative, is_named = _alternative(reading)
    reading.who = (bidder.value if bidder else None, lot.value if lot else None)
    currency = _currency(reading)
    numbers: dict[str, Any] = {}
    for name in figures:
        stated = reading.stated(name)
        if stated is not None:
            numbers[name] = read_figure(reading, stated, currency)
        elif name in _ALWAYS_NEEDED and not _has_total_instead(reading, name):
            reading.report("value-missing", name, "must be stated", "")
    if bidder is None or lot is None or not is_named:
        return None
    offer = Offer(
        bidder=bidder,
        lot=lot,
        currency=currency,
        alternative=alternative,
        cooling=reading.entry("cooling"),
        remark=reading.entry("remark"),
        terms=read_terms(reading, currency, numbers.get("delivery_weeks")),
        place=reading.table.sheet.place_of_row(reading.row),
        columns=reading.places,
        **numbers,
    )
    if reading.lot is not None and reading.table.tender is not None:
        reading.findings += [f for check in CHECKS for f in check(offer, reading.lot, reading.table.tender)]
    return offer


def _has_total_instead(reading: RowReading, name: str) -> bool:
    """Whether a total loss stands in place of a blank load loss, which is for the evaluation to judge."""
    return name == "load_loss_kw" and not reading.cell("total_loss_kw").is_blank


# Rows that are no offer


def _note_row(table: Table, row: Row) -> list[Finding]:
    if _is_blank_row_of_form(table, row):
        return []
    text = "; ".join(cell.text for cell in row.cells if not cell.is_blank)
    rule = "states no price, loss or other figure"
    return [Finding("row-not-read", "row", rule, table.sheet.place_of_row(row), got=text)]


def _is_blank_row_of_form(table: Table, row: Row) -> bool:
    """Whether the row names a lot of the tender and answers nothing: the lot is not offered.

    What a form prints beside the lot, and a column that checks the row, have no heading in the header row.
    """
    headings, cells = table.header.headings, table.header.row.cells
    printed = {headings[name].at for name in ("lot", *_NO_OFFER_ALONE) if name in headings}
    asked = [at for at, heading in enumerate(cells) if not heading.is_blank and at not in printed]
    return _names_lot(table, row) and not _states(row, asked)


# Whose offer, and for what


def _bidder(reading: RowReading) -> Entry | None:
    stated = reading.cell("bidder")
    rule = "must be stated, in a column or beside a label Bidder"
    if stated.is_blank or stated.content in _NAMES:
        entry = reading.entry("bidder") or reading.table.labels.bidder
        if entry is None and "bidder" in reading.table.header.twice:
            return None  # reported with the header
        if entry is not None and len(entry.value) <= LONGEST_NAME:
            return entry
        rule = rule if entry is None else _TOO_LONG
    reading.findings.append(Finding("bidder-missing", "bidder", rule, reading.place("bidder"), got=stated.text))
    return None


def _lot(reading: RowReading) -> Entry | None:
    """Lot as the tender has it, noted in the reading; as the bidder names it where there is no tender."""
    if "lot" not in reading.table.header.headings:
        return None  # reported with the header
    stated = reading.cell("lot")
    text, tender = collapsed(stated.text), reading.table.tender
    usable = stated.content in _NAMES and len(text) <= LONGEST_NAME
    if tender is None and usable:
        return Entry(value=text, place=reading.places["lot"])
    lot = reading.table.lots.get(text.casefold()) if usable else None
    if lot is None:
        ids = [lot.id for lot in tender.lots] if tender else []
        rule = f"must be one of the tender's lots ({', '.join(ids)})" if ids else "must be stated"
        fix = did_you_mean(text, ids) if usable else ""
        reading.findings.append(Finding("lot-unknown", "lot", rule, reading.place("lot"), got=text, fix=fix))
        return None
    reading.lot = lot
    return Entry(value=lot.id, place=reading.places["lot"])


def _alternative(reading: RowReading) -> tuple[Entry | None, bool]:
    """Name of the alternative, none for the base offer; and whether that is known."""
    if "alternative" not in reading.table.header.headings:
        return None, "alternative" not in reading.table.header.twice
    stated = reading.cell("alternative")
    entry = reading.entry("alternative")
    if entry is None or entry.value.casefold() in _BASE_OFFER:
        return None, True
    if stated.content in _NAMES and len(entry.value) <= LONGEST_NAME:
        return entry, True
    reading.findings.append(Finding("bidder-missing", "alternative", _TOO_LONG, entry.place, got=stated.text))
    return None, False


def _currency(reading: RowReading) -> Entry | None:
    table = reading.table
    if "currency" in table.header.twice:
        return None
    sources = [entry for entry in (reading.entry("currency"), table.labels.currency, table.header_currency) if entry]
    if not sources:
        rule = "must be stated, in a column, beside a label Currency, or with the price as in: unit price [NCU]"
        reading.report("value-missing", "currency", rule, "")
        return None
    first = sources[0]
    other = next((entry for entry in sources if entry.value != first.value), None)
    if other is not None:
        rule = f'must be the same everywhere; {other.place} has "{other.value}"'
    elif not is_currency_code(first.value):
        rule = "must be a currency code of three capital letters"
    else:
        return first
    fix = "Ask the bidder in which currency the price is meant; it is never assumed."
    reading.findings.append(Finding("value-unreadable", "currency", rule, first.place, first.value, *reading.who, fix))
    return None
