"""Which announced rules and adders this tender and these offers need, and which of them are not announced."""

from __future__ import annotations

import datetime
from collections.abc import Callable, Collection, Iterable, Iterator, Sequence
from dataclasses import dataclass

from ..findings import Finding, Place
from ..records.bid import Offer
from ..records.tender import Lot, Tender
from .announced import rule_kind, rule_place
from .clerical_errors_comparison import LotSeen
from .items import missing_items
from .loss_tolerance import claims_tolerance
from .payment_terms import payments_differ
from .price_line import tax_change
from .schedule_error import PriceCheck, price_levels, schedule_error
from .shares import percent_text

__all__ = ["check_exchange_day", "needed_rules"]


@dataclass(frozen=True, slots=True)
class _Need:
    """A rule or adder that something needs.

    Parameters
    ----------
    key : str
        Key in the tender file; one of the table [rules] without its table.
    why : str
        What needs it, as a clause.
    place : Place
        Where that stands.
    got : str or None
        What stands there.
    offer : Offer or None
        The offer that needs it; None where the tender itself does.
    """

    key: str
    why: str
    place: Place
    got: str | None = None
    offer: Offer | None = None


def needed_rules(
    tender: Tender, offers: Iterable[Offer], confirmed: Collection[tuple[str, str, str]] = ()
) -> tuple[Finding, ...]:
    """Findings on rules and adders that are needed and not announced; each of them stops the evaluation.

    Parameters
    ----------
    tender : Tender
        As announced, its profile of rules settled.
    offers : iterable of Offer
        As read, or with confirmed values.
    confirmed : collection of (str, str, str)
        Name of the offer, lot and field of what a bidder has confirmed.

    Returns
    -------
    tuple of Finding
        ``"rule-unset"``, one for each key, at the first place that needs it, offers in the order of lots and names.
        A rule that nothing needs may stay unset; so may the order of ties, without which a tie stays a tie, and the
        day of the exchange rate where the tender fixes date and rates itself.
    """
    position = {lot.id: number for number, lot in enumerate(tender.lots)}
    ordered = sorted(
        (offer for offer in offers if offer.lot.value in position),
        key=lambda offer: (position[offer.lot.value], offer.name),
    )
    by_key: dict[str, _Need] = {}
    for need in (*_needs_of_tender(tender, ordered), *_needs_of_offers(tender, ordered, confirmed)):
        by_key.setdefault(need.key, need)
    return tuple(_unset(tender, need) for need in by_key.values() if not _is_set(tender, need.key))


def _needs_of_offers(
    tender: Tender, offers: Sequence[Offer], confirmed: Collection[tuple[str, str, str]]
) -> Iterator[_Need]:
    lots = {lot.id: lot for lot in tender.lots}
    seen = {lot.id: LotSeen(tender, lot, [o for o in offers if o.lot.value == lot.id]) for lot in tender.lots}
    for offer in offers:
        lot = lots[offer.lot.value]
        is_confirmed = (offer.name, lot.id, "unit_price") in confirmed
        yield from _arithmetic(tender, lot, offer, PriceCheck(price_levels(offer, seen[lot.id]), is_confirmed))
        for find in _FINDERS:
            yield from find(tender, lot, offer)


def _is_set(tender: Tender, key: str) -> bool:
    """Whether a rule is announced; keys outside of [rules] are named only where they are missing."""
    return rule_kind(key) is not None and getattr(tender.rules.announced, key) is not None


def _unset(tender: Tender, need: _Need) -> Finding:
    kind, offer = rule_kind(need.key), need.offer
    bidder, lot = (None, None) if offer is None else (offer.bidder.value, offer.lot.value)
    if kind is None:
        return Finding("rule-unset", need.key, f"must be announced: {need.why}", need.place, need.got, bidder, lot)
    settings = " or ".join(f'"{setting}"' for setting in kind.sentences)
    fix = (
        f"Set {need.key} in [rules] ({rule_place(tender, need.key)}) to {settings}, as the tender documents state it; "
        "a rule that is chosen after the opening of bids is open to protest."
    )
    rule = f"must be announced: {need.why}. {kind.question}"
    return Finding("rule-unset", f"rules.{need.key}", rule, need.place, need.got, bidder, lot, fix)


# What one offer needs


def _arithmetic(tender: Tender, lot: Lot, offer: Offer, check: PriceCheck) -> Iterator[_Need]:
    error = schedule_error(offer, lot, check)
    if error is None:
        return
    rules, place, text = tender.rules.announced, error.stated_total.place, error.stated_total.text
    yield _Need("arithmetic_errors", error.description, place, text, offer)
    if rules.arithmetic_errors != "correct":
        return
    exception = rules.misplaced_decimal
    if error.misplaced is not None:
        yield _Need("misplaced_decimal", error.description, place, text, offer)
    if error.misplaced is None or exception == "no exception" or (error.misplaced == "total" and exception is not None):
        yield _Need("unit_price_against_total", error.description, place, text, offer)


def _discounts(_tender: Tender, _lot: Lot, offer: Offer) -> Iterator[_Need]:
    stated = offer.terms
    for key, discount in (
        ("unconditional_discounts", stated.unconditional_discount_percent),
        ("prompt_payment_discounts", stated.prompt_payment_discount_percent),
    ):
        if discount is not None and discount.value > 0:
            yield _Need(key, "a bidder grants such a discount", discount.place, percent_text(discount), offer)


def _taxes(tender: Tender, _lot: Lot, offer: Offer) -> Iterator[_Need]:
    included = offer.terms.tax_included
    place = offer.columns.get("tax_included", offer.place)
    if included is True:
        yield _Need("taxes", "a price includes tax", place, "yes", offer)
    if tax_change(tender, offer) is not None and tender.taxes is None:
        got = "yes" if included else "no"
        yield _Need("taxes.rate_percent", "the rule on taxes changes a price by it", place, got, offer)


