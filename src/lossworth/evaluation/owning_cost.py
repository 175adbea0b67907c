"""Total owning cost of one offer: evaluated price and capitalized losses, rounded where the tender says."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from decimal import Decimal

from ..money import Rounding
from ..records.bid import Offer, is_naturally_cooled
from ..records.tender import CoolingValuation, Lot, RoundingPoint, Rules, Tender
from ..trail import Figure, Rule, difference, product, rounded, total
from .identities import offer_id
from .loss_basis import OfferOnBasis, loss_in_kw
from .loss_tolerance import tolerance_factor, with_tolerance
from .pricing import ItemsPrice, UnitPrice
from .result import LotRates, OwningCost

__all__ = ["CostBasis", "OfferPrice", "auxiliary_loss", "cooling_powers", "owning_cost"]

_PARTS = ("evaluated_price", "no_load_cost", "load_cost", "auxiliary_cost")
_LABELS = {
    "evaluated_price": "evaluated price",
    "no_load_cost": "capitalized no-load loss",
    "load_cost": "capitalized load loss",
    "auxiliary_cost": "capitalized auxiliary loss",
}


@dataclass(frozen=True, slots=True)
class CostBasis:
    """What all offers of a lot share: the tender with its rules, rates, exchange rates and quantity."""

    tender: Tender
    lot: Lot
    rates: LotRates
    exchange_rates: Mapping[str, Figure]
    quantity: Figure

    @property
    def currency(self) -> str:
        """Evaluation currency."""
        return self.tender.identity.currency.value

    @property
    def rules(self) -> Rules:
        """Rounding and announced settings."""
        return self.tender.rules


@dataclass(frozen=True, slots=True)
class OfferPrice:
    """Price of an offer, exact: of one unit, and of the further items of the lot.

    Parameters
    ----------
    unit : UnitPrice or None
        None where it is not stated or cannot be brought to the evaluation currency and the delivered point.
    items : ItemsPrice
        Empty where no item counts.
    """

    unit: UnitPrice | None
    items: ItemsPrice

    @property
    def has_margin(self) -> bool:
        """Whether a preference margin lies on it."""
        return self.items.margin is not None or (self.unit is not None and self.unit.margin is not None)


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
    identity = offer_id(offer, name)
    rule = Rule(f"{cooling.value} needs no fans or pumps: a blank {label} is zero ({cooling.place})")
    return Figure(identity, label, Decimal(0), "kW", rule)


def owning_cost(
    on_basis: OfferOnBasis, basis: CostBasis, price: OfferPrice, *, with_preference: bool = True
) -> tuple[OwningCost, OwningCost]:
    """Total owning cost of one unit and of the lot.

    Parameters
    ----------
    on_basis : OfferOnBasis
        One offer with its losses on the tender's basis.
    basis : CostBasis
        What all offers of the lot share.
    price : OfferPrice
        Its price.
    with_preference : bool
        Whether a preference margin on the price counts.

    Returns
    -------
    per_unit, lot : OwningCost
        The amounts, with None for what cannot be computed; a total only where every part is there. [currency]

    Notes
    -----
    TOC = evaluated price + A P0 + B Pk + C Paux. Where the tender rounds each cost part per unit, the lot is quantity
    times unit, and further items are one more amount of the lot, rounded once; where it rounds each part per lot, the
    parts of one unit stay exact. A price that comes from a governing total is rounded for the lot under either rule.
    Amounts per unit are without further items. Where cooling is valued through A and B:
    A (P0 + Pc0) + B (Pk + Pcs - Pc0) after IEC TS 60076-20 (from memory), and C does not act.

    References
    ----------
    .. [1] REA Bulletin 65-2 (1978) / RUS Bulletin 1724E-301 (1997), the form of the evaluation; A and B as in
       IEC TS 60076-20 and IEEE C57.120 (from memory).
    """
    return _Sums(on_basis, basis, price, "" if with_preference else " without preference").costs()


class _Sums:
    """The amounts of one offer, with or without a preference margin on its price."""

    def __init__(self, on_basis: OfferOnBasis, basis: CostBasis, price: OfferPrice, variant: str) -> None:
        self.on_basis, self.offer, self.basis, self.price = on_basis, on_basis.offer, basis, price
        self.variant, self.with_margin = variant, not variant
        self.per_unit_rule = basis.rules.rounding_applies_to is RoundingPoint.PART_PER_UNIT
        self.counted = _PARTS if basis.rates.auxiliary is not None else _PARTS[:3]

    def costs(self) -> tuple[OwningCost, OwningCost]:
        """Amounts of one unit and of the lot."""
        unit, lot = self._unit(), {}
        lot["evaluated_price"] = self._lot_price(unit["evaluated_price"])
        for part in _PARTS[1:]:
            lot[part] = self._lot_part(part, unit[part], None if self.per_unit_rule else self.basis.rules.rounding)
        unit["total_owning_cost"] = self._sum("per unit", unit)
        if self.per_unit_rule and not self._items() and self.price.items.is_complete and not self._is_of_total():
            lot["total_owning_cost"] = self._lot_part("total_owning_cost", unit["total_owning_cost"], None)
        else:
            lot["total_owning_cost"] = self._sum("lot", lot)
        return OwningCost(**unit), OwningCost(**lot)

    def _id(self, scope: str, part: str) -> str:
        return offer_id(self.offer, f"{scope}{self.variant}", part)

    def _items(self) -> tuple[Figure, ...]:
        items = self.price.items
        return (*items.amounts, items.margin) if items.margin is not None and self.with_margin else items.amounts

    def _is_of_total(self) -> bool:
        """Whether the price of the lot is a governing total: its unit price need not come out even."""
        return self.price.unit is not None and self.price.unit.is_of_total

    # Per unit

    def _unit(self) -> dict[str, Figure | None]:
        rounding = self.basis.rules.rounding if self.per_unit_rule else None
        factors = self._loss_factors()
        parts: dict[str, Figure | None] = {"evaluated_price": self._unit_price(rounding)}
        for part in _PARTS[1:]:
            parts[part] = self._unit_cost(part, factors[part], rounding)
        return parts

    def _unit_price(self, rounding: Rounding | None, *exact: str) -> Figure | None:
        price = self.price.unit
        if price is None:
            return None
        identity = "/".join((self._id("per unit", "evaluated_price"), *exact))
        label = f"{_LABELS['evaluated_price']} per unit"
        adders = price.adders if price.margin is None or not self.with_margin else (*price.adders, price.margin)
        if adders:
            return total(identity, label, self.basis.currency, price.price, *adders, rounding=rounding)
        return self._product(identity, label, price.factors, rounding)

    def _unit_cost(self, part: str, factors: tuple[Figure, ...] | None, rounding: Rounding | None) -> Figure | None:
        identity, label = self._id("per unit", part), f"{_LABELS[part]} per unit"
        if part == "auxiliary_cost" and self.basis.rates.auxiliary is None:
            zero, currency = self.basis.rules.rounding.apply(Decimal(0)), self.basis.currency
            return Figure(identity, label, zero, currency, Rule("the tender values no auxiliary loss in this lot"))
        return None if factors is None else self._product(identity, label, factors, rounding)

    def _product(self, identity: str, label: str, factors: tuple[Figure, ...], rounding: Rounding | None) -> Figure:
        if len(factors) == 1 and rounding is not None:
            return rounded(identity, label, factors[0], rounding)
        return product(identity, label, self.basis.currency, *factors, rounding=rounding)

    def _loss_factors(self) -> dict[str, tuple[Figure, ...] | None]:
        rates, tolerance = self.basis.rates, tolerance_factor(self.offer, self.basis.tender)
        no_load = with_tolerance(self.on_basis.no_load_loss, tolerance)
        load = with_tolerance(self.on_basis.load_loss, tolerance)
        if self.basis.lot.cooling_valuation is CoolingValuation.THROUGH_A_AND_B:
            no_load, load = self._with_cooling(no_load, load, tolerance)
        auxiliary = with_tolerance(auxiliary_loss(self.offer, self.basis.lot), tolerance)

        def capitalized(rate: Figure | None, loss: Figure | None) -> tuple[Figure, ...] | None:
            return None if rate is None or loss is None else (rate, loss)

        return {
            "no_load_cost": capitalized(rates.no_load, no_load),
            "load_cost": capitalized(rates.load, load),
            "auxiliary_cost": capitalized(rates.auxiliary, auxiliary),
        }

    def _with_cooling(
        self, no_load: Figure | None, load: Figure | None, tolerance: Figure | None
    ) -> tuple[Figure | None, Figure | None]:
        """No-load and load loss with the cooling power of each stage."""
        powers = cooling_powers(self.offer, self.basis.lot)
        at_no_load, at_rated = (with_tolerance(power, tolerance) for power in powers)
        if no_load is None or load is None or at_no_load is None or at_rated is None:
            return None, None
        first = total(offer_id(self.offer, "no-load loss with cooling"), "no-load loss with cooling, P0 + Pc0", "kW",
                      no_load, at_no_load)  # fmt: skip
        more = difference(offer_id(self.offer, "cooling power above no load"), "cooling power Pcs - Pc0", "kW",
                          at_rated, at_no_load)  # fmt: skip
        second = total(offer_id(self.offer, "load loss with cooling"), "load loss with cooling, Pk + Pcs - Pc0", "kW",
                       load, more)  # fmt: skip
        return first, second

    # Whole lot

    def _lot_price(self, per_unit: Figure | None) -> Figure | None:
        """Quantity times unit, and the further items: as amounts of the lot they are rounded once."""
        if per_unit is None or not self.price.items.is_complete:
            return None
        rounding, items, is_of_total = self.basis.rules.rounding, self._items(), self._is_of_total()
        if is_of_total and self.per_unit_rule:
            per_unit = self._unit_price(None, "exact") or per_unit
        if not items:
            is_rounded = is_of_total or not self.per_unit_rule
            return self._lot_part("evaluated_price", per_unit, rounding if is_rounded else None)
        identity, label = self._id("lot", "evaluated_price"), f"{_LABELS['evaluated_price']} of the lot"
        currency = self.basis.currency
        at_once = rounding if is_of_total and self.per_unit_rule else None
        units = product(
            f"{identity}/units",
            "price of all units",
            currency,
            self.basis.quantity,
            per_unit,
            rounding=at_once,
        )
        if not self.per_unit_rule:
            return total(identity, label, currency, units, *items, rounding=rounding)
        further = total(f"{identity}/items", "further items of the lot", currency, *items, rounding=rounding)
        return total(identity, label, currency, units, further)

    def _lot_part(self, part: str, per_unit: Figure | None, rounding: Rounding | None) -> Figure | None:
        if per_unit is None:
            return None
        label = f"{_LABELS.get(part, 'total owning cost')} of the lot"
        currency, quantity = self.basis.currency, self.basis.quantity
        return product(self._id("lot", part), label, currency, quantity, per_unit, rounding=rounding)

    def _sum(self, scope: str, parts: Mapping[str, Figure | None]) -> Figure | None:
        present = [figure for name in self.counted if (figure := parts[name]) is not None]
        if len(present) < len(self.counted):
            return None
        label = f"total owning cost {'per unit' if scope == 'per unit' else 'of the lot'}"
        return total(self._id(scope, "total_owning_cost"), label, self.basis.currency, *present)
