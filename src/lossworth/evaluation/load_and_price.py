"""Load and price on one grid: how much of the year each step stands for, and what a kilowatt-hour costs in it."""

from __future__ import annotations

from collections.abc import Callable, Iterable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from ..findings import Finding
from ..records.profile import PriceBlock, PriceSeries, TimeGrid
from ..records.tender import Derivation, Economics, LoadingCondition, Lot, Tender

__all__ = ["LoadAndPrice", "block_of_each_step", "check_load_and_price", "join"]

Array = NDArray[np.float64]
_NONE, _SEVERAL = -1, -2
_SAME_HOURS = 1e-6


@dataclass(frozen=True, slots=True)
class LoadAndPrice:
    """A load profile with the price of each of its steps.

    Parameters
    ----------
    load : ndarray
        Load of each step over the greatest load. [1]
    hours : ndarray
        Hours of a year that each step stands for. [hour/year]
    price_per_kwh : ndarray or None
        Price of each step; None where the price does not move within the year. [currency/kWh]
    """

    load: Array
    hours: Array
    price_per_kwh: Array | None


def join(loading: LoadingCondition, economics: Economics) -> LoadAndPrice:
    """Bring the load profile and the price within the year to the finer of their grids.

    Parameters
    ----------
    loading : LoadingCondition
        With a profile.
    economics : Economics
        With or without a price that moves within the year.

    Returns
    -------
    LoadAndPrice
        Arrays of one length.

    Raises
    ------
    ValueError
        If the grids do not fit; `check_load_and_price` reports that as a finding before.
    """
    if loading.profile is None:
        raise ValueError("the loading condition has no profile")
    load = np.asarray(loading.profile.loads, dtype=np.float64)
    load = load / load.max()
    grid = loading.profile.grid
    hours = np.asarray(grid.hours, dtype=np.float64)
    if economics.energy_price_blocks:
        prices = np.array([float(block.price_per_kwh.value) for block in economics.energy_price_blocks])
        return LoadAndPrice(load, hours, prices[block_of_each_step(grid, economics.energy_price_blocks)])
    if economics.energy_price_series is None:
        return LoadAndPrice(load, hours, None)
    price = np.asarray(economics.energy_price_series.prices_per_kwh, dtype=np.float64)
    finer = max(load.size, price.size)
    if finer % load.size or finer % price.size:
        raise ValueError(f"{load.size} steps of load and {price.size} steps of price do not fit together")
    parts = finer // load.size
    return LoadAndPrice(np.repeat(load, parts), np.repeat(hours / parts, parts), np.repeat(price, finer // price.size))


def block_of_each_step(grid: TimeGrid, blocks: tuple[PriceBlock, ...]) -> NDArray[np.int64]:
    """Number of the tariff block that holds in each step.

    Parameters
    ----------
    grid : TimeGrid
        With day types, months and times of day as far as the blocks need them.
    blocks : tuple of PriceBlock
        At most one of them without conditions, which takes the rest.

    Returns
    -------
    ndarray of int
        Position of the block; -1 where none holds, -2 where several do.
    """
    steps = len(grid.hours)
    chosen = np.full(steps, _NONE, dtype=np.int64)
    for position, block in enumerate(blocks):
        if block.is_rest:
            continue
        holds = _holds(grid, block, steps)
        chosen = np.where(holds, np.where(chosen == _NONE, position, _SEVERAL), chosen)
    for position, block in enumerate(blocks):
        if block.is_rest:
            chosen = np.where(chosen == _NONE, position, chosen)
    return chosen


def _holds(grid: TimeGrid, block: PriceBlock, steps: int) -> NDArray[np.bool_]:
    holds = np.ones(steps, dtype=bool)
    if block.day_types:
        holds &= np.isin(np.asarray(grid.day_types), block.day_types)
    if block.months:
        holds &= np.isin(np.asarray(grid.months), block.months)
    if block.starts is not None and block.ends is not None:
        start, end = (time.hour + time.minute / 60 for time in (block.starts, block.ends))
        of_day = np.asarray(grid.starts)
        inside = (of_day >= start) & (of_day < end) if start < end else (of_day >= start) | (of_day < end)
        holds &= inside
    return holds


def check_load_and_price(tender: Tender) -> tuple[Finding, ...]:
    """Findings on loads and prices that cannot be brought together.

    Parameters
    ----------
    tender : Tender
        As read.

    Returns
    -------
    tuple of Finding
        For each pair of economics and loading condition that a lot uses; all stop the evaluation.
    """
    pairs: dict[tuple[str, str], tuple[Lot, Derivation]] = {}
    for lot in tender.lots:
        for derivation in (lot.derivation, lot.study):
            if derivation is not None:
                pairs.setdefault((derivation.economics.value, derivation.loading.value), (lot, derivation))
    return tuple(
        finding
        for (economics, loading), (lot, derivation) in pairs.items()
        for finding in _check_pair(tender.economics[economics], tender.loading[loading], lot, derivation)
    )


def _check_pair(economics: Economics, loading: LoadingCondition, lot: Lot, derivation: Derivation) -> Iterable[Finding]:
    moves = bool(economics.energy_price_blocks) or economics.energy_price_series is not None
    if not moves:
        return
    names = f"{derivation.economics} with {derivation.loading}"

    def finding(rule: str, got: str | None, fix: str) -> Finding:
        return Finding("tender-conflict", f"energy price of {names}", rule, economics.place, got, lot=lot.id, fix=fix)

    if loading.profile is None:
        rule = "a price by hour or by block needs a load profile"
        yield finding(rule, None, "Give the loading condition a profile, or the economics one price for the year.")
        return
    grid = loading.profile.grid
    if economics.energy_price_series is not None:
        yield from _check_series(economics.energy_price_series, grid, finding)
    elif missing := _missing_calendar(grid, economics.energy_price_blocks):
        rule = f"blocks by {missing} need a profile whose steps have them"
        yield finding(rule, None, "Give the profile time stamps, or leave that condition out of the blocks.")
    else:
        chosen = block_of_each_step(grid, economics.energy_price_blocks)
        for mark, rule in ((_NONE, "every hour must lie in a block"), (_SEVERAL, "no hour may lie in two blocks")):
            if np.any(chosen == mark):
                step = int(np.argmax(chosen == mark))
                fix = "Make the blocks cover each hour once; a block without conditions takes the rest."
                yield finding(rule, _step_text(grid, step, int(np.sum(chosen == mark))), fix)


def _check_series(
    series: PriceSeries, grid: TimeGrid, finding: Callable[[str, str | None, str], Finding]
) -> Iterable[Finding]:
    if grid.kind != series.grid.kind:
        rule = "load and price must both run over a year"
        yield finding(rule, f"load over {grid.kind}", "Give both as a year, or both as typical days.")
        return
    steps = (len(grid.hours), len(series.grid.hours))
    if max(steps) % min(steps) or abs(sum(grid.hours) - sum(series.grid.hours)) > _SAME_HOURS:
        rule = "load and price must run over the same hours"
        got = f"{steps[0]} steps of load, {steps[1]} steps of price"
        yield finding(rule, got, "Give both for the same year, in steps of which one divides the other.")


def _missing_calendar(grid: TimeGrid, blocks: tuple[PriceBlock, ...]) -> str:
    needs = {
        "day": (any(block.day_types for block in blocks), grid.day_types),
        "month": (any(block.months for block in blocks), grid.months),
        "time of day": (any(block.starts for block in blocks), grid.starts),
    }
    return ", ".join(name for name, (needed, has) in needs.items() if needed and not has)


def _step_text(grid: TimeGrid, step: int, count: int) -> str:
    parts = []
    if grid.months:
        parts.append(f"month {grid.months[step]}")
    if grid.day_types:
        parts.append(grid.day_types[step])
    if grid.starts:
        hour = grid.starts[step]
        parts.append(f"{int(hour):02d}:{round(hour % 1 * 60):02d}")
    return f"{', '.join(parts) or f'step {step + 1}'} ({count} steps in all)"
