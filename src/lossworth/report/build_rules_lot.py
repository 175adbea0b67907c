"""Rules of one lot in sentences: how its losses are valued, its limits, conversions and adders."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from typing import Any

from ..errors import EvaluationStopped
from ..evaluation.load_and_price import check_load_and_price
from ..evaluation.lot_rates import lot_rates
from ..evaluation.rules_content import rules_content
from ..findings import one_line
from ..records.tender import CoolingValuation, Lot, Tender
from .figure_text import value_text
from .formats import as_stated
from .rules_view import LotRulesView
from .wording import formulas, limits

__all__ = ["lot_rules"]

_LIMITS = {
    "maximum_no_load_loss_kw": "no-load loss",
    "maximum_load_loss_kw": "load loss",
    "minimum_peak_efficiency_index_percent": "peak efficiency index",
    "impedance_percent": "impedance",
    "latest_delivery_weeks": "latest delivery",
    "maximum_sound_level_db": "sound level",
    "accepted_liquids": "insulating liquid",
    "regulation": "limits of a regulation",
}
_UNITS = (
    ("_per_kwh", "{currency}/kWh"),
    ("_per_kw_year", "{currency}/(kW year)"),
    ("_per_kw_month", "{currency}/(kW month)"),
    ("_percent", "%"),
    ("_years", "years"),
    ("_pu", "per unit of the rating"),
)


def lot_rules(tender: Tender) -> tuple[LotRulesView, ...]:
    """What is announced for each lot.

    Parameters
    ----------
    tender : Tender
        As announced.

    Returns
    -------
    tuple of LotRulesView
        In the order of the tender.

    Raises
    ------
    EvaluationStopped
        If loads and prices cannot be brought together.
    """
    if findings := check_load_and_price(tender):
        raise EvaluationStopped(findings)
    content = rules_content(tender)["lots"]
    return tuple(_lot(tender, lot, content[lot.id]) for lot in tender.lots)


def _lot(tender: Tender, lot: Lot, content: Mapping[str, Any]) -> LotRulesView:
    inputs: list[tuple[str, str]] = []
    for part in ("economics", "loading"):
        inputs += _inputs(content.get("derivation", {}).get(part, {}), tender.identity.currency.value)
    return LotRulesView(
        id=lot.id,
        description=one_line(lot.description.value),
        sentences=(
            *_asked(lot),
            *_valued(tender, lot),
            *_basis(lot),
            *_limits(lot),
            *_adders(lot, tender.identity.currency.value),
        ),
        formulas=formulas(lot_rates(tender, lot), lot),
        inputs=tuple(inputs),
        silent=tuple(name for field, name in _LIMITS.items() if not getattr(lot, field)),
    )


def _asked(lot: Lot) -> Iterator[str]:
    power = lot.rated_power_kva
    units = "unit" if lot.quantity.value == 1 else "units"
    yield (
        f"{as_stated(lot.quantity.value)} {units} of {as_stated(power.stated)} {power.unit}, "
        f"cooling {one_line(lot.cooling.value)}."
    )
    for item in lot.items:
        counts = "part of the evaluated price" if item.counts else "priced apart, no part of the evaluated price"
        yield f"Further item: {one_line(item.name.value)}, {as_stated(item.quantity.value)} for the lot, {counts}."


def _valued(tender: Tender, lot: Lot) -> tuple[str, ...]:
    """The rates; where they are derived, first the derivation, which governs."""
    currency = tender.identity.currency.value
    rates = lot_rates(tender, lot)
    named = (
        ("A", "no-load loss", rates.no_load),
        ("B", "load loss", rates.load),
        ("C", "auxiliary loss", rates.auxiliary),
    )
    values = [
        f"{letter} = {value_text(figure, currency)} {currency} per kW of {name}"
        for letter, name, figure in named
        if figure
    ]
    valued = f"Losses are valued at {', '.join(values)}."
    if rates.auxiliary is None and lot.cooling_valuation is CoolingValuation.RATE_C:
        valued += " The auxiliary loss is not valued."
    if lot.cooling_valuation is CoolingValuation.THROUGH_A_AND_B:
        valued += (
            " The power of fans and pumps is valued through A (at no load) and through B (what it takes more at rated "
            "load)."
        )
    if lot.derivation is None:
        return (valued,)
    rounding = "unrounded" if lot.derivation.rounding is None else str(lot.derivation.rounding)
    return (
        f"The tender announces a derivation by the method “{lot.derivation.method.value}” with the formulas and inputs "
        f"below; the rates are {rounding}.",
        valued,
    )


def _basis(lot: Lot) -> Iterator[str]:
    basis = lot.loss_basis
    if basis is None:
        yield "Load losses are guaranteed at the rated power of the lot. No conversion from another basis is allowed."
        return
    stated = []
    if basis.load_loss_rating_kva is not None:
        stated.append(f"at {as_stated(basis.load_loss_rating_kva.stated)} {basis.load_loss_rating_kva.unit}")
    else:
        stated.append("at the rated power of the lot")
    if basis.reference_temperature_c is not None:
        stated.append(f"at {as_stated(basis.reference_temperature_c.value)} °C")
    if basis.conductor is not None:
        stated.append(f"with windings of {basis.conductor}")
    yield f"Load losses are guaranteed {', '.join(stated)}."
    if basis.convert:
        yield (
            f"The buyer may convert a guarantee on another basis: {', '.join(sorted(basis.convert))}. Every other "
            "difference is a question to the bidder."
        )
    else:
        yield "No conversion from another basis is allowed."


def _limits(lot: Lot) -> Iterator[str]:
    if phrases := limits(lot):
        yield f"An offer is responsive only within these limits: {'; '.join(phrases)}."


def _adders(lot: Lot, currency: str) -> Iterator[str]:
    window = lot.delivery_without_adder_weeks
    each = []
    if lot.delivery_adder_percent_per_week is not None:
        each.append(f"{as_stated(lot.delivery_adder_percent_per_week.value)} % of the price")
    if lot.delivery_adder_per_week is not None:
        each.append(f"{as_stated(lot.delivery_adder_per_week.value)} {currency}")
    if each:
        after = "order" if window is None else f"{as_stated(window.value)} weeks"
        yield f"Each week of delivery after {after} adds {' and '.join(each)} per unit. Earlier delivery earns nothing."
    for cost in lot.site_costs:
        where = [f"with {' or '.join(map(one_line, cost.liquids))}"] if cost.liquids else []
        where += [f"above {as_stated(cost.sound_above_db.value)} dB(A)"] if cost.sound_above_db is not None else []
        yield (
            f"Cost at the site, added for comparison to offers {' and '.join(where) or 'of every kind'}: "
            f"{one_line(cost.name.value)}, {as_stated(cost.amount_per_unit.value)} {currency} per unit."
        )


def _inputs(content: Mapping[str, Any], currency: str) -> Iterator[tuple[str, str]]:
    """Every input of a derivation, none left out: labels and values from what the fingerprint covers."""
    for key, value in content.items():
        name, unit = key, ""
        for ending, meaning in _UNITS:
            if key.endswith(ending):
                name, unit = key.removesuffix(ending), meaning.format(currency=currency)
                break
        yield name.replace("_", " ") + (f" [{unit}]" if unit else ""), one_line(_value_text(value))


def _value_text(value: Any) -> str:
    if isinstance(value, Mapping):
        return ", ".join(f"{str(key).replace('_', ' ')} {_value_text(each)}" for key, each in value.items())
    if isinstance(value, list):
        return "; ".join(_value_text(each) for each in value)
    if isinstance(value, bool):
        return "yes" if value else "no"
    return str(value)
