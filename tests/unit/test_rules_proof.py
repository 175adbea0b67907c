"""The rules used against the rules published: the same, another, or a file that proves nothing."""

from __future__ import annotations

import json
from typing import Any

import pytest

from lossworth.evaluation.rules_content import fingerprint
from lossworth.evaluation.rules_proof import RuleDifference, compare_rules, rules_findings
from lossworth.records.tender import Tender
from lossworth.report.build_rules import build_rules
from lossworth.report.rules_sheet import rules_json
from support import records as make
from support.rules_tenders import full_lot, full_tender, ruled


def kept(tender: Tender) -> str:
    """The file as it is kept at publication."""
    return rules_json(build_rules(tender, "0", "2026-08-01T10:00:00Z"))


def test_compare_rules__same_rules_are_proven() -> None:
    """Equal fingerprints, no difference, no finding, a sentence with the fingerprint."""
    proof = compare_rules(full_tender(), kept(full_tender()))
    assert proof.is_proven
    assert (proof.used, ()) == (proof.published, proof.differences)
    assert proof.used in proof.sentence
    assert rules_findings(proof) == ()


def test_compare_rules__another_program_and_time_prove_the_same() -> None:
    """Wording, program and time of the kept file do not matter."""
    file = json.loads(kept(full_tender()))
    file |= {"tool_version": "9", "generated_at": "", "sentences": [], "cautions": []}
    assert compare_rules(full_tender(), json.dumps(file)).is_proven


def test_compare_rules__differences_key_by_key() -> None:
    """A changed, a dropped and an added rule are told with what was published and what is used."""
    published = full_tender(full_lot(), rules=ruled(taxes="excluded", tie_order=("drawing of lots",)))
    used = full_tender(
        full_lot(maximum_no_load_loss_kw=make.quantity("0.14", "kW")), rules=ruled(taxes="included", preference="none")
    )
    proof = compare_rules(used, kept(published))
    assert not proof.is_proven
    assert (
        RuleDifference("lots.1.maximum_no_load_loss_kw", "0.13", "0.14"),
        RuleDifference("rules.preference", None, "none"),
        RuleDifference("rules.taxes", "excluded", "included"),
        RuleDifference("rules.tie_order", '["drawing of lots"]', None),
    ) == proof.differences
    assert proof.sentence == "The rules used differ from the rules published in 4 places."
    findings = rules_findings(proof)
    assert {"rules-differ"} == {finding.kind for finding in findings}
    assert [str(finding).splitlines()[0] for finding in findings[:2]] == [
        'published_rules.json: lots.1.maximum_no_load_loss_kw: must be as published, "0.13", got "0.14"',
        'published_rules.json: rules.preference: must not be stated: it was not published, got "none"',
    ]


def test_compare_rules__a_kept_file_changed_by_hand_shows() -> None:
    """Content that does not fit the fingerprint beside it is told, also where it agrees with the tender."""
    file = json.loads(kept(full_tender()))
    other = full_tender(full_lot())
    file["content"] = json.loads(kept(other))["content"]
    proof = compare_rules(other, json.dumps(file))
    assert (proof.is_proven, proof.differences) == (False, ())
    assert "changed by hand" in proof.sentence
    assert [(each.kind, each.field) for each in rules_findings(proof)] == [("rules-differ", "fingerprint")]


@pytest.mark.parametrize(
    ("text", "fault"),
    [
        ("", "is not valid JSON"),
        ("{", "is not valid JSON"),
        ("[]", "has no content of rules"),
        ("null", "has no content of rules"),
        ('{"content": 1}', "has no content of rules"),
        ('{"content": {"a": 0.5}}', "has a number that no rule has, 0.5"),
        ('{"content": {"a": NaN}}', "has a number that no rule has, NaN"),
        ('{"content": {"a": 1, "a": 2}}', "gives a key twice"),
        ("[" * 200_000, "nests too deep"),
        ('{"content": {"a": ' + "1" * 5000 + "}}", "is not valid JSON"),
    ],
)
def test_compare_rules__a_file_that_proves_nothing(text: str, fault: str) -> None:
    """A damaged or hostile file gives a fault and a finding that stops, never a traceback."""
    proof = compare_rules(full_tender(), text)
    assert (False, "", fault) == (proof.is_proven, proof.published, proof.fault)
    assert fault in proof.sentence
    assert [finding.kind for finding in rules_findings(proof)] == ["file-unreadable"]


def test_compare_rules__lone_surrogates_are_no_failure() -> None:
    """JSON may carry halves of characters; they are compared like any text."""
    content: dict[str, Any] = {"a": "\ud800"}
    text = json.dumps({"content": content, "fingerprint": fingerprint(content)})
    proof = compare_rules(full_tender(), text)
    assert proof.fault == ""
    assert RuleDifference("a", "\ud800", None) in proof.differences


def test_rules_findings__absence_is_a_note() -> None:
    """Where no file was kept, one note says so and how to keep one."""
    (finding,) = rules_findings(None)
    assert (finding.kind, finding.effect.value) == ("rules-not-published", "note")
    assert "--publish" in finding.remedy
