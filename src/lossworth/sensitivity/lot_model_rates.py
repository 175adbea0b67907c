"""The rates A, B and C of a lot as functions of what they were derived from."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, replace
from decimal import Decimal
from typing import Any, Literal, cast

import numpy as np
from numpy.typing import ArrayLike, NDArray

from ..capitalization.load import peak_load_by_year
from ..capitalization.rates import YearModelInputs, loss_capitalization_rates
from ..evaluation.fixed_charge import fixed_charge_rates
from ..evaluation.load_and_price import join
from ..evaluation.present_worth import carbon_model_inputs, model_inputs
from ..evaluation.profile_facts import cooling_by_year
from ..evaluation.rate_inputs import Naming
from ..evaluation.result import LotRates
from ..records.tender import Derivation, Method, Tender
from ..trail import Figure

__all__ = ["RateInput", "RateModel", "RateShape", "rate_model"]

Array = NDArray[np.float64]

#: How the rates run with an input: on a straight line; convex in ln(1 + input); rising or falling all along; by steps
#: of one.
RateShape = Literal["straight", "exponential", "monotonic", "whole"]

_PERCENT = 0.01
_LONGEST = 100.0  # years: more than any unit is in service


@dataclass(frozen=True, slots=True)
class RateInput:
    """One input of derived rates.

    Parameters
    ----------
    name, label, unit : str
        Name of the figure, in the trade's words, and its unit.
    now : float
        Present value.
    lowest, highest : float
        Admissible values; a present value outside widens them.
    shape : str
        How the rates run with it, see `RateShape`.
    """

    name: str
    label: str
    unit: str
    now: float
    lowest: float
    highest: float
    shape: RateShape


# name, engine argument, its size in the unit of the name, lowest, highest, shape
_KNOWN: tuple[tuple[str, str, float, float, float, RateShape], ...] = (
    ("energy_price_per_kwh", "energy_price_per_kwh", 1, 0, np.inf, "straight"),
    ("energy_price_escalation_percent", "energy_price_escalation", _PERCENT, -50, 50, "exponential"),
    ("carbon_cost_per_kwh", "carbon_cost_per_kwh", 1, 0, np.inf, "straight"),
    ("carbon_cost_escalation_percent", "carbon_cost_escalation", _PERCENT, -50, 50, "exponential"),
    ("demand_charge_per_kw_year", "demand_charge_per_kw_year", 1, 0, np.inf, "straight"),
    ("demand_charge_escalation_percent", "demand_charge_escalation", _PERCENT, -50, 50, "exponential"),
    ("discount_rate_percent", "discount_rate", _PERCENT, 0, 100, "exponential"),
    ("evaluation_period_years", "evaluation_period_years", 1, 1, _LONGEST, "whole"),
    ("load_factor", "", 1, 0, 1, "monotonic"),
    ("loss_factor_coefficient", "", 1, 0, 1, "straight"),
    ("loss_factor", "loss_factor", 1, 0, 1, "straight"),
    ("peak_load_pu", "peak_load_pu", 1, 0, 2, "monotonic"),
    ("peak_load_growth_percent", "peak_load_growth", _PERCENT, -50, 50, "monotonic"),
    ("peak_load_cap_pu", "peak_load_cap_pu", 1, 0.01, 2, "monotonic"),
    ("peak_responsibility_factor", "peak_responsibility_factor", 1, 0, 1, "monotonic"),
    ("hours_energized", "hours_energized", 1, 0, 8760, "straight"),
    ("cooling_hours", "cooling_hours", 1, 0, 8760, "straight"),
    ("cooling_share_at_peak", "cooling_share_at_peak", 1, 0, 1, "straight"),
    ("upstream_gross_up", "upstream_gross_up", 1, 1, np.inf, "straight"),
    ("fixed_charge_rate_percent", "", 1, 0.01, 100, "monotonic"),
)
_ARGUMENTS = {name: (argument, size) for name, argument, size, *_ in _KNOWN}
_OF_COOLING = {
    "evaluation_period_years",
    "peak_load_pu",
    "peak_load_growth_percent",
    "peak_load_cap_pu",
    "peak_responsibility_factor",
}


@dataclass(frozen=True, slots=True, eq=False)
class RateModel:
    """Derived rates as functions of their inputs.

    Parameters
    ----------
    rates : LotRates
        As derived, with the figures of the inputs.
    inputs : mapping of str to RateInput
        What may be changed, by name.
    tender : Tender
        For loading condition and economics behind a profile.
    derivation : Derivation
        Which of them the lot uses.
    """

    rates: LotRates
    inputs: Mapping[str, RateInput]
    tender: Tender
    derivation: Derivation

    def rates_of(self, changed: Mapping[str, ArrayLike]) -> tuple[Array, Array, Array]:
        """A, B and C with other values of some inputs, unrounded.

        Parameters
        ----------
        changed : mapping of str to array_like
            New values by name, in the units of the inputs; they broadcast together.

        Returns
        -------
        tuple of ndarray
            A, B and C in the broadcast shape. [currency/kW]

        Raises
        ------
        KeyError
            If a name is none of the inputs.
        ValueError
            If a value is out of the engine's bounds.
        """
        for name in changed:
            if name not in self.inputs:
                raise KeyError(f"{name}: not an input of these rates")
        arrays = {name: np.asarray(value, dtype=np.float64) for name, value in changed.items()}
        shape = np.broadcast_shapes(*(array.shape for array in arrays.values()))
        flat = {name: np.broadcast_to(array, shape).ravel() for name, array in arrays.items()}
        one_for_all = self._fixed_charge if self.rates.table is None else self._present_worth
        a, b, c = (np.broadcast_to(rate, (int(np.prod(shape)),)).reshape(shape) for rate in one_for_all(flat))
        return a, b, c

    # Present worth

    def _present_worth(self, changed: Mapping[str, Array]) -> tuple[Array, Array, Array]:
        figures, cooling = self.rates.inputs, self.rates.cooling
        arguments: dict[str, Any] = dict(model_inputs(figures, cooling))
        carbon: dict[str, Any] | None = cast("dict[str, Any] | None", carbon_model_inputs(figures, cooling))
        of_price = changed if carbon is None else _seen_by_price(changed)
        self._change(arguments, of_price, "hours_by_price")
        found = loss_capitalization_rates(**cast("YearModelInputs", arguments))
        sums = [found.no_load, found.load, found.auxiliary]
        if carbon is not None:
            self._change(carbon, _seen_by_carbon(changed), "hours_by_time")
            more = loss_capitalization_rates(**cast("YearModelInputs", carbon))
            sums = [one + other for one, other in zip(sums, (more.no_load, more.load, more.auxiliary), strict=True)]
        if self.rates.auxiliary is None:
            sums[2] = np.zeros_like(sums[0])
        return sums[0], sums[1], sums[2]

    def _change(self, arguments: dict[str, Any], changed: Mapping[str, Array], hours: str) -> None:
        """Put changed inputs into the arguments of the engine."""
        stated = arguments["loss_factor"]
        for name, value in changed.items():
            argument, size = _ARGUMENTS.get(name, ("", 1.0))
            if argument:
                arguments[argument] = value * size
        if "loss_factor" not in changed and {"load_factor", "loss_factor_coefficient"} & set(changed):
            arguments["loss_factor"] = self._loss_factor(changed)
        elif "loss_factor" in changed:
            arguments["loss_factor"] = changed["loss_factor"] * (stated / float(self.rates.inputs["loss_factor"].value))
        self._change_tables(arguments, changed, hours)

    def _change_tables(self, arguments: dict[str, Any], changed: Mapping[str, Array], hours: str) -> None:
        """Tables by year: scaled by their level, cut to a shorter period, cooling that follows the load anew."""
        years = int(np.max(arguments["evaluation_period_years"]))
        for level, table in (
            ("energy_price_level_percent", "energy_price_by_year_per_kwh"),
            ("peak_load_level_percent", "peak_load_by_year_pu"),
        ):
            if table in arguments:
                cut = np.asarray(arguments[table], dtype=np.float64)[..., :years]
                of_all = changed.get(level)
                arguments[table] = cut if of_all is None else of_all[:, np.newaxis] * _PERCENT * cut
        if "cooling_hours_by_year" in arguments and not changed.keys().isdisjoint(
            _OF_COOLING | {"peak_load_level_percent"}
        ):
            self._change_cooling(arguments, years, hours)

    def _change_cooling(self, arguments: dict[str, Any], years: int, hours: str) -> None:
        loading = self.tender.loading[self.derivation.loading.value]
        joined = join(loading, self.tender.economics[self.derivation.economics.value])
        cap = np.asarray(arguments.get("peak_load_cap_pu", np.inf))
        if "peak_load_by_year_pu" in arguments:
            peaks = np.minimum(np.asarray(arguments["peak_load_by_year_pu"]), cap[..., np.newaxis])
        else:
            first, growth = arguments["peak_load_pu"], arguments["peak_load_growth"]
            peaks = peak_load_by_year(first, years, peak_load_growth=growth, peak_load_cap_pu=cap)
        responsibility = np.asarray(arguments["peak_responsibility_factor"])[..., np.newaxis]
        shape = np.broadcast_shapes(peaks.shape, responsibility.shape)
        cooling = cooling_by_year(loading, joined, np.broadcast_to(peaks, shape), cast("float", responsibility))
        if cooling is not None:
            arguments["cooling_hours_by_year"] = getattr(cooling, hours)
            arguments["cooling_share_at_peak_by_year"] = cooling.share_at_peak

    def _loss_factor(self, changed: Mapping[str, Array]) -> Array:
        """Loss factor from load factor and coefficient."""

        def value(name: str) -> Array:
            return changed[name] if name in changed else np.asarray(float(self.rates.inputs[name].value))

        load_factor, k = value("load_factor"), value("loss_factor_coefficient")
        return np.asarray(load_factor * (k + (1 - k) * load_factor))

    # Fixed charge rate

    def _fixed_charge(self, changed: Mapping[str, Array]) -> tuple[Array, Array, Array]:
        """One scenario after the other: the sums are decimal."""
        size = max((array.size for array in changed.values()), default=1)
        each = ({name: float(array[at]) for name, array in changed.items()} for at in range(size))
        rows = [self._fixed_charge_of(one) for one in each]
        a, b, c = np.array(rows, dtype=np.float64).T
        return a, b, c

    def _fixed_charge_of(self, changed: Mapping[str, float]) -> tuple[float, float, float]:
        figures: dict[str, Figure] = dict(self.rates.inputs)
        new = dict(changed)
        if "loss_factor" not in changed and {"load_factor", "loss_factor_coefficient"} & set(changed):
            new["loss_factor"] = float(self._loss_factor({name: np.asarray(value) for name, value in changed.items()}))
        for name, value in new.items():
            figures[name] = replace(figures[name], value=Decimal(repr(value)))
        with_auxiliary = self.rates.auxiliary is not None
        found = fixed_charge_rates(Naming("", "study", ""), figures, with_auxiliary=with_auxiliary)
        a, b = float(found["no_load"].value), float(found["load"].value)
        return a, b, float(found["auxiliary"].value) if with_auxiliary else 0.0


def _seen_by_price(changed: Mapping[str, Array]) -> dict[str, Array]:
    """Changes as a run sees them beside which the carbon cost has its own."""
    return {name: value for name, value in changed.items() if not name.startswith("carbon_cost")}


def _seen_by_carbon(changed: Mapping[str, Array]) -> dict[str, Array]:
    """Changes as a run sees them in which the carbon cost stands in the place of the energy price."""
    renamed = {
        "carbon_cost_per_kwh": "energy_price_per_kwh",
        "carbon_cost_escalation_percent": "energy_price_escalation_percent",
    }
    kept = {
        name: value
        for name, value in changed.items()
        if not name.startswith(("energy_price", "demand_charge", "carbon_cost"))
    }
    return kept | {renamed[name]: value for name, value in changed.items() if name in renamed}


def rate_model(tender: Tender, derivation: Derivation, rates: LotRates) -> RateModel:
    """Model of derived rates.

    Parameters
    ----------
    tender : Tender
        For economics and loading conditions.
    derivation : Derivation
        Of the lot, announced or a planner's study.
    rates : LotRates
        What it gives.

    Returns
    -------
    RateModel
        With every input on which the rates depend.
    """
    by_charge_rate = derivation.method is Method.FIXED_CHARGE_RATE
    inputs: dict[str, RateInput] = {}
    for name, _, _, lowest, highest, shape in _KNOWN:
        if name in rates.inputs and (by_charge_rate or name != "fixed_charge_rate_percent"):
            inputs[name] = _input(rates.inputs[name], name, (lowest, highest), shape)
    _narrow(inputs, rates)
    levels = {} if by_charge_rate else _levels(rates)
    return RateModel(rates, (_by_charge_rate(inputs) if by_charge_rate else inputs) | levels, tender, derivation)


def _by_charge_rate(inputs: Mapping[str, RateInput]) -> dict[str, RateInput]:
    """Shapes where the years act through the equivalent peak load alone, a weighted mean that is monotonic in each."""
    bent = {"energy_price_per_kwh", "carbon_cost_per_kwh"} if "carbon_cost_per_kwh" in inputs else set()
    found = {}
    for name, known in inputs.items():
        if name in bent:
            found[name] = replace(known, shape="monotonic", highest=100 * known.now)
        else:
            found[name] = replace(known, shape="monotonic") if known.shape == "exponential" else known
    return found


def _input(figure: Figure, name: str, bounds: tuple[float, float], shape: RateShape) -> RateInput:
    now = float(figure.value)
    return RateInput(
        name, figure.label, figure.unit, now, min(float(bounds[0]), now), max(float(bounds[1]), now), shape
    )


def _narrow(inputs: dict[str, RateInput], rates: LotRates) -> None:
    """Bounds that hang on other inputs, and inputs that the rates of this lot do not know."""
    if "energy_price_per_kwh" not in inputs:
        inputs.pop("energy_price_escalation_percent", None)
    if "peak_load_pu" not in inputs:
        inputs.pop("peak_load_growth_percent", None)
    if rates.auxiliary is None or rates.cooling is not None:
        inputs.pop("cooling_hours", None)
        inputs.pop("cooling_share_at_peak", None)
    tables = [name for name in rates.inputs if name.startswith(("energy_price_year_", "peak_load_year_"))]
    if tables and "evaluation_period_years" in inputs:
        period = inputs["evaluation_period_years"]
        inputs["evaluation_period_years"] = replace(period, highest=period.now)
    load_factor, by_price = rates.inputs.get("load_factor"), "loss_factor_by_time" in rates.inputs
    if load_factor is not None and not by_price:
        least, most = float(load_factor.value) ** 2, float(load_factor.value)
        stated = inputs["loss_factor"]
        inputs["loss_factor"] = replace(stated, lowest=min(least, stated.now), highest=max(most, stated.now))
    if "loss_factor_coefficient" not in inputs:
        inputs.pop("load_factor", None)


def _levels(rates: LotRates) -> dict[str, RateInput]:
    """For tables by year: all values of the table together, in percent of those stated."""
    found = {}
    for name, prefix, label, highest in (
        ("energy_price_level_percent", "energy_price_year_", "energy prices of all years together", np.inf),
        ("peak_load_level_percent", "peak_load_year_", "peak loads of all years together", 200.0),
    ):
        if any(known.startswith(prefix) for known in rates.inputs):
            shape: RateShape = "straight" if name.startswith("energy") else "monotonic"
            found[name] = RateInput(name, label, "% of those stated", 100.0, 0.0, highest, shape)
    return found
