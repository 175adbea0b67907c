"""One lot: every offer corrected, checked, priced and costed, missing items filled in by rule, and all ranked."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, replace

from ..findings import Effect, Finding, Place
from ..records.bid import Offer
from ..records.decision import Decision
from ..regulations.limits import Limit
from .alternatives import left_out, may_stand_in, needs_ranking
from .clerical_errors_comparison import LotSeen
from .commercial_checks import check_terms
from .completeness import check_completeness
from .corrections import Corrected, correct_schedule
from .information import information
from .items import ItemPrices, priced_items
from .loss_basis import OfferOnBasis, on_basis
from .owning_cost import CostBasis, OfferPrice, owning_cost
from .pricing import UnitPrice, contract_price, items_price, unit_price
from .ranking import rank_offers
from .regulation_limits import check_regulation
from .responsiveness import check_offer
from .result import Correction, EvaluatedOffer, PriceStep, Status
from .schedule_error import PriceCheck, price_levels
from .ties import TieOrder, drawn_places
from .waivers import decided, decisions_on

__all__ = ["LotWork", "OfferWork", "evaluate_offers"]


@dataclass(frozen=True, slots=True)
class OfferWork:
    """One offer on its way into the evaluation.

    Parameters
    ----------
    as_read : Offer
        As read.
    used : Offer
        The same with confirmed values in their place.
    found : tuple of Finding
        What is known of it before the evaluation.
    confirmed : tuple of Correction
        Values that the bidder confirmed.
    confirming : tuple of Decision
        The decisions behind them.
    """

    as_read: Offer
    used: Offer
    found: tuple[Finding, ...] = ()
    confirmed: tuple[Correction, ...] = ()
    confirming: tuple[Decision, ...] = ()


@dataclass(frozen=True, slots=True)
class LotWork:
    """What the offers of a lot share.

    Parameters
    ----------
    basis : CostBasis
        Tender, lot, rates, exchange rates, quantity.
    limits : tuple of Limit
        Of the regulation that the lot names.
    decisions : tuple of Decision
        On the lot, in the order of their file.
    stated_by_some : frozenset of str
        Terms that at least one offer states.
    """

    basis: CostBasis
    limits: tuple[Limit, ...]
    decisions: tuple[Decision, ...]
    stated_by_some: frozenset[str]


@dataclass(frozen=True, slots=True)
class _Draft:
    """An offer with everything that does not hang on other offers."""

    work: OfferWork
    judged: OfferOnBasis
    corrected: Corrected
    price: UnitPrice | None
    items: ItemPrices
    findings: tuple[Finding, ...]
    decisions: tuple[Decision, ...]

    @property
    def offer(self) -> Offer:
        """The offer as evaluated."""
        return self.judged.offer


def evaluate_offers(lot: LotWork, offers: Sequence[OfferWork]) -> tuple[EvaluatedOffer, ...]:
    """Evaluate and rank the offers of a lot.

    Parameters
    ----------
    lot : LotWork
        What they share.
    offers : sequence of OfferWork
        In any order.

    Returns
    -------
    tuple of EvaluatedOffer
        Ranked first, then non-responsive, then not evaluated.
    """
    seen = LotSeen(lot.basis.tender, lot.basis.lot, [offer.used for offer in offers])
    drafts = [_draft(lot, offer, seen) for offer in offers]
    counting = _whose_prices_count(lot, drafts)
    evaluated = [_finished(lot, draft, counting) for draft in drafts]
    order = TieOrder(lot.basis.rules.announced.tie_order or (), drawn_places(lot.decisions, lot.basis.lot.id))
    evaluated = _by_rule_on_alternatives(lot, evaluated, order)
    return rank_offers(evaluated, lot.basis.rates, lot.basis.quantity, order)


def _draft(lot: LotWork, work: OfferWork, seen: LotSeen) -> _Draft:
    basis, offer = lot.basis, work.used
    decisions = decisions_on(offer, lot.decisions)
    judged = on_basis(offer, basis.lot)
    found = (*work.found, *judged.findings)
    complete = check_completeness(judged, basis.lot, basis.rates, basis.tender, found)
    limits = (*check_offer(judged, basis.lot), *check_regulation(judged, basis.lot, lot.limits))
    is_confirmed = any(each.field is not None and each.field.value == "unit_price" for each in work.confirming)
    check = PriceCheck(price_levels(offer, seen), is_confirmed)
    corrected = correct_schedule(offer, basis.tender, basis.lot, basis.quantity, decisions, check)
    price = unit_price(offer, corrected, basis.tender, basis.lot, basis.exchange_rates)
    terms = check_terms(offer, basis.tender, lot.stated_by_some)
    priced = () if price is None else price.findings
    findings = (*found, *complete, *_new((*limits, *priced), found), *corrected.findings, *terms)
    items = priced_items(offer, basis.lot, basis.tender, basis.exchange_rates)
    return _Draft(work, judged, corrected, price, items, findings, decisions)


def _new(later: Iterable[Finding], before: tuple[Finding, ...]) -> tuple[Finding, ...]:
    """Later findings, less those on a value of which it is known already that it cannot be read."""
    unread = {finding.field for finding in before if finding.effect is Effect.NOT_EVALUATED}
    repeated = ("limit-not-answered", "value-missing")
    return tuple(f for f in later if f.kind not in repeated or f.field not in unread)


def _whose_prices_count(lot: LotWork, drafts: Sequence[_Draft]) -> tuple[ItemPrices, ...]:
    """Item prices that may stand in for a missing one, by the tender's rule."""
    status = {
        draft.offer.name: _status(decided(draft.work.as_read, draft.findings, draft.decisions).findings)
        for draft in drafts
    }
    only_responsive = lot.basis.rules.announced.missing_item_among == "responsive offers"
    return tuple(
        draft.items
        for draft in drafts
        if may_stand_in(draft.offer, lot.basis.tender, status)
        and (status[draft.offer.name] is Status.RANKED or not only_responsive)
    )


