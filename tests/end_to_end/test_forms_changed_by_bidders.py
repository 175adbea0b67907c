"""Forms as bidders send them back: filled in full, sheets renamed, rows inserted, numbers typed as text, saved anew."""

from __future__ import annotations

from collections.abc import Callable
from decimal import Decimal
from io import BytesIO
from pathlib import Path
from typing import Any

import openpyxl
import pytest

from lossworth.findings import Finding, any_stops
from lossworth.records.bid import Offer
from lossworth.records.tender import Tender
from support.bid_forms import answers, filled, form_of, headings, schedule_rows, with_alternative
from support.commercial_texts import FULL
from support.libreoffice import recalculated
from support.tender_folders import bids_of, told, valid_tender

Change = Callable[[Any], None]

ROW = {
    "Unit price": 4000,
    "Total price": 40000,
    "Discount [%]": 3,
    "Item: spare bushing set": 250,
    "Item: supervision": 1200,
    "No-load loss [kW]": 0.12,
    "Load loss [kW]": 1.2,
    "Total loss [kW]": 1.32,
    "Impedance [%]": 4.4,
    "Delivery [weeks]": 34,
    "Insulating liquid": "natural ester",
    "PCB free": "yes",
    "Sound level [dB(A)]": 41,
    "Origin": "home",
    "Deviations": "Clause 7: another color.",
    "Remarks": "=1+1",
}
SHARES = {"Payment at order [%]": 30, "Payment at delivery [%]": 70}


@pytest.fixture(scope="module")
def tender(tmp_path_factory: pytest.TempPathFactory) -> Tender:
    """A tender that announces everything and accepts alternatives."""
    text = FULL.replace('alternatives = "not accepted"', 'alternatives = "as offers of their own"')
    return valid_tender(tmp_path_factory.mktemp("tender"), text)


@pytest.fixture(scope="module")
def form(tender: Tender) -> bytes:
    """Its form, filled in for lot 1 with an alternative; lot 2 is not offered."""
    blank = form_of(tender)
    whole = answers("Alder", "NCU", blank) | SHARES | {"Prompt payment discount [%]": 2}
    row = {heading: value for heading, value in ROW.items() if heading != "Remarks"}
    made = openpyxl.load_workbook(BytesIO(with_alternative(filled(blank, whole, {"1": row}), "1", 4500, 45000)))
    alternatives = made["Alternatives"]
    top, columns = headings(alternatives)
    alternatives.cell(top + 1, columns["Delivery [weeks]"]).value = 36
    page = made["Price schedule"]
    remark = page.cell(schedule_rows(page)["1"], headings(page)[1]["Remarks"])
    remark.value, remark.data_type = "=1+1", "s"  # text, as a careful bidder types it
    return saved(made)


def saved(book: Any) -> bytes:
    """Content of a workbook."""
    stream = BytesIO()
    book.save(stream)
    return stream.getvalue()


def changed(form: bytes, change: Change) -> bytes:
    """Form to which a bidder did something."""
    book = openpyxl.load_workbook(BytesIO(form))
    change(book)
    return saved(book)


def read(folder: Path, data: bytes, tender: Tender) -> tuple[tuple[Offer, ...], tuple[Finding, ...]]:
    """What intake makes of a form."""
    return bids_of(folder, "alder.xlsx", data, tender)


def statement(offer: Offer) -> dict[str, object]:
    """All that an offer states, without places and texts."""
    fields = {name: getattr(offer, name) for name in Offer.model_fields if name not in ("place", "columns", "terms")}
    fields |= {name: getattr(offer.terms, name) for name in type(offer.terms).model_fields}
    items = {name: price.value for name, price in offer.terms.item_prices.items()}
    payments = tuple((each.share.value, each.weeks_after_order.value) for each in offer.terms.payments)
    return {n: getattr(v, "value", v) for n, v in fields.items()} | {"item_prices": items, "payments": payments}


def test_form__everything_reads_back_without_a_word(form: bytes, tender: Tender, tmp_path: Path) -> None:
    """Labels, prices, losses, terms, items, payments and the alternative; nothing is left to say but the deviation."""
    (offer, alternative), findings = read(tmp_path, form, tender)
    assert told(findings) == []
    stated = statement(offer)
    assert (stated["bidder"], stated["lot"], stated["currency"]) == ("Alder", "1", "NCU")
    assert (stated["unit_price"], stated["total_price"], stated["delivery_weeks"]) == (4000, 40000, 34)
    assert (stated["unconditional_discount_percent"], stated["prompt_payment_discount_percent"]) == (3, 2)
    assert stated["item_prices"] == {"spare bushing set": 250, "supervision": 1200}
    assert stated["payments"] == ((Decimal("0.3"), 0), (Decimal("0.7"), 34))
    assert (stated["delivery_term"], stated["price_basis"], stated["tax_included"]) == ("DDP", "firm", False)
    assert (stated["insulating_liquid"], stated["pcb_free"], stated["sound_level_db"]) == ("natural ester", True, 41)
    assert (stated["origin"], stated["deviations"]) == ("home", "Clause 7: another color.")
    assert stated["remark"] == "=1+1"
    assert (alternative.name, str(alternative.terms.delivery_term)) == ("Alder, alternative amorphous core", "DDP")


def rename(book: Any) -> None:
    """Other names for all sheets, in another order."""
    for number, page in enumerate(book.worksheets):
        page.title = f"Blatt {number}"
    book.move_sheet(book.worksheets[-1], -len(book.worksheets) + 1)


