"""Hypothesis strategies of prices, rates and loads, at, near and far from the points where closed forms are 0/0."""

from __future__ import annotations

import math

from hypothesis import settings
from hypothesis import strategies as st

#: The same examples in every run, and nothing written to disk.
thorough = settings(max_examples=200, deadline=None, derandomize=True, database=None)
brief = settings(thorough, max_examples=60)

#: Distances from a singular point, from none to clearly apart.
distances = st.one_of(
    st.just(0.0),
    st.builds(lambda sign, power: sign * 10.0**power, st.sampled_from([-1, 1]), st.integers(-17, -2)),
)


def fractions_of_a_year(lowest: float, highest: float) -> st.SearchStrategy[float]:
    """Rates in a range, 0 and its neighbors included; none so small that exact fractions of it take minutes."""
    return st.one_of(st.floats(lowest, highest).map(lambda rate: rate if abs(rate) > 1e-18 else 0.0), distances)


rates = fractions_of_a_year(-0.3, 1.0)
escalations = fractions_of_a_year(-0.2, 0.3)
growths = fractions_of_a_year(-0.05, 0.08)
years = st.integers(1, 80)
shares = st.one_of(st.just(0.0), st.just(1.0), st.floats(1e-6, 1))
prices = st.floats(0.001, 1)
charges = st.one_of(st.just(0.0), st.floats(0.1, 500))
loads = st.floats(0.05, 1.5)
caps = st.one_of(st.just(math.inf), st.floats(0.05, 1.5))

#: Everything of the year-by-year model; timing at the ends of the year and whole delays keep fractions exact.
models = st.fixed_dictionaries(
    {
        "discount_rate": rates,
        "evaluation_period_years": st.integers(1, 50),
        "energy_price_per_kwh": prices,
        "loss_factor": shares,
        "peak_load_pu": loads,
    },
    optional={
        "years_before_end": st.sampled_from([0.0, 1.0]),
        "energy_price_escalation": escalations,
        "escalate_before_year_1": st.booleans(),
        "carbon_cost_per_kwh": st.one_of(st.just(0.0), prices),
        "carbon_cost_escalation": escalations,
        "demand_charge_per_kw_year": charges,
        "demand_charge_escalation": escalations,
        "peak_load_growth": growths,
        "peak_load_cap_pu": caps,
        "peak_responsibility_factor": shares,
        "hours_energized": st.floats(1, 8784),
        "hours_of_load": st.floats(1, 8784),
        "cooling_hours": st.floats(1, 8784),
        "cooling_share_at_peak": shares,
        "upstream_gross_up": st.floats(1, 1.2),
        "price_delay_years": st.integers(0, 4),
        "discount_delay_years": st.integers(0, 4),
    },
)

profiles = st.lists(st.floats(0, 1000), min_size=2, max_size=60).filter(lambda steps: max(steps) > 1e-3)
