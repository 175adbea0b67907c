"""Decisions of bidders and rules on them, for tests. Invented."""

from __future__ import annotations

import datetime
from decimal import Decimal
from typing import Any

from lossworth.findings import Place
from lossworth.money import Rounding, RoundingMode
from lossworth.records.decision import Decision
from lossworth.records.quantity import Entry, Quantity
from lossworth.records.rules import AnnouncedRules
from lossworth.records.tender import Lot, RoundingPoint, Rules, Tender

from . import records

PROVED = "may confirm what the bid itself proves"
FIXED = "may not change price or guarantee"


def tender_with(setting: str | None, *lots: Lot, **changes: Any) -> Tender:
    """A tender whose rule on clarifications is this; None for none."""
    rules = Rules(
        rounding=Rounding(Decimal("0.01"), RoundingMode.HALF_AWAY_FROM_ZERO),
        rounding_applies_to=RoundingPoint.PART_PER_UNIT,
        announced=AnnouncedRules(clarifications=setting),  # type: ignore[arg-type]
        place=records.place(),
    )
    return records.tender(*lots, rules=rules, **changes)


def confirm(field: str, value: str, unit: str, bidder: str = "Alder", lot: str = "1", line: int = 3) -> Decision:
    """A confirmed value."""
    place = Place("decisions.toml", line=line)

    def entry(text: str) -> Entry:
        return Entry(value=text, place=place)

    return Decision(
        kind="confirm value",
        bidder=entry(bidder),
        lot=entry(lot),
        field=entry(field),
        value=Quantity(value=Decimal(value), stated=Decimal(value), unit=unit, text=value, place=place),
        reason=entry("letter of the bidder"),
        who=entry("evaluation committee"),
        when=datetime.date(2026, 9, 25),
        evidence=entry("file 7"),
        place=place,
    )
