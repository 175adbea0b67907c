"""Write the bidders' files of the demo from one table of figures. INVENTED DATA.

Run it from anywhere: ``python sample_bids/make_sample_bids.py [FOLDER]``. Without a folder it writes `bids/` beside
itself. The same figures give the same bytes.
"""

from __future__ import annotations

import csv
import datetime
import io
import sys
from collections.abc import Mapping
from dataclasses import dataclass, field
from decimal import Decimal
from pathlib import Path

import xlsxwriter
from xlsxwriter.format import Format
from xlsxwriter.worksheet import Worksheet

INVENTED = "INVENTED DATA, made up for a demonstration"
WRITTEN_ON = datetime.datetime(2026, 9, 11, 9, 0, 0)  # noqa: DTZ001 - the file format has no time zone

#: One offer a line, one unit each: losses in kW as the bidder means them, an empty column where nothing is stated.
#: lot; bidder; unit price in the bidder's currency; P0; Pk; Paux; impedance in percent; delivery in weeks
FIGURES = """
1; Elderquill; 4840;   0.058; 1.150; ;    4.2;  34
1; Firthwane;  3300;   0.125; 1.230; ;    4.0;  28
1; Birchlune;  4060;   0.130; 1.250; ;    4.0;  30
1; Cedarfell;  4320;   0.112; 1.190; ;    4.1;  26
1; Damsonby;   4250;   0.120; 1.200; ;    4.0;  22
1; Aldermist;  4180;   0.128; 1.240; ;    4.0;  24
1; Gorsemere;  3900;   0.126; 1.350; ;    4.0;  20
2; Cedarfell;  11520;  0.330; 3.100; ;    4.0;  28
2; Damsonby;   11432;  0.350; 3.000; ;    4.2;  24
2; Firthwane;  9080;   0.355; 3.120; ;    4.0;  30
2; Elderquill; 13600;  0.175; 2.950; ;    4.3;  36
2; Gorsemere;  10900;  0.387; 3.250; ;    4.0;  22
2; Aldermist;  11350;  0.360; 3.150; ;    4.0;  26
2; Birchlune;  10980;  0.385; 3.240; ;    4.1;  32
3; Damsonby;   22300;  0.610; 7.250; ;    6.0;  28
3; Firthwane;  17200;  0.650; 7.450; ;    5.9;  32
3; Aldermist;  21900;  0.660; 7.300; ;    6.0;  30
3; Gorsemere;  20950;  0.690; 7.590; ;    6.0;  26
3; Elderquill; 26600;  0.330; 6.900; ;    6.3;  40
3; Cedarfell;  21150;  0.640; 8.040; ;    6.1;  30
3; Birchlune;  20400;  0.690; ;      ;    6.0;  34
4; Birchlune;  655000; 15.2;  134;   2.0; 12.4; 78
4; Firthwane;  548000; 13.2;  132;   1.6; 12.5; 96
4; Cedarfell;  702000; 12.6;  128;   1.5; 12.8; 92
4; Aldermist;  668000; 14.4;  141;   1.8; 12.5; 82
4; Damsonby;   661000; 14.4;  57.2;  2.2; 7.9;  74
4; Gorsemere;  628000; 15.8;  139;   1.6; 12.3; 70
"""

#: What Cedarfell writes as total loss. In lot 3 the load loss column repeats the total: the slip of this demo.
CEDARFELL_TOTALS = {"1": "1.302", "2": "3.430", "3": "8.040", "4": "140.6"}

LOTS = {
    "1": ("100 kVA pole-mounted, 11/0.4 kV", 600, "ONAN"),
    "2": ("400 kVA ground-mounted, 11/0.4 kV", 250, "ONAN"),
    "3": ("1000 kVA ground-mounted, 11/0.4 kV", 80, "ONAN"),
    "4": ("20/31.5 MVA, 33/11 kV, with on-load tap-changer", 2, "ONAN/ONAF"),
}

