"""The example of power transformers: rates, conversions and ranks, recomputed from its files by plain loops."""

from __future__ import annotations

import csv
import datetime
import importlib.util
import json
from functools import cache
from pathlib import Path
from typing import Any

import pytest

from lossworth.findings import KINDS, Effect
from support.command_line import call
from support.tender_folders import read_folder

FOLDER = Path(__file__).resolve().parents[2] / "docs" / "example_power_tender"
YEARS, RATE, ESCALATION, CARBON_ESCALATION = 35, 0.055, 0.005, 0.02
DELAY = (datetime.date(2028, 10, 20) - datetime.date(2026, 10, 20)).days / 365.25
CHARGE, RESPONSIBILITY = 12 * 4.20, 0.95


@pytest.fixture(scope="module")
def result(tmp_path_factory: pytest.TempPathFactory) -> dict[str, Any]:
    """What `evaluate` writes of the example."""
    papers = tmp_path_factory.mktemp("papers")
    outcome = call("evaluate", FOLDER, "--papers", papers, "--as-of", "2026-10-20T10:00:00Z")
    assert outcome.code == 0, outcome.err
    assert {path.suffix for path in papers.iterdir() if path.is_file()} == {".html", ".xlsx", ".json"}
    written: dict[str, Any] = json.loads((papers / "evaluation.json").read_text(encoding="utf-8"))
    return written


def lot(result: dict[str, Any], number: str) -> dict[str, Any]:
    """One lot of the result."""
    return next(each for each in result["lots"] if each["id"] == number)


def offers(result: dict[str, Any], number: str) -> dict[str, dict[str, Any]]:
    """Offers of a lot by the first word of the bidder."""
    return {offer["bidder"].split()[0]: offer for offer in lot(result, number)["offers"]}


@cache
def hours() -> list[tuple[float, float]]:
    """Load over 31.5 MVA and price of each hour, from the csv file and the words of the tariff."""
    with (FOLDER / "profiles" / "substation.csv").open(encoding="utf-8") as file:
        rows = [
            (datetime.datetime.fromisoformat(row["time"]), float(row["load [kVA]"])) for row in csv.DictReader(file)
        ]
    return [(load / 31_500, price_at(time)) for time, load in rows]


def price_at(time: datetime.datetime) -> float:
    """Price of the tariff at a time."""
    if time.weekday() > 4 or not 7 <= time.hour < 21:
        return 0.058
    return 0.148 if time.month in (11, 12, 1, 2) else 0.092


def rates_by_loops() -> tuple[float, float, float]:
    """A, B and C of lot 1: every hour of every year by itself, mid-year, growing to the cap, fans in two halves."""
    first = max(load for load, _ in hours())
    a = b = c = 0.0
    for year in range(1, YEARS + 1):
        discount = (1 + RATE) ** -(year - 0.5)
        price = (1 + ESCALATION) ** (DELAY + year - 1)
        carbon = 0.010 * (1 + CARBON_ESCALATION) ** (DELAY + year - 1)
        peak = min(first * 1.012 ** (year - 1), 0.95)
        times = peak / first
        at_peak = peak * RESPONSIBILITY
        cost = [(load * times, block * price + carbon) for load, block in hours()]
        a += discount * (sum(each for _, each in cost) + CHARGE)
        b += discount * (sum(load**2 * each for load, each in cost) + CHARGE * at_peak**2)
        for above in (0.50, 0.64):
            fans = sum(each for load, each in cost if load > above) + CHARGE * (at_peak > above)
            c += discount * 0.5 * fans
    return a, b, c


def test_rates__shows_the_example() -> None:
    """`rates` shows A, B and C, the profile behind them and the stages, without reading a bid."""
    outcome = call("rates", FOLDER, "--years")
    assert outcome.code == 0, outcome.err
    for text in ("profiles/substation.csv", "cooling above 0.5", "cooling above 0.64", "winter peak", "present worth"):
        assert text in outcome.out


def test_evaluate__rates_by_plain_loops(result: dict[str, Any]) -> None:
    """Profile, blocks, carbon, dates, growth and stages give the rates that a loop over all hours gives."""
    rates = lot(result, "1")["rates"]
    for name, expected in zip("ABC", rates_by_loops(), strict=True):
        assert float(rates[name]) == pytest.approx(expected, abs=0.0051)


