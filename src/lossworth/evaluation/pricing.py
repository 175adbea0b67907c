"""Evaluated price of an offer as a chain of figures, from the quoted price to the price that is compared.

Per unit: quoted or corrected price, less unconditional and prompt payment discount, in the evaluation currency, without
or with tax, then the tender's adders: delivered point, payment terms, delivery time, site costs, preference margin.
Further items that count are priced for the lot and added there: dividing them by the quantity would leave fractions of
a cent. A step is made only where the tender announces it and the bid needs it.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, replace
from decimal import Decimal

from ..findings import Finding
from ..money import Rounding, RoundingMode
from ..records.bid import Offer
from ..records.tender import Lot, Tender
from ..trail import Figure, difference, product, read, rounded, total
from .announced import rule_sentence
from .corrections import Corrected
from .identities import figure_id, offer_id
from .items import ItemPrices, StandIn, counting_items, missing_items, pieces, quoted_item, stand_in
from .payment_terms import check_payments, payment_ratio
from .price_adders import Adder, delivered_adders, delivery_time_adders, margin_share, site_costs
from .price_line import Line, draw_line, quoted_price
from .result import PriceStep
from .shares import share

__all__ = ["ItemsPrice", "UnitPrice", "contract_price", "exchange_rates", "items_price", "quoted_price", "unit_price"]

#: What is paid is paid in the minor unit of a currency, whatever the evaluation rounds to.
_MINOR_UNIT = Rounding(Decimal("0.01"), RoundingMode.HALF_AWAY_FROM_ZERO)


@dataclass(frozen=True, slots=True)
class UnitPrice:
    """Price of one unit, exact, before the one rounding that the tender states.

    Parameters
    ----------
    factors : tuple of Figure
        Figures whose product is the price before all adders.
    price : Figure
        The same product. [evaluation currency]
    adders : tuple of Figure
        What is added to it, the preference margin left out. [evaluation currency]
    margin : Figure or None
        Preference margin, where one lies on this offer. [evaluation currency]
    steps : tuple of PriceStep
        The chain without its last, rounded step.
    findings : tuple of Finding
        What is said of the price; one that leaves the offer unevaluated where an adder is not known.
    is_of_total : bool
        Whether the price is a governing total over the quantity: then the lot is exact, and the unit is not.
    """

    factors: tuple[Figure, ...]
    price: Figure
    adders: tuple[Figure, ...] = ()
    margin: Figure | None = None
    steps: tuple[PriceStep, ...] = ()
    findings: tuple[Finding, ...] = ()
    is_of_total: bool = False


@dataclass(frozen=True, slots=True)
class ItemsPrice:
    """Price of the further items that count, for the lot, exact.

    Parameters
    ----------
    amounts : tuple of Figure
        What is added up, the preference margin left out. [evaluation currency]
    margin : Figure or None
        Preference margin on these prices.
    steps : tuple of PriceStep
        One for each amount and for the margin.
    findings : tuple of Finding
        On items without a price.
    is_complete : bool
        Whether every item has a price or a stand-in.
    """

    amounts: tuple[Figure, ...] = ()
    margin: Figure | None = None
    steps: tuple[PriceStep, ...] = ()
    findings: tuple[Finding, ...] = ()
    is_complete: bool = True


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


def unit_price(
    offer: Offer, corrected: Corrected, tender: Tender, lot: Lot, exchange: Mapping[str, Figure]
) -> UnitPrice | None:
    """Price of one unit of an offer.

    Parameters
    ----------
    offer : Offer
        As read, or with confirmed values.
    corrected : Corrected
        Its unit price after the arithmetic check.
    tender : Tender
        With its rules; those that the offer needs must be set.
    lot : Lot
        Its lot.
    exchange : mapping of str to Figure
        Exchange rates by currency.

    Returns
    -------
    UnitPrice or None
        None where price or currency is missing or has no exchange rate.

    Notes
    -----
    The adder for the delivered point is a share of the price on the tender's tax basis; the adder for delivery time
    and the preference margin are shares of the price at the delivered point; interest on payments is counted on what
    the bidder is paid, without adders. So the same bid quoted in two ways comes to one price.

    References
    ----------
    .. [1] World Bank Standard Bid Evaluation Form, tables 6 to 11: corrections and discounts, exchange rates,
       additions and adjustments, domestic preference.
    """
    quoted = quoted_price(offer)
    if quoted is None or corrected.unit_price is None:
        return None
    line = draw_line(_start(quoted, corrected), ("price",), offer, tender, exchange)
    if line is None:
        return None
    return replace(_with_adders(line, offer, tender, lot), is_of_total=corrected.units_total is not None)


def _start(quoted: Figure, corrected: Corrected) -> Line:
    first = PriceStep("quoted", "quoted unit price", "unit", "", None, quoted, "As the bidder states it.")
    unit = corrected.unit_price
    why = next((each for each in corrected.corrections if each.field == "unit_price"), None)
    if unit is None or why is None:
        return Line(quoted, (quoted,), (first,))
    step = PriceStep("corrected", "corrected unit price", "unit", "", None, unit, f"{why.rule} {why.reason}.")
    return Line(unit, (unit,), (first, step))


def _with_adders(line: Line, offer: Offer, tender: Tender, lot: Lot) -> UnitPrice:
    price, currency = line.price, line.price.unit
    to_point = delivered_adders(offer, tender, price)
    delivered = _sum(offer, ("price", "at the delivered point"), "price at the delivered point", price,
                     tuple(adder.amount for adder in to_point.amounts))  # fmt: skip
    in_time = delivery_time_adders(offer, lot, delivered)
    on_site = site_costs(offer, lot, currency)
    interest = _interest(offer, tender, ("price",), price)
    adders = (*to_point.amounts, *interest, *in_time.amounts, *on_site.amounts)
    margin = _margin(offer, tender, ("price",), delivered)
    steps = _running(offer, line, (*adders, *margin))
    findings = (*to_point.findings, *check_payments(offer), *in_time.findings, *on_site.findings)
    amounts = tuple(adder.amount for adder in adders)
    return UnitPrice(line.factors, price, amounts, margin[0].amount if margin else None, steps, findings)


def _sum(offer: Offer, names: tuple[str, ...], label: str, price: Figure, amounts: tuple[Figure, ...]) -> Figure:
    return total(offer_id(offer, *names), label, price.unit, price, *amounts) if amounts else price


def _interest(offer: Offer, tender: Tender, names: tuple[str, ...], price: Figure) -> tuple[Adder, ...]:
    """Interest on payments other than the tender's, as an amount with its sign."""
    ratio = payment_ratio(offer, tender)
    if ratio is None:
        return ()
    worth = product(offer_id(offer, *names, "at the tender's payment terms"), "price at the tender's payment terms",
                    price.unit, price, ratio)  # fmt: skip
    amount = difference(offer_id(offer, *names, "payment terms"), "interest on payment terms", price.unit, worth, price)
    label = "payments other than the tender's, as interest"
    return (Adder("payment terms", label, amount, rule_sentence(tender, "payment_terms")),)


