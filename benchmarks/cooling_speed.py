"""Time and memory of cooling that follows the growing load: a year of quarter-hours over 40 years, many scenarios.

This is the part of the model that does not separate into a sum over years times a sum over hours. Written out, it
compares years x hours x scenarios loads with the threshold of the fans. The engine must not hold such an array, nor
one of years x scenarios: its memory beyond inputs and result must stay the same as the scenarios grow. Each number of
scenarios runs in a process of its own. Exit code 1 if memory grows or a result disagrees.
"""

from __future__ import annotations

import json
import os
import platform
import resource
import subprocess
import sys
import time
import tracemalloc
from typing import Any

import numpy as np
from numpy.typing import NDArray

from lossworth.capitalization.cooling import auxiliary_rate
from lossworth.capitalization.duration import load_duration

Array = NDArray[np.float64]

STEPS = 35_040
YEARS = 40
SIZES = (10_000, 100_000, 1_000_000)
#: Scenarios that are also written out, years x hours, to compare result and time.
WRITTEN_OUT = 20
AGREEMENT = 1e-12
#: Working memory of the most scenarios over that of the fewest; the rest is what the allocator rounds.
GROWTH_BAR = 1.05
#: Fans of a unit of 20/31.5 MVA, on the top rating.
STARTS_ABOVE = 20 / 31.5
CHARGE = 55.0
#: Resident memory comes in kilobytes on Linux, in bytes on macOS.
RESIDENT_UNIT = 1 if sys.platform == "darwin" else 1024


def load_of_a_year() -> Array:
    """An invented year of quarter-hours over its peak: daily and yearly waves with noise."""
    days = np.arange(STEPS) / 96
    noise = np.random.default_rng(7).uniform(0, 0.2, STEPS)
    load = 0.5 + 0.2 * np.sin(2 * np.pi * days) + 0.15 * np.cos(2 * np.pi * days / 365) + noise
    return np.asarray(load / load.max())


def drawn(scenarios: int) -> dict[str, Any]:
    """Invented scenarios: discount rate, price, peak load and growth vary."""
    random = np.random.default_rng(1)
    return {
        "discount_rate": random.uniform(0.03, 0.09, scenarios),
        "evaluation_period_years": YEARS,
        "energy_price_per_kwh": random.uniform(0.05, 0.15, scenarios),
        "demand_charge_per_kw_year": CHARGE,
        "peak_load_pu": random.uniform(0.4, 0.8, scenarios),
        "peak_load_growth": random.uniform(0, 0.02, scenarios),
        "peak_load_cap_pu": 1.0,
    }


def written_out(load: Array, inputs: dict[str, Any], scenario: int) -> float:
    """One scenario with the load of every quarter-hour of every year."""
    years = np.arange(1, YEARS + 1)
    growth = (1 + inputs["peak_load_growth"][scenario]) ** (years - 1)
    peak = np.minimum(inputs["peak_load_pu"][scenario] * growth, inputs["peak_load_cap_pu"])
    hours = (peak[:, np.newaxis] * load > STARTS_ABOVE).sum(axis=1) * (8760 / STEPS)
    costs = inputs["energy_price_per_kwh"][scenario] * hours + CHARGE * (peak > STARTS_ABOVE)
    return float(np.sum(costs / (1 + inputs["discount_rate"][scenario]) ** years))


def peak_resident() -> int:
    """Greatest resident memory of this process so far. [byte]"""
    return resource.getrusage(resource.RUSAGE_SELF).ru_maxrss * RESIDENT_UNIT


def measure(scenarios: int) -> dict[str, float]:
    """Time and memory of one number of scenarios; to be called in a fresh process."""
    load, inputs = load_of_a_year(), drawn(scenarios)
    shape = load_duration(load)
    auxiliary_rate(shape, starts_above_pu=STARTS_ABOVE, **drawn(10))  # everything is loaded once
    before, start = peak_resident(), time.perf_counter()
    rate = auxiliary_rate(shape, starts_above_pu=STARTS_ABOVE, **inputs)
    seconds, resident = time.perf_counter() - start, peak_resident() - before - rate.nbytes
    start = time.perf_counter()
    expected = [written_out(load, inputs, scenario) for scenario in range(WRITTEN_OUT)]
    slow = (time.perf_counter() - start) / WRITTEN_OUT
    errors = [abs(float(rate[i]) - value) / (value or 1) for i, value in enumerate(expected)]
    tracemalloc.start()
    traced = auxiliary_rate(shape, starts_above_pu=STARTS_ABOVE, **inputs)
    working = tracemalloc.get_traced_memory()[1] - traced.nbytes
    tracemalloc.stop()
    held = sum(value.nbytes for value in inputs.values() if isinstance(value, np.ndarray)) + rate.nbytes
    return {
        "scenarios": scenarios,
        "seconds": seconds,
        "written_out_seconds": slow * scenarios,
        "held": held,
        "working": working,
        "resident": resident,
        "written_out_bytes": 8.0 * YEARS * STEPS * scenarios,
        "error": max(errors),
    }


def main() -> int:
    """Measure every number of scenarios in a process of its own, and print the table."""
    rows: list[dict[str, float]] = []
    for scenarios in SIZES:
        command = [sys.executable, __file__, str(scenarios)]
        done = subprocess.run(command, check=True, stdout=subprocess.PIPE)
        rows.append(json.loads(done.stdout))
    print(f"Rate C of cooling that follows the growing load: {STEPS:,} quarter-hours, {YEARS} years. Python ", end="")
    print(f"{platform.python_version()}, NumPy {np.__version__}, {os.cpu_count()} cores (one is used).\n")
    print(
        "| scenarios | time, s | years x hours written out, s | inputs and result, MB | working memory beyond, MB ",
        end="",
    )
    print("| resident memory beyond, MB | array of years x hours x scenarios, GB |")
    print("|---|---|---|---|---|---|---|")
    for row in rows:
        times = f"{row['scenarios']:,} | {row['seconds']:.2f} | {row['written_out_seconds']:,.0f}"
        sizes = f"{row['held'] / 1e6:.2f} | {row['working'] / 1e6:.2f} | {row['resident'] / 1e6:.2f}"
        print(f"| {times} | {sizes} | {row['written_out_bytes'] / 1e9:,.0f} |")
    growth = rows[-1]["working"] / rows[0]["working"]
    error = max(row["error"] for row in rows)
    print(f"\nworking memory, {SIZES[-1] // SIZES[0]} times the scenarios: times {growth:.3f}, bar {GROWTH_BAR}")
    print(f"greatest difference from the sum written out: {error:.0e}, bar {AGREEMENT:.0e}")
    print(f"time written out is measured on {WRITTEN_OUT} scenarios and multiplied up")
    return 0 if growth <= GROWTH_BAR and error <= AGREEMENT else 1


if __name__ == "__main__":
    if len(sys.argv) > 1:
        print(json.dumps(measure(int(sys.argv[1]))))
    else:
        raise SystemExit(main())
