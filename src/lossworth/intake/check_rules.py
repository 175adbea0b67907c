"""Do the announced rules fit together, and with the tables that they need?"""

from __future__ import annotations

from collections.abc import Iterator

from ..findings import Finding
from ..records.rule_profiles import RULE_PROFILES, profile_named
from .suggestions import did_you_mean, one_of
from .tender_draft import Check, Draft

__all__ = ["RULE_CHECKS", "settled_setting"]

_DRAWING = "drawing of lots"
_CEILING = "none, the guarantee is a ceiling"
_DAYS_BEFORE = "days before opening"


def settled_setting(draft: Draft, key: str) -> str | None:
    """Setting of a rule by its own key, else by the profile.

    Parameters
    ----------
    draft : Draft
        The tender.
    key : str
        Key of a rule with one setting.

    Returns
    -------
    str or None
        None where the rule is unset, or its value cannot be read.
    """
    if draft.rules is None:
        return None
    if draft.rules.has(key):
        return draft.rules.text(key)
    profile = profile_named(draft.rules.text("profile") or "")
    setting = None if profile is None else profile.settings[key]
    return setting if isinstance(setting, str) else None


def check_profile(draft: Draft) -> Iterator[Finding]:
    """The profile is one of those that exist."""
    name = draft.rules.text("profile") if draft.rules else None
    if draft.rules is None or name is None or profile_named(name) is not None:
        return
    known = [profile.name for profile in RULE_PROFILES]
    rule = f"must be {one_of(known)}"
    fix = did_you_mean(name, known) or "Choose a profile, or take the line out and set each rule by its own key."
    yield draft.rules.finding("tender-value", "profile", rule, fix=fix)


def check_tie_order(draft: Draft) -> Iterator[Finding]:
    """No criterion stands twice, and none behind the one that parts every tie."""
    if draft.rules is None:
        return
    order = draft.rules.texts("tie_order")
    again = next((each for number, each in enumerate(order) if each in order[:number]), None)
    if again is not None:
        fix = "Take the second one out."
        yield draft.rules.finding("tender-conflict", "tie_order", "must have each criterion once", again, fix)
    elif _DRAWING in order[:-1]:
        rule = f'must have nothing behind "{_DRAWING}", which parts every tie'
        behind = order[order.index(_DRAWING) + 1]
        yield draft.rules.finding("tender-conflict", "tie_order", rule, behind, "Move it before, or take it out.")


def check_exchange_day(draft: Draft) -> Iterator[Finding]:
    """The number of days before opening stands where the rule counts them, and there alone."""
    if draft.rules is None:
        return
    days, rule = "exchange_rate_days_before", settled_setting(draft, "exchange_rate_day")
    if rule == _DAYS_BEFORE and not draft.rules.has(days):
        told = f'must be given where exchange_rate_day is "{_DAYS_BEFORE}"'
        yield draft.rules.finding("tender-key-missing", days, told)
    if draft.rules.has(days) and rule != _DAYS_BEFORE and not _is_unread(draft, "exchange_rate_day"):
        told = f'must not be given unless exchange_rate_day is "{_DAYS_BEFORE}"'
        yield draft.rules.finding("tender-conflict", days, told, fix="Take the line out, or set the rule.")
    asks = rule in (_DAYS_BEFORE, "day of opening") and draft.rules.has("exchange_rate_day")
    if asks and draft.identity is not None and not draft.identity.has("opening_date"):
        told = f'must be given where exchange_rate_day is "{rule}"'
        yield draft.identity.finding("tender-key-missing", "opening_date", told)
    if rule == "day of award" and draft.rules.has("exchange_rate_day") and "award" not in draft.commercial:
        told = "needs a table [award] with planned"
        yield draft.rules.finding("tender-key-missing", "exchange_rate_day", told)


def check_tolerance(draft: Draft) -> Iterator[Finding]:
    """A greatest tolerance stands where the rule lets one be claimed."""
    percent = "loss_tolerance_percent"
    if draft.rules is None or not draft.rules.has(percent):
        return
    rule = settled_setting(draft, "loss_tolerance")
    if rule == _CEILING:
        told = f'must not stand beside loss_tolerance "{_CEILING}"'
        yield draft.rules.finding("tender-conflict", percent, told, fix="Take the line out, or set another rule.")
    elif rule is None and not _is_unread(draft, "loss_tolerance"):
        yield draft.rules.finding("tender-key-missing", "loss_tolerance", f"must be given where {percent} is")
    value = draft.rules.number(percent)
    if value is not None and value > 100:
        yield draft.rules.finding("tender-value", percent, "must be at most 100 percent")


def check_preference(draft: Draft) -> Iterator[Finding]:
    """A margin that the rule does not add has no effect."""
    stated = draft.commercial.get("preference")
    if stated is not None and settled_setting(draft, "preference") == "none":
        rule = 'has no effect, since the rule on preference is "none"'
        fix = 'Set preference in [rules] to "margin added to other prices", or take the table out.'
        yield Finding("tender-key-not-used", stated.key, rule, stated.place, fix=fix)


def _is_unread(draft: Draft, key: str) -> bool:
    """Whether the file gives a key or profile whose value could not be read, which is reported already."""
    rules = draft.rules
    if rules is None:
        return False
    if rules.has(key):
        return rules.text(key) is None
    return rules.has("profile") and profile_named(rules.text("profile") or "") is None


RULE_CHECKS: tuple[Check, ...] = (
    check_profile,
    check_tie_order,
    check_exchange_day,
    check_tolerance,
    check_preference,
)
