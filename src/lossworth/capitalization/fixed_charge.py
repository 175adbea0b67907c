r"""Fixed charge rate forms of the loss capitalization rates, as American guides print them.

A fixed charge rate (levelized annual cost of owning plant, per unit of its price) contains return, depreciation,
taxes and insurance, and so is not the capital recovery factor in general. Where it is set equal to it, and price,
charge and load are constant, these forms equal the year-by-year model of `rates`.

Equations from memory, the texts were not at hand:

[IEEE C57.120] IEEE guide for loss evaluation of power transformers and reactors. From memory.
[EEI] Edison Electric Institute, method of transformer loss evaluation. From memory.
[RUS 1724E-301] Rural Utilities Service, Bulletin 1724E-301, 1997. Symbols read, equations from memory.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from .arguments import AT_LEAST_0, POSITIVE, SHARE, Array, Bounds, checked, finite, fitting_shape

__all__ = [
    "annual_cost_load_rate",
    "annual_cost_no_load_rate",
    "investment_auxiliary_rate",
    "investment_load_rate",
    "investment_no_load_rate",
]

_HOURS_OF_YEAR = 8760
_HOURS = Bounds(0, 8784)


def annual_cost_no_load_rate(
    capacity_cost_per_kw_year: ArrayLike, energy_cost_per_kwh: ArrayLike, *, fixed_charge_rate: ArrayLike
) -> Array:
    r"""No-load loss rate from annual costs and a fixed charge rate, after IEEE and EEI.

    Parameters
    ----------
    capacity_cost_per_kw_year : array_like
        Levelized annual cost of system capacity :math:`SC`, at least 0. [currency/(kW year)]
    energy_cost_per_kwh : array_like
        Levelized cost of energy :math:`EC`, at least 0. [currency/kWh]
    fixed_charge_rate : array_like
        Levelized annual cost per unit of the transformer's price :math:`FCR`, above 0. [1/year]

    Returns
    -------
    ndarray
        :math:`A`, in the broadcast shape. [currency/kW]

    Raises
    ------
    ValueError
        If a cost is negative or the fixed charge rate is 0 or less.

    Notes
    -----
    .. math:: A = \frac{SC + 8760\, EC}{FCR}

    Not included: the guide's increase factor for taxes and overheads, hours out of service.

    References
    ----------
    .. [1] [IEEE C57.120], [EEI]; equation from memory.

    Examples
    --------
    >>> float(annual_cost_no_load_rate(60, 0.05, fixed_charge_rate=0.16))
    3112.5
    """
    return annual_cost_load_rate(
        capacity_cost_per_kw_year,
        energy_cost_per_kwh,
        fixed_charge_rate=fixed_charge_rate,
        loss_factor=1,
        peak_responsibility_factor=1,
        equivalent_peak_load_pu=1,
    )


def annual_cost_load_rate(
    capacity_cost_per_kw_year: ArrayLike,
    energy_cost_per_kwh: ArrayLike,
    *,
    fixed_charge_rate: ArrayLike,
    loss_factor: ArrayLike,
    peak_responsibility_factor: ArrayLike,
    equivalent_peak_load_pu: ArrayLike,
) -> Array:
    r"""Load loss rate from annual costs and a fixed charge rate, after IEEE and EEI.

    Parameters
    ----------
    capacity_cost_per_kw_year : array_like
        Levelized annual cost of system capacity :math:`SC`, at least 0. [currency/(kW year)]
    energy_cost_per_kwh : array_like
        Levelized cost of energy :math:`EC`, at least 0. [currency/kWh]
    fixed_charge_rate : array_like
        Levelized annual cost per unit of the transformer's price :math:`FCR`, above 0. [1/year]
    loss_factor : array_like
        :math:`LsF`, 0 to 1. [1]
    peak_responsibility_factor : array_like
        Own load at system peak over own peak load :math:`R`, 0 to 1. The printed factor RF is its square. [1]
    equivalent_peak_load_pu : array_like
        Equivalent annual peak load :math:`PL`, at least 0. [per unit of the rating of the guaranteed load loss]

    Returns
    -------
    ndarray
        :math:`B`, in the broadcast shape. [currency/kW]

    Raises
    ------
    ValueError
        If an argument is out of its bounds.

    Notes
    -----
    .. math:: B = \frac{(SC\, RF + 8760\, EC\, LsF)\, PL^2}{FCR}, \qquad RF = R^2

    Not included: the guide's increase factor for taxes and overheads. For PL see `load.equivalent_peak_load`.

    References
    ----------
    .. [1] [IEEE C57.120], [EEI]; equation from memory.

    Examples
    --------
    >>> float(annual_cost_load_rate(60, 0.05, fixed_charge_rate=0.16, loss_factor=0.25,
    ...                             peak_responsibility_factor=0.5, equivalent_peak_load_pu=1))
    778.125
    """
    capacity = checked("capacity_cost_per_kw_year", capacity_cost_per_kw_year, AT_LEAST_0)
    energy = checked("energy_cost_per_kwh", energy_cost_per_kwh, AT_LEAST_0)
    charge = checked("fixed_charge_rate", fixed_charge_rate, POSITIVE)
    lsf = checked("loss_factor", loss_factor, SHARE)
    r = checked("peak_responsibility_factor", peak_responsibility_factor, SHARE)
    load = checked("equivalent_peak_load_pu", equivalent_peak_load_pu, AT_LEAST_0)
    fitting_shape(
        capacity_cost_per_kw_year=capacity,
        energy_cost_per_kwh=energy,
        fixed_charge_rate=charge,
        loss_factor=lsf,
        peak_responsibility_factor=r,
        equivalent_peak_load_pu=load,
    )
    with np.errstate(over="ignore"):
        rate = (capacity * r**2 + _HOURS_OF_YEAR * energy * lsf) * load**2 / charge
    return finite(rate, "rate")


def investment_no_load_rate(
    system_investment_per_kw: ArrayLike, energy_cost_per_kwh: ArrayLike, *, fixed_charge_rate: ArrayLike
) -> Array:
    r"""No-load loss rate from the investment in the system and a fixed charge rate, after RUS.

    Parameters
    ----------
    system_investment_per_kw : array_like
        Investment in the system that serves 1 kW of loss :math:`SI`, at least 0. [currency/kW]
    energy_cost_per_kwh : array_like
        Cost of energy :math:`EC`, at least 0. [currency/kWh]
    fixed_charge_rate : array_like
        Annual fixed charges per unit of investment :math:`FCR`, above 0. [1/year]

    Returns
    -------
    ndarray
        :math:`A`, in the broadcast shape. [currency/kW]

    Raises
    ------
    ValueError
        If a cost is negative or the fixed charge rate is 0 or less.

    Notes
    -----
    .. math:: A = SI + \frac{8760\, EC}{FCR}

    Not included: hours out of service.

    References
    ----------
    .. [1] [RUS 1724E-301]; symbols read, equation from memory.

    Examples
    --------
    >>> float(investment_no_load_rate(500, 0.05, fixed_charge_rate=0.12))
    4150.0
    """
    return _investment_rate(system_investment_per_kw, energy_cost_per_kwh, fixed_charge_rate, _HOURS_OF_YEAR, 1)


def investment_load_rate(
    system_investment_per_kw: ArrayLike,
    energy_cost_per_kwh: ArrayLike,
    *,
    fixed_charge_rate: ArrayLike,
    loss_factor: ArrayLike,
    peak_responsibility_factor: ArrayLike,
    peak_load_pu: ArrayLike,
) -> Array:
    r"""Load loss rate from the investment in the system and a fixed charge rate, after RUS.

    Parameters
    ----------
    system_investment_per_kw : array_like
        Investment in the system that serves 1 kW of loss :math:`SI`, at least 0. [currency/kW]
    energy_cost_per_kwh : array_like
        Cost of energy :math:`EC`, at least 0. [currency/kWh]
    fixed_charge_rate : array_like
        Annual fixed charges per unit of investment :math:`FCR`, above 0. [1/year]
    loss_factor : array_like
        :math:`LsF`, 0 to 1. [1]
    peak_responsibility_factor : array_like
        Own load at system peak over own peak load :math:`R`, 0 to 1 (the bulletin's K). [1]
    peak_load_pu : array_like
        Peak load over rating :math:`PR`, at least 0 (the bulletin's G). [per unit]

    Returns
    -------
    ndarray
        :math:`B`, in the broadcast shape. [currency/kW]

    Raises
    ------
    ValueError
        If an argument is out of its bounds.

    Notes
    -----
    .. math:: B = PR^2 \left(SI\, R^2 + \frac{8760\, EC\, LsF}{FCR}\right)

    Not included: load growth; put an equivalent peak load for PR.

    References
    ----------
    .. [1] [RUS 1724E-301]; symbols read, equation from memory.

    Examples
    --------
    >>> float(investment_load_rate(500, 0.05, fixed_charge_rate=0.12, loss_factor=0.25,
    ...                            peak_responsibility_factor=1, peak_load_pu=0.5))
    353.125
    """
    lsf = checked("loss_factor", loss_factor, SHARE)
    r = checked("peak_responsibility_factor", peak_responsibility_factor, SHARE)
    load = checked("peak_load_pu", peak_load_pu, AT_LEAST_0)
    fitting_shape(loss_factor=lsf, peak_responsibility_factor=r, peak_load_pu=load)
    per_squared_load = _investment_rate(
        system_investment_per_kw, energy_cost_per_kwh, fixed_charge_rate, _HOURS_OF_YEAR * lsf, r**2
    )
    fitting_shape(peak_load_pu=load, other_arguments=per_squared_load)
    return finite(load**2 * per_squared_load, "rate")


def investment_auxiliary_rate(
    system_investment_per_kw: ArrayLike,
    energy_cost_per_kwh: ArrayLike,
    *,
    fixed_charge_rate: ArrayLike,
    cooling_hours: ArrayLike,
    cooling_share_at_peak: ArrayLike,
) -> Array:
    r"""Auxiliary loss rate from the investment in the system and a fixed charge rate, after RUS.

    Parameters
    ----------
    system_investment_per_kw : array_like
        Investment in the system that serves 1 kW of loss :math:`SI`, at least 0. [currency/kW]
    energy_cost_per_kwh : array_like
        Cost of energy :math:`EC`, at least 0. [currency/kWh]
    fixed_charge_rate : array_like
        Annual fixed charges per unit of investment :math:`FCR`, above 0. [1/year]
    cooling_hours : array_like
        Hours a year with fans or pumps on :math:`h`, 0 to 8784. [hour/year]
    cooling_share_at_peak : array_like
        Share of the cooling that is on at system peak, 0 to 1. [1]

    Returns
    -------
    ndarray
        :math:`C`, in the broadcast shape. [currency/kW]

    Raises
    ------
    ValueError
        If an argument is out of its bounds.

    Notes
    -----
    .. math:: C = share \cdot SI + \frac{h\, EC}{FCR}

    Not included: cooling that follows the growing load (`cooling.auxiliary_rate`).

    References
    ----------
    .. [1] [RUS 1724E-301]; symbols read, equation from memory.

    Examples
    --------
    >>> float(investment_auxiliary_rate(500, 0.05, fixed_charge_rate=0.10, cooling_hours=1000,
    ...                                 cooling_share_at_peak=1))
    1000.0
    """
    hours = checked("cooling_hours", cooling_hours, _HOURS)
    share = checked("cooling_share_at_peak", cooling_share_at_peak, SHARE)
    return _investment_rate(system_investment_per_kw, energy_cost_per_kwh, fixed_charge_rate, hours, share)


def _investment_rate(
    investment: ArrayLike, energy_cost: ArrayLike, fixed_charge_rate: ArrayLike, hours: ArrayLike, share: ArrayLike
) -> Array:
    """Share of the investment plus the cost of energy of so many hours over the fixed charge rate."""
    si = checked("system_investment_per_kw", investment, AT_LEAST_0)
    energy = checked("energy_cost_per_kwh", energy_cost, AT_LEAST_0)
    charge = checked("fixed_charge_rate", fixed_charge_rate, POSITIVE)
    hours, share = np.asarray(hours, dtype=np.float64), np.asarray(share, dtype=np.float64)
    fitting_shape(
        system_investment_per_kw=si,
        energy_cost_per_kwh=energy,
        fixed_charge_rate=charge,
        hours_or_loss_factor=hours,
        share_at_peak=share,
    )
    with np.errstate(over="ignore"):
        return finite(share * si + hours * energy / charge, "rate")
