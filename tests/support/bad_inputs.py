"""Kinds of bad input: how each is made, and what must be said of it. Invented figures throughout.

Each case writes a whole tender folder, so that the same table can be driven through intake and through the
command line.
"""

from __future__ import annotations

import datetime

from .bad_input_cases import (
    BadInput,
    bids_case,
    csv_case,
    random_bytes,
    table_headed,
    table_with,
    table_without,
    tender_with,
    xlsx_case,
    zip_bytes,
)
from .bad_tenders import TENDERS
from .tender_folders import (
    HEADER,
    ROWS,
    csv_text,
    table_workbook,
    with_member,
    with_sheet_xml,
    workbook_bytes,
    write_folder,
)

__all__ = ["BAD_INPUTS", "BadInput"]

_GOOD_BOOK = workbook_bytes()
_BIRCH = csv_text().index("Birch")
_OLD_BOOK = b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1" + bytes(1000)
_LOAD = "Load loss [kW]"
#: Another bidder's alternative, and one cell of the price and another merged into one.
_ESTER = (
    "Lot,Bidder,Currency,Unit price,No-load loss [kW],Load loss [kW],Alternative\n1,Alder,NCU,5000,0.12,1.2,ester\n"
)
_ALTERNATIVES = tender_with("[exchange]", 'alternatives = "as offers of their own"\n[exchange]')
_MERGED = '</sheetData><mergeCells count="1"><mergeCell ref="D2:D3"/></mergeCells>'
_LOCKED_BOOK = _OLD_BOOK + "EncryptedPackage".encode("utf-16-le") + bytes(500)
_MILLION_LAUGHS = '<!DOCTYPE x [<!ENTITY a "ha"><!ENTITY b "&a;&a;">]><worksheet'

