"""Does a lot give its regulation the keys that the tables of that regulation are read by, and no others?"""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from types import MappingProxyType

from ..findings import Finding
from .suggestions import did_you_mean, one_of
from .tender_draft import Check, Draft, DraftTable

__all__ = ["EQUIPMENT", "REGULATION_CHECKS"]

_EU, _US = "EU 548/2014", "US 10 CFR 431"
#: Equipment by regulation, in the words of the tender file.
EQUIPMENT: Mapping[str, tuple[str, ...]] = MappingProxyType(
    {
        _EU: ("liquid medium", "dry medium", "pole-mounted replacement", "large liquid", "large dry"),
        _US: ("liquid-immersed", "submersible liquid-immersed", "low-voltage dry-type", "medium-voltage dry-type"),
    }
)
_BY_INSULATION_LEVEL = "medium-voltage dry-type"
_NEEDED = {_EU: ("primary_voltage_kv", "secondary_voltage_kv"), _US: ("date", "phases")}
#: Keys that the tables of a regulation do not know.
_FOREIGN = {_EU: (), _US: ("tier", "on_load_tap_changer")}


def check_regulation_keys(draft: Draft) -> Iterator[Finding]:
    """The keys of a regulation fit it; whether its tables cover the lot is for the tables to say."""
    for lot in draft.lots:
        named = lot.regulation
        regulation = named.text("regulation") if named else None
        if named is not None and regulation is not None:
            yield from _equipment(named, regulation)
            yield from _keys(named, regulation)


def _equipment(named: DraftTable, regulation: str) -> Iterator[Finding]:
    stated, known = named.text("equipment"), EQUIPMENT[regulation]
    if stated is not None and stated not in known:
        rule = f"must be {one_of(known)} for {regulation}"
        yield named.finding("tender-value", "equipment", rule, fix=did_you_mean(stated, known))
    elif stated == _BY_INSULATION_LEVEL:
        rule = "cannot be checked: its limits differ by the insulation level, for which there is no key yet"
        fix = "Take the table out, and state the limits of the lot by keys of its own."
        yield named.finding("tender-value", "equipment", rule, fix=fix)


def _keys(named: DraftTable, regulation: str) -> Iterator[Finding]:
    for name in _NEEDED[regulation]:
        if not named.has(name):
            yield named.finding("tender-key-missing", name, f"must be given: limits of {regulation} differ by it")
    for name in _FOREIGN[regulation]:
        if named.has(name):
            rule = f"must not be given: {regulation} has nothing of the kind"
            yield named.finding("tender-conflict", name, rule, fix="Take the line out.")
    if regulation == _EU:
        yield from _eu_keys(named)


def _eu_keys(named: DraftTable) -> Iterator[Finding]:
    if not named.has("tier") and not named.has("date"):
        rule = "must be given, or date: the tiers have limits of their own"
        yield named.finding("tender-key-missing", "tier", rule)
    if named.values.get("phases") == 1:
        yield named.finding("tender-value", "phases", f"must be 3: {_EU} has no limits for single-phase units", "1")


REGULATION_CHECKS: tuple[Check, ...] = (check_regulation_keys,)
