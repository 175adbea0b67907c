"""Does an offer fit the tender? Small checks of one signature in one tuple.

Bounds of single figures are kept where they are read; limits of the tender are for the evaluation to compare.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator

from ..findings import Finding
from ..records.bid import Offer
from ..records.tender import Lot, Tender

__all__ = ["CHECKS", "Check"]

Check = Callable[[Offer, Lot, Tender], Iterator[Finding]]


def check_currency(offer: Offer, _lot: Lot, tender: Tender) -> Iterator[Finding]:
    """The currency of the price is the evaluation currency, or has an announced exchange rate."""
    if offer.currency is None:
        return
    home = tender.identity.currency.value
    known = (home, *(tender.exchange.rates if tender.exchange else ()))
    if offer.currency.value not in known:
        rule = f"must be a currency with an announced exchange rate ({', '.join(known)})"
        yield Finding(
            "currency-unknown",
            "currency",
            rule,
            offer.currency.place,
            offer.currency.value,
            offer.bidder.value,
            offer.lot.value,
        )


def check_quantity(offer: Offer, lot: Lot, _tender: Tender) -> Iterator[Finding]:
    """The quantity, where it is stated, is that of the lot."""
    stated = offer.quantity
    if stated is not None and stated.value != lot.quantity.value:
        rule = f"must be the {lot.quantity.text} units of the lot ({lot.quantity.place})"
        yield Finding(
            "quantity-differs", "quantity", rule, stated.place, stated.text, offer.bidder.value, offer.lot.value
        )


CHECKS: tuple[Check, ...] = (check_currency, check_quantity)
