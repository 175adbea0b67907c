"""Laws that the engine keeps whatever the inputs: monotonic, scaling, broadcasting, bounds of the loss factor."""

from __future__ import annotations

from typing import Any

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from lossworth.capitalization import duration, load, losses, profile
from lossworth.capitalization.cooling import auxiliary_rate
from lossworth.capitalization.rates import Rates, loss_capitalization_rates
from support.capitalization_strategies import brief, models, profiles, shares, thorough
from support.year_model import CLOSE

#: Rounding may move a sum by so much where nothing changes.
SLACK = 1e-13


def stacked(rates: Rates) -> np.ndarray:
    """A, B and C in one array."""
    return np.stack([rates.no_load, rates.load, rates.auxiliary])


@pytest.mark.parametrize(
    ("name", "step"),
    [
        ("energy_price_per_kwh", 0.01),
        ("energy_price_escalation", 0.01),
        ("carbon_cost_per_kwh", 0.01),
        ("carbon_cost_escalation", 0.01),
        ("demand_charge_per_kw_year", 5.0),
        ("demand_charge_escalation", 0.01),
        ("peak_load_pu", 0.1),
        ("peak_load_growth", 0.01),
        ("upstream_gross_up", 0.05),
        ("evaluation_period_years", 1),
    ],
)
@brief
@given(inputs=models)
def test_loss_capitalization_rates__never_fall_with(name: str, step: float, inputs: dict[str, Any]) -> None:
    """A dearer price, a larger load or a longer period never lowers a rate."""
    defaults = {"energy_price_escalation": 0.0, "demand_charge_per_kw_year": 0.0, "demand_charge_escalation": 0.0}
    defaults |= {"peak_load_growth": 0.0, "upstream_gross_up": 1.0}
    defaults |= {"carbon_cost_per_kwh": 0.0, "carbon_cost_escalation": 0.0}
    before = {**defaults, **inputs}
    after = {**before, name: before[name] + step}
    lower, upper = stacked(loss_capitalization_rates(**before)), stacked(loss_capitalization_rates(**after))
    assert (upper >= lower * (1 - SLACK)).all()


@thorough
@given(models, st.floats(0, 0.5))
def test_loss_capitalization_rates__never_rise_with_the_discount_rate(inputs: dict[str, Any], step: float) -> None:
    """The future is worth less at a higher discount rate."""
    dearer = {**inputs, "discount_rate": inputs["discount_rate"] + step}
    lower, upper = stacked(loss_capitalization_rates(**dearer)), stacked(loss_capitalization_rates(**inputs))
    assert (upper >= lower * (1 - SLACK)).all()


@thorough
@given(models, st.integers(-10, 10))
def test_loss_capitalization_rates__another_currency_unit_scales_them(inputs: dict[str, Any], power: int) -> None:
    """Prices in another unit of money scale all rates alike; by a power of two exactly."""
    unit = 2.0**power
    money = ("energy_price_per_kwh", "carbon_cost_per_kwh", "demand_charge_per_kw_year")
    scaled = {**inputs, **{name: inputs.get(name, 0.0) * unit for name in money}}
    expected = stacked(loss_capitalization_rates(**inputs)) * unit
    assert expected.tolist() == stacked(loss_capitalization_rates(**scaled)).tolist()


@thorough
@given(models)
def test_loss_capitalization_rates__half_the_load_is_a_quarter_of_the_load_rate(inputs: dict[str, Any]) -> None:
    """Load loss goes with the square of the load, its demand part too; the no-load rate stays."""
    full = loss_capitalization_rates(**{**inputs, "peak_load_cap_pu": np.inf})
    half = loss_capitalization_rates(
        **{**inputs, "peak_load_cap_pu": np.inf, "peak_load_pu": inputs["peak_load_pu"] / 2}
    )
    assert (float(full.load) / 4, float(full.no_load)) == (float(half.load), float(half.no_load))


@brief
@given(st.lists(models, min_size=2, max_size=6))
def test_loss_capitalization_rates__scenarios_are_independent(scenarios: list[dict[str, Any]]) -> None:
    """Many scenarios at once, periods of different length included, give what each gives alone."""
    defaults: dict[str, Any] = {"discount_rate": 0, "demand_charge_per_kw_year": 0.0, "peak_load_cap_pu": np.inf}
    defaults |= {"energy_price_escalation": 0.0, "demand_charge_escalation": 0.0, "peak_load_growth": 0.0}
    defaults |= {"carbon_cost_per_kwh": 0.0, "carbon_cost_escalation": 0.0}
    defaults |= {"price_delay_years": 0, "discount_delay_years": 0}
    names = ("evaluation_period_years", "energy_price_per_kwh", "loss_factor", "peak_load_pu", *defaults)
    full = [{**defaults, **scenario} for scenario in scenarios]
    together = loss_capitalization_rates(**{name: [scenario[name] for scenario in full] for name in names})
    for index, scenario in enumerate(full):
        alone = loss_capitalization_rates(**{name: scenario[name] for name in names})
        np.testing.assert_allclose(stacked(together)[:, index], stacked(alone), rtol=SLACK, atol=0)


