"""The year-by-year model written out: every quantity of every year from its closed form."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from .arguments import Array
from .inputs import Model

__all__ = ["YearColumns", "year_columns"]


@dataclass(frozen=True, slots=True)
class YearColumns:
    """Quantities year by year; arrays broadcast together, years on the last axis.

    Parameters
    ----------
    inputs : mapping of str to ndarray
        Inputs with an axis of years, of length 1 where they do not vary with the year.
    year : ndarray of int
        1 to N. [year]
    discount_factor : ndarray
        DF_t. [1]
    price_growth, carbon_growth, charge_growth, load_growth : ndarray
        Energy price, carbon cost, demand charge and uncapped load of the year over the stated ones; 1 for tables by
        year. [1]
    price, carbon, charge : ndarray
        Energy price and carbon cost [currency/kWh] and demand charge [currency/(kW year)] of the year.
    uncapped_load, load : ndarray
        Peak load of the year, before and after the cap. [per unit]
    """

    inputs: dict[str, Array]
    year: NDArray[np.int64]
    discount_factor: Array
    price_growth: Array
    carbon_growth: Array
    charge_growth: Array
    load_growth: Array
    price: Array
    carbon: Array
    charge: Array
    uncapped_load: Array
    load: Array

    def __getitem__(self, name: str) -> Array:
        return self.inputs[name]

    @property
    def energy_cost(self) -> Array:
        """Cost of 1 kWh in each year: energy price and carbon cost. [currency/kWh]"""
        return self.price + self.carbon

    @property
    def no_load_cost(self) -> Array:
        """Cost of 1 kW of no-load loss in each year, neither discounted nor grossed up. [currency/(kW year)]"""
        return self.energy_cost * self["hours_energized"] + self.charge

    @property
    def load_cost_at_1(self) -> Array:
        """Cost of 1 kW of load loss in each year if the peak load were 1. [currency/(kW year)]"""
        energy = self.energy_cost * (self["hours_of_load"] * self["loss_factor"])
        return energy + self.charge * self["peak_responsibility_factor"] ** 2

    @property
    def auxiliary_cost(self) -> Array:
        """Cost of 1 kW of auxiliary loss in each year. [currency/(kW year)]"""
        return self.energy_cost * self["cooling_hours"] + self.charge * self["cooling_share_at_peak"]


def year_columns(model: Model) -> YearColumns:
    """Write the model out year by year.

    Parameters
    ----------
    model : Model
        Checked inputs with one evaluation period.

    Returns
    -------
    YearColumns
        Quantities year by year; infinite where they overflow.
    """
    inputs = {name: array[..., np.newaxis] for name, array in model.values.items()} | dict(model.tables)
    year = np.arange(1, model.years + 1)
    past = year - 1
    since_price_date = past + inputs["price_delay_years"]
    price_growth = _power(inputs["energy_price_escalation"], since_price_date + inputs["escalate_before_year_1"])
    carbon_growth = _power(inputs["carbon_cost_escalation"], since_price_date)
    charge_growth = _power(inputs["demand_charge_escalation"], since_price_date)
    load_growth = _power(inputs["peak_load_growth"], past)
    uncapped = inputs["peak_load_pu"] * load_growth
    return YearColumns(
        inputs,
        year,
        _power(inputs["discount_rate"], inputs["years_before_end"] - year - inputs["discount_delay_years"]),
        price_growth,
        carbon_growth,
        charge_growth,
        load_growth,
        inputs["energy_price_per_kwh"] * price_growth,
        # 0 stays 0 where the growth overflows
        np.where(inputs["carbon_cost_per_kwh"] > 0, inputs["carbon_cost_per_kwh"] * carbon_growth, 0.0),
        inputs["demand_charge_per_kw_year"] * charge_growth,
        uncapped,
        np.minimum(uncapped, inputs["peak_load_cap_pu"]),
    )


def _power(rate: Array, years: Array | NDArray[np.int64]) -> Array:
    """(1 + rate)^years, exactly 1 where the exponent or the rate is 0."""
    return np.asarray(np.exp(years * np.log1p(rate)))
