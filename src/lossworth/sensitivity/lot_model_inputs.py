"""Inputs that move the costs of bids beside the rates: those of the tender that all share, and each bid's own."""

from __future__ import annotations

import math
from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass
from decimal import Decimal

import numpy as np
from numpy.typing import NDArray

from ..evaluation.identities import figure_id, offer_id
from ..evaluation.result import EvaluatedOffer, LotEvaluation
from ..records.quantity import Quantity
from ..records.tender import Lot, Tender
from ..trail import Figure
from .lot_model_trail import Trail

__all__ = ["OwnInput", "SharedInput", "own_inputs", "own_price", "shared_inputs"]

Array = NDArray[np.float64]
_UP_TO_DELIVERED = {
    "quoted",
    "corrected",
    "unconditional discount",
    "prompt payment discount",
    "currency",
    "tax",
    "delivered point",
}
_STRAIGHT = Decimal("1e-25")  # part of an amount: less than this is the rounding of 50 digits


@dataclass(frozen=True, slots=True, eq=False)
class SharedInput:
    """An input of the tender that moves the prices of several bids.

    Parameters
    ----------
    name : str
        ``"exchange_rate FCU"``: the kind and what it is about.
    kind, subject : str
        ``"exchange_rate"``, ``"delivered_point_percent"``, ``"delivered_point_amount"``,
        ``"delivery_adder_percent_per_week"``, ``"delivery_adder_per_week"``, ``"preference_margin_percent"``,
        ``"site_cost"``; and the currency, the delivery term or the cost.
    unit : str
        Unit of the value.
    now, lowest, highest : float
        Present and admissible values.
    figure : str
        Identity of the figure in the trail.
    slope : ndarray
        Change of the cost of one unit of each bid for one unit of the input. [currency/unit]
    """

    name: str
    kind: str
    subject: str
    unit: str
    now: float
    lowest: float
    highest: float
    figure: str
    slope: Array


@dataclass(frozen=True, slots=True, eq=False)
class OwnInput:
    """A value that each bid states for itself; a change of it moves the cost of that bid alone.

    Parameters
    ----------
    name : str
        ``"unit_price"``, ``"no_load_loss_kw"``, ``"load_loss_kw"``, ``"auxiliary_loss_kw"``,
        ``"loss_tolerance_percent"`` or ``"delivery_weeks"``.
    unit : tuple of str
        Unit of each bid's value.
    now, lowest, highest : ndarray
        Present and admissible values, one a bid; not a number where the bid states none.
    slope : ndarray
        Change of the bid's cost for one unit of the input. [currency/unit]
    above : ndarray
        Value above which the slope acts; minus infinity where it acts everywhere.
    whole : bool
        Whether only whole values are asked for.
    figure : tuple of str
        Identity of each bid's figure in its trail; empty where the input is none of its figures.
    limit : tuple of str
        What sets the greatest value, in a few words; empty where nothing does.
    """

    name: str
    unit: tuple[str, ...]
    now: Array
    lowest: Array
    highest: Array
    slope: Array
    above: Array
    whole: bool
    figure: tuple[str, ...]
    limit: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class _Announced:
    """An input as the tender announces it, before its slopes are known."""

    kind: str
    subject: str
    unit: str
    now: Decimal
    highest: float
    figure: str


def shared_inputs(
    tender: Tender, lot: Lot, slopes: Sequence[Mapping[str, Decimal]], trails: Sequence[Trail], quantity: Decimal
) -> tuple[dict[str, SharedInput], tuple[str, ...]]:
    """Inputs of the tender that move prices.

    Parameters
    ----------
    tender : Tender
        With exchange rates and announced adders.
    lot : Lot
        The lot.
    slopes : sequence of mapping of str to Decimal
        Derivatives of the cost of the lot, one mapping a bid.
    trails : sequence of Trail
        The same arithmetic, to be run again.
    quantity : Decimal
        Units of the lot.

    Returns
    -------
    inputs : dict of str to SharedInput
        By name.
    not_examined : tuple of str
        Inputs on which a cost does not depend linearly.
    """
    found, left_out = {}, []
    for known in _announced(tender, lot):
        name = f"{known.kind} {known.subject}".strip()
        if any(_is_bent(trail, slope, known) for trail, slope in zip(trails, slopes, strict=True)):
            left_out.append(name)
            continue
        slope = np.array([float(mapping.get(known.figure, Decimal(0)) / quantity) for mapping in slopes])
        now, highest = float(known.now), max(known.highest, float(known.now))
        about = (known.kind, known.subject, known.unit)
        found[name] = SharedInput(name, *about, now, 0.0, highest, known.figure, slope)
    return found, tuple(left_out)


