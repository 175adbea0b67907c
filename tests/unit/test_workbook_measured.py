"""The workbook where loads and prices come from data: year table, method, profile, assumptions, information."""

from __future__ import annotations

from dataclasses import replace
from pathlib import Path

import openpyxl
import pytest

from lossworth.records.tender import Method
from lossworth.report.view import EvaluationView
from lossworth.report.workbook import workbook_bytes
from lossworth.report.workbook_year_formulas import BY_TIME, year_formulas
from support import records as make
from support.load_views import load_page_view
from support.measured_views import measured_view
from support.sample_views import view_of
from support.workbook_cells import Cells, cells, formulas, row_of

_PLAIN_COLUMNS = {
    "year": "A7",
    "discount_factor": "B7",
    "energy_price_per_kwh": "C7",
    "demand_charge_per_kw_year": "D7",
    "peak_load_pu": "E7",
    "no_load": "F7",
    "load": "G7",
    "auxiliary": "H7",
}
_OPTIONAL = ("discount_delay_years", "price_delay_years", "loss_factor_by_time", "peak_load_cap_pu")


@pytest.fixture(scope="module")
def view() -> EvaluationView:
    return measured_view()


@pytest.fixture(scope="module")
def path(view: EvaluationView, tmp_path_factory: pytest.TempPathFactory) -> Path:
    made = tmp_path_factory.mktemp("measured") / "evaluation.xlsx"
    made.write_bytes(workbook_bytes(view))
    return made


@pytest.fixture(scope="module")
def shown(path: Path) -> Cells:
    return cells(path)


def texts(shown: Cells, sheet: str) -> set[str]:
    return {value for (name, _), value in shown.items() if name == sheet and isinstance(value, str)}


def formulas_of(columns: dict[str, str] = _PLAIN_COLUMNS, *extra: str, year: int = 3) -> dict[str, str]:
    """Formulas whose inputs are written by their own names; optional inputs only where they are given."""

    def refer(name: str) -> str | None:
        optional = name in _OPTIONAL or name.startswith(("energy_price_year_", "peak_load_year_"))
        return name if not optional or name in extra else None

    return year_formulas(columns, year, refer)


def test_year_formulas__plain_table() -> None:
    """Without anything new the formulas are those of the plain year-by-year model."""
    assert formulas_of() == {
        "discount_factor": "=IF(A7<=evaluation_period_years,(1+discount_rate_percent/100)^(years_before_end-A7),0)",
        "energy_price_per_kwh": (
            "=energy_price_per_kwh*(1+energy_price_escalation_percent/100)^(A7-1+escalate_before_year_1)"
        ),
        "demand_charge_per_kw_year": ("=demand_charge_per_kw_year*(1+demand_charge_escalation_percent/100)^(A7-1)"),
        "peak_load_pu": "=peak_load_pu*(1+peak_load_growth_percent/100)^(A7-1)",
        "no_load": "=upstream_gross_up*B7*(C7*hours_energized+D7)",
        "load": "=upstream_gross_up*B7*E7^2*(C7*hours_of_load*loss_factor+D7*peak_responsibility_factor^2)",
        "auxiliary": "=upstream_gross_up*B7*(C7*cooling_hours+D7*cooling_share_at_peak)",
    }


def test_year_formulas__delays() -> None:
    """Prices escalate and costs are discounted over the years before service."""
    found = formulas_of(_PLAIN_COLUMNS | {"carbon_cost_per_kwh": "I7"}, "price_delay_years", "discount_delay_years")
    assert found["discount_factor"].endswith("^(years_before_end-A7-discount_delay_years),0)")
    for name in ("energy_price_per_kwh", "demand_charge_per_kw_year", "carbon_cost_per_kwh"):
        assert found[name].endswith("+price_delay_years)")


