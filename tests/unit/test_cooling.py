"""Cooling that follows the growing load: hours by year, share at peak, rate C, and memory."""

from __future__ import annotations

import tracemalloc
from typing import Any

import numpy as np
import pytest

from lossworth.capitalization import cooling
from lossworth.capitalization.duration import LoadDuration, load_duration
from lossworth.capitalization.load import peak_load_by_year
from lossworth.capitalization.rates import loss_capitalization_rates

ECONOMICS: dict[str, Any] = {
    "discount_rate": 0.06,
    "evaluation_period_years": 20,
    "energy_price_per_kwh": 0.085,
    "energy_price_escalation": 0.01,
    "demand_charge_per_kw_year": 55,
    "upstream_gross_up": 1.03,
}
GROWTH: dict[str, Any] = {"peak_load_pu": 0.6, "peak_load_growth": 0.03, "peak_load_cap_pu": 0.95}
#: Of a unit of 20/31.5 MVA, on the top rating.
STARTS_ABOVE = 20 / 31.5


def quarter_hours() -> LoadDuration:
    """An invented year of quarter-hours: daily and yearly waves with noise."""
    time = np.arange(35040) / 96
    noise = np.random.default_rng(7).uniform(0, 0.2, time.size)
    load = 0.5 + 0.2 * np.sin(2 * np.pi * time) + 0.15 * np.cos(2 * np.pi * time / 365) + noise
    return load_duration(load / load.max())


def test_auxiliary_rate__equals_the_rates_with_hours_by_year() -> None:
    """The hours and the share at peak of each year, put into the plain engine, give the same C."""
    shape = quarter_hours()
    loads = peak_load_by_year(0.6, 20, peak_load_growth=0.03, peak_load_cap_pu=0.95)
    hours = cooling.cooling_hours_by_year(shape, peak_load_by_year_pu=loads, starts_above_pu=STARTS_ABOVE)
    share = cooling.cooling_share_at_peak_by_year(
        peak_load_by_year_pu=loads, starts_above_pu=STARTS_ABOVE, peak_responsibility_factor=0.9
    )
    plain = loss_capitalization_rates(
        **ECONOMICS, **GROWTH, loss_factor=0.3, cooling_hours_by_year=hours, cooling_share_at_peak_by_year=share
    )
    rate = cooling.auxiliary_rate(
        shape, starts_above_pu=STARTS_ABOVE, peak_responsibility_factor=0.9, **ECONOMICS, **GROWTH
    )
    np.testing.assert_allclose(rate, plain.auxiliary, rtol=1e-13)
    assert hours[0] < hours[10] < hours[-1]
    assert share.tolist() == sorted(share.tolist())
    assert set(share.tolist()) == {0, 1}


def test_auxiliary_rate__every_year_and_step_written_out() -> None:
    """The matrix of years and steps that the engine avoids gives the same C."""
    steps = np.array([0.2, 0.55, 0.7, 0.85, 1.0])
    loads = np.minimum(0.6 * 1.03 ** np.arange(20), 0.95)[:, np.newaxis]
    years = np.arange(1, 21)
    hours = 8760 / 5 * (loads * steps > STARTS_ABOVE).sum(axis=1)
    yearly = 0.085 * 1.01 ** (years - 1) * hours + 55 * (loads[:, 0] > STARTS_ABOVE)
    rate = cooling.auxiliary_rate(load_duration(steps), starts_above_pu=STARTS_ABOVE, **ECONOMICS, **GROWTH)
    np.testing.assert_allclose(rate, 1.03 * np.sum(yearly / 1.06**years), rtol=1e-14)


def test_auxiliary_rate__always_or_never_on() -> None:
    """A stage without a threshold runs whenever there is load; one above all loads never runs."""
    shape = load_duration([0.25, 0.5, 1.0])
    always, never = cooling.auxiliary_rate(shape, starts_above_pu=[0, 5], **ECONOMICS, **GROWTH)
    whole = loss_capitalization_rates(**ECONOMICS, **GROWTH, loss_factor=0.3).no_load
    assert (float(always), float(never)) == (pytest.approx(float(whole), rel=1e-14), 0)


def test_auxiliary_rate__no_load_no_cooling() -> None:
    """A unit without load never starts its fans, whatever the threshold."""
    shape = load_duration([0.25, 1.0])
    rate = cooling.auxiliary_rate(shape, starts_above_pu=[0.0, 0.5], **ECONOMICS, peak_load_pu=0)
    assert rate.tolist() == [0, 0]


def test_auxiliary_rate__dear_hours_count_more() -> None:
    """A duration curve with prices values the cooling of peak hours by their price."""
    steps = [0.25, 1.0]
    plain = cooling.auxiliary_rate(load_duration(steps), starts_above_pu=0.5, **ECONOMICS, peak_load_pu=0.6)
    priced = cooling.auxiliary_rate(
        load_duration(steps, price=[1, 3]), starts_above_pu=0.5, **ECONOMICS, peak_load_pu=0.6
    )
    energy = plain - cooling.auxiliary_rate(
        load_duration(steps), starts_above_pu=0.5, **{**ECONOMICS, "energy_price_per_kwh": 0}, peak_load_pu=0.6
    )
    np.testing.assert_allclose(priced - plain, energy / 2, rtol=1e-12)


def test_auxiliary_rate__memory_does_not_grow_with_the_scenarios() -> None:
    """Beyond inputs and result, four times the scenarios over 40 years of quarter-hours take no more memory."""
    shape = quarter_hours()

    def beyond_the_result(scenarios: int) -> int:
        loads = np.linspace(0.4, 0.8, scenarios)
        tracemalloc.start()
        try:
            result = cooling.auxiliary_rate(
                shape,
                starts_above_pu=STARTS_ABOVE,
                discount_rate=0.06,
                evaluation_period_years=40,
                energy_price_per_kwh=0.085,
                peak_load_pu=loads,
                peak_load_growth=0.01,
            )
            return tracemalloc.get_traced_memory()[1] - result.nbytes
        finally:
            tracemalloc.stop()

    few, many = beyond_the_result(100_000), beyond_the_result(400_000)
    assert abs(many - few) < 0.05 * few
    assert many < 1_000_000


@pytest.mark.parametrize(
    ("changes", "message"),
    [
        ({"starts_above_pu": -0.1}, r"^starts_above_pu: must be at least 0, got -0.1$"),
        ({"peak_responsibility_factor": 2}, r"^peak_responsibility_factor: must be at least 0 and at most 1, got 2$"),
        ({"shape": load_duration([10.0, 80.0])}, r"^shape: must be of the load over its peak, so 1 at most, got 80$"),
        ({"starts_above_pu": [0.1, 0.2], "discount_rate": [0.1] * 3}, r"^shapes do not fit together: "),
    ],
)
def test_auxiliary_rate__refusals(changes: dict[str, Any], message: str) -> None:
    """Thresholds, ratios and shapes of load are checked by name."""
    arguments = {"shape": load_duration([0.5, 1.0]), "starts_above_pu": 0.5, **ECONOMICS, **GROWTH}
    with pytest.raises(ValueError, match=message):
        cooling.auxiliary_rate(**{**arguments, **changes})


def test_auxiliary_rate__inputs_that_have_no_part_here() -> None:
    """A loss factor says nothing about cooling, and is refused as unknown."""
    with pytest.raises(TypeError, match=r"^unknown input: loss_factor$"):
        cooling.auxiliary_rate(load_duration([1.0]), starts_above_pu=0.5, **ECONOMICS, **GROWTH, loss_factor=0.3)  # type: ignore[call-arg]
