"""Named profiles of our own: each sets every rule on which regimes disagree, and says when to use it."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from types import MappingProxyType

from .rules import RULE_KINDS, AnnouncedRules

__all__ = ["RULE_PROFILES", "RuleProfile", "profile_named", "settled_rules"]

Setting = str | tuple[str, ...]


@dataclass(frozen=True, slots=True)
class RuleProfile:
    """One profile.

    Parameters
    ----------
    name : str
        As the key ``profile`` of the table [rules] gives it.
    use_when : str
        When to use it, in a sentence.
    settings : mapping of str to str or tuple of str
        By key of `RULE_KINDS`, every one of them.
    """

    name: str
    use_when: str
    settings: Mapping[str, Setting]


def _profile(name: str, use_when: str, **settings: Setting) -> RuleProfile:
    return RuleProfile(name, use_when, MappingProxyType(settings))


_CORRECTED: Mapping[str, Setting] = MappingProxyType(
    {
        "arithmetic_errors": "correct",
        "unit_price_against_total": "unit price governs",
        "misplaced_decimal": "total governs",
        "missing_item": "highest of the others",
        "missing_item_among": "all offers received",
        "unconditional_discounts": "deduct",
        "prompt_payment_discounts": "ignore",
        "exchange_rate_day": "day of opening",
        "taxes": "excluded",
        "payment_terms": "discount to a common date",
        "loss_guarantee": "each unit",
        "loss_tolerance": "none, the guarantee is a ceiling",
        "price_variation": "reject variable prices",
        "preference": "none",
        "alternatives": "only if the base offer is responsive",
        "tie_order": ("lower no-load loss", "lower evaluated price", "earlier delivery", "drawing of lots"),
        "clarifications": "may confirm what the bid itself proves",
    }
)

RULE_PROFILES: tuple[RuleProfile, ...] = (
    _profile(
        "corrected, firm",
        "For units that are delivered within about a year at firm prices, where the law lets the buyer correct sums.",
        **_CORRECTED,
    ),
    _profile(
        "corrected, indexed",
        "For long deliveries whose prices follow indices of material and labor: sums are corrected, and prices "
        "compared at the base date.",
        **{**_CORRECTED, "price_variation": "evaluate at the base date"},
    ),
    _profile(
        "series, average of lot",
        "For large series of small units, where the mean loss of the lot is guaranteed and excess losses are paid for "
        "at test.",
        **{
            **_CORRECTED,
            "loss_guarantee": "average of lot",
            "loss_tolerance": "allowed at test, money due above the guarantee",
            "payment_terms": "ignore",
            "alternatives": "not accepted",
            "tie_order": ("earlier delivery", "lower no-load loss", "lower evaluated price", "drawing of lots"),
        },
    ),
    _profile(
        "as read, final",
        "Where the law makes the sum that is read out final: nothing is corrected, completed or confirmed afterwards.",
        **{
            **_CORRECTED,
            "arithmetic_errors": "reject",
            "unit_price_against_total": "total governs",
            "misplaced_decimal": "no exception",
            "missing_item": "reject",
            "unconditional_discounts": "ignore",
            "payment_terms": "ignore",
            "alternatives": "not accepted",
            "tie_order": ("drawing of lots",),
            "clarifications": "may not change price or guarantee",
        },
    ),
)


def profile_named(name: str) -> RuleProfile | None:
    """Profile of a name.

    Parameters
    ----------
    name : str
        As stated.

    Returns
    -------
    RuleProfile or None
        None where there is no such profile.
    """
    return next((profile for profile in RULE_PROFILES if profile.name == name), None)


def settled_rules(announced: AnnouncedRules) -> AnnouncedRules:
    """Rules with what the profile sets and no key of its own overrides.

    Parameters
    ----------
    announced : AnnouncedRules
        As stated in the tender file.

    Returns
    -------
    AnnouncedRules
        Each rule by its own key, else by the profile, else unset; what the profile sets has the profile's place.

    Raises
    ------
    KeyError
        If there is no profile of the stated name.
    """
    if announced.profile is None:
        return announced
    profile = profile_named(announced.profile.value)
    if profile is None:
        raise KeyError(announced.profile.value)
    taken = {kind.key: profile.settings[kind.key] for kind in RULE_KINDS if getattr(announced, kind.key) is None}
    stated = {name: getattr(announced, name) for name in AnnouncedRules.model_fields}
    places = {**dict.fromkeys(taken, announced.profile.place), **announced.places}
    return AnnouncedRules(**{**stated, **taken, "places": places})