def _margin(offer: Offer, tender: Tender, names: tuple[str, ...], price: Figure) -> tuple[Adder, ...]:
    found = margin_share(offer, tender)
    if found is None:
        return ()
    part, rule = found
    amount = product(offer_id(offer, *names, "preference margin"), "preference margin", price.unit, price, part)
    return (Adder("preference", "preference margin, for comparison only", amount, rule),)


def _running(offer: Offer, line: Line, adders: Iterable[Adder]) -> tuple[PriceStep, ...]:
    """Steps of the chain, each with the price after it."""
    steps, price = list(line.steps), line.price
    for number, adder in enumerate(adders, start=1):
        price = total(offer_id(offer, "price", "with adders", str(number)), f"price with {adder.name}", price.unit,
                      price, adder.amount)  # fmt: skip
        steps.append(PriceStep(adder.name, adder.label, "unit", "+", adder.amount, price, adder.rule))
    return tuple(steps)


def items_price(offer: Offer, own: ItemPrices, lot: Lot, tender: Tender, others: Sequence[ItemPrices]) -> ItemsPrice:
    """Price of the further items of a lot that count.

    Parameters
    ----------
    offer : Offer
        The offer.
    own : ItemPrices
        Its own prices.
    lot : Lot
        Its lot.
    tender : Tender
        With its rules; the one on missing items must be set where one is missing.
    others : sequence of ItemPrices
        Prices that may stand in by the rule.

    Returns
    -------
    ItemsPrice
        Empty where no item of the lot counts.

    Notes
    -----
    Discounts, currency, tax, interest on payments and the preference margin act on item prices as on the unit price;
    adders for delivered point, delivery time and site act on units alone. A stand-in is a price of others: nothing of
    this bidder's terms acts on it.
    """
    adders: list[Adder] = []
    for item in counting_items(lot):
        price = own.by_name.get(item.name.value)
        if price is not None:
            name = item.name.value
            amount = product(offer_id(offer, "item", name, "for the lot"), f"{name}, for the lot", price.unit,
                             pieces(lot, item), price)  # fmt: skip
            adders.append(Adder("item", f"{item.quantity.text} pieces of {name}", amount, f"Counts ({item.place})."))
    missing = [stand_in(offer, item, lot, tender, others) for item in missing_items(offer, lot)]
    stood_in = [_stood_in(known, known.amount) for known in missing if known.amount is not None]
    interest: tuple[Adder, ...] = ()
    if adders:
        interest = _interest(offer, tender, ("items",), _sum_of(offer, "items", "items that the bidder prices", adders))
    compared = [*adders, *stood_in]
    margin = _margin(offer, tender, ("items",), _sum_of(offer, "items compared", "items", compared)) if compared else ()
    adders = [*compared, *interest]
    return ItemsPrice(
        tuple(adder.amount for adder in adders),
        margin[0].amount if margin else None,
        _steps_of_items(offer, (*adders, *margin)),
        tuple(known.finding for known in missing),
        all(known.amount is not None for known in missing),
    )


