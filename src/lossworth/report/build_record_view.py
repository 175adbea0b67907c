"""Decisions and the proof of the rules in words, for the papers."""

from __future__ import annotations

from collections.abc import Collection, Mapping

from ..evaluation.result import Evaluation
from ..evaluation.rules_proof import RulesProof
from ..findings import Place, one_line
from ..records.decision import Decision
from .view import DecisionView, RuleDifferenceView, RulesProofView

__all__ = ["decision_views", "rules_proof_view"]


_UNUSED = frozenset({"decision-not-applied", "confirmation-not-allowed", "decision-superseded"})


def decision_views(evaluation: Evaluation) -> tuple[DecisionView, ...]:
    """Decisions in the order of their file, each with whether it was used.

    Parameters
    ----------
    evaluation : Evaluation
        With its decisions, and the findings on those that were not used.

    Returns
    -------
    tuple of DecisionView
        With harmless texts.
    """
    used = [decision for lot in evaluation.lots for offer in lot.offers for decision in offer.decisions]
    why = {finding.place: finding.rule for finding in evaluation.findings if finding.kind in _UNUSED}
    return tuple(_decision(each, _outcome(each, used, why)) for each in evaluation.decisions)


def _outcome(decision: Decision, used: Collection[Decision], why: Mapping[Place | None, str]) -> str:
    if decision.place in why and decision not in used:
        return one_line(f"not used, because it {why[decision.place]}")
    return "used"


def _decision(decision: Decision, outcome: str) -> DecisionView:
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
        outcome=outcome,
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
