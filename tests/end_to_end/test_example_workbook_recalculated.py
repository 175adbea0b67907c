"""The example's delivered workbook, recalculated by LibreOffice: the live year table gives the engine's rates."""

from __future__ import annotations

import json
from pathlib import Path
from typing import Any

import pytest

from support.command_line import call
from support.libreoffice import recalculated
from support.workbook_cells import cells, formulas

FOLDER = Path(__file__).resolve().parents[2] / "docs" / "example_power_tender"


@pytest.fixture(scope="module")
def books(tmp_path_factory: pytest.TempPathFactory) -> tuple[Path, Path, dict[str, Any]]:
    """The workbook as written, as recalculated, and the result file beside it."""
    papers = tmp_path_factory.mktemp("papers")
    outcome = call("evaluate", FOLDER, "--papers", papers, "--as-of", "2026-10-20T10:00:00Z")
    assert outcome.code == 0, outcome.err
    (again,) = recalculated([papers / "evaluation.xlsx"], tmp_path_factory.mktemp("recalculated"))
    result: dict[str, Any] = json.loads((papers / "evaluation.json").read_text(encoding="utf-8"))
    return papers / "evaluation.xlsx", again, result


def test_example_workbook__every_formula_recalculates(books: tuple[Path, Path, dict[str, Any]]) -> None:
    """Every formula gives again the value that was written beside it."""
    written, again, _ = books
    before, after = cells(written), cells(again)
    places = formulas(written)
    assert len(places) > 500
    for place in places:
        if isinstance(before[place], int | float):
            assert after[place] == pytest.approx(before[place], rel=1e-9, abs=1e-9), place
        else:
            assert after[place] == before[place], place


def test_example_workbook__rates_of_the_engine(books: tuple[Path, Path, dict[str, Any]]) -> None:
    """The recalculated sheet of rates holds A, B and C of the result file for each derived lot."""
    _, again, result = books
    numbers = [v for (sheet, _), v in cells(again).items() if sheet == "Rates" and isinstance(v, int | float)]
    for lot in result["lots"]:
        for name in ("A", "B", "C"):
            rate = lot["rates"][name]
            assert rate is None or any(abs(float(rate) - number) < 1e-9 for number in numbers), (lot["id"], name)
