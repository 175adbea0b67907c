"""The rules sheet in a browser: silence, widths, paper."""

from __future__ import annotations

from collections.abc import Iterator
from pathlib import Path

import pytest
from playwright.sync_api import Browser

from lossworth.report.build_rules import build_rules
from lossworth.report.rules_sheet import rules_html
from support.chromium import chromium, opened, overflow, pdf_text
from support.rules_tenders import full_tender, ruled


@pytest.fixture(scope="module")
def file(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """A sheet with rules announced, rules missing and rules incomplete."""
    view = build_rules(full_tender(rules=ruled(taxes="included", tie_order=("drawing of lots",))), "0", "")
    path = tmp_path_factory.mktemp("rules") / "rules.html"
    path.write_text(rules_html(view), encoding="utf-8")
    return path


@pytest.fixture(scope="module")
def browser() -> Iterator[Browser]:
    with chromium() as started:
        yield started


@pytest.mark.parametrize("width", [360, 768, 1280])
def test_page__fits_and_is_silent(browser: Browser, file: Path, width: int) -> None:
    """No width makes the page scroll sideways; it asks for nothing and complains of nothing."""
    with opened(browser, file, width=width) as page:
        assert overflow(page.page) == 0
        assert page.requests == [file.as_uri()]
        assert page.complaints == []


def test_page__links_lead_to_parts_of_it(browser: Browser, file: Path) -> None:
    """Every link of the head has its target."""
    with opened(browser, file) as page:
        targets = page.page.eval_on_selector_all("nav a", "all => all.map(a => a.getAttribute('href').slice(1))")
        assert len(targets) >= 7
        assert [target for target in targets if page.page.locator(f"[id='{target}']").count() != 1] == []


def test_page__prints_on_numbered_sheets_with_the_fingerprint_first(
    browser: Browser, file: Path, tmp_path: Path
) -> None:
    """On A4 the first sheet has the whole fingerprint; each has reference, kind of paper and number."""
    with opened(browser, file) as page:
        fingerprint = page.page.locator(".fingerprint-value").inner_text()
        sheets = pdf_text(page.page, tmp_path / "rules.pdf", "A4")
    assert len(fingerprint) == 64
    assert fingerprint in sheets[0]
    for number, text in enumerate(sheets, start=1):
        assert f"Page {number} of {len(sheets)}" in text
        assert "Rules of the evaluation" in text
        assert "T-1" in text
