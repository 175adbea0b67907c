"""How long the rates A, B and C of many scenarios take: the engine against other ways to the same sums, in pairs.

Every candidate computes all three rates of the same 100,000 invented scenarios of 30 years, and must agree with the
engine to twelve digits. Engine and candidate run one after the other and in changing order, so that whatever else the
machine does meets both; the ratio is the median over the pairs. Exit code 1 if a bar is missed or a result disagrees.
"""

from __future__ import annotations

import functools
import math
import os
import platform
import statistics
import time
from collections.abc import Callable
from dataclasses import dataclass
from typing import Any

import numpy as np
import numpy_financial as npf  # type: ignore[import-untyped]
from numpy.typing import NDArray

from lossworth.capitalization.rates import Rates, loss_capitalization_rates

Array = NDArray[np.float64]

SCENARIOS = 100_000
YEARS = 30
HOURS = 8760.0
COOLING_HOURS = 600.0
COOLING_SHARE = 0.75
AGREEMENT = 1e-12
#: The plain loop may be at least so many times slower, the leanest NumPy at most so many times faster.
LOOP_BAR = 50.0
LEAN_BAR = 2.0
#: Scenarios at once in the blocked form: which size fits a processor's cache best is found by trying.
BLOCKS = (4_096, 8_192, 16_384)
#: Invented ranges of the varying inputs, in the order in which they stand everywhere below.
RANGES = {
    "discount_rate": (0.03, 0.09),
    "energy_price_per_kwh": (0.05, 0.15),
    "energy_price_escalation": (0, 0.03),
    "demand_charge_per_kw_year": (30, 120),
    "demand_charge_escalation": (0, 0.02),
    "loss_factor": (0.1, 0.4),
    "peak_load_pu": (0.4, 0.8),
    "peak_load_growth": (0, 0.02),
    "peak_load_cap_pu": (0.8, 1),
    "peak_responsibility_factor": (0.6, 1),
}


def drawn() -> tuple[Array, ...]:
    """Invented scenarios: every input varies."""
    random = np.random.default_rng(1)
    return tuple(random.uniform(low, high, SCENARIOS) for low, high in RANGES.values())


def engine(inputs: tuple[Array, ...]) -> Rates:
    """The engine, as anybody would call it."""
    given: Any = dict(zip(RANGES, inputs, strict=True))
    given |= {"evaluation_period_years": YEARS, "cooling_hours": COOLING_HOURS, "cooling_share_at_peak": COOLING_SHARE}
    return loss_capitalization_rates(**given)


def loop_as_written(rows: list[tuple[float, ...]]) -> list[tuple[float, float, float]]:
    """The formulas of docs/method.md, year by year, as anybody would write them down."""
    rates = []
    for r, p1, e, d1, ed, loss_factor, beta1, g, cap, responsibility in rows:
        a = b = c = 0.0
        for t in range(1, YEARS + 1):
            factor = (1 + r) ** -t
            p = p1 * (1 + e) ** (t - 1)
            d = d1 * (1 + ed) ** (t - 1)
            beta = min(beta1 * (1 + g) ** (t - 1), cap)
            a += factor * (p * HOURS + d)
            b += factor * beta**2 * (p * HOURS * loss_factor + d * responsibility**2)
            c += factor * (p * COOLING_HOURS + d * COOLING_SHARE)
        rates.append((a, b, c))
    return rates


def tightest_loop(rows: list[tuple[float, ...]]) -> list[tuple[float, float, float]]:
    """The same sums with every power replaced by a product and every constant taken out of the loop."""
    rates = []
    for r, p, e, d, ed, loss_factor, beta, g, cap, responsibility in rows:
        v = 1 / (1 + r)
        p, d, square, cap = p * v, d * v, beta * beta, cap * cap
        e, ed, g = (1 + e) * v, (1 + ed) * v, (1 + g) * (1 + g)
        energy = demand = energy_square = demand_square = 0.0
        for _ in range(YEARS):
            x = square if square < cap else cap  # min() is a call, and slower
            energy += p
            demand += d
            energy_square += p * x
            demand_square += d * x
            p *= e
            d *= ed
            square *= g
        b = HOURS * loss_factor * energy_square + responsibility * responsibility * demand_square
        rates.append((HOURS * energy + demand, b, COOLING_HOURS * energy + COOLING_SHARE * demand))
    return rates


def npv_per_scenario(rows: list[tuple[float, ...]]) -> list[tuple[float, float, float]]:
    """Costs of the years of one scenario as arrays, each discounted by numpy-financial."""
    years = np.arange(YEARS)
    rates = []
    for r, p1, e, d1, ed, loss_factor, beta1, g, cap, responsibility in rows:
        p, d = p1 * (1 + e) ** years, d1 * (1 + ed) ** years
        square = np.minimum(beta1 * (1 + g) ** years, cap) ** 2
        costs = (
            p * HOURS + d,
            square * (p * HOURS * loss_factor + d * responsibility**2),
            p * COOLING_HOURS + d * COOLING_SHARE,
        )
        a, b, c = (float(npf.npv(r, cost)) / (1 + r) for cost in costs)  # its first payment is not discounted
        rates.append((a, b, c))
    return rates


