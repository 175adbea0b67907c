"""Rates of a lot: announced ones brought to a rate per kW, or derived ones with their year table."""

from __future__ import annotations

from collections.abc import Mapping
from decimal import Decimal

from ..capitalization import rates as engine
from ..records.quantity import Quantity
from ..records.tender import AnnouncedRates, Derivation, Economics, LoadingCondition, Lot, PriceOfYear1, Tender
from ..trail import Derivation as YearSum
from ..trail import Figure, Rule, constant, difference, product, read, rounded, total
from ..units import RATE_BASES
from .identities import figure_id
from .result import Basis, LotRates, YearTable

__all__ = ["derived_rates", "lot_rates"]

_HOURS = Decimal(8760)
_SIGNIFICANT_DIGITS = 12  # the last bits of a float differ between processors; twelve digits do not

# name, unit, value where the tender is silent, and what that silence means
_DEFAULTS: tuple[tuple[str, str, Decimal, str], ...] = (
    ("energy_price_escalation_percent", "%/year", Decimal(0), "not stated: the energy price does not escalate"),
    ("demand_charge_per_kw_year", "{currency}/(kW year)", Decimal(0), "not stated: no demand charge"),
    ("demand_charge_escalation_percent", "%/year", Decimal(0), "not stated: the demand charge does not escalate"),
    ("upstream_gross_up", "1", Decimal(1), "not stated: no losses upstream of the unit"),
    ("peak_load_growth_percent", "%/year", Decimal(0), "not stated: the peak load does not grow"),
    ("peak_responsibility_factor", "1", Decimal(1), "not stated, and without effect where there is no demand charge"),
    ("hours_energized", "h/year", _HOURS, "not stated: energized all year"),
    ("cooling_hours", "h/year", Decimal(0), "not stated: no auxiliary loss is valued"),
    ("cooling_share_at_peak", "1", Decimal(0), "not stated, and without effect where there is no demand charge"),
)
_PERCENT = Decimal("0.01")


def lot_rates(tender: Tender, lot: Lot) -> LotRates:
    """Rates that value the losses of a lot.

    Parameters
    ----------
    tender : Tender
        For currency, economics and loading conditions.
    lot : Lot
        With announced rates, or with the announced derivation.

    Returns
    -------
    LotRates
        A, B and C per kW as figures. [currency/kW]

    Raises
    ------
    ValueError
        If the lot has neither, which intake reports before.
    """
    if lot.rates is not None:
        return _announced(lot.rates, lot.id, tender.identity.currency.value)
    if lot.derivation is None:
        raise ValueError(f"lot {lot.id} has neither rates nor a derivation")
    return derived_rates(tender, lot, lot.derivation)


def _announced(rates: AnnouncedRates, lot_id: str, currency: str) -> LotRates:
    def per_kw(name: str, label: str, quantity: Quantity) -> Figure:
        stated = read(
            _id(lot_id, "rates", name), f"announced {label}", quantity.value, f"{currency}/{rates.per}", quantity.place
        )
        if rates.per == "kW":
            return stated
        times = RATE_BASES[rates.per]
        pieces = constant(
            f"{rates.per} in 1 kW", f"{rates.per} in 1 kW", times, "1", f"1 kW is {times} times {rates.per}"
        )
        return product(_id(lot_id, "rates", name, "per kW"), f"{label} per kW", f"{currency}/kW", stated, pieces)

    auxiliary = None if rates.auxiliary is None else per_kw("auxiliary", "auxiliary loss rate C", rates.auxiliary)
    return LotRates(
        Basis.ANNOUNCED,
        per_kw("no_load", "no-load loss rate A", rates.no_load),
        per_kw("load", "load loss rate B", rates.load),
        auxiliary,
        None,
    )