def _sum_of(offer: Offer, name: str, label: str, adders: Sequence[Adder]) -> Figure:
    amounts = [adder.amount for adder in adders]
    return total(offer_id(offer, name), label, amounts[0].unit, *amounts)


def _stood_in(known: StandIn, amount: Figure) -> Adder:
    return Adder("missing item", f"{known.finding.field}, price of others", amount, known.rule)


def _steps_of_items(offer: Offer, adders: Sequence[Adder]) -> tuple[PriceStep, ...]:
    steps, running = [], []
    for number, adder in enumerate(adders, start=1):
        running.append(adder.amount)
        price = total(offer_id(offer, "items", "with", str(number)), "items of the lot", adder.amount.unit, *running)
        steps.append(PriceStep(adder.name, adder.label, "lot", "+", adder.amount, price, adder.rule))
    return tuple(steps)


def contract_price(offer: Offer, corrected: Corrected, lot: Lot, quantity: Figure) -> Figure | None:
    """What would be paid for the lot: nothing that serves the comparison alone is in it.

    Parameters
    ----------
    offer : Offer
        As read, or with confirmed values.
    corrected : Corrected
        Its unit price, or its total, after the arithmetic check.
    lot : Lot
        With the items that count.
    quantity : Figure
        Units of the lot.

    Returns
    -------
    Figure or None
        Units and priced items that count, less the unconditional discount, rounded once to 0.01; None where the price
        is not stated. [currency of the offer]

    Notes
    -----
    The unconditional discount comes off also where the tender does not count it: the bidder grants it. A discount for
    prompt payment hangs on the day of payment and stays out. Tax is in or out as the bidder quotes.
    """
    unit = corrected.unit_price
    if unit is None:
        return None
    units = corrected.units_total
    if units is None:
        units = product(offer_id(offer, "contract", "units"), "price of all units", unit.unit, quantity, unit)
    parts = [units]
    for item in counting_items(lot):
        price = quoted_item(offer, item)
        if price is not None:
            name = item.name.value
            parts.append(product(offer_id(offer, "contract", "item", name), f"{name}, as quoted for the lot",
                                 price.unit, pieces(lot, item), price))  # fmt: skip
    whole = parts[0]
    if len(parts) > 1:
        whole = total(offer_id(offer, "contract", "whole"), "price of units and items", whole.unit, *parts)
    percent = offer.terms.unconditional_discount_percent
    if percent is not None and percent.value > 0:
        part = share(offer_id(offer, "unconditional discount"), "unconditional discount", percent)
        amount = product(offer_id(offer, "contract", "discount"), "discount on the lot", whole.unit, whole, part)
        whole = difference(offer_id(offer, "contract", "discounted"), "price less discount", whole.unit, whole, amount)
    return rounded(offer_id(offer, "contract_price"), "contract price of the lot", whole, _MINOR_UNIT)
