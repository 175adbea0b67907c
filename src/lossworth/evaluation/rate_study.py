"""How far rates move with their inputs, and how far announced rates lie from derived ones: for the planner only."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from decimal import Decimal

import numpy as np

from ..capitalization.rates import Rates
from ..capitalization.rates_sensitivity import one_more_year, rate_derivatives
from ..money import ARITHMETIC
from ..trail import Figure
from .present_worth import carbon_model_inputs, model_inputs
from .result import LotRates

__all__ = ["Sensitivity", "percent_above", "sensitivities"]

_POINT = 0.01  # of a rate in percent
_TENTH = 0.10  # of a price
_STEP_PU = 0.05  # of a load or a load ratio
_STEP_FACTOR = 0.01  # of the loss factor
_STEP_HOURS = 100.0

# input of the engine, name of the figure, step, words for the step
_STEPS: tuple[tuple[str, str, float, str], ...] = (
    ("discount_rate", "discount_rate_percent", _POINT, "+1 percentage point"),
    ("energy_price_per_kwh", "energy_price_per_kwh", _TENTH, "+10 %"),
    ("energy_price_escalation", "energy_price_escalation_percent", _POINT, "+1 percentage point"),
    ("carbon_cost_per_kwh", "carbon_cost_per_kwh", _TENTH, "+10 %"),
    ("carbon_cost_escalation", "carbon_cost_escalation_percent", _POINT, "+1 percentage point"),
    ("demand_charge_per_kw_year", "demand_charge_per_kw_year", _TENTH, "+10 %"),
    ("demand_charge_escalation", "demand_charge_escalation_percent", _POINT, "+1 percentage point"),
    ("loss_factor", "loss_factor", _STEP_FACTOR, "+0.01"),
    ("peak_load_pu", "peak_load_pu", _STEP_PU, "+0.05"),
    ("peak_load_growth", "peak_load_growth_percent", _POINT, "+1 percentage point"),
    ("peak_load_cap_pu", "peak_load_cap_pu", _STEP_PU, "+0.05"),
    ("peak_responsibility_factor", "peak_responsibility_factor", _STEP_PU, "+0.05"),
    ("hours_energized", "hours_energized", -_STEP_HOURS, "−100 hours"),
    ("cooling_hours", "cooling_hours", _STEP_HOURS, "+100 hours"),
    ("upstream_gross_up", "upstream_gross_up", _STEP_FACTOR, "+0.01"),
)


@dataclass(frozen=True, slots=True)
class Sensitivity:
    """Derivative of each rate to one input, times a stated change of the input.

    Parameters
    ----------
    figure : Figure
        The input.
    change : str
        The change in words.
    no_load, load, auxiliary : float
        What the change moves A, B and C by, to first order; exact for one more year. [currency/kW]
    """

    figure: Figure
    change: str
    no_load: float
    load: float
    auxiliary: float


def sensitivities(rates: LotRates) -> tuple[Sensitivity, ...]:
    """Sensitivity of present-worth rates to every input that they depend on.

    Parameters
    ----------
    rates : LotRates
        Derived rates.

    Returns
    -------
    tuple of Sensitivity
        In the order of the inputs; empty for announced rates and for the fixed charge rate, whose sums are plain.
        Where cooling follows the load, its hours are held: their change with the load is not part of the derivative.
    """
    if rates.table is None:
        return ()
    inputs = rates.table.inputs
    slopes = _slopes(rates, inputs)
    steps = _steps(inputs, slopes, with_auxiliary=rates.auxiliary is not None)
    return (*steps, *_load_factor(inputs, slopes), *_one_more_year(rates, inputs))


def _slopes(rates: LotRates, inputs: Mapping[str, Figure]) -> dict[str, Rates]:
    """Derivatives; those of the carbon cost from its own run, where it has one."""
    slopes = rate_derivatives(**model_inputs(inputs, rates.cooling))
    carbon_inputs = carbon_model_inputs(inputs, rates.cooling)
    if carbon_inputs is None:
        return slopes
    carbon = rate_derivatives(**carbon_inputs)
    own = {"energy_price_per_kwh": "carbon_cost_per_kwh", "energy_price_escalation": "carbon_cost_escalation"}
    shared = set(slopes) - set(own) - set(own.values()) - {"demand_charge_per_kw_year", "demand_charge_escalation"}
    both = {name: _added(slopes[name], carbon[name]) for name in shared if name in carbon}
    return slopes | both | {name: carbon[source] for source, name in own.items()}


def _added(first: Rates, second: Rates) -> Rates:
    return Rates(
        np.add(first.no_load, second.no_load),
        np.add(first.load, second.load),
        np.add(first.auxiliary, second.auxiliary),
    )


def _steps(inputs: Mapping[str, Figure], slopes: Mapping[str, Rates], *, with_auxiliary: bool) -> Iterator[Sensitivity]:
    for name, figure_name, step, words in _STEPS:
        if name not in slopes or figure_name not in inputs:
            continue
        figure = inputs[figure_name]
        size = step * float(figure.value) if words == "+10 %" else step
        found = _scaled(figure, words, slopes[name], size)
        if found.no_load or found.load or (with_auxiliary and found.auxiliary):
            yield found


def _scaled(figure: Figure, words: str, slope: Rates, size: float) -> Sensitivity:
    return Sensitivity(
        figure, words, size * float(slope.no_load), size * float(slope.load), size * float(slope.auxiliary)
    )


def _load_factor(inputs: Mapping[str, Figure], slopes: Mapping[str, Rates]) -> Iterator[Sensitivity]:
    """Load factor where the loss factor follows from it: d LsF / d LF = k + 2 (1 - k) LF."""
    if "loss_factor_coefficient" not in inputs:
        return
    load_factor, k = float(inputs["load_factor"].value), float(inputs["loss_factor_coefficient"].value)
    inner = k + 2 * (1 - k) * load_factor
    yield _scaled(inputs["load_factor"], "+0.05", slopes["loss_factor"], _STEP_PU * inner)


def _one_more_year(rates: LotRates, inputs: Mapping[str, Figure]) -> Iterator[Sensitivity]:
    """One more year of evaluation period, where no table ends with it."""
    tables = any(name.startswith(("energy_price_year_", "peak_load_year_")) for name in inputs)
    if tables or rates.cooling is not None:
        return
    more = one_more_year(**model_inputs(inputs, None))
    carbon_inputs = carbon_model_inputs(inputs, None)
    if carbon_inputs is not None:
        more = _added(more, one_more_year(**carbon_inputs))
    yield _scaled(inputs["evaluation_period_years"], "+1 year", more, 1.0)


def percent_above(announced: Figure, derived: Figure) -> Decimal | None:
    """How far an announced rate lies above a derived one.

    Parameters
    ----------
    announced, derived : Figure
        Rates of one kind. [currency/kW]

    Returns
    -------
    Decimal or None
        Percent of the derived rate, negative below it; None where the derived rate is zero.
    """
    if not derived.value:
        return None
    return ARITHMETIC.multiply(Decimal(100), ARITHMETIC.divide(announced.value, derived.value) - 1)
