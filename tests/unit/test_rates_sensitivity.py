"""Derivatives of the rates against derivatives taken numerically in 50 digits from the plain sum."""

from __future__ import annotations

from typing import Any

import mpmath
import numpy as np
import pytest

from lossworth.capitalization.rates import loss_capitalization_rates
from lossworth.capitalization.rates_sensitivity import one_more_year, rate_derivatives
from support.year_model import digits50, reference_rates, year_inputs

CONTINUOUS = [
    "discount_rate",
    "years_before_end",
    "energy_price_per_kwh",
    "energy_price_escalation",
    "carbon_cost_per_kwh",
    "carbon_cost_escalation",
    "demand_charge_per_kw_year",
    "demand_charge_escalation",
    "loss_factor",
    "peak_load_pu",
    "peak_load_growth",
    "peak_load_cap_pu",
    "peak_responsibility_factor",
    "hours_energized",
    "hours_of_load",
    "cooling_hours",
    "cooling_share_at_peak",
    "upstream_gross_up",
    "price_delay_years",
    "discount_delay_years",
]
#: Inputs that the builder leaves at their default of 0.
CARBON_AND_DATES = {
    "carbon_cost_per_kwh": 0.0,
    "carbon_cost_escalation": 0.0,
    "price_delay_years": 0.0,
    "discount_delay_years": 0.0,
}
CASES = {
    "all at work": {},
    "today's price": {"escalate_before_year_1": True},
    "carbon and a later service date": {
        "carbon_cost_per_kwh": 0.02,
        "carbon_cost_escalation": 0.03,
        "price_delay_years": 2.25,
        "discount_delay_years": 1.5,
        "escalate_before_year_1": True,
    },
    "no cap": {"peak_load_cap_pu": np.inf},
    "no discount": {"discount_rate": 0.0, "years_before_end": 0.25},
    "nothing moves": {
        "energy_price_escalation": 0.0,
        "demand_charge_escalation": 0.0,
        "peak_load_growth": 0.0,
        "demand_charge_per_kw_year": 0.0,
    },
}


def by_50_digits(name: str, inputs: dict[str, Any]) -> list[float]:
    """Derivatives of A, B and C by central differences in 50 digits, where the step is far below any double."""
    with mpmath.workdps(50):
        step = mpmath.mpf(10) ** -20
        at = mpmath.mpf(inputs[name])
        ends = [reference_rates(digits50, **{**inputs, name: at + sign * step}) for sign in (1, -1)]
        return [float((up - down) / (2 * step)) for up, down in zip(*ends, strict=True)]


@pytest.mark.parametrize("case", CASES)
@pytest.mark.parametrize("name", CONTINUOUS)
def test_rate_derivatives__fifty_digits(name: str, case: str) -> None:
    """Each derivative equals the numerical one to twelve digits."""
    inputs = dict(year_inputs(hours_of_load=8760.0, **{**CARBON_AND_DATES, **CASES[case]}))
    if inputs[name] == np.inf:
        assert float(rate_derivatives(**inputs)[name].load) == 0
        return
    computed = rate_derivatives(**inputs)[name]
    expected = by_50_digits(name, inputs)
    np.testing.assert_allclose([computed.no_load, computed.load, computed.auxiliary], expected, rtol=1e-12, atol=0)


def test_rate_derivatives__every_continuous_input() -> None:
    """No input is left out, and none is listed that cannot vary continuously."""
    assert sorted(CONTINUOUS) == sorted(rate_derivatives(**year_inputs()))


def test_rate_derivatives__scenarios() -> None:
    """Derivatives have the shape of the scenarios."""
    slopes = rate_derivatives(**year_inputs(discount_rate=[[0.04], [0.06]], loss_factor=[0.2, 0.3, 0.4]))
    assert {rates.load.shape for rates in slopes.values()} == {(2, 3)}
    alone = rate_derivatives(**year_inputs(discount_rate=0.06, loss_factor=0.2))
    np.testing.assert_allclose(slopes["discount_rate"].load[1, 0], alone["discount_rate"].load, rtol=1e-14)


def test_rate_derivatives__tables_by_year_have_none() -> None:
    """A price by year has no single derivative, nor an escalation; the rest stays."""
    inputs = year_inputs(
        energy_price_per_kwh=...,
        energy_price_escalation=...,
        energy_price_by_year_per_kwh=0.085 * 1.02 ** np.arange(30),
    )
    slopes, plain = rate_derivatives(**inputs), rate_derivatives(**year_inputs())
    assert set(plain) - set(slopes) == {"energy_price_per_kwh", "energy_price_escalation"}
    # prices by year are those of their years, so that a later service date does not move them
    for name in set(slopes) - {"price_delay_years"}:
        np.testing.assert_allclose(slopes[name].load, plain[name].load, rtol=1e-12)


def test_rate_derivatives__load_at_its_cap_counts_as_not_capped() -> None:
    """Exactly at the cap the slope is that of the lower side, where the load still counts."""
    at_cap = rate_derivatives(**year_inputs(peak_load_growth=0.0, peak_load_pu=0.8, peak_load_cap_pu=0.8))
    below = rate_derivatives(**year_inputs(peak_load_growth=0.0, peak_load_pu=0.8, peak_load_cap_pu=0.81))
    assert float(at_cap["peak_load_pu"].load) == float(below["peak_load_pu"].load)
    assert float(at_cap["peak_load_cap_pu"].load) == 0


def test_one_more_year__difference_of_rates() -> None:
    """One more year adds the discounted cost of that year."""
    more = one_more_year(**year_inputs(evaluation_period_years=[10, 30]))
    longer = loss_capitalization_rates(**year_inputs(evaluation_period_years=[11, 31]))
    shorter = loss_capitalization_rates(**year_inputs(evaluation_period_years=[10, 30]))
    np.testing.assert_array_equal(more.load, longer.load - shorter.load)
    assert (more.no_load > 0).all()


def test_one_more_year__table_by_year() -> None:
    """A table by year ends with its period, so that there is no next year to ask for."""
    inputs = year_inputs(peak_load_pu=..., peak_load_growth=..., peak_load_by_year_pu=[0.5] * 30)
    with pytest.raises(ValueError, match=r"^one_more_year: must be asked without tables by year"):
        one_more_year(**inputs)
