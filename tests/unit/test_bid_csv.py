"""Bids in csv files: separators, encodings, lines, quotes, labels, places."""

from __future__ import annotations

from decimal import Decimal
from pathlib import Path

import pytest

from lossworth.findings import Place
from lossworth.intake.sheet import MOST_COLUMNS, MOST_ROWS
from lossworth.records.bid import Offer
from support.tender_folders import HEADER, ROWS, TENDER, bids_of, csv_text, told, valid_tender


def offers_of(path: Path, text: str | bytes, tender: str = TENDER) -> tuple[Offer, ...]:
    """Offers of a csv file that has no faults."""
    offers, findings = bids_of(path, "a.csv", text, valid_tender(path, tender))
    assert not findings, [str(finding) for finding in findings]
    return offers


def findings_of(path: Path, text: str | bytes, tender: str = TENDER) -> list[tuple[str, str, str | None]]:
    """Findings on a csv file."""
    return told(bids_of(path, "a.csv", text, valid_tender(path, tender))[1])


def with_marks(decimal: str, thousands: str = "") -> str:
    """Tender whose bids have other marks."""
    return TENDER.replace("[[lot]]", f'[bids]\ndecimal_mark = "{decimal}"\nthousands_mark = "{thousands}"\n[[lot]]', 1)


def test_read_bids__csv_offer(tmp_path: Path) -> None:
    """An offer has its texts and figures, each with the line and the header of its cell."""
    offer = offers_of(tmp_path, csv_text())[0]
    assert (offer.bidder.value, offer.lot.value, offer.place) == ("Alder", "1", Place("bids/a.csv", line=2))
    assert offer.currency is not None
    assert offer.currency.value == "NCU"
    loss = offer.load_loss_kw
    assert loss is not None
    assert (loss.value, loss.stated, loss.unit, loss.text) == (Decimal("1.2"), Decimal("1.2"), "kW", "1.2")
    assert loss.place == Place("bids/a.csv", line=2, column="Load loss [kW]")
    assert offer.unit_price is not None
    assert offer.unit_price.unit == "NCU"


def test_read_bids__columns_have_places_also_where_blank(tmp_path: Path) -> None:
    """The place of an empty cell is known, so that a finding can name it."""
    rows = [[*ROWS[0][:6], "", *ROWS[0][7:]]]
    offer = offers_of(tmp_path, csv_text(rows=rows))[0]
    assert offer.impedance_percent is None
    assert str(offer.columns["impedance_percent"]) == "bids/a.csv:2[Impedance [%]]"
    assert "auxiliary_loss_kw" not in offer.columns


@pytest.mark.parametrize("end", ["\n", "\r\n", "\r"])
@pytest.mark.parametrize("separator", [",", ";"])
@pytest.mark.parametrize("mark", ["", "\ufeff"])
def test_read_bids__separators_and_line_ends(tmp_path: Path, end: str, separator: str, mark: str) -> None:
    """Comma or semicolon, any line end, with and without byte order mark: the same offers."""
    text = mark + csv_text(separator=separator, end=end)
    assert offers_of(tmp_path, text) == offers_of(tmp_path, csv_text())


def test_read_bids__separator_by_the_header_alone(tmp_path: Path) -> None:
    """Commas in the rows do not make a semicolon table a comma table."""
    text = csv_text([*HEADER, "Remarks"], [[*row, "a, b, c, d, e, f, g, h, i, j, k"] for row in ROWS], separator=";")
    assert [offer.remark and offer.remark.value for offer in offers_of(tmp_path, text)] == [
        "a, b, c, d, e, f, g, h, i, j, k"
    ] * 4


def test_read_bids__decimal_commas(tmp_path: Path) -> None:
    """Decimal commas read where they are declared, separated by semicolons or in quotes."""
    points = offers_of(tmp_path, csv_text())
    semicolons = csv_text(separator=";").replace(".", ",")
    quoted = csv_text(rows=[[f'"{str(value).replace(".", ",")}"' for value in row] for row in ROWS])
    assert values(offers_of(tmp_path, semicolons, with_marks(","))) == values(points)
    assert values(offers_of(tmp_path, quoted, with_marks(","))) == values(points)


def values(offers: tuple[Offer, ...]) -> list[tuple[object, ...]]:
    """What an offer states, without places and characters."""
    fields = ("unit_price", "no_load_loss_kw", "load_loss_kw", "impedance_percent", "delivery_weeks", "quantity")
    return [
        (offer.bidder.value, offer.lot.value, *(getattr(getattr(offer, name), "value", None) for name in fields))
        for offer in offers
    ]