def _payments(tender: Tender, _lot: Lot, offer: Offer) -> Iterator[_Need]:
    if not payments_differ(offer, tender):
        return
    place = offer.terms.payments[0].share.place
    yield _Need("payment_terms", "a bidder states payments of its own", place, None, offer)
    if tender.rules.announced.payment_terms != "discount to a common date":
        return
    if tender.payment_terms is None:
        yield _Need("payment.interest_rate_percent", "payments are to be discounted", place, None, offer)
    elif not tender.payment_terms.payments:
        why = "payments of bidders are compared with the tender's own"
        yield _Need("payment.part", why, tender.payment_terms.place, None, offer)


def _items(tender: Tender, lot: Lot, offer: Offer) -> Iterator[_Need]:
    for item in missing_items(offer, lot):
        why = f"a bidder leaves the item {item.name} ({item.place}) without a price"
        yield _Need("missing_item", why, offer.place, None, offer)
        if tender.rules.announced.missing_item in ("highest of the others", "average of the others"):
            yield _Need("missing_item_among", why, offer.place, None, offer)


def _tolerance(_tender: Tender, _lot: Lot, offer: Offer) -> Iterator[_Need]:
    claimed = offer.terms.claimed_tolerance_percent
    if claimed is not None and claims_tolerance(offer):
        why = "a bidder claims a plus tolerance on its losses"
        yield _Need("loss_tolerance", why, claimed.place, percent_text(claimed), offer)


def _variation(_tender: Tender, _lot: Lot, offer: Offer) -> Iterator[_Need]:
    if offer.terms.price_basis == "variable":
        place = offer.columns.get("price_basis", offer.place)
        yield _Need("price_variation", "the price of a bidder follows an index", place, "variable", offer)


def _alternative(_tender: Tender, _lot: Lot, offer: Offer) -> Iterator[_Need]:
    stated = offer.alternative
    if stated is not None:
        yield _Need("alternatives", "a bidder offers an alternative", stated.place, stated.value, offer)


_FINDERS: tuple[Callable[[Tender, Lot, Offer], Iterator[_Need]], ...] = (
    _discounts,
    _taxes,
    _payments,
    _items,
    _tolerance,
    _variation,
    _alternative,
)

# What the tender itself, or all offers of a lot together, need


def _needs_of_tender(tender: Tender, offers: Sequence[Offer]) -> Iterator[_Need]:
    if tender.preference is not None:
        yield _Need("preference", "the tender states a margin", tender.preference.place)
    elif tender.rules.announced.preference == "margin added to other prices":
        why = "the rule on preference adds it"
        yield _Need("preference.margin_percent", why, rule_place(tender, "preference"))
    for lot in tender.lots:
        adder = lot.delivery_adder_percent_per_week or lot.delivery_adder_per_week
        if adder is not None and lot.delivery_without_adder_weeks is None:
            yield _Need("lot.delivery_without_adder_weeks", f"lot {lot.id} has an adder for each week", adder.place)
    yield from _delivery_terms(tender, offers)


def _delivery_terms(tender: Tender, offers: Sequence[Offer]) -> Iterator[_Need]:
    """Prices of one lot under different terms do not compare without a delivered point."""
    if tender.delivered_point is not None or tender.delivery_levels:
        return
    first: dict[str, str] = {}
    for offer in offers:
        stated = offer.terms.delivery_term
        if stated is None:
            continue
        known = first.setdefault(offer.lot.value, stated.value.upper())
        if known != stated.value.upper():
            why = f"prices of lot {offer.lot} hold under different delivery terms, {known} and {stated.value.upper()}"
            yield _Need("delivery.point", why, stated.place, stated.value, offer)


def check_exchange_day(tender: Tender, offers: Iterable[Offer]) -> Iterator[Finding]:
    """The exchange rates that the tender states are those of the day that its rule names.

    Parameters
    ----------
    tender : Tender
        With the rule and the rates with their date.
    offers : iterable of Offer
        Nothing is asked where all of them are in the evaluation currency.

    Yields
    ------
    Finding
        Where the date is another one, or the day that the rule names is not known.
    """
    rule, stated = tender.rules.announced.exchange_rate_day, tender.exchange
    home = tender.identity.currency.value
    foreign = any(offer.currency is not None and offer.currency.value != home for offer in offers)
    if rule is None or stated is None or not foreign:
        return
    place = rule_place(tender, "exchange_rate_day")
    missing, day = _exchange_day(tender, rule)
    if missing is not None:
        yield Finding("rule-unset", missing, f"must be announced: exchange rates are those of the {rule}", place)
    elif day is not None and stated.date != day:
        told = f"must be {day.isoformat()}: {rule} ({place})"
        fix = "State the rates of the day that the rule names, with that date."
        got = stated.date.isoformat()
        yield Finding("tender-conflict", "exchange.date", told, stated.source.place, got, fix=fix)


def _exchange_day(tender: Tender, rule: str) -> tuple[str | None, datetime.date | None]:
    """Key that is missing to know the day, or the day."""
    if rule == "day of award":
        return ("award.planned", None) if tender.planned_award is None else (None, tender.planned_award)
    opening = tender.identity.opening_date
    if opening is None:
        return "tender.opening_date", None
    if rule == "day of opening":
        return None, opening
    before = tender.rules.announced.exchange_rate_days_before
    if before is None:
        return "rules.exchange_rate_days_before", None
    earliest = opening.toordinal() - 1  # beyond it there are no dates
    return None, opening - datetime.timedelta(days=min(int(before.value), earliest))
