"""Checks of the engine's arguments: what is refused, and what the message says."""

from __future__ import annotations

from decimal import Decimal
from typing import Any

import numpy as np
import pytest

from lossworth.capitalization import arguments, duration, fixed_charge, load, load_growth, loss_basis, losses
from lossworth.capitalization import present_value as pv
from lossworth.capitalization.arguments import AT_LEAST_0, RATE, Bounds
from lossworth.capitalization.rates import loss_capitalization_rates
from support.year_model import year_inputs


@pytest.mark.parametrize(
    "value",
    [
        "0.06",
        None,
        True,
        Decimal("0.06"),
        1 + 2j,
        ["a"],
        [0.1, None],
        [[1, 2], [3]],
        np.datetime64("2026-01-01"),
        np.ma.MaskedArray([0.1, 0.2], mask=[False, True]),
    ],
)
def test_checked__not_a_number(value: Any) -> None:
    """Text, missing and masked values, truth values and ragged rows are refused by name, not converted."""
    with pytest.raises(ValueError, match=r"^discount_rate: must be a number or an array of numbers, got "):
        arguments.checked("discount_rate", value, RATE)


def test_checked__empty() -> None:
    """No scenarios is a mistake, not an empty result."""
    with pytest.raises(ValueError, match=r"^years: must have at least one value"):
        arguments.checked("years", [], AT_LEAST_0)


@pytest.mark.parametrize("value", [np.nan, np.inf, -np.inf])
def test_checked__not_finite(value: float) -> None:
    """Neither nan nor infinity passes for a number."""
    with pytest.raises(ValueError, match=f"^price: must be at least 0, got {value}$"):
        arguments.checked("price", value, AT_LEAST_0)


def test_checked__infinity_where_it_means_no_cap() -> None:
    """A cap may be infinite, but not nan."""
    cap = Bounds(0, lowest_included=False, infinity=True)
    assert float(arguments.checked("cap", np.inf, cap)) == np.inf
    with pytest.raises(ValueError, match=r"^cap: must be above 0, got nan$"):
        arguments.checked("cap", np.nan, cap)


def test_checked__whole_numbers() -> None:
    """A period of years is a whole number, whatever its type."""
    years = Bounds(1, 1000, whole=True)
    assert arguments.checked("years", 30.0, years).tolist() == arguments.checked("years", 30, years).tolist()
    with pytest.raises(ValueError, match=r"^years: must be a whole number, at least 1 and at most 1000, got 30.5$"):
        arguments.checked("years", 30.5, years)


def test_checked__names_the_index() -> None:
    """In an array the first offender is named with its index."""
    with pytest.raises(ValueError, match=r"got -2 at index 1, 0$"):
        arguments.checked("price", [[1, 2], [-2, -3]], AT_LEAST_0)


def test_checked__leaves_the_callers_array_alone() -> None:
    """The engine never writes into what it was given."""
    inputs = year_inputs(discount_rate=np.full(3, 0.06), peak_load_pu=np.full(3, 0.5))
    before = {name: np.array(value) for name, value in inputs.items()}
    loss_capitalization_rates(**inputs)
    assert all(np.array_equal(before[name], np.asarray(value)) for name, value in inputs.items())


def test_fitting_shape__names_and_shapes() -> None:
    """Arrays that do not fit together are named with their shapes; single numbers are left out."""
    with pytest.raises(ValueError, match=r"discount_rate \(2,\), years \(3,\)$"):
        pv.annuity_factor([0.05, 0.06], [10, 20, 30])


