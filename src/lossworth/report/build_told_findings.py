"""Findings as the papers tell them: what is settled already asks for nothing more."""

from __future__ import annotations

from collections.abc import Collection
from dataclasses import replace

from ..evaluation.result import Evaluation
from ..findings import Finding

__all__ = ["told_findings"]

_CORRECTED = "arithmetic-error-corrected"
_ANSWERS = ("accept correction", "refuse correction")
_WAIVED = "Nothing to do: the recorded decision sets it aside."
_ANSWERED = "Nothing to do: the bidder's answer is recorded."


def told_findings(evaluation: Evaluation) -> tuple[Finding, ...]:
    """Findings of an evaluation with the remedy that is left.

    Parameters
    ----------
    evaluation : Evaluation
        The result.

    Returns
    -------
    tuple of Finding
        In its order. A waived finding and a correction that the bidder has answered ask for nothing; all others keep
        the remedy of their kind.
    """
    answered = {
        finding
        for lot in evaluation.lots
        for offer in lot.offers
        if any(d.kind in _ANSWERS for d in offer.decisions)
        for finding in offer.findings
        if finding.kind == _CORRECTED
    }
    return tuple(_told(finding, answered) for finding in evaluation.findings)


def _told(finding: Finding, answered: Collection[Finding]) -> Finding:
    if finding.waiver:
        return replace(finding, fix=_WAIVED)
    return replace(finding, fix=_ANSWERED) if finding in answered else finding