def test_read_bids__decimal_mark_of_one_file(tmp_path: Path) -> None:
    """A declaration for one file goes before that for all; the general thousands mark gives way to it."""
    tender = TENDER.replace(
        "[[lot]]", '[bids]\nthousands_mark = ","\n[bids.decimal_mark_of]\n"a.csv" = ","\n[[lot]]', 1
    )
    rows = [(1, "Alder", "NCU", "5 000,5", "0,12", "1,234", 4, 20, 10)]
    (offer,) = offers_of(tmp_path, csv_text(rows=rows, separator=";"), tender)
    assert values((offer,)) == [("Alder", "1", Decimal("5000.5"), Decimal("0.12"), Decimal("1.234"), 4, 20, 10)]


def test_read_bids__decimal_mark_of_no_file(tmp_path: Path) -> None:
    """A declaration for a file that is not there is noted, since its name may be misspelled."""
    tender = TENDER.replace("[[lot]]", '[bids.decimal_mark_of]\n"b.csv" = ","\n[[lot]]', 1)
    assert findings_of(tmp_path, csv_text(), tender) == [("tender-key-not-used", "tender.toml", None)]


def test_read_bids__thousands_mark(tmp_path: Path) -> None:
    """A thousands mark reads where it is declared, and is no number elsewhere."""
    text = csv_text().replace("5000", '"5,000"')
    assert values(offers_of(tmp_path, text, with_marks(".", ",")))[0][2] == 5000
    assert findings_of(tmp_path, text) == [("value-unreadable", "bids/a.csv:2[Unit price]", "5,000")]


def test_read_bids__cell_over_several_lines(tmp_path: Path) -> None:
    """A quoted cell may run over lines; places name the line on which a row begins."""
    rows = [[*ROWS[0], '"two\nlines"'], [*ROWS[1], "one"]]
    first, second = offers_of(tmp_path, csv_text([*HEADER, "Remarks"], rows))
    assert first.remark is not None
    assert (first.remark.value, first.place.line, second.place.line) == ("two lines", 2, 4)


def test_read_bids__header_over_several_lines(tmp_path: Path) -> None:
    """A header may break a name for its narrow column."""
    text = csv_text().replace("Load loss [kW]", '"Load loss\n[kW]"')
    offers, findings = bids_of(tmp_path, "a.csv", text, valid_tender(tmp_path))
    assert (len(offers), findings) == (4, ())


def test_read_bids__blank_lines(tmp_path: Path) -> None:
    """Blank lines and rows of empty cells are passed over, and lines still count."""
    lines = csv_text().splitlines()
    text = "\n".join(["", lines[0], "", lines[1], ",,,,,,,,", *lines[2:], ""])
    assert [offer.place.line for offer in offers_of(tmp_path, text)] == [4, 6, 7, 8]


def test_read_bids__rows_of_other_length(tmp_path: Path) -> None:
    """Each row that is longer or shorter than the header is named; the others are read."""
    text = csv_text() + "1,Cedar\n1,Cedar,NCU,1,1,1,4,20,10,,\n"
    offers, findings = bids_of(tmp_path, "a.csv", text, valid_tender(tmp_path))
    assert len(offers) == 4
    assert [(finding.kind, str(finding.place)) for finding in findings] == [
        ("row-length", "bids/a.csv:6"),
        ("row-length", "bids/a.csv:7"),
    ]


def test_read_bids__bounds(tmp_path: Path) -> None:
    """A table of more rows or columns than a tender can have is refused."""
    too_long = csv_text(rows=[(9, "A", "NCU", "", "", "", "", "", "")] * (MOST_ROWS + 1))
    too_wide = csv_text([*HEADER, *["x"] * MOST_COLUMNS], [])
    for text in (too_long, too_wide):
        assert ("file-too-large", "bids/a.csv", None) in findings_of(tmp_path, text)


def test_read_bids__lot_with_its_word(tmp_path: Path) -> None:
    """A bidder may write "Lot 1" for lot 1."""
    text = csv_text().replace("1,Alder", "LOT 1,Alder")
    assert [offer.lot.value for offer in offers_of(tmp_path, text)] == ["1", "2", "1", "2"]


def test_read_bids__bidder_with_spaces(tmp_path: Path) -> None:
    """Spaces in a name do not make another bidder."""
    text = csv_text(rows=[ROWS[0], (1, "  ALDER ", *ROWS[0][2:])])
    assert [finding[0] for finding in findings_of(tmp_path, text)] == ["offer-twice"]


