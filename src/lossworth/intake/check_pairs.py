"""Do economics and loading condition of a derivation fit together?"""

from __future__ import annotations

import datetime
from collections.abc import Iterator, Sequence
from dataclasses import dataclass

from ..findings import Finding
from ..records.bid import is_naturally_cooled
from ..records.profile import PriceSeries, Profile, TimeGrid
from ..records.tender import CoolingValuation, Method
from .check_economics import has_price
from .profile_file import GREATEST_PU
from .suggestions import did_you_mean
from .tender_draft import Check, Draft, DraftLot, DraftTable

__all__ = ["PAIR_CHECKS"]


@dataclass(frozen=True, slots=True)
class _Pair:
    """Economics and loading condition that a derivation names."""

    derivation: DraftTable
    economics: DraftTable
    loading: DraftTable

    @property
    def grid(self) -> TimeGrid | None:
        """Grid of the load profile, where there is one that can be read."""
        profile = self.loading.values.get("profile")
        return profile.grid if isinstance(profile, Profile) else None


def _pairs(draft: Draft) -> Iterator[_Pair]:
    """Each combination of economics, loading and method that a lot names, once."""
    seen: set[tuple[str, ...]] = set()
    for derivation in (table for lot in draft.lots for table in lot.derivations):
        names = tuple(derivation.text(name) or "" for name in ("economics", "loading", "method"))
        economics, loading = draft.economics.get(names[0]), draft.loading.get(names[1])
        if names not in seen and economics is not None and loading is not None:
            seen.add(names)
            yield _Pair(derivation, economics, loading)


def check_demand_needs(draft: Draft) -> Iterator[Finding]:
    """Where there is a demand charge, the loading says what of the losses falls on the system's peak."""
    for pair in _pairs(draft):
        economics, loading = pair.economics, pair.loading
        charges = (economics.number(f"demand_charge_per_kw_{period}") for period in ("year", "month"))
        if not any(charge is not None and charge > 0 for charge in charges):
            continue
        reason = f"must be given, since {economics.key} has a demand charge"
        if not loading.has("peak_responsibility_factor"):
            yield loading.finding("tender-key-missing", "peak_responsibility_factor", reason)
        if loading.has("cooling_hours") and not loading.has("cooling_share_at_peak"):
            yield loading.finding("tender-key-missing", "cooling_share_at_peak", reason)


def check_cooling_hours(draft: Draft) -> Iterator[Finding]:
    """A derivation for units with fans or pumps says how long they run, where they have a rate of their own."""
    for lot in draft.lots:
        cooling = lot.own.text("cooling")
        through_a_and_b = lot.own.values.get("cooling_valuation") is CoolingValuation.THROUGH_A_AND_B
        if lot.derivation is None or cooling is None or is_naturally_cooled(cooling) or through_a_and_b:
            continue
        loading = draft.loading.get(lot.derivation.text("loading") or "")
        if loading is not None and not loading.has("cooling_hours") and not _has_stages(draft, loading):
            yield _cooling_hours_missing(lot, loading, cooling)


def _has_stages(draft: Draft, loading: DraftTable) -> bool:
    return bool(loading.inside.get("cooling_stage")) or (*loading.loc, "cooling_stages") in draft.failed


def _cooling_hours_missing(lot: DraftLot, loading: DraftTable, cooling: str) -> Finding:
    rule = f"must be given, or cooling stages, since {lot.own.key} is cooled {cooling} and its rates are derived"
    fix = "Add the hours a year in which fans or pumps run; 0 where their loss is not valued."
    return loading.finding("tender-key-missing", "cooling_hours", rule, fix=fix)


def check_peak_loads_by_year(draft: Draft) -> Iterator[Finding]:
    """A table of peak loads has one for each year."""
    field = "peak_load_by_year_pu"
    for pair in _pairs(draft):
        years, loads = pair.economics.number("evaluation_period_years"), pair.loading.values.get(field)
        if years is not None and isinstance(loads, tuple) and len(loads) != years:
            rule = f"must have one peak load for each of the {years} years of {pair.economics.key}"
            yield pair.loading.finding(
                "tender-conflict", field, rule, f"{len(loads)} peak loads", "Add or remove some."
            )


def check_peak_of_profile(draft: Draft) -> Iterator[Finding]:
    """The peak load that a profile gives to a lot is possible, and no cap cuts it off."""
    for lot in draft.lots:
        for name in dict.fromkeys(derivation.text("loading") for derivation in lot.derivations):
            loading = draft.loading.get(name or "")
            peak = _peak_of_profile(lot, loading) if loading is not None else None
            if loading is None or peak is None:
                continue
            cap = loading.number("peak_load_cap_pu")
            if cap is not None and float(cap) < peak:
                rule = f"must not be below the peak of the profile, {peak:.4g} of the rating of {lot.own.key}"
                yield loading.finding("tender-conflict", "peak_load_cap_pu", rule)
            if peak > GREATEST_PU:
                rule = f"is more than {GREATEST_PU} times the rating of {lot.own.key}"
                fix = "Compare the unit of the profile with the rating, or state peak_load_pu."
                yield loading.finding("profile-questioned", "profile", rule, f"a peak of {peak:.4g} per unit", fix)


