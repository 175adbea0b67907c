"""A price of a bidder, from the quoted figure to the evaluation currency on the tender's tax basis.

The same line is drawn for the unit price and for the price of each further item: what it takes off or multiplies by
holds for every price of the bid.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, replace
from typing import Literal

from ..records.bid import Offer
from ..records.quantity import Quantity
from ..records.tender import Tender
from ..trail import Figure, difference, product, quotient, read
from .announced import rule_sentence
from .identities import figure_id, offer_id
from .result import PriceStep
from .shares import one_and, percent_text, share

__all__ = ["Line", "deducts", "draw_line", "quoted_price", "tax_change"]

_DISCOUNTS = (
    ("unconditional discount", "unconditional_discount_percent", "unconditional_discounts"),
    ("prompt payment discount", "prompt_payment_discount_percent", "prompt_payment_discounts"),
)


@dataclass(frozen=True, slots=True)
class Line:
    """A price on its way.

    Parameters
    ----------
    price : Figure
        The price after all steps so far, exact.
    factors : tuple of Figure
        Figures whose product the price is.
    steps : tuple of PriceStep
        The way.
    """

    price: Figure
    factors: tuple[Figure, ...]
    steps: tuple[PriceStep, ...]


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
    name = offer_id(offer, "unit_price")
    return read(name, "quoted unit price", offer.unit_price.value, offer.currency.value, offer.unit_price.place)


def deducts(tender: Tender, offer: Offer, discount: str) -> bool:
    """Whether a discount is stated and the tender deducts it.

    Parameters
    ----------
    tender : Tender
        With its rule.
    offer : Offer
        With its discount.
    discount : str
        ``"unconditional discount"`` or ``"prompt payment discount"``.

    Returns
    -------
    bool
        True where both hold.
    """
    field, rule = next((field, rule) for name, field, rule in _DISCOUNTS if name == discount)
    stated: Quantity | None = getattr(offer.terms, field)
    return stated is not None and stated.value > 0 and getattr(tender.rules.announced, rule) == "deduct"


def tax_change(tender: Tender, offer: Offer) -> Literal["take out", "add"] | None:
    """What the rule on taxes does to the prices of an offer.

    Parameters
    ----------
    tender : Tender
        With its rule.
    offer : Offer
        Which says whether its prices include tax, or does not.

    Returns
    -------
    str or None
        None where nothing changes: the price is as the tender compares it, or the bid does not say.
    """
    rule, included = tender.rules.announced.taxes, offer.terms.tax_included
    if rule == "excluded" and included is True:
        return "take out"
    return "add" if rule == "included" and included is False else None


def draw_line(
    start: Line, names: tuple[str, ...], offer: Offer, tender: Tender, exchange: Mapping[str, Figure]
) -> Line | None:
    """Price of a bid in the evaluation currency, on the tender's tax basis.

    Parameters
    ----------
    start : Line
        The quoted or corrected price. [currency of the offer]
    names : tuple of str
        First names of the identities, ``("price",)`` or ``("item", "spare bushing")``.
    offer : Offer
        With its discounts, its currency and its word on taxes.
    tender : Tender
        With its rules.
    exchange : mapping of str to Figure
        Exchange rates by currency.

    Returns
    -------
    Line or None
        None where the currency has no exchange rate. [evaluation currency]

    Notes
    -----
    Discounts come off one after the other. Tax is taken out or added before the tender's own adders, so that the same
    bid quoted with and without tax comes to the same price.
    """
    line = start
    for name, field, _ in _DISCOUNTS:
        if deducts(tender, offer, name):
            line = _discounted(line, names, offer, tender, (name, field))
    converted = _converted(line, names, offer, tender, exchange)
    return None if converted is None else _taxed(converted, names, offer, tender)


def _stepped(line: Line, step: PriceStep, *factors: Figure) -> Line:
    return replace(line, price=step.price, factors=factors or (step.price,), steps=(*line.steps, step))


def _discounted(line: Line, names: tuple[str, ...], offer: Offer, tender: Tender, discount: tuple[str, str]) -> Line:
    name, field = discount
    percent: Quantity = getattr(offer.terms, field)
    part = share(offer_id(offer, name), name, percent)
    unit = line.price.unit
    amount = product(offer_id(offer, *names, name), f"{name}, amount", unit, line.price, part)
    after = difference(offer_id(offer, *names, f"less {name}"), f"price less {name}", unit, line.price, amount)
    rule = next(rule for known, _, rule in _DISCOUNTS if known == name)
    step = PriceStep(
        name, f"{name} of {percent_text(percent)}", "unit", "−", amount, after, rule_sentence(tender, rule)
    )
    return _stepped(line, step)


def _converted(
    line: Line, names: tuple[str, ...], offer: Offer, tender: Tender, exchange: Mapping[str, Figure]
) -> Line | None:
    home, foreign = tender.identity.currency.value, line.price.unit
    if foreign == home:
        return line
    if foreign not in exchange or tender.exchange is None:
        return None
    rate = exchange[foreign]
    after = product(offer_id(offer, *names, "in evaluation currency"), f"price in {home}", home, line.price, rate)
    stated = tender.exchange
    rule = f"Rate of {stated.source}, {stated.kind}, of {stated.date.isoformat()} ({rate.source})."
    step = PriceStep("currency", f"converted to {home}", "unit", "×", rate, after, rule)
    return _stepped(line, step, *line.factors, rate)


def _taxed(line: Line, names: tuple[str, ...], offer: Offer, tender: Tender) -> Line:
    change = tax_change(tender, offer)
    if change is None or tender.taxes is None:
        return line
    rate = share(figure_id("taxes", "rate"), "tax rate", tender.taxes.rate_percent)
    factor = one_and(figure_id("taxes", "factor"), "one and the tax rate", rate)
    home, rule = line.price.unit, rule_sentence(tender, "taxes")
    if change == "take out":
        after = quotient(offer_id(offer, *names, "without tax"), "price without tax", home, line.price, factor)
        return _stepped(line, PriceStep("tax", "tax taken out", "unit", "÷", factor, after, rule))
    after = product(offer_id(offer, *names, "with tax"), "price with tax", home, line.price, factor)
    return _stepped(line, PriceStep("tax", "tax added", "unit", "×", factor, after, rule))
