"""One lot as arrays: what every question about the firmness of a ranking is asked of.

Total owning costs are linear in the rates and in every price: price + A P0 + B Pk + C Paux. The model holds these
figures of the ranked offers, unrounded, per unit and in the evaluation currency, the inputs behind them and how the
costs move with each. It is made from an evaluation and cannot become one.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any, Literal

import numpy as np
from numpy.typing import ArrayLike, NDArray

from ..evaluation.result import Evaluation, LotEvaluation
from .lot_model_inputs import OwnInput, SharedInput, own_inputs, own_price, shared_inputs
from .lot_model_parts import CostRounding, cost_rounding, cost_trail, rates_at_hand, slopes_at, three, worth_of
from .lot_model_rates import RateModel
from .lot_model_trail import Trail

__all__ = ["RATE_NAMES", "CostRounding", "LotModel", "lot_model"]

Array = NDArray[np.float64]

#: Names under which the rates themselves, and all of them together, may be changed.
RATE_NAMES = ("no_load_rate", "load_rate", "auxiliary_rate", "all_rates_percent")


@dataclass(frozen=True, slots=True, eq=False)
class LotModel:
    """The ranked offers of a lot, in rank order, with unrounded costs per unit.

    Parameters
    ----------
    lot_id : str
        Id of the lot.
    basis : str
        ``"announced"``, ``"derived as announced"`` or ``"study"``: a planner's rates, never those of the evaluation.
    evaluation_currency : str
        In which all costs stand.
    quantity : float
        Units of the lot.
    bidders : tuple of str
        Names of the offers, cheapest first as evaluated.
    price : ndarray
        Evaluated price, further items spread over the units. [currency]
    no_load, load, auxiliary : ndarray
        Losses as they are valued: cooling power and claimed tolerance included where the tender values them. [kW]
    a, b, c : float
        Rates. [currency/kW]
    currency : tuple of str
        Currency of each quoted price.
    quoted_price, exchange_rate : ndarray
        Price as quoted or corrected, and what one unit of its currency is worth.
    rate_inputs : mapping of str to float, or None
        Present values of the inputs of derived rates; None where the rates are announced.
    rates : RateModel or None
        The derivation itself.
    shared : mapping of str to SharedInput
        Inputs of the tender that move prices, by name.
    own : mapping of str to OwnInput
        Price and guarantees of each bid, by name.
    rounding : CostRounding
        What rounding does.
    not_examined : tuple of str
        Figures of the tender behind the prices on which costs do not depend linearly; they are held.
    held_prices : tuple of str
        Offers with an item whose price is that of another bidder; the choice of that bidder is held.
    trails : tuple of Trail
        Arithmetic behind the cost of the lot of each offer.
    rate_figures : tuple of str
        Identities of the rates in the trails.
    """

    lot_id: str
    basis: Literal["announced", "derived as announced", "study"]
    evaluation_currency: str
    quantity: float
    bidders: tuple[str, ...]
    price: Array
    no_load: Array
    load: Array
    auxiliary: Array
    a: float
    b: float
    c: float
    currency: tuple[str, ...]
    quoted_price: Array
    exchange_rate: Array
    rate_inputs: Mapping[str, float] | None
    rates: RateModel | None
    shared: Mapping[str, SharedInput]
    own: Mapping[str, OwnInput]
    rounding: CostRounding
    not_examined: tuple[str, ...] = ()
    held_prices: tuple[str, ...] = ()
    trails: tuple[Trail, ...] = ()
    rate_figures: tuple[str, ...] = ()

    @property
    def losses(self) -> Array:
        """No-load, load and auxiliary loss, bids by three. [kW]"""
        return np.column_stack([self.no_load, self.load, self.auxiliary])

    @property
    def cost(self) -> Array:
        """Total owning cost of one unit, unrounded. [currency]"""
        return np.asarray(self.price + self.losses @ np.array([self.a, self.b, self.c]))

    def rates_of(self, **changed: ArrayLike) -> tuple[Array, Array, Array]:
        """A, B and C with other values of some inputs of the derivation, unrounded.

        Parameters
        ----------
        **changed : array_like
            By the names in `rate_inputs` and in their units; they broadcast together.

        Returns
        -------
        tuple of ndarray
            In the broadcast shape. [currency/kW]

        Raises
        ------
        ValueError
            If the rates are announced: nothing stands behind them.
        """
        if self.rates is None:
            raise ValueError(f"lot {self.lot_id}: the rates are announced and follow from nothing")
        a, b, c = self.rates.rates_of(changed)
        return a, b, c if self.rates.rates.auxiliary is not None else np.full_like(a, self.c)

    def costs_of(self, changed: Mapping[str, ArrayLike]) -> Array:
        """Costs of one unit with other values of any inputs, all changes together.

        Parameters
        ----------
        changed : mapping of str to array_like
            By name: inputs of derived rates, `RATE_NAMES`, inputs of the tender that move prices, and a price or loss
            of one bid as ``"load_loss_kw of Alder"``. They broadcast together.

        Returns
        -------
        ndarray
            Bids on the first axis, then the broadcast shape. [currency]

        Raises
        ------
        KeyError
            If a name is known to none of them.
        """
        arrays = {name: np.asarray(value, dtype=np.float64) for name, value in changed.items()}
        shape = np.broadcast_shapes(*(array.shape for array in arrays.values()))
        behind = set() if self.rates is None else set(self.rates.inputs)
        own = {f"{name} of {bidder}" for name in self.own for bidder in self.bidders}
        for name in sorted(arrays.keys() - behind - own - {*RATE_NAMES, *self.shared}):
            raise KeyError(f"{name}: not an input of lot {self.lot_id}")
        rates = self._rates_with(
            {name: array for name, array in arrays.items() if name in behind or name in RATE_NAMES}
        )
        figures = [self._figures_with(arrays, bidder) for bidder in self.bidders]
        if not any(figures):
            losses = np.moveaxis(self.losses, 0, 1).reshape(3, -1, *(1,) * len(shape))
            price = self.price.reshape(-1, *(1,) * len(shape))
            total = price + sum(loss * rate for loss, rate in zip(losses, rates, strict=True))
            return np.array(np.broadcast_to(total, (len(self.bidders), *shape)))
        at_rates: dict[str, Any] = dict(zip(self.rate_figures, rates, strict=False))
        totals = [trail.value(at_rates | moved) for trail, moved in zip(self.trails, figures, strict=True)]
        return np.array([np.broadcast_to(total, shape) for total in totals]) / self.quantity

    def _rates_with(self, changed: Mapping[str, Array]) -> tuple[Array, Array, Array]:
        """Rates with other inputs behind them, then other rates, then all of them scaled."""
        behind = {name: array for name, array in changed.items() if name not in RATE_NAMES}
        three = self.rates_of(**behind) if behind else (self.a, self.b, self.c)
        level = np.asarray(changed.get("all_rates_percent", 100.0)) / 100
        a, b, c = (np.asarray(changed.get(name, rate)) * level for name, rate in zip(RATE_NAMES, three, strict=False))
        return a, b, c

    def _figures_with(self, changed: Mapping[str, Array], bidder: str) -> dict[str, Array]:
        """New values of figures in the trail of one bid."""
        found = {self.shared[name].figure: array for name, array in changed.items() if name in self.shared}
        for name, own in self.own.items():
            figure = own.figure[self.bidders.index(bidder)]
            if f"{name} of {bidder}" in changed:
                if not figure:
                    raise KeyError(f"{name}: not a figure that can be changed together with others")
                found[figure] = changed[f"{name} of {bidder}"]
        return found


def lot_model(evaluation: Evaluation, lot: LotEvaluation, *, study: bool = False) -> LotModel:
    """Model of a lot.

    Parameters
    ----------
    evaluation : Evaluation
        Of the whole tender.
    lot : LotEvaluation
        One of its lots, with at least one ranked offer.
    study : bool
        Whether a planner's derivation stands in for announced rates. What follows from it is a study.

    Returns
    -------
    LotModel
        Of the ranked offers.

    Raises
    ------
    ValueError
        If no offer is ranked, or a study is asked for and the lot has none.
    """
    offers = lot.ranked
    if not offers:
        raise ValueError(f"lot {lot.lot.id}: no offer is ranked")
    rates, derivation = rates_at_hand(evaluation.tender, lot, study=study)
    of_evaluation = [figure.id for figure in three(lot.rates) if figure is not None]
    trails = tuple(cost_trail(offer, of_evaluation) for offer in offers)
    slopes = [trail.slopes() for trail in trails]
    quantity = lot.quantity.value
    losses = np.array([[float(of.get(name, 0) / quantity) for name in of_evaluation] for of in slopes])
    losses = np.pad(losses, ((0, 0), (0, 3 - losses.shape[1])))
    a, b, c = (0.0 if figure is None else float(figure.value) for figure in three(rates))
    if rates.auxiliary is None and lot.rates.auxiliary is not None:
        c = float(lot.rates.auxiliary.value)  # a study without hours of cooling says nothing of C
    no_rates = dict.fromkeys(of_evaluation, quantity * 0)
    price = np.array([float(trail.value(no_rates) / quantity) for trail in trails])
    shared, not_examined = shared_inputs(evaluation.tender, lot.lot, slopes, trails, quantity)
    quoted = [own_price(offer) for offer in offers]
    return LotModel(
        lot_id=lot.lot.id,
        basis="study" if study and lot.lot.rates is not None else lot.rates.basis.value,
        evaluation_currency=evaluation.tender.identity.currency.value,
        quantity=float(quantity),
        bidders=tuple(offer.name for offer in offers),
        price=price,
        no_load=losses[:, 0],
        load=losses[:, 1],
        auxiliary=losses[:, 2],
        a=a,
        b=b,
        c=c,
        currency=tuple(figure.unit for figure in quoted),
        quoted_price=np.array([float(figure.value) for figure in quoted]),
        exchange_rate=np.array([worth_of(evaluation, figure.unit) for figure in quoted]),
        rate_inputs=None if derivation is None else {name: known.now for name, known in derivation.inputs.items()},
        rates=derivation,
        shared=shared,
        own=own_inputs(offers, lot, slopes_at(trails, of_evaluation, (a, b, c)), losses @ np.array([a, b, c])),
        rounding=cost_rounding(evaluation.tender, lot, trails, offers, derivation),
        not_examined=not_examined,
        held_prices=tuple(o.name for o in offers if any(step.name == "missing item" for step in o.price_steps)),
        trails=trails,
        rate_figures=tuple(of_evaluation),
    )
