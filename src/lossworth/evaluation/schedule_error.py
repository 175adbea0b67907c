"""Unit price times quantity against the stated total: what does not add up, and whose decimal mark is misplaced."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from decimal import Decimal
from typing import Literal

from ..money import ARITHMETIC
from ..records.bid import Offer
from ..records.quantity import Quantity
from ..records.tender import Lot
from .clerical_errors_comparison import LotSeen
from .items import stated_item_price

__all__ = ["PriceCheck", "Reading", "ScheduleError", "price_levels", "schedule_error"]

_MOST_PLACES = 6
_HALF = Decimal("0.5")
#: A unit price is plausible within this factor of the usual one. Common practice, no source.
_PLAUSIBLE = Decimal(2)


@dataclass(frozen=True, slots=True)
class Reading:
    """What a bidder may have meant by its total.

    Parameters
    ----------
    amount : Decimal
        What the total would be. [currency of the offer]
    has_items : bool
        Whether the items that the bidder prices are in it.
    is_net : bool
        Whether the unconditional discount is off already.
    """

    amount: Decimal
    has_items: bool
    is_net: bool


@dataclass(frozen=True, slots=True)
class PriceCheck:
    """What is known of the size of a unit price, beside its own schedule.

    Parameters
    ----------
    levels : tuple of Decimal
        The unit price over the usual one, by each source of a usual price. [1]
    is_confirmed : bool
        Whether the bidder confirmed its unit price, as read or as another one.
    """

    levels: tuple[Decimal, ...] = ()
    is_confirmed: bool = False

    def misplaced(self, places: int) -> Literal["unit price", "total"] | None:
        """Which of two figures that a power of ten lies between has its decimal mark misplaced.

        Parameters
        ----------
        places : int
            Power of ten that brings the unit price to the total.

        Returns
        -------
        str or None
            None where nothing usual is known, or the sources do not agree.
        """
        if self.is_confirmed:
            return "total"
        if self.levels and all(_is_plausible(level.scaleb(places)) for level in self.levels):
            return "unit price"
        return "total" if self.levels and all(map(_is_plausible, self.levels)) else None


@dataclass(frozen=True, slots=True)
class ScheduleError:
    """A price schedule whose figures do not add up.

    Parameters
    ----------
    stated_total : Quantity
        Total as stated. [currency of the offer]
    computed_total : Decimal
        Unit price times quantity, with the items that the bidder prices. [currency of the offer]
    shifted_places : int
        Power of ten by which unit price and total differ; 0 where none explains the total.
    misplaced : {"unit price", "total"} or None
        Whose decimal mark is misplaced; None where no power of ten lies between them, or none can tell.
    reading : Reading or None
        What the total holds where a power of ten explains it.
    """

    stated_total: Quantity
    computed_total: Decimal
    shifted_places: int = 0
    misplaced: Literal["unit price", "total"] | None = None
    reading: Reading | None = None

    @property
    def description(self) -> str:
        """What does not add up, in words."""
        text = f"unit price times quantity is {_plain(self.computed_total)}, the stated total {self.stated_total.text}"
        places = self.shifted_places
        if not places:
            return text
        if self.misplaced is None:
            return f"{text}; a power of ten lies between them, and which of the two is misplaced cannot be told"
        is_left = places > 0 if self.misplaced == "unit price" else places < 0
        by = "1 place" if abs(places) == 1 else f"{abs(places)} places"
        return f"{text}; the decimal mark of the {self.misplaced} stands {by} too far {'left' if is_left else 'right'}"


def price_levels(offer: Offer, here: LotSeen) -> tuple[Decimal, ...]:
    """Unit price of an offer over what is usual in its lot.

    Parameters
    ----------
    offer : Offer
        As read, or with confirmed values.
    here : LotSeen
        Its lot with all offers.

    Returns
    -------
    tuple of Decimal
        Over the median of the other bidders, where several agree or a single one states a price, and over the estimate,
        where there is one; empty where neither is known. Prices as quoted, in the evaluation currency. [1]
    """
    price, others = here.price(offer), here.usual_price(offer.bidder.value)
    estimate = here.lot.estimated_unit_price
    if price is None:
        return ()
    usual = [] if others is None else [others]
    usual += [] if estimate is None or estimate.value <= 0 else [estimate.value]
    return tuple(ARITHMETIC.divide(price, each) for each in usual)


def schedule_error(offer: Offer, lot: Lot, check: PriceCheck | None = None) -> ScheduleError | None:
    """Compare unit price times quantity with the stated total.

    Parameters
    ----------
    offer : Offer
        With unit price, total, and prices of items.
    lot : Lot
        With the quantity and the items.
    check : PriceCheck, optional
        What is known of the size of the unit price; nothing where it is left out.

    Returns
    -------
    ScheduleError or None
        None where nothing can be compared, or the figures agree: to half a unit of the last digit of the total, with
        or without the items that the bidder prices, before or after its unconditional discount.

    Notes
    -----
    A power of ten between the two says that one of them is wrong, not which: the unit price is, where only the shifted
    one lies within a factor of two of the usual price, and the total, where the unit price as read does.
    """
    unit, stated = offer.unit_price, offer.terms.total_price
    if unit is None or stated is None or (offer.quantity and offer.quantity.value != lot.quantity.value):
        return None
    bound = _half_of_last_digit(stated)
    units, items = ARITHMETIC.multiply(unit.value, lot.quantity.value), _items(offer, lot)

    def matching(places: int) -> Reading | None:
        readings = _readings(units.scaleb(places), items, offer)
        return next((reading for reading in readings if abs(reading.amount - stated.value) <= bound), None)

    if matching(0) is not None:
        return None
    for places in _nearest_first():
        reading = matching(places)
        if reading is not None:
            misplaced = (check or PriceCheck()).misplaced(places)
            return ScheduleError(stated, units + items, places, misplaced, reading)
    return ScheduleError(stated, units + items)


def _readings(units: Decimal, items: Decimal, offer: Offer) -> Iterator[Reading]:
    """What a bidder may have meant by its total, the plainest first."""
    discount = offer.terms.unconditional_discount_percent
    left = Decimal(1) if discount is None else 1 - ARITHMETIC.divide(discount.value, Decimal(100))
    for has_items in (False, True) if items else (False,):
        whole = units + items if has_items else units
        yield Reading(whole, has_items, is_net=False)
        if 0 < left < 1:
            yield Reading(ARITHMETIC.multiply(whole, left), has_items, is_net=True)


def _is_plausible(level: Decimal) -> bool:
    return level * _PLAUSIBLE >= 1 and level <= _PLAUSIBLE


def _half_of_last_digit(stated: Quantity) -> Decimal:
    """Half a unit of the last digit behind the decimal mark; half a unit for a whole number."""
    exponent = min(int(stated.stated.as_tuple().exponent), 0)
    return _HALF.scaleb(exponent)


def _nearest_first() -> Iterator[int]:
    for places in range(1, _MOST_PLACES + 1):
        yield places
        yield -places


def _plain(value: Decimal) -> str:
    return f"{value.normalize():f}"


def _items(offer: Offer, lot: Lot) -> Decimal:
    """Sum of the items that the bidder prices, those included that do not count."""
    prices = ((item, stated_item_price(offer, item)) for item in lot.items)
    return sum((item.quantity.value * price.value for item, price in prices if price is not None), Decimal(0))
