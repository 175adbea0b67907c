"""Inputs of the year-by-year model: their names, bounds and defaults, and scenarios taken block by block."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from typing import Required, TypedDict, cast

import numpy as np
from numpy.typing import ArrayLike

from .arguments import AT_LEAST_0, RATE, SHARE, Array, Bounds, checked, fitting_shape

__all__ = ["Model", "PriceAndLoadInputs", "YearModelInputs", "blocks", "check_inputs"]

#: Scenarios that are worked on at once: large enough for NumPy, small enough for the processor's cache.
BLOCK = 8_192
#: Hours of a leap year; no year has more.
_HOURS = Bounds(0, 8784)
#: More years than any asset lives; a guard against a period given in hours or as a calendar year.
_YEARS = Bounds(1, 1000, whole=True)
#: Years between two dates of a tender; the upper end is a guard against a calendar year.
_DELAY = Bounds(0, 100)


class PriceAndLoadInputs(TypedDict, total=False):
    """Inputs that say what energy and demand cost, and how the peak load moves, year by year.

    Every input may be an array; all of them broadcast together to the scenarios. Inputs *by year* have the years on
    their last axis, as many as the (longest) evaluation period, and the scenarios on the axes before.

    Parameters
    ----------
    discount_rate : array_like
        Rate r as a fraction, above -1. Real with real prices, nominal with nominal ones. [1/year]
    evaluation_period_years : array_like
        Years N, whole, 1 to 1000. [year]
    years_before_end : array_like
        Timing phi, 0 to 1: 0 end of year, 0.5 mid-year, 1 start of year. Default 0. [year]
    energy_price_per_kwh : array_like
        Mean price of energy, at least 0; that of year 1 unless it escalates before. [currency/kWh]
    energy_price_by_year_per_kwh : array_like
        Instead of it, the price of each year. [currency/kWh]
    energy_price_escalation : array_like
        Fraction, above -1. Default 0; not together with prices by year. [1/year]
    escalate_before_year_1 : array_like of bool
        False: the energy price is that paid in year 1. True: it is today's, and escalates before the first payment.
        Default False. The demand charge and the carbon cost are always those of year 1.
    carbon_cost_per_kwh : array_like
        Cost of carbon per lost kWh, at least 0, added to the energy price of the year. Default 0: not counted.
        [currency/kWh]
    carbon_cost_escalation : array_like
        Fraction, above -1. Default 0. [1/year]
    demand_charge_per_kw_year : array_like
        Demand or capacity charge, at least 0. Default 0. [currency/(kW year)]
    demand_charge_by_year_per_kw : array_like
        Instead of it, the charge of each year. [currency/(kW year)]
    demand_charge_escalation : array_like
        Fraction, above -1. Default 0; not together with charges by year. [1/year]
    peak_load_pu : array_like
        Peak load of year 1 over the rating at which the load loss is guaranteed, at least 0. [per unit]
    peak_load_by_year_pu : array_like
        Instead of it, the peak load of each year. [per unit]
    peak_load_growth : array_like
        Fraction, above -1. Default 0; not together with peak loads by year. [1/year]
    peak_load_cap_pu : array_like
        Greatest peak load, above 0, infinite for none. Default infinite; also acts on loads by year. [per unit]
    upstream_gross_up : array_like
        1 over the efficiency of the network up to the unit, at least 1. Default 1. [1]
    price_delay_years : array_like
        Years from the date of the stated prices to the service date, 0 to 100, fractions allowed. Energy price, carbon
        cost and demand charge escalate over them before year 1, each by its own escalation; tables by year are the
        prices of their years and stay. Default 0. [year]
    discount_delay_years : array_like
        Years from the date of the present values to the service date, 0 to 100, fractions allowed: costs are
        discounted over them too. Default 0: present values at the service date. [year]
    """

    discount_rate: Required[ArrayLike]
    evaluation_period_years: Required[ArrayLike]
    years_before_end: ArrayLike
    energy_price_per_kwh: ArrayLike | None
    energy_price_by_year_per_kwh: ArrayLike | None
    energy_price_escalation: ArrayLike
    escalate_before_year_1: ArrayLike
    carbon_cost_per_kwh: ArrayLike
    carbon_cost_escalation: ArrayLike
    demand_charge_per_kw_year: ArrayLike | None
    demand_charge_by_year_per_kw: ArrayLike | None
    demand_charge_escalation: ArrayLike
    peak_load_pu: ArrayLike | None
    peak_load_by_year_pu: ArrayLike | None
    peak_load_growth: ArrayLike
    peak_load_cap_pu: ArrayLike
    upstream_gross_up: ArrayLike
    price_delay_years: ArrayLike
    discount_delay_years: ArrayLike


class YearModelInputs(PriceAndLoadInputs, total=False):
    """All inputs of the year-by-year model.

    Parameters
    ----------
    loss_factor : array_like
        Mean of the squared load over the square of the peak load, 0 to 1; weighted by price where load and price
        move together. [1]
    peak_responsibility_factor : array_like
        Own load at system peak over own peak load, 0 to 1: a ratio of loads, squared here. Default 1. [1]
    hours_energized : array_like
        Hours a year with voltage applied, 0 to 8784. Default 8760. [hour/year]
    hours_of_load : array_like
        Hours over which the loss factor is the mean, 0 to 8784. Default 8760. [hour/year]
    cooling_hours : array_like
        Hours a year with fans or pumps on, 0 to 8784. Default 0. [hour/year]
    cooling_hours_by_year : array_like
        Instead of it, the hours of each year. [hour/year]
    cooling_share_at_peak : array_like
        Share of the cooling that is on at system peak, 0 to 1. Default 0. [1]
    cooling_share_at_peak_by_year : array_like
        Instead of it, the share of each year. [1]
    """

    loss_factor: Required[ArrayLike]
    peak_responsibility_factor: ArrayLike
    hours_energized: ArrayLike
    hours_of_load: ArrayLike
    cooling_hours: ArrayLike | None
    cooling_hours_by_year: ArrayLike | None
    cooling_share_at_peak: ArrayLike | None
    cooling_share_at_peak_by_year: ArrayLike | None


_BOUNDS: dict[str, Bounds] = {
    "discount_rate": RATE,
    "evaluation_period_years": _YEARS,
    "years_before_end": SHARE,
    "energy_price_per_kwh": AT_LEAST_0,
    "energy_price_escalation": RATE,
    "escalate_before_year_1": Bounds(0, 1, whole=True),
    "carbon_cost_per_kwh": AT_LEAST_0,
    "carbon_cost_escalation": RATE,
    "demand_charge_per_kw_year": AT_LEAST_0,
    "demand_charge_escalation": RATE,
    "peak_load_pu": AT_LEAST_0,
    "peak_load_growth": RATE,
    "peak_load_cap_pu": Bounds(0, lowest_included=False, infinity=True),
    "upstream_gross_up": Bounds(1),
    "price_delay_years": _DELAY,
    "discount_delay_years": _DELAY,
    "loss_factor": SHARE,
    "peak_responsibility_factor": SHARE,
    "hours_energized": _HOURS,
    "hours_of_load": _HOURS,
    "cooling_hours": _HOURS,
    "cooling_share_at_peak": SHARE,
}
_DEFAULTS: dict[str, float] = {
    "years_before_end": 0.0,
    "energy_price_escalation": 0.0,
    "escalate_before_year_1": 0.0,
    "carbon_cost_per_kwh": 0.0,
    "carbon_cost_escalation": 0.0,
    "demand_charge_per_kw_year": 0.0,
    "demand_charge_escalation": 0.0,
    "peak_load_growth": 0.0,
    "peak_load_cap_pu": np.inf,
    "upstream_gross_up": 1.0,
    "price_delay_years": 0.0,
    "discount_delay_years": 0.0,
    "peak_responsibility_factor": 1.0,
    "hours_energized": 8760.0,
    "hours_of_load": 8760.0,
    "cooling_hours": 0.0,
    "cooling_share_at_peak": 0.0,
}
#: Quantities that may come by year: the name of the table, and what would change the table once more.
_TABLES: dict[str, tuple[str, tuple[str, ...]]] = {
    "energy_price_per_kwh": (
        "energy_price_by_year_per_kwh",
        ("energy_price_escalation", "escalate_before_year_1"),
    ),
    "demand_charge_per_kw_year": ("demand_charge_by_year_per_kw", ("demand_charge_escalation",)),
    "peak_load_pu": ("peak_load_by_year_pu", ("peak_load_growth",)),
    "cooling_hours": ("cooling_hours_by_year", ()),
    "cooling_share_at_peak": ("cooling_share_at_peak_by_year", ()),
}


@dataclass(frozen=True)
class Model:
    """Checked inputs of the year-by-year model.

    Parameters
    ----------
    values : mapping of str to ndarray
        Inputs by name, each in its own shape.
    tables : mapping of str to ndarray
        Quantities that are given by year, by the name of the plain quantity, years on the last axis.
    shape : tuple of int
        Common shape of the scenarios.
    years : int
        Longest evaluation period. [year]
    """

    values: Mapping[str, Array]
    tables: Mapping[str, Array]
    shape: tuple[int, ...]
    years: int

    def __getitem__(self, name: str) -> Array:
        return self.values[name]


def check_inputs(inputs: PriceAndLoadInputs, kind: type = YearModelInputs, **more: Array) -> Model:
    """Inputs as arrays, after a check of names, bounds, contradictions and shapes.

    Parameters
    ----------
    inputs : YearModelInputs or PriceAndLoadInputs
        As given by the caller; None counts as not given where an input has a table by year.
    kind : type
        `YearModelInputs`, or `PriceAndLoadInputs` where the other inputs have no part.
    **more : ndarray
        Further checked arguments that broadcast with the inputs.

    Returns
    -------
    Model
        Arrays by name.

    Raises
    ------
    TypeError
        If an input is not known or a required one is not given.
    ValueError
        If a value is out of bounds, a quantity is given twice, or shapes do not fit together.
    """
    known = kind.__annotations__
    given = dict(cast("Mapping[str, ArrayLike | None]", inputs))
    unknown = sorted(set(given) - set(known))
    if unknown:
        raise TypeError(f"unknown input: {', '.join(unknown)}")
    values, tables = {}, {}
    for name in (name for name in _BOUNDS if name in known):
        table, changes = _TABLES.get(name, ("", ()))
        if given.get(table) is not None:
            _check_given_once(name, table, changes, given)
            tables[name] = checked(table, cast("ArrayLike", given[table]), _BOUNDS[name])
        else:
            values[name] = _value(name, table, given)
    years = int(values["evaluation_period_years"].max())
    for name, array in tables.items():
        if array.ndim == 0 or array.shape[-1] != years:
            raise ValueError(f"{_TABLES[name][0]}: must have {years} years on its last axis, got shape {array.shape}")
    shape = fitting_shape(**values, **{_TABLES[name][0]: array[..., 0] for name, array in tables.items()}, **more)
    return Model({**values, **more}, tables, shape, years)


def _check_given_once(name: str, table: str, changes: tuple[str, ...], given: Mapping[str, object]) -> None:
    if given.get(name) is not None:
        raise ValueError(f"{table}: must not be given together with {name}")
    for change in changes:
        if np.any(np.asarray(given.get(change, 0))):
            raise ValueError(f"{table}: must not be given together with {change}")


def _value(name: str, table: str, given: Mapping[str, ArrayLike | None]) -> Array:
    value = given.get(name)
    if value is None and name in _DEFAULTS and (table or name not in given):
        value = _DEFAULTS[name]
    if value is None and name not in given:
        raise TypeError(f"input missing: {name}{f' or {table}' if table else ''}")
    if name == "escalate_before_year_1":
        value = _flags(value)
    return checked(name, cast("ArrayLike", value), _BOUNDS[name])


def _flags(value: object) -> ArrayLike:
    """Truth values as 0 and 1; anything else is left to the check of numbers."""
    array = np.asarray(value)
    return array.astype(np.float64) if array.dtype.kind == "b" else cast("ArrayLike", value)


def blocks(model: Model) -> Iterator[tuple[slice, Model]]:
    """Scenarios in blocks, flattened, so that memory beyond the result does not grow with their number.

    Parameters
    ----------
    model : Model
        All scenarios.

    Yields
    ------
    part : slice
        Which of the flattened scenarios.
    block : Model
        Their inputs: a single number stays one, everything else has one axis; tables have the years on the *first*
        axis, so that a year lies together in memory.
    """
    size = int(np.prod(model.shape))
    for start in range(0, size, BLOCK):
        part = slice(start, min(start + BLOCK, size))
        values = {name: _flat(array, model.shape)[part] for name, array in model.values.items() if array.size > 1}
        single = {name: array.reshape(()) for name, array in model.values.items() if array.size == 1}
        tables = {name: _table_block(array, model.shape, part) for name, array in model.tables.items()}
        yield part, Model({**values, **single}, tables, (part.stop - part.start,), model.years)


def _flat(array: Array, shape: tuple[int, ...]) -> Array | np.flatiter[Array]:
    """View of the array as if broadcast and flattened; slices of it are arrays."""
    return array.reshape(-1) if array.shape == shape else np.broadcast_to(array, shape).flat


def _table_block(array: Array, shape: tuple[int, ...], part: slice) -> Array:
    if array.size == array.shape[-1]:
        return array.reshape(-1)
    scenarios = np.unravel_index(np.arange(part.start, part.stop), shape)
    return np.ascontiguousarray(np.broadcast_to(array, (*shape, array.shape[-1]))[scenarios].T)
