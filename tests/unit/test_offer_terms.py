"""Commercial terms of offers: columns, labels for the whole bid, words, days, payments, items, alternatives."""

from __future__ import annotations

import datetime
from decimal import Decimal
from pathlib import Path
from typing import Any

import pytest

from lossworth.findings import Finding
from lossworth.intake.columns import COLUMNS
from lossworth.intake.heading import heading_of
from lossworth.records.bid import Offer
from lossworth.records.bid_columns import BID_HEADINGS, heading_text, payment_label
from lossworth.records.quantity import Quantity
from support.commercial_texts import FULL, changed
from support.tender_folders import TENDER, bids_of, told, valid_tender, workbook_bytes

HEADER = ("Lot", "Bidder", "Unit price [NCU]", "No-load loss [kW]", "Load loss [kW]", "Delivery [weeks]")
ROW: tuple[object, ...] = ("1", "Alder", "4000", "0.12", "1.2", "30")
#: The tender in which every rule counts what a bidder states.
COUNTED = FULL.replace('price_variation = "evaluate at the base date"', 'price_variation = "reject variable prices"')


def bids(
    folder: Path, header: str, *cells: str, tender: str = COUNTED
) -> tuple[tuple[Offer, ...], tuple[Finding, ...]]:
    """One offer for lot 1 in a table with one more column for each cell; headers stand between bars."""
    more = [f'"{each}"' for each in (*header.split("|"), *cells)]
    rows = (",".join((*HEADER, *more[: len(cells)])), ",".join((*map(str, ROW), *more[len(cells) :])))
    return bids_of(folder, "a.csv", "\n".join(rows) + "\n", valid_tender(folder, tender))


def stated(offer: Offer, name: str) -> Any:
    """Value of a term; of a text or figure what it holds."""
    value = getattr(offer.terms, name)
    return getattr(value, "value", value)


@pytest.mark.parametrize(
    ("header", "cell", "field", "value"),
    [
        ("Total price [NCU]", "40000", "total_price", Decimal(40000)),
        ("price of the lot", "40000", "total_price", Decimal(40000)),
        ("total_price", "40000", "total_price", Decimal(40000)),
        ("Discount [%]", "3", "unconditional_discount_percent", Decimal(3)),
        ("Unconditional discount (%)", "3 %", "unconditional_discount_percent", Decimal(3)),
        ("unconditional_discount_percent", "0", "unconditional_discount_percent", Decimal(0)),
        ("Prompt payment discount [%]", "2", "prompt_payment_discount_percent", Decimal(2)),
        ("Price terms", "EXW", "delivery_term", "EXW"),
        ("Incoterm", "exw works", "delivery_term", "EXW"),
        ("Delivery terms", "Delivered DDP (Incoterms 2020), site", "delivery_term", "DDP"),
        ("Tax included", "yes", "tax_included", True),
        ("Tax included", "NO", "tax_included", False),
        ("tax_included", "false", "tax_included", False),
        ("Taxes included", "Yes, 10 %", "tax_included", True),
        ("Origin", "Home", "origin", "Home"),
        ("Price basis", "Firm", "price_basis", "firm"),
        ("Price basis", "fixed price", "price_basis", "firm"),
        ("Basis of prices", "Variable", "price_basis", "variable"),
        ("Valid until", "2026-12-31", "valid_until", datetime.date(2026, 12, 31)),
        ("Insulating liquid", "Natural  ester", "insulating_liquid", "Natural ester"),
        ("PCB free", "yes", "pcb_free", True),
        ("Free of PCB", "n", "pcb_free", False),
        ("Sound level [dB(A)]", "42", "sound_level_db", Decimal(42)),
        ("Guaranteed sound level (dB)", "42", "sound_level_db", Decimal(42)),
        ("Sound level", "42", "sound_level_db", Decimal(42)),
        ("sound_level_db", "42", "sound_level_db", Decimal(42)),
        ("Claimed tolerance [%]", "10", "claimed_tolerance_percent", Decimal(10)),
        ("Declared efficiency [%]", "99.1", "declared_efficiency_percent", Decimal("99.1")),
        ("Declared efficiency [pu]", "0.991", "declared_efficiency_percent", Decimal("99.1")),
        ("Deviations", "Clause 4 is not accepted.", "deviations", "Clause 4 is not accepted."),
        ("Deviations", "None.", "deviations", None),
        ("Deviations", "\u2013", "deviations", None),
    ],
)
def test_read_bids__column_of_terms(tmp_path: Path, header: str, cell: str, field: str, value: object) -> None:
    """Each column fills its field, however it is headed, and the places of the offer know it."""
    (offer,), findings = bids(tmp_path, header, cell)
    assert told(findings) == []
    assert stated(offer, field) == value
    assert offer.columns[field].column == header


