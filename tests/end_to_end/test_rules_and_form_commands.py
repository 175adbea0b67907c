"""`lossworth rules` and `lossworth form` as users type them."""

from __future__ import annotations

import json
import shutil
from pathlib import Path

import pytest
from click.testing import CliRunner, Result

from lossworth.cli.main import lossworth
from lossworth.evaluation.rules_proof import compare_rules
from lossworth.records.rules import PUBLISHED_RULES
from support.tender_folders import TENDER, valid_tender, write_folder

_WITHOUT_TABLES = """[rules]
taxes = "excluded"
payment_terms = "discount to a common date"
preference = "margin added to other prices"
"""
_TIME = ["--as-of", "2026-08-01T10:00:00Z"]


def run(*arguments: object) -> Result:
    """The command line with some arguments."""
    return CliRunner().invoke(lossworth, [str(argument) for argument in arguments])


@pytest.fixture
def folder(tmp_path: Path) -> Path:
    """A tender folder without bids."""
    return write_folder(tmp_path / "tender", bids={})


def test_rules__writes_page_and_data_and_prints_the_fingerprint(folder: Path) -> None:
    """Two files, and the sheet on the screen."""
    done = run("rules", folder, *_TIME)
    assert done.exit_code == 0, done.output
    file = json.loads((folder / "papers" / "rules.json").read_text(encoding="utf-8"))
    assert f"Fingerprint (SHA-256): {file['fingerprint']}" in done.output
    assert file["fingerprint"] in (folder / "papers" / "rules.html").read_text(encoding="utf-8")
    assert sorted(path.name for path in (folder / "papers").iterdir()) == ["rules.html", "rules.json"]
    assert not (folder / PUBLISHED_RULES).exists()


def test_rules__same_inputs_same_bytes(folder: Path) -> None:
    """The time comes from outside."""
    run("rules", folder, *_TIME)
    first = {path.name: path.read_bytes() for path in (folder / "papers").iterdir()}
    run("rules", folder, *_TIME, "--overwrite")
    assert first == {path.name: path.read_bytes() for path in (folder / "papers").iterdir()}


def test_rules__publish_keeps_a_file_once(folder: Path, tmp_path: Path) -> None:
    """The published file proves the rules, and no option replaces it."""
    assert run("rules", folder, "--publish").exit_code == 0
    kept = (folder / PUBLISHED_RULES).read_text(encoding="utf-8")
    assert compare_rules(valid_tender(tmp_path, TENDER), kept).is_proven
    again = run("rules", folder, "--publish", "--overwrite")
    assert again.exit_code == 2
    assert "published rules are never replaced" in again.output
    assert kept == (folder / PUBLISHED_RULES).read_text(encoding="utf-8")


def test_rules__publish_refuses_rules_that_cannot_work(tmp_path: Path) -> None:
    """Nothing is written, and every gap is named; without the option the sheet shows them."""
    folder = write_folder(tmp_path / "tender", tender=TENDER.replace("[rules]\n", _WITHOUT_TABLES, 1), bids={})
    refused = run("rules", folder, "--publish")
    assert refused.exit_code == 2
    assert "Nothing is published" in refused.output
    for table in ("[taxes]", "[payment]", "[preference]"):
        assert table in refused.output
    assert not (folder / PUBLISHED_RULES).exists()
    assert not (folder / "papers").exists()
    assert run("rules", folder).exit_code == 0


def test_rules__a_tender_file_alone_and_another_folder_for_papers(folder: Path, tmp_path: Path) -> None:
    """The sheet goes where the option says, the published file beside the tender file."""
    done = run("rules", folder / "tender.toml", "--publish", "--papers", tmp_path / "elsewhere")
    assert done.exit_code == 0, done.output
    assert (tmp_path / "elsewhere" / "rules.html").is_file()
    assert (folder / PUBLISHED_RULES).is_file()
    assert not (folder / "papers").exists()


@pytest.mark.parametrize("command", ["rules", "form"])
def test_commands__replace_nothing_unasked(folder: Path, command: str) -> None:
    """A second run stops until it may overwrite, and leaves what is there."""
    assert run(command, folder).exit_code == 0
    before = {path.name: path.stat().st_mtime_ns for path in (folder / "papers").iterdir()}
    assert type(run(command, folder).exception).__name__ == "OutputExists"
    assert before == {path.name: path.stat().st_mtime_ns for path in (folder / "papers").iterdir()}
    assert run(command, folder, "--overwrite").exit_code == 0


@pytest.mark.parametrize("command", ["rules", "form"])
@pytest.mark.parametrize("text", ["", "not toml", TENDER.replace("rated_power_kva = 100\n", "rated_power_kva = -1\n")])
def test_commands__a_faulty_tender_writes_nothing(tmp_path: Path, command: str, text: str) -> None:
    """Findings stop both commands before a file is begun."""
    folder = write_folder(tmp_path / "tender", tender=text, bids={})
    assert type(run(command, folder).exception).__name__ == "EvaluationStopped"
    assert not (folder / "papers").exists()


def test_form__writes_the_workbook(folder: Path) -> None:
    """One file, the same bytes each time."""
    done = run("form", folder, *_TIME)
    assert done.exit_code == 0, done.output
    first = (folder / "papers" / "bid_form.xlsx").read_bytes()
    run("form", folder, *_TIME, "--overwrite")
    assert first == (folder / "papers" / "bid_form.xlsx").read_bytes()
    assert "2 lots" in done.output


def test_form__a_blank_form_among_the_bids_is_told(folder: Path) -> None:
    """Who puts the blank form into the bids is told that it offers nothing."""
    run("form", folder)
    (folder / "bids").mkdir(exist_ok=True)
    shutil.copy(folder / "papers" / "bid_form.xlsx", folder / "bids" / "alder.xlsx")
    stopped = run("check", folder)
    assert type(stopped.exception).__name__ == "EvaluationStopped"
    assert "no-offers" in [finding.kind for finding in stopped.exception.findings]  # type: ignore[union-attr]
