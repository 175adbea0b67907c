"""Bid forms filled in as bidders do, through openpyxl. All figures are invented."""

from __future__ import annotations

import datetime
import importlib.util
import os
from collections.abc import Iterator, Mapping
from io import BytesIO
from pathlib import Path
from typing import Any

os.environ["OPENPYXL_LXML"] = "False"  # as the reader sets it, whoever imports openpyxl first

import openpyxl

from lossworth.records.tender import Tender
from lossworth.report.bid_form import bid_form_bytes
from lossworth.report.bid_form_view import BidFormView
from lossworth.report.build_form import build_form

__all__ = [
    "MADE",
    "answers",
    "demo_answers",
    "demo_figures",
    "filled",
    "form_of",
    "headings",
    "schedule_rows",
    "with_alternative",
]

SAMPLE_BIDS = Path(__file__).resolve().parents[2] / "sample_bids"
MADE = datetime.datetime(2026, 8, 1, 10, 0, tzinfo=datetime.UTC)
_BY_NAME = {
    "price": "Unit price",
    "no_load": "No-load loss [kW]",
    "load": "Load loss [kW]",
    "auxiliary": "Auxiliary loss [kW]",
    "impedance": "Impedance [%]",
    "delivery": "Delivery [weeks]",
}
_WHOLE_BID = {
    "Address": "Invented road 1",
    "Contact person": "A. Nobody (invented)",
    "Electronic mail": "nobody@example.invalid",
    "Price terms": "DDP",
    "Price basis": "firm",
    "Tax included": "no",
    "Valid until": datetime.date(2026, 12, 31),
    "Name and function": "A. Nobody, sales (invented)",
    "Day": datetime.date(2026, 9, 11),
}


def form_of(tender: Tender) -> bytes:
    """Blank form of a tender."""
    return form_bytes(build_form(tender))


def form_bytes(view: BidFormView) -> bytes:
    """Blank form of a view."""
    return bid_form_bytes(view, MADE, "0")


def headings(page: Any) -> tuple[int, dict[str, int]]:
    """Row of the headings of the price schedule, and the column of each."""
    for row in page.iter_rows():
        found = {cell.value: cell.column for cell in row if isinstance(cell.value, str)}
        if any(text.startswith("Unit price") for text in found) and "Lot" in found:
            return row[0].row, found
    raise AssertionError(f"no headings on {page.title}")


def schedule_rows(page: Any) -> dict[str, int]:
    """Row of each lot on the price schedule."""
    top, columns = headings(page)
    cells = (page.cell(row, columns["Lot"]) for row in range(top + 1, page.max_row + 1))
    return {str(cell.value): cell.row for cell in cells if cell.value is not None}


def filled(form: bytes, whole_bid: Mapping[str, Any], lots: Mapping[str, Mapping[str, Any]]) -> bytes:
    """Form with answers: by label on the sheet of the bid, by lot and heading on the price schedule.

    Only open cells are filled: a locked one is a fault of the form or of the test.
    """
    book = openpyxl.load_workbook(BytesIO(form))
    for label, value in _answered(book["Bid"], whole_bid):
        assert not label.protection.locked, label.coordinate
        label.value = value
    page = book["Price schedule"]
    _, columns = headings(page)
    rows = schedule_rows(page)
    for lot, values in lots.items():
        for heading, value in values.items():
            cell = page.cell(rows[lot], columns[heading])
            assert not cell.protection.locked, f"lot {lot}: {heading} is locked"
            cell.value = value
    stream = BytesIO()
    book.save(stream)
    return stream.getvalue()


def with_alternative(form: bytes, lot: str, price: float, total: float) -> bytes:
    """Form with one alternative for a lot, of the losses 0.05 and 1.0 kW."""
    book = openpyxl.load_workbook(BytesIO(form))
    page = book["Alternatives"]
    top, columns = headings(page)
    values = {"Lot": lot, "Alternative": "amorphous core", "Unit price": price, "Total price": total}
    values |= {"No-load loss [kW]": 0.05, "Load loss [kW]": 1.0, "Total loss [kW]": 1.05}
    for heading, value in values.items():
        page.cell(top + 1, columns[heading]).value = value
    stream = BytesIO()
    book.save(stream)
    return stream.getvalue()


def _answered(page: Any, whole_bid: Mapping[str, Any]) -> Iterator[tuple[Any, Any]]:
    cells = {row[0].value: row[1] for row in page.iter_rows(max_col=2)}
    for label, value in whole_bid.items():
        yield cells[label], value


def answers(bidder: str, currency: str | None, form: bytes) -> dict[str, Any]:
    """Answers on the whole bid that make it complete; no currency where the form gives it."""
    page = openpyxl.load_workbook(BytesIO(form))["Bid"]
    asked = [row[0].value for row in page.iter_rows(max_col=2) if row[0].value and not row[1].protection.locked]
    declared = {label: "yes" for label in asked if label.endswith(".")}
    own = {"Bidder": bidder} | ({} if currency is None else {"Currency": currency})
    return own | _WHOLE_BID | declared


def demo_figures() -> dict[tuple[str, str], dict[str, str]]:
    """Stated values of the demo by bidder and lot, from the script that writes its bids."""
    spec = importlib.util.spec_from_file_location("make_sample_bids_for_forms", SAMPLE_BIDS / "make_sample_bids.py")
    assert spec is not None
    assert spec.loader is not None
    script = importlib.util.module_from_spec(spec)
    import sys

    sys.modules[spec.name] = script  # its dataclasses look their module up
    spec.loader.exec_module(script)
    figures: dict[tuple[str, str], dict[str, str]] = script.figures()
    return figures


def demo_answers(form: bytes) -> dict[str, bytes]:
    """The demo's bids as filled forms, by bidder: what the bidders state, with totals that add up.

    Cedarfell's own total losses are kept, so that its slip in lot 3 stands in the form as well.
    """
    figures = demo_figures()
    bidders = dict.fromkeys(bidder for bidder, _ in figures)
    return {
        bidder: filled(
            form,
            answers(bidder, "FCU" if bidder == "Firthwane" else "NCU", form),
            {lot: _row(values) for (who, lot), values in figures.items() if who == bidder},
        )
        for bidder in bidders
    }


def _row(values: Mapping[str, str]) -> dict[str, float]:
    row = {heading: float(values[name]) for name, heading in _BY_NAME.items() if values[name]}
    row["Total price"] = row["Unit price"] * float(values["quantity"])
    if values["total"]:
        row["Total loss [kW]"] = float(values["total"])
    elif values["load"]:
        row["Total loss [kW]"] = round(row["No-load loss [kW]"] + row["Load loss [kW]"], 6)
    return row
