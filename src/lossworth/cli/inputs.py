"""Arguments that several commands share, and reading what they name."""

from __future__ import annotations

import sys
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from pathlib import Path
from typing import TYPE_CHECKING, Any, NamedTuple

import click

if TYPE_CHECKING:
    from ..findings import Finding
    from ..intake.tender_folder import InputFile, Inputs
    from ..records.bid import Offer
    from ..records.decision import Decision
    from ..records.tender import Tender

__all__ = ["Reading", "place_and_bids_arguments", "place_argument", "read_everything", "read_tender_only"]

_PROGRESS_FROM = 20  # files; fewer are read before a bar could be seen


class Reading(NamedTuple):
    """What was read: records, findings and the files behind them."""

    inputs: Inputs | None
    tender: Tender | None
    offers: tuple[Offer, ...]
    findings: tuple[Finding, ...]
    decisions: tuple[Decision, ...] = ()
    published_rules: str | None = None
    further: tuple[InputFile, ...] = ()


def place_argument(function: Callable[..., Any]) -> Callable[..., Any]:
    """Argument TENDER: a tender folder or a tender file."""
    return click.argument("tender", type=click.Path(path_type=Path), metavar="TENDER")(function)


def place_and_bids_arguments(function: Callable[..., Any]) -> Callable[..., Any]:
    """Arguments TENDER and BIDS: a tender folder or file, and bid files in place of the folder's own."""
    bids = click.argument("bids", nargs=-1, type=click.Path(path_type=Path), metavar="[BIDS]...")
    return place_argument(bids(function))


def read_tender_only(place: Path) -> Reading:
    """Read the tender file alone.

    Parameters
    ----------
    place : Path
        Tender folder or tender file.

    Returns
    -------
    Reading
        Without offers.
    """
    from ..intake.tender_file import read_tender
    from ..intake.tender_folder import find_tender

    file, missing = find_tender(place)
    if file is None:
        return Reading(None, None, (), missing)
    tender, findings = read_tender(file)
    return Reading(None, tender, (), (*missing, *findings))


def read_everything(place: Path, bids: tuple[Path, ...]) -> Reading:
    """Read the tender and all bids, and report all findings of the run at once.

    Parameters
    ----------
    place : Path
        Tender folder or tender file.
    bids : tuple of Path
        Bid files; empty for those of the folder.

    Returns
    -------
    Reading
        Records as far as they could be read, and every finding.
    """
    from ..intake.bid_files import read_bids
    from ..intake.decision_file import find_decisions, read_decisions
    from ..intake.linked_files import linked_files
    from ..intake.published_rules import find_published_rules, read_published_rules
    from ..intake.tender_file import read_tender
    from ..intake.tender_folder import find_inputs

    inputs, missing = find_inputs(place, bids)
    if inputs is None:
        return Reading(None, None, (), missing)
    tender, about_tender = read_tender(inputs.tender)
    with _progress(len(inputs.bids)) as advance:
        offers, about_bids = read_bids(inputs.bids, tender, advance)
    folder = inputs.tender.path.parent
    further = [] if tender is None else list(linked_files(tender, inputs.tender))
    decisions: tuple[Decision, ...] = ()
    about_records: tuple[Finding, ...] = ()
    rules = None
    if (decision_file := find_decisions(folder)) is not None:
        further.append(decision_file)
        decisions, about_records = read_decisions(decision_file, tender, offers)
    if (rules_file := find_published_rules(folder)) is not None:
        further.append(rules_file)
        rules, about_rules = read_published_rules(rules_file)
        about_records = (*about_records, *about_rules)
    findings = (*missing, *about_tender, *about_bids, *about_records)
    return Reading(inputs, tender, offers, findings, decisions, rules, tuple(further))


@contextmanager
def _progress(files: int) -> Iterator[Callable[[InputFile], None]]:
    """Show a bar on the error stream where there are enough files to wait for."""
    if files < _PROGRESS_FROM:
        yield _silent
        return
    with click.progressbar(length=files, label="Reading bids", file=sys.stderr) as bar:

        def advance(_: InputFile) -> None:
            bar.update(1)

        yield advance


def _silent(_: InputFile) -> None:
    """Fewer files than a bar is worth."""
