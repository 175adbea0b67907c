"""The evaluation page in a browser: silence, figures, widths, keyboard, paper."""

from __future__ import annotations

import json
import re
from collections.abc import Iterator
from pathlib import Path
from typing import Any

import pytest
from click.testing import CliRunner
from playwright.sync_api import Browser

from lossworth.cli.main import lossworth
from lossworth.report.formats import plain
from lossworth.report.page import page_html
from lossworth.report.view import EvaluationView
from support.chromium import OpenedPage, chromium, opened, overflow, pdf_size, pdf_text
from support.page_views import LONGEST_NAME, SCRIPT_NAME, page_view

_DEMO = Path(__file__).parents[2] / "sample_bids"

#: Least contrast of text of normal size: WCAG 2.2, success criterion 1.4.3 (level AA).
_LEAST_CONTRAST = 4.5

_CONTRASTS = """() => {
  const channel = v => (v /= 255) <= 0.04045 ? v / 12.92 : ((v + 0.055) / 1.055) ** 2.4;
  const light = c => 0.2126 * channel(c[0]) + 0.7152 * channel(c[1]) + 0.0722 * channel(c[2]);
  const color = text => text.match(/[\\d.]+/g).map(Number);
  const found = [];
  for (const element of document.querySelectorAll('body *:not(svg *)')) {
    if (![...element.childNodes].some(n => n.nodeType === 3 && n.textContent.trim())) continue;
    let behind = element, ground = [255, 255, 255];
    while (behind) {
      const c = color(getComputedStyle(behind).backgroundColor);
      if (c.length === 3 || c[3] === 1) { ground = c; break; }
      behind = behind.parentElement;
    }
    const pair = [light(color(getComputedStyle(element).color)), light(ground)].sort((a, b) => b - a);
    found.push([(pair[0] + 0.05) / (pair[1] + 0.05), element.className + ': ' + element.textContent.slice(0, 40)]);
  }
  return found;
}"""


@pytest.fixture(scope="module")
def view() -> EvaluationView:
    return page_view()


@pytest.fixture(scope="module")
def file(view: EvaluationView, tmp_path_factory: pytest.TempPathFactory) -> Path:
    path = tmp_path_factory.mktemp("page") / "evaluation.html"
    path.write_text(page_html(view), encoding="utf-8")
    return path


@pytest.fixture(scope="module")
def browser() -> Iterator[Browser]:
    with chromium() as running:
        yield running


@pytest.fixture
def window(browser: Browser, file: Path) -> Iterator[OpenedPage]:
    with opened(browser, file) as page:
        yield page


@pytest.fixture(scope="module", params=["A4", "Letter"])
def paper(request: pytest.FixtureRequest, browser: Browser, file: Path) -> tuple[str, list[str], Path]:
    pdf = file.with_name(f"{request.param}.pdf")
    with opened(browser, file) as window:
        return request.param, pdf_text(window.page, pdf, request.param), pdf


def test_page__asks_for_nothing_and_complains_of_nothing(window: OpenedPage, file: Path) -> None:
    """The only request is the page itself; the console stays empty; the script in a name never runs."""
    window.page.evaluate("document.querySelectorAll('details').forEach(d => { d.open = true })")
    window.page.mouse.wheel(0, 20000)
    window.page.wait_for_timeout(100)
    assert window.requests == [file.as_uri()]
    assert window.complaints == []


def test_harness__notices_requests_and_complaints(browser: Browser, tmp_path: Path) -> None:
    """The silence above is worth something: a page that is not silent is heard."""
    loud = tmp_path / "loud.html"
    loud.write_text('<img src="missing.png"><script>console.error("heard"); alert(1)</script>', encoding="utf-8")
    with opened(browser, loud) as window:
        window.page.wait_for_timeout(100)
        assert len(window.requests) == 2
        assert {"heard", "1"} <= set(window.complaints)


def test_page__forbids_what_is_smuggled_in(browser: Browser, file: Path, tmp_path: Path) -> None:
    """Even if escaping failed, the policy of the page would stop a script and a request."""
    smuggled = tmp_path / "smuggled.html"
    html = file.read_text(encoding="utf-8")
    html = html.replace("<main>", '<main><script>document.title = "owned"</script><img src="http://127.0.0.1:9/x.png">')
    smuggled.write_text(html, encoding="utf-8")
    with opened(browser, smuggled) as window:
        window.page.wait_for_timeout(100)
        assert window.page.title() != "owned"
        assert any("Content Security Policy" in complaint for complaint in window.complaints)


def test_page__figures_equal_the_view(window: OpenedPage, view: EvaluationView) -> None:
    """Every figure that the browser shows has the value of the view, and its printed text beside it."""
    shown = window.page.eval_on_selector_all(
        "[data-figure]", "cells => cells.map(c => [c.dataset.figure, c.dataset.value, c.textContent])"
    )
    assert len(shown) > 300
    assert {key for key, _, _ in shown} == set(view.figures)
    for key, value, text in shown:
        assert value == plain(view.figures[key].value)
        assert view.figures[key].text in text


