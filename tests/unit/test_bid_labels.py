"""What a bid says once for all its offers, alternatives, and what a workbook hides, merges or links to."""

from __future__ import annotations

import datetime
from collections.abc import Sequence
from decimal import Decimal
from io import BytesIO
from pathlib import Path

import openpyxl
import pytest

from lossworth.findings import Finding
from lossworth.records.bid import Offer
from support.commercial_texts import FULL
from support.tender_folders import bids_of, csv_text, told, valid_tender, with_member, workbook_bytes

HEADER = ("Lot", "Unit price", "No-load loss [kW]", "Load loss [kW]", "Delivery [weeks]", "Price terms")
ROWS = ((1, 4000, 0.12, 1.2, 30, None), (2, 22000, 0.6, 7.2, 34, "EXW"))
LABELS: tuple[tuple[object, ...], ...] = (
    ("Bidder", "Alder"),
    ("Currency", "NCU"),
    ("Price terms:", "DDP"),
    ("Price basis", "firm, delivered to site"),
    ("Tax included", "no"),
    ("Valid until", datetime.date(2026, 12, 31)),
    ("Discount [%]", 3),
    ("Prompt payment discount", "2 %"),
    ("Claimed tolerance [pu]", 0.1),
    ("Origin", "home"),
    ("Insulating liquid", "mineral oil"),
    ("PCB free", True),
    ("Deviations", "none"),
    ("Payment at order [%]", 30),
    ("Payment at delivery [%]", 70),
)


def read(
    folder: Path, labels: Sequence[Sequence[object]], tender: str = FULL
) -> tuple[tuple[Offer, ...], tuple[Finding, ...]]:
    """Offers of a workbook with a sheet of labels and a table of two offers."""
    return read_data(folder, workbook_bytes({"Bid": labels, "Offers": (HEADER, *ROWS)}), tender)


def read_data(folder: Path, data: bytes, tender: str = FULL) -> tuple[tuple[Offer, ...], tuple[Finding, ...]]:
    """Offers of a workbook."""
    return bids_of(folder, "alder.xlsx", data, valid_tender(folder, tender))


def test_labels__hold_for_every_row(tmp_path: Path) -> None:
    """What a bid says once counts for each of its offers, from the cell beside the label."""
    (first, second), findings = read(tmp_path, LABELS)
    assert told(findings) == []
    for offer in (first, second):
        terms = offer.terms
        assert (terms.price_basis, terms.tax_included, terms.pcb_free) == ("firm", False, True)
        assert (terms.valid_until, terms.deviations) == (datetime.date(2026, 12, 31), None)
        assert (str(terms.origin), str(terms.insulating_liquid)) == ("home", "mineral oil")
        percents = (
            terms.unconditional_discount_percent,
            terms.prompt_payment_discount_percent,
            terms.claimed_tolerance_percent,
        )
        assert [each.value for each in percents if each] == [3, 2, 10]
    assert [[p.weeks_after_order.value for p in offer.terms.payments] for offer in (first, second)] == [
        [0, 30],
        [0, 34],
    ]
    assert str(first.columns["tax_included"]) == "bids/alder.xlsx[Bid]!B5"
    assert str(first.columns["payments"]) == "bids/alder.xlsx[Bid]!B14"


def test_labels__the_row_comes_first(tmp_path: Path) -> None:
    """A row that states a term of its own has that one; a blank cell has the label's."""
    (first, second), _ = read(tmp_path, LABELS)
    assert [str(offer.terms.delivery_term) for offer in (first, second)] == ["DDP", "EXW"]
    places = [str(offer.columns["delivery_term"]) for offer in (first, second)]
    assert places == ["bids/alder.xlsx[Bid]!B3", "bids/alder.xlsx[Offers]!F3"]


