"""Every kind of bad load profile or price says where, what stood there, what was expected and what to do."""

from __future__ import annotations

from pathlib import Path

import pytest

from lossworth.findings import KINDS, any_stops, quoted
from support.bad_input_cases import BadInput
from support.bad_profiles import BAD_PROFILES
from support.command_line import call
from support.tender_folders import read_folder, told

PAPERS = ["evaluation.html", "evaluation.json", "evaluation.xlsx"]


@pytest.mark.parametrize("bad", BAD_PROFILES, ids=lambda bad: bad.id)
def test_intake__bad_profile(bad: BadInput, tmp_path: Path) -> None:
    """Each fault is told with kind, place, value, expectation and remedy, and none that is not there."""
    bad.make(tmp_path / "tender")
    tender, _, findings = read_folder(tmp_path / "tender")
    assert sorted(bad.told, key=str) == sorted(told(findings), key=str)
    assert any_stops(findings) == bad.stops
    for finding in findings:
        assert finding.field
        assert finding.rule.startswith(("must ", "is "))
        assert finding.remedy.endswith((".", "?"))
        assert "bidder" not in finding.remedy or finding.kind == "column-not-read"
    if bad.stops and tender is not None and told(findings)[0][0].startswith("profile-"):
        assert any(
            loading.profile is None or economics.energy_price_series is None
            for loading in tender.loading.values()
            for economics in tender.economics.values()
        )


@pytest.mark.parametrize("bad", BAD_PROFILES, ids=lambda bad: bad.id)
def test_evaluate__bad_profile(bad: BadInput, tmp_path: Path) -> None:
    """The command prints every finding and writes no paper where one stops; a note alone keeps nobody from papers."""
    folder = tmp_path / "tender"
    bad.make(folder)
    before = sorted(path for path in tmp_path.rglob("*"))
    outcome = call("evaluate", folder, "--as-of", "2026-09-15T10:00:00Z")
    for _, place, value in bad.told:
        assert f"{place}: " in outcome.err
        assert not value or quoted(value)[:40] in outcome.err
    assert outcome.err.count("  fix: ") >= len(bad.told)
    assert "Traceback" not in outcome.out + outcome.err
    written = sorted(path for path in tmp_path.rglob("*") if path not in before and path.is_file())
    assert (outcome.code, [path.name for path in written]) == ((1, []) if bad.stops else (0, PAPERS))


def test_bad_profiles__enough_and_distinct() -> None:
    """The table has many kinds of bad data, each with a name of its own, and uses every kind of finding on profiles."""
    assert len({bad.id for bad in BAD_PROFILES}) == len(BAD_PROFILES) >= 50
    used = {kind for bad in BAD_PROFILES for kind, _, _ in bad.told}
    assert {slug for slug in KINDS if slug.startswith(("profile-", "file-outside"))} - used == {"profile-remark"}
