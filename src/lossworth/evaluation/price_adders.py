"""What the tender adds to a price for comparison: delivered point, delivery time, site costs, preference margin."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass, field
from typing import get_args

from ..findings import Finding, Place
from ..records.bid import Offer
from ..records.commercial import DeliveryLevel, Incoterm, SiteCost
from ..records.quantity import Quantity
from ..records.tender import Lot, Tender
from ..trail import Figure, difference, product, read
from .announced import rule_sentence
from .identities import figure_id, is_one_of, offer_id
from .shares import share

__all__ = [
    "Adder",
    "Adders",
    "check_delivered_point",
    "delivered_adders",
    "delivery_time_adders",
    "margin_share",
    "point_term",
    "site_costs",
]


@dataclass(frozen=True, slots=True)
class Adder:
    """One amount that is added to the price of a unit.

    Parameters
    ----------
    name, label : str
        As in `PriceStep`.
    amount : Figure
        [evaluation currency]
    rule : str
        Why, with the place of the announced adder.
    """

    name: str
    label: str
    amount: Figure
    rule: str


@dataclass(frozen=True, slots=True)
class Adders:
    """Adders of one kind, and what keeps them from being known."""

    amounts: tuple[Adder, ...] = ()
    findings: tuple[Finding, ...] = field(default=())


def point_term(tender: Tender) -> str | None:
    """Delivery term of the tender's delivered point.

    Parameters
    ----------
    tender : Tender
        With its delivered point, ``"DDP site"``, or without.

    Returns
    -------
    str or None
        ``"DDP"``; None where the point names no term.
    """
    words = "" if tender.delivered_point is None else tender.delivered_point.value.upper()
    return next((word for word in re.split(r"[^A-Z]+", words) if word in get_args(Incoterm)), None)


def check_delivered_point(tender: Tender) -> Iterator[Finding]:
    """A delivered point to which adders lead names the term that they lead to.

    Parameters
    ----------
    tender : Tender
        With its delivered point and its adders.

    Yields
    ------
    Finding
        ``"tender-value"`` where the point names none.
    """
    point = tender.delivered_point
    if point is not None and tender.delivery_levels and point_term(tender) is None:
        terms = ", ".join(get_args(Incoterm))
        rule = f"must name the delivery term to which the adders lead ({terms})"
        fix = 'Name the term beside the place: "DDP site".'
        yield Finding("tender-value", "delivery.point", rule, point.place, point.value, fix=fix)


def delivered_adders(offer: Offer, tender: Tender, price: Figure) -> Adders:
    """Adders from the bidder's delivery term to the tender's delivered point.

    Parameters
    ----------
    offer : Offer
        With its delivery term, or without: then its price is taken to hold at the delivered point.
    tender : Tender
        With its delivered point and its adders.
    price : Figure
        Price of a unit after discounts, on the tender's tax basis. [evaluation currency]

    Returns
    -------
    Adders
        Per unit; a finding where the tender has no adder for the term.
    """
    stated = offer.terms.delivery_term
    announced = tender.delivered_point is not None or tender.delivery_levels
    if stated is None or not announced:
        return Adders()
    term = stated.value.upper()
    level = next((level for level in tender.delivery_levels if level.term == term), None)
    if level is not None:
        return Adders(tuple(_level(offer, level, price)))
    if term == point_term(tender):
        return Adders()
    known = ", ".join(level.term for level in tender.delivery_levels) or "none"
    rule = f"must be the tender's delivered point or a term with an announced adder ({known})"
    who = (offer.bidder.value, offer.lot.value)
    finding = Finding("delivery-term-without-adder", "delivery term", rule, stated.place, stated.value, *who)
    return Adders(findings=(finding,))


def _level(offer: Offer, level: DeliveryLevel, price: Figure) -> Iterator[Adder]:
    identity, rule = figure_id("delivery", level.term), f"Announced adder for {level.term} ({level.place})."
    label = f"from {level.term} to the delivered point"
    if level.percent_of_price is not None:
        part = share(f"{identity}/percent", f"{label}, percent of the price", level.percent_of_price)
        amount = product(offer_id(offer, "delivered point, share"), f"{label}, share", price.unit, price, part)
        yield Adder("delivered point", f"{label}, {level.percent_of_price.text} % of the price", amount, rule)
    if level.amount_per_unit is not None:
        stated = level.amount_per_unit
        fixed = read(f"{identity}/amount", f"{label}, per unit", stated.value, price.unit, stated.place)
        yield Adder("delivered point", f"{label}, per unit", fixed, rule)


def delivery_time_adders(offer: Offer, lot: Lot, price: Figure) -> Adders:
    """Adders for delivery after the time that is free of them; earlier delivery gets no credit.

    Parameters
    ----------
    offer : Offer
        With its delivery time.
    lot : Lot
        With its window and adders.
    price : Figure
        Price of a unit at the delivered point. [evaluation currency]

    Returns
    -------
    Adders
        Per unit; a finding where the offer states no delivery time. Parts of a week count in proportion.
    """
    percent, fixed, free = (
        lot.delivery_adder_percent_per_week,
        lot.delivery_adder_per_week,
        lot.delivery_without_adder_weeks,
    )
    if free is None or (percent is None and fixed is None):
        return Adders()
    stated = offer.delivery_weeks
    if stated is None:
        return Adders(findings=(_needed(offer, "delivery_weeks", "delivery", free.place),))
    if stated.value <= free.value:
        return Adders()
    given = read(offer_id(offer, "delivery_weeks"), "delivery", stated.value, "weeks", stated.place)
    window = read(figure_id(f"lot {lot.id}", "delivery window"), "delivery without adder", free.value, "weeks",
                  free.place)  # fmt: skip
    late = difference(offer_id(offer, "weeks with adder"), "weeks with an adder", "weeks", given, window)
    return Adders(tuple(_per_week(offer, lot, (percent, fixed), late, price)))


def _per_week(
    offer: Offer, lot: Lot, rates: tuple[Quantity | None, Quantity | None], late: Figure, price: Figure
) -> Iterator[Adder]:
    percent, fixed = rates
    weeks = f"{late.value.normalize():f} weeks after the time without adder"
    if percent is not None:
        label = "adder per week, percent of the price"
        rate = share(figure_id(f"lot {lot.id}", "delivery adder, percent"), label, percent, "%/week")
        name = offer_id(offer, "delivery time, share")
        amount = product(name, "adder for delivery, share", price.unit, late, rate, price)
        yield Adder("delivery time", f"{weeks}, {percent.text} % a week", amount, f"Announced ({percent.place}).")
    if fixed is not None:
        identity = figure_id(f"lot {lot.id}", "delivery adder, amount")
        rate = read(identity, "adder per week", fixed.value, f"{price.unit}/week", fixed.place)
        name = offer_id(offer, "delivery time, amount")
        amount = product(name, "adder for delivery, amount", price.unit, late, rate)
        yield Adder("delivery time", weeks, amount, f"Announced ({fixed.place}).")


def site_costs(offer: Offer, lot: Lot, currency: str) -> Adders:
    """Costs at the site that the offer causes.

    Parameters
    ----------
    offer : Offer
        With its insulating liquid and its sound level.
    lot : Lot
        With the costs and the conditions under which they arise.
    currency : str
        Evaluation currency.

    Returns
    -------
    Adders
        Per unit; findings where a condition hangs on a value that the offer does not state.
    """
    amounts: list[Adder] = []
    findings: list[Finding] = []
    for number, cost in enumerate(lot.site_costs, start=1):
        unknown = tuple(_unknown(offer, cost))
        findings += unknown
        if not unknown and _arises(offer, cost):
            stated, name = cost.amount_per_unit, cost.name.value
            figure = read(figure_id(f"lot {lot.id}", "site cost", str(number)), f"{name}, per unit", stated.value,
                          currency, stated.place)  # fmt: skip
            amounts.append(Adder("site cost", name, figure, f"Announced ({cost.place})."))
    return Adders(tuple(amounts), tuple(dict.fromkeys(findings)))


def _unknown(offer: Offer, cost: SiteCost) -> Iterator[Finding]:
    if cost.liquids and offer.terms.insulating_liquid is None:
        yield _needed(offer, "insulating_liquid", "insulating liquid", cost.place)
    if cost.sound_above_db is not None and offer.terms.sound_level_db is None:
        yield _needed(offer, "sound_level_db", "sound level", cost.place)


def _arises(offer: Offer, cost: SiteCost) -> bool:
    liquid, sound = offer.terms.insulating_liquid, offer.terms.sound_level_db
    if cost.liquids and (liquid is None or not is_one_of(liquid.value, cost.liquids)):
        return False
    return cost.sound_above_db is None or (sound is not None and sound.value > cost.sound_above_db.value)


def margin_share(offer: Offer, tender: Tender) -> tuple[Figure, str] | None:
    """Preference margin on the prices of an offer outside the group.

    Parameters
    ----------
    offer : Offer
        With its origin; one that states none lies outside.
    tender : Tender
        With its rule and its margin.

    Returns
    -------
    tuple of Figure and str, or None
        Share of the price and the rule in a sentence; None where the rule adds no margin to this offer. [1]
    """
    preference = tender.preference
    if tender.rules.announced.preference != "margin added to other prices" or preference is None:
        return None
    origin = offer.terms.origin
    if origin is not None and is_one_of(origin.value, (preference.group.value,)):
        return None
    part = share(figure_id("preference", "margin"), "preference margin", preference.margin_percent)
    return part, rule_sentence(tender, "preference")


def _needed(offer: Offer, column: str, label: str, why: Place) -> Finding:
    place = offer.columns.get(column, offer.place)
    rule = f"must be stated, an adder of the tender hangs on it ({why})"
    return Finding("value-missing", label, rule, place, "", offer.bidder.value, offer.lot.value)
