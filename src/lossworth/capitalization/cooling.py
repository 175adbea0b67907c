r"""Cooling that follows the growing load: fans and pumps start above a loading, so they run longer every year.

This is the part of the year-by-year model that does not separate into a sum over years times a sum over hours. The
profile is sorted once, with the hours summed up; each year of each scenario then asks it one question.

The references of the docstrings:

[RUS 1724E-301] Rural Utilities Service, Bulletin 1724E-301, 1997. Symbols read, equations from memory.
"""

from __future__ import annotations

from typing import Unpack

import numpy as np
from numpy.typing import ArrayLike

from .arguments import AT_LEAST_0, SHARE, Array, checked, finite, fitting_shape, plain
from .duration import LoadDuration
from .inputs import Model, PriceAndLoadInputs, blocks, check_inputs
from .paths import RunningSum, peak_loads, present_charges, present_prices

__all__ = ["auxiliary_rate", "cooling_hours_by_year", "cooling_share_at_peak_by_year"]


def cooling_hours_by_year(shape: LoadDuration, *, peak_load_by_year_pu: ArrayLike, starts_above_pu: ArrayLike) -> Array:
    r"""Hours of cooling in each year.

    Parameters
    ----------
    shape : LoadDuration
        Duration curve of the load over its peak, with prices where the hours are to count by price.
    peak_load_by_year_pu : array_like
        :math:`\beta_t`, at least 0, years on the last axis. [per unit of the rating]
    starts_above_pu : array_like
        Loading :math:`\theta` above which the cooling runs, at least 0; broadcasts with the peak loads. [per unit]

    Returns
    -------
    ndarray
        Hours :math:`h_{q,t}`, in the broadcast shape; what `cooling_hours_by_year` of the rates takes. [hour/year]

    Raises
    ------
    ValueError
        If a load or loading is negative or not finite, or the greatest load of the shape is not 1.

    Notes
    -----
    .. math:: h_{q,t} = \sum_{h:\ \beta_t s_h > \theta} v_h w_h

    Not included: hysteresis of the control, oil temperature, cooling that starts by outdoor temperature.

    References
    ----------
    .. [1] Follows from the year-by-year model; no publication is claimed.

    Examples
    --------
    >>> from lossworth.capitalization.duration import load_duration
    >>> shape = load_duration([0.25, 0.5, 0.75, 1.0])
    >>> cooling_hours_by_year(shape, peak_load_by_year_pu=[0.6, 0.8, 1.0], starts_above_pu=0.63).tolist()
    [0.0, 2190.0, 4380.0]
    """
    _check_shape(shape)
    beta = checked("peak_load_by_year_pu", peak_load_by_year_pu, AT_LEAST_0)
    theta = checked("starts_above_pu", starts_above_pu, AT_LEAST_0)
    fitting_shape(peak_load_by_year_pu=beta, starts_above_pu=theta)
    return shape.hours_above(_relative(theta, beta))


def cooling_share_at_peak_by_year(
    *, peak_load_by_year_pu: ArrayLike, starts_above_pu: ArrayLike, peak_responsibility_factor: ArrayLike
) -> Array:
    r"""Whether the cooling is on at system peak, in each year.

    Parameters
    ----------
    peak_load_by_year_pu : array_like
        :math:`\beta_t`, at least 0, years on the last axis. [per unit of the rating]
    starts_above_pu : array_like
        Loading :math:`\theta` above which the cooling runs, at least 0; broadcasts with the peak loads. [per unit]
    peak_responsibility_factor : array_like
        Own load at system peak over own peak load :math:`R`, 0 to 1. [1]

    Returns
    -------
    ndarray
        :math:`\kappa_t`: 1 where the own load at system peak :math:`\beta_t R` is above :math:`\theta`, else 0. [1]

    Raises
    ------
    ValueError
        If an argument is out of its bounds.

    Notes
    -----
    .. math:: \kappa_t = [\beta_t R > \theta]

    References
    ----------
    .. [1] Follows from the year-by-year model; no publication is claimed.

    Examples
    --------
    >>> cooling_share_at_peak_by_year(peak_load_by_year_pu=[0.6, 0.8], starts_above_pu=0.63,
    ...                               peak_responsibility_factor=0.9).tolist()
    [0.0, 1.0]
    """
    beta = checked("peak_load_by_year_pu", peak_load_by_year_pu, AT_LEAST_0)
    theta = checked("starts_above_pu", starts_above_pu, AT_LEAST_0)
    r = checked("peak_responsibility_factor", peak_responsibility_factor, SHARE)
    fitting_shape(peak_load_by_year_pu=beta, starts_above_pu=theta, peak_responsibility_factor=r)
    return np.asarray(beta * r > theta, dtype=np.float64)


