"""The plane of A and B divided among the bids: exact convex cells, by whole numbers in homogeneous coordinates.

Pure core. A point (A, B) is written as three whole numbers (X, Y, W) with A = X / W and B = Y / W; W = 0 is a direction
to infinity. So a cell that never ends has corners like any other, no division is made, and nothing is rounded: a
number counts as the shortest decimal that stands for it, as it was stated.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from decimal import Decimal
from fractions import Fraction
from math import gcd, lcm

import numpy as np
from numpy.typing import NDArray

__all__ = ["Cell", "Corner", "Plane", "Planes", "cells", "clipped", "corner_at", "gap_at", "planes", "to_floats"]

Array = NDArray[np.float64]
#: A corner (X, Y, W), none negative.
Corner = tuple[int, int, int]
#: Cost of a bid as whole numbers: weight of A, weight of B, fixed part, all in the same small unit.
Plane = tuple[int, int, int]

_QUADRANT: tuple[Corner, ...] = ((0, 0, 1), (1, 0, 0), (0, 1, 0))


@dataclass(frozen=True, slots=True)
class Planes:
    """Costs of all bids as whole numbers.

    Parameters
    ----------
    costs : tuple of Plane
        One a bid.
    times : int
        By which the costs were multiplied to be whole.
    """

    costs: tuple[Plane, ...]
    times: int


@dataclass(frozen=True, slots=True)
class Cell:
    """Where one bid, or several with the same cost everywhere, has the lowest cost of all.

    Parameters
    ----------
    bids : tuple of int
        Positions of the bids.
    corners : tuple of Corner
        Counterclockwise; those with W = 0 are directions.
    neighbors : tuple of int or None
        Position of the bid beyond the side from each corner to the next; None on an axis or at infinity.
    """

    bids: tuple[int, ...]
    corners: tuple[Corner, ...]
    neighbors: tuple[int | None, ...]


def planes(price: Array, losses: Array, auxiliary_rate: float) -> Planes:
    """Costs as whole numbers.

    Parameters
    ----------
    price : ndarray
        Evaluated price of each bid. [currency]
    losses : ndarray
        No-load, load and auxiliary loss, bids by three. [kW]
    auxiliary_rate : float
        C, which is held. [currency/kW]

    Returns
    -------
    Planes
        All multiplied by the same number.
    """
    rate = _exact(auxiliary_rate)
    rows = [
        (_exact(no_load), _exact(load), _exact(amount) + rate * _exact(auxiliary))
        for amount, (no_load, load, auxiliary) in zip(price, losses, strict=True)
    ]
    times = lcm(*(x.denominator for row in rows for x in row))
    return Planes(tuple((int(a * times), int(b * times), int(rest * times)) for a, b, rest in rows), times)


def _exact(number: float) -> Fraction:
    """Shortest decimal that stands for a number: what was stated."""
    return Fraction(Decimal(repr(float(number))))


def corner_at(no_load_rate: float, load_rate: float) -> Corner:
    """Point of the plane.

    Parameters
    ----------
    no_load_rate, load_rate : float
        A and B. [currency/kW]

    Returns
    -------
    Corner
        In whole numbers.
    """
    a, b = _exact(no_load_rate), _exact(load_rate)
    w = lcm(a.denominator, b.denominator)
    return int(a * w), int(b * w), w


def gap_at(one: Plane, other: Plane, corner: Corner) -> int:
    """Cost of another bid less that of one, at a corner.

    Parameters
    ----------
    one, other : Plane
        The bids.
    corner : Corner
        The point or direction.

    Returns
    -------
    int
        In the small unit of the planes, times W.
    """
    x, y, w = corner
    return (other[0] - one[0]) * x + (other[1] - one[1]) * y + (other[2] - one[2]) * w


def cells(costs: Sequence[Plane], start: int) -> tuple[Cell, ...]:
    """All cells of the quadrant A, B >= 0 that have an area.

    Parameters
    ----------
    costs : sequence of Plane
        One a bid.
    start : int
        A bid whose cell has an area.

    Returns
    -------
    tuple of Cell
        The cell of the start first, each other after one of its neighbors.

    Notes
    -----
    Cells cover the quadrant, and two that share a border share a side of it: from one cell all others are reached
    across their sides. Only bids that lead somewhere are ever looked at as leaders.
    """
    found: list[Cell] = []
    seen: set[int] = set()
    waiting = [start]
    while waiting:
        bid = waiting.pop(0)
        if bid in seen:
            continue
        cell = _cell(costs, bid)
        seen.update(cell.bids)
        if cell.corners:
            found.append(cell)
            waiting += [neighbor for neighbor in cell.neighbors if neighbor is not None]
    return tuple(found)


def _cell(costs: Sequence[Plane], bid: int) -> Cell:
    one = costs[bid]
    corners: Sequence[Corner] = _QUADRANT
    for other in costs:
        if other != one:
            corners = clipped(corners, (other[0] - one[0], other[1] - one[1], other[2] - one[2]))
    same = tuple(at for at, other in enumerate(costs) if other == one)
    around = (*corners[1:], *corners[:1])
    return Cell(same, tuple(corners), tuple(_beyond(costs, bid, *side) for side in zip(corners, around, strict=True)))


def clipped(corners: Sequence[Corner], half: Plane) -> Sequence[Corner]:
    """Part of a convex polygon in which a linear form is not negative.

    Parameters
    ----------
    corners : sequence of Corner
        Counterclockwise.
    half : Plane
        Coefficients of X, Y and W.

    Returns
    -------
    sequence of Corner
        Counterclockwise; empty where no area is left.
    """
    values = [half[0] * x + half[1] * y + half[2] * w for x, y, w in corners]
    if min(values, default=0) >= 0:
        return corners
    kept: list[Corner] = []
    for at, corner in enumerate(corners):
        after = (at + 1) % len(corners)
        here, there = values[at], values[after]
        if here >= 0:
            kept.append(corner)
        if (here > 0 > there) or (here < 0 < there):
            kept.append(_between(corner, corners[after], abs(here), abs(there)))
    distinct = list(dict.fromkeys(kept))
    return distinct if len(distinct) > 2 else []


def _between(one: Corner, other: Corner, here: int, there: int) -> Corner:
    """Point between two corners at which a form vanishes whose values there are known, in lowest terms."""
    x, y, w = (there * a + here * b for a, b in zip(one, other, strict=True))
    common = gcd(x, y, w)
    return x // common, y // common, w // common


def _beyond(costs: Sequence[Plane], bid: int, start: Corner, end: Corner) -> int | None:
    """Bid on the other side of a side: of those that tie along it the one that falls fastest outward."""
    if any(a == 0 == b for a, b in zip(start, end, strict=True)):
        return None
    middle = _between(start, end, 1, 1)
    one = costs[bid]
    outward = _outward(start, end)
    tied = [at for at, other in enumerate(costs) if other != one and gap_at(one, other, middle) == 0]
    return min(tied, key=lambda at: costs[at][0] * outward[0] + costs[at][1] * outward[1])


def _outward(start: Corner, end: Corner) -> tuple[int, int]:
    """Direction of A and B to the right of the way from start to end."""
    along_a = end[0] * start[2] - start[0] * end[2]
    along_b = end[1] * start[2] - start[1] * end[2]
    return along_b, -along_a


def to_floats(corners: Sequence[Corner]) -> tuple[Array, Array]:
    """Corners as numbers.

    Parameters
    ----------
    corners : sequence of Corner
        Of a cell.

    Returns
    -------
    points : ndarray
        A and B of the corners that are points, (k, 2). [currency/kW]
    directions : ndarray
        Directions to infinity, (d, 2), their greater part 1.
    """
    points = [[float(Fraction(x, w)), float(Fraction(y, w))] for x, y, w in corners if w]
    directions = [[float(Fraction(x, max(x, y))), float(Fraction(y, max(x, y)))] for x, y, w in corners if not w]
    return np.array(points).reshape(-1, 2), np.array(directions).reshape(-1, 2)