def _finished(lot: LotWork, draft: _Draft, counting: Sequence[ItemPrices]) -> EvaluatedOffer:
    basis, offer, corrected = lot.basis, draft.offer, draft.corrected
    items = items_price(offer, draft.items, basis.lot, basis.tender, counting)
    known = draft.price is not None and not _leave_unevaluated(draft.price.findings)
    price = OfferPrice(draft.price if known else None, items)
    per_unit, whole = owning_cost(draft.judged, basis, price)
    unread = _unread(decided(offer, draft.findings, draft.decisions).findings)
    of_items = tuple(finding for finding in items.findings if finding.place not in unread)
    judged = decided(offer, (*draft.findings, *of_items), draft.decisions)
    if _status(judged.findings) is Status.RANKED and whole.total_owning_cost is None:
        judged = replace(judged, findings=(*judged.findings, _no_total(offer)))
    confirmed = draft.work.confirmed
    evaluated = EvaluatedOffer(
        draft.judged,
        _status(judged.findings),
        per_unit,
        whole,
        judged.findings,
        information(basis.tender, basis.lot, basis.rates, draft.judged),
        as_read=None if offer is draft.work.as_read else draft.work.as_read,
        corrections=(*confirmed, *corrected.corrections),
        contract_price=contract_price(offer, corrected, basis.lot, basis.quantity),
        total_without_preference=None,
        decisions=(*draft.work.confirming, *corrected.decisions, *judged.used),
    )
    return replace(_with_preference(evaluated, basis, price), price_steps=_steps(draft.price, price, evaluated, basis))


def _unread(findings: Iterable[Finding]) -> frozenset[Place]:
    """Places of values that cannot be read: none of them is missing."""
    kinds = ("value-unreadable", "value-out-of-bounds", "value-not-read")
    return frozenset(f.place for f in findings if f.place is not None and f.kind in kinds and not f.waiver)


def _no_total(offer: Offer) -> Finding:
    """What keeps an offer unranked whatever was waived."""
    rule = "cannot be computed from what the offer states"
    return Finding("value-missing", "total owning cost", rule, offer.place, None, offer.bidder.value, offer.lot.value)


def _leave_unevaluated(findings: Iterable[Finding]) -> bool:
    return any(finding.effect is Effect.NOT_EVALUATED for finding in findings)


