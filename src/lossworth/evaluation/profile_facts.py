"""What a load profile gives to a derivation: load and loss factor, duration curve, cooling that follows the load."""

from __future__ import annotations

from collections.abc import Mapping

import numpy as np
from numpy.typing import NDArray

from ..capitalization import cooling, profile
from ..capitalization.duration import LoadDuration, load_duration
from ..capitalization.load import peak_load_by_year
from ..records.tender import Economics, LoadingCondition
from ..trail import Figure
from .load_and_price import LoadAndPrice, join
from .rate_inputs import Naming, to_decimal
from .result import CoolingByYear, LoadFacts, StageHours

__all__ = ["cooling_by_year", "load_facts", "loss_factors", "peak_loads"]

Array = NDArray[np.float64]
_POINTS = 240  # of the duration curve in the papers
_PERCENT = 0.01


def loss_factors(naming: Naming, loading: LoadingCondition, joined: LoadAndPrice) -> dict[str, Figure]:
    """Load factor and loss factor of a profile; the loss factor by price where the price moves within the year.

    Parameters
    ----------
    naming : Naming
        Of the derivation.
    loading : LoadingCondition
        With a profile.
    joined : LoadAndPrice
        Load and price within the year.

    Returns
    -------
    dict of str to Figure
        ``load_factor``, ``loss_factor`` and, where the price moves, ``loss_factor_by_time``.
    """
    file = "" if loading.profile is None else f"{loading.profile.file} ({loading.profile.place})"
    steps = f"{joined.load.size} steps of {file}"

    def figure(name: str, value: NDArray[np.float64], statement: str) -> Figure:
        return naming.by_rule(name, to_decimal(float(value)), "1", f"{statement}, {steps}")

    by_time = profile.loss_factor(joined.load, weights=joined.hours)
    mean = "mean of the load over its greatest value"
    square = "mean of the squared load over its squared greatest value"
    figures = {"load_factor": figure("load_factor", profile.load_factor(joined.load, weights=joined.hours), mean)}
    if joined.price_per_kwh is None:
        return figures | {"loss_factor": figure("loss_factor", by_time, square)}
    by_price = profile.price_weighted_loss_factor(joined.load, joined.price_per_kwh, weights=joined.hours)
    return figures | {
        "loss_factor_by_time": figure("loss_factor_by_time", by_time, square),
        "loss_factor": figure("loss_factor", by_price, f"{square}, weighted by price"),
    }


def peak_loads(inputs: Mapping[str, Figure]) -> Array:
    """Peak load of each year.

    Parameters
    ----------
    inputs : mapping of str to Figure
        Of the derivation.

    Returns
    -------
    ndarray
        One value a year. [per unit of the rating]
    """
    years = int(inputs["evaluation_period_years"].value)
    cap = float(inputs["peak_load_cap_pu"].value) if "peak_load_cap_pu" in inputs else np.inf
    table = [float(figure.value) for name, figure in inputs.items() if name.startswith("peak_load_year_")]
    if table:
        capped: Array = np.minimum(np.asarray(table), cap)
        return capped
    growth = float(inputs["peak_load_growth_percent"].value) * _PERCENT
    first = float(inputs["peak_load_pu"].value)
    return peak_load_by_year(first, years, peak_load_growth=growth, peak_load_cap_pu=cap)


def cooling_by_year(
    loading: LoadingCondition, joined: LoadAndPrice, peaks: Array, responsibility: float
) -> CoolingByYear | None:
    """Hours of cooling in each year where stages follow the load, weighted by their share of the auxiliary loss.

    Parameters
    ----------
    loading : LoadingCondition
        With cooling stages, or without.
    joined : LoadAndPrice
        Load and price within the year.
    peaks : ndarray
        Peak load of each year. [per unit of the rating]
    responsibility : float
        Peak responsibility factor. [1]

    Returns
    -------
    CoolingByYear or None
        None where no stage follows the load. [hour/year]
    """
    if not loading.cooling_stages:
        return None
    by_time = load_duration(joined.load, weights=joined.hours)
    by_price = by_time
    if joined.price_per_kwh is not None:
        by_price = load_duration(joined.load, price=joined.price_per_kwh, weights=joined.hours)
    share_at_peak = np.zeros_like(peaks)
    hours: dict[str, Array] = {"price": np.zeros_like(peaks), "time": np.zeros_like(peaks)}
    for stage in loading.cooling_stages:
        share, above = float(stage.share_of_auxiliary_loss.value), float(stage.above_load_pu.value)
        for name, shape in (("price", by_price), ("time", by_time)):
            hours[name] += share * _hours(shape, peaks, above)
        share_at_peak += share * cooling.cooling_share_at_peak_by_year(
            peak_load_by_year_pu=peaks, starts_above_pu=above, peak_responsibility_factor=responsibility
        )
    return CoolingByYear(hours["price"], hours["time"], share_at_peak)


def _hours(shape: LoadDuration, peaks: Array, above: float) -> Array:
    return cooling.cooling_hours_by_year(shape, peak_load_by_year_pu=peaks, starts_above_pu=above)


def load_facts(loading: LoadingCondition, economics: Economics, inputs: Mapping[str, Figure]) -> LoadFacts | None:
    """What the papers show of a load profile.

    Parameters
    ----------
    loading : LoadingCondition
        With a profile, or without.
    economics : Economics
        For the price within the year.
    inputs : mapping of str to Figure
        Of the derivation.

    Returns
    -------
    LoadFacts or None
        None where the load does not come from a profile.
    """
    if loading.profile is None:
        return None
    joined = join(loading, economics)
    peaks = peak_loads(inputs)
    shape = load_duration(joined.load, weights=joined.hours)
    names = ("load_factor", "loss_factor_by_time", "loss_factor")
    return LoadFacts(
        profile=loading.profile,
        figures={name: inputs[name] for name in names if name in inputs},
        duration=_points(shape),
        peak_load_by_year_pu=tuple(float(peak) for peak in peaks),
        stages=tuple(
            StageHours(
                above_load_pu=float(stage.above_load_pu.value),
                share=float(stage.share_of_auxiliary_loss.value),
                hours_by_year=tuple(float(x) for x in _hours(shape, peaks, float(stage.above_load_pu.value))),
            )
            for stage in loading.cooling_stages
        ),
    )


def _points(shape: LoadDuration) -> tuple[tuple[float, float], ...]:
    """Points of the falling curve: hours at or above each load, thinned to what a picture can show."""
    levels, hours = shape.levels[::-1], shape.hours[:-1][::-1]
    chosen = np.unique(np.linspace(0, levels.size - 1, min(_POINTS, levels.size)).round().astype(int))
    return tuple((float(hours[i]), float(levels[i])) for i in chosen)