def test_year_formulas__tables_by_year() -> None:
    """A price or peak load of its own year is taken as it stands; the cap acts on it."""
    found = formulas_of(
        _PLAIN_COLUMNS, "energy_price_year_3", "peak_load_year_3", "peak_load_cap_pu", "price_delay_years"
    )
    assert (found["energy_price_per_kwh"], found["peak_load_pu"]) == (
        "=energy_price_year_3",
        "=MIN(peak_load_year_3,peak_load_cap_pu)",
    )


def test_year_formulas__carbon_cost() -> None:
    """The carbon cost adds to the price; beside a price that moves within the year it counts by time."""
    columns = _PLAIN_COLUMNS | {"carbon_cost_per_kwh": "I7"}
    assert formulas_of(columns)["load"].endswith("((C7+I7)*hours_of_load*loss_factor+D7*peak_responsibility_factor^2)")
    moving = columns | {"cooling_hours": "J7", BY_TIME: "K7", "cooling_share_at_peak": "L7"}
    found = formulas_of(moving, "loss_factor_by_time")
    assert "(C7*loss_factor+I7*loss_factor_by_time)*hours_of_load" in found["load"]
    assert found["auxiliary"] == "=upstream_gross_up*B7*(C7*J7+I7*K7+D7*L7)"
    assert {"cooling_hours", "cooling_share_at_peak", BY_TIME}.isdisjoint(found)


def test_year_formulas__missing_input_is_an_error() -> None:
    """A table without an input that a formula needs gives no workbook, rather than a formula with a hole."""
    with pytest.raises(KeyError, match="upstream_gross_up"):
        year_formulas(_PLAIN_COLUMNS, 1, lambda _: None)


def test_workbook_bytes__information_has_a_sheet_of_its_own(path: Path) -> None:
    """Beside the bids; a workbook of a view without assumptions and information has none."""
    names = openpyxl.load_workbook(path).sheetnames
    assert names.index("Bids") + 1 == names.index("Information")


def test_workbook_bytes__assumptions_are_marked(view: EvaluationView, shown: Cells) -> None:
    """In full on their sheet, and by name at the ranking and on the summary, with what they bind."""
    assumed = [offer for lot in view.lots for offer in lot.offers if offer.assumptions]
    assert len(assumed) == 2
    for offer in assumed:
        assert {f"assumption: {text}" for text in offer.assumptions} <= texts(shown, "Information")
    for sheet in ("Ranking", "Summary"):
        (sentence,) = {text for text in texts(shown, sheet) if text.startswith("Assumption, sheet Information: ")}
        assert "Alder <i>Works</i>, Birchlune. A conversion made on an assumption binds nobody" in sentence


def test_workbook_bytes__information_as_numbers(view: EvaluationView, path: Path) -> None:
    """Every fact of every offer is a number with its unit, and no formula."""
    sheet = openpyxl.load_workbook(path)["Information"]
    rows = {tuple(cell.value for cell in row[:5]) for row in sheet.iter_rows()}
    for lot in view.lots:
        for offer in lot.offers:
            for fact in offer.information:
                label = fact.label[:1].upper() + fact.label[1:]
                assert (lot.id, offer.bidder, label, float(fact.value), fact.unit) in rows
    assert [place for place in formulas(path) if place[0] == "Information"] == []


def test_workbook_bytes__method_and_formulas_of_each_lot(view: EvaluationView, shown: Cells) -> None:
    """The sheet of the rates names the method and prints its formulas."""
    for lot in view.lots:
        assert {f"Method: {lot.rates.method}", *lot.rates.formulas} <= texts(shown, "Rates")


def test_workbook_bytes__load_profile_as_values(view: EvaluationView, path: Path, shown: Cells) -> None:
    """Facts of the profile and hours above each stage stand with the rates, as values."""
    load = view.lots[1].rates.load_profile
    assert load is not None
    row = row_of(path, "Rates", "A", "Loss factor, by price")
    assert shown["Rates", f"B{row}"] == float(load.facts[2].value)
    row = row_of(path, "Rates", "A", "Hours above 0.48 per unit, year 30")
    assert shown["Rates", f"B{row}"] == pytest.approx(load.stages[0].hours_by_year[-1])
    assert ("Rates", f"B{row}") not in formulas(path)