def _peak_of_profile(lot: DraftLot, loading: DraftTable) -> float | None:
    """Peak of a profile over the rating of the guaranteed load loss, where it is the peak load of year 1."""
    profile = loading.values.get("profile")
    if not isinstance(profile, Profile) or loading.has("peak_load_pu") or loading.has("peak_load_by_year_pu"):
        return None
    if profile.unit == "pu":
        return max(profile.loads)
    basis = lot.loss_basis.number("load_loss_rating_kva") if lot.loss_basis else None
    rating = basis or lot.own.number("rated_power_kva")
    return max(profile.loads) / float(rating) if profile.unit == "kVA" and rating and rating > 0 else None


def check_fixed_charge_rate(draft: Draft) -> Iterator[Finding]:
    """The fixed charge rate levelizes one year: it needs a rate, one price of the year, and stated hours of cooling."""
    for pair in _pairs(draft):
        if pair.derivation.values.get("method") is not Method.FIXED_CHARGE_RATE:
            continue
        method, economics, loading = f'the method "{Method.FIXED_CHARGE_RATE}"', pair.economics, pair.loading
        if not economics.has("fixed_charge_rate_percent"):
            rule = f"must be given for {method} of {pair.derivation.key}"
            yield economics.finding("tender-key-missing", "fixed_charge_rate_percent", rule)
        if has_price(economics, "energy_price_by_year_per_kwh"):
            rule = f"must be one price of the year for {method} of {pair.derivation.key}"
            fix = "State a levelized energy_price_per_kwh, a series or blocks; or derive by present worth."
            yield economics.finding("tender-conflict", "energy_price_by_year_per_kwh", rule, fix=fix)
        if stages := loading.inside.get("cooling_stage"):
            rule = f"must not stand beside {method} of {pair.derivation.key}: the hours of cooling move with the years"
            fix = "State cooling_hours in place of the stages."
            yield Finding("tender-conflict", stages[0].key, rule, stages[0].place, fix=fix)
        yield from _without_effect(economics, method)


def _without_effect(economics: DraftTable, method: str) -> Iterator[Finding]:
    """Notes on what a levelized year does not use."""
    for name in (
        "energy_price_escalation_percent",
        "carbon_cost_escalation_percent",
        "demand_charge_escalation_percent",
    ):
        if economics.number(name):
            rule = f"does not raise the price by {method}"
            fix = "State levelized prices, and take the escalation out."
            yield economics.finding("tender-key-not-used", name, rule, fix=fix)
    if economics.has("price_date"):
        yield economics.finding("tender-key-not-used", "price_date", f"has no effect by {method}")


def check_blocks_of_profile(draft: Draft) -> Iterator[Finding]:
    """The blocks of a tariff name day types of the profile, and change where its steps do."""
    for pair in _pairs(draft):
        grid = pair.grid
        if grid is None:
            continue
        for block in pair.economics.inside.get("block", ()):
            yield from _block_on_grid(block, grid, pair.loading)


def _block_on_grid(block: DraftTable, grid: TimeGrid, loading: DraftTable) -> Iterator[Finding]:
    known = tuple(dict.fromkeys(grid.day_types))
    names = block.values.get("day_types")
    for name in names if known and isinstance(names, tuple) else ():
        if name not in known:
            rule = f"must be day types of the profile of {loading.key} ({', '.join(known)})"
            yield block.finding("tender-value", "day_types", rule, name, did_you_mean(name, known))
    for field in ("starts", "ends"):
        time = block.values.get(field)
        if isinstance(time, datetime.time) and (time.hour + time.minute / 60) % grid.step_hours:
            rule = f"must be the beginning of a step of the profile of {loading.key}, of {grid.step_hours:g} hours each"
            fix = "Choose a profile with finer steps."
            yield block.finding("tender-conflict", field, rule, f"{time:%H:%M}", fix)


def check_same_days(draft: Draft) -> Iterator[Finding]:
    """A load profile and a price series that are multiplied hour by hour run over the same days."""
    for pair in _pairs(draft):
        series, grid = pair.economics.values.get("energy_price_series"), pair.grid
        if not isinstance(series, PriceSeries) or grid is None or not grid.months or not series.grid.months:
            continue
        if grid.kind == "year" and _days(grid) != _days(series.grid):
            rule = f"must run over the same days as the profile of {pair.loading.key}: the same year from the same date"
            fix = "Choose prices of the year in which the load was measured."
            yield pair.economics.finding("tender-conflict", "energy_price_series", rule, series.file, fix)


def _days(grid: TimeGrid) -> Sequence[tuple[int, str]]:
    """Month and day type of each day, asked at noon: a change of the clock moves a step by an hour."""
    steps = round(24 / grid.step_hours)
    return list(zip(grid.months[steps // 2 :: steps], grid.day_types[steps // 2 :: steps], strict=True))


PAIR_CHECKS: tuple[Check, ...] = (
    check_demand_needs,
    check_cooling_hours,
    check_peak_loads_by_year,
    check_peak_of_profile,
    check_fixed_charge_rate,
    check_blocks_of_profile,
    check_same_days,
)
