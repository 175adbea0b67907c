"""Total owning cost of one offer: evaluated price and capitalized losses, rounded where the tender says."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from decimal import Decimal

from ..money import Rounding
from ..records.bid import Offer, is_naturally_cooled
from ..records.tender import CoolingValuation, Lot, RoundingPoint, Rules
from ..trail import Figure, Rule, difference, product, rounded, total
from .identities import figure_id
from .loss_basis import OfferOnBasis, loss_in_kw
from .pricing import unit_price_in_evaluation_currency
from .result import LotRates, OwningCost

__all__ = ["CostBasis", "auxiliary_loss", "cooling_powers", "owning_cost"]

_PARTS = ("evaluated_price", "no_load_cost", "load_cost", "auxiliary_cost")
_LABELS = {
    "evaluated_price": "evaluated price",
    "no_load_cost": "capitalized no-load loss",
    "load_cost": "capitalized load loss",
    "auxiliary_cost": "capitalized auxiliary loss",
}


@dataclass(frozen=True, slots=True)
class CostBasis:
    """What all offers of a lot share: currency, rates, exchange rates, quantity and rounding."""

    currency: str
    lot: Lot
    rates: LotRates
    exchange_rates: Mapping[str, Figure]
    quantity: Figure
    rules: Rules


def auxiliary_loss(offer: Offer, lot: Lot) -> Figure | None:
    """Auxiliary loss of one unit: as stated, or zero by rule for a unit without fans and pumps.

    Parameters
    ----------
    offer : Offer
        The offer; its own cooling designation, where stated, comes before the lot's.
    lot : Lot
        The lot.

    Returns
    -------
    Figure or None
        None where a unit with fans or pumps states no auxiliary loss. [kW]
    """
    if offer.auxiliary_loss_kw is not None:
        return loss_in_kw(offer, "auxiliary_loss_kw", "auxiliary loss", offer.auxiliary_loss_kw)
    return _zero_by_rule(offer, lot, "auxiliary_loss_kw", "auxiliary loss")


def cooling_powers(offer: Offer, lot: Lot) -> tuple[Figure | None, Figure | None]:
    """Cooling power at no load and at rated load, for the valuation through A and B.

    Parameters
    ----------
    offer : Offer
        The offer.
    lot : Lot
        The lot, for its cooling designation.

    Returns
    -------
    at_no_load, at_rated_load : Figure or None
        Pc0 and Pcs; None where a unit with fans or pumps does not state them. [kW]
    """
    names = (
        ("cooling_power_no_load_kw", "cooling power at no load"),
        ("cooling_power_rated_kw", "cooling power at rated load"),
    )
    at_no_load, at_rated = (
        loss_in_kw(offer, name, label, getattr(offer, name)) or _zero_by_rule(offer, lot, name, label)
        for name, label in names
    )
    return at_no_load, at_rated


def _zero_by_rule(offer: Offer, lot: Lot, name: str, label: str) -> Figure | None:
    cooling = offer.cooling or lot.cooling
    if not is_naturally_cooled(cooling.value):
        return None
    identity = figure_id(f"lot {offer.lot}", offer.bidder.value, name)
    rule = Rule(f"{cooling.value} needs no fans or pumps: a blank {label} is zero ({cooling.place})")
    return Figure(identity, label, Decimal(0), "kW", rule)


def owning_cost(on_basis: OfferOnBasis, basis: CostBasis) -> tuple[OwningCost, OwningCost]:
    """Total owning cost of one unit and of the lot.

    Parameters
    ----------
    on_basis : OfferOnBasis
        One offer with its losses on the tender's basis.
    basis : CostBasis
        What all offers of the lot share.

    Returns
    -------
    per_unit, lot : OwningCost
        The amounts, with None for what cannot be computed; a total only where every part is there. [currency]

    Notes
    -----
    TOC = evaluated price + A P0 + B Pk + C Paux. Where the tender rounds each cost part per unit, the lot is quantity
    times unit; where it rounds each part per lot, the parts of one unit stay exact. Where cooling is valued through
    A and B: A (P0 + Pc0) + B (Pk + Pcs - Pc0) after IEC TS 60076-20 (from memory), and C does not act.

    References
    ----------
    .. [1] REA Bulletin 65-2 (1978) / RUS Bulletin 1724E-301 (1997), the form of the evaluation; A and B as in
       IEC TS 60076-20 and IEEE C57.120 (from memory).
    """
    offer = on_basis.offer
    factors = _factors(on_basis, basis)
    per_unit_rule = basis.rules.rounding_applies_to is RoundingPoint.PART_PER_UNIT
    unit_rounding = basis.rules.rounding if per_unit_rule else None
    lot_rounding = None if per_unit_rule else basis.rules.rounding
    unit: dict[str, Figure | None] = {}
    lot: dict[str, Figure | None] = {}
    for part in _PARTS:
        unit[part] = _unit_part(offer, part, factors[part], basis, unit_rounding)
        lot[part] = _lot_part(offer, part, unit[part], basis, lot_rounding)
    counted = _PARTS if basis.rates.auxiliary is not None else _PARTS[:3]
    unit["total_owning_cost"] = _sum(offer, "per unit", unit, counted, basis)
    if per_unit_rule:
        lot["total_owning_cost"] = _lot_part(offer, "total_owning_cost", unit["total_owning_cost"], basis, None)
    else:
        lot["total_owning_cost"] = _sum(offer, "lot", lot, counted, basis)
    return OwningCost(**unit), OwningCost(**lot)


def _factors(on_basis: OfferOnBasis, basis: CostBasis) -> dict[str, tuple[Figure, ...] | None]:
    offer, rates = on_basis.offer, basis.rates
    no_load, load = on_basis.no_load_loss, on_basis.load_loss
    if basis.lot.cooling_valuation is CoolingValuation.THROUGH_A_AND_B:
        no_load, load = _with_cooling(on_basis, basis.lot)

    def capitalized(rate: Figure | None, loss: Figure | None) -> tuple[Figure, ...] | None:
        return None if rate is None or loss is None else (rate, loss)

    return {
        "evaluated_price": unit_price_in_evaluation_currency(offer, basis.currency, basis.exchange_rates),
        "no_load_cost": capitalized(rates.no_load, no_load),
        "load_cost": capitalized(rates.load, load),
        "auxiliary_cost": capitalized(rates.auxiliary, auxiliary_loss(offer, basis.lot)),
    }


def _with_cooling(on_basis: OfferOnBasis, lot: Lot) -> tuple[Figure | None, Figure | None]:
    """No-load and load loss with the cooling power of each stage."""
    offer, no_load, load = on_basis.offer, on_basis.no_load_loss, on_basis.load_loss
    at_no_load, at_rated = cooling_powers(offer, lot)
    if no_load is None or load is None or at_no_load is None or at_rated is None:
        return None, None

    def name(part: str) -> str:
        return figure_id(f"lot {offer.lot}", offer.bidder.value, part)

    first = total(name("no-load loss with cooling"), "no-load loss with cooling, P0 + Pc0", "kW", no_load, at_no_load)
    more = difference(name("cooling power above no load"), "cooling power Pcs - Pc0", "kW", at_rated, at_no_load)
    second = total(name("load loss with cooling"), "load loss with cooling, Pk + Pcs - Pc0", "kW", load, more)
    return first, second


def _unit_part(
    offer: Offer, part: str, factors: tuple[Figure, ...] | None, basis: CostBasis, rounding: Rounding | None
) -> Figure | None:
    identity = figure_id(f"lot {offer.lot}", offer.bidder.value, "per unit", part)
    label = f"{_LABELS[part]} per unit"
    if part == "auxiliary_cost" and basis.rates.auxiliary is None:
        zero = basis.rules.rounding.apply(Decimal(0))
        return Figure(identity, label, zero, basis.currency, Rule("the tender values no auxiliary loss in this lot"))
    if factors is None:
        return None
    if len(factors) == 1 and rounding is not None:
        return rounded(identity, label, factors[0], rounding)
    return product(identity, label, basis.currency, *factors, rounding=rounding)


def _lot_part(
    offer: Offer, part: str, per_unit: Figure | None, basis: CostBasis, rounding: Rounding | None
) -> Figure | None:
    if per_unit is None:
        return None
    identity = figure_id(f"lot {offer.lot}", offer.bidder.value, "lot", part)
    label = f"{_LABELS.get(part, 'total owning cost')} of the lot"
    return product(identity, label, basis.currency, basis.quantity, per_unit, rounding=rounding)


def _sum(
    offer: Offer, scope: str, parts: Mapping[str, Figure | None], counted: tuple[str, ...], basis: CostBasis
) -> Figure | None:
    present = [figure for name in counted if (figure := parts[name]) is not None]
    if len(present) < len(counted):
        return None
    identity = figure_id(f"lot {offer.lot}", offer.bidder.value, scope, "total_owning_cost")
    label = f"total owning cost {'per unit' if scope == 'per unit' else 'of the lot'}"
    return total(identity, label, basis.currency, *present)
