r"""Loss capitalization rates A, B and C from the year-by-year model.

The references of the docstrings:

[IEEE C57.120] IEEE guide for loss evaluation of power transformers and reactors. From memory.
[RUS 1724E-301] Rural Utilities Service, Bulletin 1724E-301, 1997. Symbols read, equations from memory.
[IEC TS 60076-20] Power transformers, part 20: energy efficiency. From memory.
[Masters 2004] G. M. Masters, Renewable and Efficient Electric Power Systems, Wiley, 2004, section 5.3. Read.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from typing import Unpack

import numpy as np
from numpy.typing import NDArray

from .arguments import Array, finite, single_number
from .inputs import Model, YearModelInputs, blocks, check_inputs
from .paths import RunningSum, present_charges, present_prices, quantity, squared_peak_loads
from .year_columns import year_columns

__all__ = ["Rates", "YearModelInputs", "YearTable", "loss_capitalization_rates", "year_table"]


@dataclass(frozen=True, slots=True)
class Rates:
    """Loss capitalization rates, one value a scenario.

    Parameters
    ----------
    no_load : ndarray
        A, per kW of no-load loss. [currency/kW]
    load : ndarray
        B, per kW of load loss at the rating and reference temperature of its guarantee. [currency/kW]
    auxiliary : ndarray
        C, per kW of auxiliary loss. [currency/kW]
    """

    no_load: Array
    load: Array
    auxiliary: Array


@dataclass(frozen=True, slots=True)
class YearTable:
    """The sums behind the rates, year by year; arrays but `year` have the years on their last axis and are read-only.

    Parameters
    ----------
    year : ndarray of int
        1 to N, one axis. [year]
    discount_factor : ndarray
        Present value of 1 paid in the year, at the service date or `discount_delay_years` before. [1]
    energy_price_per_kwh : ndarray
        Price of the year, without the carbon cost. [currency/kWh]
    carbon_cost_per_kwh : ndarray
        Carbon cost of the year, which is added to the price. [currency/kWh]
    demand_charge_per_kw_year : ndarray
        Demand charge of the year. [currency/(kW year)]
    peak_load_pu : ndarray
        Peak load of the year. [per unit of the rating of the guaranteed load loss]
    cooling_hours : ndarray
        Hours of cooling of the year. [hour/year]
    cooling_share_at_peak : ndarray
        Share of the cooling that is on at system peak in the year. [1]
    no_load, load, auxiliary : ndarray
        Present value of the year's cost of 1 kW of each loss; the sums over the years are A, B and C. [currency/kW]
    """

    year: NDArray[np.int64]
    discount_factor: Array
    energy_price_per_kwh: Array
    carbon_cost_per_kwh: Array
    demand_charge_per_kw_year: Array
    peak_load_pu: Array
    cooling_hours: Array
    cooling_share_at_peak: Array
    no_load: Array
    load: Array
    auxiliary: Array


def loss_capitalization_rates(**inputs: Unpack[YearModelInputs]) -> Rates:
    r"""Rates A, B and C for any number of scenarios.

    Parameters
    ----------
    **inputs : YearModelInputs
        Keyword arguments, each a number or an array; see `YearModelInputs` for names, units, bounds and defaults.
        Required: `discount_rate`, `evaluation_period_years`, `energy_price_per_kwh`, `loss_factor`, `peak_load_pu`.

    Returns
    -------
    Rates
        Arrays in the broadcast shape of the inputs. [currency/kW]

    Raises
    ------
    TypeError
        If an input is not known or a required one is not given.
    ValueError
        If a value is out of bounds, a quantity is given twice, shapes do not fit together, or a rate exceeds the
        range of floating-point numbers.

    Notes
    -----
    .. math::
        A &= G \sum_t DF_t\, ((p_t + \gamma_t)\, h_u + D_t) \\
        B &= G \sum_t DF_t\, \beta_t^2\, ((p_t + \gamma_t)\, h_s\, LsF + D_t R^2) \\
        C &= G \sum_t DF_t\, ((p_t + \gamma_t)\, h_q + D_t\, \kappa)

    with :math:`DF_t = (1 + r)^{-(t - \varphi + \delta_r)}`, energy price
    :math:`p_t = p_1 (1 + e)^{t - 1 + \epsilon + \delta_p}`, carbon cost
    :math:`\gamma_t = \gamma_1 (1 + e_\gamma)^{t - 1 + \delta_p}`, demand charge
    :math:`D_t = D_1 (1 + e_D)^{t - 1 + \delta_p}`, peak load
    :math:`\beta_t = \min(\beta_1 (1 + g)^{t-1}, \beta_{cap})`, hours energized :math:`h_u`, of load :math:`h_s`
    and of cooling :math:`h_q`, loss factor :math:`LsF`, peak responsibility R, cooling share at peak
    :math:`\kappa`, upstream gross-up G. :math:`\epsilon` is 1 for today's price and else 0, :math:`\delta_p` the
    delay of prices, :math:`\delta_r` that of the discounting. The sums run over the years in place: no array of years
    x scenarios is made, and memory beyond inputs and result does not grow with the scenarios.

    Where loss factor and hours are price-weighted, the carbon cost is weighted like the price. A carbon cost that is
    the same in every hour is valued exactly by a second call with the carbon cost as the energy price, plain loss
    factor and hours and no demand charge: the rates of both calls add up.

    Not included: a load shape that changes over the years, prices by hour (give a price-weighted loss factor and
    price-weighted hours), cooling that follows the growing load (`cooling`), taxes, residual value of the losses,
    windings of three-winding units.

    References
    ----------
    .. [1] [IEEE C57.120], [IEC TS 60076-20], [RUS 1724E-301]: A and B as present values per kW; C after IEEE and RUS.
    .. [2] [Masters 2004] for the price that escalates before the first payment.

    Examples
    --------
    Invented data: the third lot of the demo, for two discount rates.

    >>> rates = loss_capitalization_rates(
    ...     discount_rate=[0.06, 0.04], evaluation_period_years=30, energy_price_per_kwh=0.085,
    ...     demand_charge_per_kw_year=55, loss_factor=0.339625, peak_load_pu=0.65, peak_load_growth=0.01,
    ...     peak_load_cap_pu=1.0, peak_responsibility_factor=0.90)
    >>> rates.no_load.round(2).tolist(), rates.load.round(2).tolist()
    ([11006.36, 13826.71], [2153.32, 2777.78])
    """
    model = check_inputs(inputs)
    size = int(np.prod(model.shape))
    no_load, load, auxiliary = np.empty(size), np.empty(size), np.empty(size)
    with np.errstate(over="ignore", invalid="ignore", under="ignore"):
        for part, block in blocks(model):
            no_load[part], load[part], auxiliary[part] = _block_rates(block)
    return Rates(
        finite(no_load, "no-load loss rate").reshape(model.shape),
        finite(load, "load loss rate").reshape(model.shape),
        finite(auxiliary, "auxiliary loss rate").reshape(model.shape),
    )


def _block_rates(model: Model) -> tuple[Array, Array, Array]:
    """A, B and C of one block: one pass over the years, each quantity moved on in place."""
    energy, demand, energy_square, demand_square, cooling_energy, cooling_demand = (RunningSum() for _ in range(6))
    varying_cooling = not model.tables.keys().isdisjoint({"cooling_hours", "cooling_share_at_peak"})
    for price, charge, square, hours, share in _years(model):
        energy.add(price)
        demand.add(charge)
        energy_square.add(price, square)
        demand_square.add(charge, square)
        if varying_cooling:
            cooling_energy.add(price, hours)
            cooling_demand.add(charge, share)
    if not varying_cooling:
        cooling_energy.add(energy.total, model["cooling_hours"])
        cooling_demand.add(demand.total, model["cooling_share_at_peak"])
    gross_up, responsibility = model["upstream_gross_up"], model["peak_responsibility_factor"]
    load_energy = energy_square.total * (model["hours_of_load"] * model["loss_factor"])
    return (
        gross_up * (energy.total * model["hours_energized"] + demand.total),
        gross_up * (load_energy + demand_square.total * responsibility**2),
        gross_up * (cooling_energy.total + cooling_demand.total),
    )


def _years(model: Model) -> Iterator[tuple[Array, Array, Array, Array, Array]]:
    """Present cost of energy and charge, squared peak load, cooling hours and share, year after year."""
    return zip(
        present_prices(model),
        present_charges(model),
        squared_peak_loads(model),
        quantity(model, "cooling_hours"),
        quantity(model, "cooling_share_at_peak"),
        strict=False,  # the quantities that stay or grow have no end of their own
    )


def year_table(**inputs: Unpack[YearModelInputs]) -> YearTable:
    r"""The year-by-year table behind the rates, for one or several scenarios.

    Parameters
    ----------
    **inputs : YearModelInputs
        As for `loss_capitalization_rates`; `evaluation_period_years` must be a single number.

    Returns
    -------
    YearTable
        Arrays of the broadcast shape of the inputs, with the years on a last axis of their own.

    Raises
    ------
    TypeError
        If an input is not known or a required one is not given.
    ValueError
        As for `loss_capitalization_rates`, and for several evaluation periods.

    Notes
    -----
    The terms of the sums of `loss_capitalization_rates`, each from its closed form and not from the year before, so
    that the two check each other. Memory is scenarios times years: for many scenarios take the rates alone.

    References
    ----------
    .. [1] As for `loss_capitalization_rates`.

    Examples
    --------
    >>> table = year_table(discount_rate=0.06, evaluation_period_years=3, energy_price_per_kwh=0.10,
    ...                    loss_factor=0.25, peak_load_pu=0.8)
    >>> table.discount_factor.round(6).tolist()
    [0.943396, 0.889996, 0.839619]
    >>> table.no_load.round(2).tolist(), round(float(table.no_load.sum()), 2)
    ([826.42, 779.64, 735.51], 2341.56)
    """
    model = check_inputs(inputs)
    single_number("evaluation_period_years", model["evaluation_period_years"])
    with np.errstate(over="ignore", invalid="ignore", under="ignore"):
        columns = year_columns(model)
        present = columns["upstream_gross_up"] * columns.discount_factor
        arrays = (
            columns.discount_factor,
            columns.price,
            columns.carbon,
            columns.charge,
            columns.load,
            columns["cooling_hours"],
            columns["cooling_share_at_peak"],
            present * columns.no_load_cost,
            present * columns.load**2 * columns.load_cost_at_1,
            present * columns.auxiliary_cost,
        )
    shape = (*model.shape, model.years)
    return YearTable(columns.year, *(finite(np.broadcast_to(array, shape), "year table") for array in arrays))
