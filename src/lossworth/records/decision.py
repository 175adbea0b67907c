"""Decisions by people: confirmations, waivers, changed statuses; who, when, why, with what evidence."""

from __future__ import annotations

import datetime
from typing import Literal

from ..findings import Place
from .quantity import Entry, Quantity, Record

__all__ = ["Decision"]


class Decision(Record):
    """One entry of the append-only file of decisions.

    Parameters
    ----------
    kind : str
        ``"confirm value"``: the bidder confirmed a value in writing; ``"accept correction"`` or ``"refuse
        correction"``: the bidder's answer to an arithmetic correction; ``"waive"``: a deviation is waived; ``"change
        status"``: an offer is taken in or left out by hand; ``"break tie"``: the outcome of a drawing of lots.
    bidder, lot : Entry
        The offer concerned.
    field : Entry or None
        The value concerned, by its name in the records (``"load_loss_kw"``), or the kind of a finding that is waived.
    value : Quantity or None
        The confirmed value, in the unit of the field.
    status : str or None
        New status, where one is set by hand.
    order : int or None
        Place drawn, where a tie is broken by lot.
    reason, who, evidence : Entry
        Why, by whom, and where it is on file.
    when : datetime.date
        Day of the decision.
    place : Place
        Where it stands.
    """

    kind: Literal["confirm value", "accept correction", "refuse correction", "waive", "change status", "break tie"]
    bidder: Entry
    lot: Entry
    field: Entry | None = None
    value: Quantity | None = None
    status: Literal["evaluate", "non-responsive", "not evaluated"] | None = None
    order: int | None = None
    reason: Entry
    who: Entry
    when: datetime.date
    evidence: Entry
    place: Place
