"""The workbook of a tender with every price step, recalculated by LibreOffice: to the cent, live from the inputs."""

from __future__ import annotations

from functools import cache
from pathlib import Path
from typing import Any

import pytest

from lossworth.report.view import EvaluationView
from lossworth.report.workbook import workbook_bytes
from support.libreoffice import recalculated
from support.priced_views import priced_view
from support.workbook_cells import Cells, cells, formulas, row_of, with_cell

#: What a reader changes: the argument of the view, the label of the cell on the sheet of the inputs, the value.
CHANGES = {
    "margin": ("margin", "Preference margin", "6.25"),
    "interest": ("interest", "Interest rate", "13"),
    "week": ("per_week", "Adder per week, percent of the price", "0.505"),
}
ROUNDINGS: dict[str, dict[str, Any]] = {"lot": {"per_lot": True}, "down": {"down": True}}
WRONG = ("Prices", "E8", "4321.5")


@cache
def delivered_views() -> dict[str, EvaluationView]:
    """The plain evaluation, one for each changed input, one for each rounding."""
    changed = {name: priced_view(**{argument: value}) for name, (argument, _, value) in CHANGES.items()}
    return {"plain": priced_view(), **changed, **{name: priced_view(**rule) for name, rule in ROUNDINGS.items()}}


@pytest.fixture(scope="module")
def files(tmp_path_factory: pytest.TempPathFactory) -> dict[str, tuple[Path, Path]]:
    """Workbooks as delivered and as recalculated; those named "... typed" are the plain one with another input."""
    folder = tmp_path_factory.mktemp("priced")
    made = {}
    for name, view in delivered_views().items():
        made[name] = folder / f"{name}.xlsx"
        made[name].write_bytes(workbook_bytes(view))
    for name, (_, label, value) in CHANGES.items():
        cell = f"B{row_of(made['plain'], 'Inputs', 'A', label)}"
        made[f"{name} typed"] = with_cell(made["plain"], folder / f"{name} typed.xlsx", "Inputs", cell, value)
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


@pytest.mark.parametrize("name", ["plain", *CHANGES, *ROUNDINGS])
def test_priced_workbook__recalculates_to_the_engines_values(files: dict[str, tuple[Path, Path]], name: str) -> None:
    """Steps, interest, adders, contract prices, ranks with and without preference: each formula gives its value."""
    delivered, result = files[name]
    places = formulas(delivered)
    assert len([place for place in places if place[0] == "Prices"]) > 100
    assert differing(cells(delivered), cells(result), places) == []


def test_priced_workbook__wrong_cached_value_is_found(files: dict[str, tuple[Path, Path]]) -> None:
    """The comparison above can fail: a price that is wrong does not survive the recalculation."""
    delivered, result = files["wrong"]
    assert WRONG[:2] in {place for place, *_ in differing(cells(delivered), cells(result), formulas(delivered))}


@pytest.mark.parametrize("name", CHANGES)
def test_priced_workbook__changed_input_gives_what_the_engine_gives(
    files: dict[str, tuple[Path, Path]], name: str
) -> None:
    """A margin, an interest rate or an adder that is typed in moves prices, costs and both rankings."""
    expected, after, before = cells(files[name][0]), cells(files[f"{name} typed"][1]), cells(files["plain"][0])
    sheets = ("Ranking", "Evaluation", "Contract prices", "Prices")
    places = [place for place in formulas(files[name][0]) if place[0] in sheets]
    assert differing(expected, after, places) == []
    moved = {place[0] for place, *_ in differing(before, after, places)}
    assert {"Ranking", "Evaluation", "Contract prices", "Prices"} <= moved
