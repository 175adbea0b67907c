"""Schedules of one lot for tests of apparent errors: ordinary offers, of which a test changes one. Invented figures."""

from __future__ import annotations

from collections.abc import Mapping
from decimal import Decimal
from typing import Any

from lossworth.evaluation.clerical_errors import find_clerical_errors
from lossworth.evaluation.clerical_errors_suspicion import Suspicion
from lossworth.findings import Place
from lossworth.records.bid import Offer
from lossworth.records.commercial import OfferTerms
from lossworth.records.quantity import Quantity
from lossworth.records.tender import Lot, Tender

from . import records

#: Other bidders of a lot of 1000 kVA: price, no-load loss, load loss, impedance.
RIVALS = {
    "Birch": ("21900", "0.660", "7.30", "6.0"),
    "Cedar": ("21500", "0.650", "7.45", "5.9"),
    "Elder": ("20950", "0.690", "7.59", "6.0"),
    "Gorse": ("22300", "0.610", "7.25", "6.1"),
}
ORDINARY = ("21000", "0.640", "7.40", "6.0")
#: Fields of an offer by the short names that tests use.
SHORT = {
    "no_load": ("no_load_loss_kw", "kW"),
    "load": ("load_loss_kw", "kW"),
    "auxiliary": ("auxiliary_loss_kw", "kW"),
    "total": ("total_loss_kw", "kW"),
    "impedance": ("impedance_percent", "%"),
    "resistive": ("resistive_loss_kw", "kW"),
    "stray": ("stray_loss_kw", "kW"),
    "temperature": ("reference_temperature_c", "°C"),
    "rating": ("load_loss_rating_kva", "kVA"),
    "price": ("unit_price", "NCU"),
    "efficiency": ("declared_efficiency_percent", "%"),
    "total_price": ("total_price", "NCU"),
}
_TERMS = ("efficiency", "total_price")


def cell(bidder: str, field: str, value: str, unit: str, stated: str | None = None) -> Quantity:
    """A figure in a bidder's own workbook, in a cell that its field tells."""
    stated = value if stated is None else stated
    place = Place(f"bids/{bidder.lower()}.xlsx", sheet="Offers", cell=f"{'ABCDEFGHIJKL'[list(SHORT).index(field)]}4")
    return Quantity(value=Decimal(value), stated=Decimal(stated), unit=unit, text=stated, place=place)


def schedule(bidder: str = "Alder", lot: str = "1", **figures: Any) -> Offer:
    """An offer with ordinary figures of 1000 kVA; None for none, a tuple for value, unit and number stated."""
    values: dict[str, Any] = dict(zip(("price", "no_load", "load", "impedance"), ORDINARY, strict=True)) | figures
    extra = {name: values.pop(name) for name in ("alternative", "cooling", "currency") if name in values}
    fields: dict[str, Quantity | None] = {}
    terms: dict[str, Quantity | None] = {}
    for short, given in values.items():
        name, unit = SHORT[short]
        value, shown_unit, stated = given if isinstance(given, tuple) else (given, unit, None)
        quantity = None if value is None else cell(bidder, short, value, shown_unit, stated)
        (terms if short in _TERMS else fields)[name] = quantity
    texts = {name: records.entry(value) for name, value in extra.items()}
    return records.offer(
        bidder,
        lot,
        place=Place(f"bids/{bidder.lower()}.xlsx", sheet="Offers", cell="A4"),
        terms=OfferTerms(**terms),  # type: ignore[arg-type]
        **fields,
        **texts,
    )


def rivals(lot: str = "1", figures: Mapping[str, tuple[str, ...]] = RIVALS) -> list[Offer]:
    """Ordinary offers of other bidders."""
    names = ("price", "no_load", "load", "impedance")
    return [schedule(bidder, lot, **dict(zip(names, each, strict=True))) for bidder, each in figures.items()]


def plain_lot(**changes: Any) -> Lot:
    """A lot of 1000 kVA, which the bands of plausible losses cover."""
    fields: dict[str, Any] = {
        "id": "1",
        "rated_power_kva": records.quantity("1000", "kVA"),
        "description": records.entry("1000 kVA ground-mounted, 11/0.4 kV"),
    }
    return records.lot(**(fields | changes))


def power_lot(**changes: Any) -> Lot:
    """A lot of 20/31.5 MVA with an impedance, which no band covers."""
    fields: dict[str, Any] = {
        "rated_power_kva": records.quantity("31500", "kVA"),
        "description": records.entry("20/31.5 MVA, 33/11 kV"),
        "cooling": records.entry("ONAN/ONAF"),
        "impedance_percent": records.quantity("12.5", "%"),
        "impedance_tolerance_percentage_points": records.quantity("0.5"),
    }
    return plain_lot(**(fields | changes))


#: Other bidders of the power lot.
POWER_RIVALS = {
    "Birch": ("655000", "15.2", "134", "12.4"),
    "Cedar": ("702000", "12.6", "128", "12.8"),
    "Elder": ("668000", "14.4", "141", "12.5"),
    "Gorse": ("685000", "13.2", "132", "12.5"),
}


def suspected(*offers: Offer, lot: Lot | None = None, tender: Tender | None = None) -> tuple[Suspicion, ...]:
    """Apparent errors of these offers."""
    return find_clerical_errors(tender or records.tender(lot or plain_lot()), offers)


def suspected_of(offer: Offer, *others: Offer, lot: Lot | None = None) -> tuple[Suspicion, ...]:
    """Apparent errors of one offer beside others."""
    return tuple(each for each in suspected(offer, *others, lot=lot) if each.offer == offer.name)


def kinds(suspicions: tuple[Suspicion, ...]) -> list[str]:
    """Kinds of their findings."""
    return [each.finding.kind for each in suspicions]