def _announced(tender: Tender, lot: Lot) -> Iterator[_Announced]:
    home = tender.identity.currency.value
    for code, rate in {} if tender.exchange is None else tender.exchange.rates.items():
        unit = f"{home}/{code}"
        yield _Announced("exchange_rate", code, unit, rate.value, math.inf, figure_id("exchange", code))
    for level in tender.delivery_levels:
        identity = figure_id("delivery", level.term)
        yield from _stated("delivered_point_percent", level.term, "%", level.percent_of_price, f"{identity}/percent")
        yield from _stated("delivered_point_amount", level.term, home, level.amount_per_unit, f"{identity}/amount")
    of_lot = f"lot {lot.id}"
    percent, amount = lot.delivery_adder_percent_per_week, lot.delivery_adder_per_week
    of_time = figure_id(of_lot, "delivery adder, percent"), figure_id(of_lot, "delivery adder, amount")
    yield from _stated("delivery_adder_percent_per_week", "", "%/week", percent, of_time[0])
    yield from _stated("delivery_adder_per_week", "", f"{home}/week", amount, of_time[1])
    for number, cost in enumerate(lot.site_costs, start=1):
        identity = figure_id(of_lot, "site cost", str(number))
        yield from _stated("site_cost", cost.name.value, home, cost.amount_per_unit, identity)
    if tender.preference is not None:
        margin = tender.preference.margin_percent
        yield from _stated("preference_margin_percent", "", "%", margin, figure_id("preference", "margin"))
    if tender.taxes is not None:
        yield from _stated("tax_rate_percent", "", "%", tender.taxes.rate_percent, figure_id("taxes", "rate"))
    if tender.payment_terms is not None:
        interest = tender.payment_terms.interest_rate_percent
        yield from _stated("payment_interest_percent", "", "%/year", interest, figure_id("payment terms", "rate"))


def _stated(kind: str, subject: str, unit: str, quantity: Quantity | None, figure: str) -> Iterable[_Announced]:
    highest = 100.0 if unit.startswith("%") else math.inf
    return () if quantity is None else (_Announced(kind, subject, unit, quantity.value, highest, figure),)


def _is_bent(trail: Trail, slope: Mapping[str, Decimal], known: _Announced) -> bool:
    """Whether an amount leaves the straight line through its value and slope at the present point."""
    if not slope.get(known.figure):
        return False
    far = 2 * known.now + 1
    there = trail.value({known.figure: far})
    expected = trail.value() + slope[known.figure] * (far - known.now)
    return bool(abs(there - expected) > _STRAIGHT * abs(expected))


def own_inputs(
    offers: Sequence[EvaluatedOffer], lot: LotEvaluation, slopes: Sequence[Mapping[str, Decimal]], cost_of_losses: Array
) -> dict[str, OwnInput]:
    """What each bid states for itself.

    Parameters
    ----------
    offers : sequence of EvaluatedOffer
        The ranked offers.
    lot : LotEvaluation
        Their lot.
    slopes : sequence of mapping of str to Decimal
        Derivatives of the cost of the lot, one mapping a bid.
    cost_of_losses : ndarray
        Capitalized losses of one unit of each bid. [currency]

    Returns
    -------
    dict of str to OwnInput
        By name; only what moves a cost.
    """
    price = [_price(offer) for offer in offers]
    columns = {
        "unit_price": price,
        "no_load_loss_kw": [_loss(offer, "no_load", lot.lot) for offer in offers],
        "load_loss_kw": [_loss(offer, "load", lot.lot) for offer in offers],
        "auxiliary_loss_kw": [_auxiliary(offer) for offer in offers],
    }
    found = {}
    for name, rows in columns.items():
        slope = [float(of[row.figure] / lot.quantity.value) if row.figure in of else 0.0
                 for row, of in zip(rows, slopes, strict=True)]  # fmt: skip
        if any(slope):
            found[name] = _own(name, rows, np.array(slope))
    found["loss_tolerance_percent"] = _tolerance(offers, slopes, cost_of_losses)
    weeks = _weeks(offers, lot.lot)
    return found if weeks is None else found | {"delivery_weeks": weeks}


@dataclass(frozen=True, slots=True)
class _Row:
    """One bid's value with its bounds."""

    figure: str
    unit: str
    now: float
    highest: float = math.inf
    limit: str = ""
    above: float = -math.inf


