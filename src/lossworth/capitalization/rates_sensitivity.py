r"""Exact derivatives of the rates A, B and C to each input."""

from __future__ import annotations

from typing import Unpack

import numpy as np

from .arguments import Array, finite, single_number
from .inputs import Model, YearModelInputs, check_inputs
from .rates import Rates, loss_capitalization_rates
from .year_columns import YearColumns, year_columns

__all__ = ["one_more_year", "rate_derivatives"]


def rate_derivatives(**inputs: Unpack[YearModelInputs]) -> dict[str, Rates]:
    r"""Derivatives of A, B and C to every input that may vary continuously.

    Parameters
    ----------
    **inputs : YearModelInputs
        As for `rates.loss_capitalization_rates`; `evaluation_period_years` must be a single number.

    Returns
    -------
    dict of str to Rates
        By the name of the input, :math:`\partial A/\partial x`, :math:`\partial B/\partial x`,
        :math:`\partial C/\partial x` in the broadcast shape. An input that is given by year has no entry, nor has its
        escalation or growth. [currency/kW per unit of the input]

    Raises
    ------
    TypeError, ValueError
        As for `rates.year_table`.

    Notes
    -----
    Term by term of the sums, with

    .. math::
        \frac{\partial DF_t}{\partial r} = -\frac{t - \varphi + \delta_r}{1 + r} DF_t, \quad
        \frac{\partial DF_t}{\partial \varphi} = -\frac{\partial DF_t}{\partial \delta_r} = \ln(1 + r)\, DF_t, \quad
        \frac{\partial p_t}{\partial e} = \frac{t - 1 + \epsilon + \delta_p}{1 + e} p_t, \quad
        \frac{\partial p_t}{\partial \delta_p} = \ln(1 + e)\, p_t, \quad
        \frac{\partial \beta_t^2}{\partial g} = \frac{2 (t - 1)}{1 + g} \beta_t^2

    where :math:`\epsilon` is 1 for today's price and else 0, carbon cost and demand charge move like the price
    without :math:`\epsilon`, and the last holds in years without cap; with the cap
    :math:`\partial \beta_t^2 / \partial \beta_{cap} = 2 \beta_t`. In a year whose load equals the cap exactly, load and
    growth count as not capped. Rates, shares and growths are fractions: 0.01 of the derivative is the change for one
    percentage point, to first order.

    Not included: the evaluation period, which moves in whole years (`one_more_year`); second derivatives.

    References
    ----------
    .. [1] Follows from the year-by-year model; no publication is claimed.

    Examples
    --------
    Invented data: the third lot of the demo. One percentage point more of discount takes about 1180 off A.

    >>> slopes = rate_derivatives(
    ...     discount_rate=0.06, evaluation_period_years=30, energy_price_per_kwh=0.085, demand_charge_per_kw_year=55,
    ...     loss_factor=0.339625, peak_load_pu=0.65, peak_load_growth=0.01, peak_load_cap_pu=1.0,
    ...     peak_responsibility_factor=0.90)
    >>> round(float(slopes["discount_rate"].no_load) / 100)
    -1178
    >>> float(slopes["loss_factor"].no_load)
    0.0
    """
    model = check_inputs(inputs)
    single_number("evaluation_period_years", model["evaluation_period_years"])
    with np.errstate(over="ignore", invalid="ignore", under="ignore"):
        columns = year_columns(model)
        terms = (
            _of_time(columns)
            | _of_prices(columns, model)
            | _of_charges(columns, model)
            | _of_loads(columns, model)
            | _of_factors_and_hours(columns, model)
        )
        return {name: _summed(name, term, model) for name, term in terms.items()}


def one_more_year(**inputs: Unpack[YearModelInputs]) -> Rates:
    r"""What one more year of evaluation period adds to A, B and C.

    Parameters
    ----------
    **inputs : YearModelInputs
        As for `rates.loss_capitalization_rates`, without tables by year.

    Returns
    -------
    Rates
        Differences in the broadcast shape. [currency/kW]

    Raises
    ------
    TypeError, ValueError
        As for `rates.loss_capitalization_rates`, and for a table by year, which ends with the period.

    Examples
    --------
    >>> more = one_more_year(discount_rate=0.06, evaluation_period_years=30, energy_price_per_kwh=0.10,
    ...                      loss_factor=0.25, peak_load_pu=0.8)
    >>> round(float(more.no_load), 2)  # 876 a year, discounted over 31 years
    143.89
    """
    if any(name.endswith("_by_year") or "_by_year_" in name for name, value in inputs.items() if value is not None):
        raise ValueError("one_more_year: must be asked without tables by year, which end with the evaluation period")
    now = loss_capitalization_rates(**inputs)
    longer: YearModelInputs = {**inputs, "evaluation_period_years": np.add(inputs["evaluation_period_years"], 1)}
    then = loss_capitalization_rates(**longer)
    return Rates(
        np.asarray(then.no_load - now.no_load),
        np.asarray(then.load - now.load),
        np.asarray(then.auxiliary - now.auxiliary),
    )


_Terms = tuple[Array, Array, Array]
_ZERO = np.zeros(1)


def _summed(name: str, terms: _Terms, model: Model) -> Rates:
    """Sum the terms of one input over the years."""
    full = (*model.shape, model.years)
    a, b, c = (finite(np.broadcast_to(term, full).sum(axis=-1), f"derivative to {name}") for term in terms)
    return Rates(a, b, c)


