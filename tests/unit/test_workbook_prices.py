"""Sheets of prices, corrections and decisions: live, complete, and absent where a tender has none."""

from __future__ import annotations

from pathlib import Path

import openpyxl
import pytest

from lossworth.report.view import EvaluationView
from lossworth.report.workbook import workbook_bytes
from support.priced_views import HOSTILE_NAME, priced_view
from support.sample_views import workbook_view
from support.workbook_cells import Cells, cells, formulas, row_of


@pytest.fixture(scope="module")
def view() -> EvaluationView:
    return priced_view()


@pytest.fixture(scope="module")
def path(view: EvaluationView, tmp_path_factory: pytest.TempPathFactory) -> Path:
    file = tmp_path_factory.mktemp("priced") / "priced.xlsx"
    file.write_bytes(workbook_bytes(view))
    return file


@pytest.fixture(scope="module")
def shown(path: Path) -> Cells:
    return cells(path)


def row(shown: Cells, sheet: str, number: int, last: str) -> list[object]:
    """Values of a row from column A on."""
    return [shown.get((sheet, f"{chr(code)}{number}")) for code in range(ord("A"), ord(last) + 1)]


def test_workbook_bytes__same_twice_with_prices(view: EvaluationView) -> None:
    """The same view gives the same bytes."""
    assert workbook_bytes(view) == workbook_bytes(priced_view())


def test_workbook_bytes__every_step_is_live(view: EvaluationView, path: Path, shown: Cells) -> None:
    """Each step of the longest chain stands in a row, and each price after it is a formula."""
    offer = next(o for o in view.lots[0].offers if o.bidder == HOSTILE_NAME)
    first = row_of(path, "Prices", "A", HOSTILE_NAME) + 1
    live = formulas(path)
    for position, step in enumerate(offer.price_steps):
        number = first + position
        assert shown["Prices", f"A{number}"].lower() == step.label.lower()
        assert shown["Prices", f"E{number}"] == pytest.approx(float(view.figures[step.price].value), rel=1e-12)
        assert ("Prices", f"E{number}") in live
    assert live["Prices", f"E{first + 1}"].removeprefix("\0").startswith(f"=E{first}-") is False
    assert live["Prices", f"E{first + 4}"].removeprefix("\0").startswith(f"=E{first + 3}/")


def test_workbook_bytes__commercial_terms_are_inputs(shown: Cells) -> None:
    """Margin, interest, tax and adders stand as values among the inputs."""
    labels = {value for (sheet, place), value in shown.items() if sheet == "Inputs" and place.startswith("A")}
    assert {"Preference margin", "Interest rate", "Tax rate", "Bund, per unit", "Delivery without adder"} <= labels


def test_workbook_bytes__contract_price_apart(path: Path, shown: Cells) -> None:
    """Contract price in the currency of the bid beside the evaluated price, and both ranks."""
    number = row_of(path, "Contract prices", "A", HOSTILE_NAME)
    assert row(shown, "Contract prices", number, "I") == [
        HOSTILE_NAME, 29172.27, "FCU", "tax included", 44551.44, 65671.44, 3, 62937.91, 1
    ]  # fmt: skip


def test_workbook_bytes__three_layers(path: Path, shown: Cells) -> None:
    """As read, as corrected, as evaluated, each a reference to its cell."""
    number = row_of(path, "Corrections", "B", "Birchlune")
    assert row(shown, "Corrections", number, "I") == [
        "1", "Birchlune", "Corrected unit price", 4000, "NCU", 4090, "NCU", 4090, "NCU"
    ]  # fmt: skip
    assert {("Corrections", f"{column}{number}") for column in "DFH"} <= set(formulas(path))


def test_workbook_bytes__decisions_waivers_and_proof(path: Path, shown: Cells) -> None:
    """The log of decisions, the waived finding as such, the rules that differ."""
    number = row_of(path, "Decisions", "A", "Change status")
    assert row(shown, "Decisions", number, "I")[1:] == [
        "2", "Hazel", None, "non-responsive", "letter of the bidder", "the committee", "2026-09-25", "file 7"
    ]  # fmt: skip
    waived = row_of(path, "Findings", "A", "waived")
    assert shown["Findings", f"B{waived}"] == "Delivery later than the latest"
    assert ("Findings", f"G{waived}") not in shown
    assert shown["Record", f"B{row_of(path, 'Record', 'A', 'taxes <a>')}"] == "published: included; used: excluded"


def test_workbook_bytes__plain_prices_bring_no_sheets(tmp_path: Path) -> None:
    """A tender without commercial terms keeps the sheets that it had."""
    file = tmp_path / "plain.xlsx"
    file.write_bytes(workbook_bytes(workbook_view()))
    names = openpyxl.load_workbook(file, read_only=True).sheetnames
    assert {"Prices", "Contract prices", "Corrections", "Decisions"}.isdisjoint(names)
