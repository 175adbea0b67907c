"""Columns of a bid for the basis of its losses and for the power of its cooling."""

from __future__ import annotations

from decimal import Decimal
from pathlib import Path

import pytest

from lossworth.findings import Finding
from lossworth.records.bid import Offer
from support.tender_folders import TENDER, bids_of, told, valid_tender

BASIS = '\n[lot.loss_basis]\nreference_temperature_c = 75\nconductor = "copper"\nconvert = ["temperature"]\n'
WITH_BASIS = TENDER + BASIS
THROUGH_A_AND_B = TENDER.replace("quantity = 5\n", 'quantity = 5\ncooling_valuation = "through A and B"\n')
HEADER = "Lot,Bidder,Unit price [NCU],No-load loss [kW],Load loss [kW]"


def bids(
    folder: Path, header: str, *cells: str, tender: str = TENDER, start: str = "2,Alder,22000,0.61,7.25"
) -> tuple[tuple[Offer, ...], tuple[Finding, ...]]:
    """One offer for lot 2 in a table with more columns."""
    text = f"{HEADER},{header}\n{start},{','.join(cells)}\n"
    return bids_of(folder, "a.csv", text, valid_tender(folder, tender))


@pytest.mark.parametrize(
    ("header", "cell", "field", "value"),
    [
        ("Load loss rating [MVA]", "0.8", "load_loss_rating_kva", "800"),
        ("load_loss_rating_mva", "0.8", "load_loss_rating_kva", "800"),
        ("Rating of the load loss (KVA)", "800", "load_loss_rating_kva", "800"),
        ("Reference temperature [°C]", "75", "reference_temperature_c", "75"),
        ("Reference temperature [deg C]", "85", "reference_temperature_c", "85"),
        ("reference_temperature_c", "75", "reference_temperature_c", "75"),
        ("Resistive loss [W]", "6500", "resistive_loss_kw", "6.5"),
        ("I²R loss [kW]", "6.5", "resistive_loss_kw", "6.5"),
        ("I2R losses [kW]", "6.5", "resistive_loss_kw", "6.5"),
        ("resistive_loss_kw", "6.5", "resistive_loss_kw", "6.5"),
        ("Stray losses [kW]", "0.75", "stray_loss_kw", "0.75"),
        ("Stray loss [kW]", "0", "stray_loss_kw", "0"),
        ("Cooling power at no load (Pc0) [kW]", "0", "cooling_power_no_load_kw", "0"),
        ("Pc0 [W]", "300", "cooling_power_no_load_kw", "0.3"),
        ("Cooling power at rated load [W]", "900", "cooling_power_rated_kw", "0.9"),
        ("cooling_power_rated_w", "900", "cooling_power_rated_kw", "0.9"),
    ],
)
def test_read_bids__column(tmp_path: Path, header: str, cell: str, field: str, value: str) -> None:
    """Each column fills its field in the unit of the record, however it is headed."""
    (offer,), findings = bids(tmp_path, header, cell)
    assert told(findings) == []
    assert getattr(offer, field).value == Decimal(value)
    assert getattr(offer, field).place.column == header


@pytest.mark.parametrize(
    ("header", "kind"),
    [
        ("Load loss rating", "column-unit"),
        ("Load loss rating [kW]", "column-unit"),
        ("Reference temperature", "column-unit"),
        ("Reference temperature [K]", "column-unit"),
        ("Reference temperature [°F]", "column-unit"),
    ],
)
def test_read_bids__unit_of_a_column(tmp_path: Path, header: str, kind: str) -> None:
    """Ratings and temperatures state their unit."""
    _, (finding,) = bids(tmp_path, header, "75")
    assert finding.kind == kind


@pytest.mark.parametrize(
    ("header", "cell", "tender", "kind"),
    [
        ("Reference temperature [°C]", "hot", WITH_BASIS, "value-unreadable"),
        ("Reference temperature [°C]", "hot", TENDER, "value-not-read"),
        ("Reference temperature [°C]", "0", WITH_BASIS, "value-out-of-bounds"),
        ("Load loss rating [MVA]", "?", TENDER, "value-unreadable"),
        ("Load loss rating [MVA]", "-1", TENDER, "value-out-of-bounds"),
        ("Resistive loss [kW]", "?", WITH_BASIS, "value-unreadable"),
        ("Resistive loss [kW]", "0", WITH_BASIS, "value-out-of-bounds"),
        ("Stray loss [kW]", "?", TENDER, "value-not-read"),
        ("Stray loss [kW]", "-1", WITH_BASIS, "value-out-of-bounds"),
        ("Pc0 [kW]", "?", THROUGH_A_AND_B, "value-unreadable"),
        ("Pcs [kW]", "-1", THROUGH_A_AND_B, "value-out-of-bounds"),
        ("Pcs [kW]", "-1", TENDER, "value-not-read"),
        ("Auxiliary loss [kW]", "?", THROUGH_A_AND_B, "value-not-read"),
    ],
)
def test_read_bids__value_that_cannot_be_read(tmp_path: Path, header: str, cell: str, tender: str, kind: str) -> None:
    """A figure that cannot be read keeps an offer out where the lot needs it, and is noted elsewhere."""
    (offer,), (finding,) = bids(tmp_path, header, cell, tender=tender)
    assert (finding.kind, finding.got, finding.bidder, finding.lot) == (kind, cell, "Alder", "2")
    assert offer.columns


def test_read_bids__total_loss_in_place_of_the_load_loss(tmp_path: Path) -> None:
    """A blank load loss beside a total loss is for the evaluation to judge; beside a blank it is missing."""
    start = "2,Alder,22000,0.61,"
    (offer,), findings = bids(tmp_path, "Total loss [kW]", "7.86", start=start)
    assert (told(findings), offer.load_loss_kw) == ([], None)
    assert offer.total_loss_kw is not None
    _, (finding,) = bids(tmp_path, "Total loss [kW]", "", start=start)
    assert (finding.kind, finding.field) == ("value-missing", "load loss")


def test_read_bids__a_basis_alone_is_no_offer(tmp_path: Path) -> None:
    """A form that has rating and temperature filled in for a lot that is not offered makes no offer."""
    offers, findings = bids(
        tmp_path, "Load loss rating [MVA],Reference temperature [°C]", "0.8", "75", start="2,Alder,,,"
    )
    assert (offers, [finding.kind for finding in findings]) == ((), ["row-not-read", "no-offers"])
