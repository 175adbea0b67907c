"""Rates by the fixed charge rate: annual cost of a kilowatt of loss, levelized, as figures that show their sum."""

from __future__ import annotations

from collections.abc import Mapping
from decimal import Decimal

from ..capitalization.load import equivalent_peak_load
from ..capitalization.rates import year_table
from ..trail import Figure, constant, product, quotient, total
from .present_worth import model_inputs
from .rate_inputs import Naming, to_decimal

__all__ = ["fixed_charge_rates"]


def fixed_charge_rates(naming: Naming, inputs: Mapping[str, Figure], *, with_auxiliary: bool) -> dict[str, Figure]:
    """A, B and C as annual cost over the fixed charge rate.

    Parameters
    ----------
    naming : Naming
        Of the derivation.
    inputs : mapping of str to Figure
        Of the derivation, with ``fixed_charge_rate_percent`` and one energy price for the year.
    with_auxiliary : bool
        Whether C is derived.

    Returns
    -------
    dict of str to Figure
        ``no_load``, ``load`` and, where wanted, ``auxiliary``. [currency/kW]

    Notes
    -----
    A = (SC + h EC) / FCR, B = (SC R^2 + 8760 EC LsF) PL^2 / FCR, C = (SC kappa + h_c EC) / FCR, with the demand charge
    SC, the energy price EC (and the carbon cost, where it counts), the peak responsibility factor R, the equivalent
    annual peak load PL and the fixed charge rate FCR, which is not the capital recovery factor in general.

    References
    ----------
    .. [1] IEEE C57.120, method of the annual cost of losses (from memory).
    """
    unit = f"{naming.currency}/kW"
    yearly = f"{naming.currency}/(kW year)"
    percent = constant("percent", "one percent", Decimal("0.01"), "1/%", "1 % = 0.01")
    charge_rate = product(
        naming.id("fixed charge rate"), "fixed charge rate", "1/year", inputs["fixed_charge_rate_percent"], percent
    )
    price = _energy_cost(naming, inputs)
    demand = inputs["demand_charge_per_kw_year"]

    def rate(name: str, label: str, *annual: Figure) -> Figure:
        cost = total(naming.id(name, "annual cost"), f"annual cost of 1 kW, {label}", yearly, *annual)
        return quotient(naming.id(name, "computed"), f"{label}, computed", unit, cost, charge_rate)

    def energy(name: str, *factors: Figure) -> Figure:
        return product(naming.id(name, "energy"), "annual energy cost of 1 kW", yearly, price, *factors)

    def charge(name: str, *factors: Figure) -> Figure:
        return product(naming.id(name, "demand"), "annual demand cost of 1 kW", yearly, demand, *factors)

    peak = _equivalent_peak_load(naming, inputs)
    responsibility = inputs["peak_responsibility_factor"]
    rates = {
        "no_load": rate("no_load", "no-load loss rate A", demand, energy("no_load", inputs["hours_energized"])),
        "load": rate(
            "load",
            "load loss rate B",
            charge("load", responsibility, responsibility, peak, peak),
            energy("load", inputs["hours_of_load"], inputs["loss_factor"], peak, peak),
        ),
    }
    if with_auxiliary:
        rates["auxiliary"] = rate(
            "auxiliary",
            "auxiliary loss rate C",
            charge("auxiliary", inputs["cooling_share_at_peak"]),
            energy("auxiliary", inputs["cooling_hours"]),
        )
    return rates


def _energy_cost(naming: Naming, inputs: Mapping[str, Figure]) -> Figure:
    price = inputs["energy_price_per_kwh"]
    if "carbon_cost_per_kwh" not in inputs:
        return price
    return total(
        naming.id("energy and carbon"),
        "energy price with carbon cost",
        price.unit,
        price,
        inputs["carbon_cost_per_kwh"],
    )


def _equivalent_peak_load(naming: Naming, inputs: Mapping[str, Figure]) -> Figure:
    """Peak load of year 1 where the load does not move, else the equivalent one over the years."""
    moves = "peak_load_pu" not in inputs or inputs["peak_load_growth_percent"].value != 0
    if not moves:
        return inputs["peak_load_pu"]
    table = year_table(**model_inputs(inputs, None))
    price = table.energy_price_per_kwh + table.carbon_cost_per_kwh
    equivalent = equivalent_peak_load(
        table.peak_load_pu, discount_factor=table.discount_factor, energy_price_per_kwh=price
    )
    statement = (
        "root of the mean squared peak load of the years, weighted with discount factor times energy price "
        "(IEEE C57.120, from memory)"
    )
    return naming.by_rule("equivalent peak load", to_decimal(float(equivalent)), "1", statement)
