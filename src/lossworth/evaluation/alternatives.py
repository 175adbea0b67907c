"""Alternatives: offers beside the base offer of the same bidder, evaluated as far as the tender's rule lets them."""

from __future__ import annotations

from collections.abc import Collection, Mapping, Sequence

from ..findings import Finding
from ..records.bid import Offer
from ..records.tender import Tender
from .announced import rule_clause
from .result import EvaluatedOffer, Status

__all__ = ["left_out", "may_stand_in", "needs_ranking"]


def needs_ranking(tender: Tender) -> bool:
    """Whether the rule on alternatives hangs on the ranking of the base offers.

    Parameters
    ----------
    tender : Tender
        With its rule.

    Returns
    -------
    bool
        True for "only of the lowest ranked base bidder".
    """
    return tender.rules.announced.alternatives == "only of the lowest ranked base bidder"


def left_out(offer: Offer, tender: Tender, bases: Sequence[EvaluatedOffer], first: Collection[str]) -> Finding | None:
    """Why an alternative is not evaluated.

    Parameters
    ----------
    offer : Offer
        Any offer.
    tender : Tender
        With its rule; it must be set where there is an alternative.
    bases : sequence of EvaluatedOffer
        Base offers of the lot with their status.
    first : collection of str
        Bidders whose base offer ranks first.

    Returns
    -------
    Finding or None
        None for a base offer, and for an alternative that the rule lets in.
    """
    if offer.alternative is None:
        return None
    reason = _reason(offer, tender.rules.announced.alternatives, bases, first)
    if reason is None:
        return None
    rule = f"{reason}; {rule_clause(tender, 'alternatives')}"
    stated = offer.alternative
    return Finding(
        "alternative-not-evaluated",
        "alternative",
        rule,
        stated.place,
        stated.value,
        offer.bidder.value,
        offer.lot.value,
    )


def may_stand_in(offer: Offer, tender: Tender, status: Mapping[str, Status]) -> bool:
    """Whether the rule on alternatives lets the item prices of an offer stand in for those of others.

    Parameters
    ----------
    offer : Offer
        Any offer.
    tender : Tender
        With its rule.
    status : mapping of str to Status
        Status of the offers of the lot by their names, before items that they do not price.

    Returns
    -------
    bool
        True for a base offer. An alternative of which only the ranking tells whether it is let in supplies no price:
        the ranking hangs on these prices.
    """
    setting = tender.rules.announced.alternatives
    if offer.alternative is None or setting == "as offers of their own":
        return True
    return setting == "only if the base offer is responsive" and status.get(offer.bidder.value) is Status.RANKED


def _reason(offer: Offer, setting: str | None, bases: Sequence[EvaluatedOffer], first: Collection[str]) -> str | None:
    bidder = offer.bidder.value
    if setting == "not accepted":
        return "is not accepted"
    if setting == "only if the base offer is responsive":
        own = [base for base in bases if base.bidder == bidder]
        if not own:
            return "has no base offer of the bidder beside it"
        return None if own[0].status is Status.RANKED else f"stands beside a base offer that is {own[0].status.value}"
    if setting == "only of the lowest ranked base bidder" and bidder not in first:
        return "is of a bidder whose base offer does not rank first"
    return None
