"""Load profiles as plain arrays: factors, weights, prices, duration curve."""

from __future__ import annotations

from typing import Any

import numpy as np
import pytest

from lossworth.capitalization import duration, load, profile
from lossworth.capitalization.rates import loss_capitalization_rates

#: An invented day of four steps.
DAY = [20.0, 80.0, 50.0, 50.0]


def test_profile__factors_at_sight() -> None:
    """Peak 80, mean 50, mean square 2950."""
    assert float(profile.peak_load(DAY)) == 80
    assert profile.load_shape(DAY).tolist() == [0.25, 1, 0.625, 0.625]
    assert float(profile.load_factor(DAY)) == 50 / 80
    assert float(profile.loss_factor(DAY)) == 2950 / 6400


def test_profile__constant_load() -> None:
    """A steady load has both factors 1, the ends where the bounds meet."""
    assert (float(profile.load_factor([7] * 24)), float(profile.loss_factor([7] * 24))) == (1, 1)


def test_profile__on_and_off() -> None:
    """Full load a quarter of the time: both factors are a quarter, the greatest loss factor that there is."""
    assert (float(profile.load_factor([0, 0, 0, 5])), float(profile.loss_factor([0, 0, 0, 5]))) == (0.25, 0.25)


def test_profile__typical_days_with_weights() -> None:
    """A working day of weight 5 and a day off of weight 2 give what the written-out week gives."""
    work, off = [30.0, 90.0, 60.0], [30.0, 40.0, 30.0]
    weights = np.repeat([5, 2], 3)
    for factor in (profile.load_factor, profile.loss_factor):
        np.testing.assert_allclose(factor(work + off, weights=weights), factor(work * 5 + off * 2), rtol=1e-15)


def test_profile__finer_steps_change_nothing() -> None:
    """The same load in quarter-hours gives the same factors as in hours."""
    quarters = np.repeat(DAY, 4)
    np.testing.assert_allclose(profile.loss_factor(quarters), profile.loss_factor(DAY), rtol=1e-15)


def test_profile__several_profiles() -> None:
    """Profiles on the first axis keep it; each has its own peak."""
    table = np.array([DAY, [1, 1, 1, 1]])
    assert profile.loss_factor(table).tolist() == [2950 / 6400, 1]


def test_price_weighted_loss_factor__load_and_price_together() -> None:
    """Dear hours with high load raise the factor, dear hours with low load lower it; the mean price is the same."""
    plain = float(profile.loss_factor(DAY))
    together = float(profile.price_weighted_loss_factor(DAY, [1, 3, 2, 2]))
    apart = float(profile.price_weighted_loss_factor(DAY, [3, 1, 2, 2]))
    assert apart < plain < together
    assert together == pytest.approx((400 + 3 * 6400 + 4 * 2500) / 8 / 6400, rel=1e-15)


def test_price_weighted_loss_factor__gives_the_cost_of_every_hour() -> None:
    """With the mean price, the rate B of one year is the sum over the steps of price times squared load."""
    price = np.array([0.05, 0.20, 0.10, 0.10])
    factor = profile.price_weighted_loss_factor(DAY, price)
    rates = loss_capitalization_rates(
        discount_rate=0,
        evaluation_period_years=1,
        energy_price_per_kwh=price.mean(),
        loss_factor=factor,
        peak_load_pu=0.8,
    )
    expected = np.sum(2190 * price * (0.8 * np.array(DAY) / 80) ** 2)
    np.testing.assert_allclose(rates.load, expected, rtol=1e-15)


def test_price_weighted_hours__dear_hours_count_more() -> None:
    """Being on through the dear half of the day is worth more than half of the hours."""
    assert float(profile.price_weighted_hours([0, 1], [1, 3])) == 6570
    assert float(profile.price_weighted_hours([1, 1], [1, 3], hours_per_year=8784)) == 8784


@pytest.mark.parametrize(("coefficient", "load_factor"), [(0.0, 0.3), (0.15, 0.55), (1.0, 0.8)])
def test_coefficient_implied__inverse_of_the_estimate(coefficient: float, load_factor: float) -> None:
    """The coefficient comes back out of the loss factor that it gave."""
    factor = load.loss_factor(load_factor, coefficient)
    assert float(profile.coefficient_implied(load_factor, factor)) == pytest.approx(coefficient, abs=1e-14)


def test_load_duration__curve() -> None:
    """Loads in rising order, with the hours of each step and all above it; equal loads are counted together."""
    curve = duration.load_duration(DAY)
    assert curve.levels.tolist() == [20, 50, 50, 80]
    assert curve.hours.tolist() == [8760, 6570, 4380, 2190, 0]
    assert curve.hours_above([19, 20, 49, 50, 79.9, 80, np.inf]).tolist() == [8760, 6570, 6570, 2190, 2190, 0, 0]


def test_load_duration__weights_and_prices() -> None:
    """Weights and prices multiply; the hours of the year stay as many."""
    curve = duration.load_duration([0.5, 1.0], weights=[3, 1], price=[1, 3])
    assert curve.hours.tolist() == [8760, 4380, 0]


def test_load_duration__hours_above_agree_with_hours_on() -> None:
    """The curve and the plain count of priced hours are the same thing."""
    price = [0.05, 0.2, 0.1, 0.1]
    curve = duration.load_duration(DAY, price=price)
    on = (np.array(DAY) > 30).astype(float)
    np.testing.assert_allclose(curve.hours_above(30), profile.price_weighted_hours(on, price), rtol=1e-15)


@pytest.mark.parametrize(
    ("call", "message"),
    [
        (lambda: profile.loss_factor([1, -2]), r"^load: must be at least 0, got -2 at index 1$"),
        (lambda: profile.loss_factor([1, np.nan]), r"^load: must be at least 0, got nan at index 1$"),
        (lambda: profile.loss_factor([0, 0]), r"^peak of the load: must be above 0, got 0$"),
        (lambda: profile.loss_factor(5), r"^load: must have the steps on its last axis, got a single number$"),
        (lambda: profile.loss_factor([1, 2], weights=[0, 0]), r"^weights, summed over the steps: must be above 0"),
        (lambda: profile.loss_factor([1, 2], weights=[-1, 2]), r"^weights: must be at least 0, got -1 at index 0$"),
        (lambda: profile.loss_factor([1, 2], weights=[1, 2, 3]), r"^shapes do not fit together: "),
        (lambda: profile.loss_factor([1], weights=[1, 2, 3]), r"^weights: must have 1 steps on its last axis, got 3$"),
        (lambda: profile.price_weighted_loss_factor([1, 2], [0.1, -0.1]), r"^price: must be at least 0, got -0.1"),
        (lambda: profile.price_weighted_hours([1.5], 1), r"^share_on: must be at least 0 and at most 1, got 1.5"),
        (lambda: profile.coefficient_implied(1, 1), r"^load_factor - load_factor\^2: must be above 0, got 0$"),
        (lambda: duration.load_duration([1, 2], price=[0, 0]), r"^price \* weights, summed over the steps: must be"),
        (lambda: duration.load_duration([1, 2], hours_per_year=-1), r"^hours_per_year: must be at least 0, got -1$"),
    ],
)
def test_profile__refusals(call: Any, message: str) -> None:
    """Bad profiles, weights and prices are refused with argument, bound, value and index."""
    with pytest.raises(ValueError, match=message):
        call()
