"""Load of a transformer: loss factor from the load factor, peak load year by year, equivalent peak load.

The references of the docstrings:

[Gonen] T. Gonen, Electric Power Distribution System Engineering. Example 2.9 read.
[IEEE C57.120] IEEE guide for loss evaluation of power transformers and reactors. From memory.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from .arguments import AT_LEAST_0, POSITIVE, RATE, SHARE, Array, Bounds, checked, finite, fitting_shape, single_number

__all__ = ["PUBLISHED_COEFFICIENTS", "equivalent_peak_load", "loss_factor", "loss_factor_bounds", "peak_load_by_year"]

#: Coefficients k of the loss factor in print: value, where from. Each is an assumption; a profile gives the factor.
PUBLISHED_COEFFICIENTS: tuple[tuple[float, str], ...] = (
    (0.30, "Gonen, Electric Power Distribution System Engineering, Example 2.9 (read)"),
    (0.20, "Indian practice (from memory)"),
    (0.15, "distribution transformers, Buller and Woodrow (from memory)"),
    (0.08, "Gustafson (from memory)"),
)

_CAP = Bounds(0, lowest_included=False, infinity=True)
_YEARS = Bounds(1, 1000, whole=True)


def loss_factor(load_factor: ArrayLike, coefficient: ArrayLike) -> Array:
    r"""Loss factor estimated from the load factor.

    Parameters
    ----------
    load_factor : array_like
        Mean load over peak load :math:`LF`, 0 to 1. [1]
    coefficient : array_like
        Coefficient :math:`k`, 0 to 1. [1]

    Returns
    -------
    ndarray
        :math:`LsF`: mean of the squared load over the square of the peak load, in the broadcast shape. [1]

    Raises
    ------
    ValueError
        If a load factor or a coefficient lies outside 0 to 1.

    Notes
    -----
    .. math:: LsF = k\,LF + (1 - k)\,LF^2

    so that :math:`LF^2 \le LsF \le LF`, the bounds of every load between 0 and its peak. For k see
    `PUBLISHED_COEFFICIENTS`; a fixed k is an assumption that belongs in print. With a load profile the loss factor is
    computed (`profile.loss_factor`), not estimated.

    Not included: a price that moves with the load (`profile.price_weighted_loss_factor`).

    References
    ----------
    .. [1] [Gonen] Example 2.9, with k = 0.3.

    Examples
    --------
    >>> round(float(loss_factor(0.55, 0.15)), 6)
    0.339625
    """
    lf = checked("load_factor", load_factor, SHARE)
    k = checked("coefficient", coefficient, SHARE)
    fitting_shape(load_factor=lf, coefficient=k)
    return np.asarray(lf * (k + (1 - k) * lf))


def loss_factor_bounds(load_factor: ArrayLike) -> tuple[Array, Array]:
    r"""Least and greatest loss factor that a load factor allows.

    Parameters
    ----------
    load_factor : array_like
        :math:`LF`, 0 to 1. [1]

    Returns
    -------
    tuple of ndarray
        :math:`LF^2` (a constant load, then none) and :math:`LF` (full load, then none). [1]

    Raises
    ------
    ValueError
        If a load factor lies outside 0 to 1.

    Notes
    -----
    .. math:: LF^2 \le LsF \le LF

    since the mean of a square is at least the square of the mean, and a share of the peak is at least its square.

    References
    ----------
    .. [1] Follows from the definitions; no publication is claimed.

    Examples
    --------
    >>> [round(float(bound), 4) for bound in loss_factor_bounds(0.55)]
    [0.3025, 0.55]
    """
    lf = checked("load_factor", load_factor, SHARE)
    return np.asarray(lf**2), np.array(lf)


def peak_load_by_year(
    peak_load_pu: ArrayLike,
    years: int,
    *,
    peak_load_growth: ArrayLike = 0.0,
    peak_load_cap_pu: ArrayLike = np.inf,
) -> Array:
    r"""Peak load of every year of the evaluation period.

    Parameters
    ----------
    peak_load_pu : array_like
        Peak load of year 1 :math:`\beta_1`. [per unit of the rating at which the load loss is guaranteed]
    years : int
        Evaluation period :math:`N`, 1 to 1000. [year]
    peak_load_growth : array_like
        Growth :math:`g` as a fraction, above -1. [1/year]
    peak_load_cap_pu : array_like
        Greatest peak load :math:`\beta_{cap}`, above 0; infinite for none. [per unit of the rating]

    Returns
    -------
    ndarray
        :math:`\beta_t` in the broadcast shape, with the years on a last axis of its own. [per unit of the rating]

    Raises
    ------
    ValueError
        If an argument is out of its bounds.

    Notes
    -----
    .. math:: \beta_t = \min\left(\beta_1 (1 + g)^{t-1},\; \beta_{cap}\right)

    The cap acts on the load, not on its square. A load that shrinks is capped as long as it stands above the cap.

    Not included: load that is moved to another unit and grows again.

    References
    ----------
    .. [1] Definition of the year-by-year model; no publication is claimed.

    Examples
    --------
    >>> peak_load_by_year(0.60, 4, peak_load_growth=0.10, peak_load_cap_pu=0.70).round(3).tolist()
    [0.6, 0.66, 0.7, 0.7]
    """
    first = checked("peak_load_pu", peak_load_pu, AT_LEAST_0)
    n = single_number("years", checked("years", years, _YEARS))
    g = checked("peak_load_growth", peak_load_growth, RATE)
    cap = checked("peak_load_cap_pu", peak_load_cap_pu, _CAP)
    fitting_shape(peak_load_pu=first, peak_load_growth=g, peak_load_cap_pu=cap)
    with np.errstate(over="ignore", invalid="ignore"):
        growth = np.exp(np.log1p(g)[..., np.newaxis] * np.arange(n))
        load = np.minimum(first[..., np.newaxis] * growth, cap[..., np.newaxis])
    return finite(load, "peak load")


def equivalent_peak_load(
    peak_load_by_year_pu: ArrayLike, *, discount_factor: ArrayLike, energy_price_per_kwh: ArrayLike
) -> Array:
    r"""Constant peak load with the same present value of the energy part of the load loss.

    Parameters
    ----------
    peak_load_by_year_pu : array_like
        :math:`\beta_t`, years on the last axis. [per unit of the rating]
    discount_factor : array_like
        :math:`DF_t`, years on the last axis. [1]
    energy_price_per_kwh : array_like
        :math:`p_t`, years on the last axis; a single number where the price is constant. With a carbon cost the sum of
        both. [currency/kWh]

    Returns
    -------
    ndarray
        :math:`PL`, in the broadcast shape without the axis of years. [per unit of the rating]

    Raises
    ------
    ValueError
        If a value is negative or not finite, or all weights of a row are 0.

    Notes
    -----
    .. math:: PL^2 = \frac{\sum_t w_t \beta_t^2}{\sum_t w_t}, \qquad w_t = DF_t\, p_t

    The discount factors alone are the weights only where the price is constant, which is why the price has no
    default here.

    Not included: the demand part, whose weights are :math:`DF_t D_t`; the two equivalent loads differ where price
    and demand charge escalate differently.

    References
    ----------
    .. [1] [IEEE C57.120], equivalent annual peak load; from memory.

    Examples
    --------
    >>> load = peak_load_by_year(0.60, 3, peak_load_growth=0.10)
    >>> round(float(equivalent_peak_load(load, discount_factor=[1, 1, 1], energy_price_per_kwh=0.1)), 6)
    0.663997
    """
    beta = checked("peak_load_by_year_pu", peak_load_by_year_pu, AT_LEAST_0)
    factor = checked("discount_factor", discount_factor, AT_LEAST_0)
    price = checked("energy_price_per_kwh", energy_price_per_kwh, AT_LEAST_0)
    shape = fitting_shape(peak_load_by_year_pu=beta, discount_factor=factor, energy_price_per_kwh=price)
    if not shape:
        raise ValueError("peak_load_by_year_pu: must have the years on its last axis, got a single number")
    weight = np.broadcast_to(factor * price, shape)
    total = weight.sum(axis=-1)
    checked("discount_factor * energy_price_per_kwh, summed over the years", total, POSITIVE)
    return np.asarray(np.sqrt((weight * beta**2).sum(axis=-1) / total))
