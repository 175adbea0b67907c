"""The evaluation page as text: escaping, self-containedness, completeness."""

from __future__ import annotations

import re
from dataclasses import replace
from decimal import Decimal
from importlib.resources import files
from itertools import pairwise
from pathlib import Path

import pytest
from jinja2 import UndefinedError

from lossworth.report import page
from lossworth.report.formats import plain
from lossworth.report.page import page_html
from lossworth.report.view import CostView, EvaluationView, OfferView
from support.html_reader import HtmlReader, shown_values
from support.page_views import FORMULA_NAME, LONGEST_NAME, SCRIPT_NAME, page_view

_ARITHMETIC = re.compile(r"\w\s*[-+*/%]\s*\w")
_LOADING = ("src", "srcset", "data", "poster", "action", "formaction", "background", "cite", "ping", "xlink:href")


@pytest.fixture(scope="module")
def view() -> EvaluationView:
    return page_view()


@pytest.fixture(scope="module")
def html(view: EvaluationView) -> str:
    return page_html(view)


@pytest.fixture(scope="module")
def reader(html: str) -> HtmlReader:
    return HtmlReader(html)


def amounts(cost: CostView) -> list[str]:
    """Ids of the amounts that exist."""
    return [key for key in (getattr(cost, name) for name in CostView.__slots__) if key]


def test_page_html__byte_identical_twice(html: str) -> None:
    """The same view gives the same bytes."""
    assert page_html(page_view()).encode() == html.encode()


def test_page_html__tags_are_closed_in_order(reader: HtmlReader) -> None:
    """Hostile names cannot break the tree."""
    assert reader.misplaced == []


def test_page_html__names_are_escaped(html: str, reader: HtmlReader) -> None:
    """A name that is markup is shown as text, letter for letter."""
    assert reader.all_of("script") == []
    assert reader.all_of("b") == []
    text = "".join(reader.text)
    for name in (SCRIPT_NAME, FORMULA_NAME, LONGEST_NAME, "Elderquill <b>Magnetics</b>", 'T-07 "A" </style>'):
        assert name in text
    assert html.count("</style>") == 1


def test_page_html__turning_and_control_characters_are_written_out(html: str) -> None:
    """A name cannot turn the direction of the line or carry a bell."""
    assert "\u202e" not in html
    assert "\x07" not in html
    assert "Hazel\\u202eWorks\\u0007" in html


def test_page_html__unpaired_surrogate_can_be_written(view: EvaluationView) -> None:
    """Text that no encoding knows does not make the file unwritable."""
    assert "Lot \\udc80" in page_html(replace(view, title="Lot \udc80")).encode().decode()


def test_page_html__style_sheet_holds_only_harmless_characters_of_the_remark(view: EvaluationView) -> None:
    """The running head comes from the tender: no character of it can end the string or the element."""
    html = page_html(replace(view, remark="a\"; } </style><script>'\\ \n@import url(x)"))
    assert html.count("</style>") == 1
    assert re.search(r'@top-left \{ content: "a(\\[0-9a-f]{6} |[A-Za-z0-9])+"; ', html)


def test_page_html__nothing_from_outside(html: str, reader: HtmlReader) -> None:
    """No script, no handler, no address but places in the page itself and an empty icon."""
    assert {"script", "iframe", "object", "embed", "img", "form", "base"}.isdisjoint({tag for tag, _ in reader.tags})
    for tag, attributes in reader.tags:
        assert not [name for name in attributes if name.startswith("on") or name in _LOADING], tag
        assert attributes.get("href", "#").startswith(("#", "data:,")), tag
    style = html[html.index("<style>") : html.index("</style>")]
    assert set(re.findall(r"url\((.*?)\)", style)) == {'"#fill-load_cost"', '"#fill-auxiliary_cost"'}
    assert "@import" not in style
    assert "http://" not in html
    assert "https://" not in html


def test_page_html__content_security_policy_is_strict(reader: HtmlReader) -> None:
    """The page forbids itself everything but its own styles and data images."""
    (policy,) = [m["content"] for m in reader.all_of("meta") if m.get("http-equiv") == "Content-Security-Policy"]
    assert policy.split("; ")[:3] == ["default-src 'none'", "style-src 'unsafe-inline'", "img-src data:"]