@pytest.mark.parametrize(
    ("call", "message"),
    [
        (lambda: pv.discount_factor(-1, 1), "discount_rate: must be above -1, got -1"),
        (lambda: pv.discount_factor(0.06, -1), "year: must be at least 0, got -1"),
        (lambda: pv.discount_factor(0.06, 1, years_before_end=1.5), "years_before_end: must be at least 0 and at most"),
        (lambda: pv.annuity_factor(0.06, -1), "years: must be at least 0, got -1"),
        (lambda: pv.capital_recovery_factor(0.06, 0), "years: must be above 0, got 0"),
        (lambda: pv.growing_annuity_factor(0.06, 10, escalation=-1), "escalation: must be above -1, got -1"),
        (lambda: pv.levelizing_factor(0.06, 10, escalation=np.nan), "escalation: must be above -1, got nan"),
        (lambda: pv.nominal_rate(0.06, -1.5), "inflation: must be above -1, got -1.5"),
        (lambda: pv.real_rate(-1, 0.02), "nominal_rate: must be above -1, got -1"),
        (lambda: pv.mid_year_factor(-2), "discount_rate: must be above -1, got -2"),
        (lambda: load_growth.growing_load_factor(0.06, 10, peak_load_growth=-1), "peak_load_growth: must be above -1"),
        (
            lambda: load_growth.growth_then_constant_factor(
                0.06, [5, 10], growth_years=7, peak_load_pu=1, peak_load_growth=0, constant_load_pu=1
            ),
            "growth_years: must be at most years, got 7 at index 0",
        ),
        (lambda: load.loss_factor(1.2, 0.15), "load_factor: must be at least 0 and at most 1, got 1.2"),
        (lambda: load.loss_factor(0.5, -0.1), "coefficient: must be at least 0 and at most 1, got -0.1"),
        (lambda: load.peak_load_by_year(0.5, [1, 2]), "years: must be a single number here, got an array of shape"),  # type: ignore[arg-type]
        (
            lambda: load.equivalent_peak_load([1, 1], discount_factor=[1, 1], energy_price_per_kwh=0),
            "discount_factor * energy_price_per_kwh, summed over the years: must be above 0, got 0",
        ),
        (
            lambda: load.equivalent_peak_load(1, discount_factor=1, energy_price_per_kwh=1),
            "peak_load_by_year_pu: must have the years on its last axis",
        ),
        (
            lambda: fixed_charge.annual_cost_no_load_rate(60, 0.05, fixed_charge_rate=0),
            "fixed_charge_rate: must be above",
        ),
        (lambda: losses.part_load_loss(-1, 1, 1), "no_load_loss_kw: must be at least 0, got -1"),
        (lambda: losses.load_of_greatest_efficiency(1, 0), "load_loss_kw: must be above 0, got 0"),
        (lambda: losses.efficiency_of_output(1, 1, rated_power_kva=0), "rated_power_kva: must be above 0, got 0"),
        (
            lambda: losses.efficiency_of_input(5, 6, rated_power_kva=10),
            "loss of no_load_loss_kw and load_loss_kw: must",
        ),
        (lambda: loss_basis.load_loss_of_total(0.6, 0.64), "total_loss_kw: must be above no_load_loss_kw, got 0.6"),
        (lambda: duration.load_duration([[1, 2]]), "load: must be one profile on one axis, got shape (1, 2)"),
        (lambda: duration.load_duration([0, 1]).hours_above(np.nan), "loading: must be a number, got nan"),
    ],
)
def test_bounds__named_with_value(call: Any, message: str) -> None:
    """Each function names the argument, the bound and the value."""
    with pytest.raises(ValueError) as refusal:  # noqa: PT011 - the message is compared below
        call()
    assert message in str(refusal.value)


def test_finite__overflow_is_refused() -> None:
    """A result beyond the range of floating point is an error with a name, not inf."""
    with pytest.raises(ValueError, match=r"^annuity factor: exceeds the range of floating-point numbers"):
        pv.annuity_factor(-0.999999, 1000)


@pytest.mark.parametrize("layout", ["one axis", "transposed"])
def test_checked__fault_far_behind(layout: str) -> None:
    """Checks look at a part at a time and reach the last of many elements, in any layout of memory."""
    values = np.zeros((400_000, 1)) if layout == "one axis" else np.zeros((4, 100_000)).T
    arguments.checked("discount_rate", values, RATE)
    assert arguments.finite(values, "rate") is values
    values[-1, -1] = -np.inf
    index = ", ".join(str(length - 1) for length in values.shape)
    with pytest.raises(ValueError, match=rf"^discount_rate: must be above -1, got -inf at index {index}$"):
        arguments.checked("discount_rate", values, RATE)
    with pytest.raises(ValueError, match=r"^rate: exceeds the range"):
        arguments.finite(values, "rate")
