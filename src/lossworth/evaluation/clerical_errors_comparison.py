"""What an offer is compared with: the other offers of its lot, bands of plausible losses, the lot's own figures.

Statistics over a few offers are medians of the others, used only where most of the others agree with them.
"""

from __future__ import annotations

import re
from bisect import bisect_left, bisect_right
from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from decimal import Decimal
from functools import cached_property

from ..money import ARITHMETIC
from ..records.bid import Offer
from ..records.quantity import Quantity
from ..records.tender import Lot, Tender
from ..regulations.eu_transformer import Insulation
from ..regulations.plausible_losses import Band, PlausibleLosses, plausible_losses
from .clerical_errors_suspicion import shown, value_of

__all__ = ["FEWEST_PRICES", "LotSeen", "Pack", "Peers", "Seen", "rated_stages"]

#: Prices are compared with the median of this many others, and more. Common practice, no source.
FEWEST_PRICES = 3
#: Others agree where most of them lie within this factor of their median. Common practice, no source.
_AGREEMENT = Decimal(2)
#: A figure fits the others within this factor of their median. Common practice, no source.
_FITS = Decimal("1.5")
#: A loss fits the lot's maximum between these shares of it. Common practice, no source.
_FITS_MAXIMUM = (Decimal("0.4"), Decimal("1.1"))
_COMPARED = ("no_load_loss_kw", "load_loss_kw", "auxiliary_loss_kw", "total_loss_kw", "impedance_percent")
_AT_RATING = ("load_loss_kw", "total_loss_kw", "impedance_percent")
_LIMITS = {"no_load_loss_kw": "maximum_no_load_loss_kw", "load_loss_kw": "maximum_load_loss_kw"}
_STAGES = re.compile(r"(\d+(?:\.\d+)?(?:\s*/\s*\d+(?:\.\d+)?)+)\s*(MVA|kVA)", re.IGNORECASE | re.ASCII)


@dataclass(frozen=True, slots=True)
class Peers:
    """Median of the other offers, and how many they are."""

    median: Decimal
    count: int

    def __str__(self) -> str:
        return f"the median of the {self.count} other offers"


