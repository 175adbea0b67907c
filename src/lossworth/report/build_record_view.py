"""Decisions and the proof of the rules in words, for the papers."""

from __future__ import annotations

from collections.abc import Iterable

from ..evaluation.rules_proof import RulesProof
from ..findings import one_line
from ..records.decision import Decision
from .view import DecisionView, RuleDifferenceView, RulesProofView

__all__ = ["decision_views", "rules_proof_view"]


def decision_views(decisions: Iterable[Decision]) -> tuple[DecisionView, ...]:
    """Decisions in the order of their file.

    Parameters
    ----------
    decisions : iterable of Decision
        As read.

    Returns
    -------
    tuple of DecisionView
        With harmless texts.
    """
    return tuple(_decision(decision) for decision in decisions)


def _decision(decision: Decision) -> DecisionView:
    value = "" if decision.value is None else f"{decision.value.text} {decision.value.unit}"
    if decision.status is not None:
        value = decision.status
    if decision.order is not None:
        value = f"place {decision.order}"
    return DecisionView(
        kind=decision.kind,
        bidder=one_line(decision.bidder.value),
        lot=one_line(decision.lot.value),
        field="" if decision.field is None else one_line(decision.field.value),
        value=one_line(value),
        reason=one_line(decision.reason.value),
        who=one_line(decision.who.value),
        when=decision.when.isoformat(),
        evidence=one_line(decision.evidence.value),
        place=str(decision.place),
    )


def rules_proof_view(proof: RulesProof | None) -> RulesProofView:
    """Proof of the rules, or the sentence that there is none.

    Parameters
    ----------
    proof : RulesProof or None
        None where no file was kept.

    Returns
    -------
    RulesProofView
        For the papers.
    """
    if proof is None:
        sentence = "No file of published rules was kept: that these are the rules published is not proved here."
        return RulesProofView(sentence, holds=False, fingerprint="", differences=())
    differences = tuple(
        RuleDifferenceView(one_line(each.key), one_line(each.published or ""), one_line(each.used or ""))
        for each in proof.differences
    )
    holds = not proof.differences and not proof.fault
    return RulesProofView(one_line(proof.sentence), holds, proof.used, differences)
