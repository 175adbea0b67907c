"""Break-even values of what a bid states for itself: its price, its guarantees, its weeks of delivery.

A change of such a value moves one cost alone. So the question has one answer a bid: the leader loses first place where
its cost meets the lowest other one, every other bid takes first place where its cost meets the leader's.
"""

from __future__ import annotations

import math
from collections.abc import Collection, Iterator

import numpy as np
from numpy.typing import NDArray

from .break_even_lines import equal_cost_width, leaders
from .break_even_result import Border, BreakEven
from .break_even_rounding import LOSS_PARTS, PRICE_PART
from .lot_model import LotModel
from .lot_model_inputs import OwnInput

__all__ = ["OWN_LABELS", "own_break_evens"]

Array = NDArray[np.float64]

OWN_LABELS = {
    "unit_price": "unit price",
    "no_load_loss_kw": "no-load loss",
    "load_loss_kw": "load loss",
    "auxiliary_loss_kw": "auxiliary loss",
    "loss_tolerance_percent": "tolerance used on all losses",
    "delivery_weeks": "delivery",
}
_PARTS = {
    "unit_price": (PRICE_PART,),
    "no_load_loss_kw": (1,),
    "load_loss_kw": (2,),
    "auxiliary_loss_kw": (3,),
    "loss_tolerance_percent": LOSS_PARTS,
    "delivery_weeks": (PRICE_PART,),
}


def own_break_evens(model: LotModel, names: Collection[str] | None = None) -> Iterator[BreakEven]:
    """Break-even value of every bid's own values.

    Parameters
    ----------
    model : LotModel
        The lot.
    names : collection of str, optional
        Only these inputs, by the names of `lot_model_inputs.OwnInput`.

    Yields
    ------
    BreakEven
        Input by input, bids in rank order; bids that state no value are passed over.
    """
    cost = model.cost
    for name, own in model.own.items():
        if names is None or name in names:
            yield from _of_input(model, own, cost)


def _of_input(model: LotModel, own: OwnInput, cost: Array) -> Iterator[BreakEven]:
    leading = leaders(cost)
    rival = _lowest_other(cost)
    over = np.maximum(own.now - own.above, 0) if np.isfinite(own.above).any() else np.zeros_like(own.now)
    with np.errstate(divide="ignore", invalid="ignore"):
        value = _value(own, over, rival - cost)
    width = float(equal_cost_width(cost))
    for bid, now in enumerate(own.now):
        if math.isnan(now):
            continue
        leads, tied = bid in leading, len(leading) > 1 and bid in leading
        border = None
        if _is_admissible(own, bid, float(value[bid])) and len(cost) > 1:
            others = tuple(np.flatnonzero(np.delete(cost, bid) <= rival[bid] + width)) if leads else leading
            names = tuple(model.bidders[at + (at >= bid)] if leads else model.bidders[at] for at in others)
            sides = ((model.bidders[bid],), names)
            tie = _tie(model, own, bid, float(value[bid]))
            border = Border(now if tied else float(value[bid]), *sides, float(rival[bid]), tie)
        yield _answer(model, own, bid, border, leading, tied=tied)


def _lowest_other(cost: Array) -> Array:
    """Lowest cost of all other bids, one a bid."""
    if cost.size == 1:
        return np.full(1, np.inf)
    lowest, second = np.partition(cost, 1)[:2]
    rival = np.full(cost.size, lowest)
    rival[cost.argmin()] = second
    return rival


def _value(own: OwnInput, over: Array, missing: Array) -> Array:
    """Value at which the cost has moved by what is missing; not a number where none does it."""
    moved = over + missing / own.slope
    plain = own.now + missing / own.slope
    if not np.isfinite(own.above).any():
        return np.asarray(np.where(own.slope > 0, plain, np.nan))
    reached = np.where(moved > 0, own.above + moved, np.nan)
    value = np.where(own.slope > 0, reached, np.nan)
    if not own.whole:
        return np.asarray(value)
    return np.asarray(np.where(missing > 0, np.ceil(value - 1e-9), np.floor(value + 1e-9)))


def _is_admissible(own: OwnInput, bid: int, value: float) -> bool:
    return math.isfinite(value) and float(own.lowest[bid]) <= value <= float(own.highest[bid])


def _tie(model: LotModel, own: OwnInput, bid: int, value: float) -> tuple[float, float]:
    """Interval in which the rounded cost of the bid may tie with that of its rival."""
    if own.whole:
        return value, value
    parts = _PARTS[own.name] if model.basis != "study" else (*_PARTS[own.name], *LOSS_PARTS)
    reach = model.rounding.step * len(set(parts)) * (0.5 if model.rounding.mode.startswith("half") else 1.0)
    known = float(np.abs(np.delete(model.rounding.of_parts, parts, axis=1)).sum(axis=1).max())
    distance = (reach + 2 * known) / float(own.slope[bid])
    return value - distance, value + distance


def _answer(
    model: LotModel, own: OwnInput, bid: int, border: Border | None, leading: tuple[int, ...], *, tied: bool
) -> BreakEven:
    now = float(own.now[bid])
    upward = border is not None and not tied and bid in leading
    downward = border is not None and not tied and bid not in leading
    return BreakEven(
        input=own.name,
        label=OWN_LABELS[own.name],
        bidder=model.bidders[bid],
        unit=own.unit[bid],
        now=now,
        lowest=float(own.lowest[bid]),
        highest=float(own.highest[bid]),
        limit=own.limit[bid],
        leaders=tuple(model.bidders[at] for at in leading),
        at_now=border if tied else None,
        lower=border if downward else None,
        upper=border if upward else None,
        borders=() if border is None else (border,),
        is_whole=own.whole,
        moves_costs=bool(own.slope[bid] > 0),
        is_certain=True,
        nearness=math.inf if border is None else abs(border.value - now) / _size(own, bid),
    )


def _size(own: OwnInput, bid: int) -> float:
    """What a distance is compared with: the present value; a tolerance is a part of the losses."""
    now = float(own.now[bid])
    return 100.0 + now if own.name == "loss_tolerance_percent" else abs(now) or 1.0
