"""`lossworth evaluate`: the main job, from a tender folder to ranked papers."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING

import click

from .inputs import place_and_bids_arguments

if TYPE_CHECKING:
    from ..report.view import EvaluationView

__all__ = ["evaluate"]

_JSON, _WORKBOOK, _PAGE = "evaluation.json", "evaluation.xlsx", "evaluation.html"


@click.command()
@place_and_bids_arguments
@click.option(
    "--papers",
    type=click.Path(path_type=Path, file_okay=False),
    help="Folder for the papers; default: papers, beside the tender file.",
)
@click.option("--overwrite", is_flag=True, help="Replace papers that exist already.")
@click.option(
    "--as-of",
    metavar="TIME",
    help="Time that the papers state, as 2026-09-15T10:00:00Z; default: SOURCE_DATE_EPOCH, else the clock.",
)
def evaluate(tender: Path, bids: tuple[Path, ...], papers: Path | None, overwrite: bool, as_of: str | None) -> None:
    """Rank the offers of each lot by total owning cost and write the papers.

    TENDER is a tender folder or a tender file; BIDS, where given, are read in place of the folder's bids.
    Written are evaluation.json, evaluation.xlsx and evaluation.html, all of them or none.
    """
    from ..errors import EvaluationStopped
    from ..findings import any_stops
    from .clock import stated_time
    from .inputs import read_everything
    from .writing import refuse_existing, write_all

    time = stated_time(as_of)
    reading = read_everything(tender, bids)
    if reading.inputs is None or reading.tender is None or any_stops(reading.findings):
        raise EvaluationStopped(reading.findings)
    folder = papers or reading.inputs.papers
    if not overwrite:
        refuse_existing(folder, (_JSON, _WORKBOOK, _PAGE))

    from ..evaluation.evaluate import evaluate as evaluate_tender
    from ..intake.linked_files import linked_files
    from ..report.build_view import build_view
    from ..report.terminal import evaluation_text
    from .findings_text import echo_findings
    from .record import record_of
    from .screen import color, width

    evaluation = evaluate_tender(reading.tender, reading.offers, reading.findings)
    further = linked_files(reading.tender, reading.inputs.tender)
    view = build_view(evaluation, record_of(reading.inputs, further, time))
    write_all(folder, _contents(view))
    echo_findings(evaluation.findings)
    click.echo(evaluation_text(view, width(), color=color()))
    click.echo(f"Papers in {folder}: {_PAGE}, {_WORKBOOK}, {_JSON}")


def _contents(view: EvaluationView) -> dict[str, bytes]:
    from ..report.page import page_html
    from ..report.result_file import result_text
    from ..report.workbook import workbook_bytes

    return {
        _JSON: result_text(view).encode(),
        _WORKBOOK: workbook_bytes(view),
        _PAGE: page_html(view).encode(),
    }
