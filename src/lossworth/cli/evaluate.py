"""`lossworth evaluate`: the main job, from a tender folder to ranked papers."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING

import click

from .inputs import place_and_bids_arguments
from .paper_options import paper_options

if TYPE_CHECKING:
    from ..evaluation.result import Evaluation
    from ..report.view import EvaluationView, RecordView
    from .inputs import Reading

__all__ = ["evaluate"]

_JSON, _WORKBOOK, _PAGE = "evaluation.json", "evaluation.xlsx", "evaluation.html"
_FOLDERS = ("questions", "internal")


@click.command()
@place_and_bids_arguments
@paper_options
def evaluate(tender: Path, bids: tuple[Path, ...], papers: Path | None, overwrite: bool, as_of: str | None) -> None:
    """Rank the offers of each lot by total owning cost and write the papers.

    TENDER is a tender folder or a tender file; BIDS, where given, are read in place of the folder's bids.
    Written are evaluation.json, evaluation.xlsx and evaluation.html, all of them or none; and, where a figure looks
    like a slip, a letter with the question to its bidder in questions/ and, not for bidders, in internal/ what the
    answers would change. Decisions are read from decisions.toml, published rules from published_rules.json.
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
        refuse_existing(folder, (_JSON, _WORKBOOK, _PAGE, *_FOLDERS))

    from ..evaluation.evaluate import evaluate as evaluate_tender
    from ..evaluation.rules_proof import compare_rules, rules_findings
    from ..report.build_told_findings import told_findings
    from ..report.build_view import build_view
    from ..report.terminal import evaluation_text
    from .findings_text import echo_findings
    from .record import record_of
    from .screen import color, width

    kept = reading.published_rules
    proof = None if kept is None else compare_rules(reading.tender, kept)
    findings = (*reading.findings, *rules_findings(proof))
    evaluation = evaluate_tender(reading.tender, reading.offers, findings, reading.decisions)
    record = record_of(reading.inputs, reading.further, time)
    view = build_view(evaluation, record, proof)
    contents = _contents(view) | _questions(evaluation, reading, record)
    write_all(folder, contents, whole_folders=_FOLDERS)
    echo_findings(told_findings(evaluation))
    click.echo(evaluation_text(view, width(), color=color()))
    click.echo(f"Papers in {folder}: {', '.join(contents)}")


def _contents(view: EvaluationView) -> dict[str, bytes]:
    from ..report.page import page_html
    from ..report.result_file import result_text
    from ..report.workbook import workbook_bytes

    return {
        _JSON: result_text(view).encode(),
        _WORKBOOK: workbook_bytes(view),
        _PAGE: page_html(view).encode(),
    }


def _questions(evaluation: Evaluation, reading: Reading, record: RecordView) -> dict[str, bytes]:
    """Letters with questions to bidders and, apart from them, the internal paper on what the answers would change."""
    from ..evaluation.suppositions import open_suspicions, suppose_right
    from ..report.build_internal_paper import build_internal_paper
    from ..report.build_questions import build_letters
    from ..report.internal_paper import internal_paper_html, internal_paper_json
    from ..report.letters import letter_html, letter_text

    suspicions = open_suspicions(evaluation, reading.offers)
    contents: dict[str, bytes] = {}
    for letter in build_letters(evaluation.tender, reading.offers, suspicions, evaluation.findings):
        contents[f"{_FOLDERS[0]}/{letter.file_stem}.html"] = letter_html(letter).encode()
        contents[f"{_FOLDERS[0]}/{letter.file_stem}.txt"] = letter_text(letter).encode()
    if suspicions:
        rankings = suppose_right(evaluation, reading.offers, suspicions, reading.findings)
        paper = build_internal_paper(evaluation.tender, suspicions, rankings, record)
        contents[f"{_FOLDERS[1]}/suppositions.html"] = internal_paper_html(paper).encode()
        contents[f"{_FOLDERS[1]}/suppositions.json"] = internal_paper_json(paper).encode()
    return contents
