"""The result as data: method, formulas, year table, load, assumptions and information under documented names."""

from __future__ import annotations

import json
import re
from decimal import Decimal
from typing import Any

import pytest

from lossworth.report.result_file import result_text
from lossworth.report.view import EvaluationView
from support.load_views import ASSUMPTION, FORMULAS, load_page_view
from support.measured_views import measured_view
from support.page_views import page_view

_LOT = {"id", "description", "quantity", "rates", "recommendation", "offers"}
_RATES = {"A", "B", "C", "unit", "basis"}
_OFFER = {"bidder", "status", "rank", "per_unit", "margin", "as_read", "reasons"}
_PRICED = {
    "corrections",
    "price_steps",
    "contract_price",
    "total_without_preference",
    "rank_without_preference",
    "tie_decided_by",
    "decisions",
}
_COSTS = {"evaluated_price", "no_load_cost", "load_cost", "auxiliary_cost", "total_owning_cost"}


@pytest.fixture(scope="module")
def view() -> EvaluationView:
    return load_page_view()


@pytest.fixture(scope="module")
def lots(view: EvaluationView) -> list[dict[str, Any]]:
    result: dict[str, Any] = json.loads(result_text(view))
    lots: list[dict[str, Any]] = result["lots"]
    return lots


def test_result_text__fields_of_old_stay_beside_the_new_ones(lots: list[dict[str, Any]]) -> None:
    """Nothing is renamed or lost: only names are added."""
    for lot in lots:
        assert set(lot) == _LOT
        assert set(lot["rates"]) == _RATES | {"method", "formulas", "year_table", "load_profile"}
        for offer in lot["offers"]:
            assert set(offer) == _OFFER | _COSTS | {"assumptions", "information"} | _PRICED


def test_result_text__nothing_new_is_null_or_empty() -> None:
    """A view without anything new says so under the same names."""
    rates = json.loads(result_text(page_view()))["lots"][0]["rates"]
    assert (rates["method"], rates["formulas"], rates["year_table"], rates["load_profile"]) == (None, [], None, None)


def test_result_text__method_and_formulas(lots: list[dict[str, Any]]) -> None:
    """The method by its name, the formulas line by line."""
    assert [lot["rates"]["method"] for lot in lots] == ["announced rates", "present worth"]
    assert list(FORMULAS) == lots[1]["rates"]["formulas"]


def test_result_text__year_table_with_twelve_digits(view: EvaluationView, lots: list[dict[str, Any]]) -> None:
    """Every column of the view, each value to twelve significant digits and no further."""
    table = view.lots[1].rates.year_table
    assert table is not None
    columns = lots[1]["rates"]["year_table"]["columns"]
    assert [(c.name, c.heading, c.unit) for c in table.columns] == [
        (c["name"], c["heading"], c["unit"]) for c in columns
    ]
    for column, shown in zip(table.columns, columns, strict=True):
        assert [float(f"{value:.12g}") for value in column.values] == shown["values"]
    factors = re.search(r'"name": "discount_factor".*?"values": \[(.*?)\]', result_text(view), re.DOTALL)
    assert factors is not None
    assert all(len(Decimal(text).as_tuple().digits) <= 12 for text in factors[1].split(","))


def test_result_text__load_profile(view: EvaluationView, lots: list[dict[str, Any]]) -> None:
    """File, remarks, facts as decimal strings, peak loads and the hours of each stage in each year."""
    load, shown = view.lots[1].rates.load_profile, lots[1]["rates"]["load_profile"]
    assert load is not None
    assert shown["file"] == load.file
    assert shown["facts"][3] == {"label": "price raises it by", "value": "5.9", "unit": "%"}
    assert shown["cooling_stages"][0]["hours_by_year"] == list(load.stages[0].hours_by_year)
    assert (shown["cooling_stages"][1]["above_load_pu"], shown["cooling_stages"][1]["share_percent"]) == (0.63, 50)
    assert len(shown["peak_load_by_year_pu"]) == 35


def test_result_text__assumptions_and_information(lots: list[dict[str, Any]]) -> None:
    """Beside the amounts of the offer, never among them."""
    first, second, _ = lots[1]["offers"]
    assert (first["assumptions"], second["assumptions"]) == ([ASSUMPTION], [])
    assert first["information"][-1] == {"label": "CO2 over life", "value": "4137", "unit": "t"}


def test_result_text__measured_evaluation_from_the_engine() -> None:
    """The same text twice, valid JSON, rates that the year table adds up to."""
    text = result_text(measured_view())
    assert result_text(measured_view()) == text
    for lot in json.loads(text)["lots"]:
        table = lot["rates"]["year_table"]
        if table is not None:
            sums = {column["name"]: sum(column["values"]) for column in table["columns"]}
            assert sums["no_load"] == pytest.approx(float(lot["rates"]["A"]), abs=0.006)
            assert sums["load"] == pytest.approx(float(lot["rates"]["B"]), abs=0.006)