def derived_rates(tender: Tender, lot: Lot, derivation: Derivation, branch: str = "rates") -> LotRates:
    """Rates of a lot derived from its economics and its loading condition.

    Parameters
    ----------
    tender : Tender
        For currency, economics and loading conditions.
    lot : Lot
        The lot.
    derivation : Derivation
        Names of the economics and of the loading condition, and the rounding of the rates.
    branch : str
        Part of the identities, to keep a planner's study apart from the evaluation.

    Returns
    -------
    LotRates
        A, B and, where cooling hours are stated, C, with the year table behind them. [currency/kW]

    Notes
    -----
    The sums are those of `capitalization.rates`; the computed rates are kept to 12 significant digits.
    """
    economics = tender.economics[derivation.economics.value]
    loading = tender.loading[derivation.loading.value]
    currency = tender.identity.currency.value
    inputs = _inputs(economics, loading, lot.id, branch, currency)
    table = YearTable(_id(lot.id, branch, "year table"), _columns(inputs), inputs)

    def rate(name: str, label: str) -> Figure:
        value = Decimal(f"{sum(table.columns[name]):.{_SIGNIFICANT_DIGITS}g}")
        source = YearSum(table.id, name, tuple(inputs.values()))
        computed = Figure(_id(lot.id, branch, name, "computed"), f"{label}, computed", value, f"{currency}/kW", source)
        if derivation.rounding is None:
            return computed
        return rounded(_id(lot.id, branch, name), label, computed, derivation.rounding)

    return LotRates(
        Basis.DERIVED,
        rate("no_load", "no-load loss rate A"),
        rate("load", "load loss rate B"),
        None if loading.cooling_hours is None else rate("auxiliary", "auxiliary loss rate C"),
        table,
    )


def _id(lot_id: str, *parts: str) -> str:
    return figure_id(f"lot {lot_id}", *parts)


def _inputs(
    economics: Economics, loading: LoadingCondition, lot_id: str, branch: str, currency: str
) -> dict[str, Figure]:
    def stated(name: str, quantity: Quantity, unit: str) -> Figure:
        return read(_id(lot_id, branch, name), _label(name), quantity.value, unit, quantity.place)

    def by_rule(name: str, value: Decimal, unit: str, statement: str) -> Figure:
        return Figure(_id(lot_id, branch, name), _label(name), value, unit, Rule(statement))

    figures = {
        "discount_rate_percent": stated("discount_rate_percent", economics.discount_rate_percent, "%/year"),
        "evaluation_period_years": stated("evaluation_period_years", economics.evaluation_period_years, "year"),
        "years_before_end": by_rule(
            "years_before_end",
            Decimal(str(economics.timing.years_before_end)),
            "year",
            f"timing: {economics.timing.value} ({economics.place})",
        ),
        "escalate_before_year_1": by_rule(
            "escalate_before_year_1",
            Decimal(int(economics.energy_price_meaning is PriceOfYear1.TODAY)),
            "1",
            f"stated energy price: {economics.energy_price_meaning.value} ({economics.place})",
        ),
    }
    price_unit = f"{currency}/kWh"
    if economics.energy_price_per_kwh is not None:
        figures["energy_price_per_kwh"] = stated("energy_price_per_kwh", economics.energy_price_per_kwh, price_unit)
    for year, price in enumerate(economics.energy_price_by_year_per_kwh or (), start=1):
        figures[f"energy_price_year_{year}"] = stated(f"energy_price_year_{year}", price, price_unit)
    figures |= _loss_factor(loading, lot_id, branch)
    figures["peak_load_pu"] = stated("peak_load_pu", loading.peak_load_pu, "1")
    if loading.peak_load_cap_pu is not None:
        figures["peak_load_cap_pu"] = stated("peak_load_cap_pu", loading.peak_load_cap_pu, "1")
    for name, unit, value, statement in _DEFAULTS:
        quantity = getattr(economics, name, None) or getattr(loading, name, None)
        unit = unit.format(currency=currency)
        figures[name] = stated(name, quantity, unit) if quantity else by_rule(name, value, unit, statement)
    figures["hours_of_load"] = constant(
        _id(lot_id, branch, "hours_of_load"), _label("hours_of_load"), _HOURS, "h/year", "hours of a year"
    )
    return figures


