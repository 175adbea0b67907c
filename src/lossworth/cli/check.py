"""`lossworth check`: read everything, report all findings, write nothing."""

from __future__ import annotations

from pathlib import Path

import click

from .inputs import place_and_bids_arguments

__all__ = ["check"]


@click.command()
@place_and_bids_arguments
def check(tender: Path, bids: tuple[Path, ...]) -> None:
    """Read the tender and all bids and report every finding with its place, at once; write nothing.

    TENDER is a tender folder or a tender file; BIDS, where given, are read in place of the folder's bids.
    """
    from ..errors import EvaluationStopped
    from ..findings import any_stops
    from .findings_text import echo_findings
    from .inputs import read_everything

    reading = read_everything(tender, bids)
    if reading.tender is None or any_stops(reading.findings):
        raise EvaluationStopped(reading.findings)
    from ..evaluation.evaluate import evaluate
    from ..evaluation.result import Status
    from ..report.build_told_findings import told_findings

    evaluation = evaluate(reading.tender, reading.offers, reading.findings, reading.decisions)
    echo_findings(told_findings(evaluation))
    statuses = [offer.status for lot in evaluation.lots for offer in lot.offers]
    counts = ", ".join(
        f"{statuses.count(status)} {word}"
        for status, word in (
            (Status.RANKED, "can be ranked"),
            (Status.NON_RESPONSIVE, "non-responsive"),
            (Status.NOT_EVALUATED, "not evaluated"),
        )
    )
    click.echo(f"{len(statuses)} offers in {len(evaluation.lots)} lots: {counts}.")