NUMBER_FORMAT = {"price": "#,##0", "kW": "0.000", "kW of a power transformer": "0.0", "W": "#,##0", "%": "0.0"}


@dataclass(frozen=True)
class Sheet:
    """One table of offers: its lots, and its columns as field and header."""

    name: str
    lots: str
    columns: Mapping[str, str]
    unit: str = "kW"
    title: str = ""


@dataclass(frozen=True)
class Workbook:
    """One bidder's file."""

    file: str
    bidder: str
    currency: str
    reference: str
    sheets: tuple[Sheet, ...]
    remarks: Mapping[str, str] = field(default_factory=dict)


def figures() -> dict[tuple[str, str], dict[str, str]]:
    """Stated values by bidder and lot; an empty text where nothing is stated."""
    names = ("lot", "bidder", "price", "no_load", "load", "auxiliary", "impedance", "delivery")
    table: dict[tuple[str, str], dict[str, str]] = {}
    for line in FIGURES.strip().splitlines():
        values = dict(zip(names, (part.strip() for part in line.split(";")), strict=True))
        lot = values["lot"]
        values["quantity"], values["cooling"] = str(LOTS[lot][1]), LOTS[lot][2]
        values["total"] = CEDARFELL_TOTALS[lot] if values["bidder"] == "Cedarfell" else ""
        table[values["bidder"], lot] = values
    return table


_ALDERMIST = {
    "lot": "Lot",
    "quantity": "Quantity",
    "price": "Unit price [NCU]",
    "no_load": "No-load loss [kW]",
    "load": "Load loss [kW]",
    "auxiliary": "Auxiliary loss [kW]",
    "impedance": "Impedance [%]",
    "delivery": "Delivery [weeks]",
    "cooling": "Cooling",
}
_BIRCHLUNE = {
    "lot": "Lot",
    "quantity": "Quantity",
    "price": "Unit price [NCU]",
    "no_load": "Guaranteed no-load loss [kW]",
    "load": "Guaranteed load loss [kW]",
    "impedance": "Impedance [%]",
    "delivery": "Delivery [weeks]",
}
_BIRCHLUNE_POWER = {
    **{key: _BIRCHLUNE[key] for key in ("lot", "quantity", "price", "no_load", "load")},
    "auxiliary": "Guaranteed auxiliary loss [kW]",
    **{key: _BIRCHLUNE[key] for key in ("impedance", "delivery")},
    "cooling": "Cooling",
}
_CEDARFELL = {
    "lot": "Lot",
    "quantity": "Quantity",
    "price": "Unit price [NCU]",
    "no_load": "No-load loss [kW]",
    "load": "Load loss [kW]",
    "total": "Total loss [kW]",
    "auxiliary": "Auxiliary loss [kW]",
    "impedance": "Impedance [%]",
    "delivery": "Delivery [weeks]",
}
_DAMSONBY = {
    "lot": "Lot",
    "price": "Unit price [NCU]",
    "no_load": "No-load loss [W]",
    "load": "Load loss [W]",
    "impedance": "Impedance [%]",
    "delivery": "Delivery [weeks]",
    "remark": "Remarks",
}
_DAMSONBY_POWER = {
    "lot": "Lot",
    "price": "Unit price [NCU]",
    "no_load": "No-load loss [kW]",
    "load": "Load loss [kW]",
    "auxiliary": "Auxiliary loss [kW]",
    "impedance": "Impedance [%]",
    "delivery": "Delivery [weeks]",
    "remark": "Remarks",
}
_ELDERQUILL = {
    "lot": "Lot",
    "quantity": "Quantity",
    "price": "Unit price [NCU]",
    "no_load": "P0 [W]",
    "load": "Pk [W]",
    "impedance": "Impedance [%]",
    "delivery": "Delivery [weeks]",
    "cooling": "Cooling",
    "remark": "Remarks",
}
_FIRTHWANE = {
    "lot": "Lot",
    "price": "Unit price (FCU)",
    "no_load": "No-load loss P0 (kW)",
    "load": "Load loss Pk (kW)",
    "auxiliary": "Auxiliary loss Paux (kW)",
    "impedance": "Impedance Z (%)",
    "delivery": "Delivery (weeks)",
    "quantity": "Quantity",
}
_GORSEMERE = {
    "bidder": "Bidder",
    "lot": "Lot",
    "quantity": "Quantity",
    "price": "Unit price [NCU]",
    "no_load": "No-load loss [kW]",
    "load": "Load loss [kW]",
    "auxiliary": "Auxiliary loss [kW]",
    "impedance": "Impedance [%]",
    "delivery": "Delivery [weeks]",
    "remark": "Remarks",
}

