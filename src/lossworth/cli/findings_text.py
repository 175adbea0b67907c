"""Findings on the screen."""

from __future__ import annotations

from collections.abc import Iterable
from itertools import groupby

import click

from ..findings import Effect, Finding

__all__ = ["echo_findings"]

_HEADINGS = {
    Effect.STOPS: "Stops the evaluation:",
    Effect.NOT_EVALUATED: "Offers not evaluated:",
    Effect.NON_RESPONSIVE: "Offers non-responsive:",
    Effect.NOTE: "Notes:",
}


def echo_findings(findings: Iterable[Finding]) -> None:
    """Print findings to the error stream, grouped by weight, each with the short name that a waiver needs.

    Parameters
    ----------
    findings : iterable of Finding
        Sorted by weight.
    """
    for effect, group in groupby(findings, key=lambda finding: finding.effect):
        click.echo(click.style(_HEADINGS[effect], bold=True), err=True)
        for finding in group:
            click.echo(_with_short_name(finding), err=True)
        click.echo(err=True)


def _with_short_name(finding: Finding) -> str:
    told, _, remedy = str(finding).partition("\n")
    return f"{told} [{finding.kind}]\n{remedy}"
