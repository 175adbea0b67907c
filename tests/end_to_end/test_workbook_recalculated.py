"""The workbook recalculated by LibreOffice: every formula gives what the engine computed, also for changed inputs."""

from __future__ import annotations

import json
import random
import shutil
import subprocess
import sys
from dataclasses import dataclass
from decimal import Decimal
from functools import cache
from pathlib import Path
from typing import Any

import pytest

from lossworth.money import Rounding, RoundingMode
from lossworth.records.tender import PriceOfYear1, RoundingPoint, Timing
from lossworth.report.view import EvaluationView
from lossworth.report.workbook import workbook_bytes
from support import records as make
from support.libreoffice import recalculated
from support.sample_views import offer, view_of, workbook_tender, workbook_view
from support.workbook_cells import Cells, cells, formulas, row_of, with_cell

DOWN = Rounding(Decimal("0.01"), RoundingMode.DOWN)
WHOLE = Rounding(Decimal(1), RoundingMode.HALF_AWAY_FROM_ZERO)
PRICES = tuple(make.quantity(f"0.0{70 + year}") for year in range(30))
WRONG = ("Evaluation", "L9", "1.00")
PRICE_AFTER = "0.005"
SAMPLE_BIDS = Path(__file__).resolve().parents[2] / "sample_bids"
DEMO_PRICE, DEMO_PRICE_AFTER = "energy_price_per_kwh = 0.085", "0.03"
#: Columns of the ranking in which the sorting itself goes on: where each offer stands on another sheet.
HELPERS = "NO"


def many_offers(seed: int, rounding: Rounding) -> EvaluationView:
    """A lot of 200 offers whose products often end in exactly half a cent, or in a whole one."""
    draw = random.Random(seed)
    lot = make.lot("1", rates=make.rates("11006.50", "660.5"), quantity=make.quantity("7"))
    read = tuple(
        offer(f"Bidder {n}", "1", n, (f"{draw.randrange(400000, 410000)}.005", losses(draw), losses(draw)))
        for n in range(1, 201)
    )
    tender = make.tender(lot, rules=workbook_tender(rounding=rounding).rules)
    return view_of(tender, read)


def losses(draw: random.Random) -> str:
    """A loss in kW with one to three decimals."""
    return str(Decimal(draw.randrange(100, 9999)).scaleb(-draw.randrange(1, 4)))


@cache
def views() -> dict[str, EvaluationView]:
    """Evaluations that differ in one rule each."""
    by_year = {"energy_price_per_kwh": None, "energy_price_by_year_per_kwh": PRICES}
    today = {
        "energy_price_escalation_percent": make.quantity("2.5"),
        "energy_price_meaning": PriceOfYear1.TODAY,
        "demand_charge_escalation_percent": make.quantity("1.5"),
        "timing": Timing.MID_YEAR,
        "upstream_gross_up": make.quantity("1.03"),
    }
    return {
        "plain": workbook_view(),
        "dearer": workbook_view(economics={"energy_price_per_kwh": make.quantity(PRICE_AFTER)}),
        "shorter": workbook_view(economics={"evaluation_period_years": make.quantity("12")}),
        "down": workbook_view(rounding=DOWN),
        "whole": workbook_view(rounding=WHOLE),
        "per_lot": workbook_view(applies_to=RoundingPoint.PART_PER_LOT),
        "by_year": workbook_view(economics=by_year),
        "today": workbook_view(economics=today),
        "many": many_offers(1, make.CENT),
        "many_down": many_offers(2, DOWN),
    }


def evaluated_demo(folder: Path, price: str) -> tuple[Path, dict[str, Any]]:
    """Workbook and result of `lossworth evaluate` for the demo, at another energy price of lots 1 to 3."""
    tender = folder / "tender"
    shutil.copytree(SAMPLE_BIDS, tender, ignore=shutil.ignore_patterns("papers", "*.py"))
    text = (tender / "tender.toml").read_text(encoding="utf-8")
    assert DEMO_PRICE in text
    (tender / "tender.toml").write_text(text.replace(DEMO_PRICE, price, 1), encoding="utf-8")
    command = [Path(sys.executable).with_name("lossworth"), "evaluate", tender, "--papers", folder]
    done = subprocess.run([*command, "--as-of", "2026-09-15T10:00:00Z"], capture_output=True, text=True, check=False)
    assert done.returncode == 0, done.stderr
    return folder / "evaluation.xlsx", json.loads((folder / "evaluation.json").read_text(encoding="utf-8"))


@dataclass(frozen=True)
class Pair:
    """A workbook as delivered, and as recalculated."""

    delivered: Path
    recalculated: Path


@pytest.fixture(scope="module")
def pairs(tmp_path_factory: pytest.TempPathFactory) -> dict[str, Pair]:
    """All workbooks of this file, recalculated by one call."""
    folder = tmp_path_factory.mktemp("workbooks")
    delivered = {}
    for name, view in views().items():
        delivered[name] = folder / f"{name}.xlsx"
        delivered[name].write_bytes(workbook_bytes(view))
    for name, price in (("demo", DEMO_PRICE), ("demo_cheaper", f"energy_price_per_kwh = {DEMO_PRICE_AFTER}")):
        (folder / name).mkdir()
        made, _ = evaluated_demo(folder / name, price)
        delivered[name] = made.rename(folder / f"{name}.xlsx")
    demo = delivered["demo"]
    price = f"B{row_of(demo, 'Inputs', 'A', 'Energy price')}"
    delivered["demo_changed"] = with_cell(demo, folder / "demo_changed.xlsx", "Inputs", price, DEMO_PRICE_AFTER)
    plain = delivered["plain"]
    delivered["wrong"] = with_cell(plain, folder / "wrong.xlsx", *WRONG)
    price = f"B{row_of(plain, 'Inputs', 'A', 'Energy price')}"
    delivered["price_changed"] = with_cell(plain, folder / "price_changed.xlsx", "Inputs", price, PRICE_AFTER)
    period = f"B{row_of(plain, 'Inputs', 'A', 'Evaluation period')}"
    delivered["period_changed"] = with_cell(plain, folder / "period_changed.xlsx", "Inputs", period, "12")
    results = recalculated(list(delivered.values()), folder / "recalculated")
    return {name: Pair(path, result) for (name, path), result in zip(delivered.items(), results, strict=True)}


