"""Fixed charge rate forms at sight; their agreement with the engine is in the property tests."""

from __future__ import annotations

import numpy as np
import pytest

from lossworth.capitalization import fixed_charge, present_value

COSTS = (60, 0.05)


def test_annual_cost_rates__at_sight() -> None:
    """SC = 60, 8760 EC = 438, FCR = 0.16: (60 + 438)/0.16, and with LsF, RF and PL^2 of a quarter each."""
    no_load = fixed_charge.annual_cost_no_load_rate(*COSTS, fixed_charge_rate=0.16)
    load = fixed_charge.annual_cost_load_rate(
        *COSTS,
        fixed_charge_rate=0.16,
        loss_factor=0.25,
        peak_responsibility_factor=0.5,
        equivalent_peak_load_pu=0.5,
    )
    np.testing.assert_allclose([no_load, load], [3112.5, 3112.5 / 16], rtol=1e-15)


def test_annual_cost_load_rate__responsibility_is_squared_here() -> None:
    """The argument is the ratio of loads; RF, the printed factor, is its square."""
    common = {"fixed_charge_rate": 0.16, "loss_factor": 0, "equivalent_peak_load_pu": 1}
    whole, half = fixed_charge.annual_cost_load_rate(*COSTS, peak_responsibility_factor=[1, 0.5], **common)
    assert whole == 4 * half


def test_investment_rates__at_sight() -> None:
    """SI = 500, 8760 EC/FCR = 3650: their sum, a quarter of a quarter for the load, a share and 1000 hours for C."""
    no_load = fixed_charge.investment_no_load_rate(500, 0.05, fixed_charge_rate=0.12)
    load = fixed_charge.investment_load_rate(
        500, 0.05, fixed_charge_rate=0.12, loss_factor=0.25, peak_responsibility_factor=0.5, peak_load_pu=0.5
    )
    auxiliary = fixed_charge.investment_auxiliary_rate(
        500, 0.05, fixed_charge_rate=0.12, cooling_hours=876, cooling_share_at_peak=0.5
    )
    np.testing.assert_allclose([no_load, load, auxiliary], [4150, 4150 / 16, 250 + 365], rtol=1e-15)


def test_fixed_charge_rate__above_the_capital_recovery_factor_lowers_the_rate() -> None:
    """Taxes and insurance in the fixed charge rate make a kW of loss worth less; the two are not interchangeable."""
    recovery = present_value.capital_recovery_factor(0.06, 30)
    plain, charged = fixed_charge.annual_cost_no_load_rate(*COSTS, fixed_charge_rate=[float(recovery), 0.12])
    assert plain == pytest.approx(float(present_value.annuity_factor(0.06, 30)) * 498, rel=1e-15)
    assert charged < plain


def test_fixed_charge__broadcasts() -> None:
    """Arrays of costs in rows and of fixed charge rates in columns make a table."""
    table = fixed_charge.investment_load_rate(
        [[100], [500]], 0.05, fixed_charge_rate=[0.1, 0.12, 0.16], loss_factor=0.3, peak_responsibility_factor=0.9,
        peak_load_pu=0.7,
    )  # fmt: skip
    assert table.shape == (2, 3)


@pytest.mark.parametrize(
    ("changes", "message"),
    [
        ({"loss_factor": 2}, r"^loss_factor: must be at least 0 and at most 1, got 2$"),
        ({"peak_responsibility_factor": -1}, r"^peak_responsibility_factor: must be at least 0 and at most 1, got -1$"),
        ({"peak_load_pu": -1}, r"^peak_load_pu: must be at least 0, got -1$"),
        ({"fixed_charge_rate": 0}, r"^fixed_charge_rate: must be above 0, got 0$"),
        ({"system_investment_per_kw": -1}, r"^system_investment_per_kw: must be at least 0, got -1$"),
        ({"energy_cost_per_kwh": np.nan}, r"^energy_cost_per_kwh: must be at least 0, got nan$"),
        ({"loss_factor": [0.1, 0.2], "fixed_charge_rate": [0.1, 0.2, 0.3]}, r"^shapes do not fit together: "),
    ],
)
def test_investment_load_rate__out_of_bounds(changes: dict[str, object], message: str) -> None:
    """Each argument is refused beyond its bound."""
    arguments = {
        "system_investment_per_kw": 500,
        "energy_cost_per_kwh": 0.05,
        "fixed_charge_rate": 0.12,
        "loss_factor": 0.3,
        "peak_responsibility_factor": 0.9,
        "peak_load_pu": 0.7,
    }
    with pytest.raises(ValueError, match=message):
        fixed_charge.investment_load_rate(**{**arguments, **changes})  # type: ignore[arg-type]
