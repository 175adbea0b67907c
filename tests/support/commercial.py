"""Commercial terms, items, adders and decisions for tests: valid by default, a test changes one. All are invented."""

from __future__ import annotations

import datetime
from typing import Any

from lossworth.evaluation.evaluate import evaluate
from lossworth.evaluation.result import EvaluatedOffer, Evaluation
from lossworth.findings import Place
from lossworth.records.bid import Offer
from lossworth.records.commercial import (
    DeliveryLevel,
    Item,
    OfferTerms,
    Payment,
    PaymentTerms,
    Preference,
    SiteCost,
    Taxes,
)
from lossworth.records.decision import Decision
from lossworth.records.quantity import Entry
from lossworth.records.rules import AnnouncedRules
from lossworth.records.tender import RoundingPoint, Rules, Tender

from . import records

quantity, entry, place = records.quantity, records.entry, records.place


def rules(point: RoundingPoint = RoundingPoint.PART_PER_UNIT, **settings: Any) -> Rules:
    """Rules that round to a cent, with the settings given."""
    places = {key: Place("tender.toml", line=20 + number) for number, key in enumerate(settings)}
    announced = AnnouncedRules(places=places, **settings)
    return Rules(rounding=records.CENT, rounding_applies_to=point, announced=announced, place=place(9))


def tender(*lots: Any, settings: dict[str, Any] | None = None, **changes: Any) -> Tender:
    """A tender with announced settings."""
    return records.tender(*lots, rules=rules(**(settings or {})), **changes)


def bid(bidder: str = "Alder", price: str = "4000", lot: str = "1", **changes: Any) -> Offer:
    """An offer by its price; fields of its commercial terms may be given beside its own."""
    own = {name: value for name, value in changes.items() if name in Offer.model_fields}
    terms = {name: value for name, value in changes.items() if name not in Offer.model_fields}
    if isinstance(own.get("alternative"), str):
        own["alternative"] = entry(own["alternative"])
    fields: dict[str, Any] = {"unit_price": quantity(price, "NCU"), "terms": OfferTerms(**terms)}
    fields |= {"place": Place(f"bids/{bidder.lower()}.csv", line=2 + len(changes))} | own
    return records.offer(bidder, lot, **fields)


def item(name: str = "spare bushing", pieces: str = "4", *, counts: bool = True) -> Item:
    """A further item of a lot."""
    return Item(name=entry(name), quantity=quantity(pieces), counts=counts, place=place(60))


def level(term: str, percent: str | None = None, amount: str | None = None) -> DeliveryLevel:
    """Adder from a delivery term to the delivered point."""
    return DeliveryLevel(
        term=term,  # type: ignore[arg-type]
        percent_of_price=None if percent is None else quantity(percent),
        amount_per_unit=None if amount is None else quantity(amount),
        place=place(40),
    )


def payment(share: str, weeks: str) -> Payment:
    """A payment: share of the price, weeks after the order."""
    return Payment(share=quantity(share), weeks_after_order=quantity(weeks))


def payment_terms(interest: str = "10", *payments: Payment) -> PaymentTerms:
    """The tender's own payments; all of the price after 52 weeks where none are given."""
    own = payments or (payment("1", "52"),)
    return PaymentTerms(interest_rate_percent=quantity(interest), payments=own, place=place(50))


def taxes(rate: str = "10") -> Taxes:
    """A tax."""
    return Taxes(rate_percent=quantity(rate), place=place(45))


def preference(margin: str = "7.5", group: str = "home") -> Preference:
    """A margin on the prices of offers outside of a group."""
    return Preference(group=entry(group), margin_percent=quantity(margin), place=place(48))


def site_cost(name: str = "bund", amount: str = "300", **conditions: Any) -> SiteCost:
    """A cost at the site."""
    return SiteCost(name=entry(name), amount_per_unit=quantity(amount), place=place(70), **conditions)


def decide(kind: str, bidder: str = "Alder", lot: str = "1", line: int = 3, **fields: Any) -> Decision:
    """A recorded decision."""
    at = Place("decisions.toml", line=line)
    texts = {name: Entry(value=value, place=at) for name, value in fields.items() if name == "field"}
    others = {name: value for name, value in fields.items() if name != "field"}
    return Decision(
        kind=kind,  # type: ignore[arg-type]
        bidder=Entry(value=bidder, place=at),
        lot=Entry(value=lot, place=at),
        reason=Entry(value="letter of the bidder", place=at),
        who=Entry(value="the committee", place=at),
        when=datetime.date(2026, 9, 25),
        evidence=Entry(value="file 7", place=at),
        place=at,
        **texts,
        **others,
    )


def ranks(evaluation: Evaluation, lot: int = 0) -> dict[str, int | None]:
    """Rank by name of the offer, in the order of the papers."""
    return {offer.name: offer.rank for offer in evaluation.lots[lot].offers}


def first(tender: Tender, *offers: Offer, decisions: tuple[Decision, ...] = ()) -> list[str]:
    """Names on rank 1 of the first lot."""
    return [offer.name for offer in evaluate(tender, offers, (), decisions).lots[0].winners]


def only(tender: Tender, *offers: Offer, decisions: tuple[Decision, ...] = (), bidder: str = "Alder") -> EvaluatedOffer:
    """The evaluated offer of this name in the first lot."""
    (found,) = (o for o in evaluate(tender, offers, (), decisions).lots[0].offers if o.name == bidder)
    return found


def kinds(offer: EvaluatedOffer) -> list[str]:
    """Kinds of the findings on an offer, questions to the bidder left out."""
    return [finding.kind for finding in offer.findings if not finding.kind.startswith("apparent-error")]