def insert_rows(book: Any) -> None:
    """A letter head above the schedule, a blank row below its header, another above the labels."""
    schedule, labels = book["Price schedule"], book["Bid"]
    top, _ = headings(schedule)
    schedule.insert_rows(top + 1, 2)
    schedule.insert_rows(1, 3)
    schedule["A1"] = "Alder Works, offer of 11 September 2026"
    labels.insert_rows(1, 4)
    labels["A1"] = "Dear buyer"


def insert_column(book: Any) -> None:
    """A column of the bidder's own among those of the form."""
    page = book["Alternatives"]
    _, columns = headings(page)
    page.insert_cols(columns["Total price"] + 1)


def test_form__sheets_renamed(form: bytes, tender: Tender, tmp_path: Path) -> None:
    """Sheets are known by what stands in them."""
    before, after = read(tmp_path, form, tender), read(tmp_path, changed(form, rename), tender)
    by_name = [sorted((statement(offer) for offer in offers), key=str) for offers, _ in (before, after)]
    assert (by_name[0], told(after[1])) == (by_name[1], [])


@pytest.mark.parametrize("change", [insert_rows, insert_column], ids=["rows", "column"])
def test_form__rows_and_columns_inserted(change: Change, form: bytes, tender: Tender, tmp_path: Path) -> None:
    """Header and labels are found where they are, and places are those of the file that came."""
    before, after = read(tmp_path, form, tender)[0], read(tmp_path, changed(form, change), tender)
    assert [statement(offer) for offer in before] == [statement(offer) for offer in after[0]]
    assert told(after[1]) == []
    if change is insert_rows:
        assert after[0][0].place.cell != before[0].place.cell


def test_form__a_line_of_totals_inserted(form: bytes, tender: Tender, tmp_path: Path) -> None:
    """A row of sums below the schedule names no lot: it is noted, and is no offer."""

    def add(book: Any) -> None:
        page = book["Price schedule"]
        row = max(schedule_rows(page).values()) + 1
        page.cell(row, 1).value = "Total"
        page.cell(row, headings(page)[1]["Total price"]).value = 40000

    offers, findings = read(tmp_path, changed(form, add), tender)
    assert [(finding.kind, finding.got) for finding in findings] == [("row-not-read", "Total; 40000")]
    assert (len(offers), any_stops(findings)) == (2, False)


@pytest.mark.parametrize(
    ("heading", "text", "value", "kind"),
    [
        ("Load loss [kW]", "1.2", Decimal("1.2"), None),
        ("Unit price", "4 000", Decimal(4000), None),
        ("Unit price", "4\u00a0000.00", Decimal(4000), None),
        ("Delivery [weeks]", " 34 ", Decimal(34), None),
        ("Load loss [kW]", "1,2", None, "value-unreadable"),
        ("Load loss [kW]", "1.2 kW", None, "value-unreadable"),
        ("Unit price", "4.000,00", None, "value-unreadable"),
        ("Total price", "NCU 40000", None, "value-unreadable"),
        ("Sound level [dB(A)]", "41 dB", None, "value-unreadable"),
    ],
)
def test_form__numbers_typed_as_text(
    heading: str, text: str, value: Decimal | None, kind: str | None, form: bytes, tender: Tender, tmp_path: Path
) -> None:
    """A number typed as text reads by the declared marks; else the finding names the cell, and nothing is guessed."""

    def type_text(book: Any) -> None:
        page = book["Price schedule"]
        cell = page.cell(schedule_rows(page)["1"], headings(page)[1][heading])
        cell.value, cell.number_format = text, "@"

    (offer, _), findings = read(tmp_path, changed(form, type_text), tender)
    field = {
        "Load loss [kW]": "load_loss_kw",
        "Unit price": "unit_price",
        "Delivery [weeks]": "delivery_weeks",
        "Total price": "total_price",
        "Sound level [dB(A)]": "sound_level_db",
    }[heading]
    assert statement(offer)[field] == value
    assert [(finding.kind, finding.got) for finding in findings] == ([] if kind is None else [(kind, text.strip())])


@pytest.mark.parametrize(
    ("change", "kind"),
    [
        (lambda book: book.remove(book["Bid"]), "bidder-missing"),
        (lambda book: book.remove(book["Price schedule"]), "header-missing"),
        (lambda book: book["Price schedule"].delete_cols(headings(book["Price schedule"])[1]["Lot"]), "column-missing"),
        (lambda book: setattr(book["Price schedule"], "sheet_state", "hidden"), "offers-hidden"),
    ],
    ids=["labels removed", "schedule removed", "lots removed", "schedule hidden"],
)
def test_form__parts_that_are_gone(change: Change, kind: str, form: bytes, tender: Tender, tmp_path: Path) -> None:
    """What a bidder takes away or hides is told."""

    def without_alternatives(book: Any) -> None:
        book.remove(book["Alternatives"])
        change(book)

    _, findings = read(tmp_path, changed(form, without_alternatives), tender)
    assert kind in {finding.kind for finding in findings}


def test_form__saved_by_libreoffice(form: bytes, tender: Tender, tmp_path: Path) -> None:
    """Another program writes the same statements."""
    (tmp_path / "alder.xlsx").write_bytes(form)
    (path,) = recalculated([tmp_path / "alder.xlsx"], tmp_path / "saved")
    before, (after, findings) = read(tmp_path, form, tender)[0], read(tmp_path, path.read_bytes(), tender)
    assert [statement(offer) for offer in before] == [statement(offer) for offer in after]
    assert told(findings) == []
