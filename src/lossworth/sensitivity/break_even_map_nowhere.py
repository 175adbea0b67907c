"""Bids that lead for no rates A and B: how much cheaper, or how much leaner, they would have to be.

The cost of such a bid less the lowest cost of all is, over the plane, a convex function made of flat pieces, one on
each cell of the map. So its least value, and its least ratio to A or to B, stand at a corner of the map: the answer is
a comparison of whole numbers.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction

from .break_even_map_cells import Corner, Plane, Planes, gap_at

__all__ = ["Reduction", "WinsNowhere", "lowest_costs", "wins_nowhere"]

_NOTHING: Plane = (0, 0, 0)


@dataclass(frozen=True, slots=True)
class Reduction:
    """A least reduction that lets a bid tie, and the rates A and B for which it is enough.

    Parameters
    ----------
    amount : float
        Of the evaluated price, or of a loss. [currency or kW]
    no_load_rate, load_rate : float
        The rates; infinite where they must grow without end, and the amount is then only approached. [currency/kW]
    """

    amount: float
    no_load_rate: float
    load_rate: float


@dataclass(frozen=True, slots=True)
class WinsNowhere:
    """What would bring in a bid that leads for no rates A and B; with as much it ties, with more it leads.

    Parameters
    ----------
    bidder : str
        Its name.
    price_cut : Reduction
        Of the evaluated price, at the tender's rates.
    no_load_kw, load_kw : Reduction or None
        Of one loss, at the tender's rates; None where the guaranteed loss itself is not as much.
    least_price_cut : Reduction
        The least one of the price for any rates.
    least_no_load_kw, least_load_kw : Reduction or None
        The least ones of a loss for any rates; None where the guaranteed loss itself is not as much.
    """

    bidder: str
    price_cut: Reduction
    no_load_kw: Reduction | None
    load_kw: Reduction | None
    least_price_cut: Reduction
    least_no_load_kw: Reduction | None
    least_load_kw: Reduction | None


def lowest_costs(costs: Planes, corners: Iterable[Corner]) -> dict[Corner, int]:
    """Lowest cost of all bids at each corner.

    Parameters
    ----------
    costs : Planes
        Of all bids.
    corners : iterable of Corner
        Points and directions.

    Returns
    -------
    dict of Corner to int
        In the small unit of the planes, times W.
    """
    return {corner: min(gap_at(_NOTHING, cost, corner) for cost in costs.costs) for corner in corners}


def wins_nowhere(bidder: str, bid: int, costs: Planes, lowest: Mapping[Corner, int], point: Corner) -> WinsNowhere:
    """What would bring in one bid.

    Parameters
    ----------
    bidder : str
        Its name.
    bid : int
        Its position.
    costs : Planes
        Of all bids.
    lowest : mapping of Corner to int
        Lowest cost of all at the corners of all cells of the map and at the tender's point.
    point : Corner
        The tender's rates.

    Returns
    -------
    WinsNowhere
        At the tender's rates, and for any.
    """
    excess = {corner: gap_at(_NOTHING, costs.costs[bid], corner) - least_cost for corner, least_cost in lowest.items()}
    corners = tuple(lowest)

    def least(among: Sequence[Corner], part: int, most: Fraction | None) -> Reduction | None:
        """Least excess over one coordinate: over W it is money, over X or Y a loss."""
        ratios = [(Fraction(excess[at], costs.times * at[part]), at) for at in among if at[part]]
        if not ratios:
            return None
        amount, at = min(ratios, key=lambda one: one[0])
        return None if most is not None and amount >= most else Reduction(float(amount), *_rates(at))

    own = [Fraction(costs.costs[bid][part], costs.times) for part in (0, 1)]
    here, anywhere = least([point], 2, None), least(corners, 2, None)
    if here is None or anywhere is None:
        raise ValueError(f"{bidder}: the map has no corner")
    return WinsNowhere(
        bidder,
        here,
        least([point], 0, own[0]),
        least([point], 1, own[1]),
        anywhere,
        least(corners, 0, own[0]),
        least(corners, 1, own[1]),
    )


def _rates(corner: Corner) -> tuple[float, float]:
    x, y, w = corner
    a, b = (float(Fraction(part, w)) if w else (math.inf if part else 0.0) for part in (x, y))
    return a, b
