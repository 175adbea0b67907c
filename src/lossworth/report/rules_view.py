"""What the rules sheet shows: rules with their sentences, what the tender is silent on, and what holds for each lot."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

__all__ = ["LotRulesView", "RuleView", "RulesSection", "RulesView", "SilentRuleView"]


@dataclass(frozen=True, slots=True)
class RuleView:
    """One announced rule.

    Parameters
    ----------
    key, setting : str
        As in the tender file.
    question, sentence : str
        What the rule decides, and the sentence for the tender document.
    origin : str
        Who set it: the tender, or its profile.
    source : str
        Where regimes are seen to differ.
    """

    key: str
    setting: str
    question: str
    sentence: str
    origin: str
    source: str


@dataclass(frozen=True, slots=True)
class SilentRuleView:
    """One rule that the tender does not announce, with the settings that it could have."""

    key: str
    question: str
    settings: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class RulesSection:
    """Sentences under a title."""

    title: str
    sentences: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class LotRulesView:
    """What is announced for one lot.

    Parameters
    ----------
    id, description : str
        Of the lot.
    sentences : tuple of str
        For the tender document.
    formulas : tuple of str
        Of an announced derivation.
    inputs : tuple of tuple of str
        Label and value of each of its inputs.
    silent : tuple of str
        Limits that the lot does not have.
    """

    id: str
    description: str
    sentences: tuple[str, ...]
    formulas: tuple[str, ...] = ()
    inputs: tuple[tuple[str, str], ...] = ()
    silent: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class RulesView:
    """The whole sheet.

    Parameters
    ----------
    reference, title, buyer, currency, opening_date, remark : str
        Head of every paper; empty where not stated.
    profile : str
        Which profile sets rules, and when to use it; empty for none.
    sections : tuple of RulesSection
        How offers are compared, prices, commercial terms.
    rules : tuple of RuleView
        Announced rules.
    silent_rules : tuple of SilentRuleView
        Rules that the tender does not announce.
    silent : tuple of str
        What else it does not announce.
    gaps : tuple of str
        Announced rules that lack what they need.
    lots : tuple of LotRulesView
        All lots.
    content : mapping
        What the fingerprint covers.
    fingerprint : str
        SHA-256 of the canonical content.
    cautions : tuple of str
        What every paper says.
    tool_version, generated_at : str
        Which program wrote it, and when.
    """

    reference: str
    title: str
    buyer: str
    currency: str
    opening_date: str
    remark: str
    profile: str
    sections: tuple[RulesSection, ...]
    rules: tuple[RuleView, ...]
    silent_rules: tuple[SilentRuleView, ...]
    silent: tuple[str, ...]
    gaps: tuple[str, ...]
    lots: tuple[LotRulesView, ...]
    content: Mapping[str, Any]
    fingerprint: str
    cautions: tuple[str, ...]
    tool_version: str
    generated_at: str