def _loss_factor(loading: LoadingCondition, lot_id: str, branch: str) -> dict[str, Figure]:
    """Loss factor as stated, or k LF + (1 - k) LF^2 as figures that show their arithmetic."""

    def name(*parts: str) -> str:
        return _id(lot_id, branch, *parts)

    if loading.loss_factor is not None:
        stated = loading.loss_factor
        return {"loss_factor": read(name("loss_factor"), "loss factor", stated.value, "1", stated.place)}
    if loading.load_factor is None or loading.loss_factor_coefficient is None:
        raise ValueError("a loading condition needs a loss factor, or a load factor with its coefficient")
    load, k = loading.load_factor, loading.loss_factor_coefficient
    load_factor = read(name("load_factor"), "load factor", load.value, "1", load.place)
    coefficient = read(name("loss_factor_coefficient"), "loss factor coefficient", k.value, "1", k.place)
    one = constant("one", "one", Decimal(1), "1", "the number 1")
    linear = product(name("loss_factor", "linear"), "linear part of the loss factor", "1", coefficient, load_factor)
    rest = difference(name("loss_factor", "rest"), "1 less the coefficient", "1", one, coefficient)
    square = product(
        name("loss_factor", "square"), "quadratic part of the loss factor", "1", rest, load_factor, load_factor
    )
    return {
        "load_factor": load_factor,
        "loss_factor_coefficient": coefficient,
        "loss_factor": total(name("loss_factor"), "loss factor", "1", linear, square),
    }


def _label(name: str) -> str:
    return _LABELS.get(name, name.replace("_", " "))


_LABELS = {
    "discount_rate_percent": "discount rate",
    "evaluation_period_years": "evaluation period",
    "years_before_end": "payment before the end of the year",
    "escalate_before_year_1": "escalation before year 1 (1 yes, 0 no)",
    "energy_price_per_kwh": "energy price",
    "energy_price_escalation_percent": "escalation of the energy price",
    "demand_charge_per_kw_year": "demand charge",
    "demand_charge_escalation_percent": "escalation of the demand charge",
    "peak_load_pu": "peak load of year 1, per unit of the rating",
    "peak_load_growth_percent": "growth of the peak load",
    "peak_load_cap_pu": "cap of the peak load, per unit of the rating",
    "hours_of_load": "hours of a year",
    "cooling_hours": "hours of cooling",
    "cooling_share_at_peak": "share of the cooling on at system peak",
}


def _columns(inputs: Mapping[str, Figure]) -> dict[str, tuple[float, ...]]:
    """Run the engine on the inputs of one lot."""

    def value(name: str) -> float:
        return float(inputs[name].value)

    def fraction(name: str) -> float:
        return float(inputs[name].value * _PERCENT)

    years = int(inputs["evaluation_period_years"].value)
    by_year = [float(figure.value) for name, figure in inputs.items() if name.startswith("energy_price_year_")]
    table = engine.year_table(
        discount_rate=fraction("discount_rate_percent"),
        evaluation_period_years=years,
        years_before_end=value("years_before_end"),
        energy_price_per_kwh=None if by_year else value("energy_price_per_kwh"),
        energy_price_by_year_per_kwh=by_year or None,
        energy_price_escalation=fraction("energy_price_escalation_percent"),
        escalate_before_year_1=bool(inputs["escalate_before_year_1"].value),
        demand_charge_per_kw_year=value("demand_charge_per_kw_year"),
        demand_charge_escalation=fraction("demand_charge_escalation_percent"),
        loss_factor=value("loss_factor"),
        peak_load_pu=value("peak_load_pu"),
        peak_load_growth=fraction("peak_load_growth_percent"),
        peak_load_cap_pu=value("peak_load_cap_pu") if "peak_load_cap_pu" in inputs else float("inf"),
        peak_responsibility_factor=value("peak_responsibility_factor"),
        hours_energized=value("hours_energized"),
        hours_of_load=value("hours_of_load"),
        cooling_hours=value("cooling_hours"),
        cooling_share_at_peak=value("cooling_share_at_peak"),
        upstream_gross_up=value("upstream_gross_up"),
    )
    return {
        "year": tuple(float(t) for t in range(1, years + 1)),
        **{
            name: tuple(float(x) for x in getattr(table, name))
            for name in (
                "discount_factor",
                "energy_price_per_kwh",
                "demand_charge_per_kw_year",
                "peak_load_pu",
                "no_load",
                "load",
                "auxiliary",
            )
        },
    }