def test_labels__payments_of_the_row_come_alone(tmp_path: Path) -> None:
    """Payments of a row and of labels are never mixed."""
    header = (*HEADER, "Payment 4 weeks after order [%]")
    rows = ((*ROWS[0], 100), (*ROWS[1], None))
    data = workbook_bytes({"Bid": LABELS, "Offers": (header, *rows)})
    (first, second), findings = read_data(tmp_path, data)
    assert told(findings) == []
    weeks = [[payment.weeks_after_order.value for payment in offer.terms.payments] for offer in (first, second)]
    assert weeks == [[4], [0, 34]]


NAMED = LABELS[:2]


@pytest.mark.parametrize(
    ("labels", "told_of"),
    [
        ([("Discount", 3)], ("column-unit", "bids/alder.xlsx[Bid]!B3", "Discount")),
        ([("Price terms", "EXW", "DDP")], ("row-not-read", "bids/alder.xlsx[Bid]!B3", "EXW; DDP")),
        ([("Price terms", "DDP"), ("Price terms", "FCA")], ("column-twice", "bids/alder.xlsx[Bid]!B4", "FCA")),
        ([("Currency", "FCU")], ("column-twice", "bids/alder.xlsx[Bid]!B3", "FCU")),
    ],
)
def test_labels__that_cannot_be_used(
    tmp_path: Path, labels: list[tuple[object, ...]], told_of: tuple[str, str, str]
) -> None:
    """A label without unit, with several values, or against another one."""
    _, findings = read(tmp_path, (*NAMED, *labels))
    assert told(findings) == [told_of]


def test_labels__value_that_cannot_be_read(tmp_path: Path) -> None:
    """It is told once for each offer that needs it, at the cell of the label."""
    _, findings = read(tmp_path, (*LABELS[:4], ("Tax included", "n/a"), *LABELS[5:]))
    assert [(f.kind, str(f.place), f.lot) for f in findings] == [
        ("value-unreadable", "bids/alder.xlsx[Bid]!B5", "1"),
        ("value-unreadable", "bids/alder.xlsx[Bid]!B5", "2"),
    ]


def test_labels__headings_side_by_side_are_no_label(tmp_path: Path) -> None:
    """A table of another kind, headed Bidder and Currency, names nobody."""
    other = [["Bidder", "Currency", "Place"], ["Birch", "FCU", "Elsewhere"]]
    data = workbook_bytes({"Contacts": other, "Bid": LABELS, "Offers": (HEADER, *ROWS)})
    offers, findings = read_data(tmp_path, data)
    assert ({offer.bidder.value for offer in offers}, told(findings)) == ({"Alder"}, [])


# Alternatives

ALTERNATIVE = "Lot,Alternative,Bidder,Currency,Unit price,No-load loss [kW],Load loss [kW]\n"


def alternatives(folder: Path, *rows: str) -> tuple[tuple[Offer, ...], list[tuple[str, str, str | None]]]:
    """Offers of a table with a column of alternatives."""
    text = ALTERNATIVE + "".join(f"{row},NCU,4000,0.12,1.2\n" for row in rows)
    offers, findings = bids_of(folder, "a.csv", text, valid_tender(folder))
    return offers, told(findings)


def test_alternatives__are_offers_of_their_own(tmp_path: Path) -> None:
    """A base offer and two alternatives of one bidder for one lot are three offers."""
    offers, findings = alternatives(tmp_path, "1,,Alder", "1,amorphous core,Alder", "1,2,Alder", "2,base,Alder")
    assert findings == []
    names = ["Alder", "Alder, alternative amorphous core", "Alder, alternative 2", "Alder"]
    assert [offer.name for offer in offers] == names


@pytest.mark.parametrize("word", ["", "-", "\u2013", "No", "none", "BASE", "base offer"])
def test_alternatives__words_of_the_base_offer(tmp_path: Path, word: str) -> None:
    """A dash or a word may say that the row is the base offer."""
    (offer,), findings = alternatives(tmp_path, f"1,{word},Alder")
    assert (offer.alternative, findings) == (None, [])


