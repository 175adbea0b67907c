"""The evaluation of a tender, from checked records to ranked lots."""

from __future__ import annotations

from collections.abc import Iterable, Mapping

from ..errors import EvaluationStopped
from ..findings import Effect, Finding, any_stops, in_reading_order
from ..records.bid import Offer
from ..records.tender import Lot, Tender
from ..trail import Figure, read
from .completeness import check_completeness
from .identities import figure_id
from .information import information
from .load_and_price import check_load_and_price
from .loss_basis import on_basis
from .lot_rates import lot_rates
from .owning_cost import CostBasis, owning_cost
from .pricing import exchange_rates
from .ranking import rank_offers
from .responsiveness import check_offer
from .result import EvaluatedOffer, Evaluation, LotEvaluation, Status

__all__ = ["evaluate"]


def evaluate(tender: Tender, offers: Iterable[Offer], findings: Iterable[Finding] = ()) -> Evaluation:
    """Evaluate all lots of a tender.

    Parameters
    ----------
    tender : Tender
        As announced.
    offers : iterable of Offer
        As read, in any order.
    findings : iterable of Finding
        What intake found; findings on an offer decide its status.

    Returns
    -------
    Evaluation
        Rates, costs, ranks, and all findings.

    Raises
    ------
    EvaluationStopped
        If a finding stops the evaluation.

    References
    ----------
    .. [1] REA Bulletin 65-2 (1978) / RUS Bulletin 1724E-301 (1997): rates times guaranteed losses are added to the
       bid price for evaluation.
    """
    known = (*findings, *check_load_and_price(tender))
    if any_stops(known):
        raise EvaluationStopped(known)
    rates = exchange_rates(tender)
    by_lot: dict[str, list[Offer]] = {lot.id: [] for lot in tender.lots}
    for offer in offers:
        by_lot[offer.lot.value].append(offer)
    lots = tuple(_evaluate_lot(tender, lot, by_lot[lot.id], rates, known) for lot in tender.lots)
    own = (finding for lot in lots for offer in lot.offers for finding in offer.findings)
    about_lots = (finding for lot in lots for finding in _check_lot(lot))
    return Evaluation(tender, lots, rates, in_reading_order((*known, *own, *about_lots)))


def _evaluate_lot(
    tender: Tender, lot: Lot, offers: Iterable[Offer], exchange: Mapping[str, Figure], known: tuple[Finding, ...]
) -> LotEvaluation:
    rates = lot_rates(tender, lot)
    quantity = read(figure_id(f"lot {lot.id}", "quantity"), "quantity", lot.quantity.value, "units", lot.quantity.place)
    basis = CostBasis(tender.identity.currency.value, lot, rates, exchange, quantity, tender.rules)
    evaluated = [_evaluate_offer(tender, offer, basis, known) for offer in offers]
    return LotEvaluation(lot, quantity, rates, rank_offers(evaluated, rates, quantity))


def _evaluate_offer(tender: Tender, offer: Offer, basis: CostBasis, known: tuple[Finding, ...]) -> EvaluatedOffer:
    before = tuple(f for f in known if f.bidder == offer.bidder.value and f.lot == offer.lot.value)
    judged = on_basis(offer, basis.lot)
    found = (*before, *judged.findings)
    complete = check_completeness(judged, basis.lot, basis.rates, tender, found)
    findings = (*found, *complete, *_new(check_offer(judged, basis.lot), found))
    per_unit, lot = owning_cost(judged, basis)
    facts = information(tender, basis.lot, basis.rates, judged)
    return EvaluatedOffer(judged, _status(findings), per_unit, lot, findings, facts)


def _new(limits: Iterable[Finding], before: tuple[Finding, ...]) -> tuple[Finding, ...]:
    """Findings on limits, less those on a value of which it is known already that it cannot be read."""
    unread = {finding.field for finding in before if finding.effect is Effect.NOT_EVALUATED}
    return tuple(f for f in limits if f.kind != "limit-not-answered" or f.field not in unread)


def _status(findings: Iterable[Finding]) -> Status:
    effects = {finding.effect for finding in findings}
    if Effect.NOT_EVALUATED in effects:
        return Status.NOT_EVALUATED
    return Status.NON_RESPONSIVE if Effect.NON_RESPONSIVE in effects else Status.RANKED


def _check_lot(lot: LotEvaluation) -> Iterable[Finding]:
    place = lot.lot.place
    if not lot.ranked:
        rule = f"none of {len(lot.offers)} offers can be ranked" if lot.offers else "no offer was received"
        yield Finding("lot-without-ranking", "ranking", rule, place, lot=lot.lot.id)
    if len(lot.winners) > 1:
        names = ", ".join(offer.bidder for offer in lot.winners)
        yield Finding("tie", "rank 1", f"is shared by {names}", place, lot=lot.lot.id)
