"""The record of a run: fingerprints of its inputs, version, time."""

from __future__ import annotations

import datetime
import hashlib
from collections.abc import Iterable
from importlib.metadata import version

from ..intake.tender_folder import InputFile, Inputs
from ..report.view import InputFile as FileRecord
from ..report.view import RecordView

__all__ = ["record_of"]


def record_of(inputs: Inputs, further: Iterable[InputFile], time: datetime.datetime) -> RecordView:
    """Record that makes a run repeatable.

    Parameters
    ----------
    inputs : Inputs
        Tender file and bids.
    further : iterable of InputFile
        What else was read: profiles, prices, decisions, published rules.
    time : datetime.datetime
        The time that the papers state, in UTC.

    Returns
    -------
    RecordView
        Paths relative to the tender's folder, with the SHA-256 of each file.
    """
    files = tuple(
        FileRecord(file.shown_as, hashlib.sha256(file.path.read_bytes()).hexdigest())
        for file in (inputs.tender, *further, *inputs.bids)
    )
    return RecordView(version("lossworth"), time.strftime("%Y-%m-%dT%H:%M:%SZ"), files)
