"""Named profiles of rules: complete, valid, overridden key by key."""

from __future__ import annotations

import re
from pathlib import Path

import pytest

from lossworth.records.rule_profiles import RULE_PROFILES, RuleProfile, profile_named, settled_rules
from lossworth.records.rules import RULE_KINDS, AnnouncedRules
from support import records as make

CHECKOUT = Path(__file__).resolve().parents[2]


@pytest.mark.parametrize("profile", RULE_PROFILES, ids=lambda profile: profile.name)
def test_profile__sets_every_rule_to_a_known_setting(profile: RuleProfile) -> None:
    """A profile leaves no rule open and invents no setting."""
    assert {kind.key for kind in RULE_KINDS} == set(profile.settings)
    for kind in RULE_KINDS:
        setting = profile.settings[kind.key]
        assert set(setting if isinstance(setting, tuple) else (setting,)) <= set(kind.sentences)
    AnnouncedRules(**profile.settings)
    assert profile.use_when.endswith(".")


def test_profiles__differ() -> None:
    """Each has a name and settings of its own, and there are at least three."""
    assert len(RULE_PROFILES) >= 3
    assert len({profile.name for profile in RULE_PROFILES}) == len(RULE_PROFILES)
    assert len({tuple(sorted(profile.settings.items())) for profile in RULE_PROFILES}) == len(RULE_PROFILES)


def test_settled_rules__profile_sets_and_own_keys_override() -> None:
    """What the tender states by a key of its own stays; the rest comes from the profile, with the profile's place."""
    name = make.entry("as read, final")
    settled = settled_rules(AnnouncedRules(profile=name, taxes="included", places={"taxes": make.place(7)}))
    profile = profile_named("as read, final")
    assert profile is not None
    assert {"taxes": "included"} | {k: v for k, v in profile.settings.items() if k != "taxes"} == {
        kind.key: getattr(settled, kind.key) for kind in RULE_KINDS
    }
    assert (make.place(7), name.place) == (settled.places["taxes"], settled.places["tie_order"])


def test_settled_rules__twice_is_once() -> None:
    """Settling settled rules changes nothing, so that every stage may ask for them."""
    settled = settled_rules(AnnouncedRules(profile=make.entry("corrected, firm")))
    assert settled == settled_rules(settled)


def test_settled_rules__without_profile_nothing_is_assumed() -> None:
    """Silence stays silence."""
    announced = AnnouncedRules(taxes="excluded")
    assert announced == settled_rules(announced)


def test_settled_rules__unknown_profile() -> None:
    """A profile that does not exist is an error and sets nothing."""
    assert profile_named("no such profile") is None
    with pytest.raises(KeyError):
        settled_rules(AnnouncedRules(profile=make.entry("no such profile")))


def test_command_line_page__lists_every_profile() -> None:
    """The document names each profile and says when to use it, in the program's words."""
    page = (CHECKOUT / "docs" / "command_line.md").read_text(encoding="utf-8")
    rows = re.findall(r"^\| `([^`-][^`]*)` \| (For .*|Where .*) \|$", page, re.MULTILINE)
    assert [(profile.name, profile.use_when) for profile in RULE_PROFILES] == rows
