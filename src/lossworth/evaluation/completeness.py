"""Does an offer state everything that its evaluation needs? A missing loss is never zero."""

from __future__ import annotations

from collections.abc import Collection, Iterable

from ..findings import Effect, Finding
from ..records.bid import Offer, is_naturally_cooled
from ..records.tender import CoolingValuation, Lot, Tender
from .clerical_errors_suspicion import ASK
from .loss_basis import OfferOnBasis
from .result import LotRates

__all__ = ["check_completeness"]

_COOLING_POWERS = (
    ("cooling_power_no_load_kw", "cooling power at no load"),
    ("cooling_power_rated_kw", "cooling power at rated load"),
)


def check_completeness(
    judged: OfferOnBasis, lot: Lot, rates: LotRates, tender: Tender, known: Collection[Finding]
) -> tuple[Finding, ...]:
    """Findings on what an offer does not state.

    Parameters
    ----------
    judged : OfferOnBasis
        One offer with its losses on the tender's basis.
    lot : Lot
        Its lot, for the cooling.
    rates : LotRates
        The rates, which say whether the auxiliary loss is needed.
    tender : Tender
        For the currencies that can be converted.
    known : collection of Finding
        What intake already found on this offer; nothing is reported twice.

    Returns
    -------
    tuple of Finding
        Missing values, an unknown currency, and what is said of the auxiliary loss.
    """
    reported = {finding.field for finding in known if finding.effect is not Effect.NOTE}
    offer = judged.offer
    found = (
        *_missing(judged),
        *_currency(offer, tender),
        *_auxiliary(offer, lot, rates),
        *_cooling(offer, lot),
        *_cooling_differs(offer, lot),
    )
    return tuple(finding for finding in found if finding.field not in reported)


def _missing(judged: OfferOnBasis) -> Iterable[Finding]:
    offer = judged.offer
    needed = (
        ("unit_price", "unit price", offer.unit_price),
        ("no_load_loss_kw", "no-load loss", judged.no_load_loss),
        ("load_loss_kw", "load loss", judged.load_loss),
    )
    for name, label, value in needed:
        if value is None:
            place = offer.columns.get(name, offer.place)
            yield Finding("value-missing", label, "must be stated", place, "", offer.bidder.value, offer.lot.value)


def _currency(offer: Offer, tender: Tender) -> Iterable[Finding]:
    who = (offer.bidder.value, offer.lot.value)
    if offer.currency is None:
        yield Finding(
            "value-missing", "currency", "must be stated", offer.columns.get("currency", offer.place), "", *who
        )
        return
    rates = {} if tender.exchange is None else tender.exchange.rates
    if offer.currency.value != tender.identity.currency.value and offer.currency.value not in rates:
        known = ", ".join([tender.identity.currency.value, *rates])
        rule = f"must be a currency with an announced exchange rate ({known})"
        yield Finding("currency-unknown", "currency", rule, offer.currency.place, offer.currency.value, *who)


def _auxiliary(offer: Offer, lot: Lot, rates: LotRates) -> Iterable[Finding]:
    who = (offer.bidder.value, offer.lot.value)
    place = offer.columns.get("auxiliary_loss_kw", offer.place)
    stated = offer.auxiliary_loss_kw
    if rates.auxiliary is None:
        if stated is not None and stated.value > 0:
            rule = "is stated, but the tender values none"
            yield Finding("auxiliary-loss-not-valued", "auxiliary loss", rule, place, stated.text, *who)
        return
    if stated is not None:
        return
    cooling = (offer.cooling or lot.cooling).value
    if is_naturally_cooled(cooling):
        rule = f"blank, and zero by rule for {cooling}"
        yield Finding("auxiliary-loss-zero-by-rule", "auxiliary loss", rule, place, None, *who)
    else:
        rule = f"must be stated for a unit cooled {cooling}"
        yield Finding("value-missing", "auxiliary loss", rule, place, "", *who)


def _cooling(offer: Offer, lot: Lot) -> Iterable[Finding]:
    """Cooling powers, where cooling is valued through A and B."""
    if lot.cooling_valuation is not CoolingValuation.THROUGH_A_AND_B:
        return
    cooling = (offer.cooling or lot.cooling).value
    for name, label in _COOLING_POWERS:
        if getattr(offer, name) is None and not is_naturally_cooled(cooling):
            place = offer.columns.get(name, offer.place)
            rule = f"must be stated for a unit cooled {cooling}"
            yield Finding("value-missing", label, rule, place, "", offer.bidder.value, offer.lot.value)


def _cooling_differs(offer: Offer, lot: Lot) -> Iterable[Finding]:
    """A unit without fans or pumps where the tender asks for some: its blank auxiliary loss is zero by rule."""
    stated, asked = offer.cooling, lot.cooling
    if stated is None or is_naturally_cooled(asked.value) or not is_naturally_cooled(stated.value):
        return
    rule = f"must be {asked.value} as asked ({asked.place}); a blank auxiliary loss is zero by rule"
    fix = (
        f"{ASK}the tender asks for cooling {asked.value}. Please confirm the cooling that you offer, at which rating "
        "the losses are guaranteed, and the auxiliary loss of fans and pumps, if there are any."
    )
    yield Finding(
        "cooling-differs", "cooling", rule, stated.place, stated.value, offer.bidder.value, offer.lot.value, fix
    )
