"""Settings that the tender announces: their sentences and places, for steps, findings and papers."""

from __future__ import annotations

from ..findings import Place
from ..records.rules import RULE_KINDS, RuleKind, setting_sentence
from ..records.tender import Tender

__all__ = ["rule_clause", "rule_kind", "rule_place", "rule_sentence"]

_KINDS = {kind.key: kind for kind in RULE_KINDS}


def rule_kind(key: str) -> RuleKind | None:
    """Rule with this key.

    Parameters
    ----------
    key : str
        Key of the table [rules].

    Returns
    -------
    RuleKind or None
        None for a key that is a number or name beside a rule.
    """
    return _KINDS.get(key)


def rule_place(tender: Tender, key: str) -> Place:
    """Where a rule is announced, or would be.

    Parameters
    ----------
    tender : Tender
        As announced.
    key : str
        Key of the table [rules].

    Returns
    -------
    Place
        Of the key; of the table where the key has none.
    """
    return tender.rules.announced.places.get(key, tender.rules.place)


def rule_sentence(tender: Tender, key: str) -> str:
    """Announced setting as a sentence with its place.

    Parameters
    ----------
    tender : Tender
        As announced.
    key : str
        Key of the table [rules].

    Returns
    -------
    str
        ``"Unconditional discounts are deducted before comparison (tender.toml:21)."``; an order of ties criterion by
        criterion; empty where the rule is unset.
    """
    setting = getattr(tender.rules.announced, key)
    kind = rule_kind(key)
    if not setting or kind is None:
        return ""
    settings = (setting,) if isinstance(setting, str) else setting
    sentences = "; ".join(setting_sentence(kind, each).removesuffix(".") for each in settings)
    return f"{sentences} ({rule_place(tender, key)})."


def rule_clause(tender: Tender, key: str) -> str:
    """Announced setting as `rule_sentence` gives it, without its full stop, for the middle of a message.

    Parameters
    ----------
    tender : Tender
        As announced.
    key : str
        Key of the table [rules].

    Returns
    -------
    str
        Empty where the rule is unset.
    """
    return rule_sentence(tender, key).removesuffix(".")
