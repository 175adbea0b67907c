"""Pictures of load and cost by year in a browser: inside their drawings, legible, with the values of the result."""

from __future__ import annotations

import json
from collections.abc import Iterator
from dataclasses import replace
from pathlib import Path

import pytest
from playwright.sync_api import Browser

from lossworth.report.page import page_html
from lossworth.report.result_file import result_text
from lossworth.report.view import EvaluationView
from support.chromium import chromium, opened, overflow, pdf_text
from support.load_views import load_page_view, load_view
from support.measured_views import measured_view

#: Every text of the pictures: outside the page, over another text of the same picture, or not shown although it should.
_TEXTS = """() => [...document.querySelectorAll('svg.plot')].flatMap(svg => {
  const shown = [...svg.querySelectorAll('text')].map(t => [t.textContent, t.getBoundingClientRect()])
    .filter(([, r]) => r.width > 0);
  const box = svg.getBoundingClientRect();
  const outside = shown.filter(([, r]) => r.left < 0 || r.right > document.documentElement.clientWidth
    || r.top < box.top - 1 || r.bottom > box.bottom + 1).map(([t]) => 'outside: ' + t);
  const over = shown.flatMap(([t, r], i) => shown.slice(i + 1)
    .filter(([, o]) => r.left < o.right - 1 && o.left < r.right - 1 && r.top < o.bottom - 3 && o.top < r.bottom - 3)
    .map(([o]) => 'over each other: ' + t + ' / ' + o));
  return [...outside, ...over];
})"""

#: Heights of the columns of each panel, and how far the last column ends before the drawing.
_COLUMNS = """() => [...document.querySelectorAll('svg.plot:not(.load)')].map(svg =>
  [...svg.querySelectorAll('rect')].map(r => r.getBoundingClientRect().height))"""

#: For each crossing: its distance to the end of its threshold at the left, in hours; and to the axis, in shares.
_CROSSINGS = """() => [...document.querySelectorAll('svg.plot.load')].map(svg => {
  const box = svg.getBoundingClientRect();
  return [...svg.querySelectorAll('circle')].map(c => {
    const r = c.getBoundingClientRect();
    return 8760 * ((r.left + r.right) / 2 - box.left) / box.width;
  });
})"""


def variations() -> dict[str, EvaluationView]:
    """Pages whose loads put labels to the test."""
    view = load_page_view()
    town, station = view.lots

    def other(**load: object) -> EvaluationView:
        rates = replace(station.rates, load_profile=load_view(**load))  # type: ignore[arg-type]
        return replace(view, lots=(town, replace(station, rates=rates)))

    growing = [min(0.6 * 1.01**year, 0.8) for year in range(35)]
    return {
        "plain": view,
        "measured": measured_view(),
        "level": other(peaks=[0.7] * 35, loads=[1.0] * 8760),
        "half the year still": other(peaks=growing, loads=[1.0, 0.0] * 4380),
        "near thresholds": other(peaks=growing, thresholds=(0.6, 0.61, 0.62)),
        "thresholds above all": other(peaks=growing, thresholds=(0.9, 1.2)),
        "shrinking": other(peaks=growing[::-1]),
    }


@pytest.fixture(scope="module")
def browser() -> Iterator[Browser]:
    with chromium() as running:
        yield running


@pytest.fixture(scope="module")
def pages(tmp_path_factory: pytest.TempPathFactory) -> dict[str, Path]:
    folder = tmp_path_factory.mktemp("loads")
    made = {}
    for name, view in variations().items():
        made[name] = folder / f"{name}.html"
        made[name].write_text(page_html(view), encoding="utf-8")
    return made


@pytest.mark.parametrize("width", [360, 641, 1280])
@pytest.mark.parametrize("name", variations())
def test_load_page__texts_of_pictures_are_legible(
    browser: Browser, pages: dict[str, Path], name: str, width: int
) -> None:
    """No text leaves the page or its picture, and none lies over another, on a telephone as on a wide screen."""
    with opened(browser, pages[name], width=width) as window:
        assert window.page.locator("svg.plot").count() >= 4
        assert overflow(window.page) <= 0
        assert window.page.evaluate(_TEXTS) == []


