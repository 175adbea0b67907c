"""Make the pictures of the README: the page of the demo, opened in Chromium.

Run it in an environment with the test dependencies: ``make pictures``.
"""

from __future__ import annotations

import shutil
import subprocess
import sysconfig
import tempfile
from pathlib import Path
from typing import Literal

from playwright.sync_api import Locator, sync_playwright

CHECKOUT = Path(__file__).resolve().parents[1]
PICTURES = CHECKOUT / "docs" / "pictures"
#: The pictures show this time, whenever they are made.
AS_OF = "2026-09-15T10:00:00Z"
WIDTH, MARGIN = 1180, 24


def write_page(papers: Path) -> Path:
    """Evaluate the demo into a folder and return its page."""
    program = Path(sysconfig.get_path("scripts")) / "lossworth"
    command = [str(program), "evaluate", str(CHECKOUT / "sample_bids"), "--papers", str(papers), "--as-of", AS_OF]
    subprocess.run(command, check=True, capture_output=True)  # noqa: S603 - our own program
    return papers / "evaluation.html"


def photograph(page_file: Path) -> None:
    """Save the head of the page with the recommendation, and the first lot from its head to its cost picture."""
    PICTURES.mkdir(parents=True, exist_ok=True)
    with sync_playwright() as playwright:
        browser = playwright.chromium.launch(executable_path=shutil.which("chromium"), args=["--no-sandbox"])
        page = browser.new_page(viewport={"width": WIDTH, "height": 900})
        page.goto(page_file.as_uri())
        lot = edge(page.locator("section.lot").first, "y")
        bars = page.locator("section.lot svg:has(desc)").first
        end = edge(bars, "y") + edge(bars, "height")
        for name, top, bottom in (("evaluation", 0.0, lot), ("lot", lot, end + MARGIN)):
            page.screenshot(
                path=PICTURES / f"{name}.png",
                full_page=True,
                clip={"x": 0, "y": top, "width": WIDTH, "height": bottom - top},
            )
        browser.close()


def edge(part: Locator, name: Literal["y", "height"]) -> float:
    """Upper edge or height of a part of the page. [px]"""
    box = part.bounding_box()
    if box is None:
        raise SystemExit(f"the page does not show {part}")
    return box[name]


def main() -> None:
    """Make the pictures."""
    with tempfile.TemporaryDirectory() as folder:
        photograph(write_page(Path(folder)))


if __name__ == "__main__":
    main()
