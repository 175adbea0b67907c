"""Offers as read from bidders' files: price and guaranteed values, each with its place."""

from __future__ import annotations

from pydantic import Field

from ..findings import Place
from .commercial import OfferTerms
from .quantity import Entry, Quantity, Record

__all__ = ["NATURAL_COOLING", "Offer", "is_naturally_cooled"]

#: Cooling codes of IEC 60076-2 and IEEE C57.12.00 in which neither fans nor pumps run (from memory).
NATURAL_COOLING = frozenset({"ONAN", "KNAN", "LNAN", "AN", "ANAN", "GNAN"})


def is_naturally_cooled(cooling: str) -> bool:
    """Whether no stage of a cooling designation needs fans or pumps.

    Parameters
    ----------
    cooling : str
        Designation, stages divided by a slash: ``"ONAN/ONAF"``.

    Returns
    -------
    bool
        True if every stage cools by natural circulation.

    Notes
    -----
    Letters after IEC 60076-2 (from memory): the second and fourth letter say how the inner and the outer medium
    move, N for naturally.
    """
    stages = [stage.strip().upper() for stage in cooling.split("/")]
    return bool(stages) and all(stage in NATURAL_COOLING for stage in stages)


class Offer(Record):
    """One bidder's offer for one lot, as read.

    Parameters
    ----------
    bidder, lot : Entry
        Who offers, and for which lot of the tender.
    currency : Entry or None
        Currency code of the price.
    unit_price : Quantity or None
        Price of one unit. [currency of the offer]
    no_load_loss_kw, load_loss_kw, auxiliary_loss_kw : Quantity or None
        Guaranteed losses of one unit; None where the bidder stated none or none that can be read. [kW]
    total_loss_kw : Quantity or None
        Total loss as the bidder states it, kept beside the parts. [kW]
    impedance_percent : Quantity or None
        Short-circuit impedance. [percent]
    delivery_weeks : Quantity or None
        Time of delivery. [week]
    load_loss_rating_kva : Quantity or None
        Rating at which the bidder states the load loss. [kVA]
    reference_temperature_c : Quantity or None
        Reference temperature of the stated load loss. [deg C]
    resistive_loss_kw, stray_loss_kw : Quantity or None
        The two parts of the load loss at the stated temperature, where the bidder splits it. [kW]
    cooling_power_no_load_kw, cooling_power_rated_kw : Quantity or None
        Cooling power at no load (Pc0) and at rated load (Pcs), where cooling is valued through A and B. [kW]
    quantity : Quantity or None
        Number of units offered, where the bidder states one.
    cooling : Entry or None
        Cooling designation, where the bidder states one; else the lot's holds.
    remark : Entry or None
        The bidder's own words.
    alternative : Entry or None
        Name of the alternative, where the row is one; the base offer has none.
    terms : OfferTerms
        Commercial terms.
    place : Place
        The row.
    columns : dict of str to Place
        Where each field of the row stands, also the empty ones.
    """

    bidder: Entry
    lot: Entry
    currency: Entry | None = None
    unit_price: Quantity | None = None
    no_load_loss_kw: Quantity | None = None
    load_loss_kw: Quantity | None = None
    auxiliary_loss_kw: Quantity | None = None
    total_loss_kw: Quantity | None = None
    impedance_percent: Quantity | None = None
    delivery_weeks: Quantity | None = None
    load_loss_rating_kva: Quantity | None = None
    reference_temperature_c: Quantity | None = None
    resistive_loss_kw: Quantity | None = None
    stray_loss_kw: Quantity | None = None
    cooling_power_no_load_kw: Quantity | None = None
    cooling_power_rated_kw: Quantity | None = None
    quantity: Quantity | None = None
    cooling: Entry | None = None
    remark: Entry | None = None
    alternative: Entry | None = None
    terms: OfferTerms = Field(default_factory=OfferTerms)
    place: Place
    columns: dict[str, Place]

    @property
    def name(self) -> str:
        """Bidder, and the alternative where the offer is one."""
        return self.bidder.value if self.alternative is None else f"{self.bidder}, alternative {self.alternative}"
