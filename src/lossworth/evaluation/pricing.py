"""Evaluated price of one unit: the quoted price in the evaluation currency."""

from __future__ import annotations

from collections.abc import Mapping

from ..records.bid import Offer
from ..records.tender import Tender
from ..trail import Figure, read
from .identities import figure_id

__all__ = ["exchange_rates", "quoted_price", "unit_price_in_evaluation_currency"]


def exchange_rates(tender: Tender) -> dict[str, Figure]:
    """Exchange rates of the day that the tender fixes, as figures.

    Parameters
    ----------
    tender : Tender
        With or without exchange rates.

    Returns
    -------
    dict of str to Figure
        By currency code; units of the evaluation currency for one unit of the other.
    """
    if tender.exchange is None:
        return {}
    home = tender.identity.currency.value
    return {
        code: read(figure_id("exchange", code), f"exchange rate {code}", rate.value, f"{home}/{code}", rate.place)
        for code, rate in tender.exchange.rates.items()
    }


def quoted_price(offer: Offer) -> Figure | None:
    """Price of one unit as the bidder quotes it.

    Parameters
    ----------
    offer : Offer
        One offer.

    Returns
    -------
    Figure or None
        None where the price or its currency is missing. [currency of the offer]
    """
    if offer.unit_price is None or offer.currency is None:
        return None
    name = figure_id(f"lot {offer.lot}", offer.bidder.value, "unit_price")
    return read(name, "quoted unit price", offer.unit_price.value, offer.currency.value, offer.unit_price.place)


def unit_price_in_evaluation_currency(
    offer: Offer, home_currency: str, rates: Mapping[str, Figure]
) -> tuple[Figure, ...] | None:
    """Factors whose product is the price of one unit in the evaluation currency.

    Parameters
    ----------
    offer : Offer
        One offer.
    home_currency : str
        Evaluation currency.
    rates : mapping of str to Figure
        Exchange rates by currency.

    Returns
    -------
    tuple of Figure or None
        The quoted price, and the exchange rate where one is needed; None where the price cannot be converted.
    """
    price = quoted_price(offer)
    if price is None:
        return None
    if price.unit == home_currency:
        return (price,)
    if price.unit not in rates:
        return None
    return (price, rates[price.unit])