def _own(name: str, rows: Sequence[_Row], slope: Array, *, whole: bool = False) -> OwnInput:
    now = np.array([row.now for row in rows])
    highest = np.fmax(np.array([row.highest for row in rows]), now)
    return OwnInput(
        name=name,
        unit=tuple(row.unit for row in rows),
        now=now,
        lowest=np.zeros(len(rows)),
        highest=highest,
        slope=slope,
        above=np.array([row.above for row in rows]),
        whole=whole,
        figure=tuple(row.figure for row in rows),
        limit=tuple(row.limit for row in rows),
    )


def own_price(offer: EvaluatedOffer) -> Figure:
    """Price of a unit that is still the bidder's own: as quoted, or as corrected by rule.

    Parameters
    ----------
    offer : EvaluatedOffer
        A ranked offer.

    Returns
    -------
    Figure
        In the currency of the offer.

    Raises
    ------
    ValueError
        If the offer has no price.
    """
    own = [step.price for step in offer.price_steps if step.name in ("quoted", "corrected")]
    figure = own[-1] if own else offer.per_unit.evaluated_price
    if figure is None:
        raise ValueError(f"{offer.name} is ranked without a price")
    return figure


def _price(offer: EvaluatedOffer) -> _Row:
    figure = own_price(offer)
    return _Row(figure.id, figure.unit, float(figure.value))


def _loss(offer: EvaluatedOffer, which: str, lot: Lot) -> _Row:
    basis = offer.on_basis
    figure, other = basis.no_load_loss, basis.load_loss
    limits = [(lot.maximum_no_load_loss_kw, "maximum no-load loss")]
    if which == "load":
        figure, other = other, figure
        limits = [(lot.maximum_load_loss_kw, "maximum load loss")]
    if figure is None or other is None:
        raise ValueError(f"{offer.name} is ranked without a loss")
    highest, limit = math.inf, ""
    for quantity, name in limits:
        if quantity is not None:
            highest, limit = float(quantity.value), name
    index = lot.minimum_peak_efficiency_index_percent
    if index is not None and other.value > 0:
        half = float((100 - index.value) / 200 * lot.rated_power_kva.value)
        by_index = half * half / float(other.value)
        if by_index < highest:
            highest, limit = by_index, "minimum peak efficiency index"
    return _Row(figure.id, "kW", float(figure.value), highest, limit)


def _auxiliary(offer: EvaluatedOffer) -> _Row:
    stated = offer.on_basis.offer.auxiliary_loss_kw
    return _Row(
        offer_id(offer.on_basis.offer, "auxiliary_loss_kw"), "kW", math.nan if stated is None else float(stated.value)
    )


def _tolerance(
    offers: Sequence[EvaluatedOffer], slopes: Sequence[Mapping[str, Decimal]], cost_of_losses: Array
) -> OwnInput:
    """A plus tolerance that one bidder alone uses in full, on every loss; one that is evaluated counts as used."""
    now = np.zeros(len(offers))
    for at, (offer, of) in enumerate(zip(offers, slopes, strict=True)):
        claimed = offer.on_basis.offer.terms.claimed_tolerance_percent
        if claimed is not None and offer_id(offer.on_basis.offer, "tolerance factor") in of:
            now[at] = float(claimed.value)
    return _own("loss_tolerance_percent", [_Row("", "%", value, 100.0) for value in now], cost_of_losses / (100 + now))


def _weeks(offers: Sequence[EvaluatedOffer], lot: Lot) -> OwnInput | None:
    """Weeks of delivery, where a later delivery costs by the tender's rule."""
    percent, fixed = lot.delivery_adder_percent_per_week, lot.delivery_adder_per_week
    free, latest = lot.delivery_without_adder_weeks, lot.latest_delivery_weeks
    if free is None or (percent is None and fixed is None):
        return None
    highest, limit = (math.inf, "") if latest is None else (float(latest.value), "latest delivery")
    rows, slope = [], []
    for offer in offers:
        stated = offer.on_basis.offer.delivery_weeks
        now = math.nan if stated is None else float(stated.value)
        rows.append(_Row("", "weeks", now, highest, limit, float(free.value)))
        share = 0.0 if percent is None else float(percent.value) / 100
        slope.append(share * _delivered(offer) + (0.0 if fixed is None else float(fixed.value)))
    return _own("delivery_weeks", rows, np.array(slope), whole=True)


def _delivered(offer: EvaluatedOffer) -> float:
    """Price of a unit at the delivered point: the base of an adder in percent a week."""
    prices = [step.price for step in offer.price_steps if step.name in _UP_TO_DELIVERED]
    return float(prices[-1].value) if prices else 0.0
