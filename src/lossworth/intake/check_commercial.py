"""Do the tables that level prices fit together: delivered point, payments, planned award?"""

from __future__ import annotations

import datetime
from collections.abc import Iterator
from decimal import Decimal
from typing import get_args

from ..findings import Finding
from ..records.commercial import Incoterm
from .tender_draft import Check, Draft, DraftTable

__all__ = ["COMMERCIAL_CHECKS"]


def check_delivered_point(draft: Draft) -> Iterator[Finding]:
    """A table of the delivered point names it."""
    delivery = draft.commercial.get("delivery")
    if delivery is not None and not delivery.has("delivered_point"):
        rule = 'must be given, as the term and place to which all prices are brought: "DDP site"'
        yield delivery.finding("tender-key-missing", "point", rule)


def check_delivery_levels(draft: Draft) -> Iterator[Finding]:
    """Each term has adders once, and the delivered point itself has none."""
    delivery = draft.commercial.get("delivery")
    levels = delivery.inside.get("level", ()) if delivery else ()
    words = (delivery.text("delivered_point") or "").upper().split() if delivery else []
    point = next((word for word in words if word in get_args(Incoterm)), None)
    seen: dict[str, DraftTable] = {}
    for level in levels:
        if not level.has("percent_of_price") and not level.has("amount_per_unit"):
            rule = "must be given, or amount_per_unit, or both"
            yield level.finding("tender-key-missing", "percent_of_price", rule)
        term = level.text("term")
        if term is None:
            continue
        first = seen.setdefault(term, level)
        if first is not level:
            rule = f"must have its adders once; line {first.place.line} has them too"
            yield level.finding("tender-conflict", "term", rule, fix="Put both adders into one table.")
        elif term == point:
            rule = "must not be that of the delivered point, to which nothing is added"
            yield level.finding("tender-conflict", "term", rule, fix="Take this table out, or correct the point.")


def check_payments(draft: Draft) -> Iterator[Finding]:
    """The tender's own payments make the whole price."""
    payment = draft.commercial.get("payment")
    if payment is None or (*payment.loc, "payments") in draft.failed:
        return
    parts = payment.inside.get("part", ())
    if not parts:
        rule = "must be given, one table [[payment.part]] for each payment, to which those of bidders are compared"
        yield payment.finding("tender-key-missing", "part", rule)
        return
    shares = [share for part in parts if (share := part.number("share")) is not None and 0 <= share <= 1]
    whole = sum(shares, Decimal(0))
    if len(shares) == len(parts) and whole != 1:
        got = f"{(100 * whole).normalize():f} % in all"
        fix = "Correct the shares, or add the payment that is missing."
        yield parts[-1].finding("tender-conflict", "share", "must make 100 over all parts", got, fix)


def check_award(draft: Draft) -> Iterator[Finding]:
    """The planned award is a day, not before the opening."""
    award = draft.commercial.get("award")
    if award is None:
        return
    if not award.has("planned_award"):
        yield award.finding("tender-key-missing", "planned", "must be given, as a date")
    planned = award.values.get("planned_award")
    opening = draft.identity.values.get("opening_date") if draft.identity else None
    if isinstance(planned, datetime.date) and isinstance(opening, datetime.date) and planned < opening:
        rule = f"must not be before opening_date, {opening.isoformat()}"
        yield award.finding("tender-conflict", "planned_award", rule, planned.isoformat(), "Correct one of the dates.")


COMMERCIAL_CHECKS: tuple[Check, ...] = (check_delivered_point, check_delivery_levels, check_payments, check_award)
