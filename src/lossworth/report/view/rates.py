"""Rates of a lot as the papers show them: figures, year table, load profile, and the planner's study beside them."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from .figure import Fact, ShownFigure

__all__ = [
    "CoolingStageView",
    "LoadView",
    "LotRatesView",
    "RatesReport",
    "RatesView",
    "SensitivityRow",
    "YearColumn",
    "YearTableView",
]


@dataclass(frozen=True, slots=True)
class YearColumn:
    """One column of a year table: a name in code, a heading, a unit, and the values year by year."""

    name: str
    heading: str
    unit: str
    values: tuple[float, ...]


@dataclass(frozen=True, slots=True)
class YearTableView:
    """The year-by-year table behind derived rates.

    Parameters
    ----------
    id : str
        Identity.
    columns : tuple of YearColumn
        ``year``, ``discount_factor``, ``energy_price_per_kwh``, ``carbon_cost_per_kwh`` (only where it counts),
        ``demand_charge_per_kw_year``, ``peak_load_pu``, ``cooling_hours`` and ``cooling_share_at_peak`` (only where
        they follow the load from year to year; then values, not formulas), ``no_load``, ``load``, ``auxiliary``; the
        last three are present values per kW, whose sums are the rates.
    inputs : mapping of str to str
        Name of an input of the derivation to the id of its figure: ``discount_rate_percent``,
        ``evaluation_period_years``, ``years_before_end`` (0, 0.5 or 1), ``energy_price_per_kwh`` (or
        ``energy_price_year_1`` … for a table by year), ``energy_price_escalation_percent``,
        ``escalate_before_year_1`` (0 or 1), ``demand_charge_per_kw_year``, ``demand_charge_escalation_percent``,
        ``load_factor`` and ``loss_factor_coefficient`` (absent where the loss factor is stated), ``loss_factor``,
        ``peak_load_pu``, ``peak_load_growth_percent``, ``peak_load_cap_pu`` (absent without cap),
        ``peak_responsibility_factor``, ``hours_energized``, ``hours_of_load``, ``cooling_hours``,
        ``cooling_share_at_peak``, ``upstream_gross_up``, ``price_delay_years`` and ``discount_delay_years`` (service
        after the date of the prices: prices escalate by (1+e)^delay before year 1, discount factors are times
        (1+r)^-delay), ``carbon_cost_per_kwh`` and ``carbon_cost_escalation_percent`` (absent where no carbon cost
        counts), ``peak_load_year_1`` … instead of ``peak_load_pu`` for a table by year.
    """

    id: str
    columns: tuple[YearColumn, ...]
    inputs: Mapping[str, str]


@dataclass(frozen=True, slots=True)
class CoolingStageView:
    """A stage of fans or pumps: from which load it runs, and how many hours in each year.

    Parameters
    ----------
    above_load_pu : float
        Load above which the stage runs. [per unit of the rating]
    share_percent : float
        Share of the auxiliary loss that it needs. [percent]
    hours_by_year : tuple of float
        Hours that it runs in each year of the evaluation period, counted by time. [hour/year]
    """

    above_load_pu: float
    share_percent: float
    hours_by_year: tuple[float, ...]


@dataclass(frozen=True, slots=True)
class LoadView:
    """Load of a lot that comes from a profile.

    Parameters
    ----------
    file : str
        The profile.
    remarks : tuple of str
        What was recognized and accepted when it was read.
    facts : tuple of Fact
        Load factor, loss factor by time and, where the price moves, by price with the difference; implied coefficient.
    duration : tuple of (float, float)
        Points of the load duration curve, falling: hours a year at or above the load, and the load over the peak load
        of the year. At most a few hundred points, both ends included. [hour/year, 1]
    peak_load_by_year_pu : tuple of float
        Peak load of each year. [per unit of the rating]
    stages : tuple of CoolingStageView
        Cooling stages; empty where none follows the load.
    """

    file: str
    remarks: tuple[str, ...]
    facts: tuple[Fact, ...]
    duration: tuple[tuple[float, float], ...]
    peak_load_by_year_pu: tuple[float, ...]
    stages: tuple[CoolingStageView, ...]


@dataclass(frozen=True, slots=True)
class RatesView:
    """The rates that value the losses of a lot.

    Parameters
    ----------
    basis : str
        ``"announced"`` or ``"derived as announced"``.
    no_load, load, auxiliary : str or None
        Ids of the rates used, per kW; None for a lot without auxiliary rate.
    unit : str
        ``"NCU/kW"``.
    sources : tuple of str
        Where the rates come from, in sentences.
    year_table : YearTableView or None
        For rates derived as present worth.
    method : str
        ``"announced rates"``, ``"present worth"`` or ``"fixed charge rate"``.
    formulas : tuple of str
        The formulas of the method with their source, a line each.
    load_profile : LoadView or None
        Where the load comes from a profile.
    """

    basis: str
    no_load: str
    load: str
    auxiliary: str | None
    unit: str
    sources: tuple[str, ...]
    year_table: YearTableView | None
    method: str = ""
    formulas: tuple[str, ...] = ()
    load_profile: LoadView | None = None


@dataclass(frozen=True, slots=True)
class SensitivityRow:
    """What a stated change of one input does to the rates, by their exact derivatives.

    Parameters
    ----------
    input : str
        What is changed.
    unit : str
        Its unit, empty for a pure number.
    value : str
        What it is now, as printed.
    change : str
        The change, with sign and unit: ``"+1 percentage point"``.
    a, b, c : float or None
        Derivative of each rate times the change; None where the rate does not exist or does not depend on the input.
        [currency/kW]
    """

    input: str
    unit: str
    value: str
    change: str
    a: float | None
    b: float | None
    c: float | None


@dataclass(frozen=True, slots=True)
class LotRatesView:
    """Rates of one lot for the planner: those that the tender uses, and a study beside announced ones.

    Parameters
    ----------
    id, description : str
        Of the lot.
    used : RatesView
        What the tender uses.
    study : RatesView or None
        A planner's derivation beside announced rates.
    comparison : tuple of str
        How far the announced rates lie from those of the study, in sentences.
    sensitivity : tuple of SensitivityRow
        Of the derived rates: those of the study where there is one, else the rates used.
    """

    id: str
    description: str
    used: RatesView
    study: RatesView | None
    comparison: tuple[str, ...] = ()
    sensitivity: tuple[SensitivityRow, ...] = ()


@dataclass(frozen=True, slots=True)
class RatesReport:
    """What `lossworth rates` shows: no offers, no ranking.

    Parameters
    ----------
    reference, title, currency : str
        Identity of the tender.
    lots : tuple of LotRatesView
        In the order of the tender.
    figures : mapping of str to ShownFigure
        Every figure behind the rates, operands before results.
    """

    reference: str
    title: str
    currency: str
    lots: tuple[LotRatesView, ...]
    figures: Mapping[str, ShownFigure]
