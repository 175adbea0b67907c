"""The terminal: rates with method, load, comparison and sensitivity; nothing cut off in a narrow window."""

from __future__ import annotations

import re
from dataclasses import replace

import pytest

from lossworth.report.terminal import rates_text
from lossworth.report.view import RatesReport
from support.load_views import FORMULAS, rates_report
from support.measured_views import measured_report


@pytest.fixture(scope="module")
def report() -> RatesReport:
    return rates_report()


def rows(text: str, first: str) -> list[str]:
    """Cells of the row that begins with a text."""
    (line,) = {line for line in text.splitlines() if line.startswith(first)}
    return re.split(r" {2,}", line)


def test_rates_text__method_and_formulas(report: RatesReport) -> None:
    """The method is named, and each formula is a line."""
    lines = rates_text(report, 120).splitlines()
    assert {"Method: announced rates", "Method: present worth"} <= set(lines)
    assert {f"  {formula}" for formula in FORMULAS} <= set(lines)


def test_rates_text__facts_of_the_load(report: RatesReport) -> None:
    """File, facts, stages with their hours in the first and the last year, remarks."""
    text = rates_text(report, 120)
    assert "Load from profiles/feeder <7>.csv" in text
    assert "  price raises it by             5.9 %" in text
    assert "cooling above 0.48 per unit (50 % of the auxiliary loss): 920 h in year 1, 2,738 h in year 35" in text
    assert "Local time with daylight saving" in text


def test_rates_text__comparison_of_announced_with_derived(report: RatesReport) -> None:
    """The sentence stands with the lot that has a study, and only there."""
    first, second = rates_text(report, 120).split("\nLot 4")
    assert "The announced A is 12.0 % above what these inputs give." in first
    assert "announced A is" not in second


def test_rates_text__sensitivity_as_a_table(report: RatesReport) -> None:
    """Input, value now, change, and what it does to each rate, with sign; a dash where it does nothing."""
    text = rates_text(replace(report, lots=report.lots[:1]), 120)
    assert rows(text, "discount rate  ") == [
        "discount rate",
        "6 %/year",
        "+1 percentage point",
        "−1,178.31",
        "−201.50",
        "–",
    ]
    assert rows(text, "loss factor   ") == ["loss factor", "0.431", "+0.01", "–", "+46.20", "–"]


def test_rates_text__sensitivity_has_no_column_for_a_rate_that_does_not_exist(report: RatesReport) -> None:
    """Where no row has a value for C there is no column C."""
    lot = replace(report.lots[0], sensitivity=tuple(replace(row, c=None) for row in report.lots[0].sensitivity))
    (heading,) = (
        line for line in rates_text(replace(report, lots=(lot,)), 120).splitlines() if line.startswith("input ")
    )
    assert heading.split() == ["input", "now", "change", "A", "B"]


def test_rates_text__silent_where_nothing_is_given(report: RatesReport) -> None:
    """Without method, load and sensitivity their lines are absent, not empty."""
    used = replace(report.lots[1].used, method="", formulas=(), load_profile=None)
    text = rates_text(replace(report, lots=(replace(report.lots[1], used=used, sensitivity=()),)), 120)
    assert not re.search("Method|Load from|What a change", text)


@pytest.mark.parametrize("width", [60, 80, 100, 140, 160])
def test_rates_text__year_table_is_never_cut(report: RatesReport, width: int) -> None:
    """Where the window is too narrow the table goes on below; every figure of every column is whole."""
    text = rates_text(report, width, years=True)
    assert "…" not in text
    assert max(len(line) for line in text.splitlines()) <= width
    table = report.lots[1].used.year_table
    assert table is not None
    for column, places in (("discount_factor", 6), ("carbon_cost_per_kwh", 5), ("cooling_hours", 1), ("auxiliary", 2)):
        (values,) = (c.values for c in table.columns if c.name == column)
        assert all(f"{value:,.{places}f}" in text for value in values)


def test_rates_text__measured_tender_from_the_engine() -> None:
    """Every lot of a tender with data shows its method, and every derived one its sensitivity; no escape codes."""
    text = rates_text(measured_report(), 140, years=True)
    assert [line for line in text.splitlines() if line.startswith("Method: ")] == [
        "Method: announced rates",
        "Method: present worth",
        "Method: present worth",
        "Method: fixed charge rate",
        "Method: present worth",
    ]
    assert text.count("What a change of one input does to the rates") == 3
    assert "Load from profiles/feeder <7>.csv" in text
    assert "The announced A is" in text
    assert "\x1b" not in text