FILES = (
    csv_case("csv empty", b"", ("file-unreadable", "bids/offers.csv", "0 bytes")),
    csv_case("csv of spaces", " \n\n", ("header-missing", "bids/offers.csv:1", "")),
    csv_case(
        "csv in another encoding",
        csv_text().replace("Birch", "Bürch").encode("latin-1"),
        ("file-unreadable", "bids/offers.csv:4", f"byte 0xFC at byte {_BIRCH + 1}"),
    ),
    csv_case(
        "csv in UTF-16",
        csv_text().encode("utf-16"),
        ("file-unreadable", "bids/offers.csv:1", "a byte order mark of UTF-16 at byte 0"),
    ),
    csv_case(
        "csv with NUL",
        csv_text().replace("Birch", "Bi\0rch", 1),
        ("file-unreadable", "bids/offers.csv:4", f"a NUL at byte {_BIRCH + 2}"),
    ),
    csv_case(
        "csv in two encodings",
        csv_text().replace("Birch", "Bürch", 1).encode()
        + csv_text(rows=[ROWS[0]]).replace("Al", "Ål").encode("latin-1"),
        (
            "file-unreadable",
            "bids/offers.csv:7",
            f"byte 0xC5 at byte {len(csv_text().encode()) + 1 + csv_text().index('Alder')}",
        ),
    ),
    csv_case(
        "csv with a million columns",
        ",".join(HEADER) + ",x" * 1_000_000 + "\n",
        ("file-too-large", "bids/offers.csv", None),
    ),
    csv_case(
        "csv with 300 columns",
        csv_text([*HEADER, *(f"x{n}" for n in range(291))], [[*row, *[""] * 291] for row in ROWS]),
        ("file-too-large", "bids/offers.csv", None),
    ),
    csv_case("binary file named csv", random_bytes(), ("file-unreadable", "bids/offers.csv:1", "byte 0x8A at byte 2")),
    csv_case(
        "zip named csv", zip_bytes({"a.xml": b"<a/>"}), ("file-unreadable", "bids/offers.csv:1", "byte 0xD4 at byte 14")
    ),
    csv_case(
        "csv separated by tabs",
        csv_text(separator="\t"),
        ("header-missing", "bids/offers.csv:1", "\t".join(HEADER)),
    ),
    csv_case(
        "csv with an open quotation mark",
        csv_text() + '1,"Cedar,NCU,1,1,1,4,20,10\n',
        ("file-unreadable", "bids/offers.csv:6", None),
    ),
    csv_case(
        "csv with decimal commas without quotes",
        csv_text() + "1,Cedar,NCU,4900,0,128,1,24,4,22,10\n",
        ("row-length", "bids/offers.csv:6", "11 cells: 1, Cedar, NCU, 4900, 0, 128, 1, 24, 4, 22, 10"),
    ),
    xlsx_case("xlsx empty", b"", ("file-unreadable", "bids/offers.xlsx", "0 bytes")),
    xlsx_case("xlsx that is no zip", b"Dear buyer, ...", ("file-unreadable", "bids/offers.xlsx", "Dear buyer, ...")),
    xlsx_case("xlsx truncated", _GOOD_BOOK[: len(_GOOD_BOOK) // 2], ("file-unreadable", "bids/offers.xlsx", None)),
    xlsx_case(
        "xlsx damaged inside",
        with_sheet_xml(_GOOD_BOOK, "</sheetData>", ""),
        ("file-unreadable", "bids/offers.xlsx", None),
    ),
    xlsx_case("another zip named xlsx", zip_bytes({"letter.txt": b"x"}), ("file-unreadable", "bids/offers.xlsx", None)),
    xlsx_case(
        "old xls named xlsx",
        _OLD_BOOK,
        ("file-unreadable", "bids/offers.xlsx", "the older .xls format, or a password"),
    ),
    xlsx_case("xlsx with a password", _LOCKED_BOOK, ("file-unreadable", "bids/offers.xlsx", "a password")),
    xlsx_case(
        "xlsx with macros",
        with_member(_GOOD_BOOK, "xl/vbaProject.bin", lambda _: b"x"),
        ("file-unreadable", "bids/offers.xlsx", "xl/vbaProject.bin"),
    ),
    xlsx_case(
        "xlsx that leads to other files",
        with_member(_GOOD_BOOK, "xl/externalLinks/externalLink1.xml", lambda _: b"<externalLink/>"),
        ("workbook-links", "bids/offers.xlsx", None),
    ),
    xlsx_case(
        "xlsx nested deeply",
        with_sheet_xml(_GOOD_BOOK, "<sheetData>", f"{'<x>' * 300}{'</x>' * 300}<sheetData>"),
        ("file-too-large", "bids/offers.xlsx", None),
    ),
    xlsx_case("old xls", _OLD_BOOK, ("file-unreadable", "bids/offers.xls", "offers.xls"), name="offers.xls"),
    xlsx_case("macro workbook", _GOOD_BOOK, ("file-unreadable", "bids/offers.xlsm", "offers.xlsm"), name="offers.xlsm"),
    xlsx_case("ods", b"PK\x03\x04", ("file-unreadable", "bids/offers.ods", "offers.ods"), name="offers.ods"),
    xlsx_case(
        "zip bomb",
        with_member(_GOOD_BOOK, "xl/media/image1.bin", lambda _: bytes(49 * 1024 * 1024)),
        ("file-too-large", "bids/offers.xlsx", None),
    ),
    xlsx_case(
        "zip with 600 parts",
        zip_bytes({"[Content_Types].xml": b"<a/>", **{f"{n}.txt": b"x" for n in range(600)}}),
        ("file-too-large", "bids/offers.xlsx", None),
    ),
    xlsx_case(
        "xlsx with a cell far away",
        with_sheet_xml(_GOOD_BOOK, "</sheetData>", '<row r="1048576"><c r="XFD1048576"><v>1</v></c></row></sheetData>'),
        ("file-too-large", "bids/offers.xlsx", None),
    ),
    xlsx_case(
        "xlsx with rows out of order",
        with_sheet_xml(_GOOD_BOOK, "</sheetData>", '<row r="2"><c r="A2"><v>1</v></c></row></sheetData>'),
        ("file-unreadable", "bids/offers.xlsx", None),
    ),
    xlsx_case(
        "xlsx with entities",
        with_sheet_xml(_GOOD_BOOK, "<worksheet", _MILLION_LAUGHS),
        ("file-unreadable", "bids/offers.xlsx", None),
    ),
    bids_case("no bids", {}, ("no-offers", "bids", None)),
    bids_case(
        "attachments only",
        {"letter.pdf": b"%PDF-1.7"},
        ("file-not-read", "bids/letter.pdf", None),
        ("no-offers", "bids", None),
    ),
)

HEADERS = (
    csv_case("column missing", table_without(_LOAD), ("column-missing", "bids/offers.csv:1", None)),
    csv_case(
        "header absent",
        csv_text().split("\n", 1)[1],
        ("header-missing", "bids/offers.csv:1", "1,Alder,NCU,5000,0.12,1.2,4,20,10"),
    ),
    xlsx_case(
        "header absent in a workbook",
        workbook_bytes({"Offers": ROWS}),
        ("header-missing", "bids/offers.xlsx[Offers]!A1", "1; Alder; NCU; 5000; 0.12; 1.2; 4; 20; 10"),
    ),
    csv_case(
        "column twice",
        table_headed("Impedance [%]", "Pk [kW]"),
        ("column-twice", "bids/offers.csv:1[Pk [kW]]", "Pk [kW]"),
    ),
    csv_case(
        "unit missing",
        table_headed(_LOAD, "Load loss"),
        ("column-unit", "bids/offers.csv:1[Load loss]", "Load loss"),
    ),
    csv_case(
        "unit in milliwatts",
        table_headed(_LOAD, "Load loss [mW]"),
        ("column-unit", "bids/offers.csv:1[Load loss [mW]]", "Load loss [mW]"),
    ),
    csv_case(
        "price in thousands",
        table_headed("Unit price", "Unit price [1000 NCU]"),
        ("column-unit", "bids/offers.csv:1[Unit price [1000 NCU]]", "Unit price [1000 NCU]"),
    ),
    csv_case(
        "delivery in days",
        table_headed("Delivery [weeks]", "Delivery [days]"),
        ("column-unit", "bids/offers.csv:1[Delivery [days]]", "Delivery [days]"),
    ),
    csv_case(
        "discount without unit",
        csv_text([*HEADER, "Discount"], [[*row, 3] for row in ROWS]),
        ("column-unit", "bids/offers.csv:1[Discount]", "Discount"),
    ),
    csv_case(
        "item that the tender does not have",
        csv_text([*HEADER, "Item: bushing"], [[*row, 3] for row in ROWS]),
        ("column-not-read", "bids/offers.csv:1[Item: bushing]", "Item: bushing"),
    ),
    xlsx_case(
        "merged cells in a table of offers",
        with_sheet_xml(_GOOD_BOOK, "</sheetData>", _MERGED),
        ("cells-merged", "bids/offers.xlsx[Offers]!D2:D3", "D2:D3"),
    ),
    xlsx_case(
        "hidden sheet with offers",
        with_member(
            workbook_bytes({"Letter": [["Dear buyer"]], "Offers": (HEADER, *ROWS)}),
            "xl/workbook.xml",
            lambda content: content.replace(
                b'name="Offers" sheetId="2" state="visible"', b'name="Offers" sheetId="2" state="hidden"'
            ),
        ),
        ("offers-hidden", "bids/offers.xlsx[Offers]", "Offers"),
    ),
    csv_case("header without rows", csv_text(rows=[]), ("no-offers", "bids/offers.csv", None)),
)

ROWS_AND_CELLS = (
    csv_case("lot unknown", table_with("Lot", 7), ("lot-unknown", "bids/offers.csv:2[Lot]", "7")),
    csv_case("lot blank", table_with("Lot", ""), ("lot-unknown", "bids/offers.csv:2[Lot]", "")),
    csv_case("bidder blank", table_with("Bidder", " "), ("bidder-missing", "bids/offers.csv:2[Bidder]", "")),
    csv_case("offer twice", csv_text(rows=[*ROWS, ROWS[0]]), ("offer-twice", "bids/offers.csv:6", None)),
    bids_case(
        "offer twice in two files",
        {"a.xlsx": _GOOD_BOOK, "b.csv": csv_text(rows=[(1, "ALDER", *ROWS[0][2:])])},
        ("offer-twice", "bids/b.csv:2", None),
    ),
    BadInput(
        "alternative without base offer",
        lambda folder: write_folder(folder, tender=_ALTERNATIVES, bids={"offers.csv": _ESTER}),
        (("alternative-without-base", "bids/offers.csv:2[Alternative]", "ester"),),
    ),
    csv_case("load loss blank", table_with(_LOAD, ""), ("value-missing", "bids/offers.csv:2[Load loss [kW]]", "")),
    csv_case("price blank", table_with("Unit price", ""), ("value-missing", "bids/offers.csv:2[Unit price]", "")),
    csv_case("currency blank", table_with("Currency", ""), ("value-missing", "bids/offers.csv:2[Currency]", "")),
    csv_case(
        "text in a number",
        table_with(_LOAD, "about 1.2"),
        ("value-unreadable", f"bids/offers.csv:2[{_LOAD}]", "about 1.2"),
    ),
    csv_case("n/a in a number", table_with(_LOAD, "n/a"), ("value-unreadable", f"bids/offers.csv:2[{_LOAD}]", "n/a")),
    csv_case(
        "unit in a cell", table_with(_LOAD, "1.2 kW"), ("value-unreadable", f"bids/offers.csv:2[{_LOAD}]", "1.2 kW")
    ),
    csv_case(
        "digits of full width",
        table_with(_LOAD, "\uff11.\uff12"),
        ("value-unreadable", f"bids/offers.csv:2[{_LOAD}]", "\uff11.\uff12"),
    ),
    csv_case(
        "minus of a typographer",
        table_with(_LOAD, "\u20131.2"),
        ("value-out-of-bounds", f"bids/offers.csv:2[{_LOAD}]", "\u20131.2"),
    ),
    csv_case(
        "30 digits",
        table_with("Unit price", "9" * 30),
        ("value-out-of-bounds", "bids/offers.csv:2[Unit price]", "9" * 30),
    ),
    csv_case("infinity", table_with(_LOAD, "inf"), ("value-unreadable", f"bids/offers.csv:2[{_LOAD}]", "inf")),
    csv_case(
        "formula as number",
        table_with(_LOAD, "=1+0.2"),
        ("value-unreadable", f"bids/offers.csv:2[{_LOAD}]", "=1+0.2"),
    ),
    csv_case("NaN", table_with(_LOAD, "NaN"), ("value-unreadable", f"bids/offers.csv:2[{_LOAD}]", "NaN")),
    csv_case("1e308", table_with(_LOAD, "1e308"), ("value-out-of-bounds", f"bids/offers.csv:2[{_LOAD}]", "1e308")),
    csv_case(
        "decimal comma not declared",
        table_with(_LOAD, '"1,2"'),
        ("value-unreadable", f"bids/offers.csv:2[{_LOAD}]", "1,2"),
    ),
    csv_case("negative loss", table_with(_LOAD, -1.2), ("value-out-of-bounds", f"bids/offers.csv:2[{_LOAD}]", "-1.2")),
    csv_case("loss of zero", table_with(_LOAD, 0), ("value-out-of-bounds", f"bids/offers.csv:2[{_LOAD}]", "0")),
    csv_case(
        "price of zero", table_with("Unit price", 0), ("value-out-of-bounds", "bids/offers.csv:2[Unit price]", "0")
    ),
    csv_case(
        "currency unknown", table_with("Currency", "GCU"), ("currency-unknown", "bids/offers.csv:2[Currency]", "GCU")
    ),
    csv_case(
        "currency in words",
        table_with("Currency", "Crowns"),
        ("value-unreadable", "bids/offers.csv:2[Currency]", "Crowns"),
    ),
    csv_case(
        "currency of header and row differ",
        table_headed("Unit price", "Unit price [NCU]"),
        ("value-unreadable", "bids/offers.csv:5[Currency]", "FCU"),
    ),
    csv_case("quantity differs", table_with("Quantity", 9), ("quantity-differs", "bids/offers.csv:2[Quantity]", "9")),
    csv_case(
        "impedance unreadable where it is limited",
        table_with("Impedance [%]", "?", 1),
        ("value-unreadable", "bids/offers.csv:3[Impedance [%]]", "?"),
    ),
    csv_case(
        "impedance unreadable where it is not limited",
        table_with("Impedance [%]", "?"),
        ("value-not-read", "bids/offers.csv:2[Impedance [%]]", "?"),
    ),
    xlsx_case(
        "negative loss in a workbook",
        table_workbook(0, _LOAD, -1.2),
        ("value-out-of-bounds", "bids/offers.xlsx[Offers]!F2", "-1.2"),
    ),
    xlsx_case(
        "formula without value",
        table_workbook(0, _LOAD, "=E2*10"),
        ("value-unreadable", "bids/offers.xlsx[Offers]!F2", "=E2*10"),
    ),
    xlsx_case(
        "error cell", table_workbook(0, _LOAD, "#REF!"), ("value-unreadable", "bids/offers.xlsx[Offers]!F2", "#REF!")
    ),
    xlsx_case(
        "date as number",
        table_workbook(0, _LOAD, datetime.date(2026, 2, 1)),
        ("value-unreadable", "bids/offers.xlsx[Offers]!F2", "2026-02-01"),
    ),
    xlsx_case(
        "boolean as number", table_workbook(0, _LOAD, True), ("value-unreadable", "bids/offers.xlsx[Offers]!F2", "TRUE")
    ),
    xlsx_case(
        "percent format in a column of kW",
        table_workbook(0, _LOAD, 1.2, F2="0.00%"),
        ("value-unreadable", "bids/offers.xlsx[Offers]!F2", "120 %"),
    ),
    xlsx_case(
        "workbook without bidder",
        workbook_bytes({"Offers": ([HEADER[0], *HEADER[2:]], [ROWS[0][0], *ROWS[0][2:]])}),
        ("bidder-missing", "bids/offers.xlsx[Offers]!A2", ""),
    ),
)

SEVERAL_AT_ONCE = (
    BadInput(
        "problems in the tender and in two bids",
        lambda folder: write_folder(
            folder,
            tender=tender_with("load = 660", "load = -660"),
            bids={"a.csv": table_with(_LOAD, "x"), "b.xlsx": b"", "c.csv": table_with("Unit price", -5)},
        ),
        (
            ("tender-value", "tender.toml:45", "-660"),
            ("value-unreadable", f"bids/a.csv:2[{_LOAD}]", "x"),
            ("file-unreadable", "bids/b.xlsx", "0 bytes"),
            ("value-out-of-bounds", "bids/c.csv:2[Unit price]", "-5"),
            *(("offer-twice", f"bids/c.csv:{line}", None) for line in (2, 3, 4, 5)),
        ),
    ),
    BadInput(
        "two problems in one row",
        lambda folder: write_folder(
            folder, bids={"offers.csv": table_headed("1,Alder,NCU,5000,0.12,1.2", "1,Alder,NCU,free,0.12,-1.2")}
        ),
        (
            ("value-unreadable", "bids/offers.csv:2[Unit price]", "free"),
            ("value-out-of-bounds", f"bids/offers.csv:2[{_LOAD}]", "-1.2"),
        ),
    ),
)

BAD_INPUTS: tuple[BadInput, ...] = (*FILES, *HEADERS, *ROWS_AND_CELLS, *TENDERS, *SEVERAL_AT_ONCE)
