"""Pieces of a lot model: trails of the costs, rates at hand, what rounding did."""

from __future__ import annotations

from dataclasses import dataclass
from decimal import Decimal

import numpy as np
from numpy.typing import NDArray

from ..evaluation.identities import figure_id
from ..evaluation.lot_rates import derived_rates
from ..evaluation.result import EvaluatedOffer, Evaluation, LotEvaluation, LotRates
from ..records.tender import RoundingPoint, Tender
from ..trail import Figure
from .lot_model_rates import RateModel, rate_model
from .lot_model_trail import Trail, trail_of

__all__ = ["CostRounding", "cost_rounding", "cost_trail", "rates_at_hand", "slopes_at", "three", "worth_of"]

Array = NDArray[np.float64]
PARTS = ("evaluated_price", "no_load_cost", "load_cost", "auxiliary_cost")


@dataclass(frozen=True, slots=True, eq=False)
class CostRounding:
    """What the tender's rounding does to the costs of one unit.

    Parameters
    ----------
    step : float
        Smallest amount of a cost part of one unit; of a lot, divided by its units. [currency]
    mode : str
        As the tender states it.
    of_parts : ndarray
        Rounded less unrounded amount, bids by the four parts: price, no-load, load, auxiliary. [currency]
    rate_step : float
        Smallest amount of a derived rate where rates are rounded, else 0. [currency/kW]
    total : ndarray
        Total owning cost of one unit as evaluated, that of the lot divided by its units. [currency]
    """

    step: float
    mode: str
    of_parts: Array
    rate_step: float
    total: Array


def slopes_at(
    trails: tuple[Trail, ...], figures: list[str], rates: tuple[float, float, float]
) -> list[dict[str, Decimal]]:
    """Derivatives of each cost of the lot at given rates.

    Parameters
    ----------
    trails : tuple of Trail
        One a bid.
    figures : list of str
        Identities of the rates in them.
    rates : tuple of float
        A, B and C. [currency/kW]

    Returns
    -------
    list of dict of str to Decimal
        One mapping a bid, by the identity of the figure.
    """
    changed = {figure: Decimal(repr(rate)) for figure, rate in zip(figures, rates, strict=False)}
    return [trail.slopes(changed) for trail in trails]


def three(rates: LotRates) -> tuple[Figure, Figure, Figure | None]:
    """A, B and C as figures.

    Parameters
    ----------
    rates : LotRates
        Of a lot.

    Returns
    -------
    tuple of Figure or None
        None where the tender values no auxiliary loss.
    """
    return rates.no_load, rates.load, rates.auxiliary


def rates_at_hand(tender: Tender, lot: LotEvaluation, *, study: bool) -> tuple[LotRates, RateModel | None]:
    """Rates that value the losses, with the derivation behind them where there is one.

    Parameters
    ----------
    tender : Tender
        For economics and loading conditions.
    lot : LotEvaluation
        The lot.
    study : bool
        Whether a planner's derivation stands in for announced rates.

    Returns
    -------
    rates : LotRates
        Of the evaluation, or of the study.
    model : RateModel or None
        None for announced rates.

    Raises
    ------
    ValueError
        If a study is asked for and the lot has none.
    """
    derivation = lot.lot.derivation
    if study and derivation is None:
        derivation = lot.lot.study
        if derivation is None:
            raise ValueError(f"lot {lot.lot.id}: the rates are announced, and no study is stated")
        rates = derived_rates(tender, lot.lot, derivation, branch="study")
    else:
        rates = lot.rates
    return rates, None if derivation is None else rate_model(tender, derivation, rates)


def cost_trail(offer: EvaluatedOffer, rates: list[str]) -> Trail:
    """Arithmetic behind the total owning cost of a lot, ready to be run again without the rounding of costs.

    Parameters
    ----------
    offer : EvaluatedOffer
        A ranked offer.
    rates : list of str
        Identities of the rates, behind which the trail does not go.

    Returns
    -------
    Trail
        Operands before results.
    """
    total = offer.lot.total_owning_cost
    if total is None:
        raise ValueError(f"{offer.name} is ranked without a total")
    head = figure_id(f"lot {offer.offer.lot.value}", offer.name)
    return trail_of(total, taken=rates, unrounded=(f"{head}/per unit/", f"{head}/lot/"))


def worth_of(evaluation: Evaluation, currency: str) -> float:
    """What one unit of a currency is worth in the evaluation currency.

    Parameters
    ----------
    evaluation : Evaluation
        With its exchange rates.
    currency : str
        Code.

    Returns
    -------
    float
        1 for the evaluation currency itself.
    """
    known = evaluation.exchange_rates.get(currency)
    return 1.0 if known is None else float(known.value)


def cost_rounding(
    tender: Tender,
    lot: LotEvaluation,
    trails: tuple[Trail, ...],
    offers: tuple[EvaluatedOffer, ...],
    derivation: RateModel | None,
) -> CostRounding:
    """What rounding did to the costs of a lot.

    Parameters
    ----------
    tender : Tender
        With its rounding.
    lot : LotEvaluation
        The lot.
    trails : tuple of Trail
        Its unrounded costs.
    offers : tuple of EvaluatedOffer
        Its ranked offers.
    derivation : RateModel or None
        For the rounding of derived rates.

    Returns
    -------
    CostRounding
        Per unit.
    """
    rule, quantity = tender.rules, float(lot.quantity.value)
    per_lot = rule.rounding_applies_to is RoundingPoint.PART_PER_LOT
    step = float(rule.rounding.quantum) / (quantity if per_lot else 1.0)
    totals = [offer.lot.total_owning_cost for offer in offers]
    stated = None if derivation is None else derivation.derivation.rounding
    return CostRounding(
        step=step,
        mode=rule.rounding.mode.value,
        of_parts=np.array([_part_errors(o, t, quantity) for o, t in zip(offers, trails, strict=True)]),
        rate_step=0.0 if stated is None else float(stated.quantum),
        total=np.array([float(total.value) / quantity if total is not None else np.nan for total in totals]),
    )


def _part_errors(offer: EvaluatedOffer, trail: Trail, quantity: float) -> list[float]:
    """Rounded less unrounded amount of each part, of one unit."""
    unrounded = trail.by_figure()
    errors = []
    for part in PARTS:
        figure: Figure | None = getattr(offer.lot, part)
        if figure is None or figure.id not in unrounded:
            figure, size = getattr(offer.per_unit, part), 1.0
        else:
            size = quantity
        exact = None if figure is None else unrounded.get(figure.id)
        errors.append(0.0 if figure is None or exact is None else float(figure.value - exact) / size)
    return errors