WORKBOOKS = (
    Workbook("aldermist.xlsx", "Aldermist Coil Works", "NCU", "ACW-2611", (Sheet("Offers", "1234", _ALDERMIST),)),
    Workbook(
        "birchlune.xlsx",
        "Birchlune Electric",
        "NCU",
        "26/0417",
        tuple(
            Sheet(f"Lot {lot}", lot, _BIRCHLUNE_POWER if lot == "4" else _BIRCHLUNE, title=f"Lot {lot}: {LOTS[lot][0]}")
            for lot in LOTS
        ),
    ),
    Workbook("cedarfell.xlsx", "Cedarfell Transformers", "NCU", "CF-T-1093", (Sheet("Offers", "1234", _CEDARFELL),)),
    Workbook(
        "damsonby.xlsx",
        "Damsonby Power Apparatus",
        "NCU",
        "DPA 5521",
        (
            Sheet("Distribution units", "123", _DAMSONBY, unit="W", title="Distribution transformers, lots 1 to 3"),
            Sheet("Power units", "4", _DAMSONBY_POWER, title="Power transformers, lot 4"),
        ),
        {"4": "On-load tap-changer included"},
    ),
    Workbook(
        "elderquill.xlsx",
        "Elderquill Magnetics",
        "NCU",
        "EM-26-88",
        (Sheet("Offers", "123", _ELDERQUILL, unit="W"),),
        {"1": "Amorphous core", "2": "Amorphous core", "3": "Amorphous core"},
    ),
    Workbook(
        "firthwane.xlsx",
        "Firthwane Electric",
        "FCU",
        "FE/MPB/07",
        (Sheet("Offers", "1234", _FIRTHWANE, title="Schedule of prices and guaranteed losses"),),
    ),
)


class Pen:
    """The few formats of a tidy workbook, and the writing of one cell."""

    def __init__(self, book: xlsxwriter.Workbook) -> None:
        self.book = book
        self.title = self._format(bold=True, font_size=13)
        self.label = self._format(bold=True, bg_color="#EDEDED", border=1, valign="top")
        self.header = self._format(bold=True, bg_color="#D9E2EC", border=1, text_wrap=True, valign="vcenter")
        self.text = self._format(border=1, valign="top", text_wrap=True)
        self.numbers = {kind: self._format(border=1, num_format=code) for kind, code in NUMBER_FORMAT.items()}
        self.whole = self._format(border=1, num_format="0")

    def _format(self, **properties: object) -> Format:
        return self.book.add_format({"font_name": "Arial", "font_size": 10, **properties})

    def number_format(self, name: str, unit: str, lot: str) -> Format:
        """Format of a figure: by its field, the unit of the losses and the size of the unit."""
        if name == "price":
            return self.numbers["price"]
        if name in ("no_load", "load", "total", "auxiliary"):
            return self.numbers["kW of a power transformer" if unit == "kW" and lot == "4" else unit]
        return self.numbers["%"] if name == "impedance" else self.whole

    def write(self, page: Worksheet, row: int, column: int, name: str, value: str, sheet: Sheet, lot: str) -> None:
        """Write one value as text or number, or an empty bordered cell."""
        if name in ("cooling", "remark"):
            page.write_string(row, column, value, self.text)
        elif not value:
            page.write_blank(row, column, None, self.number_format(name, sheet.unit, lot))
        else:
            number = Decimal(value)
            if sheet.unit == "W" and name in ("no_load", "load", "total", "auxiliary"):
                number *= 1000
            page.write_number(row, column, float(number), self.number_format(name, sheet.unit, lot))


