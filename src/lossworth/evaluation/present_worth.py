"""The year-by-year model run on the inputs of one lot."""

from __future__ import annotations

from collections.abc import Mapping
from decimal import Decimal
from typing import Any, cast

from ..capitalization import rates as engine
from ..capitalization.rates import YearModelInputs
from ..trail import Figure
from .result import CoolingByYear

__all__ = ["carbon_model_inputs", "model_inputs", "year_columns"]

_PERCENT = Decimal("0.01")
_COLUMNS = (
    "discount_factor",
    "energy_price_per_kwh",
    "demand_charge_per_kw_year",
    "peak_load_pu",
    "no_load",
    "load",
    "auxiliary",
)


def model_inputs(inputs: Mapping[str, Figure], cooling: CoolingByYear | None) -> YearModelInputs:
    """Arguments of the engine from the figures of a derivation.

    Parameters
    ----------
    inputs : mapping of str to Figure
        By the names of the year table's inputs.
    cooling : CoolingByYear or None
        Where cooling follows the load.

    Returns
    -------
    YearModelInputs
        Fractions in place of percentages; what the tender leaves out is left out.
    """

    def value(name: str) -> float:
        return float(inputs[name].value)

    def fraction(name: str) -> float:
        return float(inputs[name].value * _PERCENT)

    arguments: dict[str, Any] = {
        "discount_rate": fraction("discount_rate_percent"),
        "evaluation_period_years": int(inputs["evaluation_period_years"].value),
        "years_before_end": value("years_before_end"),
        "demand_charge_per_kw_year": value("demand_charge_per_kw_year"),
        "demand_charge_escalation": fraction("demand_charge_escalation_percent"),
        "loss_factor": value("loss_factor"),
        "peak_responsibility_factor": value("peak_responsibility_factor"),
        "hours_energized": value("hours_energized"),
        "hours_of_load": value("hours_of_load"),
        "upstream_gross_up": value("upstream_gross_up"),
    }
    for name in ("price_delay_years", "discount_delay_years"):
        if inputs[name].value:
            arguments[name] = value(name)
    if prices := _by_year(inputs, "energy_price_year_"):
        arguments["energy_price_by_year_per_kwh"] = prices
    else:
        arguments["energy_price_per_kwh"] = value("energy_price_per_kwh")
        arguments["energy_price_escalation"] = fraction("energy_price_escalation_percent")
        arguments["escalate_before_year_1"] = bool(inputs["escalate_before_year_1"].value)
    if peaks := _by_year(inputs, "peak_load_year_"):
        arguments["peak_load_by_year_pu"] = peaks
    else:
        arguments["peak_load_pu"] = value("peak_load_pu")
        arguments["peak_load_growth"] = fraction("peak_load_growth_percent")
    if "peak_load_cap_pu" in inputs:
        arguments["peak_load_cap_pu"] = value("peak_load_cap_pu")
    return cast("YearModelInputs", arguments | _cooling(inputs, cooling) | _carbon(inputs))


def _by_year(inputs: Mapping[str, Figure], prefix: str) -> list[float]:
    return [float(figure.value) for name, figure in inputs.items() if name.startswith(prefix)]


def _cooling(inputs: Mapping[str, Figure], cooling: CoolingByYear | None) -> dict[str, Any]:
    if cooling is None:
        return {
            "cooling_hours": float(inputs["cooling_hours"].value),
            "cooling_share_at_peak": float(inputs["cooling_share_at_peak"].value),
        }
    return {
        "cooling_hours_by_year": cooling.hours_by_price,
        "cooling_share_at_peak_by_year": cooling.share_at_peak,
    }


def _carbon(inputs: Mapping[str, Figure]) -> dict[str, Any]:
    """Carbon cost beside a price that does not move within the year: both count with the same loss factor."""
    if "carbon_cost_per_kwh" not in inputs or "loss_factor_by_time" in inputs:
        return {}
    return {
        "carbon_cost_per_kwh": float(inputs["carbon_cost_per_kwh"].value),
        "carbon_cost_escalation": float(inputs["carbon_cost_escalation_percent"].value * _PERCENT),
    }


def carbon_model_inputs(inputs: Mapping[str, Figure], cooling: CoolingByYear | None) -> YearModelInputs | None:
    """Arguments of a second run for a carbon cost beside a price that moves within the year.

    Parameters
    ----------
    inputs : mapping of str to Figure
        By the names of the year table's inputs.
    cooling : CoolingByYear or None
        Where cooling follows the load.

    Returns
    -------
    YearModelInputs or None
        The carbon cost as energy price, with loss factor and cooling hours by time and no demand charge, since a cost
        that is the same in every hour is not weighted by price; None where no second run is needed.
    """
    if "carbon_cost_per_kwh" not in inputs or "loss_factor_by_time" not in inputs:
        return None
    arguments: dict[str, Any] = dict(model_inputs(inputs, cooling))
    arguments |= {
        "energy_price_per_kwh": float(inputs["carbon_cost_per_kwh"].value),
        "energy_price_escalation": float(inputs["carbon_cost_escalation_percent"].value * _PERCENT),
        "escalate_before_year_1": False,
        "demand_charge_per_kw_year": 0.0,
        "loss_factor": float(inputs["loss_factor_by_time"].value),
    }
    if cooling is not None:
        arguments["cooling_hours_by_year"] = cooling.hours_by_time
    return cast("YearModelInputs", arguments)


def year_columns(inputs: Mapping[str, Figure], cooling: CoolingByYear | None) -> dict[str, tuple[float, ...]]:
    """Columns of the year table.

    Parameters
    ----------
    inputs : mapping of str to Figure
        Of the derivation.
    cooling : CoolingByYear or None
        Where cooling follows the load.

    Returns
    -------
    dict of str to tuple of float
        By name; the columns of carbon and of cooling only where they count or move.
    """
    table = engine.year_table(**model_inputs(inputs, cooling))
    values = {name: getattr(table, name) for name in _COLUMNS}
    if (carbon_inputs := carbon_model_inputs(inputs, cooling)) is not None:
        carbon = engine.year_table(**carbon_inputs)
        values |= {name: values[name] + getattr(carbon, name) for name in ("no_load", "load", "auxiliary")}
        values["carbon_cost_per_kwh"] = carbon.energy_price_per_kwh
    names = [*_COLUMNS]
    if "carbon_cost_per_kwh" in inputs:
        names.insert(names.index("demand_charge_per_kw_year"), "carbon_cost_per_kwh")
    if cooling is not None:
        names[names.index("no_load") : names.index("no_load")] = ["cooling_hours", "cooling_share_at_peak"]
        values |= {"cooling_hours": cooling.hours_by_price, "cooling_share_at_peak": cooling.share_at_peak}
    values.setdefault("carbon_cost_per_kwh", table.carbon_cost_per_kwh)
    years = tuple(float(year) for year in table.year)
    return {"year": years} | {name: tuple(float(x) for x in values[name]) for name in names}