def auxiliary_rate(
    shape: LoadDuration,
    *,
    starts_above_pu: ArrayLike,
    peak_responsibility_factor: ArrayLike = 1.0,
    **inputs: Unpack[PriceAndLoadInputs],
) -> Array:
    r"""Auxiliary loss rate C of a cooling stage that follows the growing load, for any number of scenarios.

    Parameters
    ----------
    shape : LoadDuration
        Duration curve of the load over its peak, with prices where hours are to count by price.
    starts_above_pu : array_like
        Loading :math:`\theta` above which the stage runs, at least 0. [per unit of the rating of `peak_load_pu`]
    peak_responsibility_factor : array_like
        Own load at system peak over own peak load :math:`R`, 0 to 1; decides whether the stage is on at system peak.
    **inputs : PriceAndLoadInputs
        Keyword arguments; see `PriceAndLoadInputs` for names, units, bounds and defaults.

    Returns
    -------
    ndarray
        :math:`C`, in the broadcast shape of the inputs. [currency/kW of this stage's auxiliary loss]

    Raises
    ------
    TypeError
        If an input is not known or a required one is not given.
    ValueError
        If a value is out of bounds, the greatest load of the shape is not 1, or shapes do not fit together.

    Notes
    -----
    .. math:: C = G \sum_t DF_t \left((p_t + \gamma_t) \sum_{h:\ \beta_t s_h > \theta} v_h w_h
       + D_t\, [\beta_t R > \theta]\right)

    with carbon cost :math:`\gamma_t` and delays as in `rates.loss_capitalization_rates`; where the duration curve has
    prices, the carbon cost counts by them too.

    Each year of each scenario costs one bisection of the sorted profile. Memory beyond inputs and result does not grow
    with years, hours or scenarios. Several stages are several calls, each with its own loss.

    Not included: hysteresis of the control, oil temperature, a load shape that changes over the years.

    References
    ----------
    .. [1] [RUS 1724E-301] for the rate; the sum follows from the year-by-year model.

    Examples
    --------
    >>> from lossworth.capitalization.duration import load_duration
    >>> shape = load_duration([0.25, 0.5, 0.75, 1.0])
    >>> rate = auxiliary_rate(shape, starts_above_pu=0.63, discount_rate=0, evaluation_period_years=3,
    ...                       energy_price_per_kwh=0.1, peak_load_by_year_pu=[0.6, 0.8, 1.0])
    >>> round(float(rate), 6)  # (0 + 2190 + 4380) hours at 0.1
    657.0
    """
    _check_shape(shape)
    model = check_inputs(
        inputs,
        PriceAndLoadInputs,
        starts_above_pu=checked("starts_above_pu", starts_above_pu, AT_LEAST_0),
        peak_responsibility_factor=checked("peak_responsibility_factor", peak_responsibility_factor, SHARE),
    )
    rate = np.empty(int(np.prod(model.shape)))
    with np.errstate(over="ignore", invalid="ignore", under="ignore"):
        for part, block in blocks(model):
            rate[part] = _block_rate(shape, block)
    return finite(rate, "auxiliary loss rate").reshape(model.shape)


def _block_rate(shape: LoadDuration, model: Model) -> Array:
    theta, responsibility = model["starts_above_pu"], model["peak_responsibility_factor"]
    energy, demand = RunningSum(), RunningSum()
    for price, charge, beta in zip(present_prices(model), present_charges(model), peak_loads(model), strict=False):
        energy.add(price, shape.hours_above(_relative(theta, beta)))
        demand.add(charge, np.asarray(beta * responsibility > theta, dtype=np.float64))
    return np.asarray(model["upstream_gross_up"] * (energy.total + demand.total))


def _relative(theta: Array, beta: Array) -> Array:
    """Loading over peak load; infinite, so never exceeded, where there is no load."""
    nowhere = np.full(np.broadcast_shapes(theta.shape, beta.shape), np.inf)
    return np.asarray(np.divide(theta, beta, out=nowhere, where=beta > 0))


def _check_shape(shape: LoadDuration) -> None:
    if shape.levels[-1] != 1:
        raise ValueError(
            f"shape: must be of the load over its peak, so 1 at most, got {plain(float(shape.levels[-1]))}"
        )
