"""Builders of records: valid by default, each test changes one thing. All figures are invented."""

from __future__ import annotations

from collections.abc import Sequence
from decimal import Decimal
from typing import Any

from lossworth.findings import Place
from lossworth.money import Rounding, RoundingMode
from lossworth.records.bid import Offer
from lossworth.records.profile import PriceBlock, PriceSeries, Profile, TimeGrid
from lossworth.records.quantity import Entry, Quantity
from lossworth.records.tender import (
    AnnouncedRates,
    BidFileRules,
    CoolingStage,
    Derivation,
    Economics,
    Exchange,
    Identity,
    LoadingCondition,
    LossBasis,
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


def grid(steps: int = 8760, **changes: Any) -> TimeGrid:
    """A year of equal steps, with months, day types and hours of a year that begins on a Monday."""
    hours = [8760 / steps] * steps
    starts = [(step * 8760 / steps) % 24 for step in range(steps)]
    days = [int(step * 8760 / steps // 24) for step in range(steps)]
    types = ["sunday" if day % 7 == 6 else "saturday" if day % 7 == 5 else "workday" for day in days]
    fields: dict[str, Any] = {
        "kind": "year",
        "step_hours": 8760 / steps,
        "hours": tuple(hours),
        "day_types": tuple(types),
        "months": tuple(min(12, day // 31 + 1) for day in days),
        "starts": tuple(starts),
    }
    return TimeGrid(**(fields | changes))


def profile(loads: Sequence[float], unit: str = "pu", **changes: Any) -> Profile:
    """A load profile over a year."""
    fields: dict[str, Any] = {
        "file": "profiles/feeder.csv",
        "unit": unit,
        "loads": tuple(float(load) for load in loads),
        "grid": grid(len(loads)),
        "sha256": "0" * 64,
        "place": place(),
    }
    return Profile(**(fields | changes))


def series(prices: Sequence[float], **changes: Any) -> PriceSeries:
    """An energy price over a year."""
    fields: dict[str, Any] = {
        "file": "profiles/prices.csv",
        "prices_per_kwh": tuple(float(price) for price in prices),
        "grid": grid(len(prices)),
        "sha256": "0" * 64,
        "place": place(),
    }
    return PriceSeries(**(fields | changes))


def block(name: str, price: str, **conditions: Any) -> PriceBlock:
    """A block of a tariff."""
    return PriceBlock(name=entry(name), price_per_kwh=quantity(price), place=place(), **conditions)


def stage(above: str, share: str = "1") -> CoolingStage:
    """A cooling stage."""
    return CoolingStage(above_load_pu=quantity(above), share_of_auxiliary_loss=quantity(share), place=place())


def loss_basis(**changes: Any) -> LossBasis:
    """A basis that wants 75 °C, copper, and allows every conversion."""
    fields: dict[str, Any] = {
        "reference_temperature_c": quantity("75", "°C"),
        "conductor": "copper",
        "convert": ("rating", "temperature", "total loss"),
        "place": place(),
    }
    return LossBasis(**(fields | changes))
