"""Where rounded costs may tie, or stand the other way round, about a border of unrounded ones."""

from __future__ import annotations

from collections.abc import Callable, Collection

import numpy as np
from numpy.typing import NDArray

from ..money import RoundingMode
from .lot_model import LotModel

__all__ = ["LOSS_PARTS", "PRICE_PART", "rounded_ties", "rounding_reach"]

Array = NDArray[np.float64]
PRICE_PART = 0
LOSS_PARTS = (1, 2, 3)
_WIDENING = 1.5
_NEARLY = 1 - 1e-6  # a straight gap meets its bound up to the last bits


def rounding_reach(model: LotModel, one: int, other: int, moving: Collection[int]) -> tuple[float, float]:
    """How far rounding can move the cost of one bid against that of another.

    Parameters
    ----------
    model : LotModel
        With its rounding.
    one, other : int
        Positions of the bids.
    moving : collection of int
        Cost parts that move with the input, 0 price, 1 to 3 losses: their rounding is not known in advance.

    Returns
    -------
    shift : float
        Known rounding of the parts that stay, other less one. [currency]
    reach : float
        Most that the rounding of the moving parts adds or takes away. [currency]
    """
    rounding, weights = model.rounding, _loads(model)
    parts = set(moving) | (set(LOSS_PARTS) if model.basis == "study" else set())
    stay = [part for part in (PRICE_PART, *LOSS_PARTS) if part not in parts]
    shift = float(rounding.of_parts[other, stay].sum() - rounding.of_parts[one, stay].sum())
    counts = [sum(1 for part in parts if weights[bid, part]) for bid in (one, other)]
    half = rounding.mode == RoundingMode.HALF_AWAY_FROM_ZERO
    reach = rounding.step * (sum(counts) / 2 if half else max(counts))
    if model.rates is not None and not parts.isdisjoint(LOSS_PARTS):
        apart = np.abs(model.losses[one] - model.losses[other]).sum()
        reach += float(apart) * rounding.rate_step * (0.5 if half else 1.0)
    return shift, reach


def _loads(model: LotModel) -> Array:
    """What each cost part of each bid hangs on; zero where there is nothing to round."""
    return np.column_stack([model.price, model.losses])


def rounded_ties(
    gap: Callable[[Array], Array], at: Array, shift: Array, reach: Array, bounds: tuple[float, float]
) -> Array:
    """Intervals of the input outside of which rounded costs rank as unrounded ones.

    Parameters
    ----------
    gap : callable
        Unrounded cost of the one bid of each border less that of the other at given values; borders by two values.
    at : ndarray
        The borders, where the gap is zero.
    shift, reach : ndarray
        As `rounding_reach` gives them, one a border.
    bounds : tuple of float
        Admissible values.

    Returns
    -------
    ndarray
        Least and greatest value, borders by two; both are the border where rounding can do nothing.

    Notes
    -----
    The rounded gap lies within `reach` of the unrounded gap plus `shift`: its sign is certain where that sum is farther
    from zero. Near the border the gap is taken to grow with the distance from it.
    """
    border, side = at[:, np.newaxis], np.array([-1.0, 1.0])
    ends = np.broadcast_to(np.array(bounds), (at.size, 2))
    room = np.abs(ends - border)
    step = np.minimum(np.maximum(np.abs(border), 1e-3) * 1e-6, room)
    near = gap(border + side * step)
    least = np.maximum(reach[:, np.newaxis] - shift[:, np.newaxis] * np.sign(near), 0)
    with np.errstate(divide="ignore", invalid="ignore"):
        distance = np.where(least > 0, np.minimum(least / np.abs(near) * step, room), 0.0)
    distance = np.where(np.isnan(distance), room, distance)
    while True:
        edge = np.where(distance < room, border + side * distance, np.where(room > 0, ends, border))
        short = (np.abs(gap(edge)) < least * _NEARLY) & (distance < room)
        if not short.any():
            return np.asarray(edge)
        distance = np.where(short, distance * _WIDENING, distance)