def test_alternatives__fault_of_one_is_told_at_its_row(tmp_path: Path) -> None:
    """A payment at delivery that waits for the week of the alternative leaves the base offer alone."""
    header = (*HEADER[:-1], "Alternative")
    rows = ((1, 4000, 0.12, 1.2, 30, None), (1, 3900, 0.12, 1.2, None, "ester"))
    _, findings = read_data(tmp_path, workbook_bytes({"Bid": LABELS, "Offers": (header, *rows)}))
    assert told(findings) == [("value-missing", "bids/alder.xlsx[Offers]!E3", "")]


def test_alternatives__label_that_both_share_is_told_once(tmp_path: Path) -> None:
    """What a label gets wrong for two offers of a lot is one finding."""
    labels = (*LABELS[:4], ("Tax included", "n/a"), *LABELS[5:])
    header = (*HEADER[:-1], "Alternative")
    rows = ((1, 4000, 0.12, 1.2, 30, None), (1, 3900, 0.12, 1.2, 30, "ester"))
    _, findings = read_data(tmp_path, workbook_bytes({"Bid": labels, "Offers": (header, *rows)}))
    assert told(findings) == [("value-unreadable", "bids/alder.xlsx[Bid]!B5", "n/a")]


def test_alternatives__given_twice(tmp_path: Path) -> None:
    """Bidder, lot and alternative together are given once, whatever the capitals."""
    _, findings = alternatives(tmp_path, "1,,Alder", "1,Ester,Alder", "1,ester,ALDER", "1,,Alder")
    assert findings == [
        ("offer-twice", "bids/a.csv:4", "ester"),
        ("offer-twice", "bids/a.csv:5", None),
        ("alternative-without-base", "bids/a.csv:4[Alternative]", "ester"),
    ]


def test_alternatives__name_of_another_offer(tmp_path: Path) -> None:
    """A bidder whose name is that of an alternative is not taken for it: papers tell offers apart by their names."""
    _, findings = alternatives(tmp_path, "1,,Alder", "1,x,Alder", '1,,"Alder, alternative x"')
    assert findings == [("offer-twice", "bids/a.csv:4", None)]


def test_alternatives__without_base_offer(tmp_path: Path) -> None:
    """It is noted, with the bidder whose name comes nearest; a base offer for another lot does not count."""
    rows = "1,x,Alder,NCU,4000,0.12,1.2\n1,,Aldr,NCU,4000,0.12,1.2\n2,,Alder,NCU,22000,0.6,7\n"
    _, (finding,) = bids_of(tmp_path, "a.csv", ALTERNATIVE + rows, valid_tender(tmp_path))
    assert (finding.kind, finding.lot, finding.remedy) == ("alternative-without-base", "1", 'Did you mean "Aldr"?')


@pytest.mark.parametrize(("old", "new"), [("Alder", "A" * 201), ("amorphous", "A" * 201)])
def test_names__bounded(tmp_path: Path, old: str, new: str) -> None:
    """A name longer than a page is none."""
    offers, findings = alternatives(tmp_path, "1,amorphous,Alder".replace(old, new))
    assert (offers, [kind for kind, _, _ in findings]) == ((), ["bidder-missing"])


def test_names__look_alike(tmp_path: Path) -> None:
    """Full-width letters and characters without width make no second bidder."""
    _, findings = alternatives(tmp_path, "1,,Alder", "1,,\uff21lder", "1,,Al\u200bder")
    assert [kind for kind, _, _ in findings] == ["offer-twice", "offer-twice"]


# What a workbook hides, merges or links to


def book(*, hidden: str = "", merged: Sequence[str] = (), rows: Sequence[Sequence[object]] = ROWS) -> bytes:
    """Workbook with labels and a table whose header is row 1; hidden is a sheet, "row 3" or "column B"."""
    made = openpyxl.Workbook()
    made.remove(made.active)
    for name, lines in (("Bid", LABELS), ("Offers", (HEADER, *rows))):
        page = made.create_sheet(name)
        for line in lines:
            page.append(list(line))
        page.sheet_state = "hidden" if hidden == name else "visible"
    what, _, which = hidden.partition(" ")
    if what == "row":
        made["Offers"].row_dimensions[int(which)].hidden = True
    if what == "column":
        made["Offers"].column_dimensions[which].hidden = True
    for area in merged:
        made["Offers"].merge_cells(area)
    stream = BytesIO()
    made.save(stream)
    return stream.getvalue()


