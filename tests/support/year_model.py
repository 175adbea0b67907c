"""The year-by-year model once more: the plain sum in exact fractions or 50 digits; and a valid set of inputs."""

from __future__ import annotations

from collections.abc import Callable
from fractions import Fraction
from typing import Any

import mpmath
import numpy as np

from lossworth.capitalization.rates import YearModelInputs

#: Relative error that closed forms and engine must stay below.
CLOSE = 1e-12


def year_inputs(**changes: Any) -> YearModelInputs:
    """Inputs that are valid by default; invented data."""
    inputs: dict[str, Any] = {
        "discount_rate": 0.06,
        "evaluation_period_years": 30,
        "energy_price_per_kwh": 0.085,
        "energy_price_escalation": 0.02,
        "demand_charge_per_kw_year": 55.0,
        "demand_charge_escalation": 0.01,
        "loss_factor": 0.34,
        "peak_load_pu": 0.65,
        "peak_load_growth": 0.015,
        "peak_load_cap_pu": 0.9,
        "peak_responsibility_factor": 0.9,
        "hours_energized": 8700.0,
        "cooling_hours": 600.0,
        "cooling_share_at_peak": 0.75,
        "upstream_gross_up": 1.04,
        "years_before_end": 0.5,
    }
    inputs |= changes
    return YearModelInputs(**{name: value for name, value in inputs.items() if value is not ...})


def reference_rates(number: Callable[[Any], Any], **inputs: Any) -> tuple[Any, Any, Any]:
    """A, B and C of one scenario by the plain sum over the years, in the arithmetic of `number`."""
    with mpmath.workdps(50):
        return _plain_sum(number, inputs)


def _plain_sum(number: Callable[[Any], Any], inputs: dict[str, Any]) -> tuple[Any, Any, Any]:
    def given(name: str, default: float) -> Any:
        return number(inputs.get(name, default))

    def years(*parts: Any) -> Any:
        # whole exponents keep fractions exact
        return sum(map(int, parts)) if all(part == int(part) for part in parts) else sum(map(number, parts))

    r, phi, later = given("discount_rate", 0), inputs.get("years_before_end", 0.0), inputs.get("price_delay_years", 0)
    responsibility, capped = given("peak_responsibility_factor", 1), inputs.get("peak_load_cap_pu", np.inf) < np.inf
    a = b = c = number(0)
    for t in range(1, inputs["evaluation_period_years"] + 1):
        factor = 1 / (1 + r) ** years(t, -phi, inputs.get("discount_delay_years", 0))
        escalations = years(t - 1, later, inputs.get("escalate_before_year_1", False))
        price = given("energy_price_per_kwh", 0) * (1 + given("energy_price_escalation", 0)) ** escalations
        escalations = years(t - 1, later)
        price += given("carbon_cost_per_kwh", 0) * (1 + given("carbon_cost_escalation", 0)) ** escalations
        charge = given("demand_charge_per_kw_year", 0) * (1 + given("demand_charge_escalation", 0)) ** escalations
        load = given("peak_load_pu", 0) * (1 + given("peak_load_growth", 0)) ** (t - 1)
        load = min(load, number(inputs["peak_load_cap_pu"])) if capped else load
        energy_hours = given("hours_of_load", 8760) * given("loss_factor", 0)
        a += factor * (price * given("hours_energized", 8760) + charge)
        b += factor * load**2 * (price * energy_hours + charge * responsibility**2)
        c += factor * (price * given("cooling_hours", 0) + charge * given("cooling_share_at_peak", 0))
    gross_up = given("upstream_gross_up", 1)
    return gross_up * a, gross_up * b, gross_up * c


def exact(value: Any) -> Fraction:
    """A float as the fraction that it is."""
    return Fraction(value)


def digits50(value: Any) -> mpmath.mpf:
    """A float as the number that it is, for arithmetic in 50 digits."""
    return mpmath.mpf(value)


def relative_error(computed: Any, expected: Any) -> float:
    """Greatest relative error of any element; plain where the expected value is 0."""
    computed = np.asarray(computed, dtype=object)
    expected = np.broadcast_to(np.asarray(expected, dtype=object), computed.shape)
    errors = (_relative(Fraction(float(x)), y) for x, y in zip(computed.flat, expected.flat, strict=True))
    return max(errors)


def _relative(computed: Fraction, expected: Any) -> float:
    with mpmath.workdps(60):
        if not isinstance(expected, Fraction):
            computed = mpmath.mpf(computed.numerator) / computed.denominator
        return float(abs(computed - expected) / (abs(expected) or 1))