@pytest.mark.parametrize("width", [360, 768, 1280, 1600])
def test_page__no_wider_than_the_window(browser: Browser, file: Path, width: int) -> None:
    """Wide tables scroll inside their box; the page itself never scrolls sideways, opened or closed."""
    with opened(browser, file, width=width) as window:
        assert overflow(window.page) <= 0
        window.page.evaluate("document.querySelectorAll('details').forEach(d => { d.open = true })")
        assert overflow(window.page) <= 0
        boxes = window.page.eval_on_selector_all(
            ".scroll", "boxes => boxes.filter(b => b.checkVisibility()).map(b => b.scrollWidth - b.clientWidth)"
        )
        assert any(hidden > 0 for hidden in boxes) == (width < 860)


def test_page__details_open_by_keyboard(window: OpenedPage) -> None:
    """Tab reaches the arithmetic of an offer, Enter opens and closes it."""
    page = window.page
    first = page.locator("details").first
    first.locator("summary").focus()
    page.keyboard.press("Shift+Tab")
    page.keyboard.press("Tab")
    assert page.evaluate("document.activeElement.tagName") == "SUMMARY"
    assert not first.locator(".lines").is_visible()
    page.keyboard.press("Enter")
    assert first.locator(".lines").is_visible()
    page.keyboard.press("Enter")
    assert not first.locator(".lines").is_visible()


def test_page__amount_opens_its_arithmetic(window: OpenedPage, view: EvaluationView) -> None:
    """Following an amount of the ranking unfolds the offer and marks the line of that very figure."""
    page = window.page
    offer = view.lots[0].offers[0]
    assert offer.per_unit.load_cost is not None
    cell = page.locator(f'.ranking td[data-figure="{offer.per_unit.load_cost}"]')
    cell.locator("a").first.focus()
    page.keyboard.press("Enter")
    line = page.locator("tr:target")
    line.wait_for(state="visible")
    assert line.locator("td.n").get_attribute("data-figure") == offer.per_unit.load_cost
    assert "1,320.00 NCU/kW × 3.100 kW = 4,092.00 NCU" in line.inner_text()
    assert page.locator("details[open]").count() == 1


def test_page__every_amount_of_every_lot_leads_to_its_line(window: OpenedPage) -> None:
    """No link of an amount leads to the line of another figure."""
    pairs = window.page.evaluate(
        """() => [...document.querySelectorAll('a.to-sum')].map(a => [
             a.closest('[data-figure]').dataset.figure,
             document.querySelector(a.getAttribute('href')).querySelector('[data-figure]').dataset.figure])"""
    )
    assert len(pairs) > 100
    assert [pair for pair in pairs if pair[0] != pair[1]] == []


def test_page__text_has_contrast(window: OpenedPage) -> None:
    """Every text stands out from its ground as WCAG 2.2 asks of text of normal size (1.4.3, level AA)."""
    window.page.evaluate("document.querySelectorAll('details').forEach(d => { d.open = true })")
    found = window.page.evaluate(_CONTRASTS)
    assert len(found) > 300
    assert [text for contrast, text in found if contrast < _LEAST_CONTRAST] == []


def test_page__cost_parts_differ_in_lightness(window: OpenedPage) -> None:
    """The plain fills of the picture stay apart in gray print: relative luminances at least 0.2 apart."""
    fills = window.page.evaluate(
        """() => ['.part.evaluated_price', '.part.no_load_cost', '#fill-load_cost rect'].map(
             s => getComputedStyle(document.querySelector(s)).fill.match(/\\d+/g).map(Number))"""
    )
    linear = [[(v / 255) ** 2.2 for v in fill] for fill in fills]
    luminances = [0.2126 * r + 0.7152 * g + 0.0722 * b for r, g, b in linear]
    assert luminances[1] - luminances[0] > 0.2
    assert luminances[2] - luminances[1] > 0.2


def test_page__picture_labels_stay_inside(browser: Browser, file: Path) -> None:
    """No text of a picture leaves the drawing, no label leaves its part, on a telephone and on a wide screen."""
    script = """() => [...document.querySelectorAll('.bars')].flatMap(svg => {
        const box = svg.getBoundingClientRect();
        const out = [...svg.querySelectorAll('text')].map(t => [t, t.getBoundingClientRect()])
          .filter(([t, r]) => r.width && (r.left < box.left - 1 || r.right > box.right + 1))
          .map(([t]) => t.textContent);
        const tight = [...svg.querySelectorAll('text.label')].map(t => [t, t.getBoundingClientRect(),
          t.previousElementSibling.getBoundingClientRect()])
          .filter(([t, r, b]) => r.width && r.width > b.width).map(([t]) => t.textContent);
        const names = [...svg.querySelectorAll('.who')].map(t => t.getBoundingClientRect());
        const totals = [...svg.querySelectorAll('.total')].map(t => t.getBoundingClientRect());
        const over = names.filter(n => totals.some(t => Math.abs(t.top - n.top) < 5 && n.right > t.left));
        return [...out, ...tight, ...over.map(() => 'name over total')];
    })"""
    for width in (360, 641, 1280):
        with opened(browser, file, width=width) as window:
            assert window.page.evaluate(script) == [], width


