"""From suspicions and supposed rankings to the internal paper: chosen, ordered and worded."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from decimal import Decimal

from ..evaluation.clerical_errors_suspicion import ASK, LABELS, Supposition, Suspicion
from ..evaluation.result import LotEvaluation, Status
from ..evaluation.suppositions import SupposedRanking
from ..findings import KINDS, one_line
from ..records.tender import Tender
from .formats import amount
from .internal_paper_view import CaseView, ComparedOfferView, InternalPaperView, SuppositionView, SuspicionView
from .view import RecordView

__all__ = ["MARK", "build_internal_paper"]

MARK = "INTERNAL — NOT PART OF THE EVALUATION"
_NOTES = (
    "This paper shows what rankings would be if apparent clerical errors are what they look like. It is for the "
    "committee alone: it goes to no bidder, and no award rests on it.",
    "A supposed figure binds nobody. The evaluation uses figures as read until a bidder's written confirmation stands "
    "in the file of decisions and the announced rule on clarifications lets it be used.",
    "Each suspicion is a question to the bidder. That its answer may move a rank is no reason to ask it, to leave it "
    "out, or to word it otherwise.",
    "Medians are those of the other bidders' offers for the lot, with their number; a few offers show little.",
    "Guaranteed values need type and routine tests. Procurement law, the tender documents and local codes govern; a "
    "licensed engineer decides.",
)


def build_internal_paper(
    tender: Tender, suspicions: Iterable[Suspicion], rankings: Iterable[SupposedRanking], record: RecordView
) -> InternalPaperView:
    """View of the internal paper.

    Parameters
    ----------
    tender : Tender
        As announced.
    suspicions : iterable of Suspicion
        All apparent errors, also those without a supposed figure.
    rankings : iterable of SupposedRanking
        What would change.
    record : RecordView
        Time and version of the run.

    Returns
    -------
    InternalPaperView
        The paper.
    """
    every = tuple(suspicions)
    identity = tender.identity
    return InternalPaperView(
        reference=one_line(identity.reference.value),
        title=one_line(identity.title.value),
        buyer=one_line(identity.buyer.value),
        currency=identity.currency.value,
        remark=one_line(identity.remark.value) if identity.remark else "",
        mark=MARK,
        notes=_NOTES,
        suspicions=tuple(_suspicion(each) for each in every),
        cases=tuple(_case(each, every, identity.currency.value) for each in rankings),
        generated_at=record.generated_at,
        tool_version=record.tool_version,
    )


def _suspicion(suspicion: Suspicion) -> SuspicionView:
    finding = suspicion.finding
    return SuspicionView(
        offer=one_line(suspicion.offer),
        lot=one_line(finding.lot or ""),
        kind=finding.kind,
        title=KINDS[finding.kind].title,
        statement=_capital(finding.reason),
        place=str(finding.place) if finding.place else "",
        question=_capital(one_line(finding.remedy.removeprefix(ASK))),
        suppositions=tuple(_supposition(each) for each in suspicion.suppositions),
    )


def _supposition(supposition: Supposition) -> SuppositionView:
    as_read, value = supposition.as_read, supposition.value
    return SuppositionView(
        field=LABELS[supposition.field],
        as_read=one_line(f"{as_read.text} {as_read.unit}"),
        place=str(as_read.place),
        supposed=value.text,
        unit=one_line(value.unit),
        reason=one_line(supposition.reason),
        proof=one_line(supposition.proof),
        is_proved_by_bid=supposition.is_proved_by_bid,
    )


def _case(ranking: SupposedRanking, suspicions: Sequence[Suspicion], currency: str) -> CaseView:
    lot, compared = ranking.before.lot, _compared(ranking)
    return CaseView(
        lot=one_line(lot.id),
        description=one_line(lot.description.value),
        suspicions=tuple(n for n, each in enumerate(suspicions, start=1) if each in ranking.suspicions),
        sentence=_sentence(ranking, compared, currency),
        offers=compared,
        is_of_lot=_is_of_lot(ranking),
    )


def _is_of_lot(ranking: SupposedRanking) -> bool:
    """Whether further items count: the rank is then that of the lot, which amounts of a unit would contradict."""
    return any(item.counts for item in ranking.before.lot.items)


def _compared(ranking: SupposedRanking) -> tuple[ComparedOfferView, ...]:
    before, after = _totals(ranking, ranking.before), _totals(ranking, ranking.after)
    return tuple(
        ComparedOfferView(
            offer=one_line(offer.name),
            is_suspected=offer.is_suspected,
            status_before=offer.status_before.value,
            status_after=offer.status_after.value,
            rank_before=offer.rank_before,
            rank_after=offer.rank_after,
            total_before=before.get(offer.name),
            total_after=after.get(offer.name),
        )
        for offer in ranking.offers
    )


def _totals(ranking: SupposedRanking, lot: LotEvaluation | None) -> dict[str, Decimal]:
    """Total owning costs by name of the offer: of the lot where items count, else of one unit."""
    costs = [(o.name, o.lot if _is_of_lot(ranking) else o.per_unit) for o in (lot.offers if lot else ())]
    return {name: cost.total_owning_cost.value for name, cost in costs if cost.total_owning_cost is not None}


def _sentence(ranking: SupposedRanking, compared: Sequence[ComparedOfferView], currency: str) -> str:
    if ranking.after is None:
        return one_line(f"With the supposed figures the evaluation would stop: {ranking.why_none}.")
    scope = "for the lot" if _is_of_lot(ranking) else "per unit"
    changed = " ".join(_change(each, currency, scope) for each in compared if each.is_suspected)
    before, after = (_names(names) for names in (ranking.first_before, ranking.first_after))
    if before == after:
        return one_line(f"{changed} {after} would stay first." if after else f"{changed} Nobody would be ranked.")
    return one_line(f"{changed} First would be {after or 'nobody'} in place of {before or 'nobody'}.")


def _change(offer: ComparedOfferView, currency: str, scope: str) -> str:
    after = offer.total_after
    if after is None:
        return f"{offer.offer} would not have a total owning cost."
    money = f"{currency} {amount(after, max(0, -int(after.as_tuple().exponent)))} {scope}"
    if offer.status_after != Status.RANKED.value:
        return f"{offer.offer} would come to {money} and be {offer.status_after}."
    was = offer.status_before if offer.rank_before is None else f"rank {offer.rank_before}"
    return f"{offer.offer} would come to {money}, rank {offer.rank_after} ({was} as evaluated)."


def _capital(sentence: str) -> str:
    return sentence[:1].upper() + sentence[1:]


def _names(names: Sequence[str]) -> str:
    return " and ".join(names)
