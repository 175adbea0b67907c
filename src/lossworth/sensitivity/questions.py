"""Questions of a planner: does the dearer low-loss bid pay back, and what do the losses draw in a year and at peak.

Both need what stands behind the rates: prices, load, years. They are asked of a lot with derived rates, or of a
planner's study, and answer nothing that the evaluation decides.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from ..evaluation.result import LotRates
from .lot_model import LotModel

__all__ = ["LossDraw", "Payback", "loss_draw", "payback"]

Array = NDArray[np.float64]
_PERCENT = 0.01
_HALVINGS = 200
_LOWEST, _HIGHEST = -0.999, 1000.0  # rates of return between which one is looked for


@dataclass(frozen=True, slots=True)
class Payback:
    """What the extra price of one bid buys against another, per unit.

    Parameters
    ----------
    bidder, against : str
        The bid, and the one that it is compared with.
    extra_price : float
        Its evaluated price less that of the other. [currency]
    yearly_saving : float
        Energy and demand cost of the losses of year 1, that of the other less its own. [currency/year]
    payback_years : float or None
        Extra price over yearly saving; 0 where there is no extra price, None where nothing is saved. [year]
    discounted_payback_years : int or None
        First year by whose end the discounted savings, year by year, have paid the extra price; None where they do not
        within the evaluation period. [year]
    rate_of_return_percent : float or None
        Internal rate of return of the extra price with the saving of year 1 in every year of the evaluation period;
        None where there is no extra price, or the savings do not make a single one. [percent/year]
    rate_of_return_by_year_percent : float or None
        The same with the saving of each year: prices and loads as they develop. [percent/year]
    net_present_value : float
        Discounted savings less extra price at the planner's discount rate: the difference of the unrounded total owning
        costs. [currency]
    """

    bidder: str
    against: str
    extra_price: float
    yearly_saving: float
    payback_years: float | None
    discounted_payback_years: int | None
    rate_of_return_percent: float | None
    rate_of_return_by_year_percent: float | None
    net_present_value: float


@dataclass(frozen=True, slots=True)
class LossDraw:
    """What the losses of all units of a lot draw in year 1.

    Parameters
    ----------
    bidder : str
        Whose units.
    kwh_per_year : float
        Energy. [kWh/year]
    kw_at_system_peak : float
        Power when the system has its peak: load loss at the own load of that moment. [kW]
    kw_at_own_peak : float
        Power at the units' own peak load. [kW]
    """

    bidder: str
    kwh_per_year: float
    kw_at_system_peak: float
    kw_at_own_peak: float


def payback(model: LotModel, bidder: str, against: str) -> Payback:
    """Payback and internal rate of return of the extra price of one bid against another.

    Parameters
    ----------
    model : LotModel
        With derived rates, or those of a study.
    bidder, against : str
        Names of two bids.

    Returns
    -------
    Payback
        Per unit.

    Raises
    ------
    ValueError
        If the rates are announced, or a name is not among the ranked bids.

    Notes
    -----
    Payments count when the derivation counts them: at the end, in the middle or at the beginning of each year. With the
    fixed charge rate a year costs the rate times that charge rate, in every year of the evaluation period.

    Not included: taxes, residual value, price of the extra price's financing.
    """
    yearly, when, factors = _yearly(model)
    at, other = _positions(model, bidder, against)
    extra = float(model.price[at] - model.price[other])
    saving = (model.losses[other] - model.losses[at]) @ yearly
    first = float(saving[0])
    constant = np.full_like(saving, first)
    return Payback(
        bidder=bidder,
        against=against,
        extra_price=extra,
        yearly_saving=first,
        payback_years=_simple(extra, first),
        discounted_payback_years=_discounted(extra, saving * factors),
        rate_of_return_percent=_rate_of_return(extra, constant, when),
        rate_of_return_by_year_percent=_rate_of_return(extra, saving, when),
        net_present_value=float(model.cost[other] - model.cost[at]),
    )


def _behind(model: LotModel) -> LotRates:
    if model.rates is None:
        raise ValueError(f"lot {model.lot_id}: the rates are announced, and nothing is known of the years behind them")
    return model.rates.rates


def _positions(model: LotModel, *names: str) -> list[int]:
    for name in names:
        if name not in model.bidders:
            raise ValueError(f"{name}: not a ranked bid of lot {model.lot_id}")
    return [model.bidders.index(name) for name in names]


def _yearly(model: LotModel) -> tuple[Array, Array, Array]:
    """Cost of 1 kW of each loss in each year (3, years), when it is counted, and its discount factor."""
    rates = _behind(model)
    years = int(rates.inputs["evaluation_period_years"].value)
    timing = float(rates.inputs["years_before_end"].value) - float(rates.inputs["discount_delay_years"].value)
    when: Array = np.arange(1, years + 1, dtype=np.float64) - timing
    discount = float(rates.inputs["discount_rate_percent"].value) * _PERCENT
    factors = np.asarray(np.exp(-when * math.log1p(discount)), dtype=np.float64)
    if rates.table is None:
        charge = float(rates.inputs["fixed_charge_rate_percent"].value) * _PERCENT
        of_year = np.array([model.a, model.b, model.c if rates.auxiliary is not None else 0.0]) * charge
        return np.asarray(np.repeat(of_year[:, np.newaxis], years, axis=1)), when, factors
    columns = rates.table.columns
    present = np.array([columns[name] for name in ("no_load", "load", "auxiliary")])
    if rates.auxiliary is None:
        present[2] = 0.0
    return np.asarray(present / np.array(columns["discount_factor"])), when, factors


def _simple(extra: float, saving: float) -> float | None:
    if extra <= 0:
        return 0.0
    return extra / saving if saving > 0 else None


def _discounted(extra: float, present: Array) -> int | None:
    if extra <= 0:
        return 0
    paid = np.flatnonzero(np.cumsum(present) >= extra)
    return int(paid[0]) + 1 if paid.size else None


def _rate_of_return(extra: float, saving: Array, when: Array) -> float | None:
    """Rate at which the discounted savings equal the extra price; they fall with it where none is negative."""
    if extra <= 0 or saving.min() < 0 or saving.max() <= 0:
        return None

    def value(logarithm: float) -> float:
        return float(saving @ np.exp(-when * logarithm)) - extra

    found = _falling_root(value, math.log1p(_LOWEST), math.log1p(_HIGHEST))
    return None if found is None else 100 * math.expm1(found)


def _falling_root(value: Callable[[float], float], low: float, high: float) -> float | None:
    """Where a falling function passes zero, to the last bits."""
    if not value(low) >= 0 >= value(high):
        return None
    for _ in range(_HALVINGS):
        middle = (low + high) / 2
        if middle in (low, high):
            break
        low, high = (middle, high) if value(middle) >= 0 else (low, middle)
    return low


def loss_draw(model: LotModel) -> tuple[LossDraw, ...]:
    """Energy a year, and power at peak, that the losses of the lot draw.

    Parameters
    ----------
    model : LotModel
        With derived rates, or those of a study.

    Returns
    -------
    tuple of LossDraw
        In rank order; losses as they are valued, claimed tolerance included where the tender values it.

    Raises
    ------
    ValueError
        If the rates are announced.

    Notes
    -----
    With hours energized h, hours of load H, loss factor by time LsF, peak load of year 1, cooling hours and shares:
    P0 h + Pk LsF peak^2 H + Paux cooling hours; at system peak P0 + Pk (peak R)^2 + Paux share on; at the own peak
    P0 + Pk peak^2 + Paux. No energy or power lost upstream is counted.
    """
    rates = _behind(model)
    hours, at_system_peak, at_own_peak = _factors(rates)
    return tuple(
        LossDraw(name, *(float(model.quantity * (losses @ of)) for of in (hours, at_system_peak, at_own_peak)))
        for name, losses in zip(model.bidders, model.losses, strict=True)
    )


def _factors(rates: LotRates) -> tuple[Array, Array, Array]:
    """Hours of 1 kW of each loss in year 1, and its parts at both peaks."""

    def value(name: str) -> float:
        return float(rates.inputs[name].value)

    stated = "peak_load_pu" if "peak_load_pu" in rates.inputs else "peak_load_year_1"
    cap = value("peak_load_cap_pu") if "peak_load_cap_pu" in rates.inputs else math.inf
    peak = min(value(stated), cap)
    by_time = "loss_factor_by_time" if "loss_factor_by_time" in rates.inputs else "loss_factor"
    cooling, share = value("cooling_hours"), value("cooling_share_at_peak")
    if rates.cooling is not None:
        cooling, share = float(rates.cooling.hours_by_time[0]), float(rates.cooling.share_at_peak[0])
    square, responsibility = peak * peak, value("peak_responsibility_factor")
    return (
        np.array([value("hours_energized"), value("hours_of_load") * value(by_time) * square, cooling]),
        np.array([1.0, square * responsibility**2, share]),
        np.array([1.0, square, 1.0]),
    )
