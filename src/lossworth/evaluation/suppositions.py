"""What the ranking of a lot would be if a suspicion is right. Internal: no part of the evaluation or of its papers."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass

from ..errors import EvaluationStopped
from ..findings import Finding
from ..records.bid import Offer
from ..trail import Figure
from .clerical_errors import find_clerical_errors
from .clerical_errors_suspicion import Supposition, Suspicion
from .decisions import apply_confirmations, settled_by, with_value
from .evaluate import evaluate
from .result import EvaluatedOffer, Evaluation, LotEvaluation, Status

__all__ = ["SupposedOffer", "SupposedRanking", "open_suspicions", "suppose_right"]

#: Findings of intake on a figure, which a supposed figure would not have.
_ON_A_FIGURE = frozenset({"value-missing", "value-unreadable", "value-out-of-bounds"})


@dataclass(frozen=True, slots=True)
class SupposedOffer:
    """One offer before and after.

    Parameters
    ----------
    name : str
        Of the offer.
    is_suspected : bool
        Whether a figure of it was replaced.
    status_before, status_after : Status
        What became of it.
    rank_before, rank_after : int or None
        None where it is not ranked.
    per_unit_before, per_unit_after : Figure or None
        Total owning cost of one unit. [currency]
    """

    name: str
    is_suspected: bool
    status_before: Status
    status_after: Status
    rank_before: int | None
    rank_after: int | None
    per_unit_before: Figure | None
    per_unit_after: Figure | None


@dataclass(frozen=True, slots=True)
class SupposedRanking:
    """One lot as evaluated, and as it would be if some suspicions are right.

    Parameters
    ----------
    before, after : LotEvaluation
        Both evaluations of the lot; after is None where the evaluation would stop.
    suspicions : tuple of Suspicion
        Those that are taken to be right, all at once.
    offers : tuple of SupposedOffer
        In the order after; empty where the evaluation would stop.
    why_none : str
        What would stop the evaluation; empty where nothing does.
    """

    before: LotEvaluation
    after: LotEvaluation | None
    suspicions: tuple[Suspicion, ...]
    offers: tuple[SupposedOffer, ...]
    why_none: str = ""

    @property
    def first_before(self) -> tuple[str, ...]:
        """Names on rank 1 as evaluated; several for a tie."""
        return tuple(offer.offer.name for offer in self.before.winners)

    @property
    def first_after(self) -> tuple[str, ...]:
        """Names on rank 1 if the suspicions are right."""
        return () if self.after is None else tuple(offer.offer.name for offer in self.after.winners)


def open_suspicions(evaluation: Evaluation, offers: Iterable[Offer]) -> tuple[Suspicion, ...]:
    """Apparent errors that no bidder has settled yet: those behind the questions among the evaluation's findings.

    Parameters
    ----------
    evaluation : Evaluation
        With its tender and decisions.
    offers : iterable of Offer
        As read, as they were given to `evaluate`.

    Returns
    -------
    tuple of Suspicion
        In the order of the lots and of the names of the offers.
    """
    confirmed = apply_confirmations(evaluation.tender, offers, evaluation.decisions)
    by_name = sorted(confirmed.offers, key=lambda offer: offer.name)
    return find_clerical_errors(evaluation.tender, by_name, confirmed.settled)


def suppose_right(
    evaluation: Evaluation,
    offers: Iterable[Offer],
    suspicions: Iterable[Suspicion],
    findings: Iterable[Finding] = (),
) -> tuple[SupposedRanking, ...]:
    """Rankings if suspicions are right: each by itself, and those of one lot together where there are several.

    Parameters
    ----------
    evaluation : Evaluation
        As evaluated; it is not changed.
    offers : iterable of Offer
        As read, as they were given to `evaluate`.
    suspicions : iterable of Suspicion
        Of `open_suspicions`.
    findings : iterable of Finding
        What intake found.

    Returns
    -------
    tuple of SupposedRanking
        In the order of the lots, the joint one of a lot after its single ones. Suspicions without a supposed figure
        give none. Recorded decisions count as they do in the evaluation.
    """
    confirmed = apply_confirmations(evaluation.tender, offers, evaluation.decisions)
    known = settled_by(findings, confirmed.confirmations, confirmed.offers)
    by_lot: dict[str, list[Suspicion]] = {}
    for suspicion in suspicions:
        if suspicion.suppositions:
            by_lot.setdefault(suspicion.suppositions[0].lot, []).append(suspicion)
    rankings = []
    for before in evaluation.lots:
        single = by_lot.get(before.lot.id, [])
        cases = [(suspicion,) for suspicion in single]
        together = [tuple(single)] if len(single) > 1 else []
        of_lot = tuple(offer for offer in confirmed.offers if offer.lot.value == before.lot.id)
        rankings += [_ranking(evaluation, before, of_lot, case, known) for case in (*cases, *together)]
    return tuple(rankings)


def _ranking(
    evaluation: Evaluation,
    before: LotEvaluation,
    offers: tuple[Offer, ...],
    suspicions: tuple[Suspicion, ...],
    findings: tuple[Finding, ...],
) -> SupposedRanking:
    """One lot evaluated again; confirmed values stand in the offers already, so that nothing is confirmed twice."""
    suppositions = [each for suspicion in suspicions for each in suspicion.suppositions]
    supposed = tuple(_with_suppositions(offer, suppositions) for offer in offers)
    lot = before.lot.id
    tender = evaluation.tender.model_copy(update={"lots": (before.lot,)})
    left = tuple(each for each in findings if each.lot == lot and not _is_answered(each, suppositions))
    decisions = [each for each in evaluation.decisions if each.kind != "confirm value" and each.lot.value == lot]
    try:
        after = evaluate(tender, supposed, left, decisions).lots[0]
    except EvaluationStopped as stopped:
        return SupposedRanking(before, None, suspicions, (), stopped.findings[0].statement)
    names = {each.offer for each in suppositions}
    was = {offer.offer.name: offer for offer in before.offers}
    beside = tuple(
        _beside(was[offer.offer.name], offer, is_suspected=offer.offer.name in names) for offer in after.offers
    )
    return SupposedRanking(before, after, suspicions, beside)


def _with_suppositions(offer: Offer, suppositions: Iterable[Supposition]) -> Offer:
    for each in suppositions:
        if (each.offer, each.lot) == (offer.name, offer.lot.value):
            offer = with_value(offer, each.field, each.value)
    return offer


def _is_answered(finding: Finding, suppositions: Iterable[Supposition]) -> bool:
    return finding.kind in _ON_A_FIGURE and any(finding.place == each.as_read.place for each in suppositions)


def _beside(before: EvaluatedOffer, after: EvaluatedOffer, *, is_suspected: bool) -> SupposedOffer:
    return SupposedOffer(
        after.offer.name,
        is_suspected,
        before.status,
        after.status,
        before.rank,
        after.rank,
        before.per_unit.total_owning_cost,
        after.per_unit.total_owning_cost,
    )
