"""What makes a run repeatable and its rules provable: inputs, findings, decisions, published rules."""

from __future__ import annotations

from dataclasses import dataclass

__all__ = [
    "DecisionView",
    "ExchangeView",
    "FindingView",
    "InputFile",
    "RecordView",
    "RuleDifferenceView",
    "RulesProofView",
]


@dataclass(frozen=True, slots=True)
class InputFile:
    """One input with its fingerprint."""

    path: str
    sha256: str


@dataclass(frozen=True, slots=True)
class RecordView:
    """What makes the run repeatable: tool version, time of the run, inputs."""

    tool_version: str
    generated_at: str
    inputs: tuple[InputFile, ...]


@dataclass(frozen=True, slots=True)
class ExchangeView:
    """The exchange rates used: source, kind, date, evidence, and the figure of each currency."""

    source: str
    kind: str
    date: str
    evidence: str
    rates: tuple[tuple[str, str], ...]


@dataclass(frozen=True, slots=True)
class FindingView:
    """One finding in the papers; `waiver` says who set it aside, when and why, and is empty where nobody did."""

    kind: str
    title: str
    effect: str
    place: str
    bidder: str
    lot: str
    statement: str
    remedy: str
    waiver: str = ""


@dataclass(frozen=True, slots=True)
class DecisionView:
    """One decision by a person, as it stands in the file of decisions; `outcome` says whether it was used."""

    kind: str
    bidder: str
    lot: str
    field: str
    value: str
    reason: str
    who: str
    when: str
    evidence: str
    place: str
    outcome: str = ""


@dataclass(frozen=True, slots=True)
class RuleDifferenceView:
    """One rule that differs from what was published; empty texts where it is not stated."""

    key: str
    published: str
    used: str


@dataclass(frozen=True, slots=True)
class RulesProofView:
    """Whether the rules used are the rules published.

    Parameters
    ----------
    sentence : str
        The outcome in one sentence.
    holds : bool
        True only where a published file was kept and agrees.
    fingerprint : str
        SHA-256 of the rules used; empty where no file was kept.
    differences : tuple of RuleDifferenceView
        Key by key.
    """

    sentence: str
    holds: bool
    fingerprint: str
    differences: tuple[RuleDifferenceView, ...]
