"""`lossworth form`: the workbook that bidders fill in."""

from __future__ import annotations

from pathlib import Path

import click

from .inputs import place_argument
from .paper_options import paper_options

__all__ = ["form"]

_FORM = "bid_form.xlsx"


@click.command()
@place_argument
@paper_options
def form(tender: Path, papers: Path | None, overwrite: bool, as_of: str | None) -> None:
    """Write the blank bid form of a tender: a workbook with price schedule, guaranteed particulars and self-check.

    TENDER is a tender folder or a tender file. Bids are not read. Written is bid_form.xlsx.
    """
    from importlib.metadata import version

    from ..errors import EvaluationStopped
    from ..findings import any_stops
    from ..intake.tender_folder import PAPERS
    from .clock import stated_time
    from .findings_text import echo_findings
    from .inputs import read_tender_only
    from .writing import refuse_existing, write_all

    time = stated_time(as_of)
    reading = read_tender_only(tender)
    if reading.tender is None or any_stops(reading.findings):
        raise EvaluationStopped(reading.findings)
    from ..report.bid_form import bid_form_bytes
    from ..report.build_form import build_form

    view = build_form(reading.tender)
    folder = papers or (tender if tender.is_dir() else tender.parent) / PAPERS
    if not overwrite:
        refuse_existing(folder, (_FORM,))
    write_all(folder, {_FORM: bid_form_bytes(view, time, version("lossworth"))})
    echo_findings(reading.findings)
    click.echo(f"Form in {folder / _FORM}: {len(view.lots)} lots. Filled forms go into the folder bids.")
