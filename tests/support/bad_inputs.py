"""Kinds of bad input: how each is made, and what must be said of it. Invented figures throughout.

Each case writes a whole tender folder, so that the same table can be driven through intake and through the
command line.
"""

from __future__ import annotations

import datetime
import zipfile
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from io import BytesIO
from pathlib import Path

from lossworth.findings import KINDS, Effect

from .tender_folders import (
    HEADER,
    ROWS,
    TENDER,
    csv_text,
    table_workbook,
    with_cell,
    with_member,
    with_sheet_xml,
    workbook_bytes,
    write_folder,
)

Told = tuple[str, str, str | None]


@dataclass(frozen=True)
class BadInput:
    """One case.

    Parameters
    ----------
    id : str
        Name of the test.
    make : callable
        Writes the tender folder to a path.
    told : tuple
        Kind, place and value as read of every finding, in the order of reading.
    """

    id: str
    make: Callable[[Path], object]
    told: tuple[Told, ...]

    @property
    def stops(self) -> bool:
        """Whether the evaluation stops and writes no paper; else one offer or more stays unranked, or all is well."""
        return any(KINDS[kind].effect is Effect.STOPS for kind, _, _ in self.told)


def _csv(id: str, content: str | bytes, *told: Told, name: str = "offers.csv") -> BadInput:
    return BadInput(id, lambda folder: write_folder(folder, bids={name: content}), told)


def _xlsx(id: str, content: bytes, *told: Told, name: str = "offers.xlsx") -> BadInput:
    return BadInput(id, lambda folder: write_folder(folder, bids={name: content}), told)


def _tender(id: str, content: str | bytes | None, *told: Told) -> BadInput:
    return BadInput(id, lambda folder: write_folder(folder, tender=content), told)


def _bids(id: str, bids: Mapping[str, str | bytes], *told: Told) -> BadInput:
    return BadInput(id, lambda folder: write_folder(folder, bids=bids), told)


def _cell(column: str, value: object, row: int = 0) -> str:
    return csv_text(rows=with_cell(row, column, value))


def _header(old: str, new: str) -> str:
    text = csv_text()
    assert old in text
    return text.replace(old, new, 1)


def _without_column(column: str) -> str:
    at = HEADER.index(column)
    return csv_text([*HEADER[:at], *HEADER[at + 1 :]], [[*row[:at], *row[at + 1 :]] for row in ROWS])


def _toml(old: str, new: str) -> str:
    assert old in TENDER
    return TENDER.replace(old, new, 1)


def _zip(members: Mapping[str, bytes]) -> bytes:
    stream = BytesIO()
    with zipfile.ZipFile(stream, "w", zipfile.ZIP_DEFLATED) as archive:
        for name, content in members.items():
            archive.writestr(name, content)
    return stream.getvalue()


def _random_bytes() -> bytes:
    return bytes((number * number * 31 + number * 7) % 256 for number in range(4000))


_GOOD_BOOK = workbook_bytes()
_OLD_BOOK = b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1" + bytes(1000)
_LOAD = "Load loss [kW]"
_MILLION_LAUGHS = '<!DOCTYPE x [<!ENTITY a "ha"><!ENTITY b "&a;&a;">]><worksheet'

