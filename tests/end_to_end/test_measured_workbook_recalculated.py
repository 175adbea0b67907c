"""The workbook of loads and prices from data, recalculated by LibreOffice: rates follow every input that is live."""

from __future__ import annotations

import datetime
from functools import cache
from pathlib import Path
from typing import Any

import pytest

from lossworth.report.view import EvaluationView
from lossworth.report.workbook import workbook_bytes
from support.libreoffice import recalculated
from support.measured_views import measured_view
from support.workbook_cells import Cells, cells, formulas, row_of, with_cell

#: What a reader changes: the value as written in the tender, and the cells of the inputs sheet that take it.
CHANGES: dict[str, tuple[dict[str, Any], tuple[tuple[str, str], ...]]] = {
    "carbon": ({"carbon_cost": "0.05"}, (("Carbon cost", "0.05"),)),
    "demand": ({"demand_charge_per_month": "6.25"}, (("Demand charge per month", "6.25"),)),
    "fixed": ({"fixed_charge_rate": "9.5"}, (("Fixed charge rate", "9.5"),)),
    "peak": ({"peak_of_year_5": "0.91"}, (("Peak load year 5", "0.91"),)),
    "dates": (
        {"service_date": datetime.date(2030, 1, 1)},
        (
            ("Years from the price date to the service date", "4"),
            ("Years from the service date back to the date of present values", "4"),
        ),
    ),
}
WRONG = ("Rates by year", "J10", "123456.5")


@cache
def delivered_views() -> dict[str, EvaluationView]:
    """The plain evaluation, and one for each changed input."""
    return {"plain": measured_view(), **{name: measured_view(**changes) for name, (changes, _) in CHANGES.items()}}


@pytest.fixture(scope="module")
def files(tmp_path_factory: pytest.TempPathFactory) -> dict[str, tuple[Path, Path]]:
    """Workbooks as delivered and as recalculated; those named "... typed" are the plain one with other inputs."""
    folder = tmp_path_factory.mktemp("measured")
    made = {}
    for name, view in delivered_views().items():
        made[name] = folder / f"{name}.xlsx"
        made[name].write_bytes(workbook_bytes(view))
    for name, (_, cells_changed) in CHANGES.items():
        path = made["plain"]
        for step, (label, value) in enumerate(cells_changed):
            cell = f"B{row_of(path, 'Inputs', 'A', label)}"
            path = with_cell(path, folder / f"{name} typed {step}.xlsx", "Inputs", cell, value)
        made[f"{name} typed"] = path
    made["wrong"] = with_cell(made["plain"], folder / "wrong.xlsx", *WRONG)
    results = recalculated(list(made.values()), folder / "recalculated")
    return {name: (path, result) for (name, path), result in zip(made.items(), results, strict=True)}


def differing(before: Cells, after: Cells, places: Any) -> list[tuple[Any, Any, Any]]:
    """Cells that do not agree: numbers to 1e-9 and a thousandth of a cent, everything else exactly."""

    def agree(one: object, other: object) -> bool:
        if isinstance(one, int | float) and isinstance(other, int | float):
            return bool(one == pytest.approx(other, rel=1e-9, abs=1e-5))
        return (one or None) == (other or None)

    found = ((place, before.get(place), after.get(place)) for place in places)
    return [(place, one, other) for place, one, other in found if not agree(one, other)]


@pytest.mark.parametrize("name", ["plain", *CHANGES])
def test_measured_workbook__recalculates_to_the_engines_values(files: dict[str, tuple[Path, Path]], name: str) -> None:
    """Year table, fixed charge rate, conversions, totals and ranks: each formula gives what was cached beside it."""
    delivered, result = files[name]
    places = formulas(delivered)
    assert len([place for place in places if place[0] == "Rates by year"]) > 400
    assert differing(cells(delivered), cells(result), places) == []


def test_measured_workbook__wrong_cached_value_is_found(files: dict[str, tuple[Path, Path]]) -> None:
    """The comparison above can fail: a present value that is wrong does not survive the recalculation."""
    delivered, result = files["wrong"]
    wrong = differing(cells(delivered), cells(result), formulas(delivered))
    assert [place for place, *_ in wrong] == [WRONG[:2]]


@pytest.mark.parametrize("name", CHANGES)
def test_measured_workbook__changed_input_gives_what_the_engine_gives(
    files: dict[str, tuple[Path, Path]], name: str
) -> None:
    """A changed input moves rates, year table, costs and ranks to what the engine computes for it."""
    expected, after, before = cells(files[name][0]), cells(files[f"{name} typed"][1]), cells(files["plain"][0])
    sheets = ("Ranking", "Rates", "Rates by year")
    places = [place for place in expected if place[0] in sheets and not place[1].startswith(("N", "O"))]
    assert differing(expected, after, places) == []
    moved = {place[0] for place, *_ in differing(before, after, places)}
    assert {"Ranking", "Rates"} <= moved
    assert ("Rates by year" in moved) == (name != "fixed")
