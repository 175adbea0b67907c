"""Rates of a lot: announced ones brought to a rate per kW, or derived ones by the method that the tender names."""

from __future__ import annotations

from ..records.quantity import Quantity
from ..records.tender import AnnouncedRates, Derivation, Lot, Method, Tender
from ..trail import Derivation as YearSum
from ..trail import Figure, constant, product, read, rounded
from ..units import RATE_BASES
from .fixed_charge import fixed_charge_rates
from .identities import figure_id
from .load_and_price import join
from .present_worth import year_columns
from .profile_facts import cooling_by_year, load_facts, loss_factors, peak_loads
from .rate_inputs import Naming, economics_inputs, loading_inputs, to_decimal
from .result import Basis, LotRates, YearTable

__all__ = ["derived_rates", "lot_rates"]

_LABELS = {"no_load": "no-load loss rate A", "load": "load loss rate B", "auxiliary": "auxiliary loss rate C"}


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
    def per_kw(name: str, quantity: Quantity) -> Figure:
        identity, label = figure_id(f"lot {lot_id}", "rates", name), _LABELS[name]
        stated = read(identity, f"announced {label}", quantity.value, f"{currency}/{rates.per}", quantity.place)
        if rates.per == "kW":
            return stated
        times = RATE_BASES[rates.per]
        name_of_pieces = f"{rates.per} in 1 kW"
        pieces = constant(name_of_pieces, name_of_pieces, times, "1", f"1 kW is {times} times {rates.per}")
        return product(f"{identity}/per kW", f"{label} per kW", f"{currency}/kW", stated, pieces)

    return LotRates(
        basis=Basis.ANNOUNCED,
        no_load=per_kw("no_load", rates.no_load),
        load=per_kw("load", rates.load),
        auxiliary=None if rates.auxiliary is None else per_kw("auxiliary", rates.auxiliary),
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
        Names of the economics and of the loading condition, the method, and the rounding of the rates.
    branch : str
        Part of the identities, to keep a planner's study apart from the evaluation.

    Returns
    -------
    LotRates
        A, B and, where cooling hours or stages are stated, C; with the year table behind them. [currency/kW]

    Notes
    -----
    The sums are those of `capitalization.rates`; the computed rates are kept to 12 significant digits.
    """
    economics = tender.economics[derivation.economics.value]
    loading = tender.loading[derivation.loading.value]
    naming = Naming(lot.id, branch, tender.identity.currency.value)
    joined = None if loading.profile is None else join(loading, economics)
    from_profile = None if joined is None else loss_factors(naming, loading, joined)
    inputs = economics_inputs(naming, economics, joined) | loading_inputs(naming, loading, lot, from_profile)
    with_auxiliary = loading.cooling_hours is not None or bool(loading.cooling_stages)
    table, cooling = None, None
    if derivation.method is Method.FIXED_CHARGE_RATE:
        computed = fixed_charge_rates(naming, inputs, with_auxiliary=with_auxiliary)
    else:
        responsibility = float(inputs["peak_responsibility_factor"].value)
        cooling = None if joined is None else cooling_by_year(loading, joined, peak_loads(inputs), responsibility)
        table = YearTable(naming.id("year table"), year_columns(inputs, cooling), inputs)
        computed = _sums(naming, table, with_auxiliary=with_auxiliary)
    rates = {name: _rounded(naming, name, figure, derivation) for name, figure in computed.items()}
    return LotRates(
        basis=Basis.DERIVED,
        no_load=rates["no_load"],
        load=rates["load"],
        auxiliary=rates.get("auxiliary"),
        table=table,
        method=derivation.method.value,
        inputs=inputs,
        load_facts=load_facts(loading, economics, inputs),
        cooling=cooling,
    )


def _sums(naming: Naming, table: YearTable, *, with_auxiliary: bool) -> dict[str, Figure]:
    names = ("no_load", "load", "auxiliary") if with_auxiliary else ("no_load", "load")
    return {
        name: Figure(
            naming.id(name, "computed"),
            f"{_LABELS[name]}, computed",
            to_decimal(sum(table.columns[name])),
            f"{naming.currency}/kW",
            YearSum(table.id, name, tuple(table.inputs.values())),
        )
        for name in names
    }


def _rounded(naming: Naming, name: str, computed: Figure, derivation: Derivation) -> Figure:
    if derivation.rounding is None:
        return computed
    return rounded(naming.id(name), _LABELS[name], computed, derivation.rounding)
