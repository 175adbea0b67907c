"""Commercial terms: what the tender announces to level them, and what a bidder states."""

from __future__ import annotations

import datetime
from typing import Annotated, Literal

from pydantic import AfterValidator, Field
from pydantic_core import PydanticCustomError

from ..findings import Place
from .quantity import AtLeast0, Entry, Quantity, Record, ShareOf1

__all__ = [
    "DeliveryLevel",
    "Incoterm",
    "Item",
    "OfferTerms",
    "Payment",
    "PaymentTerms",
    "Preference",
    "RegulationLimit",
    "SiteCost",
    "Taxes",
]

#: Rules of Incoterms 2020 (International Chamber of Commerce), from the seller's works to the buyer's site.
Incoterm = Literal["EXW", "FCA", "FAS", "FOB", "CFR", "CIF", "CPT", "CIP", "DAP", "DPU", "DDP"]


def _percent(quantity: Quantity) -> Quantity:
    if not 0 <= quantity.value <= 100:
        raise PydanticCustomError("bound", "{rule}", {"rule": "must lie between 0 and 100 percent"})
    return quantity


Percent = Annotated[Quantity, AfterValidator(_percent)]


class DeliveryLevel(Record):
    """What brings a price under one Incoterm to the tender's delivered point; both adders are per unit.

    Parameters
    ----------
    term : str
        The bidder's Incoterm.
    percent_of_price : Quantity or None
        Share of the price after discounts. [percent]
    amount_per_unit : Quantity or None
        Amount in the evaluation currency. [currency]
    """

    term: Incoterm
    percent_of_price: Percent | None = None
    amount_per_unit: AtLeast0 | None = None
    place: Place


class Taxes(Record):
    """Tax that is taken out of, or added to, prices to bring all to the tender's rule."""

    rate_percent: Percent
    place: Place


class Payment(Record):
    """One payment: share of the price and when it is due. [1, week after order]"""

    share: ShareOf1
    weeks_after_order: AtLeast0


class PaymentTerms(Record):
    """Interest rate and the tender's own payments, to which differing ones are compared.

    Parameters
    ----------
    interest_rate_percent : Quantity
        Per year. [percent/year]
    payments : tuple of Payment
        The tender's own schedule; shares make 1.
    """

    interest_rate_percent: AtLeast0
    payments: tuple[Payment, ...]
    place: Place


class Preference(Record):
    """Margin added to the prices of offers outside a group, for comparison only; never to losses."""

    group: Entry
    margin_percent: Percent
    place: Place


class SiteCost(Record):
    """Cost at the site that an offer causes: foundation, bund, fire-rated vault, sound barrier.

    Parameters
    ----------
    name : Entry
        What is built.
    amount_per_unit : Quantity
        In the evaluation currency. [currency]
    liquids : tuple of str
        Insulating liquids for which it is needed; empty for all.
    sound_above_db : Quantity or None
        Guaranteed sound level above which it is needed. [dB]
    """

    name: Entry
    amount_per_unit: AtLeast0
    liquids: tuple[str, ...] = ()
    sound_above_db: AtLeast0 | None = None
    place: Place


class Item(Record):
    """A further item of a lot that bidders price apart: spares, supervision, a special test.

    Parameters
    ----------
    name : Entry
        As in the price schedule.
    quantity : Quantity
        Pieces for the whole lot.
    counts : bool
        Whether the item is part of the evaluated price.
    """

    name: Entry
    quantity: AtLeast0
    counts: bool
    place: Place


class RegulationLimit(Record):
    """A regulation whose limits hold for a lot, by the keys of its tables.

    Parameters
    ----------
    regulation : str
        ``"EU 548/2014"`` or ``"US 10 CFR 431"``.
    equipment : Entry
        Row of the regulation: ``"liquid medium"``, ``"dry medium"``, ``"pole-mounted replacement"``, ``"large
        liquid"``, ``"large dry"``; or the equipment of the US tables.
    tier : int or None
        Tier of the EU regulation.
    date : datetime.date or None
        Day of placing on the market, or of manufacture, that picks the edition.
    primary_voltage_kv, secondary_voltage_kv : Quantity or None
        Highest voltage for equipment of the windings. [kV]
    on_load_tap_changer : bool
        Whether the allowance for tappings under load applies.
    phases : int or None
        For the US tables.
    """

    regulation: Literal["EU 548/2014", "US 10 CFR 431"]
    equipment: Entry
    tier: Literal[1, 2] | None = None
    date: datetime.date | None = None
    primary_voltage_kv: AtLeast0 | None = None
    secondary_voltage_kv: AtLeast0 | None = None
    on_load_tap_changer: bool = False
    phases: Literal[1, 3] | None = None
    place: Place


class OfferTerms(Record):
    """Commercial terms of one offer as the bidder states them; None where it states none.

    Parameters
    ----------
    total_price : Quantity or None
        Total of the lot as stated, for the arithmetic check. [currency of the offer]
    delivery_term : Entry or None
        Incoterm of the price.
    unconditional_discount_percent, prompt_payment_discount_percent : Quantity or None
        Discounts. [percent]
    tax_included : bool or None
        Whether the price includes tax.
    payments : tuple of Payment
        Payment schedule, where the bidder states its own.
    origin : Entry or None
        Group for a preference.
    price_basis : str or None
        ``"firm"`` or ``"variable"``.
    valid_until : datetime.date or None
        Last day on which the bid can be accepted.
    insulating_liquid : Entry or None
        Designation, ``"mineral oil"``.
    pcb_free : bool or None
        Declaration that the liquid is free of PCB.
    sound_level_db : Quantity or None
        Guaranteed sound level. [dB]
    claimed_tolerance_percent : Quantity or None
        Plus tolerance on losses that the bidder claims. [percent]
    declared_efficiency_percent : Quantity or None
        Efficiency that the bidder declares, for regulations that limit it. [percent]
    item_prices : dict of str to Quantity
        Price of one piece of each further item, by the item's name. [currency of the offer]
    deviations : Entry or None
        Deviations from the tender, in the bidder's words.
    """

    total_price: Quantity | None = None
    delivery_term: Entry | None = None
    unconditional_discount_percent: Percent | None = None
    prompt_payment_discount_percent: Percent | None = None
    tax_included: bool | None = None
    payments: tuple[Payment, ...] = ()
    origin: Entry | None = None
    price_basis: Literal["firm", "variable"] | None = None
    valid_until: datetime.date | None = None
    insulating_liquid: Entry | None = None
    pcb_free: bool | None = None
    sound_level_db: Quantity | None = None
    claimed_tolerance_percent: Percent | None = None
    declared_efficiency_percent: Percent | None = None
    item_prices: dict[str, Quantity] = Field(default_factory=dict)
    deviations: Entry | None = None
