"""First place where costs are curves of one input: the range is divided until every part is certified.

Pure core: arrays in, positions of bids out. A cost is a fixed part plus weights times a few *terms*, functions of the
input that are the same for all bids (the rates A, B, C). Two properties of the terms bound a cost difference over a
whole interval from its two ends and its middle:

* every term is monotonic: between its values at the ends it takes no others;
* where the caller says so, every term is convex: below the chord of two points, above its continuation.

An interval on which the leader's cost stays below all others by these bounds holds no border; it is never looked at
again. The others are divided, down to the last bits of the input. So no border is missed, however close two lie.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass
from itertools import pairwise

import numpy as np
from numpy.typing import NDArray

from .break_even_lines import Change, equal_cost_width, leaders

__all__ = ["Terms", "curve_changes", "whole_number_changes"]

Array = NDArray[np.float64]
Bids = NDArray[np.intp]
#: Terms at the given inputs: inputs (m,) to values (k, m).
Terms = Callable[[Array], Array]

_FIRST = 32  # intervals to begin with
_PARTS = 16  # of an interval that is not certified
_FINEST = 2.0**-44  # of the range
_AT_ONCE = 1024  # intervals, to bound the memory
_MOST = 100_000  # intervals in all; what is still open then is left as it is, and said so
_OVERLAP = 4.0  # what counts as equal reaches into what counts as apart, so that rounding cannot fall between them
_WIDE_TIE = 1e-5  # of the range: a tie over less is a point, as far as rounding lets it be seen


@dataclass(frozen=True, slots=True)
class _Certified:
    """An interval with one leader, or with several whose costs are equal all over it."""

    start: float
    end: float
    leading: tuple[int, ...]


def curve_changes(
    fixed: Array, weight: Array, terms: Terms, *, lowest: float, highest: float, convex: bool
) -> tuple[tuple[Change, ...], bool]:
    r"""Every change of first place between two values of an input on which the costs depend through a few terms.

    Parameters
    ----------
    fixed : ndarray
        Part of each cost that does not depend on the input, one a bid. [currency]
    weight : ndarray
        Weights of the terms, bids by terms. [kW where the terms are rates]
    terms : callable
        Terms at an array of inputs, each monotonic over the range.
    lowest, highest : float
        The range; both finite.
    convex : bool
        Whether each term is also convex over the range.

    Returns
    -------
    changes : tuple of Change
        From the lowest value to the highest. A tie over more than a point gives two changes, into it and out of it.
    is_certain : bool
        Whether every part of the range was certified; False only where costs stay so nearly equal over a long part
        that the work was cut off.

    Notes
    -----
    With the difference of two costs :math:`D(x) = \Delta F + \sum_k c_k P_k(x)` and the second differences
    :math:`\delta_k = P_k(l) - 2 P_k(m) + P_k(r)` over an interval with the middle m, convex terms give

    .. math::
        D \ge \min\left(D(m),\; D(l) - e,\; D(r) - e\right), \qquad e = \sum_k \max(c_k, 0)\, \delta_k

    and monotonic ones :math:`D \ge \Delta F + \sum_k \min(c_k P_k(l), c_k P_k(r))`; the same with signs turned bounds
    it from above. Rounding of the sums themselves, some units of the last bit, is counted as a tie.
    """
    if len(fixed) == 1 or highest <= lowest:
        return (), True
    search = _Search(fixed, weight, terms, convex=convex)
    parts = sorted(search.certified(lowest, highest), key=lambda part: part.start)
    wide = _WIDE_TIE * (highest - lowest)
    firm = [part for part in _joined(parts) if len(part.leading) == 1 or part.end - part.start > wide]
    changes = tuple(
        _change(before, after, fixed, weight, terms)
        for before, after in pairwise(firm)
        if before.leading != after.leading
    )
    return changes, search.is_certain


class _Search:
    """The division of a range into certified intervals."""

    def __init__(self, fixed: Array, weight: Array, terms: Terms, *, convex: bool) -> None:
        self.fixed, self.weight, self.terms, self.convex = fixed, weight, terms, convex
        self.is_certain = True

    def certified(self, lowest: float, highest: float) -> Iterator[_Certified]:
        """Intervals that hold no border; between them lie the borders, each in a gap of the finest width."""
        edges = np.linspace(lowest, highest, _FIRST + 1)
        waiting, looked_at = [(edges[:-1], edges[1:], np.arange(self.fixed.size))], 0
        while waiting:
            start, end, bids = waiting.pop()
            looked_at += start.size
            behind, tied = self._bounds(start, end, bids)
            decided = np.logical_or(behind, tied).all(axis=0)
            for at in np.flatnonzero(decided):
                yield _Certified(float(start[at]), float(end[at]), tuple(bids[tied[:, at]].tolist()))
            keep = np.flatnonzero(~decided & (end - start > _FINEST * (highest - lowest)))
            if looked_at > _MOST and keep.size:
                self.is_certain = False
            elif keep.size:
                contenders = bids[~behind[:, keep].all(axis=1)]  # the others lead in none of the parts
                waiting += _in_chunks(*_divided(start[keep], end[keep]), contenders)

    def _bounds(self, start: Array, end: Array, bids: Bids) -> tuple[NDArray[np.bool_], NDArray[np.bool_]]:
        """Whether each bid is behind the leader all over each interval, and whether it ties with it all over."""
        points = np.concatenate([start, (start + end) / 2, end])
        values = self.terms(points).reshape(self.weight.shape[1], 3, -1)
        return _bounds(self.fixed[bids], self.weight[bids], values, convex=self.convex)


def _in_chunks(start: Array, end: Array, bids: Bids) -> list[tuple[Array, Array, Bids]]:
    return [(start[at : at + _AT_ONCE], end[at : at + _AT_ONCE], bids) for at in range(0, start.size, _AT_ONCE)]


def _divided(start: Array, end: Array) -> tuple[Array, Array]:
    edges = np.linspace(start, end, _PARTS + 1, axis=1)
    return edges[:, :-1].ravel(), edges[:, 1:].ravel()


def _bounds(fixed: Array, weight: Array, values: Array, *, convex: bool) -> tuple[NDArray[np.bool_], NDArray[np.bool_]]:
    """Which bids stay above the leader of the middle, and which stay equal to it; bids by intervals."""
    left, middle, right = (fixed[:, np.newaxis] + weight @ values[:, at] for at in range(3))
    lead = middle.argmin(axis=0)
    column = np.arange(lead.size)
    c = weight[:, np.newaxis, :] - weight[lead]  # bids, intervals, terms
    ends = (left - left[lead, column], middle - middle[lead, column], right - right[lead, column])
    step = fixed[:, np.newaxis] - fixed[lead]
    low, high = _monotonic_bounds(step, c, values)
    if convex:
        low_2, high_2 = _convex_bounds(ends, c, values)
        low, high = np.maximum(low, low_2), np.minimum(high, high_2)
    width = np.maximum(equal_cost_width(left), equal_cost_width(right))
    tied = np.logical_and(low >= -_OVERLAP * width, high <= _OVERLAP * width)
    return np.asarray(low > width), np.asarray(np.logical_and(tied, low <= width))


def _monotonic_bounds(step: Array, c: Array, values: Array) -> tuple[Array, Array]:
    at_left, at_right = c * values[:, 0].T, c * values[:, 2].T
    low = step + np.minimum(at_left, at_right).sum(axis=2)
    high = step + np.maximum(at_left, at_right).sum(axis=2)
    return low, high


def _convex_bounds(ends: tuple[Array, Array, Array], c: Array, values: Array) -> tuple[Array, Array]:
    bend = np.maximum(values[:, 0] - 2 * values[:, 1] + values[:, 2], 0).T
    down, up = (np.maximum(c, 0) * bend).sum(axis=2), (np.maximum(-c, 0) * bend).sum(axis=2)
    left, middle, right = ends
    low = np.minimum(middle, np.minimum(left, right) - down)
    high = np.maximum(middle, np.maximum(left, right) + up)
    return low, high


def _joined(parts: Sequence[_Certified]) -> Iterator[_Certified]:
    """Neighboring intervals with the same leaders as one."""
    held: _Certified | None = None
    for part in parts:
        if held is not None and held.leading == part.leading:
            held = _Certified(held.start, part.end, held.leading)
            continue
        if held is not None:
            yield held
        held = part
    if held is not None:
        yield held


def _change(before: _Certified, after: _Certified, fixed: Array, weight: Array, terms: Terms) -> Change:
    """The border between two intervals, where the costs of both leaders cross on the straight line across the gap."""
    start, end = before.end, after.start
    if len(before.leading) > 1 or len(after.leading) > 1:
        return Change((start + end) / 2, before.leading, after.leading)
    one, other = before.leading[0], after.leading[0]
    at = terms(np.array([start, end]))
    gap = (fixed[other] - fixed[one]) + (weight[other] - weight[one]) @ at
    share = 0.5 if gap[0] <= gap[1] else min(max(float(gap[0] / (gap[0] - gap[1])), 0.0), 1.0)
    return Change(start + share * (end - start), before.leading, after.leading)


def whole_number_changes(cost: Array, values: Sequence[int]) -> tuple[Change, ...]:
    """Every change of first place from one whole value of an input to the next.

    Parameters
    ----------
    cost : ndarray
        Costs, bids by values. [currency]
    values : sequence of int
        The whole values, rising by one.

    Returns
    -------
    tuple of Change
        `value` is the first whole value after the change; a tie at a whole value counts as its own leadership.
    """
    who = [leaders(cost[:, at]) for at in range(len(values))]
    return tuple(
        Change(float(values[at]), who[at - 1], who[at]) for at in range(1, len(values)) if who[at] != who[at - 1]
    )
