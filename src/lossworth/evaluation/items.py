"""Further items of a lot: spares, supervision, tests. Priced by the piece, counted for the lot."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from decimal import Decimal

from ..findings import Finding
from ..money import ARITHMETIC
from ..records.bid import Offer
from ..records.commercial import Item
from ..records.quantity import Quantity
from ..records.tender import Lot, Tender
from ..trail import Figure, constant, product, quotient, read, total
from .announced import rule_place, rule_sentence
from .identities import figure_id, is_one_of, offer_id
from .price_line import Line, draw_line

__all__ = [
    "ItemPrices",
    "StandIn",
    "counting_items",
    "missing_items",
    "pieces",
    "priced_items",
    "quoted_item",
    "stand_in",
    "stated_item_price",
]


@dataclass(frozen=True, slots=True)
class StandIn:
    """What the tender's rule makes of an item that a bidder does not price.

    Parameters
    ----------
    amount : Figure or None
        Amount for the lot; None where no other offer that counts states a price. [evaluation currency]
    finding : Finding
        What is said of it.
    rule : str
        The announced rule, in a sentence.
    """

    amount: Figure | None
    finding: Finding
    rule: str


@dataclass(frozen=True, slots=True)
class ItemPrices:
    """Prices of one offer for the items that count, by the piece, in the evaluation currency.

    Parameters
    ----------
    offer : Offer
        Whose prices.
    by_name : mapping of str to Figure
        Price of a piece by the item's name; items without a price are absent.
    """

    offer: Offer
    by_name: Mapping[str, Figure]


def counting_items(lot: Lot) -> tuple[Item, ...]:
    """Items that are part of the evaluated price.

    Parameters
    ----------
    lot : Lot
        The lot.

    Returns
    -------
    tuple of Item
        In the order of the tender.
    """
    return tuple(item for item in lot.items if item.counts)


def stated_item_price(offer: Offer, item: Item) -> Quantity | None:
    """Price that the bidder states for a piece of an item.

    Parameters
    ----------
    offer : Offer
        The offer; names of items are compared without regard to case and blanks.
    item : Item
        The item.

    Returns
    -------
    Quantity or None
        None where it states none. [currency of the offer]
    """
    wanted = (item.name.value,)
    return next((price for name, price in offer.terms.item_prices.items() if is_one_of(name, wanted)), None)


def missing_items(offer: Offer, lot: Lot) -> tuple[Item, ...]:
    """Items that count and that the bidder does not price.

    Parameters
    ----------
    offer : Offer
        The offer.
    lot : Lot
        Its lot.

    Returns
    -------
    tuple of Item
        Empty where every item has a price.
    """
    return tuple(item for item in counting_items(lot) if stated_item_price(offer, item) is None)


def quoted_item(offer: Offer, item: Item) -> Figure | None:
    """Price of a piece of an item as the bidder quotes it.

    Parameters
    ----------
    offer : Offer
        The offer.
    item : Item
        The item.

    Returns
    -------
    Figure or None
        None where price or currency is missing. [currency of the offer]
    """
    stated = stated_item_price(offer, item)
    if stated is None or offer.currency is None:
        return None
    name = item.name.value
    return read(
        offer_id(offer, "item", name), f"{name}, price of a piece", stated.value, offer.currency.value, stated.place
    )


def pieces(lot: Lot, item: Item) -> Figure:
    """Pieces of an item for the whole lot.

    Parameters
    ----------
    lot : Lot
        The lot.
    item : Item
        The item.

    Returns
    -------
    Figure
        The number. [piece]
    """
    name = item.name.value
    identity = figure_id(f"lot {lot.id}", "item", name, "pieces")
    return read(identity, f"{name}, pieces", item.quantity.value, "pieces", item.quantity.place)


def priced_items(offer: Offer, lot: Lot, tender: Tender, exchange: Mapping[str, Figure]) -> ItemPrices:
    """Prices of an offer for the items that count, less discounts, in the evaluation currency, on the tax basis.

    Parameters
    ----------
    offer : Offer
        The offer.
    lot : Lot
        Its lot.
    tender : Tender
        With its rules.
    exchange : mapping of str to Figure
        Exchange rates by currency.

    Returns
    -------
    ItemPrices
        Of the items that it prices in a currency that can be converted.
    """
    prices = {}
    for item in counting_items(lot):
        quoted = quoted_item(offer, item)
        if quoted is not None:
            names = ("item", item.name.value)
            line = draw_line(Line(quoted, (quoted,), ()), names, offer, tender, exchange)
            if line is not None:
                prices[item.name.value] = line.price
    return ItemPrices(offer, prices)


def stand_in(offer: Offer, item: Item, lot: Lot, tender: Tender, others: Iterable[ItemPrices]) -> StandIn:
    """What the announced rule puts in the place of a missing price.

    Parameters
    ----------
    offer : Offer
        The offer that leaves the item unpriced.
    item : Item
        The item.
    lot : Lot
        Its lot.
    tender : Tender
        With the rule; it must be set.
    others : iterable of ItemPrices
        Offers whose prices count by the rule; those of the same bidder are passed over.

    Returns
    -------
    StandIn
        The highest or the average price of the others, times the pieces; or the reason why the offer is left out.

    References
    ----------
    .. [1] Goods bidding document, Section III, evaluation criteria: price adjustment equal to the highest price
       quoted for the same item by the other bidders.
    """
    rule, name = tender.rules.announced.missing_item, item.name.value
    sentence = rule_sentence(tender, "missing_item")
    if rule == "reject":
        return StandIn(None, _finding("item-missing-rejected", offer, item, f"must be priced ({item.place})"), sentence)
    known = [each for each in others if name in each.by_name and each.offer.bidder.value != offer.bidder.value]
    prices = [each.by_name[name] for each in known]
    if not prices:
        missing = "is not priced, and nobody whose price could stand in prices it"
        return StandIn(None, _finding("item-priced-by-nobody", offer, item, missing), sentence)
    is_average = rule == "average of the others"
    counted = known if is_average else [max(known, key=lambda each: _order(each, name))]
    price = _average(offer, item, prices) if is_average else counted[0].by_name[name]
    amount = product(
        offer_id(offer, "item", name, "stand-in"), f"{name}, stand-in for the lot", price.unit, pieces(lot, item), price
    )
    shown = f"{tender.rules.rounding.apply(amount.value):f} {amount.unit}"
    whose = _whose(item, counted)
    told = f"is not priced; {shown} for the lot, {rule} ({whose}), stands in, for comparison only"
    told = f"{told} ({rule_place(tender, 'missing_item')})"
    return StandIn(amount, _finding("item-price-stands-in", offer, item, told), sentence)


def _order(prices: ItemPrices, name: str) -> tuple[Decimal, str]:
    price = prices.by_name[name]
    return price.value, price.id


def _whose(item: Item, prices: Iterable[ItemPrices]) -> str:
    """Offers with the cells of their prices."""
    stated = [
        (each.offer.name, stated_item_price(each.offer, item))
        for each in sorted(prices, key=lambda each: each.offer.name)
    ]
    return ", ".join(f"{name}, {price.place}" for name, price in stated if price is not None)


def _average(offer: Offer, item: Item, prices: Sequence[Figure]) -> Figure:
    name = item.name.value
    ordered = sorted(prices, key=lambda price: price.id)
    unit = ordered[0].unit
    together = total(offer_id(offer, "item", name, "sum of the others"), f"{name}, sum of the others", unit, *ordered)
    number = ARITHMETIC.create_decimal(len(ordered))
    count = constant(
        offer_id(offer, "item", name, "offers"), "offers that price it", number, "offers", "counted in this lot"
    )
    return quotient(offer_id(offer, "item", name, "average"), f"{name}, average of the others", unit, together, count)


def _finding(kind: str, offer: Offer, item: Item, rule: str) -> Finding:
    place = offer.columns.get(f"item: {item.name.value}", offer.place)
    return Finding(kind, f"item {item.name.value}", rule, place, "", offer.bidder.value, offer.lot.value)
