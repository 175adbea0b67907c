"""Losses on one basis: rating, reference temperature, total loss; figures of the demo are invented data."""

from __future__ import annotations

import numpy as np
import pytest

from lossworth.capitalization import loss_basis
from lossworth.capitalization.loss_basis import ALUMINUM, COPPER, COPPER_IEEE


def test_load_loss_at_rating__demo() -> None:
    """57.2 kW at 20 MVA are 141.892 kW at 31.5 MVA; the factor is 2.480625."""
    converted = loss_basis.load_loss_at_rating([1, 57.2], from_rating_kva=20000, to_rating_kva=31500)
    np.testing.assert_allclose(converted, [2.480625, 141.89175], rtol=1e-15)


def test_load_loss_at_rating__dual_temperature_rating() -> None:
    """A rating of 112 % at the higher rise differs by 1.254."""
    converted = loss_basis.load_loss_at_rating(1, from_rating_kva=100, to_rating_kva=112)
    assert f"{float(converted):.3f}" == "1.254"


def test_impedance_at_rating__demo() -> None:
    """7.9 % on 20 MVA are 12.44 % on 31.5 MVA, near the 12.5 % specified."""
    assert f"{float(loss_basis.impedance_at_rating(7.9, from_rating_kva=20, to_rating_kva=31.5)):.2f}" == "12.44"


def test_load_loss_at_rating__there_and_back() -> None:
    """Converting back gives the stated loss."""
    there = loss_basis.load_loss_at_rating(57.2, from_rating_kva=20000, to_rating_kva=31500)
    back = loss_basis.load_loss_at_rating(there, from_rating_kva=31500, to_rating_kva=20000)
    assert float(back) == pytest.approx(57.2, rel=1e-15)


def test_load_loss_at_temperature__parts_move_apart() -> None:
    """From 75 to 85 degrees copper gains 320/310 on its resistance, and loses as much on its stray part."""
    arguments = {"from_temperature_c": 75, "to_temperature_c": 85, "metal_constant_c": COPPER}
    resistive = loss_basis.load_loss_at_temperature(3.1, 0, **arguments)
    stray = loss_basis.load_loss_at_temperature(0, 3.2, **arguments)
    np.testing.assert_allclose([resistive, stray], [3.2, 3.1], rtol=1e-15)


def test_load_loss_at_temperature__metals() -> None:
    """Aluminum's resistance gains a little more than copper's on the same step."""
    converted = loss_basis.load_loss_at_temperature_unsplit(
        1, from_temperature_c=75, to_temperature_c=85, metal_constant_c=[COPPER, COPPER_IEEE, ALUMINUM]
    )
    np.testing.assert_allclose(converted, [320 / 310, 319.5 / 309.5, 310 / 300], rtol=1e-15)


def test_load_loss_at_temperature_unsplit__is_an_upper_bound_upwards() -> None:
    """Taking all of the loss for I2R overstates it at a higher temperature and understates it at a lower one."""
    for target, sign in ((85, 1), (55, -1)):
        arguments = {"from_temperature_c": 75, "to_temperature_c": target, "metal_constant_c": COPPER}
        split = loss_basis.load_loss_at_temperature(6.6, 0.7, **arguments)
        unsplit = loss_basis.load_loss_at_temperature_unsplit(7.3, **arguments)
        assert sign * (float(unsplit) - float(split)) > 0


def test_load_loss_of_total__demo() -> None:
    """8.040 kW in all less 0.640 kW without load."""
    assert float(loss_basis.load_loss_of_total(8.040, 0.640)) == pytest.approx(7.400, rel=1e-14)


@pytest.mark.parametrize(
    ("changes", "message"),
    [
        ({"resistive_loss_kw": -1}, r"^resistive_loss_kw: must be at least 0, got -1$"),
        ({"stray_loss_kw": np.nan}, r"^stray_loss_kw: must be at least 0, got nan$"),
        ({"from_temperature_c": 348}, r"^from_temperature_c: must be at least -50 and at most 300, got 348$"),
        ({"metal_constant_c": 75}, r"^metal_constant_c: must be at least 200 and at most 260, got 75$"),
    ],
)
def test_load_loss_at_temperature__out_of_bounds(changes: dict[str, float], message: str) -> None:
    """A temperature in kelvin, or one given for the metal's constant, is refused."""
    arguments = {
        "resistive_loss_kw": 6.6,
        "stray_loss_kw": 0.7,
        "from_temperature_c": 75,
        "to_temperature_c": 85,
        "metal_constant_c": COPPER,
    }
    with pytest.raises(ValueError, match=message):
        loss_basis.load_loss_at_temperature(**{**arguments, **changes})