def _with_preference(offer: EvaluatedOffer, basis: CostBasis, price: OfferPrice) -> EvaluatedOffer:
    """The offer with its total without a margin, where the tender has a preference."""
    tender = basis.tender
    if tender.preference is None or tender.rules.announced.preference != "margin added to other prices":
        return offer
    if not price.has_margin:
        return replace(offer, total_without_preference=offer.lot.total_owning_cost)
    _, without = owning_cost(offer.on_basis, basis, price, with_preference=False)
    return replace(
        offer,
        total_without_preference=without.total_owning_cost,
        price_without_preference=without.evaluated_price,
    )


def _steps(
    chain: UnitPrice | None, price: OfferPrice, offer: EvaluatedOffer, basis: CostBasis
) -> tuple[PriceStep, ...]:
    """The whole chain, with its rounded ends."""
    if chain is None:
        return ()
    rounding = f"Money is {basis.rules.rounding}, applied to {basis.rules.rounding_applies_to.value}."
    steps = list(chain.steps)
    unit, lot = offer.per_unit.evaluated_price, offer.lot.evaluated_price
    if unit is not None:
        steps.append(PriceStep("evaluated", "evaluated price per unit", "unit", "", None, unit, rounding))
    steps += price.items.steps
    if price.items.steps and lot is not None:
        steps.append(PriceStep("evaluated", "evaluated price of the lot", "lot", "", None, lot, rounding))
    return tuple(steps)


def _status(findings: Iterable[Finding]) -> Status:
    effects = {finding.effect for finding in findings}
    if Effect.NOT_EVALUATED in effects:
        return Status.NOT_EVALUATED
    return Status.NON_RESPONSIVE if Effect.NON_RESPONSIVE in effects else Status.RANKED


def _by_rule_on_alternatives(lot: LotWork, offers: Sequence[EvaluatedOffer], order: TieOrder) -> list[EvaluatedOffer]:
    """Offers with those alternatives left out that the tender's rule does not let in."""
    tender = lot.basis.tender
    if all(offer.offer.alternative is None for offer in offers):
        return list(offers)
    bases = [offer for offer in offers if offer.offer.alternative is None]
    first: frozenset[str] = frozenset()
    if needs_ranking(tender):
        ranked = rank_offers(bases, lot.basis.rates, lot.basis.quantity, order)
        first = frozenset(offer.bidder for offer in ranked if offer.rank == 1)
    judged = []
    for offer in offers:
        finding = left_out(offer.offer, tender, bases, first)
        if finding is None:
            judged.append(offer)
        else:
            findings = (*offer.findings, finding)
            judged.append(replace(offer, findings=findings, status=_status(findings)))
    return judged


def findings_by_offer(
    offers: Sequence[Offer], findings: Iterable[Finding]
) -> Mapping[tuple[str, str], tuple[Finding, ...]]:
    """Findings that are known before the evaluation, by the offer that they are about.

    Parameters
    ----------
    offers : sequence of Offer
        As read.
    findings : iterable of Finding
        They name a bidder and a lot, which an alternative shares with its base offer: there the row decides, and a
        finding on no row of them is about all.

    Returns
    -------
    mapping of (str, str) to tuple of Finding
        By name of the offer and lot.
    """
    about: dict[tuple[str | None, str | None], list[Finding]] = {}
    for finding in findings:
        about.setdefault((finding.bidder, finding.lot), []).append(finding)
    siblings: dict[tuple[str, str], list[Offer]] = {}
    for offer in offers:
        siblings.setdefault((offer.bidder.value, offer.lot.value), []).append(offer)
    shared: dict[tuple[str, str], tuple[Finding, ...]] = {}
    for key, same in siblings.items():
        rows = {offer.name: _rows(offer) for offer in same}
        for offer in same:
            others = set().union(*(row for name, row in rows.items() if name != offer.name))
            shared[offer.name, key[1]] = tuple(
                f for f in about.get(key, ()) if f.place is None or _row(f.place) not in others - rows[offer.name]
            )
    return shared


def _rows(offer: Offer) -> set[tuple[str, str | None, str]]:
    return {_row(place) for place in (offer.place, *offer.columns.values())}


def _row(place: Place) -> tuple[str, str | None, str]:
    """File, sheet and row of a place."""
    row = "".join(c for c in place.cell or "" if c.isdigit()) or str(place.line)
    return place.file, place.sheet, row
