"""Tender folders for tests: valid by default, invented figures, each builder changes one thing."""

from __future__ import annotations

import zipfile
from collections.abc import Callable, Mapping, Sequence
from io import BytesIO
from pathlib import Path

from lossworth.findings import Finding
from lossworth.intake.bid_files import read_bids
from lossworth.intake.tender_file import read_tender
from lossworth.intake.tender_folder import InputFile, find_inputs
from lossworth.records.bid import Offer
from lossworth.records.tender import Tender

TENDER = """\
format_version = 1

[tender]
reference = "TEST-1"
title = "Two lots for tests"
buyer = "Invented Board"
currency = "NCU"

[rules]
round_money_to = 0.01
rounding = "half away from zero"
rounding_applies_to = "each cost part per unit"

[exchange]
source = "Invented list"
kind = "mid"
date = 2026-09-15
evidence = "Invented record"

[exchange.rates]
FCU = 1.25
[economics.board]
energy_price_per_kwh = 0.08
demand_charge_per_kw_year = 50
discount_rate_percent = 6
evaluation_period_years = 30
timing = "end of year"
price_terms = "real"
discount_rate_terms = "real"
[loading.town]
load_factor = 0.5
loss_factor_coefficient = 0.15
peak_load_pu = 0.6
peak_responsibility_factor = 0.9

[[lot]]
id = "1"
description = "100 kVA"
rated_power_kva = 100
quantity = 10
cooling = "ONAN"

[lot.rates]
no_load = 11000
load = 660
per = "kW"

[lot.study]
economics = "board"
loading = "town"

[[lot]]
id = "2"
description = "1000 kVA"
rated_power_kva = 1000
quantity = 5
cooling = "ONAN"
impedance_percent = 6
impedance_tolerance_percentage_points = 0.6
latest_delivery_weeks = 40

[lot.derivation]
economics = "board"
loading = "town"
round_rates_to = 0.01
"""

HEADER = (
    "Lot",
    "Bidder",
    "Currency",
    "Unit price",
    "No-load loss [kW]",
    "Load loss [kW]",
    "Impedance [%]",
    "Delivery [weeks]",
    "Quantity",
)

#: What the header becomes, and rows of two bidders, as a spreadsheet's numbers.
ROWS: tuple[tuple[object, ...], ...] = (
    (1, "Alder", "NCU", 5000, 0.12, 1.2, 4, 20, 10),
    (2, "Alder", "NCU", 22000, 0.61, 7.25, 6, 28, 5),
    (1, "Birch", "NCU", 4900, 0.128, 1.24, 4, 22, 10),
    (2, "Birch", "FCU", 17200, 0.65, 7.45, 5.9, 32, 5),
)


def csv_text(
    header: Sequence[str] = HEADER, rows: Sequence[Sequence[object]] = ROWS, *, separator: str = ",", end: str = "\n"
) -> str:
    """Table of offers as csv; nothing in it needs quotes."""
    return "".join(separator.join(map(str, row)) + end for row in (header, *rows))


def with_cell(row: int, column: str, value: object) -> list[list[object]]:
    """Rows in which one cell is another; the row counts from 0, the column goes by its header."""
    rows = [list(each) for each in ROWS]
    rows[row][HEADER.index(column)] = value
    return rows


def workbook_bytes(
    sheets: Mapping[str, Sequence[Sequence[object]]] | None = None, formats: Mapping[str, str] | None = None
) -> bytes:
    """Workbook of sheets with rows, and number formats by cell of the last sheet."""
    import openpyxl

    book = openpyxl.Workbook()
    book.remove(book.active)
    for name, rows in (sheets or {"Offers": (HEADER, *ROWS)}).items():
        page = book.create_sheet(name)
        for row in rows:
            page.append(list(row))
    for cell, number_format in (formats or {}).items():
        page[cell].number_format = number_format
    stream = BytesIO()
    book.save(stream)
    return stream.getvalue()


def table_workbook(row: int, column: str, value: object, **formats: str) -> bytes:
    """Workbook of one table of offers in which one cell is another."""
    return workbook_bytes({"Offers": (HEADER, *with_cell(row, column, value))}, formats)


def with_member(data: bytes, name: str, edit: Callable[[bytes], bytes]) -> bytes:
    """Zip file in which one member is another; a member that is not there is added."""
    stream = BytesIO()
    with zipfile.ZipFile(BytesIO(data)) as old, zipfile.ZipFile(stream, "w", zipfile.ZIP_DEFLATED) as new:
        names = old.namelist()
        for member in names:
            content = old.read(member)
            new.writestr(member, edit(content) if member == name else content)
        if name not in names:
            new.writestr(name, edit(b""))
    return stream.getvalue()


def with_sheet_xml(data: bytes, old: str, new: str) -> bytes:
    """Workbook in which the markup of the first sheet reads otherwise."""

    def edit(content: bytes) -> bytes:
        text = content.decode()
        assert old in text, text
        return text.replace(old, new).encode()

    return with_member(data, "xl/worksheets/sheet1.xml", edit)


def write_folder(
    folder: Path,
    *,
    tender: str | bytes | None = TENDER,
    bids: Mapping[str, str | bytes] | None = None,
    more: Mapping[str, str | bytes] | None = None,
) -> Path:
    """Write a tender folder; without bids it has one csv file of the rows above, with others where there are more."""
    folder.mkdir(parents=True, exist_ok=True)
    files = dict(more or {})
    if tender is not None:
        files["tender.toml"] = tender
    files |= {
        f"bids/{name}": content for name, content in ({"offers.csv": csv_text()} if bids is None else bids).items()
    }
    for name, content in files.items():
        path = folder / name
        path.parent.mkdir(exist_ok=True)
        path.write_bytes(content.encode() if isinstance(content, str) else content)
    return folder


def read_folder(folder: Path) -> tuple[Tender | None, tuple[Offer, ...], tuple[Finding, ...]]:
    """Everything that intake makes of a tender folder."""
    inputs, missing = find_inputs(folder)
    if inputs is None:
        return None, (), missing
    tender, about_tender = read_tender(inputs.tender)
    offers, about_bids = read_bids(inputs.bids, tender)
    return tender, offers, (*missing, *about_tender, *about_bids)


def tender_of(path: Path, text: str | bytes = TENDER) -> tuple[Tender | None, tuple[Finding, ...]]:
    """Tender of a text, written to a file in a folder."""
    file = path / "tender.toml"
    file.write_bytes(text.encode() if isinstance(text, str) else text)
    return read_tender(InputFile(file, file.name))


def valid_tender(path: Path, text: str = TENDER) -> Tender:
    """Tender of a text that has no faults."""
    tender, findings = tender_of(path, text)
    assert tender is not None, [str(finding) for finding in findings]
    return tender


def bids_of(
    path: Path, name: str, content: str | bytes, tender: Tender | None
) -> tuple[tuple[Offer, ...], tuple[Finding, ...]]:
    """Offers of one bid file."""
    file = path / name
    file.write_bytes(content.encode() if isinstance(content, str) else content)
    return read_bids([InputFile(file, f"bids/{name}")], tender)


def told(findings: Sequence[Finding]) -> list[tuple[str, str, str | None]]:
    """Kind, place and value of each finding."""
    return [(finding.kind, str(finding.place), finding.got) for finding in findings]
