"""Bids in workbooks: cells, labels, formulas, formats, several sheets."""

from __future__ import annotations

from decimal import Decimal
from pathlib import Path

import pytest

from lossworth.findings import Finding, Place
from lossworth.records.bid import Offer
from support.tender_folders import (
    HEADER,
    ROWS,
    TENDER,
    bids_of,
    table_workbook,
    told,
    valid_tender,
    with_member,
    with_sheet_xml,
    workbook_bytes,
)

#: The same table without bidder and currency, which labels then give.
SHORT_HEADER = (HEADER[0], *HEADER[3:])
SHORT_ROWS = tuple((row[0], *row[3:]) for row in ROWS[:2])


def read(path: Path, data: bytes, tender: str = TENDER) -> tuple[tuple[Offer, ...], tuple[Finding, ...]]:
    """Offers and findings of a workbook."""
    return bids_of(path, "alder.xlsx", data, valid_tender(path, tender))


def offers_of(path: Path, data: bytes) -> tuple[Offer, ...]:
    """Offers of a workbook that has no faults."""
    offers, findings = read(path, data)
    assert not findings, [str(finding) for finding in findings]
    return offers


def test_read_bids__workbook_offer(tmp_path: Path) -> None:
    """A figure of a worksheet has its sheet and cell."""
    offer = offers_of(tmp_path, workbook_bytes())[0]
    assert offer.load_loss_kw is not None
    assert offer.load_loss_kw.value == Decimal("1.2")
    assert offer.load_loss_kw.place == Place("bids/alder.xlsx", sheet="Offers", cell="F2")
    assert str(offer.place) == "bids/alder.xlsx[Offers]!A2"


def test_read_bids__binary_numbers_are_decimals(tmp_path: Path) -> None:
    """A number whose binary form has a tail is the decimal that the bidder typed."""
    (offer, *_) = offers_of(tmp_path, table_workbook(0, "Load loss [kW]", 0.1 + 0.2))
    assert offer.load_loss_kw is not None
    assert (offer.load_loss_kw.value, offer.load_loss_kw.text) == (Decimal("0.3"), "0.3")


def test_read_bids__labels_on_another_sheet(tmp_path: Path) -> None:
    """Bidder and currency may stand beside labels on a sheet of their own."""
    form = [["Bid form"], ["Bidder:", " Alder  Works "], ["Currency", "FCU"], ["Signed", "yes"]]
    offers = offers_of(tmp_path, workbook_bytes({"Form": form, "Lots": (SHORT_HEADER, *SHORT_ROWS)}))
    assert [(offer.bidder.value, offer.lot.value) for offer in offers] == [("Alder Works", "1"), ("Alder Works", "2")]
    assert {str(offer.bidder.place) for offer in offers} == {"bids/alder.xlsx[Form]!B2"}
    assert {offer.currency.value for offer in offers if offer.currency} == {"FCU"}


def test_read_bids__labels_above_the_table(tmp_path: Path) -> None:
    """Labels may stand above the table, after a title and a blank row."""
    rows = [["Our bid"], [], ["Bidder", None, "Alder"], ["Currency", "NCU"], [], SHORT_HEADER, *SHORT_ROWS]
    offers = offers_of(tmp_path, workbook_bytes({"Lots": rows}))
    assert [str(offer.bidder.place) for offer in offers] == ["bids/alder.xlsx[Lots]!C3"] * 2
    assert str(offers[0].place) == "bids/alder.xlsx[Lots]!A7"


def test_read_bids__labels_disagree(tmp_path: Path) -> None:
    """Two labels of one name with different values are a finding."""
    sheets = {"A": [["Bidder", "Alder"]], "B": [["Bidder", "Birch"], ["Currency", "NCU"], SHORT_HEADER, *SHORT_ROWS]}
    assert told(read(tmp_path, workbook_bytes(sheets))[1]) == [("column-twice", "bids/alder.xlsx[B]!B1", "Birch")]


def test_read_bids__sheets_of_one_bidder(tmp_path: Path) -> None:
    """Every sheet with a header is a table of offers, each with its own units."""
    watts = [*SHORT_HEADER]
    watts[2] = "No-load loss [W]"
    sheets = {
        "Form": [["Bidder", "Alder"], ["Currency", "NCU"]],
        "Lot 1": (SHORT_HEADER, SHORT_ROWS[0]),
        "Lot 2": (watts, (2, 22000, 610, 7.25, 6, 28, 5)),
    }
    first, second = offers_of(tmp_path, workbook_bytes(sheets))
    assert first.no_load_loss_kw is not None
    assert second.no_load_loss_kw is not None
    assert (first.no_load_loss_kw.value, second.no_load_loss_kw.value) == (Decimal("0.12"), Decimal("0.61"))
    assert (second.no_load_loss_kw.stated, second.no_load_loss_kw.unit) == (610, "W")


def test_read_bids__formula_with_value(tmp_path: Path) -> None:
    """A formula counts by its computed value."""
    data = with_sheet_xml(table_workbook(0, "Load loss [kW]", "=E2*10"), "<f>E2*10</f><v />", "<f>E2*10</f><v>1.2</v>")
    assert offers_of(tmp_path, data)[0].load_loss_kw is not None


