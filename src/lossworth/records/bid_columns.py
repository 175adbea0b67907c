"""Headings of the bid form, agreed between who writes forms and who reads bids."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from types import MappingProxyType

__all__ = ["BID_HEADINGS", "HEADING_OF", "ITEM_HEADING", "BidHeading", "heading_text", "payment_label"]

#: Before the name of a further item, in the heading of the column of its prices.
ITEM_HEADING = "item: "


@dataclass(frozen=True, slots=True)
class BidHeading:
    """One heading: of a column of the table of offers, or of a label that holds for the whole bid.

    Parameters
    ----------
    field : str
        Field of `records.bid.Offer` or of `records.commercial.OfferTerms`.
    name : str
        In the trade's words, without unit.
    unit : str
        Unit in brackets; ``"currency"`` where the currency code of the bid stands or nothing at all; empty for none.
    of_whole_bid : bool
        Whether the form asks it once, as a label with its value, and not in each row.
    """

    field: str
    name: str
    unit: str = ""
    of_whole_bid: bool = False


BID_HEADINGS: tuple[BidHeading, ...] = (
    BidHeading("bidder", "bidder", of_whole_bid=True),
    BidHeading("currency", "currency", of_whole_bid=True),
    BidHeading("delivery_term", "price terms", of_whole_bid=True),
    BidHeading("price_basis", "price basis", of_whole_bid=True),
    BidHeading("tax_included", "tax included", of_whole_bid=True),
    BidHeading("valid_until", "valid until", of_whole_bid=True),
    BidHeading("prompt_payment_discount_percent", "prompt payment discount", "%", of_whole_bid=True),
    BidHeading("claimed_tolerance_percent", "claimed tolerance", "%", of_whole_bid=True),
    BidHeading("lot", "lot"),
    BidHeading("alternative", "alternative"),
    BidHeading("unit_price", "unit price", "currency"),
    BidHeading("total_price", "total price", "currency"),
    BidHeading("unconditional_discount_percent", "discount", "%"),
    BidHeading("no_load_loss_kw", "no-load loss", "kW"),
    BidHeading("load_loss_kw", "load loss", "kW"),
    BidHeading("auxiliary_loss_kw", "auxiliary loss", "kW"),
    BidHeading("total_loss_kw", "total loss", "kW"),
    BidHeading("load_loss_rating_kva", "load loss rating", "kVA"),
    BidHeading("reference_temperature_c", "reference temperature", "°C"),
    BidHeading("resistive_loss_kw", "resistive loss", "kW"),
    BidHeading("stray_loss_kw", "stray loss", "kW"),
    BidHeading("cooling_power_no_load_kw", "cooling power at no load", "kW"),
    BidHeading("cooling_power_rated_kw", "cooling power at rated load", "kW"),
    BidHeading("impedance_percent", "impedance", "%"),
    BidHeading("delivery_weeks", "delivery", "weeks"),
    BidHeading("cooling", "cooling"),
    BidHeading("insulating_liquid", "insulating liquid"),
    BidHeading("pcb_free", "PCB free"),
    BidHeading("sound_level_db", "sound level", "dB(A)"),
    BidHeading("declared_efficiency_percent", "declared efficiency", "%"),
    BidHeading("origin", "origin"),
    BidHeading("deviations", "deviations"),
    BidHeading("remark", "remarks"),
)

HEADING_OF: Mapping[str, BidHeading] = MappingProxyType({heading.field: heading for heading in BID_HEADINGS})


def heading_text(field: str, unit: str | None = None) -> str:
    """Heading as the form prints it.

    Parameters
    ----------
    field : str
        One of the fields of the table.
    unit : str, optional
        In place of the unit of the table: ``"W"``, a currency code, or an empty text for none.

    Returns
    -------
    str
        ``"No-load loss [W]"``.

    Raises
    ------
    KeyError
        If the table does not have the field.

    Examples
    --------
    >>> heading_text("no_load_loss_kw", "W"), heading_text("unit_price", "NCU"), heading_text("lot")
    ('No-load loss [W]', 'Unit price [NCU]', 'Lot')
    """
    heading = HEADING_OF[field]
    shown = heading.unit if unit is None else unit
    text = heading.name[:1].upper() + heading.name[1:]
    return f"{text} [{shown}]" if shown else text


def payment_label(weeks_after_order: str | None) -> str:
    """Label of one payment of the bidder's own schedule.

    Parameters
    ----------
    weeks_after_order : str or None
        Number of weeks as printed; ``"0"`` for a payment with the order, None for one at delivery.

    Returns
    -------
    str
        ``"Payment at order [%]"``, ``"Payment 36 weeks after order [%]"``.
    """
    if weeks_after_order is None:
        return "Payment at delivery [%]"
    when = "at order" if weeks_after_order == "0" else f"{weeks_after_order} weeks after order"
    return f"Payment {when} [%]"
