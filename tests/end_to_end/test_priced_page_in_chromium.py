"""The page of a tender with price steps in a browser: silent, figures of the view, no width too small."""

from __future__ import annotations

from collections.abc import Iterator
from pathlib import Path

import pytest
from playwright.sync_api import Browser

from lossworth.report.formats import plain
from lossworth.report.page import page_html
from lossworth.report.view import EvaluationView
from support.chromium import chromium, opened, overflow, pdf_text
from support.priced_views import HOSTILE_NAME, priced_view


@pytest.fixture(scope="module")
def view() -> EvaluationView:
    return priced_view()


@pytest.fixture(scope="module")
def file(view: EvaluationView, tmp_path_factory: pytest.TempPathFactory) -> Path:
    path = tmp_path_factory.mktemp("priced page") / "evaluation.html"
    path.write_text(page_html(view), encoding="utf-8")
    return path


@pytest.fixture(scope="module")
def browser() -> Iterator[Browser]:
    with chromium() as running:
        yield running


@pytest.mark.parametrize("width", [1280, 768, 400, 320])
def test_priced_page__fits_and_is_silent(browser: Browser, file: Path, width: int) -> None:
    """Tables scroll inside themselves, and the name that is a script stays a name."""
    with opened(browser, file, width=width) as window:
        window.page.evaluate("document.querySelectorAll('details').forEach(d => { d.open = true })")
        assert overflow(window.page) == 0
        assert window.requests == [file.as_uri()]
        assert window.complaints == []


def test_priced_page__figures_equal_the_view(browser: Browser, file: Path, view: EvaluationView) -> None:
    """Every figure of the view is shown, with its value and its text."""
    with opened(browser, file) as window:
        shown = window.page.eval_on_selector_all(
            "[data-figure]", "cells => cells.map(c => [c.dataset.figure, c.dataset.value, c.textContent])"
        )
    assert {key for key, _, _ in shown} == set(view.figures)
    for key, value, text in shown:
        assert value == plain(view.figures[key].value)
        assert view.figures[key].text in text


@pytest.mark.parametrize("paper", ["A4", "Letter"])
def test_priced_page__nothing_is_cut_off_on_paper(browser: Browser, file: Path, tmp_path: Path, paper: str) -> None:
    """The widest table stands on the sheet with its last column, and the steps unfold in the appendix."""
    with opened(browser, file) as window:
        sheets = pdf_text(window.page, tmp_path / "page.pdf", paper)
        window.page.emulate_media(media="print")
        window.page.set_viewport_size({"width": 680, "height": 900})
        wide = window.page.eval_on_selector_all(
            "table", "tables => tables.filter(t => t.scrollWidth > 681).map(t => t.className)"
        )
    assert wide == []
    text = " ".join(" ".join(sheets).split())
    assert "Contract price and evaluated price" in text
    assert text.count("From the quoted to the evaluated price") > 2
    assert HOSTILE_NAME in text
