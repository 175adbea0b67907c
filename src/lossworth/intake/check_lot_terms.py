"""Do the keys of a lot fit together that level prices or limit more than losses: adders, sound, liquids, items?"""

from __future__ import annotations

from collections.abc import Iterator

from ..findings import Finding
from .header_text import folded
from .suggestions import did_you_mean
from .tender_draft import Check, Draft, DraftLot, DraftTable

__all__ = ["LOT_TERM_CHECKS"]

_PERCENT, _AMOUNT = "delivery_adder_percent_per_week", "delivery_adder_per_week"
_FREE = "delivery_without_adder_weeks"


def check_delivery_adder(draft: Draft) -> Iterator[Finding]:
    """An adder for each week is a share or an amount, and begins somewhere before the latest delivery."""
    for lot in draft.lots:
        own = lot.own
        if own.has(_PERCENT) and own.has(_AMOUNT):
            yield own.finding("tender-conflict", _AMOUNT, f"must not stand beside {_PERCENT}: one of the two")
        given = next((name for name in (_PERCENT, _AMOUNT) if own.has(name)), None)
        if given is not None and not own.has(_FREE):
            yield own.finding("tender-key-missing", _FREE, f"must be given where {given} is")
        if given is None and own.has(_FREE):
            rule = f"must be given where {_FREE} is, or {_AMOUNT}"
            yield own.finding("tender-key-missing", _PERCENT, rule)
        percent = own.number(_PERCENT)
        if percent is not None and percent > 100:
            yield own.finding("tender-value", _PERCENT, "must be at most 100 percent")
        free, latest = own.number(_FREE), own.number("latest_delivery_weeks")
        if free is not None and latest is not None and free >= latest:
            rule = f"must be below latest_delivery_weeks, {latest}: no week would have an adder"
            yield own.finding("tender-conflict", _FREE, rule, fix="Correct one of the two.")


def check_items(draft: Draft) -> Iterator[Finding]:
    """No two items of a lot have the same name, by which bidders price them."""
    for lot in draft.lots:
        yield from _named_twice(lot.items, "item")


def check_site_costs(draft: Draft) -> Iterator[Finding]:
    """Site costs have names of their own, and arise for an offer that the lot accepts."""
    for lot in draft.lots:
        yield from _named_twice(lot.site_costs, "site cost")
        for cost in lot.site_costs:
            yield from _without_cause(lot, cost)


def _named_twice(tables: tuple[DraftTable, ...], what: str) -> Iterator[Finding]:
    seen: dict[str, DraftTable] = {}
    for table in tables:
        name = table.text("name")
        first = table if name is None else seen.setdefault(folded(name), table)
        if first is not table:
            rule = f"must be given to one {what} of the lot only; line {first.place.line} has it too"
            yield table.finding("tender-conflict", "name", rule, fix="Give each a name of its own.")


def _without_cause(lot: DraftLot, cost: DraftTable) -> Iterator[Finding]:
    accepted = lot.own.texts("accepted_liquids")
    known = {folded(liquid) for liquid in accepted}
    for liquid in cost.texts("liquids"):
        if known and folded(liquid) not in known:
            rule = f"must be accepted_liquids of the lot ({', '.join(accepted)})"
            fix = did_you_mean(liquid, accepted) or "Add it to accepted_liquids, or take it out here."
            yield cost.finding("tender-conflict", "liquids", rule, liquid, fix)
    above, most = cost.number("sound_above_db"), lot.own.number("maximum_sound_level_db")
    if above is not None and most is not None and above >= most:
        rule = f"must be below maximum_sound_level_db, {most}: no offer beyond it is ranked"
        yield cost.finding("tender-conflict", "sound_above_db", rule, fix="Correct one of the two.")


LOT_TERM_CHECKS: tuple[Check, ...] = (check_delivery_adder, check_items, check_site_costs)
