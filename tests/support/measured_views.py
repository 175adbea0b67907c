"""An evaluation with everything that loads and prices from data bring, through the engine to a view. INVENTED DATA.

Lot 1 has announced rates with a study beside them; lot 2 a measured load with two cooling stages, a tariff in blocks,
a carbon cost and service after the price date; lot 3 the fixed charge rate; lot 4 peak loads by year, the carbon cost,
and cooling valued through A and B.
"""

from __future__ import annotations

import datetime
from typing import Any

from lossworth.records.bid import Offer
from lossworth.records.tender import CoolingValuation, LoadingCondition, Lot, Method, PresentValueDate, Tender
from lossworth.report.build_rates_report import build_rates_report
from lossworth.report.view import EvaluationView, RatesReport
from support import records as make
from support.load_views import double_hump_year
from support.sample_views import offer, view_of

__all__ = ["measured_offers", "measured_report", "measured_tender", "measured_view"]

_CARBON = {"carbon_cost_escalation_percent": make.quantity("2.5"), "carbon_cost_counts": True}
_DATES = {"price_date": datetime.date(2026, 1, 1), "service_date": datetime.date(2028, 7, 1)}


def _derivation(economics: str, loading: str, method: Method = Method.PRESENT_WORTH) -> Any:
    names = {"economics": make.entry(economics), "loading": make.entry(loading), "method": method}
    return make.derivation().model_copy(update=names)


def _lots() -> tuple[Lot, ...]:
    large: dict[str, Any] = {
        "rated_power_kva": make.quantity("31500", "kVA"),
        "quantity": make.quantity("2"),
        "cooling": make.entry("ONAN/ONAF"),
    }
    return (
        make.lot("1", rates=make.rates("11", "1.32", per="W"), study=_derivation("board", "town")),
        make.lot(
            "2",
            **large,
            description=make.entry("20/31.5 MVA, measured"),
            derivation=_derivation("tariff", "feeder"),
            loss_basis=make.loss_basis(),
        ),
        make.lot("3", derivation=_derivation("levelized", "steady", Method.FIXED_CHARGE_RATE)),
        make.lot(
            "4",
            **large,
            description=make.entry("20/31.5 MVA, peaks by year"),
            derivation=_derivation("board", "planned"),
            cooling_valuation=CoolingValuation.THROUGH_A_AND_B,
        ),
    )


def _tariff(**changes: Any) -> Any:
    day = make.block("day", "0.12", day_types=("workday",), starts=datetime.time(7), ends=datetime.time(21))
    fields: dict[str, Any] = {
        "energy_price_per_kwh": None,
        "energy_price_blocks": (day, make.block("rest", "0.06")),
        "energy_price_escalation_percent": make.quantity("2"),
        "demand_charge_per_kw_year": None,
        "demand_charge_per_kw_month": make.quantity("4.5"),
        "demand_charge_escalation_percent": make.quantity("1.5"),
        "carbon_cost_per_kwh": make.quantity("0.02"),
        "carbon_intensity_kg_per_kwh": make.quantity("0.35"),
        "present_value_at": PresentValueDate.PRICE,
    }
    return make.economics(**(fields | _CARBON | _DATES | changes))


def _loading(peak_of_year_5: str) -> dict[str, LoadingCondition]:
    measured: dict[str, Any] = {"load_factor": None, "loss_factor_coefficient": None}
    profile = make.profile(double_hump_year(), file="profiles/feeder <7>.csv", remarks=("A year of hours.",))
    peaks = [f"{min(0.5 + 0.012 * year, 0.8):.3f}" for year in range(30)]
    peaks[4] = peak_of_year_5
    return {
        "town": make.loading(),
        "steady": make.loading(peak_load_growth_percent=None),
        "feeder": make.loading(
            **measured, profile=profile, cooling_stages=(make.stage("0.48", "0.4"), make.stage("0.63", "0.6"))
        ),
        "planned": make.loading(
            peak_load_pu=None,
            peak_load_growth_percent=None,
            peak_load_by_year_pu=tuple(make.quantity(peak) for peak in peaks),
        ),
    }


def measured_tender(
    *,
    carbon_cost: str = "0.02",
    demand_charge_per_month: str = "4.5",
    fixed_charge_rate: str = "12",
    peak_of_year_5: str = "0.548",
    service_date: datetime.date = _DATES["service_date"],
) -> Tender:
    """The tender; each argument is an input that a reader of the workbook may change."""
    carbon = make.quantity(carbon_cost)
    economics = {
        "board": make.economics(carbon_cost_per_kwh=carbon, **_CARBON),
        "tariff": _tariff(
            carbon_cost_per_kwh=carbon,
            demand_charge_per_kw_month=make.quantity(demand_charge_per_month),
            service_date=service_date,
        ),
        "levelized": make.economics(
            carbon_cost_per_kwh=carbon, fixed_charge_rate_percent=make.quantity(fixed_charge_rate), **_CARBON
        ),
    }
    rules = make.tender().rules
    return make.tender(*_lots(), rules=rules, economics=economics, loading=_loading(peak_of_year_5))


def _large_offers() -> tuple[Offer, ...]:
    """Offers of lot 2, on three bases, and of lot 4 with cooling powers."""
    fans = {"auxiliary_loss_kw": make.quantity("1.5", "kW")}
    small_rating = {"load_loss_rating_kva": make.quantity("20000", "kVA", "20")}
    warm = {
        "reference_temperature_c": make.quantity("85", "°C"),
        "resistive_loss_kw": make.quantity("110", "kW"),
        "stray_loss_kw": make.quantity("24", "kW"),
    }
    cooled = {
        "cooling_power_no_load_kw": make.quantity("0", "kW"),
        "cooling_power_rated_kw": make.quantity("2.5", "kW"),
    }
    return (
        offer("Alder <i>Works</i>", "2", 7, ("655000", "15.2", "134"), **fans, **warm),
        offer("Birchlune", "2", 8, ("641000", "15.9", "56.2"), **fans, **small_rating),
        offer("Cedarfell", "2", 9, ("691000.55", "12.613", "128.07"), **fans),
        offer("Alder <i>Works</i>", "4", 10, ("655000", "15.2", "134"), **cooled),
        offer("Cedarfell", "4", 11, ("691000.55", "12.613", "128.07"), **cooled),
    )


def measured_offers() -> tuple[Offer, ...]:
    """Two or three offers a lot."""
    small = tuple(
        offer(name, lot, line, figures)
        for lot, first in (("1", 2), ("3", 12))
        for line, (name, figures) in enumerate(
            (("Alder <i>Works</i>", ("11520", "0.330", "3.100")), ("Birchlune", ("11432", "0.350", "3.000"))),
            start=first,
        )
    )
    return (*small, *_large_offers())


def measured_view(**changes: Any) -> EvaluationView:
    """The view of that tender and those offers."""
    return view_of(measured_tender(**changes), measured_offers())


def measured_report() -> RatesReport:
    """What the planner sees of the tender."""
    return build_rates_report(measured_tender())