def test_load_page__harness_notices_texts_over_each_other(browser: Browser, pages: dict[str, Path]) -> None:
    """The check above can fail: texts that are moved onto each other, or out of the page, are noticed."""
    with opened(browser, pages["plain"]) as window:
        moved = "document.querySelectorAll('svg.plot.load text').forEach(t => { t.setAttribute('y', 40); })"
        window.page.evaluate(moved)
        assert any(text.startswith("over each other") for text in window.page.evaluate(_TEXTS))


def test_load_page__asks_for_nothing(browser: Browser, pages: dict[str, Path]) -> None:
    """The pictures need no script and no file; the console stays empty."""
    with opened(browser, pages["measured"]) as window:
        window.page.wait_for_timeout(100)
        assert window.requests == [pages["measured"].as_uri()]
        assert window.complaints == []


def test_load_page__columns_are_the_years_of_the_table(browser: Browser, pages: dict[str, Path]) -> None:
    """The heights that the browser draws are proportional to the present values of the result file."""
    lots = json.loads(result_text(measured_view()))["lots"]
    tables = [lot["rates"] for lot in lots if lot["rates"]["year_table"] is not None]
    wanted = []
    for rates in tables:
        columns = {column["name"]: column["values"] for column in rates["year_table"]["columns"]}
        names = ("no_load", "load", "auxiliary") if rates["C"] is not None else ("no_load", "load")
        wanted += [columns[name] for name in names]
    with opened(browser, pages["measured"]) as window:
        drawn = window.page.evaluate(_COLUMNS)
    assert len(drawn) == len(wanted) == 5
    for heights, values in zip(drawn, wanted, strict=True):
        assert [h / max(heights) for h in heights] == pytest.approx([v / max(values) for v in values], abs=0.002)


def test_load_page__crossings_are_the_hours_of_the_stages(browser: Browser, pages: dict[str, Path]) -> None:
    """A dot stands at the hours that the stage runs in the first and in the last year."""
    (load,) = (lot.rates.load_profile for lot in measured_view().lots if lot.rates.load_profile is not None)
    wanted = [hours for stage in load.stages[::-1] for hours in (stage.hours_by_year[0], stage.hours_by_year[-1])]
    with opened(browser, pages["measured"]) as window:
        assert window.page.evaluate(_CROSSINGS) == [pytest.approx(wanted, abs=5)]


def test_load_page__figures_of_the_load_stay_apart_in_gray(browser: Browser, pages: dict[str, Path]) -> None:
    """Curves differ in weight, thresholds are dashed: nothing is told by color alone."""
    with opened(browser, pages["plain"]) as window:
        style = "s => [...document.querySelectorAll(s)].map(e => getComputedStyle(e))"
        weights = window.page.evaluate(f"({style})('.plot .curve').map(c => parseFloat(c.strokeWidth))")
        dashes = window.page.evaluate(f"({style})('.plot .threshold').map(c => c.strokeDasharray)")
    assert weights[0] - weights[1] >= 1  # that of the last year comes first
    assert all(dash != "none" for dash in dashes)


@pytest.mark.parametrize("paper", ["A4", "Letter"])
def test_load_page__prints_whole(browser: Browser, pages: dict[str, Path], tmp_path: Path, paper: str) -> None:
    """Pictures, hours, assumptions and information are on paper, the cooling hours of every year in the appendix."""
    with opened(browser, pages["plain"]) as window:
        sheets = pdf_text(window.page, tmp_path / "loads.pdf", paper)
    whole = " ".join(" ".join(sheets).replace("\u202f", " ").split())
    for text in (
        "cooling stage 1 above 0.48: 920 h in year 1, 2,738 h in year 35",
        "Hours a year at or above the load",
        "What a kilowatt of loss costs, year by year",
        "A conversion made on an assumption binds nobody until the bidder confirms it.",
        "no part of any amount, and without effect on the rank",
    ):
        assert text in whole
    (together,) = (text for text in sheets if "Hours a year at or above the load" in text)
    assert "year 35, peak 0.8" in together
