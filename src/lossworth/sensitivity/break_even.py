"""Break-even values: for every input the exact value at which first place changes, and who then leads.

Costs before rounding decide. Inputs on which all costs depend linearly are solved in closed form; inputs behind derived
rates by a certified division of their range, so that no earlier border is missed; whole-valued inputs by looking at
every whole value.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Collection, Iterator
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from .break_even_curves import curve_changes, whole_number_changes
from .break_even_lines import Change, leaders, line_changes
from .break_even_own import own_break_evens
from .break_even_result import Border, BreakEven
from .break_even_rounding import LOSS_PARTS, PRICE_PART, rounded_ties, rounding_reach
from .lot_model import RATE_NAMES, LotModel
from .lot_model_inputs import SharedInput
from .lot_model_rates import RateInput

__all__ = ["Border", "BreakEven", "break_even", "break_evens"]

Array = NDArray[np.float64]

_LABELS = {
    "no_load_rate": "no-load loss rate A",
    "load_rate": "load loss rate B",
    "auxiliary_rate": "auxiliary loss rate C",
    "all_rates_percent": "all loss rates together",
    "exchange_rate": "exchange rate",
    "delivered_point_percent": "adder to the delivered point, percent of the price",
    "delivered_point_amount": "adder to the delivered point, per unit",
    "delivery_adder_percent_per_week": "adder per week of delivery, percent of the price",
    "delivery_adder_per_week": "adder per week of delivery",
    "preference_margin_percent": "preference margin",
    "site_cost": "site cost",
    "tax_rate_percent": "tax rate",
    "payment_interest_percent": "interest on payment terms",
}
_STEP = 1e-9  # of the cost: a greater difference at a border is a step
_MOVES = 1e-13  # of the size: less is no movement of one cost against another
_AT_NOW = 1e-9  # of the range: as near as this, a border and a tie at the present value are one


def break_evens(model: LotModel) -> tuple[BreakEven, ...]:
    """Break-even values of every input of a lot, the nearest first.

    Parameters
    ----------
    model : LotModel
        The lot.

    Returns
    -------
    tuple of BreakEven
        Inputs that all bids share and each bid's own, by `nearness`; those without any border last.
    """
    found = [*_shared(model, None), *own_break_evens(model)]
    return tuple(sorted(found, key=lambda one: one.nearness))


def break_even(model: LotModel, name: str, bidder: str = "") -> BreakEven:
    """Break-even values of one input.

    Parameters
    ----------
    model : LotModel
        The lot.
    name : str
        Name of the input: one of `lot_model.RATE_NAMES`, of the model's rate inputs, shared or own inputs.
    bidder : str
        Whose, where the input is a bid's own.

    Returns
    -------
    BreakEven
        Its borders, or that it has none.

    Raises
    ------
    KeyError
        If the lot has no such input.
    """
    found = own_break_evens(model, (name,)) if bidder else _shared(model, (name,))
    for one in found:
        if one.bidder == bidder:
            return one
    raise KeyError(f"{name}{f' of {bidder}' if bidder else ''}: not an input of lot {model.lot_id}")


def _shared(model: LotModel, names: Collection[str] | None) -> Iterator[BreakEven]:
    """Break-even values of inputs that all bids share."""
    wanted = [known for known in _known(model) if names is None or known.name in names]
    for known in wanted:
        solved = _Straight(model, known) if isinstance(known, _Line) else _Bent(model, known)
        yield solved.answer()


@dataclass(frozen=True, slots=True, eq=False)
class _Line:
    """An input on which all costs depend linearly."""

    name: str
    label: str
    unit: str
    now: float
    lowest: float
    highest: float
    cost: Array
    slope: Array
    moving: tuple[int, ...]


def _known(model: LotModel) -> Iterator[_Line | RateInput]:
    cost, currency = model.cost, model.evaluation_currency
    rates = (model.a, model.b, model.c)
    for at, (name, loss) in enumerate(zip(RATE_NAMES[:3], model.losses.T, strict=True)):
        if rates[at] or loss.any():
            about = (name, _LABELS[name], f"{currency}/kW", rates[at], 0.0, math.inf)
            yield _Line(*about, cost, loss, (LOSS_PARTS[at],))
    together = (RATE_NAMES[3], _LABELS[RATE_NAMES[3]], "% of the present ones", 100.0, 0.0, math.inf)
    yield _Line(*together, cost, model.losses @ np.array(rates) / 100, LOSS_PARTS)
    for known in model.shared.values():
        yield _price_line(known, cost)
    if model.rates is not None:
        for behind in model.rates.inputs.values():
            yield _rate_line(model, behind) if behind.shape == "straight" else behind


def _price_line(known: SharedInput, cost: Array) -> _Line:
    label = f"{_LABELS[known.kind]} {known.subject}".strip()
    about = (known.name, label, known.unit, known.now, known.lowest, known.highest)
    return _Line(*about, cost, known.slope, (PRICE_PART,))


def _rate_line(model: LotModel, known: RateInput) -> _Line:
    """An input on which the rates depend linearly: two of its values give the slope."""
    far = known.highest if math.isfinite(known.highest) else 2 * known.now + 1
    ends = np.array([known.lowest, known.now, far])
    at = np.array(model.rates_of(**{known.name: ends}))
    slope = model.losses @ ((at[:, 2] - at[:, 0]) / (ends[2] - ends[0]))
    about = (known.name, known.label, known.unit, known.now, known.lowest, known.highest)
    return _Line(*about, model.price + model.losses @ at[:, 1], slope, LOSS_PARTS)


class _Straight:
    """Break-even values of an input on which all costs depend linearly."""

    def __init__(self, model: LotModel, line: _Line) -> None:
        self.model, self.line = model, line

    def answer(self) -> BreakEven:
        """All borders in closed form."""
        line = self.line
        found = line_changes(line.cost, line.slope, now=line.now, lowest=line.lowest, highest=line.highest)
        lead = np.array([change.below[0] for change in found], dtype=np.intp)
        at = np.array([change.value for change in found])
        slopes = np.array([line.slope[change.above[0]] - line.slope[change.below[0]] for change in found])

        def gap(values: Array) -> Array:
            return np.asarray(slopes[:, np.newaxis] * (values - at[:, np.newaxis]))

        cost = line.cost[lead] + line.slope[lead] * (at - line.now)
        ties = _ties(self.model, found, gap, line.moving, (line.lowest, line.highest))
        borders = tuple(
            Border(change.value, *_names(self.model, change), float(its_cost), tie)
            for change, its_cost, tie in zip(found, cost, ties, strict=True)
        )
        apart = float(np.ptp(line.slope)) > _MOVES * float(np.abs(line.slope).max())
        return _assembled(self.model, line, line.cost, borders, moves_costs=apart)


class _Bent:
    """Break-even values of an input on which the rates depend, but not linearly."""

    def __init__(self, model: LotModel, known: RateInput) -> None:
        self.model, self.known = model, known

    def answer(self) -> BreakEven:
        """All borders: at whole values, or from the certified division of the range."""
        known = self.known
        costs = self._costs(np.array([known.now, known.lowest, known.highest]))
        if known.shape == "whole":
            borders, is_certain = self._at_whole_values(), True
        else:
            changes, is_certain = self._changes(leaders(costs[:, 0]))
            borders = self._borders(changes)
        moved = np.ptp(costs[:, 2] - costs[:, 1])
        apart = bool(moved > _MOVES * costs.max())
        return _assembled(self.model, known, costs[:, 0], borders, moves_costs=apart, is_certain=is_certain)

    def _terms(self, values: Array) -> Array:
        return np.array(self.model.rates_of(**{self.known.name: values}))

    def _costs(self, values: Array) -> Array:
        return np.asarray(self.model.price[:, np.newaxis] + self.model.losses @ self._terms(values))

    def _changes(self, leading: tuple[int, ...]) -> tuple[tuple[Change, ...], bool]:
        """Changes of first place over the range; one beside the present value is at it, where there is a tie."""
        known = self.known
        by_logarithm = known.shape == "exponential" or known.unit.startswith("%/")
        lowest, highest = (_logarithm(x) if by_logarithm else x for x in (known.lowest, known.highest))

        def terms(places: Array) -> Array:
            return self._terms(np.clip(_percent(places), known.lowest, known.highest) if by_logarithm else places)

        convex = known.shape == "exponential"
        changes, is_certain = curve_changes(
            self.model.price, self.model.losses, terms, lowest=lowest, highest=highest, convex=convex
        )
        if by_logarithm:
            changes = tuple(Change(float(_percent(c.value)), c.below, c.above) for c in changes)
        reach = _AT_NOW * (known.highest - known.lowest)
        return tuple(
            Change(known.now, c.below, c.above)
            if abs(c.value - known.now) <= reach and {c.below[0], c.above[0]} <= set(leading)
            else c
            for c in changes
        ), is_certain

    def _at_whole_values(self) -> tuple[Border, ...]:
        known = self.known
        values = range(int(known.lowest), int(known.highest) + 1)
        costs = self._costs(np.array(values, dtype=np.float64))
        borders = []
        for change in whole_number_changes(costs, values):
            at = change.value if change.value > known.now else change.value - 1
            cost = float(costs[:, int(at - known.lowest)].min())
            borders.append(Border(at, *_names(self.model, change), cost, (at, at)))
        return tuple(borders)

    def _borders(self, changes: tuple[Change, ...]) -> tuple[Border, ...]:
        if not changes:
            return ()
        known, row = self.known, np.arange(len(changes))[:, np.newaxis]
        one, other = (np.array([[side[0]] for side in sides]) for sides in
                      ([c.below for c in changes], [c.above for c in changes]))  # fmt: skip

        def gap(values: Array) -> Array:
            costs = self._costs(values.ravel()).reshape(-1, *values.shape)
            return np.asarray(
                costs[other, row, np.arange(values.shape[1])] - costs[one, row, np.arange(values.shape[1])]
            )

        at = np.array([change.value for change in changes])
        cost = self._costs(at)[one[:, 0], row[:, 0]]
        steps = np.abs(gap(at[:, np.newaxis])[:, 0]) > _STEP * np.abs(cost)
        moving = tuple(part for part, loss in zip(LOSS_PARTS, self.model.losses.T, strict=True) if loss.any())
        ties = _ties(self.model, changes, gap, moving, (known.lowest, known.highest))
        return tuple(
            Border(c.value, *_names(self.model, c), float(its), (c.value, c.value) if step else tie, bool(step))
            for c, its, step, tie in zip(changes, cost, steps, ties, strict=True)
        )


def _ties(
    model: LotModel,
    changes: tuple[Change, ...],
    gap: Callable[[Array], Array],
    moving: tuple[int, ...],
    bounds: tuple[float, float],
) -> list[tuple[float, float]]:
    """Interval of each change in which rounded costs may tie."""
    if not changes:
        return []
    known = np.array([rounding_reach(model, c.below[0], c.above[0], moving) for c in changes])
    edges = rounded_ties(gap, np.array([c.value for c in changes]), known[:, 0], known[:, 1], bounds)
    return [(float(low), float(high)) for low, high in edges]


def _logarithm(percent: float) -> float:
    return math.log1p(percent / 100)


def _percent(logarithm: Array | float) -> Array:
    return np.asarray(100 * np.expm1(logarithm))


def _names(model: LotModel, change: Change) -> tuple[tuple[str, ...], tuple[str, ...]]:
    below, above = (tuple(model.bidders[bid] for bid in side) for side in (change.below, change.above))
    return below, above


def _assembled(
    model: LotModel,
    known: _Line | RateInput,
    now: Array,
    borders: tuple[Border, ...],
    *,
    moves_costs: bool,
    is_certain: bool = True,
) -> BreakEven:
    whole = not isinstance(known, _Line) and known.shape == "whole"
    below = [border for border in borders if border.value < known.now]
    above = [border for border in borders if border.value > known.now]
    distances = [abs(border.value - known.now) for border in borders]
    return BreakEven(
        input=known.name,
        label=known.label,
        bidder="",
        unit=known.unit,
        now=known.now,
        lowest=known.lowest,
        highest=known.highest,
        limit="",
        leaders=tuple(model.bidders[bid] for bid in leaders(now)),
        at_now=next((border for border in borders if border.value == known.now), None),
        lower=below[-1] if below else None,
        upper=above[0] if above else None,
        borders=borders,
        is_whole=whole,
        moves_costs=moves_costs,
        is_certain=is_certain,
        nearness=min(distances, default=math.inf) / _size(model, known.name, known.unit, known.now),
    )


def _size(model: LotModel, name: str, unit: str, now: float) -> float:
    """What a distance is compared with: the present value, or something of its kind where that is zero or a growth."""
    behind = {} if model.rate_inputs is None else model.rate_inputs
    if unit == "%/year":
        return max(abs(now), abs(behind.get("discount_rate_percent", 0.0)), 1.0)
    if now:
        return abs(now)
    yearly = 8760 * behind.get("energy_price_per_kwh", 0.0)
    sizes = {"demand_charge_per_kw_year": yearly, "carbon_cost_per_kwh": yearly / 8760}
    return sizes.get(name) or (100.0 if unit.startswith("%") else float(model.price[0]) or 1.0)
