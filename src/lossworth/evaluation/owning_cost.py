"""Total owning cost of one offer: evaluated price and capitalized losses, rounded where the tender says."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from decimal import Decimal

from ..money import Rounding
from ..records.bid import Offer, is_naturally_cooled
from ..records.quantity import Quantity
from ..records.tender import Lot, RoundingPoint, Rules
from ..trail import Figure, Rule, constant, product, quotient, read, rounded, total
from ..units import LOSS_UNITS
from .identities import figure_id
from .pricing import unit_price_in_evaluation_currency
from .result import LotRates, OwningCost

__all__ = ["CostBasis", "auxiliary_loss", "loss_in_kw", "owning_cost"]

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


def loss_in_kw(offer: Offer, name: str, label: str, loss: Quantity | None) -> Figure | None:
    """Guaranteed loss of one unit in kW, with the conversion shown where the bidder states watts.

    Parameters
    ----------
    offer : Offer
        The offer, for the identity.
    name, label : str
        Identity and name of the loss.
    loss : Quantity or None
        As read.

    Returns
    -------
    Figure or None
        None where the loss is not stated. [kW]
    """
    if loss is None:
        return None
    identity = figure_id(f"lot {offer.lot}", offer.bidder.value, name)
    if loss.unit == "kW":
        return read(identity, label, loss.value, "kW", loss.place)
    stated = read(f"{identity}/as read", f"{label} as read", loss.stated, loss.unit, loss.place)
    size = LOSS_UNITS[loss.unit]
    if size > 1:
        name = f"kW in 1 {loss.unit}"
        return product(
            identity, label, "kW", stated, constant(name, name, size, f"kW/{loss.unit}", f"1 {loss.unit} = {size} kW")
        )
    pieces = Decimal(f"{1 / size:f}")
    name = f"{loss.unit} in 1 kW"
    return quotient(
        identity, label, "kW", stated, constant(name, name, pieces, f"{loss.unit}/kW", f"1 kW = {pieces} {loss.unit}")
    )


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
    cooling = offer.cooling or lot.cooling
    if not is_naturally_cooled(cooling.value):
        return None
    identity = figure_id(f"lot {offer.lot}", offer.bidder.value, "auxiliary_loss_kw")
    rule = Rule(f"{cooling.value} needs no fans or pumps: a blank auxiliary loss is zero ({cooling.place})")
    return Figure(identity, "auxiliary loss", Decimal(0), "kW", rule)


def owning_cost(offer: Offer, basis: CostBasis) -> tuple[OwningCost, OwningCost]:
    """Total owning cost of one unit and of the lot.

    Parameters
    ----------
    offer : Offer
        One offer.
    basis : CostBasis
        What all offers of the lot share.

    Returns
    -------
    per_unit, lot : OwningCost
        The amounts, with None for what cannot be computed; a total only where every part is there. [currency]

    Notes
    -----
    TOC = evaluated price + A P0 + B Pk + C Paux. Where the tender rounds each cost part per unit, the lot is quantity
    times unit; where it rounds each part per lot, the parts of one unit stay exact.

    References
    ----------
    .. [1] REA Bulletin 65-2 (1978) / RUS Bulletin 1724E-301 (1997), the form of the evaluation; A and B as in
       IEC TS 60076-20 and IEEE C57.120 (from memory).
    """
    factors = _factors(offer, basis)
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


def _factors(offer: Offer, basis: CostBasis) -> dict[str, tuple[Figure, ...] | None]:
    rates = basis.rates

    def capitalized(rate: Figure | None, loss: Figure | None) -> tuple[Figure, ...] | None:
        return None if rate is None or loss is None else (rate, loss)

    return {
        "evaluated_price": unit_price_in_evaluation_currency(offer, basis.currency, basis.exchange_rates),
        "no_load_cost": capitalized(
            rates.no_load, loss_in_kw(offer, "no_load_loss_kw", "no-load loss", offer.no_load_loss_kw)
        ),
        "load_cost": capitalized(rates.load, loss_in_kw(offer, "load_loss_kw", "load loss", offer.load_loss_kw)),
        "auxiliary_cost": capitalized(rates.auxiliary, auxiliary_loss(offer, basis.lot)),
    }


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
