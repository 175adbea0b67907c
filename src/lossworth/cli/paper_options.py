"""Options that every command with papers has: where they go, whether they replace others, which time they state."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path
from typing import Any

import click

__all__ = ["paper_options"]


def paper_options(function: Callable[..., Any]) -> Callable[..., Any]:
    """Options --papers, --overwrite and --as-of, handed over as `papers`, `overwrite` and `as_of`."""
    options = (
        click.option(
            "--papers",
            type=click.Path(path_type=Path, file_okay=False),
            help="Folder for the papers; default: papers, beside the tender file.",
        ),
        click.option("--overwrite", is_flag=True, help="Replace papers that exist already; never a published file."),
        click.option(
            "--as-of",
            metavar="TIME",
            help="Time that the papers state, as 2026-09-15T10:00:00Z; default: SOURCE_DATE_EPOCH, else the clock.",
        ),
    )
    for option in reversed(options):
        function = option(function)
    return function
