"""How long all break-even values of a lot with 200 bids take, against sweeps of the same inputs, in pairs.

The bids are invented and seeded: they trade price against losses, so that several of them lead somewhere. A sweep
evaluates every bid on a grid of each input and sees a border between two points of the grid: its accuracy is the step.
The break-even values are accurate to the last bits, and no border is missed; they also answer for the price and the
guarantees of each single bid, which the sweeps are not asked for. A sweep whose changes are then halved down to the
same accuracy is measured too; it misses two borders that lie inside one step.

Exit code 1 if the break-even values take longer than the halved sweep, which is the sweep of the same accuracy, or than
the sweep of 10,000 points, whose accuracy is a hundred million times less; or if a border that a sweep sees is missing.
"""

from __future__ import annotations

import math
import os
import platform
import statistics
import time
from collections.abc import Callable
from decimal import Decimal
from functools import partial
from pathlib import Path

import numpy as np
from numpy.typing import NDArray

from lossworth.evaluation.evaluate import evaluate
from lossworth.findings import Place
from lossworth.intake.tender_file import read_tender
from lossworth.intake.tender_folder import find_inputs
from lossworth.records.bid import Offer
from lossworth.records.quantity import Entry, Quantity
from lossworth.sensitivity.break_even import BreakEven, break_evens
from lossworth.sensitivity.break_even_map import break_even_map
from lossworth.sensitivity.lot_model import LotModel, lot_model

Array = NDArray[np.float64]
SAMPLE = Path(__file__).resolve().parents[1] / "sample_bids"
BIDS = 200
LOT = "4"
POINTS = (1_000, 10_000, 100_000)
BAR = 10_000
PAIRS = 5
HALVINGS = 44
#: Of a range that has no end: so many times the present value.
OPEN_END = 3.0


def model_of_many() -> LotModel:
    """A lot of the sample with derived rates and 200 invented bids."""
    inputs, _ = find_inputs(SAMPLE)
    if inputs is None:
        raise SystemExit("sample_bids is not where it should be")
    tender = read_tender(inputs.tender)[0]
    if tender is None:
        raise SystemExit("the tender of sample_bids cannot be read")
    evaluation = evaluate(tender, [offer(number, row) for number, row in enumerate(drawn())])
    lot = next(lot for lot in evaluation.lots if lot.lot.id == LOT)
    return lot_model(evaluation, lot, study=True)


def drawn() -> Array:
    """Price, no-load, load and auxiliary loss of each bid: the leaner the dearer, more or less."""
    random = np.random.default_rng(1)
    no_load, load = random.uniform(10, 15, BIDS), random.uniform(110, 140, BIDS)
    auxiliary = random.uniform(1, 2.5, BIDS)
    price = 690_000 - 13_000 * (no_load - 12.5) - 2_100 * (load - 125) + 900 * (no_load - 12.5) ** 2
    price += 25 * (load - 125) ** 2 + random.uniform(0, 9_000, BIDS)
    return np.column_stack([price, no_load, load, auxiliary]).round(3)


def offer(number: int, row: Array) -> Offer:
    """One bid by its drawn figures, with what the lot asks for besides."""
    place = Place("drawn", line=number + 1)

    def entry(value: str) -> Entry:
        return Entry(value=value, place=place)

    def quantity(value: float, unit: str) -> Quantity:
        exact = Decimal(str(value))
        return Quantity(value=exact, stated=exact, unit=unit, text=str(exact), place=place)

    price, no_load, load, auxiliary = (float(value) for value in row)
    return Offer(
        bidder=entry(f"Bidder {number:03d}"),
        lot=entry(LOT),
        currency=entry("NCU"),
        unit_price=quantity(price, "NCU"),
        no_load_loss_kw=quantity(no_load, "kW"),
        load_loss_kw=quantity(load, "kW"),
        auxiliary_loss_kw=quantity(auxiliary, "kW"),
        impedance_percent=quantity(12.5, "%"),
        delivery_weeks=quantity(80, "weeks"),
        place=place,
        columns={},
    )


def grids(model: LotModel, points: int) -> dict[str, Array]:
    """Grid of every input that all bids share; whole years where years are asked for."""
    found = {}
    for one in break_evens(model):
        if not one.bidder:
            end = one.highest if math.isfinite(one.highest) else OPEN_END * one.now
            whole = one.is_whole
            found[one.input] = np.arange(one.lowest, end + 1) if whole else np.linspace(one.lowest, end, points)
    return found


