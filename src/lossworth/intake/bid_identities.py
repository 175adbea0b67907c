"""Who offers what: offers given twice, alternatives without base offer."""

from __future__ import annotations

import unicodedata
from collections.abc import Iterator, Sequence

from ..findings import Finding
from ..records.bid import Offer
from .suggestions import did_you_mean

__all__ = ["check_identities"]


def check_identities(offers: Sequence[Offer]) -> Iterator[Finding]:
    """Compare all offers of a run with each other.

    Parameters
    ----------
    offers : sequence of Offer
        In the order of files and rows.

    Yields
    ------
    Finding
        On an offer of a bidder for a lot that is given twice, also under names that look alike, and on an alternative
        whose bidder makes no base offer for the lot.
    """
    yield from _given_twice(offers)
    yield from _without_base(offers)


def _given_twice(offers: Sequence[Offer]) -> Iterator[Finding]:
    first: dict[tuple[str, str], Offer] = {}
    for offer in offers:
        before = first.setdefault((_looks(offer.name), offer.lot.value.casefold()), offer)
        if before is not offer:
            rule = f"must be given once; {before.place} has one too"
            got = None if offer.alternative is None else offer.alternative.value
            yield Finding("offer-twice", "offer", rule, offer.place, got, offer.bidder.value, offer.lot.value)


def _looks(name: str) -> str:
    """Name as people tell it from others: without regard to capitals, widths of letters and what is invisible."""
    if name.isascii():
        return name.casefold()
    plain = unicodedata.normalize("NFKC", name)
    return "".join(each for each in plain if unicodedata.category(each) != "Cf").casefold()


def _without_base(offers: Sequence[Offer]) -> Iterator[Finding]:
    bases: dict[str, list[str]] = {}
    for offer in offers:
        if offer.alternative is None:
            bases.setdefault(offer.lot.value, []).append(offer.bidder.value)
    for offer in offers:
        stated, own = offer.alternative, bases.get(offer.lot.value, [])
        if stated is not None and offer.bidder.value not in own:
            rule = "stands beside no base offer of the bidder for the lot"
            fix = did_you_mean(offer.bidder.value, own)
            who = (offer.bidder.value, offer.lot.value)
            yield Finding("alternative-without-base", "alternative", rule, stated.place, stated.value, *who, fix)
