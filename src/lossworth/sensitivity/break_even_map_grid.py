"""Who leads as any two inputs move together: a grid, with its borders refined along every line of the grid.

The plane of A and B has exact polygons (`break_even_map`); other pairs have curved borders. A region that lies wholly
between the lines of the grid is not seen.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from .lot_model import LotModel

__all__ = ["Axis", "GridBorder", "TwoInputMap", "two_input_map"]

Array = NDArray[np.float64]
Indices = NDArray[np.intp]
_HALVINGS = 44
_WHOLE = "evaluation_period_years"


@dataclass(frozen=True, slots=True)
class Axis:
    """One input of a two-way map.

    Parameters
    ----------
    input : str
        Name, as `LotModel.costs_of` takes it.
    lowest, highest : float
        Range.
    points : int
        Lines of the grid; for the evaluation period every whole year of the range is one.
    """

    input: str
    lowest: float
    highest: float
    points: int = 61

    @property
    def values(self) -> Array:
        """Values of the grid lines."""
        if self.input == _WHOLE:
            return np.arange(np.ceil(self.lowest), np.floor(self.highest) + 1)
        return np.linspace(self.lowest, self.highest, self.points)


@dataclass(frozen=True, slots=True, eq=False)
class GridBorder:
    """Points at which first place passes from one bid to another, on the lines of the grid.

    Parameters
    ----------
    between : tuple of str
        The two bids, in rank order.
    points : ndarray
        Values of both inputs, (k, 2); exact to the last bits, halfway between whole years.
    """

    between: tuple[str, str]
    points: Array


@dataclass(frozen=True, slots=True, eq=False)
class TwoInputMap:
    """Who leads for each pair of values.

    Parameters
    ----------
    lot_id, basis : str
        As in the model.
    across, up : Axis
        The two inputs.
    leader : ndarray of int
        Position of the leading bid, values of `up` by values of `across`; of a tie the one that ranks first.
    cost : ndarray
        Its cost of one unit. [currency]
    borders : tuple of GridBorder
        By pairs of bids.
    """

    lot_id: str
    basis: str
    across: Axis
    up: Axis
    leader: Indices
    cost: Array
    borders: tuple[GridBorder, ...]


def two_input_map(model: LotModel, across: Axis, up: Axis) -> TwoInputMap:
    """Map of a lot over two inputs.

    Parameters
    ----------
    model : LotModel
        The lot.
    across, up : Axis
        Two different inputs with at least two values each.

    Returns
    -------
    TwoInputMap
        Leaders on the grid, and refined borders.

    Raises
    ------
    KeyError
        If an input is not known.
    ValueError
        If both axes are the same input, or a range has less than two values.
    """
    x, y = across.values, up.values
    if across.input == up.input or min(x.size, y.size) < 2:
        raise ValueError("a two-way map needs two different inputs and two values of each")
    costs = model.costs_of({across.input: x[np.newaxis, :], up.input: y[:, np.newaxis]})
    leader = costs.argmin(axis=0)
    found = [*_along(model, across, up, leader), *_along(model, up, across, leader.T)]
    return TwoInputMap(model.lot_id, model.basis, across, up, leader, costs.min(axis=0), _sorted(model, found, across))


@dataclass(frozen=True, slots=True, eq=False)
class _Crossings:
    """Borders found along one axis: who on both sides, where."""

    moving: Axis
    one: Indices
    other: Indices
    at: Array
    fixed: Array


def _along(model: LotModel, moving: Axis, held: Axis, leader: Indices) -> list[_Crossings]:
    """Borders on the lines of the grid along one axis, from left to right until the leader on the right is reached."""
    row, column = np.nonzero(leader[:, :-1] != leader[:, 1:])
    left, right, fixed = moving.values[column], moving.values[column + 1], held.values[row]
    one, last = leader[row, column], leader[row, column + 1]
    if moving.input == _WHOLE:
        return [_Crossings(moving, one, last, (left + right) / 2, fixed)]
    found = []
    while one.size:
        left, beyond = _first_change(model, (moving.input, held.input), left, right, fixed, one)
        found.append(_Crossings(moving, one, beyond, left, fixed))
        more = beyond != last
        left, right, fixed, one, last = left[more], right[more], fixed[more], beyond[more], last[more]
    return found


def _first_change(
    model: LotModel, names: tuple[str, str], left: Array, right: Array, fixed: Array, one: Indices
) -> tuple[Array, Indices]:
    """A value between left and right at which the leader on the left loses first place, and to whom."""
    low, high = left.copy(), right.copy()
    for _ in range(_HALVINGS):
        middle = (low + high) / 2
        stays = model.costs_of({names[0]: middle, names[1]: fixed}).argmin(axis=0) == one
        low, high = np.where(stays, middle, low), np.where(stays, high, middle)
    return high, model.costs_of({names[0]: high, names[1]: fixed}).argmin(axis=0)


def _sorted(model: LotModel, found: Sequence[_Crossings], across: Axis) -> tuple[GridBorder, ...]:
    points: dict[tuple[int, int], list[tuple[float, float]]] = {}
    for crossings in found:
        first, second = (crossings.at, crossings.fixed)
        if crossings.moving is not across:
            first, second = second, first
        for one, other, x, y in zip(crossings.one, crossings.other, first, second, strict=True):
            points.setdefault((min(int(one), int(other)), max(int(one), int(other))), []).append((float(x), float(y)))
    return tuple(
        GridBorder((model.bidders[one], model.bidders[other]), np.array(sorted(points[one, other])))
        for one, other in sorted(points)
    )