@thorough
@given(shares, shares)
def test_loss_factor__lies_between_square_and_load_factor(load_factor: float, coefficient: float) -> None:
    """LF^2 <= LsF <= LF for every coefficient."""
    least, greatest = load.loss_factor_bounds(load_factor)
    estimate = load.loss_factor(load_factor, coefficient)
    assert least * (1 - SLACK) <= estimate <= greatest * (1 + SLACK)


@thorough
@given(profiles, st.data())
def test_profile_loss_factor__lies_between_square_and_load_factor(steps: list[float], data: st.DataObject) -> None:
    """LF^2 <= LsF <= LF for every profile and all weights."""
    weights = data.draw(st.lists(st.floats(0.1, 10), min_size=len(steps), max_size=len(steps)))
    lf, lsf = profile.load_factor(steps, weights=weights), profile.loss_factor(steps, weights=weights)
    assert lf**2 * (1 - SLACK) <= lsf <= lf * (1 + SLACK)


@thorough
@given(profiles)
def test_profile__peak_based_and_mean_based_losses_agree(steps: list[float]) -> None:
    """Peak load squared times loss factor is mean load squared times shape factor; the mean alone is a lower bound."""
    loads = np.array(steps)
    peak_based = profile.peak_load(loads) ** 2 * profile.loss_factor(loads)
    shape_factor = np.mean(loads**2) / np.mean(loads) ** 2
    np.testing.assert_allclose(peak_based, np.mean(loads) ** 2 * shape_factor, rtol=CLOSE)
    assert np.mean(loads) ** 2 <= peak_based * (1 + SLACK)


@thorough
@given(profiles)
def test_price_weighted_loss_factor__exceeds_the_plain_one_where_price_follows_load(steps: list[float]) -> None:
    """A price that rises with the load makes the losses dearer, a constant one changes nothing."""
    loads = np.array(steps)
    plain = profile.loss_factor(loads)
    following = profile.price_weighted_loss_factor(loads, 1 + loads / loads.max())
    constant = profile.price_weighted_loss_factor(loads, np.full(loads.shape, 0.07))
    assert following >= plain * (1 - SLACK)
    np.testing.assert_allclose(constant, plain, rtol=CLOSE)


@thorough
@given(profiles, st.floats(0, 1000))
def test_hours_above__counts_the_steps(steps: list[float], loading: float) -> None:
    """Bisection of the sorted loads gives what counting gives."""
    expected = 8760 * sum(step > loading for step in steps) / len(steps)
    computed = duration.load_duration(steps).hours_above(loading)
    np.testing.assert_allclose(computed, expected, rtol=CLOSE, atol=1e-9)


@brief
@given(profiles, st.floats(0.01, 1.2), st.floats(0, 0.05), st.integers(1, 12), shares)
def test_auxiliary_rate__equals_the_loop_over_years_and_steps(
    steps: list[float], threshold: float, growth: float, n: int, responsibility: float
) -> None:
    """Sorting and bisection give what the plain double loop gives."""
    shape = profile.load_shape(steps)
    expected, beta = 0.0, 0.7
    for year in range(1, n + 1):
        hours = sum(8760 / len(shape) for s in shape if s > threshold / beta)
        expected += (0.1 * hours + 50 * (beta * responsibility > threshold)) / 1.06**year
        beta *= 1 + growth
    computed = auxiliary_rate(
        duration.load_duration(shape),
        starts_above_pu=threshold,
        peak_responsibility_factor=responsibility,
        discount_rate=0.06,
        evaluation_period_years=n,
        energy_price_per_kwh=0.1,
        demand_charge_per_kw_year=50,
        peak_load_pu=0.7,
        peak_load_growth=growth,
    )
    np.testing.assert_allclose(computed, expected, rtol=CLOSE, atol=1e-9)


@thorough
@given(st.floats(0.01, 100), st.floats(0.1, 1000), st.floats(0.05, 1.5))
def test_load_of_greatest_efficiency__no_load_is_better(p0: float, pk: float, x: float) -> None:
    """No other load beats it, in either power base, and its output efficiency follows from the index."""
    best = losses.load_of_greatest_efficiency(p0, pk)
    for efficiency in (losses.efficiency_of_output, losses.efficiency_of_input):
        at_best = efficiency(p0, pk, rated_power_kva=1e5, load_pu=best)
        assert at_best >= efficiency(p0, pk, rated_power_kva=1e5, load_pu=x) * (1 - SLACK)
    index = losses.peak_efficiency_index(p0, pk, rated_power_kva=1e5)
    np.testing.assert_allclose(losses.efficiency_of_input(p0, pk, rated_power_kva=1e5, load_pu=best), index, rtol=1e-12)
