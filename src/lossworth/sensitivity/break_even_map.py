"""Break-even map: who has the lowest total owning cost for which rates A and B, exactly.

Costs are linear in A and B, so each bid leads in a convex polygon, and the polygons cover the quadrant of all
admissible rates. The auxiliary loss rate C and all prices stay as they are.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction

import numpy as np
from numpy.typing import ArrayLike, NDArray

from .break_even_map_cells import Cell, Corner, Plane, cells, clipped, corner_at, gap_at, planes, to_floats
from .break_even_map_nowhere import WinsNowhere, lowest_costs, wins_nowhere
from .lot_model import LotModel

__all__ = ["BreakEvenMap", "NearestBorder", "RatePath", "Region", "break_even_map", "rate_path"]

Array = NDArray[np.float64]
_ROOM = 2.0  # of the present rates, in a view that nobody states


@dataclass(frozen=True, slots=True, eq=False)
class Region:
    """Where one bid leads.

    Parameters
    ----------
    bidders : tuple of str
        The bid; several where their costs are the same for all A and B.
    vertices : ndarray
        Polygon inside the view, (k, 2) of A and B, counterclockwise; no row where it lies outside. [currency/kW]
    corners : ndarray
        Corners of the whole region. [currency/kW]
    directions : ndarray
        Directions in which the whole region never ends, (d, 2), their greater part 1; no row where it is bounded.
    neighbors : tuple of str
        Bids beyond its borders.
    share_of_view : float
        Its area over that of the view.
    """

    bidders: tuple[str, ...]
    vertices: Array
    corners: Array
    directions: Array
    neighbors: tuple[str, ...]
    share_of_view: float

    @property
    def is_unbounded(self) -> bool:
        """Whether the region goes on without end."""
        return bool(self.directions.size)


@dataclass(frozen=True, slots=True)
class NearestBorder:
    """The point at which first place changes with the least change of both rates together.

    Parameters
    ----------
    rival : str
        Who leads beyond.
    no_load_rate, load_rate : float
        The point. [currency/kW]
    distance : float
        Root of the sum of the squared changes of A and of B, each over its present value; zero on a border. A rate of
        zero is compared with the other one. [1]
    """

    rival: str
    no_load_rate: float
    load_rate: float
    distance: float


@dataclass(frozen=True, slots=True, eq=False)
class BreakEvenMap:
    """The map of a lot.

    Parameters
    ----------
    lot_id, basis : str
        As in the model.
    no_load_rate, load_rate, auxiliary_rate : float
        A and B of the tender, its point on the map, and C, which is held. [currency/kW]
    view : tuple of float
        Greatest A and B of the drawing; both begin at zero.
    regions : tuple of Region
        Of the bids that lead somewhere, the leader's first, then neighbors of those before.
    leaders : tuple of str
        Who leads at the tender's point: one bid, or those that share a border there.
    nearest : NearestBorder or None
        None where one bid leads everywhere.
    nowhere : tuple of WinsNowhere
        Bids that lead for no rates A and B, with what would bring them in.
    """

    lot_id: str
    basis: str
    no_load_rate: float
    load_rate: float
    auxiliary_rate: float
    view: tuple[float, float]
    regions: tuple[Region, ...]
    leaders: tuple[str, ...]
    nearest: NearestBorder | None
    nowhere: tuple[WinsNowhere, ...]


@dataclass(frozen=True, slots=True, eq=False)
class RatePath:
    """How the tender's point moves with an input behind derived rates.

    Parameters
    ----------
    input : str
        Name.
    values, no_load_rate, load_rate, auxiliary_rate : ndarray
        Values of the input and the rates there. The map holds C, the path does not.
    leaders : tuple of str
        Who leads at each value, C moved as well.
    """

    input: str
    values: Array
    no_load_rate: Array
    load_rate: Array
    auxiliary_rate: Array
    leaders: tuple[str, ...]


def break_even_map(model: LotModel, view: tuple[float, float] | None = None) -> BreakEvenMap:
    """Map of a lot in the plane of A and B.

    Parameters
    ----------
    model : LotModel
        The lot.
    view : tuple of float, optional
        Greatest A and B of the drawing; by default twice the present rates, more where the nearest border needs it.
        [currency/kW]

    Returns
    -------
    BreakEvenMap
        Polygons, nearest border, and the bids that lead nowhere.

    Raises
    ------
    ValueError
        If the view has no extent.
    """
    whole = planes(model.price, model.losses, model.c)
    point = corner_at(model.a, model.b)
    leading = _leading(whole.costs, point)
    found = _all_cells(whole.costs, leading)
    nearest = _nearest(model, found, leading)
    box = _view(model, nearest) if view is None else view
    if not (box[0] > 0 and box[1] > 0):
        raise ValueError(f"the view must reach above zero in both rates, got {box}")
    lowest = lowest_costs(whole, dict.fromkeys((point, *(corner for cell in found for corner in cell.corners))))
    lost = sorted(set(range(len(whole.costs))) - {bid for cell in found for bid in cell.bids})
    return BreakEvenMap(
        lot_id=model.lot_id,
        basis=model.basis,
        no_load_rate=model.a,
        load_rate=model.b,
        auxiliary_rate=model.c,
        view=box,
        regions=tuple(_region(model, cell, box) for cell in found),
        leaders=tuple(model.bidders[bid] for bid in leading),
        nearest=nearest,
        nowhere=tuple(wins_nowhere(model.bidders[bid], bid, whole, lowest, point) for bid in lost),
    )


def _leading(costs: Sequence[Plane], point: Corner) -> tuple[int, ...]:
    """Bids with the lowest cost at a point, exactly."""
    lowest = min(range(len(costs)), key=lambda bid: gap_at((0, 0, 0), costs[bid], point))
    return tuple(bid for bid in range(len(costs)) if gap_at(costs[lowest], costs[bid], point) == 0)


def _all_cells(costs: Sequence[Plane], leading: Sequence[int]) -> tuple[Cell, ...]:
    """All cells, from the first of the leaders that has an area: on a corner of the map not all of them have."""
    for bid in leading:
        found = cells(costs, bid)
        if found:
            return found
    raise ValueError("no leader has a cell")


def _region(model: LotModel, cell: Cell, view: tuple[float, float]) -> Region:
    inside: Sequence[Corner] = cell.corners
    for half in _inside(view):
        inside = clipped(inside, half)
    vertices, _ = to_floats(inside)
    corners, directions = to_floats(cell.corners)
    neighbors = dict.fromkeys(model.bidders[bid] for bid in cell.neighbors if bid is not None)
    return Region(
        tuple(model.bidders[bid] for bid in cell.bids),
        vertices,
        corners,
        directions,
        tuple(neighbors),
        _area(vertices) / (view[0] * view[1]),
    )


def _inside(view: tuple[float, float]) -> tuple[Plane, Plane]:
    x, y, w = corner_at(*view)
    return (-w, 0, x), (0, -w, y)


def _area(vertices: Array) -> float:
    if not vertices.size:
        return 0.0
    a, b = vertices.T
    return float(abs(a @ np.roll(b, -1) - b @ np.roll(a, -1)) / 2)


def _view(model: LotModel, nearest: NearestBorder | None) -> tuple[float, float]:
    a, b = (model.a, model.b) if nearest is None else (nearest.no_load_rate, nearest.load_rate)
    highest = max(model.a, a), max(model.b, b)
    return _ROOM * (highest[0] or highest[1] or 1.0), _ROOM * (highest[1] or highest[0] or 1.0)


def _nearest(model: LotModel, found: Sequence[Cell], leading: Sequence[int]) -> NearestBorder | None:
    """The nearest point on the sides of the leader's cell, in changes over the present rates."""
    cell = next((cell for cell in found if set(cell.bids) & set(leading)), None)
    if cell is None or len(found) == 1:
        return None
    size = np.array([model.a or model.b or 1.0, model.b or model.a or 1.0])
    here = np.array([model.a, model.b]) / size
    around = (*cell.corners[1:], *cell.corners[:1])
    best: NearestBorder | None = None
    for start, end, rival in zip(cell.corners, around, cell.neighbors, strict=True):
        if rival is not None:
            at = _nearest_on_side(here, start, end, size)
            distance = float(np.hypot(*(at - here)))
            if best is None or distance < best.distance:
                a, b = (float(x) for x in at * size)
                best = NearestBorder(model.bidders[rival], a, b, distance)
    if best is not None and len(set(leading) - set(cell.bids)):
        return NearestBorder(best.rival, model.a, model.b, 0.0)  # on a border, whatever the last bits say
    return best