def years_by_scenarios(inputs: tuple[Array, ...]) -> tuple[Array, Array, Array]:
    """The formulas with an array of years x scenarios for every quantity."""
    r, p1, e, d1, ed, loss_factor, beta1, g, cap, responsibility = inputs
    t = np.arange(1, YEARS + 1)[:, np.newaxis]
    factor = (1 + r) ** -t
    p, d = p1 * (1 + e) ** (t - 1), d1 * (1 + ed) ** (t - 1)
    square = np.minimum(beta1 * (1 + g) ** (t - 1), cap) ** 2
    a = np.sum(factor * (p * HOURS + d), axis=0)
    b = np.sum(factor * square * (p * HOURS * loss_factor + d * responsibility**2), axis=0)
    return a, b, np.sum(factor * (p * COOLING_HOURS + d * COOLING_SHARE), axis=0)


def lean_numpy(inputs: tuple[Array, ...]) -> tuple[Array, Array, Array]:
    """The recursion over the years in place, without any check, option or table: ten array operations a year."""
    r, p, e, d, ed, loss_factor, beta, g, cap, responsibility = inputs
    v = 1 / (1 + r)
    p, d, square, cap = p * v, d * v, beta * beta, cap * cap
    e, ed, g = (1 + e) * v, (1 + ed) * v, (1 + g) ** 2
    energy, demand, energy_square, demand_square = (np.zeros_like(p) for _ in range(4))
    x, term = np.empty_like(p), np.empty_like(p)
    for _ in range(YEARS):
        energy += p
        demand += d
        np.minimum(square, cap, out=x)
        energy_square += np.multiply(p, x, out=term)
        demand_square += np.multiply(d, x, out=term)
        p *= e
        d *= ed
        square *= g
    b = HOURS * loss_factor * energy_square + responsibility**2 * demand_square
    return HOURS * energy + demand, b, COOLING_HOURS * energy + COOLING_SHARE * demand


def lean_numpy_blocked(inputs: tuple[Array, ...], block: int) -> tuple[Array, Array, Array]:
    """The same, so many scenarios at once."""
    a, b, c = (np.empty(SCENARIOS) for _ in range(3))
    for start in range(0, SCENARIOS, block):
        part = slice(start, start + block)
        a[part], b[part], c[part] = lean_numpy(tuple(array[part] for array in inputs))
    return a, b, c


@dataclass(frozen=True)
class Result:
    """What the pairs of one candidate gave: medians in seconds, and the median of candidate over engine."""

    name: str
    pairs: int
    candidate: float
    engine: float
    ratio: float
    error: float


def measure(name: str, pairs: int, candidate: Callable[[], Any], ours: Callable[[], Rates]) -> Result:
    """Run candidate and engine in pairs."""
    rates, computed = ours(), np.asarray(candidate())
    expected = np.stack([rates.no_load, rates.load, rates.auxiliary])
    error = float(np.max(np.abs((computed if len(computed) == 3 else computed.T) / expected - 1)))
    times: dict[str, list[float]] = {"candidate": [], "engine": []}
    for number in range(pairs):
        order: list[tuple[str, Callable[[], Any]]] = [("candidate", candidate), ("engine", ours)]
        for who, run in order if number % 2 else reversed(order):
            start = time.perf_counter()
            run()
            times[who].append(time.perf_counter() - start)
    ratio = statistics.median(c / e for c, e in zip(times["candidate"], times["engine"], strict=True))
    return Result(name, pairs, statistics.median(times["candidate"]), statistics.median(times["engine"]), ratio, error)


def main() -> int:
    """Measure all candidates."""
    inputs = drawn()
    rows = list(zip(*(array.tolist() for array in inputs), strict=True))

    def ours() -> Rates:
        return engine(inputs)

    results = [
        measure("plain loop, formulas as written", 5, lambda: loop_as_written(rows), ours),
        measure("plain loop, the tightest we can write", 5, lambda: tightest_loop(rows), ours),
        measure("numpy-financial, npv per scenario", 3, lambda: npv_per_scenario(rows), ours),
        measure("NumPy, arrays of years x scenarios", 7, lambda: years_by_scenarios(inputs), ours),
    ]
    leanest = [measure("leanest NumPy, all scenarios at once", 31, lambda: lean_numpy(inputs), ours)]
    for block in BLOCKS:
        name = f"leanest NumPy, {block:,} scenarios at once"
        leanest.append(measure(name, 31, functools.partial(lean_numpy_blocked, inputs, block), ours))
    return report(results, leanest)


def report(results: list[Result], leanest: list[Result]) -> int:
    """Print the table and what became of the bars; the exit code."""
    print(f"Rates A, B and C of {SCENARIOS:,} scenarios of {YEARS} years. Python {platform.python_version()}, ", end="")
    print(f"NumPy {np.__version__}, {os.cpu_count()} cores (one is used).\n")
    print("| candidate | candidate, ms | engine, ms | candidate / engine | pairs | greatest difference |")
    print("|---|---|---|---|---|---|")
    for row in results + leanest:
        times = f"{1000 * row.candidate:,.1f} | {1000 * row.engine:,.1f} | {row.ratio:,.2f}"
        print(f"| {row.name} | {times} | {row.pairs} | {row.error:.0e} |")
    loop, lean = results[0].ratio, max(1 / row.ratio for row in leanest)
    print(f"\nplain loop: {loop:.0f} times slower than the engine, bar {LOOP_BAR:.0f}")
    print(f"leanest NumPy: {lean:.2f} times faster than the engine, bar {LEAN_BAR:.2f}")
    agree = all(row.error < AGREEMENT for row in results + leanest)
    print(f"all agree to {-math.log10(AGREEMENT):.0f} digits: {'yes' if agree else 'NO'}")
    return 0 if loop >= LOOP_BAR and lean <= LEAN_BAR and agree else 1


if __name__ == "__main__":
    raise SystemExit(main())
