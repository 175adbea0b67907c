"""The demo, run by the installed command: every figure to the cent, and the studies beside the announced rates."""

from __future__ import annotations

import copy
import json
import os
import re
import shutil
import subprocess
import sysconfig
from decimal import Decimal
from pathlib import Path
from typing import Any

import pytest

from support.demo_figures import differences

SAMPLE = Path(__file__).resolve().parents[2] / "sample_bids"
PROGRAM = Path(sysconfig.get_path("scripts")) / "lossworth"
PAPERS = ("evaluation.html", "evaluation.json", "evaluation.xlsx")


def run(*arguments: str | Path) -> subprocess.CompletedProcess[str]:
    """Run the command as a user would; the time of the papers is fixed."""
    command = [str(PROGRAM), *(str(argument) for argument in arguments)]
    environment = {**os.environ, "SOURCE_DATE_EPOCH": "1789466400"}
    return subprocess.run(command, capture_output=True, text=True, check=False, env=environment)


def demo_folder(place: Path) -> Path:
    """A copy of the demo without papers."""
    shutil.copytree(SAMPLE, place / "demo", ignore=shutil.ignore_patterns("papers", "*.py", "__pycache__"))
    return place / "demo"


@pytest.fixture(scope="module")
def folder(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """The demo, evaluated once."""
    demo = demo_folder(tmp_path_factory.mktemp("demo"))
    done = run("evaluate", demo)
    assert (done.returncode, "Traceback" in done.stderr) == (0, False), done.stderr
    return demo


@pytest.fixture(scope="module")
def evaluation(folder: Path) -> dict[str, Any]:
    """Content of evaluation.json."""
    content: dict[str, Any] = json.loads((folder / "papers" / "evaluation.json").read_text(encoding="utf-8"))
    return content


def offer(evaluation: dict[str, Any], lot: str, bidder: str) -> dict[str, Any]:
    """One offer of the result."""
    (lot_result,) = (result for result in evaluation["lots"] if result["id"] == lot)
    (found,) = (result for result in lot_result["offers"] if result["bidder"].startswith(bidder))
    return dict(found)


def test_demo__every_figure_to_the_cent(evaluation: dict[str, Any]) -> None:
    """Rates, status, rank and all five amounts of every offer, per unit and per lot."""
    assert differences(evaluation) == []


@pytest.mark.parametrize(
    ("path", "value"),
    [
        (("lots", 0, "offers", 0, "total_owning_cost"), "3742200.01"),
        (("lots", 0, "offers", 0, "per_unit", "load_cost"), "759.01"),
        (("lots", 2, "offers", 5, "status"), "ranked"),
        (("lots", 1, "offers", 1, "rank"), 2),
        (("lots", 2, "rates", "B"), "2153.33"),
        (("lots", 3, "offers", 0, "auxiliary_cost"), "0.00"),
        (("lots", 3, "offers", 0, "bidder"), "Nobody"),
    ],
)
def test_differences__finds_one_wrong_figure(evaluation: dict[str, Any], path: tuple[Any, ...], value: object) -> None:
    """The comparison itself can fail: one figure changed is found."""
    wrong: Any = copy.deepcopy(evaluation)
    spot = wrong
    for step in path[:-1]:
        spot = spot[step]
    spot[path[-1]] = value
    assert differences(wrong) != []


@pytest.mark.parametrize(
    ("lot", "bidder", "rival", "amount", "percent"),
    [
        ("1", "Elderquill", "Firthwane", "44880.00", "1.20"),
        ("2", "Cedarfell", "Damsonby", "0.00", "0.00"),
        ("3", "Damsonby", "Firthwane", "5672.80", "0.16"),
        ("4", "Birchlune", "Firthwane", "4328.00", "0.20"),
    ],
)
def test_demo__margin_of_the_first(
    evaluation: dict[str, Any], lot: str, bidder: str, rival: str, amount: str, percent: str
) -> None:
    """The distance to the nearest rival that is not cheaper."""
    margin = offer(evaluation, lot, bidder)["margin"]
    assert margin["to"].startswith(rival)
    assert (amount, percent) == (margin["amount"], margin["percent_of_winner"])


def test_demo__margin_as_kilowatts(evaluation: dict[str, Any]) -> None:
    """74.80 a unit are 6.8 W of no-load loss at 11,000 per kW, and 113.3 W of load loss at 660."""
    margin = offer(evaluation, "1", "Elderquill")["margin"]
    assert (margin["no_load_loss_kw"], margin["load_loss_kw"]) == ("0.0068", "0.113333")


@pytest.mark.parametrize(
    ("lot", "bidder", "word", "place"),
    [
        ("1", "Gorsemere", "load loss", "bids/gorsemere.csv:2"),
        ("3", "Cedarfell", "load loss", "bids/cedarfell.xlsx[Offers]!E4"),
        ("3", "Birchlune", "load loss", "bids/birchlune.xlsx[Lot 3]!E4"),
        ("4", "Damsonby", "impedance", "bids/damsonby.xlsx[Power units]!F4"),
        ("4", "Gorsemere", "peak efficiency index", "bids/gorsemere.csv:5"),
    ],
)
def test_demo__reasons_name_their_cell(
    evaluation: dict[str, Any], lot: str, bidder: str, word: str, place: str
) -> None:
    """Whoever is not ranked reads why, and where it stands."""
    (reason,) = offer(evaluation, lot, bidder)["reasons"]
    assert reason.startswith(f"{word}:")
    assert place in reason


def test_demo__studies_stand_beside_the_announced_rates(folder: Path) -> None:
    """The planner's rates that the announced ones were rounded from."""
    shown = run("rates", folder).stdout
    rates = {f"{Decimal(text.replace(',', '')):.2f}" for text in re.findall(r"[ABC] = ([\d,.]+) NCU/kW", shown)}
    assert {"11006.36", "663.79", "1317.78", "11592.80", "2008.10", "1536.81"} <= rates


def test_demo__twice_the_same_bytes(folder: Path, tmp_path: Path) -> None:
    """The same input, evaluated elsewhere, gives the same papers byte for byte."""
    again = demo_folder(tmp_path)
    assert run("evaluate", again).returncode == 0
    same = {name: (folder / "papers" / name).read_bytes() == (again / "papers" / name).read_bytes() for name in PAPERS}
    assert dict.fromkeys(PAPERS, True) == same


def test_demo__does_not_replace_papers_unasked(folder: Path) -> None:
    """A second run without --overwrite is misuse and leaves everything as it was."""
    before = {name: (folder / "papers" / name).read_bytes() for name in PAPERS}
    done = run("evaluate", folder)
    assert (done.returncode, "--overwrite" in done.stderr) == (2, True)
    files = [path for path in (folder / "papers").iterdir() if path.is_file()]
    assert before == {path.name: path.read_bytes() for path in files}


def test_demo__the_order_of_the_bids_does_not_matter(folder: Path, tmp_path: Path) -> None:
    """Bids named in another order give the same lots."""
    bids = sorted((folder / "bids").iterdir(), reverse=True)
    assert run("evaluate", folder, *bids, "--papers", tmp_path).returncode == 0
    turned, straight = (
        json.loads((place / "evaluation.json").read_text(encoding="utf-8"))["lots"]
        for place in (tmp_path, folder / "papers")
    )
    assert straight == turned
