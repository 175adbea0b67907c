"""Waivers and statuses set by hand: recorded decisions, which stand in the result beside what they set aside."""

from __future__ import annotations

from collections.abc import Collection, Iterable, Sequence
from dataclasses import dataclass, replace

from ..findings import KINDS, Effect, Finding
from ..records.bid import Offer
from ..records.decision import Decision

__all__ = ["Judged", "decided", "decisions_on", "unused_decisions"]

#: What cannot be set aside: the bidder's own word, a price that is not there, a later decision.
_NEVER_WAIVED = frozenset({"correction-refused", "item-missing-rejected", "status-set-non-responsive"})
#: The offer can be ranked without the value: its total hangs on nothing that it leaves open.
_WAIVED_THOUGH_OPEN = frozenset({"limit-not-answered"})
_LEAVES_OUT = {"non-responsive": "status-set-non-responsive", "not evaluated": "status-set-not-evaluated"}


@dataclass(frozen=True, slots=True)
class Judged:
    """Findings on an offer after the decisions on it.

    Parameters
    ----------
    findings : tuple of Finding
        Waived ones as notes that keep their text.
    used : tuple of Decision
        Decisions that took effect.
    """

    findings: tuple[Finding, ...]
    used: tuple[Decision, ...]


def decisions_on(offer: Offer, decisions: Iterable[Decision]) -> tuple[Decision, ...]:
    """Decisions on one offer.

    Parameters
    ----------
    offer : Offer
        The offer; an alternative is named with its alternative.
    decisions : iterable of Decision
        All decisions.

    Returns
    -------
    tuple of Decision
        In the order of their file.
    """
    return tuple(d for d in decisions if d.bidder.value == offer.name and d.lot.value == offer.lot.value)


def decided(offer: Offer, findings: Sequence[Finding], decisions: Sequence[Decision]) -> Judged:
    """Findings with the waivers and the status that were decided.

    Parameters
    ----------
    offer : Offer
        The offer.
    findings : sequence of Finding
        Of all stages.
    decisions : sequence of Decision
        On this offer, in the order of their file; of several statuses the last one holds.

    Returns
    -------
    Judged
        A waiver makes a note of each finding of its kind that makes the offer non-responsive, or that misses a value
        for a limit alone; the status "evaluate" does so with all of them. A value that a cost needs cannot be waived.

    Notes
    -----
    A waiver names the kind of finding in its field, ``"delivery-too-late"``.
    """
    used: list[Decision] = []
    judged = list(findings)
    for decision in decisions:
        if decision.kind == "waive" and decision.field is not None:
            judged = _set_aside(judged, decision, {decision.field.value}, used)
    statuses = [decision for decision in decisions if decision.kind == "change status" and decision.status is not None]
    if statuses:
        judged = _with_status(offer, judged, statuses[-1], used)
    return Judged(tuple(judged), tuple(used))


def _with_status(offer: Offer, findings: list[Finding], decision: Decision, used: list[Decision]) -> list[Finding]:
    who = (offer.bidder.value, offer.lot.value)
    if decision.status in _LEAVES_OUT:
        used.append(decision)
        kind = _LEAVES_OUT[decision.status]
        return [*findings, Finding(kind, "status", _in_words(decision), decision.place, decision.status, *who)]
    before = len(used)
    set_aside = _set_aside(findings, decision, set(KINDS), used)
    if len(used) == before:
        return findings
    return [
        *set_aside,
        Finding("status-set-evaluated", "status", _in_words(decision), decision.place, decision.status, *who),
    ]


def _set_aside(
    findings: Iterable[Finding], decision: Decision, kinds: Collection[str], used: list[Decision]
) -> list[Finding]:
    judged = []
    for finding in findings:
        if finding.kind in kinds and _can_be_waived(finding):
            judged.append(replace(finding, waiver=f"waived {_in_words(decision)} ({decision.place})"))
            if decision not in used:
                used.append(decision)
        else:
            judged.append(finding)
    return judged


def _can_be_waived(finding: Finding) -> bool:
    if finding.kind in _NEVER_WAIVED:
        return False
    return finding.effect is Effect.NON_RESPONSIVE or finding.kind in _WAIVED_THOUGH_OPEN


def _in_words(decision: Decision) -> str:
    return f"by {decision.who} on {decision.when.isoformat()}: {decision.reason}; evidence: {decision.evidence}"


def unused_decisions(decisions: Iterable[Decision], used: Collection[Decision]) -> tuple[Finding, ...]:
    """Findings on decisions that took no effect.

    Parameters
    ----------
    decisions : iterable of Decision
        All decisions but confirmed values, which report on themselves.
    used : collection of Decision
        Those that took effect on some offer.

    Returns
    -------
    tuple of Finding
        One for each other decision.
    """
    return tuple(_unused(decision) for decision in decisions if decision not in used)


def _unused(decision: Decision) -> Finding:
    rules = {
        "waive": "finds no finding of this kind that can be waived; a value that a cost needs cannot",
        "change status": "finds no offer whose status it changes, or a later decision holds",
        "break tie": "finds no tie that lots decide by the tender's order, or not all tied offers drew",
    }
    rule = rules.get(decision.kind, "finds no correction of an offer to answer, or a later answer holds")
    got = decision.field.value if decision.field is not None else decision.status
    return Finding(
        "decision-not-applied", decision.kind, rule, decision.place, got, decision.bidder.value, decision.lot.value
    )