def test_read_bids__unreadable_is_none(tmp_path: Path) -> None:
    """A figure that cannot be read, or cannot be, is None in the offer and names bidder and lot in the finding."""
    text = csv_text().replace("5000", "free").replace("1.2,", "-1.2,")
    offers, findings = bids_of(tmp_path, "a.csv", text, valid_tender(tmp_path))
    assert (offers[0].unit_price, offers[0].load_loss_kw) == (None, None)
    assert {(finding.bidder, finding.lot) for finding in findings} == {("Alder", "1")}


def test_read_bids__auxiliary_loss_blank(tmp_path: Path) -> None:
    """A blank auxiliary loss is left to the evaluation, which knows the cooling; a zero is a figure."""
    rows = [[*ROWS[0], ""], [*ROWS[1], "0"]]
    first, second = offers_of(tmp_path, csv_text([*HEADER, "Auxiliary loss [kW]"], rows))
    assert first.auxiliary_loss_kw is None
    assert second.auxiliary_loss_kw is not None
    assert second.auxiliary_loss_kw.value == 0


@pytest.mark.parametrize(
    ("tender", "kind"),
    [
        (TENDER, "value-not-read"),
        (TENDER.replace("load = 660", "load = 660\nauxiliary = 1500"), "value-unreadable"),
    ],
)
def test_read_bids__auxiliary_loss_unreadable(tmp_path: Path, tender: str, kind: str) -> None:
    """What the evaluation does not value is only noted where it cannot be read."""
    text = csv_text([*HEADER, "Auxiliary loss [kW]"], [[*ROWS[0], "n/a"]])
    assert [finding[0] for finding in findings_of(tmp_path, text, tender)] == [kind]


def test_read_bids__total_loss_unreadable(tmp_path: Path) -> None:
    """The total loss is kept beside its parts and never needed."""
    text = csv_text([*HEADER, "Total loss [kW]"], [[*ROWS[0], "see annex"], [*ROWS[1], 7.86]])
    offers, findings = bids_of(tmp_path, "a.csv", text, valid_tender(tmp_path))
    assert told(findings) == [("value-not-read", "bids/a.csv:2[Total loss [kW]]", "see annex")]
    assert offers[1].total_loss_kw is not None
    assert offers[1].total_loss_kw.value == Decimal("7.86")


def test_read_bids__remark_below_the_table(tmp_path: Path) -> None:
    """A row without any figure is no offer, and noted."""
    text = csv_text() + '"Prices are firm.",,,,,,,,\n'
    assert findings_of(tmp_path, text) == [("row-not-read", "bids/a.csv:6", "Prices are firm.")]


def test_read_bids__currency_in_the_price_header(tmp_path: Path) -> None:
    """The price header may state the currency of the table."""
    header = ["Lot", "Bidder", "Unit price [FCU]", *HEADER[4:]]
    (offer,) = offers_of(tmp_path, csv_text(header, [[1, "Alder", *ROWS[0][3:]]]))
    assert offer.currency is not None
    assert (offer.currency.value, str(offer.currency.place)) == ("FCU", "bids/a.csv:1[Unit price [FCU]]")


def test_read_bids__without_tender(tmp_path: Path) -> None:
    """Without a tender everything that does not need it is found, and no fault is invented."""
    text = csv_text(separator=";").replace("1.2;", "-1,2;").replace("0.12;", "0,12;")
    offers, findings = bids_of(tmp_path, "a.csv", text, None)
    assert told(findings) == [("value-out-of-bounds", "bids/a.csv:2[Load loss [kW]]", "-1,2")]
    assert len(offers) == 4


def test_read_bids__message(tmp_path: Path) -> None:
    """The message reads as the house style has it."""
    _, (finding,) = bids_of(tmp_path, "a.csv", csv_text().replace("1.2,", "-1.2,"), valid_tender(tmp_path))
    assert str(finding).split("\n")[0] == (
        'bids/a.csv:2[Load loss [kW]]: load loss: must be above 0 kW, got "-1.2" (Alder, lot 1)'
    )


def test_read_bids__progress(tmp_path: Path) -> None:
    """Each file is announced before it is read."""
    from lossworth.intake.bid_files import read_bids
    from lossworth.intake.tender_folder import InputFile

    announced: list[str] = []
    files = [InputFile(tmp_path / name, name) for name in ("a.csv", "b.pdf")]
    read_bids(files, None, lambda file: announced.append(file.shown_as))
    assert announced == ["a.csv", "b.pdf"]
