"""Prices, charges and loads of a block of scenarios, year after year, each array changed in place for the next."""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np

from .arguments import Array
from .inputs import Model

__all__ = ["RunningSum", "peak_loads", "present_charges", "present_prices", "quantity", "squared_peak_loads"]


class RunningSum:
    """A sum of products over the years; stays a single number where all its terms are single numbers."""

    def __init__(self) -> None:
        self.total = np.zeros(())
        self._term = np.zeros(())
        self._is_empty = True

    def add(self, left: Array, right: Array | None = None) -> None:
        """Add a value, or a product, of the same shapes as in the years before.

        Parameters
        ----------
        left : ndarray
            The value, or the first factor.
        right : ndarray, optional
            The second factor.
        """
        if self._is_empty:
            shape = left.shape if right is None else np.broadcast_shapes(left.shape, right.shape)
            self.total, self._term, self._is_empty = np.zeros(shape), np.empty(shape), False
        self.total += left if right is None else np.multiply(left, right, out=self._term)


def present_prices(model: Model) -> Iterator[Array]:
    """Present value of the energy price of each year, with the carbon cost where there is one.

    Parameters
    ----------
    model : Model
        A block of scenarios.

    Returns
    -------
    iterator of ndarray
        DF_t (p_t + gamma_t); 0 once a scenario's own evaluation period is over. [currency/kWh]
    """
    escalation = model["energy_price_escalation"]
    first = 1 + escalation * model["escalate_before_year_1"]
    prices = _present_values(model, "energy_price_per_kwh", escalation, first)
    if not model["carbon_cost_per_kwh"].any():
        return prices
    costs = _present_values(model, "carbon_cost_per_kwh", model["carbon_cost_escalation"], np.ones(()))
    return _together(prices, costs)


def present_charges(model: Model) -> Iterator[Array]:
    """Present value of the demand charge of each year.

    Parameters
    ----------
    model : Model
        A block of scenarios.

    Returns
    -------
    iterator of ndarray
        DF_t D_t; 0 once a scenario's own evaluation period is over. [currency/(kW year)]
    """
    return _present_values(model, "demand_charge_per_kw_year", model["demand_charge_escalation"], np.ones(()))


def peak_loads(model: Model) -> Iterator[Array]:
    """Peak load of each year, capped.

    Parameters
    ----------
    model : Model
        A block of scenarios.

    Yields
    ------
    ndarray
        The same array each year, which the caller may change. The load without a cap goes on beside it, so that a
        shrinking load leaves the cap at its own time. [per unit of the rating]
    """
    cap = model["peak_load_cap_pu"]
    capped: Array | None = None
    for load in quantity(model, "peak_load_pu", model["peak_load_growth"]):
        if capped is None:
            capped = np.empty(np.broadcast_shapes(load.shape, cap.shape))
        yield np.minimum(load, cap, out=capped)


def squared_peak_loads(model: Model) -> Iterator[Array]:
    """Square of the peak load of each year, after the cap.

    Parameters
    ----------
    model : Model
        A block of scenarios.

    Yields
    ------
    ndarray
        The same array each year. [per unit squared]
    """
    for load in peak_loads(model):
        yield np.multiply(load, load, out=load)


def quantity(model: Model, name: str, growth: Array | None = None) -> Iterator[Array]:
    """A quantity that grows geometrically, stays as it is, or comes by year.

    Parameters
    ----------
    model : Model
        A block of scenarios.
    name : str
        Name of the plain quantity.
    growth : ndarray, optional
        Growth as a fraction; none where absent. [1/year]

    Yields
    ------
    ndarray
        The value of each year.
    """
    if name in model.tables:
        yield from (np.asarray(column) for column in model.tables[name])
        return
    ratio = np.ones(()) if growth is None else 1 + growth
    value = np.asarray(model[name] * np.ones_like(ratio))
    while True:
        yield value
        value *= ratio


def _together(left: Iterator[Array], right: Iterator[Array]) -> Iterator[Array]:
    """Sum of two quantities, the same array each year."""
    both: Array | None = None
    for one, other in zip(left, right, strict=True):
        if both is None:
            both = np.empty(np.broadcast_shapes(one.shape, other.shape))
        yield np.add(one, other, out=both)


def _present_values(model: Model, name: str, growth: Array, first: Array) -> Iterator[Array]:
    """Discounted values of a quantity, until each scenario's evaluation period is over."""
    r, periods = model["discount_rate"], model["evaluation_period_years"]
    before_year_1 = model["years_before_end"] - 1 - model["discount_delay_years"]
    factor = np.exp(before_year_1 * np.log1p(r)) * np.ones_like(periods)
    if name in model.tables:
        factors = _geometric(np.asarray(factor), 1 / (1 + r), periods)
        yield from (value * factor for value, factor in zip(model.tables[name], factors, strict=True))
    else:
        if model["price_delay_years"].any():
            first = first * np.exp(model["price_delay_years"] * np.log1p(growth))
        first = np.asarray(model[name] * first * factor * np.ones_like(growth))
        yield from _geometric(first, (1 + growth) / (1 + r), periods)


def _geometric(value: Array, ratio: Array, periods: Array) -> Iterator[Array]:
    longest = int(periods.max())
    ends = set(np.unique(periods).tolist())
    for year in range(1, longest + 1):
        yield value
        value *= ratio
        if year in ends:
            value *= periods > year