def agree(one: object, other: object) -> bool:
    """Numbers to 1e-9 and a thousandth of a cent, everything else exactly."""
    if isinstance(one, int | float) and isinstance(other, int | float):
        return bool(one == pytest.approx(other, rel=1e-9, abs=1e-5))
    return (one or None) == (other or None)


def differing(before: Cells, after: Cells, places: Any) -> list[tuple[Any, Any, Any]]:
    """Cells that do not agree, with both values."""
    found = ((place, before.get(place), after.get(place)) for place in places)
    return [(place, one, other) for place, one, other in found if not agree(one, other)]


@pytest.mark.parametrize("name", [*views(), "demo", "demo_cheaper"])
def test_workbook__recalculates_to_the_engines_values(pairs: dict[str, Pair], name: str) -> None:
    """Every formula, recalculated by another program, gives the value that the engine cached beside it."""
    pair = pairs[name]
    places = formulas(pair.delivered)
    assert len(places) > 100
    assert differing(cells(pair.delivered), cells(pair.recalculated), places) == []


def test_workbook__wrong_cached_value_is_found(pairs: dict[str, Pair]) -> None:
    """The comparison above can fail: a cached value that is wrong does not survive the recalculation."""
    pair, place = pairs["wrong"], WRONG[:2]
    wrong = differing(cells(pair.delivered), cells(pair.recalculated), formulas(pair.delivered))
    assert [(place, 1.0, cells(pairs["plain"].delivered)[place])] == wrong


@pytest.mark.parametrize(
    ("changed", "same_as"),
    [("price_changed", "dearer"), ("period_changed", "shorter"), ("demo_changed", "demo_cheaper")],
)
def test_workbook__changed_input_gives_what_the_engine_gives(
    pairs: dict[str, Pair], changed: str, same_as: str
) -> None:
    """Rates, costs, sorted ranking and margins follow a changed input cell to what the engine computes for it."""
    after, expected = cells(pairs[changed].recalculated), cells(pairs[same_as].delivered)
    places = [place for place in expected if place[0] in ("Ranking", "Rates") and place[1][0] not in HELPERS]
    assert len([place for place in places if place[0] == "Ranking"]) > 60
    assert differing(expected, after, places) == []


def test_workbook__changed_price_moves_ranks(pairs: dict[str, Pair]) -> None:
    """The changed price is one that makes another bidder the first: order, rank, and the verdict on the summary."""
    before, after = cells(pairs["plain"].delivered), cells(pairs["price_changed"].recalculated)
    row = row_of(pairs["plain"].delivered, "Ranking", "B", "Cedarfell")
    assert before["Ranking", f"B{row}"] == "Cedarfell"
    assert after["Ranking", f"B{row}"] == "Alder"
    assert after["Summary", f"C{row_of(pairs['plain'].delivered, 'Summary', 'A', '2')}"] == "Alder"
    verdict = f"B{row_of(pairs['plain'].delivered, 'Summary', 'A', 'State:')}"
    assert before["Summary", verdict] == "all totals and ranks in this workbook are those that the program computed"
    assert after["Summary", verdict] == "3 totals or ranks differ from those that the program computed"


def test_workbook__demo_at_another_price_is_what_the_command_gives(pairs: dict[str, Pair], tmp_path: Path) -> None:
    """Lot 3 of the delivered workbook, recalculated at another energy price, is what a run at that price gives."""
    (lot,) = (
        lot
        for lot in evaluated_demo(tmp_path, f"energy_price_per_kwh = {DEMO_PRICE_AFTER}")[1]["lots"]
        if lot["id"] == "3"
    )
    after = cells(pairs["demo_changed"].recalculated)
    ranked = [offer for offer in lot["offers"] if offer["status"] == "ranked"]
    first = row_of(pairs["demo"].delivered, "Ranking", "B", "Elderquill Magnetics", nth=2) - len(ranked) + 1
    shown = [[after["Ranking", f"{column}{row}"] for column in "ABG"] for row in range(first, first + len(ranked))]
    assert [[o["rank"], o["bidder"], pytest.approx(float(o["total_owning_cost"]), abs=0.001)] for o in ranked] == shown
    assert ranked[0]["bidder"] == "Gorsemere Windings"


def test_recalculated__garbage_is_a_failure(tmp_path: Path) -> None:
    """The harness can fail: the program ends with 0 for a file that it cannot load."""
    missing = tmp_path / "missing.xlsx"
    with pytest.raises(AssertionError, match="not recalculated"):
        recalculated([missing], tmp_path / "out")


def test_views__rules_matter() -> None:
    """The views put different rules to the test: no two of those with the same bids have the same totals."""
    names = [name for name in views() if not name.startswith("many")]
    totals = {tuple(total_costs(views()[name])) for name in names}
    assert len(totals) == len(names)


def total_costs(view: EvaluationView) -> list[Decimal]:
    """Total owning costs of all offers, for the lot and per unit."""
    costs = (cost for lot in view.lots for each in lot.offers for cost in (each.per_unit, each.lot))
    ids = (cost.total_owning_cost for cost in costs if cost.total_owning_cost is not None)
    return [view.figures[identity].value for identity in ids]
