"""Builders of records: valid by default, each test changes one thing. All figures are invented."""

from __future__ import annotations

from decimal import Decimal
from typing import Any

from lossworth.findings import Place
from lossworth.money import Rounding, RoundingMode
from lossworth.records.bid import Offer
from lossworth.records.quantity import Entry, Quantity
from lossworth.records.tender import (
    AnnouncedRates,
    BidFileRules,
    Derivation,
    Economics,
    Exchange,
    Identity,
    LoadingCondition,
    Lot,
    RoundingPoint,
    Rules,
    Tender,
    Timing,
)

CENT = Rounding(Decimal("0.01"), RoundingMode.HALF_AWAY_FROM_ZERO)


def place(line: int = 1, key: str | None = None) -> Place:
    """A place in a tender file."""
    return Place("tender.toml", line=line, key=key)


def quantity(value: str, unit: str = "1", stated: str | None = None) -> Quantity:
    """A stated number."""
    stated = value if stated is None else stated
    return Quantity(value=Decimal(value), stated=Decimal(stated), unit=unit, text=stated, place=place())


def entry(value: str) -> Entry:
    """A stated text."""
    return Entry(value=value, place=place())


def rates(no_load: str = "11000", load: str = "660", auxiliary: str | None = None, per: str = "kW") -> AnnouncedRates:
    """Announced rates."""
    return AnnouncedRates(
        no_load=quantity(no_load),
        load=quantity(load),
        auxiliary=None if auxiliary is None else quantity(auxiliary),
        per=per,  # type: ignore[arg-type]
        place=place(),
    )


def lot(id: str = "1", **changes: Any) -> Lot:
    """A lot of 10 units of 100 kVA with announced rates and without limits."""
    fields: dict[str, Any] = {
        "id": id,
        "description": entry("100 kVA"),
        "rated_power_kva": quantity("100", "kVA"),
        "quantity": quantity("10"),
        "cooling": entry("ONAN"),
        "place": place(),
    }
    if "derivation" not in changes:
        fields["rates"] = rates()
    return Lot(**(fields | changes))


def economics(**changes: Any) -> Economics:
    """Economics of the demonstration: 0.085 per kWh, 55 per kW and year, 6 percent, 30 years."""
    fields: dict[str, Any] = {
        "energy_price_per_kwh": quantity("0.085"),
        "demand_charge_per_kw_year": quantity("55"),
        "discount_rate_percent": quantity("6"),
        "evaluation_period_years": quantity("30"),
        "timing": Timing.END_OF_YEAR,
        "place": place(),
    }
    return Economics(**(fields | changes))


def loading(**changes: Any) -> LoadingCondition:
    """Loading condition of lot 3 of the demonstration."""
    fields: dict[str, Any] = {
        "load_factor": quantity("0.55"),
        "loss_factor_coefficient": quantity("0.15"),
        "peak_load_pu": quantity("0.65"),
        "peak_load_growth_percent": quantity("1"),
        "peak_load_cap_pu": quantity("1"),
        "peak_responsibility_factor": quantity("0.9"),
        "place": place(),
    }
    return LoadingCondition(**(fields | changes))


def derivation(rounding: Rounding | None = CENT) -> Derivation:
    """Derivation by the economics "board" and the loading condition "town"."""
    return Derivation(economics=entry("board"), loading=entry("town"), rounding=rounding, place=place())


def exchange(**per_unit: str) -> Exchange:
    """Exchange rates by currency code."""
    import datetime

    return Exchange(
        source=entry("invented bulletin"),
        kind=entry("mid"),
        date=datetime.date(2026, 9, 15),
        evidence=entry("on file"),
        rates={code: quantity(rate) for code, rate in per_unit.items()},
    )


def tender(*lots: Lot, **changes: Any) -> Tender:
    """A tender in NCU that rounds each cost part per unit to a cent."""
    fields: dict[str, Any] = {
        "format_version": 1,
        "identity": Identity(
            reference=entry("T-1"), title=entry("Invented"), buyer=entry("Invented Board"), currency=entry("NCU")
        ),
        "rules": Rules(rounding=CENT, rounding_applies_to=RoundingPoint.PART_PER_UNIT, place=place()),
        "bid_files": BidFileRules(),
        "economics": {"board": economics()},
        "loading": {"town": loading()},
        "lots": lots or (lot(),),
    }
    return Tender(**(fields | changes))


def offer(bidder: str = "Alder", lot: str = "1", **changes: Any) -> Offer:
    """An offer: 4,000 NCU, 0.120 kW no-load loss, 1.200 kW load loss."""
    fields: dict[str, Any] = {
        "bidder": entry(bidder),
        "lot": entry(lot),
        "currency": entry("NCU"),
        "unit_price": quantity("4000", "NCU"),
        "no_load_loss_kw": quantity("0.120", "kW"),
        "load_loss_kw": quantity("1.200", "kW"),
        "place": Place("bids/bids.csv", line=2),
        "columns": {},
    }
    return Offer(**(fields | changes))


def priced(bidder: str, price: str, no_load: str, load: str, lot: str = "1", **changes: Any) -> Offer:
    """An offer by its three figures: price, no-load loss and load loss in kW."""
    return offer(
        bidder,
        lot,
        unit_price=quantity(price, "NCU"),
        no_load_loss_kw=quantity(no_load, "kW"),
        load_loss_kw=quantity(load, "kW"),
        **changes,
    )
