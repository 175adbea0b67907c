"""From suspicions and supposed rankings to the internal paper: chosen, ordered and worded."""

from __future__ import annotations

from collections.abc import Iterable, Sequence

from ..evaluation.clerical_errors_suspicion import ASK, LABELS, Supposition, Suspicion
from ..evaluation.result import Status
from ..evaluation.suppositions import SupposedOffer, SupposedRanking
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
    lot = ranking.before.lot
    return CaseView(
        lot=one_line(lot.id),
        description=one_line(lot.description.value),
        suspicions=tuple(n for n, each in enumerate(suspicions, start=1) if each in ranking.suspicions),
        sentence=_sentence(ranking, currency),
        offers=tuple(_compared(each) for each in ranking.offers),
    )


def _compared(offer: SupposedOffer) -> ComparedOfferView:
    before, after = offer.per_unit_before, offer.per_unit_after
    return ComparedOfferView(
        offer=one_line(offer.name),
        is_suspected=offer.is_suspected,
        status_before=offer.status_before.value,
        status_after=offer.status_after.value,
        rank_before=offer.rank_before,
        rank_after=offer.rank_after,
        total_before=before.value if before else None,
        total_after=after.value if after else None,
    )


def _sentence(ranking: SupposedRanking, currency: str) -> str:
    if ranking.after is None:
        return one_line(f"With the supposed figures the evaluation would stop: {ranking.why_none}.")
    changed = " ".join(_change(each, currency) for each in ranking.offers if each.is_suspected)
    before, after = (_names(names) for names in (ranking.first_before, ranking.first_after))
    if before == after:
        return one_line(f"{changed} {after} would stay first." if after else f"{changed} Nobody would be ranked.")
    return one_line(f"{changed} First would be {after or 'nobody'} in place of {before or 'nobody'}.")


def _change(offer: SupposedOffer, currency: str) -> str:
    after = offer.per_unit_after
    if after is None:
        return f"{offer.name} would not have a total owning cost."
    money = f"{currency} {amount(after.value, max(0, -int(after.value.as_tuple().exponent)))} per unit"
    if offer.status_after is not Status.RANKED:
        return f"{offer.name} would come to {money} and be {offer.status_after.value}."
    was = f"{offer.status_before.value}" if offer.rank_before is None else f"rank {offer.rank_before}"
    return f"{offer.name} would come to {money}, rank {offer.rank_after} ({was} as evaluated)."


def _capital(sentence: str) -> str:
    return sentence[:1].upper() + sentence[1:]


def _names(names: Sequence[str]) -> str:
    return " and ".join(names)