def write_cover(pen: Pen, book: Workbook) -> None:
    """Sheet `Bid`: label and value, a line each."""
    page = pen.book.add_worksheet("Bid")
    page.set_column(0, 0, 22)
    page.set_column(1, 1, 58)
    lines = {
        "Bidder": book.bidder,
        "Tender": "MPB-T-07",
        "Bid reference": book.reference,
        "Currency": book.currency,
        "Price basis": "Firm, delivered to site, tax excluded",
        "Losses": "Guaranteed maxima, no plus tolerance",
        "Note": INVENTED,
    }
    for row, (label, value) in enumerate(lines.items()):
        page.write_string(row, 0, label, pen.label)
        page.write_string(row, 1, value, pen.text)
    page.set_landscape()
    page.fit_to_pages(1, 1)


def write_offers(pen: Pen, book: Workbook, sheet: Sheet, table: Mapping[tuple[str, str], Mapping[str, str]]) -> None:
    """One table of offers, below a title where the bidder gives one."""
    page = pen.book.add_worksheet(sheet.name)
    top = 0
    if sheet.title:
        page.write_string(0, 0, sheet.title, pen.title)
        top = 2
    for column, (name, header) in enumerate(sheet.columns.items()):
        page.set_column(column, column, 30 if name == "remark" else 14)
        page.write_string(top, column, header, pen.header)
    page.set_row(top, 44)
    for row, lot in enumerate(sheet.lots, start=top + 1):
        values = {**table[book.bidder.split()[0], lot], "remark": book.remarks.get(lot, "")}
        for column, name in enumerate(sheet.columns):
            pen.write(page, row, column, name, values[name], sheet, lot)
    page.freeze_panes(top + 1, 1)
    page.set_landscape()
    page.fit_to_pages(1, 0)


def workbook_bytes(book: Workbook, table: Mapping[tuple[str, str], Mapping[str, str]]) -> bytes:
    """One bidder's workbook."""
    stream = io.BytesIO()
    with xlsxwriter.Workbook(stream, {"in_memory": True}) as target:
        target.set_properties(
            {"title": "Bid MPB-T-07", "author": book.bidder, "comments": INVENTED, "created": WRITTEN_ON}
        )
        pen = Pen(target)
        write_cover(pen, book)
        for sheet in book.sheets:
            write_offers(pen, book, sheet, table)
    return stream.getvalue()


def gorsemere_bytes(table: Mapping[tuple[str, str], Mapping[str, str]]) -> bytes:
    """Gorsemere's csv as a spreadsheet writes it where decimals have commas: semicolons, CRLF, byte order mark."""
    stream = io.StringIO()
    writer = csv.writer(stream, delimiter=";", lineterminator="\r\n")
    writer.writerow(_GORSEMERE.values())
    for (bidder, _), values in table.items():
        if bidder == "Gorsemere":
            row = {**values, "bidder": "Gorsemere Windings", "remark": INVENTED}
            writer.writerow(
                row[name] if name in ("bidder", "remark") else row[name].replace(".", ",") for name in _GORSEMERE
            )
    return stream.getvalue().encode("utf-8-sig")


def all_files() -> dict[str, bytes]:
    """Every bid of the demo, by file name."""
    table = figures()
    files = {book.file: workbook_bytes(book, table) for book in WORKBOOKS}
    files["gorsemere.csv"] = gorsemere_bytes(table)
    return files


def main(folder: Path) -> None:
    """Write every bid into a folder."""
    folder.mkdir(parents=True, exist_ok=True)
    for name, content in all_files().items():
        (folder / name).write_bytes(content)


if __name__ == "__main__":
    main(Path(sys.argv[1]) if len(sys.argv) > 1 else Path(__file__).parent / "bids")
