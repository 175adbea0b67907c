"""Tenders with commercial terms and rules, as records. All figures are invented."""

from __future__ import annotations

import datetime
from typing import Any

from lossworth.records.commercial import (
    DeliveryLevel,
    Item,
    Payment,
    PaymentTerms,
    Preference,
    RegulationLimit,
    SiteCost,
    Taxes,
)
from lossworth.records.rules import AnnouncedRules
from lossworth.records.tender import LossBasis, Lot, RoundingPoint, Rules, Tender
from support import records as make

__all__ = ["full_lot", "full_tender", "ruled"]

quantity, entry, place = make.quantity, make.entry, make.place


def ruled(**settings: Any) -> Rules:
    """Rules of a tender: rounding to a cent, and the settings given."""
    announced = AnnouncedRules(**settings)
    return Rules(
        rounding=make.CENT, rounding_applies_to=RoundingPoint.PART_PER_UNIT, announced=announced, place=place()
    )


def full_lot(**changes: Any) -> Lot:
    """A lot with every limit, adder and item."""
    fields: dict[str, Any] = {
        "maximum_no_load_loss_kw": quantity("0.130", "kW"),
        "maximum_load_loss_kw": quantity("1.250", "kW"),
        "impedance_percent": quantity("4", "%"),
        "impedance_tolerance_percentage_points": quantity("0.4"),
        "latest_delivery_weeks": quantity("36"),
        "delivery_without_adder_weeks": quantity("30"),
        "delivery_adder_percent_per_week": quantity("0.5"),
        "maximum_sound_level_db": quantity("41"),
        "accepted_liquids": ("mineral oil", "natural ester"),
        "pcb_free_required": True,
        "items": (Item(name=entry("spare bushing set"), quantity=quantity("4"), counts=True, place=place()),),
        "site_costs": (
            SiteCost(
                name=entry("fire-rated vault"),
                amount_per_unit=quantity("1500"),
                liquids=("mineral oil",),
                place=place(),
            ),
        ),
        "regulation": RegulationLimit(
            regulation="EU 548/2014",
            equipment=entry("liquid medium"),
            tier=2,
            date=datetime.date(2026, 9, 15),
            place=place(),
        ),
        "loss_basis": LossBasis(
            reference_temperature_c=quantity("75"),
            load_loss_rating_kva=quantity("100", "kVA"),
            conductor="copper",
            convert=("rating", "temperature"),
            place=place(),
        ),
        "estimated_unit_price": quantity("4321"),
        "study": make.derivation(),
    }
    return make.lot(**({"id": "1"} | fields | changes))


def full_tender(*lots: Lot, **changes: Any) -> Tender:
    """A tender that announces everything: a profile of rules, adders, taxes, payments, a preference, an award."""
    fields: dict[str, Any] = {
        "rules": ruled(profile=entry("corrected, firm"), preference="margin added to other prices"),
        "delivered_point": entry("DDP site"),
        "delivery_levels": (
            DeliveryLevel(term="EXW", percent_of_price=quantity("4"), amount_per_unit=quantity("120"), place=place()),
            DeliveryLevel(term="FCA", amount_per_unit=quantity("90"), place=place()),
        ),
        "taxes": Taxes(rate_percent=quantity("10"), place=place()),
        "payment_terms": PaymentTerms(
            interest_rate_percent=quantity("8"),
            payments=(
                Payment(share=quantity("0.3"), weeks_after_order=quantity("0")),
                Payment(share=quantity("0.7"), weeks_after_order=quantity("36")),
            ),
            place=place(),
        ),
        "preference": Preference(group=entry("home"), margin_percent=quantity("7.5"), place=place()),
        "planned_award": datetime.date(2026, 11, 30),
        "exchange": make.exchange(FCU="1.25"),
    }
    default = (full_lot(), make.lot("2", derivation=make.derivation(), cooling=entry("ONAN/ONAF")))
    return make.tender(*(lots or default), **(fields | changes))