class Pack:
    """One figure of all base offers of a lot, by bidder; the median of the others costs no second look at them.

    Parameters
    ----------
    values : mapping of str to Decimal
        By bidder; above zero.
    """

    def __init__(self, values: Mapping[str, Decimal]) -> None:
        self._of = dict(values)
        self._sorted = sorted(values.values())
        self._peers: dict[str, Peers | None] = {}

    def peers(self, bidder: str) -> Peers | None:
        """Median of all bidders but one.

        Parameters
        ----------
        bidder : str
            The one left out.

        Returns
        -------
        Peers or None
            None for fewer than two others, or where not even most of them lie within a factor of two of the median.
        """
        if bidder not in self._peers:
            self._peers[bidder] = self._median_without(bidder)
        return self._peers[bidder]

    def _median_without(self, bidder: str) -> Peers | None:
        own = self._of.get(bidder)
        count = len(self._sorted) - (own is not None)
        if count < 2:
            return None
        left_out = len(self._sorted) if own is None else bisect_left(self._sorted, own)
        lower, upper = (self._sorted[n + (n >= left_out)] for n in ((count - 1) // 2, count // 2))
        median = (lower + upper) / 2
        low, high = median / _AGREEMENT, median * _AGREEMENT
        near = bisect_right(self._sorted, high) - bisect_left(self._sorted, low)
        near -= own is not None and low <= own <= high
        return Peers(median, count) if 2 * near > count else None

    def only_other(self, bidder: str) -> Decimal | None:
        """Figure of the one other bidder.

        Parameters
        ----------
        bidder : str
            The one left out.

        Returns
        -------
        Decimal or None
            None where no other states one, or more than one.
        """
        others = [value for name, value in self._of.items() if name != bidder] if len(self._of) < 3 else []
        return others[0] if len(others) == 1 else None


class LotSeen:
    """What all offers of a lot are compared with.

    Parameters
    ----------
    tender : Tender
        For the currency and its exchange rates.
    lot : Lot
        The lot.
    offers : iterable of Offer
        Its offers; alternatives are compared, and nothing is compared with them.
    """

    def __init__(self, tender: Tender, lot: Lot, offers: Iterable[Offer]) -> None:
        self.tender, self.lot = tender, lot
        basis = lot.loss_basis.load_loss_rating_kva if lot.loss_basis else None
        #: Rating at which the tender wants load loss and impedance.
        self.rating: Quantity = basis or lot.rated_power_kva
        self._levels: dict[str, Decimal | None] = {}
        base = [offer for offer in offers if offer.alternative is None]
        self._packs = {field: Pack(self._values(field, base)) for field in _COMPARED}
        self._packs["unit_price"] = Pack(
            {offer.bidder.value: price for offer in base if (price := self.price(offer)) is not None}
        )

    def _values(self, field: str, offers: Iterable[Offer]) -> dict[str, Decimal]:
        found = {}
        for offer in offers:
            quantity, rating = value_of(offer, field), offer.load_loss_rating_kva
            same_basis = field not in _AT_RATING or rating is None or rating.value == self.rating.value
            if quantity is not None and quantity.value > 0 and same_basis:
                found[offer.bidder.value] = quantity.value
        return found

    def price(self, offer: Offer) -> Decimal | None:
        """Unit price as quoted, in the evaluation currency, before any adjustment.

        Parameters
        ----------
        offer : Offer
            One offer.

        Returns
        -------
        Decimal or None
            None where price, currency or exchange rate is missing. [currency]
        """
        if offer.unit_price is None or offer.currency is None or offer.unit_price.value <= 0:
            return None
        if offer.currency.value == self.tender.identity.currency.value:
            return offer.unit_price.value
        rate = self.tender.exchange.rates.get(offer.currency.value) if self.tender.exchange else None
        return None if rate is None else ARITHMETIC.multiply(offer.unit_price.value, rate.value)

    def price_level(self, offer: Offer) -> Decimal | None:
        """Price of a base offer over the median of the others.

        Parameters
        ----------
        offer : Offer
            A base offer for this lot.

        Returns
        -------
        Decimal or None
            None where the price is missing, or too few others state one. [1]
        """
        bidder = offer.bidder.value
        if bidder not in self._levels:
            price, peers = self.price(offer), self.peers("unit_price", bidder)
            known = price is not None and peers is not None and peers.count >= FEWEST_PRICES
            self._levels[bidder] = ARITHMETIC.divide(price, peers.median) if known and price and peers else None
        return self._levels[bidder]

    def usual_price(self, bidder: str) -> Decimal | None:
        """Median of the other bidders' unit prices, or the one price of a single other bidder.

        Parameters
        ----------
        bidder : str
            The bidder left out.

        Returns
        -------
        Decimal or None
            None where no other states a price, or several do not agree. [currency]
        """
        peers = self.peers("unit_price", bidder)
        return self._packs["unit_price"].only_other(bidder) if peers is None else peers.median

    def peers(self, field: str, bidder: str) -> Peers | None:
        """Median of the other bidders' figures.

        Parameters
        ----------
        field : str
            A loss, ``"impedance_percent"`` or ``"unit_price"``.
        bidder : str
            The bidder left out.

        Returns
        -------
        Peers or None
            None where too few others state the figure, or do not agree.
        """
        return self._packs[field].peers(bidder)

    @property
    def is_dry(self) -> bool:
        """Whether air or gas cools the windings: the first letter of the cooling designation (IEC 60076-2)."""
        return self.lot.cooling.value.strip().upper().startswith(("A", "G"))

    @cached_property
    def bands(self) -> PlausibleLosses | None:
        """Bands of plausible losses; None for units that the table does not cover."""
        regulation = self.lot.regulation
        phases = 3 if regulation is None or regulation.phases is None else regulation.phases
        insulation = Insulation.DRY_TYPE if self.is_dry else Insulation.LIQUID_IMMERSED
        try:
            return plausible_losses(insulation, rated_power_kva=self.rating.value, phases=phases)
        except LookupError:
            return None

    def band(self, field: str) -> Band | None:
        """Band of one loss.

        Parameters
        ----------
        field : str
            Field of the offer.

        Returns
        -------
        Band or None
            None where there is none.
        """
        if self.bands is None:
            return None
        return {"no_load_loss_kw": self.bands.no_load_loss, "load_loss_kw": self.bands.load_loss}.get(field)

    def maximum(self, field: str) -> Quantity | None:
        """Greatest loss that the tender allows.

        Parameters
        ----------
        field : str
            Field of the offer.

        Returns
        -------
        Quantity or None
            None where it allows any. [kW]
        """
        name = _LIMITS.get(field)
        limit: Quantity | None = getattr(self.lot, name) if name else None
        return limit


@dataclass(frozen=True)
class Seen:
    """One offer beside all that it is compared with.

    Parameters
    ----------
    offer : Offer
        As read, or as confirmed.
    here : LotSeen
        Its lot.
    elsewhere : tuple of (Offer, LotSeen)
        The bidder's own base offers for other lots.
    """

    offer: Offer
    here: LotSeen
    elsewhere: tuple[tuple[Offer, LotSeen], ...] = ()

    def peers(self, field: str) -> Peers | None:
        """Median of the other bidders' figures in this lot.

        Parameters
        ----------
        field : str
            Field of the offer.

        Returns
        -------
        Peers or None
            None where too few others state the figure, or do not agree.
        """
        return self.here.peers(field, self.offer.bidder.value)

    def fits(self, field: str, value: Decimal) -> bool | None:
        """Whether a figure would be an ordinary one in this lot.

        Parameters
        ----------
        field : str
            Field of the offer.
        value : Decimal
            A figure, as read or supposed. [unit of the field]

        Returns
        -------
        bool or None
            True if it lies in the soft band and near the others, or, where there are neither, near the lot's maximum;
            None where nothing can be compared.
        """
        signs = []
        band, peers, maximum = self.here.band(field), self.peers(field), self.here.maximum(field)
        if band is not None:
            signs.append(band.soft_low_kw <= value <= band.soft_high_kw)
        if peers is not None:
            signs.append(peers.median <= _FITS * value and value <= _FITS * peers.median)
        if maximum is not None and not signs:
            low, high = _FITS_MAXIMUM
            signs.append(low * maximum.value <= value <= high * maximum.value)
        return all(signs) if signs else None

    def off_by(self, field: str, value: Decimal) -> Decimal | None:
        """How many times a figure is too large (above 1) or too small (below 1).

        Parameters
        ----------
        field : str
            Field of the offer.
        value : Decimal
            A figure above zero. [unit of the field]

        Returns
        -------
        Decimal or None
            Ratio to the median of the others, else to the nearer bound of the soft band (1 inside), else to the lot's
            maximum; None where nothing can be compared.
        """
        band, peers, maximum = self.here.band(field), self.peers(field), self.here.maximum(field)
        if peers is not None:
            return ARITHMETIC.divide(value, peers.median)
        if band is not None:
            bound = min(max(value, band.soft_low_kw), band.soft_high_kw)
            return ARITHMETIC.divide(value, bound)
        return None if maximum is None else ARITHMETIC.divide(value, maximum.value)

    def ordinary(self, field: str) -> str:
        """What an ordinary figure of this lot is, in words.

        Parameters
        ----------
        field : str
            Field of the offer.

        Returns
        -------
        str
            For a sentence to the buyer; empty where nothing can be compared. Names no bidder.
        """
        band, peers, maximum = self.here.band(field), self.peers(field), self.here.maximum(field)
        words = []
        if peers is not None:
            unit = "%" if field == "impedance_percent" else "kW"
            words.append(f"{peers} is {shown(peers.median)} {unit}")
        if band is not None:
            words.append(f"a plausible one lies between {shown(band.soft_low_kw)} and {shown(band.soft_high_kw)} kW")
        if not words and maximum is not None:
            words.append(f"the tender's maximum is {shown(maximum.value)} kW ({maximum.place})")
        return ", ".join(words)


def rated_stages(lot: Lot) -> tuple[Decimal, ...]:
    """Ratings of the cooling stages that the lot's description names.

    Parameters
    ----------
    lot : Lot
        The lot.

    Returns
    -------
    tuple of Decimal
        In the order of the description, ``20/31.5 MVA``; empty where it names none, or the rated power of the lot is
        not among them. [kVA]
    """
    for found in _STAGES.finditer(lot.description.value):
        times = 1000 if found[2].upper() == "MVA" else 1
        stages = tuple(Decimal(part.strip()) * times for part in found[1].split("/"))
        if lot.rated_power_kva.value in stages:
            return stages
    return ()
