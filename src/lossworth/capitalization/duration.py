"""Duration curve of a load profile: sorted loads with summed hours, asked by bisection.

The references of the docstrings:

[Gonen] T. Gonen, Electric Power Distribution System Engineering. Definitions from memory.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from .arguments import AT_LEAST_0, POSITIVE, Array, checked
from .profile import priced, steps_of

__all__ = ["LoadDuration", "load_duration"]


@dataclass(frozen=True, slots=True)
class LoadDuration:
    """Hours a year above every load: the duration curve of one profile, ready to be asked.

    Parameters
    ----------
    levels : ndarray
        Loads in rising order, one a step. [unit of the load]
    hours : ndarray
        One longer than the levels: the hours of the steps from this one on; the last is 0. [hour/year]
    """

    levels: Array
    hours: Array

    def hours_above(self, loading: ArrayLike) -> Array:
        """Hours a year in which the load is above a loading.

        Parameters
        ----------
        loading : array_like
            Loadings; infinite ones are never exceeded. [unit of the load]

        Returns
        -------
        ndarray
            Hours, in the shape of the loadings, found by bisection. [hour/year]

        Raises
        ------
        ValueError
            If a loading is not a number.
        """
        if np.isnan(loading).any():
            raise ValueError("loading: must be a number, got nan")
        return np.asarray(self.hours[np.searchsorted(self.levels, loading, side="right")])


def load_duration(
    load: ArrayLike, *, price: ArrayLike = 1.0, weights: ArrayLike = 1.0, hours_per_year: float = 8760.0
) -> LoadDuration:
    r"""Duration curve of a profile: how many hours a year the load is above each load.

    Parameters
    ----------
    load : array_like
        Loads of one profile, at least 0, on one axis. [any unit]
    price : array_like
        Energy price of each step, at least 0, in any scale, for hours that count by price; equal by default.
    weights : array_like
        How much of the year each step stands for, at least 0, in any scale; equal by default. [any unit]
    hours_per_year : float
        Hours that all the steps make together. [hour/year]

    Returns
    -------
    LoadDuration
        Sorted loads with cumulative hours.

    Raises
    ------
    ValueError
        If the load has not one axis, a value is negative or not finite, or all weights are 0.

    Notes
    -----
    The hours above a loading are :math:`H \sum_{h: load_h > x} v_h w_h / \sum_h v_h w_h`.

    References
    ----------
    .. [1] [Gonen], load duration curve; from memory.

    Examples
    --------
    >>> curve = load_duration([0.2, 0.9, 0.5, 0.5])
    >>> curve.hours_above([0, 0.2, 0.5, 0.9]).tolist()
    [8760.0, 6570.0, 2190.0, 0.0]
    """
    steps = steps_of("load", load)
    if steps.ndim != 1:
        raise ValueError(f"load: must be one profile on one axis, got shape {steps.shape}")
    weight = np.broadcast_to(priced(price, weights), steps.shape)
    total = checked("price * weights, summed over the steps", weight.sum(), POSITIVE)
    hours = checked("hours_per_year", hours_per_year, AT_LEAST_0)
    order = np.argsort(steps, kind="stable")
    from_here_on = np.append(np.cumsum(weight[order][::-1])[::-1], 0.0)
    return LoadDuration(steps[order], from_here_on * (hours / total))
