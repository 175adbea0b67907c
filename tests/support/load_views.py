"""Views with a load from a profile, assumptions and information, for tests of the papers. INVENTED DATA."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from decimal import Decimal
from math import cos, pi

from lossworth.capitalization.duration import LoadDuration, load_duration
from lossworth.report.view import (
    CoolingStageView,
    EvaluationView,
    Fact,
    LoadView,
    LotRatesView,
    LotView,
    OfferView,
    RatesReport,
    SensitivityRow,
    YearColumn,
)
from support.page_views import page_view

__all__ = [
    "ASSUMPTION",
    "FORMULAS",
    "double_hump_year",
    "duration_points",
    "load_page_view",
    "load_view",
    "rates_report",
]

ASSUMPTION = (
    "load loss: brought from 20 MVA to 31.5 MVA by the square of the ratings, 54.0 kW × (31.5 / 20)² = 133.95 kW; "
    "the rating was not stated <b>by the bidder</b>"
)
FORMULAS = (
    "A = G Σ DF_t × (p_t × h + D_t) [IEEE C57.120, from memory]",
    "B = G Σ DF_t × β_t² × (p_t × 8760 × LsF + D_t × R²) [IEEE C57.120, from memory]",
    "C = G Σ DF_t × (p_t × h_q,t + D_t × κ_t) [RUS Bulletin 1724E-301, equations from memory]",
)


def double_hump_year() -> list[float]:
    """A year of hours with a morning and an evening hump, higher in winter; the greatest load is 1."""
    hours = [
        0.34
        + (0.20 + 0.05 * cos(2 * pi * day / 365)) * max(0.0, cos(2 * pi * (hour - 8) / 18)) ** 2
        + (0.42 + 0.19 * cos(2 * pi * day / 365)) * max(0.0, cos(2 * pi * (hour - 19) / 16)) ** 2
        for day in range(365)
        for hour in range(24)
    ]
    greatest = max(hours)
    return [load / greatest for load in hours]


def duration_points(shape: LoadDuration, points: int = 200) -> tuple[tuple[float, float], ...]:
    """Some points of the falling curve, both ends included."""
    levels, hours = shape.levels[::-1], shape.hours[:-1][::-1]
    last = len(levels) - 1
    chosen = sorted({round(last * position / (points - 1)) for position in range(points)})
    return tuple((float(hours[index]), float(levels[index])) for index in chosen)


def load_view(
    peaks: Sequence[float], thresholds: Sequence[float] = (0.48, 0.63), loads: Sequence[float] | None = None
) -> LoadView:
    """Load of a lot from the double-hump year, with cooling stages of equal shares."""
    shape = load_duration(double_hump_year() if loads is None else list(loads))
    stages = tuple(
        CoolingStageView(
            above,
            100 / len(thresholds),
            tuple(float(shape.hours_above(above / peak)) if peak else 0.0 for peak in peaks),
        )
        for above in thresholds
    )
    return LoadView(
        file="profiles/feeder <7>.csv",
        remarks=("Local time with daylight saving: one hour is missing in March, one stands twice in October.",),
        facts=(
            Fact("load factor", "0.612", "1", Decimal("0.612")),
            Fact("loss factor by time", "0.407", "1", Decimal("0.407")),
            Fact("loss factor by price", "0.431", "1", Decimal("0.431")),
            Fact("price raises it by", "5.9", "%", Decimal("5.9")),
            Fact("coefficient k that it implies", "0.137", "1", Decimal("0.137")),
        ),
        duration=duration_points(shape),
        peak_load_by_year_pu=tuple(peaks),
        stages=stages,
    )


def _with_more_columns(lot: LotView, load: LoadView) -> LotView:
    """The year table of a lot with carbon and cooling columns, and the load behind its rates."""
    table = lot.rates.year_table
    assert table is not None
    columns = list(table.columns)
    years = range(len(columns[0].values))
    hours = tuple(sum(stage.share_percent / 100 * stage.hours_by_year[t] for stage in load.stages) for t in years)
    at_peak = tuple(
        sum(stage.share_percent / 100 for stage in load.stages if peak * 0.9 > stage.above_load_pu)
        for peak in load.peak_load_by_year_pu
    )
    columns.insert(3, YearColumn("carbon_cost_per_kwh", "carbon cost", "NCU/kWh", tuple(0.02 * 1.02**t for t in years)))
    columns[6:6] = [
        YearColumn("cooling_hours", "hours of cooling, by price", "h/year", hours),
        YearColumn("cooling_share_at_peak", "share of cooling on at system peak", "1", at_peak),
    ]
    rates = replace(
        lot.rates,
        year_table=replace(table, columns=tuple(columns)),
        method="present worth",
        formulas=FORMULAS,
        load_profile=load,
    )
    return replace(lot, rates=rates)


def _informed(offer: OfferView, position: int) -> OfferView:
    facts = (
        Fact("efficiency at half load, IEC (input)", "99.68", "%", Decimal("99.68")),
        Fact("efficiency at half load, IEEE (output)", "99.67", "%", Decimal("99.67")),
        Fact("load of greatest efficiency", f"{0.33 + position / 100:.2f}", "per unit", Decimal("0.33")),
        Fact("peak efficiency index", "99.712", "%", Decimal("99.712")),
        Fact("energy lost in year 1", "301,540", "kWh", Decimal(301540)),
        Fact("energy lost over life", "11,820,400", "kWh", Decimal(11820400)),
        Fact("CO2 over life", "4,137", "t", Decimal(4137)),
    )
    return replace(offer, information=facts[: 7 - position], assumptions=(ASSUMPTION,) if position == 0 else ())


def load_page_view() -> EvaluationView:
    """The view of the page tests, in which lot 4 has a measured load, assumptions and information."""
    view = page_view()
    town, station = view.lots
    peaks = next(c for c in station.rates.year_table.columns if c.name == "peak_load_pu").values  # type: ignore[union-attr]
    station = _with_more_columns(station, load_view(peaks))
    station = replace(station, offers=tuple(_informed(offer, place) for place, offer in enumerate(station.offers)))
    town = replace(town, rates=replace(town.rates, method="announced rates"))
    return replace(view, lots=(town, station))


def rates_report() -> RatesReport:
    """Announced rates with a study beside them, and derived ones from a measured load."""
    view = load_page_view()
    town, station = view.lots
    sensitivity = (
        SensitivityRow("discount rate", "%/year", "6", "+1 percentage point", -1178.31, -201.5, None),
        SensitivityRow("loss factor", "", "0.431", "+0.01", None, 46.2, None),
        SensitivityRow("demand charge", "NCU/(kW year)", "55", "+1", 14.5, 6.12, 0.35),
    )
    comparison = ("The announced A is 12.0 % above what these inputs give.",)
    lots = (
        LotRatesView(town.id, town.description, town.rates, station.rates, comparison, sensitivity),
        LotRatesView(station.id, station.description, station.rates, None, (), sensitivity),
    )
    return RatesReport(view.reference, view.title, view.currency, lots, view.figures)