FILES = (
    _csv("csv empty", b"", ("file-unreadable", "bids/offers.csv", "0 bytes")),
    _csv("csv of spaces", " \n\n", ("header-missing", "bids/offers.csv:1", "")),
    _csv(
        "csv in another encoding",
        csv_text().replace("Birch", "Bürch").encode("latin-1"),
        ("file-unreadable", "bids/offers.csv:4", "byte 0xFC at byte 198"),
    ),
    _csv(
        "csv in UTF-16",
        csv_text().encode("utf-16"),
        ("file-unreadable", "bids/offers.csv:1", "a byte order mark of UTF-16 at byte 0"),
    ),
    _csv(
        "csv with NUL",
        csv_text().replace("Birch", "Bi\0rch", 1),
        ("file-unreadable", "bids/offers.csv:4", "a NUL at byte 199"),
    ),
    _csv("binary file named csv", _random_bytes(), ("file-unreadable", "bids/offers.csv:1", "a NUL at byte 0")),
    _csv("workbook named csv", _GOOD_BOOK, ("file-unreadable", "bids/offers.csv:1", "byte 0xB1 at byte 14")),
    _csv(
        "csv separated by tabs",
        csv_text(separator="\t"),
        ("header-missing", "bids/offers.csv:1", "\t".join(HEADER)),
    ),
    _csv(
        "csv with an open quotation mark",
        csv_text() + '1,"Cedar,NCU,1,1,1,4,20,10\n',
        ("file-unreadable", "bids/offers.csv:6", None),
    ),
    _csv(
        "csv with decimal commas without quotes",
        csv_text() + "1,Cedar,NCU,4900,0,128,1,24,4,22,10\n",
        ("row-length", "bids/offers.csv:6", "11 cells: 1, Cedar, NCU, 4900, 0, 128, 1, 24, 4, 22, 10"),
    ),
    _xlsx("xlsx empty", b"", ("file-unreadable", "bids/offers.xlsx", "0 bytes")),
    _xlsx("xlsx that is no zip", b"Dear buyer, ...", ("file-unreadable", "bids/offers.xlsx", "Dear buyer, ...")),
    _xlsx("xlsx truncated", _GOOD_BOOK[: len(_GOOD_BOOK) // 2], ("file-unreadable", "bids/offers.xlsx", None)),
    _xlsx(
        "xlsx damaged inside",
        with_sheet_xml(_GOOD_BOOK, "</sheetData>", ""),
        ("file-unreadable", "bids/offers.xlsx", None),
    ),
    _xlsx("another zip named xlsx", _zip({"letter.txt": b"x"}), ("file-unreadable", "bids/offers.xlsx", None)),
    _xlsx(
        "old xls named xlsx",
        _OLD_BOOK,
        ("file-unreadable", "bids/offers.xlsx", "the older .xls format, or a password"),
    ),
    _xlsx("old xls", _OLD_BOOK, ("file-unreadable", "bids/offers.xls", "offers.xls"), name="offers.xls"),
    _xlsx("macro workbook", _GOOD_BOOK, ("file-unreadable", "bids/offers.xlsm", "offers.xlsm"), name="offers.xlsm"),
    _xlsx("ods", b"PK\x03\x04", ("file-unreadable", "bids/offers.ods", "offers.ods"), name="offers.ods"),
    _xlsx(
        "zip bomb",
        with_member(_GOOD_BOOK, "xl/media/image1.bin", lambda _: bytes(49 * 1024 * 1024)),
        ("file-too-large", "bids/offers.xlsx", None),
    ),
    _xlsx(
        "zip with 600 parts",
        _zip({"[Content_Types].xml": b"<a/>", **{f"{n}.txt": b"x" for n in range(600)}}),
        ("file-too-large", "bids/offers.xlsx", None),
    ),
    _xlsx(
        "xlsx with a cell far away",
        with_sheet_xml(_GOOD_BOOK, "</sheetData>", '<row r="1048576"><c r="XFD1048576"><v>1</v></c></row></sheetData>'),
        ("file-too-large", "bids/offers.xlsx", None),
    ),
    _xlsx(
        "xlsx with rows out of order",
        with_sheet_xml(_GOOD_BOOK, "</sheetData>", '<row r="2"><c r="A2"><v>1</v></c></row></sheetData>'),
        ("file-unreadable", "bids/offers.xlsx", None),
    ),
    _xlsx(
        "xlsx with entities",
        with_sheet_xml(_GOOD_BOOK, "<worksheet", _MILLION_LAUGHS),
        ("file-unreadable", "bids/offers.xlsx", None),
    ),
    _bids("no bids", {}, ("no-offers", "bids", None)),
    _bids(
        "attachments only",
        {"letter.pdf": b"%PDF-1.7"},
        ("file-not-read", "bids/letter.pdf", None),
        ("no-offers", "bids", None),
    ),
)

HEADERS = (
    _csv("column missing", _without_column(_LOAD), ("column-missing", "bids/offers.csv:1", None)),
    _csv(
        "header absent",
        csv_text().split("\n", 1)[1],
        ("header-missing", "bids/offers.csv:1", "1,Alder,NCU,5000,0.12,1.2,4,20,10"),
    ),
    _xlsx(
        "header absent in a workbook",
        workbook_bytes({"Offers": ROWS}),
        ("header-missing", "bids/offers.xlsx[Offers]!A1", "1; Alder; NCU; 5000; 0.12; 1.2; 4; 20; 10"),
    ),
    _csv(
        "column twice",
        _header("Impedance [%]", "Pk [kW]"),
        ("column-twice", "bids/offers.csv:1[Pk [kW]]", "Pk [kW]"),
    ),
    _csv(
        "unit missing",
        _header(_LOAD, "Load loss"),
        ("column-unit", "bids/offers.csv:1[Load loss]", "Load loss"),
    ),
    _csv(
        "unit in milliwatts",
        _header(_LOAD, "Load loss [mW]"),
        ("column-unit", "bids/offers.csv:1[Load loss [mW]]", "Load loss [mW]"),
    ),
    _csv(
        "price in thousands",
        _header("Unit price", "Unit price [1000 NCU]"),
        ("column-unit", "bids/offers.csv:1[Unit price [1000 NCU]]", "Unit price [1000 NCU]"),
    ),
    _csv(
        "delivery in days",
        _header("Delivery [weeks]", "Delivery [days]"),
        ("column-unit", "bids/offers.csv:1[Delivery [days]]", "Delivery [days]"),
    ),
    _csv("header without rows", csv_text(rows=[]), ("no-offers", "bids/offers.csv", None)),
)

ROWS_AND_CELLS = (
    _csv("lot unknown", _cell("Lot", 7), ("lot-unknown", "bids/offers.csv:2[Lot]", "7")),
    _csv("lot blank", _cell("Lot", ""), ("lot-unknown", "bids/offers.csv:2[Lot]", "")),
    _csv("bidder blank", _cell("Bidder", " "), ("bidder-missing", "bids/offers.csv:2[Bidder]", "")),
    _csv("offer twice", csv_text(rows=[*ROWS, ROWS[0]]), ("offer-twice", "bids/offers.csv:6", None)),
    _bids(
        "offer twice in two files",
        {"a.xlsx": _GOOD_BOOK, "b.csv": csv_text(rows=[(1, "ALDER", *ROWS[0][2:])])},
        ("offer-twice", "bids/b.csv:2", None),
    ),
    _csv("load loss blank", _cell(_LOAD, ""), ("value-missing", "bids/offers.csv:2[Load loss [kW]]", "")),
    _csv("price blank", _cell("Unit price", ""), ("value-missing", "bids/offers.csv:2[Unit price]", "")),
    _csv("currency blank", _cell("Currency", ""), ("value-missing", "bids/offers.csv:2[Currency]", "")),
    _csv(
        "text in a number", _cell(_LOAD, "about 1.2"), ("value-unreadable", f"bids/offers.csv:2[{_LOAD}]", "about 1.2")
    ),
    _csv("n/a in a number", _cell(_LOAD, "n/a"), ("value-unreadable", f"bids/offers.csv:2[{_LOAD}]", "n/a")),
    _csv("unit in a cell", _cell(_LOAD, "1.2 kW"), ("value-unreadable", f"bids/offers.csv:2[{_LOAD}]", "1.2 kW")),
    _csv("NaN", _cell(_LOAD, "NaN"), ("value-unreadable", f"bids/offers.csv:2[{_LOAD}]", "NaN")),
    _csv("1e308", _cell(_LOAD, "1e308"), ("value-out-of-bounds", f"bids/offers.csv:2[{_LOAD}]", "1e308")),
    _csv(
        "decimal comma not declared",
        _cell(_LOAD, '"1,2"'),
        ("value-unreadable", f"bids/offers.csv:2[{_LOAD}]", "1,2"),
    ),
    _csv("negative loss", _cell(_LOAD, -1.2), ("value-out-of-bounds", f"bids/offers.csv:2[{_LOAD}]", "-1.2")),
    _csv("loss of zero", _cell(_LOAD, 0), ("value-out-of-bounds", f"bids/offers.csv:2[{_LOAD}]", "0")),
    _csv("price of zero", _cell("Unit price", 0), ("value-out-of-bounds", "bids/offers.csv:2[Unit price]", "0")),
    _csv("currency unknown", _cell("Currency", "GCU"), ("currency-unknown", "bids/offers.csv:2[Currency]", "GCU")),
    _csv(
        "currency in words", _cell("Currency", "Crowns"), ("value-unreadable", "bids/offers.csv:2[Currency]", "Crowns")
    ),
    _csv(
        "currency of header and row differ",
        _header("Unit price", "Unit price [NCU]"),
        ("value-unreadable", "bids/offers.csv:5[Currency]", "FCU"),
    ),
    _csv("quantity differs", _cell("Quantity", 9), ("quantity-differs", "bids/offers.csv:2[Quantity]", "9")),
    _csv(
        "impedance unreadable where it is limited",
        _cell("Impedance [%]", "?", 1),
        ("value-unreadable", "bids/offers.csv:3[Impedance [%]]", "?"),
    ),
    _csv(
        "impedance unreadable where it is not limited",
        _cell("Impedance [%]", "?"),
        ("value-not-read", "bids/offers.csv:2[Impedance [%]]", "?"),
    ),
    _xlsx(
        "negative loss in a workbook",
        table_workbook(0, _LOAD, -1.2),
        ("value-out-of-bounds", "bids/offers.xlsx[Offers]!F2", "-1.2"),
    ),
    _xlsx(
        "formula without value",
        table_workbook(0, _LOAD, "=E2*10"),
        ("value-unreadable", "bids/offers.xlsx[Offers]!F2", "=E2*10"),
    ),
    _xlsx(
        "error cell", table_workbook(0, _LOAD, "#REF!"), ("value-unreadable", "bids/offers.xlsx[Offers]!F2", "#REF!")
    ),
    _xlsx(
        "date as number",
        table_workbook(0, _LOAD, datetime.date(2026, 2, 1)),
        ("value-unreadable", "bids/offers.xlsx[Offers]!F2", "2026-02-01"),
    ),
    _xlsx(
        "boolean as number", table_workbook(0, _LOAD, True), ("value-unreadable", "bids/offers.xlsx[Offers]!F2", "TRUE")
    ),
    _xlsx(
        "percent format in a column of kW",
        table_workbook(0, _LOAD, 1.2, F2="0.00%"),
        ("value-unreadable", "bids/offers.xlsx[Offers]!F2", "120 %"),
    ),
    _xlsx(
        "workbook without bidder",
        workbook_bytes({"Offers": ([HEADER[0], *HEADER[2:]], [ROWS[0][0], *ROWS[0][2:]])}),
        ("bidder-missing", "bids/offers.xlsx[Offers]!A2", ""),
    ),
)

TENDERS = (
    _tender("tender missing", None, ("file-missing", "tender.toml", None)),
    _tender("tender empty", b"", ("file-unreadable", "tender.toml", "0 bytes")),
    _tender("binary file named toml", _random_bytes(), ("file-unreadable", "tender.toml:1", "a NUL at byte 0")),
    _tender(
        "tender in another encoding",
        TENDER.replace("Invented", "Erfündet", 1).encode("latin-1"),
        ("file-unreadable", "tender.toml:6", "byte 0xFC at byte 93"),
    ),
    _tender(
        "tender syntax",
        _toml('title = "Two lots for tests"', 'title = "Two lots for tests'),
        ("tender-syntax", "tender.toml:5", 'title = "Two lots for tests'),
    ),
    _tender(
        "tender key unknown",
        _toml("load_factor = 0.5", "load_faktor = 0.5"),
        ("tender-key-missing", "tender.toml:30", None),
        ("tender-key-unknown", "tender.toml:31", "0.5"),
    ),
    _tender(
        "tender key in the wrong table",
        _toml("[exchange]", "timing = 'mid-year'\n[exchange]"),
        ("tender-key-unknown", "tender.toml:14", "mid-year"),
    ),
    _tender("tender key missing", _toml("quantity = 10\n", ""), ("tender-key-missing", "tender.toml:36", None)),
    _tender(
        "tender number in quotes",
        _toml("load = 660", 'load = "660"'),
        ("tender-value", "tender.toml:45", "660"),
    ),
    _tender("tender number of the wrong type", _toml("load = 660", "load = true"), ("tender-value", "tender.toml:45", "true")),
    _tender("tender number infinite", _toml("load = 660", "load = inf"), ("tender-value", "tender.toml:45", "inf")),
    _tender("tender number out of bounds", _toml("load = 660", "load = -660"), ("tender-value", "tender.toml:45", "-660")),
    _tender(
        "economics unknown",
        _toml('study]\neconomics = "board"', 'study]\neconomics = "bord"'),
        ("tender-value", "tender.toml:49", "bord"),
    ),
    _tender(
        "rates and derivation both",
        _toml("[lot.study]", "[lot.derivation]"),
        ("tender-conflict", "tender.toml:48", None),
    ),
    _tender(
        "rates and derivation neither",
        _toml("[lot.rates]\nno_load = 11000\nload = 660\nper = \"kW\"\n", ""),
        ("tender-key-missing", "tender.toml:36", None),
    ),
    _tender("lot twice", _toml('id = "2"', 'id = "1"'), ("tender-conflict", "tender.toml:53", "1"), *(
        ("lot-unknown", f"bids/offers.csv:{line}[Lot]", "2") for line in (3, 5)
    )),
    _tender("tender from the future", _toml("format_version = 1", "format_version = 2"), ("tender-value", "tender.toml:1", "2")),
)  # fmt: skip

SEVERAL_AT_ONCE = (
    BadInput(
        "problems in the tender and in two bids",
        lambda folder: write_folder(
            folder,
            tender=_toml("load = 660", "load = -660"),
            bids={"a.csv": _cell(_LOAD, "x"), "b.xlsx": b"", "c.csv": _cell("Unit price", -5)},
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
            folder, bids={"offers.csv": _header("1,Alder,NCU,5000,0.12,1.2", "1,Alder,NCU,free,0.12,-1.2")}
        ),
        (
            ("value-unreadable", "bids/offers.csv:2[Unit price]", "free"),
            ("value-out-of-bounds", f"bids/offers.csv:2[{_LOAD}]", "-1.2"),
        ),
    ),
)

BAD_INPUTS: tuple[BadInput, ...] = (*FILES, *HEADERS, *ROWS_AND_CELLS, *TENDERS, *SEVERAL_AT_ONCE)