def test_page_html__every_figure_of_each_offer_is_shown(view: EvaluationView, reader: HtmlReader) -> None:
    """Amounts, losses, price, margin and rates of every offer stand in the page with their exact values."""
    shown = shown_values(reader)
    for lot in view.lots:
        wanted = [lot.quantity_figure, lot.rates.no_load, lot.rates.load, lot.rates.auxiliary]
        for offer in lot.offers:
            wanted += amounts(offer.per_unit) + amounts(offer.lot)
            wanted += [offer.unit_price, offer.no_load_loss, offer.load_loss, offer.auxiliary_loss]
            wanted += [offer.margin.amount] if offer.margin else []
        for key in filter(None, wanted):
            assert shown[key] == plain(view.figures[key].value)


def test_page_html__every_figure_behind_an_amount_has_a_line(view: EvaluationView, html: str) -> None:
    """Nothing of the trail is left out: each figure has a line with its arithmetic or its source."""
    text = " ".join("".join(HtmlReader(html).text).split())
    lines = set(re.findall(r'<td class="n" data-figure="(.*?)"', html))
    assert lines >= set(view.figures)
    for figure in view.figures.values():
        line = figure.arithmetic if figure.operands else figure.source
        assert " ".join(str(page._visible(line)).split()) in text


def test_page_html__operands_stand_before_results(view: EvaluationView, html: str) -> None:
    """A clerk reads down: within an offer no line uses a figure that comes later, and each figure has one line."""
    blocks = re.findall(r'<details class="sum-of" id=.*?</details>', html, flags=re.DOTALL)
    assert len(blocks) == sum(len(lot.offers) for lot in view.lots)
    for block in blocks:
        keys = re.findall(r'<td class="n" data-figure="(.*?)"', block)
        assert len(keys) == len(set(keys))
        for place, key in enumerate(keys):
            assert set(view.figures[key].operands).isdisjoint(keys[place:])


def test_page_html__links_lead_to_lines_that_exist(reader: HtmlReader) -> None:
    """Every place named in a link is there once."""
    places = [attributes["id"] for _, attributes in reader.tags if "id" in attributes]
    assert len(places) == len(set(places))
    assert {a["href"][1:] for a in reader.all_of("a")} <= set(places)


def test_page_html__ties_are_shown_as_ties(reader: HtmlReader) -> None:
    """Both first offers carry the rank of a tie, and the next rank is skipped."""
    text = [part.strip() for part in reader.text]
    ranks = [part for part in text if re.fullmatch(r"\d( =)?", part)]
    assert ranks[: ranks.index("7") + 1].count("1 =") >= 2
    assert "2 =" not in text
    assert text.count("tie") == 2


def test_page_html__unranked_offers_stand_apart_with_reasons(view: EvaluationView, html: str) -> None:
    """Reasons are printed, the amounts are marked as not ranked, and no picture shows them."""
    reader = HtmlReader(html)
    text = "".join(reader.text)
    left_out = [offer for lot in view.lots for offer in lot.offers if offer.status != "ranked"]
    assert len(left_out) == 2
    for offer in left_out:
        assert all(reason in text for reason in offer.reasons)
    assert "Per unit, not ranked" in text
    pictures = "".join(re.findall(r'<svg class="bars".*?</svg>', html, flags=re.DOTALL))
    assert "Elderquill" not in pictures
    assert "Cedarfell" not in pictures


def test_page_html__price_and_cost_are_not_confused(reader: HtmlReader) -> None:
    """The page says what is paid, and names the column of the price."""
    text = "".join(reader.text)
    assert "The contract pays the price that the bidder quotes." in text
    assert "Evaluated price" in text


def test_page_html__headings_in_order(reader: HtmlReader) -> None:
    """One h1, and no level is skipped."""
    levels = [int(tag[1]) for tag, _ in reader.tags if re.fullmatch(r"h[1-6]", tag)]
    assert levels[0] == 1
    assert levels.count(1) == 1
    assert all(after - before <= 1 for before, after in pairwise(levels))


def test_page_html__tables_pictures_and_language_are_accessible(html: str, reader: HtmlReader) -> None:
    """Tables have captions and scoped headers, pictures a title and a description, the page a language and a title."""
    assert reader.all_of("html") == [{"lang": "en"}]
    assert len(reader.all_of("table")) == len(reader.all_of("caption"))
    assert all("scope" in attributes for attributes in reader.all_of("th"))
    pictures = re.findall(r'<svg class="bars".*?</svg>', html, flags=re.DOTALL)
    assert len(pictures) == 2
    assert all('role="img"' in picture and "<title" in picture and "<desc" in picture for picture in pictures)
    assert re.search(r"<title>Evaluation report T-07 &#34;A&#34; &lt;/style&gt;: .+</title>", html)


