"""The commands as their users type them: exit codes, papers, messages, and nothing half-written."""

from __future__ import annotations

import json
import shutil
from pathlib import Path

import pytest

from lossworth.findings import KINDS, Effect, quoted
from support.bad_inputs import BAD_INPUTS, BadInput
from support.command_line import call
from support.tender_folders import write_folder

PAPERS = {"evaluation.html", "evaluation.json", "evaluation.xlsx"}
TIME = ("--as-of", "2026-09-15T10:00:00Z")


@pytest.mark.parametrize("bad", BAD_INPUTS, ids=lambda bad: bad.id)
def test_evaluate__bad_input(bad: BadInput, tmp_path: Path):
    """Bad input names place, value and remedy; a fault that stops leaves no paper, a fault of one offer every paper."""
    folder = tmp_path / "tender"
    bad.make(folder)
    outcome = call("evaluate", folder, *TIME)
    for _, place, value in bad.told:
        assert place in outcome.err
        assert not value or quoted(value)[:40] in outcome.err or "a blank" in outcome.err
    assert "Traceback" not in outcome.out + outcome.err
    assert outcome.err.count("  fix: ") >= len(bad.told)
    written = {path.name for path in (folder / "papers").glob("*") if path.is_file()}
    assert (outcome.code, written) == ((1, set()) if bad.stops else (0, PAPERS))
    if not bad.stops:
        _assert_left_out(folder, bad)


def _assert_left_out(folder: Path, bad: BadInput) -> None:
    """Every paper lists the offers with a fault, unranked, with the reason."""
    result = json.loads((folder / "papers/evaluation.json").read_text(encoding="utf-8"))
    page = (folder / "papers/evaluation.html").read_text(encoding="utf-8")
    unranked = [o for lot in result["lots"] for o in lot["offers"] if o["status"] != "ranked"]
    faults = [kind for kind, _, _ in bad.told if KINDS[kind].effect is not Effect.NOTE]
    assert bool(unranked) == bool(faults)
    for offer in unranked:
        assert offer["rank"] is None
        assert offer["reasons"]
        assert page.count(offer["status"]) > 0


def test_evaluate__good_input(tmp_path: Path):
    """A good folder gives the three papers and exit code 0."""
    folder = write_folder(tmp_path)
    outcome = call("evaluate", folder, *TIME)
    assert (outcome.code, {path.name for path in (folder / "papers").iterdir()}) == (0, PAPERS)


def test_evaluate__does_not_overwrite_unasked(tmp_path: Path):
    """Existing papers stay, byte by byte, unless the user says so."""
    folder = write_folder(tmp_path)
    call("evaluate", folder, *TIME)
    before = {path: path.read_bytes() for path in (folder / "papers").iterdir()}
    refused = call("evaluate", folder, "--as-of", "2027-01-01T00:00:00Z")
    assert refused.code == 2
    assert "--overwrite" in refused.err
    assert before == {path: path.read_bytes() for path in (folder / "papers").iterdir()}
    assert call("evaluate", folder, "--overwrite", "--as-of", "2027-01-01T00:00:00Z").code == 0
    assert before != {path: path.read_bytes() for path in (folder / "papers").iterdir()}


def test_evaluate__same_bytes_twice(tmp_path: Path, monkeypatch: pytest.MonkeyPatch):
    """The same input gives the same bytes, by the flag and by the environment's clock."""
    folder = write_folder(tmp_path)
    call("evaluate", folder, "--papers", tmp_path / "one", *TIME)
    monkeypatch.setenv("SOURCE_DATE_EPOCH", "1789466400")  # 2026-09-15T10:00:00Z
    call("evaluate", folder, "--papers", tmp_path / "two")
    for name in PAPERS:
        assert (tmp_path / "one" / name).read_bytes() == (tmp_path / "two" / name).read_bytes()


def test_evaluate__folder_may_move(tmp_path: Path):
    """Papers carry no path of the machine: a moved folder gives the same bytes."""
    folder = write_folder(tmp_path / "a")
    shutil.copytree(folder, tmp_path / "elsewhere" / "b")
    call("evaluate", folder, *TIME)
    call("evaluate", tmp_path / "elsewhere" / "b", *TIME)
    for name in PAPERS:
        moved = tmp_path / "elsewhere" / "b" / "papers" / name
        assert (folder / "papers" / name).read_bytes() == moved.read_bytes()


def test_evaluate__single_files(tmp_path: Path):
    """A tender file and bid files may be named one by one."""
    folder = write_folder(tmp_path)
    bids = sorted((folder / "bids").iterdir())
    outcome = call("evaluate", folder / "tender.toml", *bids, "--papers", tmp_path / "out", *TIME)
    assert (outcome.code, {path.name for path in (tmp_path / "out").iterdir()}) == (0, PAPERS)


@pytest.mark.parametrize("time", ["yesterday", "2026-09-15T10:00:00", ""])
def test_evaluate__time_that_cannot_be_read(time: str, tmp_path: Path):
    """A time without zone, or no time, is misuse."""
    outcome = call("evaluate", write_folder(tmp_path), "--as-of", time)
    assert outcome.code == 2
    assert "2026-09-15T10:00:00Z" in outcome.err


def test_evaluate__folder_without_a_tender(tmp_path: Path):
    """A folder that is not there, or holds no tender, is a finding and not a failure."""
    assert call("evaluate", tmp_path / "nowhere").code == 1
    assert call("evaluate", tmp_path).code == 1


def test_check__writes_nothing(tmp_path: Path):
    """`check` reports and leaves the folder as it is."""
    folder = write_folder(tmp_path)
    before = sorted(folder.rglob("*"))
    outcome = call("check", folder)
    assert (outcome.code, sorted(folder.rglob("*"))) == (0, before)
    assert "4 offers in" in outcome.out


def test_start__works_at_once(tmp_path: Path):
    """The starter can be evaluated as it is, and is not written over something."""
    assert call("start", tmp_path / "new").code == 0
    assert call("evaluate", tmp_path / "new", *TIME).code == 0
    again = call("start", tmp_path / "new")
    assert (again.code, "not empty" in again.err) == (2, True)


def test_rates__reads_no_bids(tmp_path: Path):
    """Rates are shown without any bid, with the year table where asked."""
    call("start", tmp_path / "new")
    shutil.rmtree(tmp_path / "new" / "bids")
    plain, years = call("rates", tmp_path / "new"), call("rates", tmp_path / "new", "--years")
    assert (plain.code, years.code) == (0, 0)
    assert "A = " in plain.out
    assert years.out.count("\n") >= plain.out.count("\n") + 30


def test_unknown_command__is_misuse():
    """A misspelled command is misuse, and says what was meant."""
    outcome = call("evalute")
    assert outcome.code == 2
    assert "evaluate" in outcome.err


def test_evaluate__papers_where_a_file_stands(tmp_path: Path):
    """A papers folder that cannot be made is a failure with a message, and no traceback."""
    folder = write_folder(tmp_path)
    (tmp_path / "file").write_text("in the way", encoding="utf-8")
    outcome = call("evaluate", folder, "--papers", tmp_path / "file" / "papers", *TIME)
    assert outcome.code == 3
    assert "The system refused" in outcome.err