def _nearest_on_side(here: Array, start: Corner, end: Corner, size: Array) -> Array:
    """Nearest point of a segment, of a ray, or of a line between two directions."""
    if start[2] == 0:
        start, end = end, start
    base = np.array([start[0] / start[2], start[1] / start[2]]) / size
    if end[2] == 0:
        along, most = np.array([float(Fraction(x, max(end[:2]))) for x in end[:2]]) / size, math.inf
    else:
        along, most = np.array([end[0] / end[2], end[1] / end[2]]) / size - base, 1.0
    share = float(np.clip((here - base) @ along / (along @ along), 0.0, most))
    return np.asarray(base + share * along)


def rate_path(model: LotModel, name: str, values: ArrayLike) -> RatePath:
    """Way of the tender's point as an input behind its rates moves.

    Parameters
    ----------
    model : LotModel
        With derived rates, or those of a study.
    name : str
        Name of the input, ``"energy_price_per_kwh"``.
    values : array_like
        Its values, on one axis.

    Returns
    -------
    RatePath
        Rates and leader at each value.

    Raises
    ------
    ValueError
        If the rates are announced.
    """
    at = np.asarray(values, dtype=np.float64)
    a, b, c = model.rates_of(**{name: at})
    who = model.costs_of({name: at}).argmin(axis=0)
    return RatePath(name, at, a, b, c, tuple(model.bidders[bid] for bid in who))
