"""`lossworth rules`: the rules sheet, to publish before bids are opened."""

from __future__ import annotations

from pathlib import Path

import click

from .inputs import place_argument
from .paper_options import paper_options

__all__ = ["rules"]

_TO_MEND = "Complete the tender file, or take the rule out of it; without --publish the sheet is written as it is."
_PAGE, _DATA = "rules.html", "rules.json"
_AMENDED = "If the tender is published anew, move the file into the record of the tender first."


@click.command()
@place_argument
@paper_options
@click.option("--publish", is_flag=True, help="Also keep published_rules.json beside the tender file; once only.")
def rules(tender: Path, papers: Path | None, overwrite: bool, publish: bool, as_of: str | None) -> None:
    """Write the rules by which offers will be judged, each as a sentence for the tender documents, with a fingerprint.

    TENDER is a tender folder or a tender file. Bids are not read. Written are rules.html and rules.json.
    """
    from importlib.metadata import version

    from ..errors import EvaluationStopped
    from ..findings import any_stops
    from .clock import stated_time
    from .findings_text import echo_findings
    from .inputs import read_tender_only
    from .screen import width
    from .writing import refuse_existing, write_all

    time = stated_time(as_of)
    reading = read_tender_only(tender)
    if reading.tender is None or any_stops(reading.findings):
        raise EvaluationStopped(reading.findings)
    from ..intake.tender_folder import PAPERS
    from ..records.rules import PUBLISHED_RULES
    from ..report.build_rules import build_rules
    from ..report.rules_sheet import rules_html, rules_json, rules_text

    view = build_rules(reading.tender, version("lossworth"), time.strftime("%Y-%m-%dT%H:%M:%SZ"))
    if publish and view.gaps:
        gaps = "".join(f"\n  - {gap}" for gap in view.gaps)
        raise click.UsageError(f"Nothing is published: announced rules lack what they need.{gaps}\n{_TO_MEND}")
    home = tender if tender.is_dir() else tender.parent
    folder = papers or home / PAPERS
    if publish and (home / PUBLISHED_RULES).exists():
        raise click.UsageError(f"{home / PUBLISHED_RULES} exists; published rules are never replaced. {_AMENDED}")
    if not overwrite:
        refuse_existing(folder, (_PAGE, _DATA))
    data = rules_json(view).encode()
    write_all(folder, {_PAGE: rules_html(view).encode(), _DATA: data})
    if publish:
        write_all(home, {PUBLISHED_RULES: data})
    echo_findings(reading.findings)
    click.echo(rules_text(view, width()), nl=False)
    click.echo(f"Rules sheet in {folder}: {_PAGE}, {_DATA}")
    if publish:
        click.echo(f"Kept for the evaluation: {home / PUBLISHED_RULES}; print the fingerprint in the tender documents.")