@pytest.mark.parametrize(
    ("hidden", "place", "got"),
    [
        ("Offers", "bids/alder.xlsx[Offers]", "Offers"),
        ("row 3", "bids/alder.xlsx[Offers]!A3", "3"),
        ("column B", "bids/alder.xlsx[Offers]!B1", "Unit price"),
    ],
)
def test_hidden__offers_are_read_and_noted(tmp_path: Path, hidden: str, place: str, got: str) -> None:
    """Nothing is left out for being hidden, and nothing hidden counts without a word."""
    offers, findings = read_data(tmp_path, book(hidden=hidden))
    assert (len(offers), told(findings)) == (2, [("offers-hidden", place, got)])


def test_hidden__labels_are_read_and_noted(tmp_path: Path) -> None:
    """A hidden sheet of labels is told label by label."""
    offers, findings = read_data(tmp_path, book(hidden="Bid"))
    assert {finding.kind for finding in findings} == {"offers-hidden"}
    assert (len(findings), {offer.bidder.value for offer in offers}) == (len(LABELS), {"Alder"})


@pytest.mark.parametrize("area", ["E2:E3", "A2:B2", "C3:F4", "F1:F3"])
def test_merged__cells_of_offers(tmp_path: Path, area: str) -> None:
    """A merged area that covers more than one cell of the offers is named by its range, and stops."""
    _, findings = read_data(tmp_path, book(merged=[area]))
    assert ("cells-merged", f"bids/alder.xlsx[Offers]!{area}", area) in told(findings)


def test_merged__header_over_a_column_with_values(tmp_path: Path) -> None:
    """A header that is merged over a second column hides what stands there."""
    made = openpyxl.load_workbook(BytesIO(book()))
    page = made["Offers"]
    page["G1"], page["G2"], page["H2"] = "Discount [%]", 3, 5
    page.merge_cells("G1:H1")
    stream = BytesIO()
    made.save(stream)
    _, findings = read_data(tmp_path, stream.getvalue())
    assert told(findings) == [("cells-merged", "bids/alder.xlsx[Offers]!G1:H1", "G1:H1")]


@pytest.mark.parametrize("merged", [["A9:F9"], ["F2:H2"], ["F1:H1", "F2:H2"]])
def test_merged__where_nothing_is_lost(tmp_path: Path, merged: list[str]) -> None:
    """Merged cells below the offers, and over columns without a header or a value, are how sheets look."""
    offers, findings = read_data(tmp_path, book(merged=merged))
    assert (len(offers), told(findings)) == (2, [])


def test_links__are_noted(tmp_path: Path) -> None:
    """A workbook that leads to other files is read as it stands."""
    data = with_member(book(), "xl/externalLinks/externalLink1.xml", lambda _: b"<externalLink/>")
    offers, findings = read_data(tmp_path, data)
    assert (len(offers), told(findings)) == (2, [("workbook-links", "bids/alder.xlsx", None)])


def test_csv__has_no_looks(tmp_path: Path) -> None:
    """A text table hides nothing."""
    assert told(bids_of(tmp_path, "a.csv", csv_text(), valid_tender(tmp_path))[1]) == []


def test_labels__shares_are_fractions_in_the_record(tmp_path: Path) -> None:
    """Percent in the file, a share of 1 in the record, with the text as it stood."""
    (offer, _), _ = read(tmp_path, LABELS)
    assert [(p.share.value, p.share.text) for p in offer.terms.payments] == [
        (Decimal("0.3"), "30"),
        (Decimal("0.7"), "70"),
    ]