#: Settings under which a term does nothing, by its header.
IGNORED = {
    "Discount [%]": FULL.replace('unconditional_discounts = "deduct"', 'unconditional_discounts = "ignore"'),
    "Tax included": FULL.replace('taxes = "excluded"\n', ""),
    "Price basis": FULL,
    "Price terms": TENDER,
    "Total price [NCU]": FULL.replace('arithmetic_errors = "correct"', 'arithmetic_errors = "take as read"'),
    "Claimed tolerance [%]": FULL.replace('loss_tolerance = "none, the guarantee is a ceiling"\n', ""),
    "PCB free": TENDER,
    "Sound level [dB(A)]": TENDER,
    "Declared efficiency [%]": TENDER,
    "Insulating liquid": TENDER,
    "Payment at order [%]": FULL.replace('"discount to a common date"', '"ignore"'),
    "Item: spare bushing set": FULL.replace("counts = true", "counts = false"),
}
US_LIMIT = FULL.replace('"EU 548/2014"', '"US 10 CFR 431"').replace(
    '"liquid medium"\ntier = 2', '"liquid-immersed"\nphases = 3'
)
US_LIMIT = US_LIMIT.replace("on_load_tap_changer = false\n", "")


@pytest.mark.parametrize(
    ("header", "cell", "kind", "rule"),
    [
        ("Total price [NCU]", "see annex", "value-unreadable", "must be a number"),
        ("Total price [NCU]", "0", "value-out-of-bounds", "must be above 0 NCU"),
        ("Discount [%]", "3 percent", "value-unreadable", "must be a number"),
        ("Discount [%]", "101", "value-out-of-bounds", "must be at most 100 %"),
        ("Discount [%]", "-3", "value-out-of-bounds", "must not be negative"),
        ("Tax included", "n/a", "value-unreadable", "must be yes or no"),
        ("Tax included", "yes and no", "value-unreadable", "must be yes or no"),
        ("Price basis", "see note", "value-unreadable", "must be firm or variable"),
        ("Price basis", "not firm", "value-unreadable", "must be firm or variable"),
        ("Price basis", "firm or variable", "value-unreadable", "must be firm or variable"),
        ("Price terms", "free site", "value-unreadable", "must name one rule of Incoterms 2020"),
        ("Price terms", "EXW or DDP", "value-unreadable", "must name one rule of Incoterms 2020"),
        ("Claimed tolerance [%]", "as IEC", "value-unreadable", "must be a number"),
        ("PCB free", "certified", "value-unreadable", "must be yes or no"),
        ("Sound level [dB(A)]", "< 45", "value-unreadable", "must be a number"),
        ("Sound level [dB(A)]", "0", "value-out-of-bounds", "must be above 0 dB(A)"),
        ("Payment at order [%]", "some", "value-unreadable", "must be a number"),
        ("Payment at order [%]", "130", "value-out-of-bounds", "must be at most 100 %"),
        ("Item: spare bushing set", "on request", "value-unreadable", "must be a number"),
        ("Item: spare bushing set", "-1", "value-out-of-bounds", "must not be negative"),
    ],
)
def test_read_bids__term_that_cannot_be_read(tmp_path: Path, header: str, cell: str, kind: str, rule: str) -> None:
    """It keeps the offer out where a rule, limit or adder of the tender uses it, and is noted elsewhere."""
    _, (finding,) = bids(tmp_path, header, cell)
    assert (finding.kind, finding.got, finding.bidder, finding.lot) == (kind, cell, "Alder", "1")
    assert finding.rule.startswith(rule)
    assert str(finding.place) == f"bids/a.csv:2[{header}]"
    _, (note,) = bids(tmp_path, header, cell, tender=IGNORED[header])
    assert (note.kind, note.got) == ("value-not-read", cell)


@pytest.mark.parametrize(
    "cell", ["31.12.2026", "12/31/2026", "20261231", "2026-W53-4", "2026-02-31", "90 days", "46387"]
)
def test_read_bids__day_that_is_none(tmp_path: Path, cell: str) -> None:
    """A day in another order could be read two ways; the end of validity is noted and moves nothing."""
    (offer,), (finding,) = bids(tmp_path, "Valid until", cell)
    assert (offer.terms.valid_until, finding.kind, finding.got) == (None, "value-not-read", cell)


def test_read_bids__efficiency_where_a_regulation_limits_it(tmp_path: Path) -> None:
    """A declared efficiency is needed for the tables that limit it."""
    _, (finding,) = bids(tmp_path, "Declared efficiency [%]", "high", tender=US_LIMIT)
    assert finding.kind == "value-unreadable"
    _, (finding,) = bids(tmp_path, "Declared efficiency [%]", "100.1", tender=US_LIMIT)
    assert finding.rule == "must be at most 100 %"