def sweep(model: LotModel, grid: dict[str, Array]) -> dict[str, NDArray[np.intp]]:
    """Points after which another bid leads, by input."""
    found = {}
    for name, values in grid.items():
        leader = model.costs_of({name: values}).argmin(axis=0)
        found[name] = np.flatnonzero(np.diff(leader))
    return found


def sweep_and_halve(model: LotModel, grid: dict[str, Array]) -> dict[str, Array]:
    """Borders that a sweep sees, each halved down to the last bits; between whole years there is nothing to halve."""
    found = {}
    for name, values in grid.items():
        leader = model.costs_of({name: values}).argmin(axis=0)
        at = np.flatnonzero(np.diff(leader))
        low, high, one = values[at], values[at + 1], leader[at]
        if name != "evaluation_period_years" and at.size:
            for _ in range(HALVINGS):
                middle = (low + high) / 2
                stays = model.costs_of({name: middle}).argmin(axis=0) == one
                low, high = np.where(stays, middle, low), np.where(stays, high, middle)
        found[name] = high
    return found


def timed(work: Callable[[], object]) -> float:
    start = time.perf_counter()
    work()
    return time.perf_counter() - start


def pair(model: LotModel, candidate: Callable[[], object]) -> tuple[float, float, float]:
    """Median times of ours and of a candidate, and the median of the ratios, in changing order."""
    ours, theirs = [], []
    for number in range(PAIRS):
        if number % 2:
            theirs.append(timed(candidate))
        ours.append(timed(lambda: break_evens(model)))
        if not number % 2:
            theirs.append(timed(candidate))
    ratios = [other / own for own, other in zip(ours, theirs, strict=True)]
    return statistics.median(ours), statistics.median(theirs), statistics.median(ratios)


def missing(found: tuple[BreakEven, ...], grid: dict[str, Array], seen: dict[str, NDArray[np.intp]]) -> int:
    """Changes that a sweep sees and no break-even value stands for."""
    by_name = {one.input: one for one in found if not one.bidder}
    count = 0
    for name, after in seen.items():
        values = [border.value for border in by_name[name].borders]
        low, high = grid[name][after], grid[name][after + 1]
        count += sum(not any(a <= value <= b for value in values) for a, b in zip(low, high, strict=True))
    return count


def main() -> int:
    """Print the table; the exit code says whether the bar is met."""
    model = model_of_many()
    found = break_evens(model)
    shared = [one for one in found if not one.bidder]
    grid = grids(model, POINTS[0])
    inside = sum(grid[one.input][0] <= border.value <= grid[one.input][-1] for one in shared for border in one.borders)
    print(f"{len(model.bidders)} bids, {len(shared)} shared inputs with {inside} borders in the swept ranges, ", end="")
    print(f"{len(found) - len(shared)} values of single bids. Python {platform.python_version()}, ", end="")
    print(f"NumPy {np.__version__}, {os.cpu_count()} cores (one is used).\n")
    print("| candidate | accuracy, of the range | candidate, ms | all break-even values, ms | ratio | borders seen |")
    print("|---|---|---:|---:|---:|---:|")
    lost, bar_ratio = 0, 0.0
    for points in POINTS:
        fine = grids(model, points)
        seen = sweep(model, fine)
        lost += missing(found, fine, seen)
        own, other, ratio = pair(model, partial(sweep, model, fine))
        bar_ratio = ratio if points == BAR else bar_ratio
        row(f"sweep, {points:,} points", f"{1 / points:.0e}", other, own, ratio, sum(map(len, seen.values())))
    halved = sweep_and_halve(model, grid)
    own, other, ratio = pair(model, partial(sweep_and_halve, model, grid))
    row(f"sweep, {POINTS[0]:,} points, then halved", "1e-16", other, own, ratio, sum(map(len, halved.values())))
    map_time = statistics.median(timed(lambda: break_even_map(model)) for _ in range(PAIRS))
    print(f"\nbreak-even map of the same lot, exact polygons: {1000 * map_time:.0f} ms")
    print(f"sweep of the same accuracy over all break-even values: {ratio:.2f}, bar above 1")
    print(f"sweep of {BAR:,} points over all break-even values: {bar_ratio:.2f}, bar above 1")
    print(f"borders seen by a sweep and not reported: {lost}, bar 0")
    return 0 if min(ratio, bar_ratio) > 1 and lost == 0 else 1


def row(name: str, accuracy: str, other: float, own: float, ratio: float, seen: int) -> None:
    """One line of the table."""
    print(f"| {name} | {accuracy} | {1000 * other:,.0f} | {1000 * own:,.0f} | {ratio:.2f} | {seen} |")


if __name__ == "__main__":
    raise SystemExit(main())
