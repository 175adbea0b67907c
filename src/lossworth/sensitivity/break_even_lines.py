"""First place where every cost is a straight line of one input: the lower envelope, border after border.

Pure core: arrays in, positions of bids out.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

__all__ = ["Change", "equal_cost_width", "leaders", "line_changes"]

Array = NDArray[np.float64]

#: Costs closer than this part of their size are equal: some sums and products of 53-bit numbers are not told apart.
_EQUAL = 2.0**-46


@dataclass(frozen=True, slots=True)
class Change:
    """A value of the input at which first place changes.

    Parameters
    ----------
    value : float
        The value at which the costs of both sides are equal.
    below, above : tuple of int
        Positions of the bids that lead just below and just above it; several only where their costs stay equal.
    """

    value: float
    below: tuple[int, ...]
    above: tuple[int, ...]


def equal_cost_width(cost: Array) -> Array:
    """Difference up to which a cost counts as equal to the lowest one.

    Parameters
    ----------
    cost : ndarray
        Bids on the first axis. [currency]

    Returns
    -------
    ndarray
        Some units of the last bit of the lowest cost, one value for each place of the other axes. [currency]
    """
    return np.asarray(_EQUAL * np.abs(cost.min(axis=0)))


def leaders(cost: Array) -> tuple[int, ...]:
    """Bids with the lowest cost.

    Parameters
    ----------
    cost : ndarray
        One value a bid. [currency]

    Returns
    -------
    tuple of int
        One bid, or the members of a tie.
    """
    return tuple(int(bid) for bid in np.flatnonzero(cost <= cost.min() + equal_cost_width(cost)))


def line_changes(cost: Array, slope: Array, *, now: float, lowest: float, highest: float) -> tuple[Change, ...]:
    r"""Every change of first place between two values of an input on which all costs depend linearly.

    Parameters
    ----------
    cost : ndarray
        Costs at the present value, one a bid. [currency]
    slope : ndarray
        Change of each cost for one unit of the input. [currency/unit]
    now : float
        Present value of the input.
    lowest, highest : float
        Least and greatest admissible value; the latter may be infinite. The present value lies between them.

    Returns
    -------
    tuple of Change
        From the lowest value to the highest; one at the present value where a tie is itself a border.

    Notes
    -----
    From the leader w the next border upward lies at the least of

    .. math:: t_j = \frac{K_j - K_w}{s_w - s_j}, \qquad s_j < s_w

    with costs :math:`K` and slopes :math:`s`; of those that meet there the one with the least slope leads beyond. So
    each step is exact, none is skipped, and there are at most as many steps as bids.
    """
    tied = np.array(leaders(cost))
    below = _equal_lines(cost, tied[~_less(slope[tied], slope[tied].max())])
    above = _equal_lines(cost, tied[~_less(slope[tied].min(), slope[tied])])
    downward = [Change(now - t, after, before) for t, before, after in _walk(cost, -slope, below, now - lowest)]
    upward = [Change(now + t, before, after) for t, before, after in _walk(cost, slope, above, highest - now)]
    at_now = [Change(now, below, above)] if below != above and lowest < now < highest else []
    return (*reversed(downward), *at_now, *upward)


def _less(slope: Array | float, other: Array | float) -> NDArray[np.bool_]:
    """Whether a slope is less than another by more than the last bits of both."""
    return np.asarray(np.subtract(other, slope) > _EQUAL * np.maximum(np.abs(slope), np.abs(other)))


def _walk(
    cost: Array, slope: Array, leading: tuple[int, ...], reach: float
) -> Iterator[tuple[float, tuple[int, ...], tuple[int, ...]]]:
    """Borders from the present value on: distance, who leads before, who leads after."""
    passed = 0.0
    while True:
        lead = leading[0]
        falling = np.flatnonzero(_less(slope, slope[lead]))
        if falling.size == 0:
            return
        distance = (cost[falling] - cost[lead]) / (slope[lead] - slope[falling])
        t = max(float(distance.min()), passed)
        if not t <= reach:
            return
        there = cost[falling] + slope[falling] * t
        blur = _EQUAL * (abs(cost[lead]) + abs(slope[lead] * t))
        meeting = falling[there <= there.min() + blur]
        after = _equal_lines(cost, meeting[~_less(slope[meeting].min(), slope[meeting])])
        yield t, leading, after
        leading, passed = after, t


def _equal_lines(cost: Array, among: NDArray[np.intp]) -> tuple[int, ...]:
    """Of bids with one slope those with the lowest cost: one, or several whose costs are equal everywhere."""
    lowest = among[cost[among] <= cost[among].min() + equal_cost_width(cost[among])]
    return tuple(int(bid) for bid in lowest)
