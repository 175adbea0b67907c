"""The page where loads come from profiles and losses were converted: pictures, tables, assumptions, information."""

from __future__ import annotations

import re
from dataclasses import replace

import pytest

from lossworth.report.formats import plain
from lossworth.report.page import page_html
from lossworth.report.view import EvaluationView, LoadView
from support.html_reader import HtmlReader
from support.load_views import ASSUMPTION, FORMULAS, load_page_view, load_view
from support.measured_views import measured_view
from support.page_views import page_view


@pytest.fixture(scope="module")
def view() -> EvaluationView:
    return load_page_view()


@pytest.fixture(scope="module")
def html(view: EvaluationView) -> str:
    return page_html(view)


@pytest.fixture(scope="module")
def text(html: str) -> str:
    return " ".join("".join(HtmlReader(html).text).split())


def with_load(view: EvaluationView, load: LoadView) -> EvaluationView:
    """The view with another load behind the rates of the second lot."""
    town, station = view.lots
    return replace(view, lots=(town, replace(station, rates=replace(station.rates, load_profile=load))))


def svg(html: str, kind: str) -> list[str]:
    """Pictures of a class, with what they contain."""
    return re.findall(
        rf'<svg class="{kind}" (?:.(?!<svg class))*?</svg>\n(?=</figure>|<p class="axis)', html, re.DOTALL
    )


def test_page_html__load_page_is_sound(html: str) -> None:
    """Tags are closed in order, names of places are unique, and nothing comes from outside."""
    reader = HtmlReader(html)
    places = [attributes["id"] for _, attributes in reader.tags if "id" in attributes]
    assert reader.misplaced == []
    assert len(places) == len(set(places))
    assert {"script", "img", "iframe"}.isdisjoint({tag for tag, _ in reader.tags})
    assert page_html(load_page_view()) == html


def test_page_html__without_anything_new_nothing_new_is_shown() -> None:
    """A view without method, load, assumptions and information has no empty places for them."""
    plain_page = page_html(page_view())
    body = plain_page[plain_page.index("<body>") :]
    for mark in ("Method:", 'class="formulas"', "Load behind", "Beside the money", "assumption", 'class="stages"'):
        assert mark not in body


def test_page_html__method_and_formulas_stand_as_lines(html: str, text: str) -> None:
    """The method is named at each lot, and each formula is a line of its own."""
    assert "Method: announced rates." in text
    assert "Method: present worth." in text
    lines = re.findall(r"<li>([^<]+)</li>", html[html.index('class="formulas"') :])[: len(FORMULAS)]
    assert list(FORMULAS) == lines


def test_page_html__load_facts_and_remarks(view: EvaluationView, html: str, text: str) -> None:
    """Every fact has its exact value beside the printed one; file and remarks are text, whatever they contain."""
    load = view.lots[1].rates.load_profile
    assert load is not None
    facts = html[html.index("load-facts") :]
    for fact in load.facts:
        assert f'data-value="{plain(fact.value)}">{fact.text}' in facts
    assert "profiles/feeder <7>.csv" in text
    assert load.remarks[0] in text


def test_page_html__load_picture_says_what_it_shows(html: str) -> None:
    """The picture has a title, a description with peaks and hours, a curve for each year, a line for each stage."""
    (picture,) = svg(html, "plot load")
    description = re.search(r"<desc[^>]*>(.*?)</desc>", picture, re.DOTALL)
    assert description is not None
    assert "Peak load in year 1: 0.6 per unit of the rating. Peak load in year 35: 0.8" in description[1]
    assert "The cooling stage 1 runs above 0.48: 920 hours in year 1, 2,738 hours in year 35." in description[1]
    assert picture.count('class="curve ') == 2
    assert picture.count('class="threshold"') == 2
    assert "cooling stage 2 above 0.63: 0 h in year 1, 970 h in year 35" in picture


def test_page_html__hours_of_the_stages_in_a_table(html: str) -> None:
    """Threshold, share and hours of each stage stand below the picture as well."""
    table = html[html.index('class="stages"') :]
    rows = re.findall(r'<tr><th scope="row">(.*?)</th>(.*?)</tr>', table, re.DOTALL)[:2]
    cells = [(name, re.findall(r">([^<>]+)</td>", row)) for name, row in rows]
    assert cells == [
        ("cooling stage 1", ["0.48", "50\u202f%", "920", "2,738"]),
        ("cooling stage 2", ["0.63", "50\u202f%", "0", "970"]),
    ]


def test_page_html__load_that_stays_has_one_curve(view: EvaluationView) -> None:
    """Without growth there is one curve for every year, and hours are not said twice."""
    html = page_html(with_load(view, load_view([0.7] * 35, thresholds=(0.63,))))
    (picture,) = svg(html, "plot load")
    assert picture.count('class="curve ') == 1
    assert "every year, peak 0.7" in picture
    assert re.search(r"cooling above 0\.63: [\d,]+ h a year", picture)