def test_evaluate__load_and_price_move_together(result: dict[str, Any]) -> None:
    """The loss factor by price exceeds the one by time, and each lies between the load factor and its square."""
    facts = {fact["label"]: float(fact["value"]) for fact in lot(result, "1")["rates"]["load_profile"]["facts"]}
    load, by_time, by_price = (facts[name] for name in ("load factor", "loss factor, by time", "loss factor, by price"))
    assert load**2 < by_time < by_price < load


def test_evaluate__fans_run_longer_as_the_load_grows(result: dict[str, Any]) -> None:
    """Hours of both stages never fall, and the later stage has fewer in every year."""
    first, second = (stage["hours_by_year"] for stage in lot(result, "1")["rates"]["load_profile"]["cooling_stages"])
    for hours_by_year in (first, second):
        assert hours_by_year == sorted(hours_by_year)
    assert all(0 < later < earlier < 8760 for earlier, later in zip(first, second, strict=True))
    assert first[0] == sum(load > 0.50 for load, _ in hours())


def test_evaluate__losses_on_one_basis(result: dict[str, Any]) -> None:
    """The load loss of the other rating and that of the other temperature cost what the formulas make of them."""
    b = float(lot(result, "1")["rates"]["B"])
    by_bidder = offers(result, "1")
    ratio = (235 + 75) / (235 + 85)
    for bidder, load_loss_kw in (
        ("Fernhollow", 138.0),
        ("Quillstone", 55.5 * (31.5 / 20) ** 2),
        ("Ravenmoor", 122.0 * ratio + 18.0 / ratio),
    ):
        assert float(by_bidder[bidder]["per_unit"]["load_cost"]) == pytest.approx(b * load_loss_kw, abs=0.0051)
    assert [bool(by_bidder[name]["assumptions"]) for name in ("Fernhollow", "Quillstone", "Ravenmoor")] == [
        False,
        True,
        True,
    ]


def test_evaluate__total_loss_and_question(result: dict[str, Any]) -> None:
    """A total loss is taken apart where the tender says so; another temperature is a question where it does not."""
    by_bidder = offers(result, "2")
    b = float(lot(result, "2")["rates"]["B"])
    assert float(by_bidder["Quillstone"]["per_unit"]["load_cost"]) == pytest.approx(b * (71.4 - 6.9), abs=0.0051)
    assert by_bidder["Ravenmoor"]["status"] == "not evaluated"
    question = next(finding for finding in result["findings"] if finding["kind"] == "loss-basis-differs")
    assert "please state the guaranteed load loss at 75 °C" in question["remedy"]


def test_evaluate__ranks_by_total(result: dict[str, Any]) -> None:
    """In each lot the ranked offers stand by their totals, which are the sums of their parts times the quantity."""
    for each in result["lots"]:
        ranked = [offer for offer in each["offers"] if offer["status"] == "ranked"]
        totals = [float(offer["total_owning_cost"]) for offer in sorted(ranked, key=lambda offer: offer["rank"])]
        assert totals == sorted(totals)
        for offer in ranked:
            parts = ("evaluated_price", "no_load_cost", "load_cost", "auxiliary_cost")
            unit = sum(float(offer["per_unit"][part]) for part in parts)
            assert float(offer["total_owning_cost"]) == pytest.approx(unit * each["quantity"], abs=0.02)
    assert lot(result, "3")["rates"]["basis"] == "announced"


def test_example__no_fault() -> None:
    """Nothing in the example is at fault: what is found are notes, and one offer on another basis."""
    _, read, findings = read_folder(FOLDER)
    assert len(read) == 9
    assert {KINDS[finding.kind].effect for finding in findings} <= {Effect.NOTE}


def test_make_profile__writes_what_is_there() -> None:
    """The committed profile is what its program writes."""
    spec = importlib.util.spec_from_file_location("make_profile", FOLDER / "make_profile.py")
    assert spec is not None
    assert spec.loader is not None
    module = importlib.util.module_from_spec(spec)
    spec.loader.exec_module(module)
    assert module.text() == module.PROFILE.read_text(encoding="utf-8")


def test_example__says_that_it_is_invented() -> None:
    """Nobody takes a figure of the example for a real one."""
    for name in ("README.md", "tender.toml", "bids/offers.csv", "make_profile.py"):
        assert "INVENTED DATA" in (FOLDER / name).read_text(encoding="utf-8")