def _present(columns: YearColumns) -> Array:
    return np.asarray(columns["upstream_gross_up"] * columns.discount_factor)


def _costs(columns: YearColumns) -> _Terms:
    """Present value of the three costs of each year."""
    present = _present(columns)
    return (
        present * columns.no_load_cost,
        present * columns.load**2 * columns.load_cost_at_1,
        present * columns.auxiliary_cost,
    )


def _times(factor: Array, terms: _Terms) -> _Terms:
    return (factor * terms[0], factor * terms[1], factor * terms[2])


def _of_time(columns: YearColumns) -> dict[str, _Terms]:
    r, phi = columns["discount_rate"], columns["years_before_end"]
    costs = _costs(columns)
    return {
        "discount_rate": _times((phi - columns.year - columns["discount_delay_years"]) / (1 + r), costs),
        "years_before_end": _times(np.log1p(r), costs),
        "discount_delay_years": _times(-np.log1p(r), costs),
        "price_delay_years": _to_price_delay(columns),
        "upstream_gross_up": _times(1 / columns["upstream_gross_up"], costs),
    }


def _hours(columns: YearColumns) -> _Terms:
    """Hours in which 1 kW of each loss costs energy. [hour/year]"""
    load_hours = columns["hours_of_load"] * columns["loss_factor"]
    return (columns["hours_energized"], columns.load**2 * load_hours, columns["cooling_hours"])


def _shares(columns: YearColumns) -> _Terms:
    """Part that 1 kW of each loss has in the demand. [1]"""
    at_peak = columns.load**2 * columns["peak_responsibility_factor"] ** 2
    return (np.ones(1), at_peak, columns["cooling_share_at_peak"])


def _to_price_delay(columns: YearColumns) -> _Terms:
    energy = columns.price * np.log1p(columns["energy_price_escalation"])
    energy = energy + columns.carbon * np.log1p(columns["carbon_cost_escalation"])
    demand = columns.charge * np.log1p(columns["demand_charge_escalation"])
    present = _present(columns)
    a, b, c = (
        present * (energy * hours + demand * share)
        for hours, share in zip(_hours(columns), _shares(columns), strict=True)
    )
    return a, b, c


def _of_prices(columns: YearColumns, model: Model) -> dict[str, _Terms]:
    hours, present = _hours(columns), _present(columns)
    escalations = columns.year - 1 + columns["price_delay_years"]
    to_carbon = _times(present * columns.carbon_growth, hours)
    to_escalation = columns["carbon_cost_per_kwh"] * escalations / (1 + columns["carbon_cost_escalation"])
    terms = {"carbon_cost_per_kwh": to_carbon, "carbon_cost_escalation": _times(to_escalation, to_carbon)}
    if "energy_price_per_kwh" not in model.tables:
        to_price = _times(present * columns.price_growth, hours)
        escalations = escalations + columns["escalate_before_year_1"]
        to_escalation = columns["energy_price_per_kwh"] * escalations / (1 + columns["energy_price_escalation"])
        terms |= {"energy_price_per_kwh": to_price, "energy_price_escalation": _times(to_escalation, to_price)}
    return terms


def _of_charges(columns: YearColumns, model: Model) -> dict[str, _Terms]:
    if "demand_charge_per_kw_year" in model.tables:
        return {}
    to_charge = _times(_present(columns) * columns.charge_growth, _shares(columns))
    escalations = columns.year - 1 + columns["price_delay_years"]
    to_escalation = columns["demand_charge_per_kw_year"] * escalations / (1 + columns["demand_charge_escalation"])
    return {"demand_charge_per_kw_year": to_charge, "demand_charge_escalation": _times(to_escalation, to_charge)}


def _of_loads(columns: YearColumns, model: Model) -> dict[str, _Terms]:
    to_load = _present(columns) * columns.load_cost_at_1 * 2 * columns.load
    capped = columns.uncapped_load > columns["peak_load_cap_pu"]
    terms = {"peak_load_cap_pu": (_ZERO, to_load * capped, _ZERO)}
    if "peak_load_pu" not in model.tables:
        to_first = np.where(capped, 0.0, to_load * columns.load_growth)
        to_growth = columns["peak_load_pu"] * (columns.year - 1) / (1 + columns["peak_load_growth"])
        terms["peak_load_pu"] = (_ZERO, to_first, _ZERO)
        terms["peak_load_growth"] = (_ZERO, to_first * to_growth, _ZERO)
    return terms


def _of_factors_and_hours(columns: YearColumns, model: Model) -> dict[str, _Terms]:
    present = _present(columns)
    energy, square = present * columns.energy_cost, present * columns.load**2
    energy_square = square * columns.energy_cost
    responsibility = square * columns.charge * 2 * columns["peak_responsibility_factor"]
    terms = {
        "loss_factor": (_ZERO, energy_square * columns["hours_of_load"], _ZERO),
        "hours_of_load": (_ZERO, energy_square * columns["loss_factor"], _ZERO),
        "peak_responsibility_factor": (_ZERO, responsibility, _ZERO),
        "hours_energized": (energy, _ZERO, _ZERO),
        "cooling_hours": (_ZERO, _ZERO, energy),
        "cooling_share_at_peak": (_ZERO, _ZERO, present * columns.charge),
    }
    return {name: term for name, term in terms.items() if name not in model.tables}