def test_read_bids__terms_of_a_workbook(tmp_path: Path) -> None:
    """Date cells, truth values, percent formats and numbers of a spreadsheet; errors are no words."""
    header = (*HEADER, "Valid until", "PCB free", "Discount [%]", "Insulating liquid", "Deviations")
    row = (1, "Alder", 4000, 0.12, 1.2, 30, datetime.date(2026, 12, 31), True, 0.03, "#REF!", "=A1")
    data = workbook_bytes({"Offers": (header, row)}, {"I2": "0.0%"})
    (offer,), findings = bids_of(tmp_path, "a.xlsx", data, valid_tender(tmp_path, COUNTED))
    assert (offer.terms.valid_until, offer.terms.pcb_free) == (datetime.date(2026, 12, 31), True)
    assert stated(offer, "unconditional_discount_percent") == 3
    assert (offer.terms.insulating_liquid, offer.terms.deviations) == (None, None)
    assert told(findings) == [
        ("value-unreadable", "bids/a.xlsx[Offers]!J2", "#REF!"),
        ("value-not-read", "bids/a.xlsx[Offers]!K2", "=A1"),
    ]


def test_read_bids__total_without_unit_price(tmp_path: Path) -> None:
    """A row that names a lot and states a total alone is an offer in which everything else is missing."""
    header = "Lot,Bidder,Unit price [NCU],Total price,No-load loss [kW],Load loss [kW]\n"
    rows = "1,Alder,,40000,,\nTotal,,,40000,,\n"
    (offer,), findings = bids_of(tmp_path, "a.csv", header + rows, valid_tender(tmp_path, COUNTED))
    assert stated(offer, "total_price") == 40000
    missing = [(finding.kind, finding.place.line if finding.place else None) for finding in findings]
    assert missing == [*[("value-missing", 2)] * 3, ("row-not-read", 3)]


# Payments


def payments(offer: Offer) -> list[tuple[Decimal, Decimal]]:
    """Share and week of each payment."""
    return [(each.share.value, each.weeks_after_order.value) for each in offer.terms.payments]


def test_read_bids__payments(tmp_path: Path) -> None:
    """Each payment has a column; that at delivery falls due in the week of delivery of the row."""
    header = "Payment at order [%]|Payment 12 weeks after order [%]|Payment at delivery [%]"
    (offer,), findings = bids(tmp_path, header, "30", "20.5", "49.5")
    assert told(findings) == []
    assert payments(offer) == [(Decimal("0.3"), 0), (Decimal("0.205"), 12), (Decimal("0.495"), 30)]
    first, second, last = offer.terms.payments
    assert (first.share.text, first.share.unit, str(first.share.place)) == (
        "30",
        "%",
        "bids/a.csv:2[Payment at order [%]]",
    )
    assert str(second.weeks_after_order.place) == "bids/a.csv:1[Payment 12 weeks after order [%]]"
    assert last.weeks_after_order == offer.delivery_weeks
    assert offer.columns["payments"] == first.share.place


def test_read_bids__payments_of_which_one_is_unreadable(tmp_path: Path) -> None:
    """No schedule is made of a part of the payments."""
    (offer,), (finding,) = bids(tmp_path, "Payment at order [%]|Payment at delivery [%]", "30", "rest")
    assert (offer.terms.payments, finding.kind) == ((), "value-unreadable")


def test_read_bids__payment_at_a_delivery_that_is_not_stated(tmp_path: Path) -> None:
    """A payment at delivery needs the week of delivery."""
    text = ",".join((*HEADER[:-1], "Payment at delivery [%]")) + "\n1,Alder,4000,0.12,1.2,100\n"
    (offer,), (finding,) = bids_of(tmp_path, "a.csv", text, valid_tender(tmp_path, COUNTED))
    assert (offer.terms.payments, finding.kind, finding.field) == ((), "value-missing", "delivery")
    assert finding.place == offer.place


@pytest.mark.parametrize(
    ("header", "field"),
    [
        ("Payment with order [%]", "payment: 0"),
        ("payment 0 weeks after order [%]", "payment: 0"),
        ("payment_at_order_percent", None),
        ("Payment on delivery (%)", "payment: at delivery"),
        ("PAYMENT 4.50 weeks after order [%]", "payment: 4.5"),
        ("Payment 1 week after order [%]", "payment: 1"),
        ("Payment some weeks after order [%]", None),
        ("Payment", None),
    ],
)
def test_heading_of__payments(header: str, field: str | None) -> None:
    """A payment is headed by when it falls due; the same week is the same column."""
    heading = heading_of(header)
    assert field == (None if heading is None else heading.column.field)


