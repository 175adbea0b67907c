"""Loss factor, peak load by year, equivalent peak load."""

from __future__ import annotations

import numpy as np
import pytest

from lossworth.capitalization import load


@pytest.mark.parametrize(
    ("load_factor", "expected"), [(0.30, 0.1215), (0.45, 0.239625), (0.55, 0.339625), (0.0, 0.0), (1.0, 1.0)]
)
def test_loss_factor__demo_settings(load_factor: float, expected: float) -> None:
    """With k = 0.15 as in the demo (invented data), and the ends, where every k gives the same."""
    assert expected == pytest.approx(float(load.loss_factor(load_factor, 0.15)), rel=1e-15)


def test_loss_factor__coefficients_at_the_ends() -> None:
    """With k = 0 it is the square (a steady load), with k = 1 the load factor itself (full load or none)."""
    assert load.loss_factor(0.55, [0, 1]).round(12).tolist() == [0.3025, 0.55]


def test_published_coefficients__name_their_evidence() -> None:
    """Each coefficient says whether it was read or is remembered, and lies within the bounds."""
    for coefficient, source in load.PUBLISHED_COEFFICIENTS:
        assert 0 < coefficient < 1
        assert source.endswith(("(read)", "(from memory)"))


def test_peak_load_by_year__cap_on_the_load() -> None:
    """The cap acts on the load, so the square stops at the square of the cap."""
    loads = load.peak_load_by_year(0.6, 5, peak_load_growth=0.1, peak_load_cap_pu=0.75)
    np.testing.assert_allclose(loads, [0.6, 0.66, 0.726, 0.75, 0.75], rtol=1e-15)


def test_peak_load_by_year__shrinking_load_leaves_the_cap_at_its_own_time() -> None:
    """A load above its cap is cut, and shrinks on from its own course, not from the cap."""
    loads = load.peak_load_by_year(1.0, 4, peak_load_growth=-0.1, peak_load_cap_pu=0.85)
    np.testing.assert_allclose(loads, [0.85, 0.85, 0.81, 0.729], rtol=1e-15)


def test_peak_load_by_year__years_on_the_last_axis() -> None:
    """Scenarios keep their axes; the years come last."""
    loads = load.peak_load_by_year([[0.5], [0.6]], 7, peak_load_growth=[0.0, 0.01, 0.02])
    assert loads.shape == (2, 3, 7)


def test_equivalent_peak_load__constant_load() -> None:
    """A load that does not move is its own equivalent."""
    equivalent = load.equivalent_peak_load([0.7] * 5, discount_factor=[1] * 5, energy_price_per_kwh=0.1)
    np.testing.assert_allclose(equivalent, 0.7, rtol=1e-15)


def test_equivalent_peak_load__price_moves_the_weights() -> None:
    """Discount factors alone are the weights only at constant price: a dear late year counts more."""
    loads, factors = [0.5, 1.0], [0.9, 0.8]
    constant = load.equivalent_peak_load(loads, discount_factor=factors, energy_price_per_kwh=0.1)
    rising = load.equivalent_peak_load(loads, discount_factor=factors, energy_price_per_kwh=[0.1, 0.2])
    np.testing.assert_allclose(constant, ((0.9 * 0.25 + 0.8) / 1.7) ** 0.5, rtol=1e-15)
    np.testing.assert_allclose(rising, ((0.9 * 0.25 + 1.6) / 2.5) ** 0.5, rtol=1e-15)
