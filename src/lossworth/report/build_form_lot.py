"""Columns of the price schedule, and what each asks of each lot."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass
from decimal import Decimal
from functools import partial

from ..errors import EvaluationStopped
from ..evaluation.load_and_price import check_load_and_price
from ..evaluation.lot_rates import lot_rates
from ..findings import one_line
from ..money import ARITHMETIC
from ..records.bid import is_naturally_cooled
from ..records.bid_columns import HEADING_OF, ITEM_HEADING, heading_text
from ..records.quantity import Quantity
from ..records.rules import AnnouncedRules
from ..records.tender import CoolingValuation, Lot, Tender
from ..units import LOSS_UNITS
from .bid_form_view import Answer, FormCell, FormColumn, FormLot
from .figure_text import value_text
from .formats import as_stated, plain
from .wording import limits

__all__ = ["form_columns", "form_lots"]

_PRICE, _LOSSES, _VALUES, _WORDS = "Prices", "Guaranteed losses", "Further guaranteed values", "In the bidder's words"
_MONEY, _TEXT, _GENERAL = "#,##0.00##", "@", "General"
_NUMBER = Answer("number")
_PERCENT = Answer("number", above_zero=False, at_most=Decimal(100))
_YES_NO = Answer("choice", choices=("yes", "no"))


@dataclass(frozen=True, slots=True)
class _Question:
    """A column before it is known whether any lot needs it."""

    field: str
    group: str
    width: float
    numbers: str
    cell: Callable[[Lot], FormCell | None]
    unit: str | None = None
    heading: str = ""


def form_columns(tender: Tender, rules: AnnouncedRules) -> tuple[FormColumn, ...]:
    """Columns of the price schedule: those that at least one lot is asked.

    Parameters
    ----------
    tender : Tender
        As announced.
    rules : AnnouncedRules
        Settled rules.

    Returns
    -------
    tuple of FormColumn
        In the order of the form.
    """
    asked = [each for each in _questions(tender, rules) if any(each.cell(lot) for lot in tender.lots)]
    return tuple(
        FormColumn(
            each.field, each.heading or heading_text(each.field, each.unit), each.group, each.width, each.numbers
        )
        for each in asked
    )


def form_lots(tender: Tender, rules: AnnouncedRules) -> tuple[FormLot, ...]:
    """Rows of the price schedule.

    Parameters
    ----------
    tender : Tender
        As announced.
    rules : AnnouncedRules
        Settled rules.

    Returns
    -------
    tuple of FormLot
        One a lot, in the order of the tender.

    Raises
    ------
    EvaluationStopped
        If loads and prices cannot be brought together, so that rates cannot be printed.
    """
    if findings := check_load_and_price(tender):
        raise EvaluationStopped(findings)
    questions = tuple(_questions(tender, rules))
    times = LOSS_UNITS[_loss_unit(tender)]
    lots = []
    for lot in tender.lots:
        cells = {each.field: cell for each in questions if (cell := each.cell(lot))}
        least = lot.minimum_peak_efficiency_index_percent
        lots.append(
            FormLot(
                id=lot.id,
                description=one_line(lot.description.value),
                rated_power=f"{as_stated(lot.rated_power_kva.stated)} {lot.rated_power_kva.unit}",
                cooling=one_line(lot.cooling.value),
                quantity=lot.quantity.value,
                valued=_valued(tender, lot),
                limits="; ".join(limits(lot)) or "none",
                cells=cells,
                least_efficiency_percent=None if least is None else least.value,
                power_in_loss_unit=ARITHMETIC.divide(lot.rated_power_kva.value, times),
            )
        )
    return tuple(lots)


def _valued(tender: Tender, lot: Lot) -> str:
    currency = tender.identity.currency.value
    rates = lot_rates(tender, lot)
    named = (("A", rates.no_load), ("B", rates.load), ("C", rates.auxiliary))
    values = [f"{name} = {value_text(figure, currency)}" for name, figure in named if figure is not None]
    return f"{', '.join(values)} {currency}/kW{'' if lot.derivation is None else ', as derived'}"


def _loss_unit(tender: Tender) -> str:
    """Unit in which the tender itself states its loss limits; kW where it states none or mixes them."""
    stated = {
        limit.unit for lot in tender.lots for limit in (lot.maximum_no_load_loss_kw, lot.maximum_load_loss_kw) if limit
    }
    return "W" if stated == {"W"} else "kW"


def _questions(tender: Tender, rules: AnnouncedRules) -> Iterator[_Question]:
    yield from _price_questions(tender, rules)
    yield from _loss_questions(tender)
    yield from _value_questions(tender)
    yield _Question("deviations", _WORDS, 26, _TEXT, lambda _: _optional(Answer(prompt="None, where left blank.")))
    yield _Question("remark", _WORDS, 22, _TEXT, lambda _: _optional(Answer()))


def _price_questions(tender: Tender, rules: AnnouncedRules) -> Iterator[_Question]:
    one_currency = tender.exchange is None or not tender.exchange.rates
    unit = tender.identity.currency.value if one_currency else ""
    price = Answer("number", prompt="Price of one unit, in the currency of the bid, before discounts.")
    total = Answer("number", prompt="Unit price times quantity, before discounts.")
    yield _Question("unit_price", _PRICE, 13, _MONEY, lambda _: _needed(price), unit)
    yield _Question("total_price", _PRICE, 16, _MONEY, lambda _: _needed(total), unit)
    if rules.unconditional_discounts != "ignore":
        discount = Answer("number", above_zero=False, at_most=Decimal(100), prompt="Deducted without condition.")
        yield _Question("unconditional_discount_percent", _PRICE, 12, "0.0##", lambda _: _optional(discount))
    for name in dict.fromkeys(item.name.value for lot in tender.lots for item in lot.items):
        field = ITEM_HEADING + name
        heading = f"{field[:1].upper()}{one_line(field[1:])}" + (f" [{unit}]" if unit else "")
        yield _Question(field, _PRICE, 15, _MONEY, partial(_item, name=name), heading=heading)


def _item(lot: Lot, *, name: str) -> FormCell | None:
    item = next((item for item in lot.items if item.name.value == name), None)
    if item is None:
        return None
    counts = "Part of the evaluated price." if item.counts else "No part of the evaluated price."
    prompt = f"Price of one piece; the lot needs {as_stated(item.quantity.value)}. {counts}"
    return FormCell(Answer("number", above_zero=False, prompt=prompt), needed=item.counts)


def _loss_questions(tender: Tender) -> Iterator[_Question]:
    unit = _loss_unit(tender)
    numbers = "0.000##" if unit == "kW" else _GENERAL

    def loss(field: str, cell: Callable[[Lot], FormCell | None], width: float = 11) -> _Question:
        return _Question(field, _LOSSES, width, numbers, cell, unit)

    def maximum(limit: Quantity | None, what: str) -> Answer:
        if limit is None:
            return Answer("number", prompt=f"Guaranteed {what} of one unit.")
        most = ARITHMETIC.divide(limit.value, LOSS_UNITS[unit])
        prompt = f"Guaranteed {what} of one unit. The tender allows at most {plain(most)} {unit}."
        return Answer("number", at_most=most, is_limit=True, prompt=prompt)

    yield loss("no_load_loss_kw", lambda lot: _needed(maximum(lot.maximum_no_load_loss_kw, "no-load loss")))
    yield loss("load_loss_kw", lambda lot: _needed(maximum(lot.maximum_load_loss_kw, "load loss, without the no-load")))
    yield loss("auxiliary_loss_kw", lambda lot: _auxiliary(tender, lot))
    both = Answer("number", prompt="No-load loss and load loss together.")
    yield loss("total_loss_kw", lambda _: _needed(both))
    yield _Question(
        "load_loss_rating_kva", _LOSSES, 12, _GENERAL, lambda lot: _needed(_NUMBER) if lot.loss_basis else None
    )
    yield _Question("reference_temperature_c", _LOSSES, 13, _GENERAL, _temperature)
    for field in ("resistive_loss_kw", "stray_loss_kw"):
        yield loss(field, _split)
    for field in ("cooling_power_no_load_kw", "cooling_power_rated_kw"):
        yield loss(field, _cooling_power, 14)


def _auxiliary(tender: Tender, lot: Lot) -> FormCell:
    """Asked of every lot, as a bidder may offer fans where none are asked; needed where fans run and are valued."""
    valued = False
    if lot.rates is not None:
        valued = lot.rates.auxiliary is not None
    elif lot.derivation is not None:
        loading = tender.loading[lot.derivation.loading.value]
        valued = loading.cooling_hours is not None or bool(loading.cooling_stages)
    needed = valued and lot.cooling_valuation is CoolingValuation.RATE_C and not is_naturally_cooled(lot.cooling.value)
    answer = Answer("number", above_zero=False, prompt="Fans and pumps; zero or blank for units without them.")
    return FormCell(answer, needed)


def _temperature(lot: Lot) -> FormCell | None:
    if lot.loss_basis is None or lot.loss_basis.reference_temperature_c is None:
        return None
    return _needed(_NUMBER)


def _split(lot: Lot) -> FormCell | None:
    if lot.loss_basis is None or "temperature" not in lot.loss_basis.convert:
        return None
    return _optional(Answer("number", above_zero=False, prompt="Part of the load loss, at the stated temperature."))


def _cooling_power(lot: Lot) -> FormCell | None:
    if lot.cooling_valuation is not CoolingValuation.THROUGH_A_AND_B:
        return None
    return FormCell(Answer("number", above_zero=False), needed=not is_naturally_cooled(lot.cooling.value))


def _value_questions(tender: Tender) -> Iterator[_Question]:
    def value(field: str, width: float, cell: Callable[[Lot], FormCell | None], numbers: str = _GENERAL) -> _Question:
        return _Question(field, _VALUES, width, numbers, cell, HEADING_OF[field].unit)

    yield value("impedance_percent", 11, _impedance, "0.0##")
    yield value("delivery_weeks", 10, _delivery)
    yield value("cooling", 13, lambda _: _optional(Answer(prompt="Where it is another than the tender's.")), _TEXT)
    yield value("insulating_liquid", 15, _liquid, _TEXT)
    yield value("pcb_free", 8, lambda lot: _needed(_YES_NO) if lot.pcb_free_required else None, _TEXT)
    yield value("sound_level_db", 10, _sound)
    yield value("declared_efficiency_percent", 11, _efficiency, "0.00##")
    if tender.preference is not None:
        group = one_line(tender.preference.group.value)
        origin = Answer(prompt=f"Where the units are made; write {group} where they belong to that group.")
        yield value("origin", 12, lambda _: _needed(origin), _TEXT)


def _impedance(lot: Lot) -> FormCell:
    specified, tolerance = lot.impedance_percent, lot.impedance_tolerance_percentage_points
    if specified is None or tolerance is None:
        return _optional(Answer("number", at_most=Decimal(100)))
    least, most = specified.value - tolerance.value, specified.value + tolerance.value
    prompt = f"On the rated power of the lot. The tender asks for {plain(least)} to {plain(most)} %."
    return _needed(Answer("number", at_least=least, at_most=most, is_limit=True, prompt=prompt))


def _delivery(lot: Lot) -> FormCell:
    prompt = "Weeks after the order."
    if lot.latest_delivery_weeks is None:
        return FormCell(Answer("number", prompt=prompt), needed=lot.delivery_without_adder_weeks is not None)
    latest = lot.latest_delivery_weeks.value
    prompt += f" The tender allows at most {plain(latest)}."
    return _needed(Answer("number", at_most=latest, is_limit=True, prompt=prompt))


def _liquid(lot: Lot) -> FormCell | None:
    if lot.accepted_liquids:
        return _needed(Answer("choice", choices=tuple(map(one_line, lot.accepted_liquids))))
    if any(cost.liquids for cost in lot.site_costs):
        return _needed(Answer(prompt="Designation, as mineral oil."))
    return None


def _sound(lot: Lot) -> FormCell | None:
    limit = lot.maximum_sound_level_db
    if limit is not None:
        prompt = f"The tender allows at most {plain(limit.value)} dB(A)."
        return _needed(Answer("number", at_most=limit.value, is_limit=True, prompt=prompt))
    return _needed(_NUMBER) if any(cost.sound_above_db is not None for cost in lot.site_costs) else None


def _efficiency(lot: Lot) -> FormCell | None:
    """Asked where the regulation limits a declared efficiency and not the losses."""
    return _needed(_PERCENT) if lot.regulation is not None and lot.regulation.regulation.startswith("US") else None


def _needed(answer: Answer) -> FormCell:
    return FormCell(answer, needed=True)


def _optional(answer: Answer) -> FormCell:
    return FormCell(answer, needed=False)