def test_page_html__year_table_is_whole(view: EvaluationView, html: str) -> None:
    """35 years, and below each column of costs the sum from which the rate was rounded."""
    table = re.search(r'<table class="years">.*?</table>', html, flags=re.DOTALL)
    assert table is not None
    assert table.group().count("<tr>") == 35 + 2
    sums = table.group()[table.group().index("<tfoot>") :]
    for name in ("no_load", "load", "auxiliary"):
        assert f'data-figure="lot 4/rates/{name}/computed"' in sums


def test_page_html__lot_without_ranking(view: EvaluationView) -> None:
    """A lot of which no offer can be ranked has no ranking and no picture, and the page says so."""
    lot = view.lots[0]
    left_out = tuple(offer for offer in lot.offers if offer.status != "ranked")
    html = page_html(replace(view, lots=(replace(lot, offers=left_out), replace(lot, offers=(), id="9"))))
    assert HtmlReader(html).misplaced == []
    assert html.count("No offer can be ranked.") == 2
    assert 'class="ranking"' not in html
    assert 'class="bars"' not in html


def test_page_html__single_offer_has_no_margin(view: EvaluationView) -> None:
    """The only offer of a lot has nothing to be compared with."""
    lot = view.lots[1]
    only: OfferView = replace(lot.offers[0], margin=None)
    html = page_html(replace(view, lots=(replace(lot, offers=(only,)),)))
    assert "no other offer ranked" in html
    assert "Margin to the next</h3>" not in html


def test_page_html__silent_where_the_tender_is(view: EvaluationView) -> None:
    """Without remark, opening date, exchange rates and findings the parts are absent, not empty."""
    html = page_html(replace(view, remark="", opening_date="", exchange=None, findings=()))
    assert 'class="remark"' not in html
    assert "Bids opened" not in html
    assert 'id="exchange"' not in html
    assert "<p>None.</p>" in html


def test_page_html__amount_above_the_first_keeps_its_places(view: EvaluationView) -> None:
    """Whole money stays whole, cents stay cents, and the percentage is that of the first's cost."""
    lot = view.lots[0]
    third = replace(lot.offers[2], above_winner=Decimal("48105"))
    html = page_html(replace(view, lots=(replace(lot, offers=(*lot.offers[:2], third, *lot.offers[3:])),)))
    assert '48,105<span class="basis">1.00\u202f%</span>' in html


def test_page_html__unknown_figure_is_an_error(view: EvaluationView) -> None:
    """A view that names a figure it does not hold gives no page, rather than a page with a hole."""
    lot = view.lots[1]
    broken = replace(lot.offers[0], unit_price="nowhere")
    with pytest.raises(KeyError):
        page_html(replace(view, lots=(replace(lot, offers=(broken, *lot.offers[1:])),)))


def test_environment__undefined_names_are_errors() -> None:
    """A misspelled name in a template is an error, not an empty place; and escaping is on."""
    environment = page._environment()
    with pytest.raises(UndefinedError):
        environment.from_string("{{ view.reverence }}").render(view=page_view())
    assert environment.from_string("{{ name }}").render(name="<i>") == "&lt;i&gt;"


def test_templates__all_found_as_package_resources() -> None:
    """Templates are read from the installed package, and each of them is used."""
    folder = files("lossworth.templates") / "report"
    names = {item.name for item in folder.iterdir() if item.name.endswith(".j2")}
    sources = "".join((folder / name).read_text(encoding="utf-8") for name in names)
    code = "".join(path.read_text(encoding="utf-8") for path in Path(page.__file__).parent.glob("*.py"))
    used = set(re.findall(r'(?:include|from) "(.*?)"', sources)) | set(re.findall(r'get_template\("(.*?)"\)', code))
    assert names == used


def test_templates__no_arithmetic() -> None:
    """Templates loop, escape and print; sums and products belong to the figures."""
    assert _ARITHMETIC.search(" total - price ")
    assert not _ARITHMETIC.search("- endif -")
    folder = files("lossworth.templates") / "report"
    for item in folder.iterdir():
        if item.name.endswith(".j2"):
            for expression in re.findall(r"\{[{%](.*?)[}%]\}", item.read_text(encoding="utf-8"), flags=re.DOTALL):
                bare = re.sub(r"\".*?\"|'.*?'", "", expression)
                assert not _ARITHMETIC.search(bare), (item.name, expression)