# Further items


@pytest.mark.parametrize(
    "header", ["Item: spare bushing set", "item: Spare  Bushing Set [NCU]", "ITEM:spare bushing set (NCU)"]
)
def test_read_bids__item(tmp_path: Path, header: str) -> None:
    """The price of an item goes by the tender's name for it; a price of zero is one."""
    for cell in ("250", "0"):
        (offer,), findings = bids(tmp_path, header, cell)
        assert told(findings) == []
        price = offer.terms.item_prices["spare bushing set"]
        assert (price.value, price.unit) == (Decimal(cell), "NCU")
        assert offer.columns["item: spare bushing set"].column == header


def test_read_bids__item_with_brackets_in_its_name(tmp_path: Path) -> None:
    """The tender's own names come before units in brackets."""
    text = changed('name = "spare bushing set"', 'name = "spare bushing set (NCU)"', COUNTED)
    for header in ("Item: spare bushing set (NCU)", "Item: spare bushing set (NCU) [NCU]"):
        (offer,), findings = bids(tmp_path, header, "250", tender=text)
        assert (told(findings), list(offer.terms.item_prices)) == ([], ["spare bushing set (NCU)"])


def test_read_bids__item_that_the_tender_does_not_have(tmp_path: Path) -> None:
    """It is noted, with the name that comes nearest."""
    (offer,), (finding,) = bids(tmp_path, "Item: spare bushing sets [NCU]", "250")
    assert (finding.kind, offer.terms.item_prices) == ("column-not-read", {})
    assert finding.remedy == 'Did the bidder mean "item: spare bushing set"?'


def test_read_bids__item_of_another_lot(tmp_path: Path) -> None:
    """A price for an item that the lot does not have is noted; a blank is nothing."""
    tender = valid_tender(tmp_path, COUNTED)
    rows = "".join(f"2,{who},22000,0.6,7,30,{price}\n" for who, price in (("Alder", "250"), ("Birch", "")))
    offers, (finding,) = bids_of(tmp_path, "a.csv", f"{','.join(HEADER)},Item: spare bushing set\n{rows}", tender)
    assert [offer.terms.item_prices for offer in offers] == [{}, {}]
    assert (finding.kind, finding.rule, finding.bidder) == ("value-not-read", "is no item of the lot", "Alder")


def test_read_bids__item_in_another_currency(tmp_path: Path) -> None:
    """All prices of a row are in one currency."""
    _, (finding,) = bids(tmp_path, "Item: spare bushing set [FCU]", "250")
    assert (finding.kind, finding.rule) == (
        "value-unreadable",
        "must be in the currency of the bid, NCU, as the unit price is",
    )


def test_read_bids__items_without_tender(tmp_path: Path) -> None:
    """Without a tender an item keeps the name that the bidder gives it."""
    text = f"{','.join(HEADER)},Item: Spare set [NCU]\n{','.join(map(str, ROW))},250\n"
    (offer,), findings = bids_of(tmp_path, "a.csv", text, None)
    assert (told(findings), list(offer.terms.item_prices)) == ([], ["Spare set"])


# The headings of the form


def test_columns__every_heading_of_the_form_is_read() -> None:
    """Whoever writes forms and whoever reads bids have one vocabulary."""
    for each in BID_HEADINGS:
        unit = "NCU" if each.unit == "currency" else each.unit
        heading = heading_of(heading_text(each.field, unit))
        assert heading is not None, each
        assert (heading.column.field, heading.times is not None) == (each.field, True)
    for weeks in ("0", "36", "4.5", None):
        heading = heading_of(payment_label(weeks))
        assert heading is not None
        assert heading.unit == "%"


def test_columns__fields_are_those_of_the_records() -> None:
    """Every column fills a field of an offer or of its terms."""
    fields = {*Offer.model_fields, *Offer.model_fields["terms"].annotation.model_fields}  # type: ignore[union-attr]
    assert {column.field for column in COLUMNS} <= fields


def test_read_bids__figures_of_terms_remember_how_they_stood(tmp_path: Path) -> None:
    """A figure of the terms has its text, unit and place like any other."""
    (offer,), _ = bids(tmp_path, "Declared efficiency [pu]", "0.991")
    found = offer.terms.declared_efficiency_percent
    assert isinstance(found, Quantity)
    assert (found.stated, found.unit, found.text, str(found.place)) == (
        Decimal("0.991"),
        "pu",
        "0.991",
        "bids/a.csv:2[Declared efficiency [pu]]",
    )
