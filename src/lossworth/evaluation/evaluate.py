"""The evaluation of a tender, from checked records to ranked lots."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from itertools import groupby

from ..errors import EvaluationStopped
from ..findings import Finding, any_stops, in_reading_order
from ..records.bid import Offer
from ..records.decision import Decision
from ..records.rule_profiles import RULE_PROFILES, profile_named, settled_rules
from ..records.tender import Lot, Tender
from ..trail import Figure, read
from .announced import rule_place
from .clerical_errors import find_clerical_errors
from .commercial_checks import terms_stated
from .decisions import Confirmed, apply_confirmations, settled_by
from .identities import figure_id
from .load_and_price import check_load_and_price
from .lot_evaluation import LotWork, OfferWork, evaluate_offers, findings_by_offer
from .lot_rates import lot_rates
from .needed_rules import check_exchange_day, needed_rules
from .owning_cost import CostBasis
from .price_adders import check_delivered_point, margin_share
from .pricing import exchange_rates
from .regulation_limits import check_regulations_of_tender, regulation_cautions, regulation_limits
from .result import EvaluatedOffer, Evaluation, LotEvaluation
from .waivers import unused_decisions

__all__ = ["evaluate"]


def evaluate(
    tender: Tender,
    offers: Iterable[Offer],
    findings: Iterable[Finding] = (),
    decisions: Iterable[Decision] = (),
) -> Evaluation:
    """Evaluate all lots of a tender.

    Parameters
    ----------
    tender : Tender
        As announced.
    offers : iterable of Offer
        As read, in any order.
    findings : iterable of Finding
        What intake found; findings on an offer decide its status.
    decisions : iterable of Decision
        In the order of their file: values that bidders confirmed, answers to corrections, waivers, changed statuses,
        drawings of lots.

    Returns
    -------
    Evaluation
        Rates, costs, ranks, and all findings.

    Raises
    ------
    EvaluationStopped
        If a finding stops the evaluation; a rule that is needed and not announced does.

    References
    ----------
    .. [1] REA Bulletin 65-2 (1978) / RUS Bulletin 1724E-301 (1997): rates times guaranteed losses are added to the
       bid price for evaluation.
    """
    offers, decisions = tuple(offers), tuple(decisions)
    known = (*findings, *_check_profile(tender))
    if any_stops(known):
        raise EvaluationStopped(known)
    tender = _settled(tender)
    confirmed = apply_confirmations(tender, offers, decisions)
    known = (
        *settled_by(known, confirmed.confirmations, offers),
        *confirmed.findings,
        *check_load_and_price(tender),
        *check_delivered_point(tender),
        *check_regulations_of_tender(tender),
        *needed_rules(tender, confirmed.offers, confirmed.settled),
        *check_exchange_day(tender, offers),
    )
    if any_stops(known):
        raise EvaluationStopped(known)
    by_name = sorted(confirmed.offers, key=lambda offer: offer.name)
    questions = find_clerical_errors(tender, by_name, confirmed.settled)
    known = (*known, *(question.finding for question in questions))
    rates = exchange_rates(tender)
    work = _work_by_lot(tender, offers, confirmed, known)
    lots = tuple(_evaluate_lot(tender, lot, work[lot.id], rates, decisions) for lot in tender.lots)
    own = (finding for lot in lots for offer in lot.offers for finding in offer.findings)
    about_lots = (finding for lot in lots for finding in _check_lot(tender, lot))
    about_decisions = _unused(decisions, lots)
    all_findings = (*_unwaived(known, lots), *own, *about_lots, *about_decisions)
    return Evaluation(tender, lots, rates, in_reading_order(all_findings), decisions)


def _check_profile(tender: Tender) -> Iterable[Finding]:
    name = tender.rules.announced.profile
    if name is not None and profile_named(name.value) is None:
        known = ", ".join(f'"{profile.name}"' for profile in RULE_PROFILES)
        yield Finding("tender-value", "rules.profile", f"must be one of {known}", name.place, name.value)


def _settled(tender: Tender) -> Tender:
    """The tender with the rules that its profile sets."""
    if tender.rules.announced.profile is None:
        return tender
    rules = tender.rules.model_copy(update={"announced": settled_rules(tender.rules.announced)})
    return tender.model_copy(update={"rules": rules})


def _work_by_lot(
    tender: Tender, offers: Sequence[Offer], confirmed: Confirmed, known: Sequence[Finding]
) -> dict[str, list[OfferWork]]:
    about = findings_by_offer(offers, known)
    by_lot: dict[str, list[OfferWork]] = {lot.id: [] for lot in tender.lots}
    for offer, used in zip(offers, confirmed.offers, strict=True):
        key = (offer.name, offer.lot.value)
        own = [each for each in confirmed.confirmations if (each.offer, each.lot) == key]
        corrections = tuple(each for each in (one.as_correction() for one in own) if each is not None)
        decisions = tuple(each.decision for each in own)
        by_lot[offer.lot.value].append(OfferWork(offer, used, about[key], corrections, decisions))
    return by_lot


def _evaluate_lot(
    tender: Tender,
    lot: Lot,
    offers: Sequence[OfferWork],
    exchange: Mapping[str, Figure],
    decisions: Iterable[Decision],
) -> LotEvaluation:
    rates = lot_rates(tender, lot)
    quantity = read(figure_id(f"lot {lot.id}", "quantity"), "quantity", lot.quantity.value, "units", lot.quantity.place)
    basis = CostBasis(tender, lot, rates, exchange, quantity)
    on_lot = tuple(decision for decision in decisions if decision.lot.value == lot.id)
    work = LotWork(basis, regulation_limits(lot), on_lot, terms_stated(offer.used for offer in offers))
    return LotEvaluation(lot, quantity, rates, evaluate_offers(work, offers))


def _unwaived(known: Iterable[Finding], lots: Iterable[LotEvaluation]) -> tuple[Finding, ...]:
    """Findings known before, less those that stand waived beside an offer."""
    waived = {
        (finding.kind, finding.place, finding.bidder, finding.lot)
        for lot in lots
        for offer in lot.offers
        for finding in offer.findings
        if finding.waiver
    }
    return tuple(f for f in known if (f.kind, f.place, f.bidder, f.lot) not in waived)


def _unused(decisions: Iterable[Decision], lots: Iterable[LotEvaluation]) -> tuple[Finding, ...]:
    used: list[Decision] = []
    drew: set[tuple[str, str]] = set()
    for lot in lots:
        for offer in lot.offers:
            used += offer.decisions
            if offer.tie_decided_by == "drawing of lots":
                drew.add((offer.name, lot.lot.id))
    others = [decision for decision in decisions if decision.kind != "confirm value"]
    used += [d for d in others if d.kind == "break tie" and (d.bidder.value, d.lot.value) in drew]
    return unused_decisions(others, used)


# What is said of a whole lot


def _check_lot(tender: Tender, lot: LotEvaluation) -> Iterable[Finding]:
    yield from regulation_cautions(lot.lot, regulation_limits(lot.lot))
    place = lot.lot.place
    if not lot.ranked:
        rule = f"none of {len(lot.offers)} offers can be ranked" if lot.offers else "no offer was received"
        yield Finding("lot-without-ranking", "ranking", rule, place, lot=lot.lot.id)
    yield from _ties(tender, lot)
    yield from _preference(tender, lot)
    yield from _waivers(lot)


def _ties(tender: Tender, lot: LotEvaluation) -> Iterable[Finding]:
    """A tie on rank 1 that stays, and every tie that was broken."""
    if len(lot.winners) > 1:
        names = ", ".join(offer.name for offer in lot.winners)
        yield Finding("tie", "rank 1", f"is shared by {names}", lot.lot.place, lot=lot.lot.id)
    for _, same in groupby(lot.ranked, key=_total):
        offers = list(same)
        if any(offer.tie_decided_by for offer in offers):
            placed = ", ".join(f"{offer.rank} {offer.name} ({offer.tie_decided_by or 'tie'})" for offer in offers)
            rule = f"is shared by total owning cost and broken by the announced order: {placed}"
            place = rule_place(tender, "tie_order")
            yield Finding("tie-broken", f"rank {offers[0].rank}", rule, place, lot=lot.lot.id)


def _total(offer: EvaluatedOffer) -> object:
    return None if offer.lot.total_owning_cost is None else offer.lot.total_owning_cost.value


def _preference(tender: Tender, lot: LotEvaluation) -> Iterable[Finding]:
    stated = tender.preference
    margins = [margin_share(offer.on_basis.offer, tender) for offer in lot.ranked]
    if stated is not None and margins and all(margin is not None for margin in margins):
        rule = f"has no ranked offer in this lot, and the margin lies on all prices ({stated.place})"
        yield Finding("preference-without-group", f"group {stated.group}", rule, stated.place, lot=lot.lot.id)


def _waivers(lot: LotEvaluation) -> Iterable[Finding]:
    """Ranked offers that stand before others by a waiver."""
    for offer in lot.ranked:
        if not any(finding.waiver for finding in offer.findings):
            continue
        behind = [
            other.name
            for other in lot.ranked
            if (other.rank or 0) > (offer.rank or 0) and not any(finding.waiver for finding in other.findings)
        ]
        if behind:
            waived = next(finding for finding in offer.findings if finding.waiver)
            rule = f"is by a waiver before {', '.join(behind)}"
            yield Finding(
                "waiver-moves-ranking", f"rank {offer.rank}", rule, waived.place, None, offer.bidder, lot.lot.id
            )
