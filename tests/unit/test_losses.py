"""Part-load loss, efficiency in both power bases, peak efficiency index; figures of the demo are invented data."""

from __future__ import annotations

import numpy as np
import pytest

from lossworth.capitalization import losses


def test_part_load_loss__square_of_the_load() -> None:
    """No load leaves the no-load loss; half load adds a quarter of the load loss."""
    assert losses.part_load_loss(2, 8, [0, 0.5, 1, 1.5]).tolist() == [2, 4, 10, 20]


def test_efficiency__the_two_bases_differ() -> None:
    """A loss of 2 % of the rated power: 98 % of input, but 100/102 of output."""
    of_input = losses.efficiency_of_input(1, 1, rated_power_kva=100)
    of_output = losses.efficiency_of_output(1, 1, rated_power_kva=100)
    np.testing.assert_allclose([of_input, of_output], [0.98, 100 / 102], rtol=1e-15)


def test_efficiency__power_factor_counts_on_the_power_alone() -> None:
    """Half the power factor halves the power, not the loss."""
    efficiency = losses.efficiency_of_output(1, 1, rated_power_kva=100, power_factor=0.5)
    assert float(efficiency) == pytest.approx(50 / 52, rel=1e-15)


@pytest.mark.parametrize(
    ("p0", "pk", "printed"), [(15.8, 139, "99.7025"), (14.4, 141.892, "99.7130"), (14.4, 57.2, "99.8178")]
)
def test_peak_efficiency_index__demo(p0: float, pk: float, printed: str) -> None:
    """Indices of the demo's power transformers on 31.5 MVA (invented data)."""
    assert printed == f"{100 * float(losses.peak_efficiency_index(p0, pk, rated_power_kva=31500)):.4f}"


def test_peak_efficiency_index__cooling_at_no_load_adds_to_the_no_load_loss() -> None:
    """Pc0 stands beside P0."""
    together = losses.peak_efficiency_index(4, 9, rated_power_kva=1000)
    apart = losses.peak_efficiency_index(3, 9, rated_power_kva=1000, cooling_power_at_no_load_kw=1)
    assert (float(together), float(apart)) == (0.988, 0.988)


def test_load_of_greatest_efficiency__losses_are_equal_there() -> None:
    """At the best load, no-load and load loss are the same."""
    load = losses.load_of_greatest_efficiency(0.61, 7.25)
    assert float(losses.part_load_loss(0, 7.25, load)) == pytest.approx(0.61, rel=1e-15)
