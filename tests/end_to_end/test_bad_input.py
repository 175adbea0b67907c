"""Every kind of bad input says where, what stood there, what was expected and what to do; nothing else comes out."""

from __future__ import annotations

from pathlib import Path

import pytest

from lossworth.findings import any_stops
from support.bad_inputs import BAD_INPUTS, BadInput
from support.tender_folders import read_folder, told, write_folder


@pytest.mark.parametrize("bad", BAD_INPUTS, ids=lambda bad: bad.id)
def test_intake__bad_input(bad: BadInput, tmp_path: Path) -> None:
    """All findings of the run come at once, with kind, place and value."""
    bad.make(tmp_path / "tender")
    _, _, findings = read_folder(tmp_path / "tender")
    assert sorted(bad.told, key=str) == sorted(told(findings), key=str)
    assert any_stops(findings) == bad.stops


@pytest.mark.parametrize("bad", BAD_INPUTS, ids=lambda bad: bad.id)
def test_intake__bad_input_is_explained(bad: BadInput, tmp_path: Path) -> None:
    """Each finding has a field, an expectation and a remedy, on two lines."""
    bad.make(tmp_path / "tender")
    _, _, findings = read_folder(tmp_path / "tender")
    for finding in findings:
        assert finding.field
        assert finding.rule
        assert finding.remedy.endswith((".", "?"))
        first, second = str(finding).split("\n")
        assert first.startswith(f"{finding.place}: {finding.field}: ")
        assert second.startswith("  fix: ")


def test_intake__good_input(tmp_path: Path) -> None:
    """The folder that the cases spoil has no findings when it is not spoiled."""
    tender, offers, findings = read_folder(write_folder(tmp_path))
    assert tender is not None
    assert (told(findings), len(offers)) == ([], 4)


def test_bad_inputs__enough_and_distinct() -> None:
    """The table has at least twenty kinds of bad input, each with a name of its own."""
    assert len({bad.id for bad in BAD_INPUTS}) == len(BAD_INPUTS) >= 25
    assert len({kind for bad in BAD_INPUTS for kind, _, _ in bad.told}) >= 20
