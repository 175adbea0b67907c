"""Chromium for tests: a page opened from a file, with every request and every message of the console on record."""

from __future__ import annotations

import shutil
import subprocess
from collections.abc import Iterator
from contextlib import contextmanager
from dataclasses import dataclass, field
from pathlib import Path

from playwright.sync_api import Browser, Dialog, Page, sync_playwright

_ARGUMENTS = (
    "--no-sandbox",
    "--disable-gpu",
    "--disable-quic",
    "--no-first-run",
    "--disable-background-networking",
    "--disable-component-update",
    "--disable-sync",
)


def found(program: str) -> str:
    """Path of a program that the tests need; a missing one fails the test, it never skips it."""
    path = shutil.which(program)
    assert path is not None, f"{program} is not installed: apt install chromium poppler-utils"
    return path


@contextmanager
def chromium() -> Iterator[Browser]:
    """Debian's Chromium without a window."""
    with sync_playwright() as playwright:
        browser = playwright.chromium.launch(executable_path=found("chromium"), args=list(_ARGUMENTS))
        try:
            yield browser
        finally:
            browser.close()


@dataclass
class OpenedPage:
    """A page with what it asked for and what it complained about."""

    page: Page
    requests: list[str] = field(default_factory=list)
    complaints: list[str] = field(default_factory=list)

    def dismiss(self, dialog: Dialog) -> None:
        """Note what a dialog says, and close it: an open one would stop the page."""
        self.complaints.append(dialog.message)
        dialog.dismiss()


@contextmanager
def opened(browser: Browser, file: Path, *, width: int = 1280, height: int = 900) -> Iterator[OpenedPage]:
    """Open a file in a fresh context of its own; scripts are allowed, so that a smuggled one would show."""
    context = browser.new_context(viewport={"width": width, "height": height})
    page = context.new_page()
    record = OpenedPage(page)
    page.on("request", lambda request: record.requests.append(request.url))
    page.on("console", lambda message: record.complaints.append(message.text))
    page.on("pageerror", lambda error: record.complaints.append(str(error)))
    page.on("dialog", record.dismiss)
    try:
        page.goto(file.as_uri())
        yield record
    finally:
        context.close()


def overflow(page: Page) -> int:
    """Pixels by which the document is wider than the window."""
    return int(page.evaluate("document.documentElement.scrollWidth - document.documentElement.clientWidth"))


def pdf_text(page: Page, file: Path, paper: str) -> list[str]:
    """Text of each sheet of the printed page, through pdftotext; paper is A4 or Letter."""
    page.pdf(path=str(file), format=paper)
    done = subprocess.run([found("pdftotext"), "-layout", str(file), "-"], capture_output=True, check=True, text=True)
    return done.stdout.split("\f")[:-1]


def pdf_size(file: Path) -> str:
    """Paper of a PDF as pdfinfo names it."""
    done = subprocess.run([found("pdfinfo"), str(file)], capture_output=True, check=True, text=True)
    return next(line.split(":", 1)[1].strip() for line in done.stdout.splitlines() if line.startswith("Page size"))