def test_page_html__load_without_cooling_stages(view: EvaluationView) -> None:
    """Where no stage follows the load there is neither a threshold nor a table of hours."""
    html = page_html(with_load(view, replace(load_view([0.7] * 35), stages=())))
    assert 'class="threshold"' not in html
    assert 'class="stages"' not in html
    assert 'class="plot load"' in html


def test_page_html__cost_by_year_has_a_panel_for_each_rate(view: EvaluationView, html: str) -> None:
    """One panel for A, B and C, one column a year, first and last year in figures, and a description."""
    panels = svg(html, "plot")
    assert len(panels) == 3
    table = view.lots[1].rates.year_table
    assert table is not None
    columns = {column.name: column.values for column in table.columns}
    for panel, name in zip(panels, ("no_load", "load", "auxiliary"), strict=True):
        assert panel.count("<rect ") == len(columns[name]) == 35
        assert f"{columns[name][0]:,.2f} in year 1, {columns[name][-1]:,.2f} in year 35" in panel
    assert html.count("year 1: 754.34") == 1


def test_page_html__panel_of_a_rate_that_does_not_exist_is_not_drawn(view: EvaluationView) -> None:
    """A lot without auxiliary rate has two panels, and no columns of cooling in its year table."""
    town, station = view.lots
    rates = replace(station.rates, auxiliary=None)
    offers = tuple(
        replace(
            offer,
            auxiliary_loss=None,
            per_unit=replace(offer.per_unit, auxiliary_cost=None),
            lot=replace(offer.lot, auxiliary_cost=None),
        )
        for offer in station.offers
    )
    html = page_html(replace(view, lots=(town, replace(station, rates=rates, offers=offers))))
    assert len(svg(html, "plot")) == 2
    assert "hours of cooling, by price" not in html


def test_page_html__year_table_has_the_columns_that_are_there(html: str) -> None:
    """Carbon cost and cooling stand between price and present values, with the digits that they need."""
    table = re.search(r'<table class="years">.*?</table>', html, re.DOTALL)
    assert table is not None
    headings = [" ".join(h.split()) for h in re.findall(r'<th scope="col" class="n">([^<]+)', table.group())]
    assert headings.index("energy price") + 1 == headings.index("carbon cost")
    assert headings[6:8] == ["hours of cooling, by price", "share of cooling on at system peak"]
    first = re.search(r"<tbody>\s*<tr>(.*?)</tr>", table.group(), re.DOTALL)
    assert first is not None
    cells = re.findall(r'<td class="n">([^<]+)</td>', first[1])
    assert cells == [
        "0.943396",
        "0.08500",
        "0.02000",
        "55.00",
        "0.6000",
        "460.0",
        "0.500",
        "754.34",
        "130.66",
        "100.00",
    ]


def test_page_html__assumptions_are_marked_wherever_the_offer_stands(html: str, text: str) -> None:
    """Said to bind nobody, in full in a box and at the offer's arithmetic, and tagged in ranking and result."""
    assert "A conversion made on an assumption binds nobody until the bidder confirms it." in text
    assert text.count(ASSUMPTION) == 2
    tag = '<bdi>Birchlune Electric</bdi> <span class="tag">assumption</span>'
    assert html.count(tag) == 2  # in the result and in the ranking
    assert "<b>by the bidder</b>" not in html


def test_page_html__information_is_beside_the_money(view: EvaluationView, html: str) -> None:
    """A table that says it is no part of any amount, a row for each offer that has some, dashes where one lacks it."""
    assert "no part of any amount, and without effect on the rank" in html
    table = re.search(r'<table class="information">.*?</table>', html, re.DOTALL)
    assert table is not None
    facts = [fact for offer in view.lots[1].offers for fact in offer.information]
    assert [plain(fact.value) for fact in facts] == re.findall(r'data-value="([^"]+)"', table.group())
    assert table.group().count("not known") == 1 + 2


def test_page_html__unranked_offer_keeps_its_assumption(view: EvaluationView) -> None:
    """An offer that is not ranked is tagged too, and its lot has the box although nothing is ranked."""
    town, _ = view.lots
    left_out = tuple(
        replace(offer, assumptions=("taken from the total loss",)) for offer in town.offers if offer.status != "ranked"
    )
    html = page_html(replace(view, lots=(replace(town, offers=left_out),)))
    assert html.count('<div class="assumptions"') == 1
    assert html.count('</bdi> <span class="tag">assumption</span>') == 2


def test_page_html__measured_evaluation_from_the_engine() -> None:
    """The whole way from records: profile, tariff, carbon, fixed charge rate and conversions end on a sound page."""
    measured = measured_view()
    html = page_html(measured)
    reader = HtmlReader(html)
    text = " ".join("".join(reader.text).split())
    assert reader.misplaced == []
    assert html.count('class="plot load"') == 1
    for lot in measured.lots:
        assert f"Method: {lot.rates.method}." in text
        for offer in lot.offers:
            assert all(assumption in text for assumption in offer.assumptions)
