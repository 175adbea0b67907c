r"""What a load profile says: load factor, loss factor, price-weighted loss factor and hours.

A profile is an array of loads, one a step, on the last axis: a year of hours or quarter-hours, or the steps of
typical days with weights. Loads are currents or apparent powers in any one unit, reverse flow as magnitude. Gaps,
doubled steps and clock changes are the reader's business; here every step counts by its weight.

The references of the docstrings:

[Gonen] T. Gonen, Electric Power Distribution System Engineering. Definitions from memory, Example 2.9 read.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from .arguments import AT_LEAST_0, POSITIVE, SHARE, Array, checked, fitting_shape

__all__ = [
    "coefficient_implied",
    "load_factor",
    "load_shape",
    "loss_factor",
    "peak_load",
    "price_weighted_hours",
    "price_weighted_loss_factor",
    "priced",
    "steps_of",
]


def peak_load(load: ArrayLike) -> Array:
    """Greatest load of a profile.

    Parameters
    ----------
    load : array_like
        Loads, at least 0, steps on the last axis. [any unit]

    Returns
    -------
    ndarray
        Greatest load, without the axis of steps. [unit of the load]

    Raises
    ------
    ValueError
        If a load is negative or not finite, or the peak is 0.

    Notes
    -----
    The peak of a profile of mean loads lies below that of the momentary load.

    Examples
    --------
    >>> float(peak_load([20, 80, 50]))
    80.0
    """
    steps = steps_of("load", load)
    return checked("peak of the load", steps.max(axis=-1), POSITIVE)


def load_shape(load: ArrayLike) -> Array:
    r"""Load over the peak load.

    Parameters
    ----------
    load : array_like
        Loads, at least 0, steps on the last axis. [any unit]

    Returns
    -------
    ndarray
        :math:`s_h`, 0 to 1, in the shape of the load. [1]

    Raises
    ------
    ValueError
        If a load is negative or not finite, or the peak is 0.

    Notes
    -----
    .. math:: s_h = \frac{load_h}{\max_h load_h}

    Examples
    --------
    >>> load_shape([20, 80, 50]).tolist()
    [0.25, 1.0, 0.625]
    """
    return np.asarray(steps_of("load", load) / peak_load(load)[..., np.newaxis])


def load_factor(load: ArrayLike, *, weights: ArrayLike = 1.0) -> Array:
    r"""Mean load over peak load.

    Parameters
    ----------
    load : array_like
        Loads, at least 0, steps on the last axis. [any unit]
    weights : array_like
        How much of the year each step stands for, at least 0, in any scale; equal by default. [any unit]

    Returns
    -------
    ndarray
        :math:`LF`, without the axis of steps. [1]

    Raises
    ------
    ValueError
        If a load or weight is negative or not finite, the peak is 0, or all weights are 0.

    Notes
    -----
    .. math:: LF = \frac{\sum_h v_h s_h}{\sum_h v_h}

    References
    ----------
    .. [1] [Gonen], definition of the load factor; from memory.

    Examples
    --------
    >>> float(load_factor([20, 80], weights=[3, 1]))
    0.4375
    """
    return _mean(load_shape(load), "weights", weights)


def loss_factor(load: ArrayLike, *, weights: ArrayLike = 1.0) -> Array:
    r"""Mean of the squared load over the square of the peak load.

    Parameters
    ----------
    load : array_like
        Loads, at least 0, steps on the last axis. [any unit]
    weights : array_like
        How much of the year each step stands for, at least 0, in any scale; equal by default. [any unit]

    Returns
    -------
    ndarray
        :math:`LsF`, without the axis of steps. [1]

    Raises
    ------
    ValueError
        If a load or weight is negative or not finite, the peak is 0, or all weights are 0.

    Notes
    -----
    .. math:: LsF = \frac{\sum_h v_h s_h^2}{\sum_h v_h}, \qquad LF^2 \le LsF \le LF

    Not included: a price that moves with the load; the swing of the load within a step, which raises the loss.

    References
    ----------
    .. [1] [Gonen], definition of the loss factor; from memory.

    Examples
    --------
    >>> float(loss_factor([20, 80], weights=[3, 1]))
    0.296875
    """
    return _mean(load_shape(load) ** 2, "weights", weights)


def price_weighted_loss_factor(load: ArrayLike, price: ArrayLike, *, weights: ArrayLike = 1.0) -> Array:
    r"""Loss factor in which each step counts by its energy price.

    Parameters
    ----------
    load : array_like
        Loads, at least 0, steps on the last axis. [any unit]
    price : array_like
        Energy price of each step, at least 0, in any scale. [currency/kWh, or a multiplier]
    weights : array_like
        How much of the year each step stands for, at least 0, in any scale; equal by default. [any unit]

    Returns
    -------
    ndarray
        :math:`LsF_w`, to be used with the mean price of the year. [1]

    Raises
    ------
    ValueError
        If a load, price or weight is negative or not finite, or all products of price and weight are 0.

    Notes
    -----
    .. math:: LsF_w = \frac{\sum_h v_h w_h s_h^2}{\sum_h v_h w_h}

    It exceeds the loss factor where load and price move together. The mean price that goes with it is that over
    time, :math:`\sum v_h p_h / \sum v_h`, not that over energy sold.

    Not included: negative prices.

    References
    ----------
    .. [1] Follows from the year-by-year model; no publication is claimed.

    Examples
    --------
    >>> float(price_weighted_loss_factor([20, 80], [1, 3])), float(loss_factor([20, 80]))
    (0.765625, 0.53125)
    """
    return _mean(load_shape(load) ** 2, "price * weights", priced(price, weights))


def price_weighted_hours(
    share_on: ArrayLike, price: ArrayLike, *, weights: ArrayLike = 1.0, hours_per_year: float = 8760.0
) -> Array:
    r"""Hours a year of being on, each step counted by its energy price: for hours energized, or of cooling.

    Parameters
    ----------
    share_on : array_like
        Share of each step in which voltage is applied or the cooling runs, 0 to 1, steps on the last axis. [1]
    price : array_like
        Energy price of each step, at least 0, in any scale. [currency/kWh, or a multiplier]
    weights : array_like
        How much of the year each step stands for, at least 0, in any scale; equal by default. [any unit]
    hours_per_year : float
        Hours that all the steps make together. [hour/year]

    Returns
    -------
    ndarray
        Hours to be used with the mean price of the year. [hour/year]

    Raises
    ------
    ValueError
        If a share lies outside 0 to 1, a price or weight is negative, or all products of price and weight are 0.

    Notes
    -----
    .. math:: H\, \frac{\sum_h v_h w_h u_h}{\sum_h v_h w_h}

    References
    ----------
    .. [1] Follows from the year-by-year model; no publication is claimed.

    Examples
    --------
    >>> float(price_weighted_hours([0, 1], [1, 3]))
    6570.0
    """
    hours = checked("hours_per_year", hours_per_year, AT_LEAST_0)
    return np.asarray(
        hours
        * _mean(steps_of("share_on", checked("share_on", share_on, SHARE)), "price * weights", priced(price, weights))
    )


def coefficient_implied(load_factor: ArrayLike, loss_factor: ArrayLike) -> Array:
    r"""Coefficient k that would give a loss factor from a load factor.

    Parameters
    ----------
    load_factor : array_like
        :math:`LF`, above 0 and below 1. [1]
    loss_factor : array_like
        :math:`LsF`, 0 to 1. [1]

    Returns
    -------
    ndarray
        :math:`k`, in the broadcast shape; 0 to 1 for factors of one profile. [1]

    Raises
    ------
    ValueError
        If a load factor is 0 or 1 (every k gives the same loss factor), or a factor lies outside 0 to 1.

    Notes
    -----
    .. math:: k = \frac{LsF - LF^2}{LF - LF^2}

    References
    ----------
    .. [1] [Gonen], the form of Example 2.9 solved for k.

    Examples
    --------
    >>> round(float(coefficient_implied(0.55, 0.339625)), 6)
    0.15
    """
    lf = checked("load_factor", load_factor, SHARE)
    lsf = checked("loss_factor", loss_factor, SHARE)
    fitting_shape(load_factor=lf, loss_factor=lsf)
    return np.asarray((lsf - lf**2) / checked("load_factor - load_factor^2", lf * (1 - lf), POSITIVE))


def steps_of(name: str, values: ArrayLike) -> Array:
    """Checked values of a profile.

    Parameters
    ----------
    name : str
        Name of the argument.
    values : array_like
        At least 0, steps on the last axis.

    Returns
    -------
    ndarray
        The values.

    Raises
    ------
    ValueError
        If a value is negative or not finite, or there is no axis of steps.
    """
    steps = checked(name, values, AT_LEAST_0)
    if steps.ndim == 0:
        raise ValueError(f"{name}: must have the steps on its last axis, got a single number")
    return steps


def priced(price: ArrayLike, weights: ArrayLike) -> Array:
    """Price times weight of each step, checked.

    Parameters
    ----------
    price, weights : array_like
        At least 0, in any scale.

    Returns
    -------
    ndarray
        Products in the broadcast shape.

    Raises
    ------
    ValueError
        If a value is negative or not finite, or shapes do not fit together.
    """
    p, v = checked("price", price, AT_LEAST_0), checked("weights", weights, AT_LEAST_0)
    fitting_shape(price=p, weights=v)
    return np.asarray(p * v)


def _mean(values: Array, name: str, weights: ArrayLike) -> Array:
    """Weighted mean over the steps."""
    v = checked(name, weights, AT_LEAST_0)
    shape = fitting_shape(steps=values, **{name: v})
    if shape[-1] != values.shape[-1]:
        raise ValueError(f"{name}: must have {values.shape[-1]} steps on its last axis, got {shape[-1]}")
    v = np.broadcast_to(v, shape)
    total = checked(f"{name}, summed over the steps", v.sum(axis=-1), POSITIVE)
    return np.asarray((values * v).sum(axis=-1) / total)
