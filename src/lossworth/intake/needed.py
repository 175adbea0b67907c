"""Which stated values the evaluation of a lot needs: others are only noted where they cannot be read."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from types import MappingProxyType

from ..records.bid_columns import ITEM_HEADING
from ..records.rules import AnnouncedRules
from ..records.tender import CoolingValuation, Lot, Tender
from .columns import PAYMENT
from .header_text import folded

__all__ = ["is_needed"]


def is_needed(field: str, lot: Lot | None, tender: Tender | None, rules: AnnouncedRules) -> bool:
    """Whether the evaluation of a lot needs a value.

    Parameters
    ----------
    field : str
        Field of an offer or of its terms, or of the column of an item or a payment.
    lot : Lot or None
        The lot; None where it is not known, and then every value but a few may be needed.
    tender : Tender or None
        The tender, for its loading conditions and adders.
    rules : AnnouncedRules
        Its settled rules.

    Returns
    -------
    bool
        False for a value that no cost, limit or check of the lot uses, whatever it may be; and for a term on which the
        tender announces no rule.
    """
    if field in _NEVER:
        return False
    if field in _BY_RULES:
        return _BY_RULES[field](rules)
    if field.startswith(PAYMENT):
        return rules.payment_terms == "discount to a common date"
    if field == "delivery_term":
        return tender is None or tender.delivered_point is not None or bool(tender.delivery_levels)
    if lot is None:
        return True
    if field == "auxiliary_loss_kw":
        return _values_auxiliary_loss(lot, tender)
    if field.startswith(ITEM_HEADING):
        name = folded(field.removeprefix(ITEM_HEADING))
        return any(item.counts and folded(item.name.value) == name for item in lot.items)
    return _BY_LOT[field](lot) if field in _BY_LOT else True


#: Kept beside what is evaluated; the end of validity raises an alarm and moves nothing.
_NEVER = frozenset({"total_loss_kw", "valid_until", "deviations"})

#: Terms that count by a rule of the tender.
_BY_RULES: Mapping[str, Callable[[AnnouncedRules], bool]] = MappingProxyType(
    {
        "total_price": lambda rules: rules.arithmetic_errors in ("correct", "reject"),
        "unconditional_discount_percent": lambda rules: rules.unconditional_discounts == "deduct",
        "prompt_payment_discount_percent": lambda rules: rules.prompt_payment_discounts == "deduct",
        "tax_included": lambda rules: rules.taxes is not None,
        "price_basis": lambda rules: rules.price_variation == "reject variable prices",
        "claimed_tolerance_percent": lambda rules: rules.loss_tolerance is not None,
        "origin": lambda rules: rules.preference == "margin added to other prices",
    }
)


def _converts_temperature(lot: Lot) -> bool:
    return lot.loss_basis is not None and "temperature" in lot.loss_basis.convert


def _wants_temperature(lot: Lot) -> bool:
    return lot.loss_basis is not None and lot.loss_basis.reference_temperature_c is not None


def _through_a_and_b(lot: Lot) -> bool:
    return lot.cooling_valuation is CoolingValuation.THROUGH_A_AND_B


def _limits_delivery(lot: Lot) -> bool:
    return lot.latest_delivery_weeks is not None or lot.delivery_without_adder_weeks is not None


def _asks_liquid(lot: Lot) -> bool:
    return bool(lot.accepted_liquids) or any(cost.liquids for cost in lot.site_costs)


def _asks_sound_level(lot: Lot) -> bool:
    limited = lot.maximum_sound_level_db is not None
    return limited or any(cost.sound_above_db is not None for cost in lot.site_costs)


def _limits_efficiency(lot: Lot) -> bool:
    return lot.regulation is not None and lot.regulation.regulation.startswith("US")


#: Values that are needed only where the tender asks for what they say.
_BY_LOT: Mapping[str, Callable[[Lot], bool]] = MappingProxyType(
    {
        "impedance_percent": lambda lot: lot.impedance_percent is not None,
        "delivery_weeks": _limits_delivery,
        "reference_temperature_c": _wants_temperature,
        "resistive_loss_kw": _converts_temperature,
        "stray_loss_kw": _converts_temperature,
        "cooling_power_no_load_kw": _through_a_and_b,
        "cooling_power_rated_kw": _through_a_and_b,
        "insulating_liquid": _asks_liquid,
        "pcb_free": lambda lot: lot.pcb_free_required,
        "sound_level_db": _asks_sound_level,
        "declared_efficiency_percent": _limits_efficiency,
    }
)


def _values_auxiliary_loss(lot: Lot, tender: Tender | None) -> bool:
    if lot.cooling_valuation is CoolingValuation.THROUGH_A_AND_B:
        return False
    if lot.rates is not None:
        return lot.rates.auxiliary is not None
    if lot.derivation is None or tender is None:
        return False
    loading = tender.loading.get(lot.derivation.loading.value)
    return loading is not None and (loading.cooling_hours is not None or bool(loading.cooling_stages))