def test_workbook_bytes__cooling_by_year_is_a_value_with_a_note(path: Path, shown: Cells) -> None:
    """Hours and share follow from the profile: no formula, and the sheet says that they do not move."""
    headings = {cell.value: cell.column_letter for cell in openpyxl.load_workbook(path)["Rates by year"][4]}
    year_1 = row_of(path, "Rates by year", "A", "Lot 2 · 20/31.5 MVA, measured") + 3
    assert shown["Rates by year", f"A{year_1}"] == 1
    for heading in ("Cooling hours, by price\n[h/year]", "Cooling hours, by time\n[h/year]", "Cooling share at peak"):
        place = ("Rates by year", f"{headings[heading]}{year_1}")
        assert isinstance(shown[place], int | float)
        assert place not in formulas(path)
    notes = texts(shown, "Rates by year")
    assert any("follow from the load profile: they are values, and do not move" in note for note in notes)
    assert any("do not move when a price is changed in this workbook" in note for note in notes)


def test_workbook_bytes__lot_without_a_column_has_a_dash(path: Path, shown: Cells) -> None:
    """The lot with peak loads by year has no cooling that follows a profile."""
    year_1 = row_of(path, "Rates by year", "A", "Lot 4 · 20/31.5 MVA, peaks by year") + 1
    assert [shown["Rates by year", f"{column}{year_1}"] for column in "AGHI"] == [1, "–", "–", "–"]


def test_workbook_bytes__peak_loads_by_year_are_inputs(path: Path) -> None:
    """Each year's peak load stands on the sheet of the inputs, and the year table refers to it."""
    row = row_of(path, "Inputs", "A", "Peak load year 5")
    found = [text for place, text in formulas(path).items() if place[0] == "Rates by year"]
    assert [text for text in found if f"Inputs!$B${row}" in text] != []


def test_workbook_bytes__fixed_charge_rate_has_no_year_table(path: Path, shown: Cells) -> None:
    """Rates by the fixed charge rate are ordinary formulas on the sheet of the rates."""
    row = row_of(path, "Rates", "A", "No-load loss rate A, computed", nth=1)
    assert formulas(path)["Rates", f"B{row}"].count("/") == 1
    assert "Lot 3 · 100 kVA" not in texts(shown, "Rates by year")


def test_workbook_bytes__equivalent_peak_load_is_a_value_with_a_note(shown: Cells, tmp_path: Path) -> None:
    """Where the load grows the fixed charge rate rests on an equivalent load, which no cell recomputes: it says so."""
    note = "The equivalent peak load follows from loads, prices and discount factors of all years"
    economics = make.economics(fixed_charge_rate_percent=make.quantity("12"))
    fixed = make.derivation().model_copy(update={"method": Method.FIXED_CHARGE_RATE})
    tender = make.tender(make.lot(derivation=fixed), economics={"board": economics})
    growing = tmp_path / "growing.xlsx"
    growing.write_bytes(workbook_bytes(view_of(tender, (make.offer(),))))
    assert any(text.startswith(note) for text in texts(cells(growing), "Rates"))
    assert not any(text.startswith(note) for text in texts(shown, "Rates"))


def test_workbook_bytes__no_sheet_of_information_without_any(tmp_path: Path) -> None:
    """A view without assumptions and information has neither the sheet nor the sentence."""
    view = load_page_view()
    made = tmp_path / "announced.xlsx"
    made.write_bytes(workbook_bytes(replace(view, lots=view.lots[:1])))
    assert "Information" not in openpyxl.load_workbook(made).sheetnames
    assert not any("Assumption" in text for text in texts(cells(made), "Ranking"))