def test_read_bids__formula_with_empty_text(tmp_path: Path) -> None:
    """A formula whose result is an empty text is a blank cell, not a formula that was never computed."""
    data = with_sheet_xml(
        table_workbook(0, "Load loss [kW]", "=E2*10"),
        '<c r="F2"><f>E2*10</f><v /></c>',
        '<c r="F2" t="str"><f>E2*10</f><v></v></c>',
    )
    assert told(read(tmp_path, data)[1]) == [("value-missing", "bids/alder.xlsx[Offers]!F2", "")]


def test_read_bids__percent_format(tmp_path: Path) -> None:
    """A cell that shows 4.00% states 4 percent, as it would in a csv file."""
    (offer, *_) = offers_of(tmp_path, table_workbook(0, "Impedance [%]", 0.04, G2="0.00%"))
    assert offer.impedance_percent is not None
    assert (offer.impedance_percent.value, offer.impedance_percent.text) == (4, "4 %")


@pytest.mark.parametrize("number_format", ['0.0" %"', "0.0\\%", "[>1]0.0"])
def test_read_bids__percent_sign_that_is_only_text(tmp_path: Path, number_format: str) -> None:
    """A percent sign that a format merely prints does not change the number."""
    (offer, *_) = offers_of(tmp_path, table_workbook(0, "Impedance [%]", 4, G2=number_format))
    assert offer.impedance_percent is not None
    assert offer.impedance_percent.value == 4


def test_read_bids__number_typed_as_text(tmp_path: Path) -> None:
    """A number typed as text reads by the declared marks."""
    data = table_workbook(0, "Load loss [kW]", "1,2")
    assert told(read(tmp_path, data)[1]) == [("value-unreadable", "bids/alder.xlsx[Offers]!F2", "1,2")]
    tender = TENDER.replace("[[lot]]", '[bids.decimal_mark_of]\n"alder.xlsx" = ","\n[[lot]]', 1)
    offers, findings = read(tmp_path, data, tender)
    assert not findings
    assert offers[0].load_loss_kw is not None
    assert offers[0].load_loss_kw.value == Decimal("1.2")


def test_read_bids__lot_as_number(tmp_path: Path) -> None:
    """A lot typed as a number, or as 1.0, is the lot of that name."""
    data = with_sheet_xml(workbook_bytes(), '<c r="A2" t="n"><v>1</v></c>', '<c r="A2"><v>1.0</v></c>')
    assert [offer.lot.value for offer in offers_of(tmp_path, data)] == ["1", "2", "1", "2"]


@pytest.mark.parametrize("value", ["#N/A", True, "=A1"])
def test_read_bids__bidder_that_is_no_name(tmp_path: Path, value: object) -> None:
    """An error, a boolean or a formula without value is nobody's name."""
    ((kind, place, _),) = told(read(tmp_path, table_workbook(0, "Bidder", value))[1])
    assert (kind, place) == ("bidder-missing", "bids/alder.xlsx[Offers]!B2")


def test_read_bids__stated_size_lies(tmp_path: Path) -> None:
    """A sheet that states another size of itself is read whole."""
    data = with_sheet_xml(workbook_bytes(), 'ref="A1:I5"', 'ref="A1:B2"')
    assert offers_of(tmp_path, data) == offers_of(tmp_path, workbook_bytes())


def test_read_bids__formatted_cell_far_away(tmp_path: Path) -> None:
    """A far cell that has a format and no content costs nothing and changes nothing."""
    far = '<row r="1048576"><c r="XFD1048576" s="0"/></row></sheetData>'
    data = with_sheet_xml(workbook_bytes(), "</sheetData>", far)
    assert offers_of(tmp_path, data) == offers_of(tmp_path, workbook_bytes())


def test_read_bids__other_parts(tmp_path: Path) -> None:
    """Pictures, and markup that is no worksheet and not well-formed, do not matter."""
    data = with_member(workbook_bytes(), "xl/media/logo.png", lambda _: b"\x89PNG\r\n\x1a\n" + bytes(100))
    data = with_member(data, "xl/drawings/vmlDrawing1.vml", lambda _: b"<xml><br></xml>")
    assert len(offers_of(tmp_path, data)) == 4


def test_read_bids__damaged_in_the_reader(tmp_path: Path) -> None:
    """What only the reader of workbooks stumbles over is a finding as well."""
    data = with_member(workbook_bytes(), "xl/workbook.xml", lambda _: b"<workbook")
    assert [(finding.kind, str(finding.place)) for finding in read(tmp_path, data)[1]] == [
        ("file-unreadable", "bids/alder.xlsx")
    ]


def test_read_bids__empty_sheets(tmp_path: Path) -> None:
    """A workbook without any table is a finding that names its sheets."""
    assert told(read(tmp_path, workbook_bytes({"One": [], "Two": [["x"]]}))[1]) == [
        ("header-missing", "bids/alder.xlsx", "One, Two")
    ]


def test_read_workbook__keeps_defusedxml(tmp_path: Path) -> None:
    """The reader of workbooks parses by the guarded parser, not by another that may be installed."""
    offers_of(tmp_path, workbook_bytes())
    import defusedxml.ElementTree
    from openpyxl import DEFUSEDXML, LXML
    from openpyxl.worksheet import _reader

    assert (DEFUSEDXML, LXML) == (True, False)
    assert _reader.iterparse is defusedxml.ElementTree.iterparse