def test_paper__has_the_size_asked_for(paper: tuple[str, list[str], Path]) -> None:
    """The page does not force its own paper."""
    size = {"A4": "A4", "Letter": "letter"}[paper[0]]
    assert size in pdf_size(paper[2])


def test_paper__every_sheet_has_number_reference_and_remark(paper: tuple[str, list[str], Path]) -> None:
    """A loose sheet says where it belongs, and that its data are invented."""
    _, sheets, _ = paper
    for number, text in enumerate(sheets, start=1):
        assert f"Page {number} of {len(sheets)}" in text
        assert 'T-07 "A" </style>' in text
        assert "INVENTED DATA <for tests>, made up" in text


def test_paper__closed_arithmetic_is_printed_behind_the_lots(
    paper: tuple[str, list[str], Path], view: EvaluationView
) -> None:
    """What is folded on the screen is open on paper, as an appendix after the record."""
    _, sheets, _ = paper
    whole = _flat(" ".join(sheets))
    record = whole.index("Inputs and their SHA-256")
    for lot in view.lots:
        assert whole.index(f"Lot {lot.id}: Arithmetic, down to the cell") > record
    for figure in view.figures.values():
        if figure.operator in ("sum", "quotient"):
            assert _flat(figure.text) in whole
    assert "1,320.00 NCU/kW × 3.100 kW = 4,092.00 NCU" in whole
    assert "330 W ÷ 1,000 W/kW = 0.33 kW" in whole
    assert re.search(r"\b35 +0\.130105", whole)


def test_paper__recommendation_first_and_table_heads_not_alone(paper: tuple[str, list[str], Path]) -> None:
    """The first sheet has the recommendation and every lot's first; no sheet ends with the head of a table."""
    _, sheets, _ = paper
    assert "Recommendation" in sheets[0]
    assert "The contract pays the price" in sheets[0]
    assert SCRIPT_NAME in sheets[0]
    assert LONGEST_NAME.split(",", 1)[0] not in sheets[0]
    for text in sheets:
        lines = [line.strip() for line in text.splitlines() if line.strip()][1:-1]
        assert not re.search(r"(Bidder|Where it stands|Total owning cost)$", lines[-1]), lines[-3:]


def _flat(text: str) -> str:
    return " ".join(text.replace("\u202f", " ").split())


@pytest.fixture(scope="module")
def demo(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """Papers of the invented tender of sample_bids, made by the command line."""
    folder = tmp_path_factory.mktemp("papers") / "papers"
    arguments = ["evaluate", str(_DEMO), "--papers", str(folder), "--as-of", "2026-09-15T10:00:00Z"]
    run = CliRunner().invoke(lossworth, arguments)
    assert run.exit_code == 0, run.output
    return folder


def test_demo_page__equals_the_result_file(browser: Browser, demo: Path) -> None:
    """Each row of each ranking, and each offer left out, has the amounts of evaluation.json, in its order."""
    result = json.loads((demo / "evaluation.json").read_text(encoding="utf-8"))
    with opened(browser, demo / "evaluation.html") as window:
        shown = window.page.evaluate(_ROWS)
        assert window.requests == [(demo / "evaluation.html").as_uri()]
        assert window.complaints == []
    wanted = [
        [_row(offer, with_auxiliary=lot["rates"]["C"] is not None) for offer in lot["offers"]] for lot in result["lots"]
    ]
    assert len(wanted) == 4
    assert shown == wanted


def test_demo_page__fits_screen_and_paper(browser: Browser, demo: Path, tmp_path: Path) -> None:
    """The demo is neither too wide for a telephone nor without its arithmetic on paper."""
    with opened(browser, demo / "evaluation.html", width=360) as window:
        assert overflow(window.page) <= 0
        text = _flat(" ".join(pdf_text(window.page, tmp_path / "demo.pdf", "A4")))
    assert "600 units × 6,237.00 NCU = 3,742,200.00 NCU" in text
    assert "11,600.00 NCU/kW × 15.2 kW = 176,320.00 NCU" in text


_ROWS = """() => [...document.querySelectorAll('.lot')].map(lot =>
  [...lot.querySelectorAll('.ranking tbody tr, .unranked tbody tr:first-child')].map(row => [
    row.querySelector('th').textContent.trim(),
    (row.querySelector('td.rank') || {textContent: ''}).textContent.trim().replace(' =', ''),
    ...[...row.querySelectorAll('td.n[data-figure], td.none')].map(c => c.dataset.value || null)]))"""


def _row(offer: dict[str, Any], *, with_auxiliary: bool) -> list[str | None]:
    parts = ["evaluated_price", "no_load_cost", "load_cost", *(["auxiliary_cost"] if with_auxiliary else [])]
    amounts = [offer["per_unit"][part] for part in (*parts, "total_owning_cost")]
    rank = "" if offer["rank"] is None else str(offer["rank"])
    return [offer["bidder"], rank, *amounts, offer["total_owning_cost"]]
