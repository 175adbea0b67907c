"""What a tender announces, as content that only a change of a rule can change, and its fingerprint."""

from __future__ import annotations

import datetime
import hashlib
import json
from collections.abc import Iterator, Mapping
from decimal import Decimal
from enum import Enum
from typing import Any

from ..errors import EvaluationStopped
from ..findings import Finding
from ..money import ARITHMETIC, Rounding
from ..records.profile import PriceSeries, Profile, TimeGrid
from ..records.quantity import Entry, Quantity, Record
from ..records.rule_profiles import RULE_PROFILES, profile_named, settled_rules
from ..records.tender import AnnouncedRates, Derivation, Exchange, Lot, Tender
from ..units import RATE_BASES

__all__ = ["canonical_text", "fingerprint", "rules_content"]

#: Of the form of the content; another number makes all fingerprints differ.
_FORM = 1
#: What no bidder needs to know, what decides nothing, and what may not be known yet when the rules are published.
_LEFT_OUT = frozenset(
    {
        ("AnnouncedRates", "source"),
        ("AnnouncedRules", "places"),
        ("AnnouncedRules", "profile"),  # what it sets is there, rule by rule
        ("Derivation", "round_rates_to"),  # repeated in the rounding
        ("Economics", "carbon_intensity_kg_per_kwh"),
        ("Economics", "source"),
        ("LoadingCondition", "source"),
        ("Lot", "estimated_unit_price"),  # the buyer's own estimate
        ("Lot", "id"),
        ("Lot", "study"),
    }
)
#: Lists in which the order says nothing.
_UNORDERED = frozenset({"accepted_liquids", "convert", "delivery_levels", "items", "liquids", "payments", "site_costs"})


def rules_content(tender: Tender) -> dict[str, Any]:
    """Everything by which offers will be judged, without places, sources and remarks.

    Parameters
    ----------
    tender : Tender
        As announced; the profile of rules need not be settled.

    Returns
    -------
    dict
        Tables, lists, texts, whole numbers and booleans; decimals as texts without trailing zeros, in the internal
        unit, so that 130 W and 0.13 kW are the same. What is not stated, and what is stated as it holds anyway, is not
        there. Left out: planners' studies, sources, and the exchange rates of the day, which are published later.

    Raises
    ------
    EvaluationStopped
        If the tender names a profile of rules that does not exist.
    """
    stated = tender.rules
    content = {
        "form": _FORM,
        "tender": {"reference": tender.identity.reference.value, "currency": tender.identity.currency.value},
        "rounding": {**_plain(stated.rounding), "applies_to": stated.rounding_applies_to.value},
        "rules": _plain(_settled(tender)),
        "exchange": None if tender.exchange is None else _exchange(tender.exchange),
        "delivered_point": _plain(tender.delivered_point),
        "delivery_levels": _in_no_order(_plain(tender.delivery_levels)),
        "taxes": _plain(tender.taxes),
        "payment_terms": _plain(tender.payment_terms),
        "preference": _plain(tender.preference),
        "planned_award": _plain(tender.planned_award),
        "lots": {lot.id: _lot(tender, lot) for lot in tender.lots},
    }
    return {key: value for key, value in content.items() if value not in (None, [], {})}


def canonical_text(content: Mapping[str, Any]) -> str:
    """Content as JSON in its one form.

    Parameters
    ----------
    content : mapping
        As `rules_content` gives it.

    Returns
    -------
    str
        Keys sorted by their characters, no blanks between the parts, no character escaped that need not be.

    Raises
    ------
    TypeError
        If the content has a number with a fraction, whose text would not be certain, or anything that JSON has not.
    """
    _refuse_floats(content)
    return json.dumps(content, ensure_ascii=False, sort_keys=True, separators=(",", ":"))


def fingerprint(content: Mapping[str, Any]) -> str:
    """SHA-256 of the canonical text in UTF-8.

    Parameters
    ----------
    content : mapping
        As `rules_content` gives it.

    Returns
    -------
    str
        64 hexadecimal digits.
    """
    return hashlib.sha256(canonical_text(content).encode("utf-8", "surrogatepass")).hexdigest()


def _settled(tender: Tender) -> Record:
    announced = tender.rules.announced
    if announced.profile is None or profile_named(announced.profile.value) is not None:
        return settled_rules(announced)
    name = announced.profile
    known = ", ".join(f'"{profile.name}"' for profile in RULE_PROFILES)
    raise EvaluationStopped(
        [Finding("tender-value", "rules.profile", f"must be one of {known}", name.place, name.value)]
    )


def _exchange(exchange: Exchange) -> dict[str, Any]:
    """Whose rate of which day, for which currencies; the rates and their evidence come with that day."""
    return {
        "source": exchange.source.value,
        "kind": exchange.kind.value,
        "date": exchange.date.isoformat(),
        "currencies": sorted(exchange.rates),
    }


def _lot(tender: Tender, lot: Lot) -> dict[str, Any]:
    content = _fields(lot)
    if lot.rates is not None:
        content["rates"] = _rates(lot.rates)
    if lot.derivation is not None:
        content["derivation"] = _derivation(tender, lot.derivation)
    return content


def _rates(rates: AnnouncedRates) -> dict[str, Any]:
    """Announced rates per kW, whatever they are quoted per."""
    times = RATE_BASES[rates.per]
    stated = {"no_load": rates.no_load, "load": rates.load, "auxiliary": rates.auxiliary}
    return {f"{name}_per_kw": _number(ARITHMETIC.multiply(rate.value, times)) for name, rate in stated.items() if rate}


def _derivation(tender: Tender, derivation: Derivation) -> dict[str, Any]:
    """Method and rounding, with the economics and the loading condition in full, under whatever name they stand."""
    content = _fields(derivation)
    content["economics"] = _fields(tender.economics[derivation.economics.value])
    content["loading"] = _fields(tender.loading[derivation.loading.value])
    return content


def _fields(record: Record) -> dict[str, Any]:
    kind = type(record)
    content: dict[str, Any] = {}
    for name, field in kind.model_fields.items():
        value = getattr(record, name)
        if name == "place" or (kind.__name__, name) in _LEFT_OUT:
            continue
        if not field.is_required() and value == field.get_default(call_default_factory=True):
            continue
        plain = _plain(value)
        content[name] = _in_no_order(plain) if name in _UNORDERED else plain
    return content


def _plain(value: Any) -> Any:
    if value is None or (isinstance(value, (bool, str, int)) and not isinstance(value, Enum)):
        return value
    if isinstance(value, Quantity):
        return _number(value.value)
    if isinstance(value, Decimal):
        return _number(value)
    if isinstance(value, (Enum, Entry)):
        return value.value
    if isinstance(value, (datetime.date, datetime.time)):
        return value.isoformat()
    if isinstance(value, Rounding):
        return {"to": _number(value.quantum), "mode": value.mode.value}
    if isinstance(value, (Profile, PriceSeries)):
        return _series(value)
    if isinstance(value, Record):
        return _fields(value)
    if isinstance(value, Mapping):
        return {str(key): _plain(each) for key, each in value.items()}
    if isinstance(value, (tuple, list)):
        return [_plain(each) for each in value]
    raise TypeError(f"no rule is stated as {type(value).__name__}")


def _number(value: Decimal) -> str:
    return f"{value.normalize(ARITHMETIC):f}" if value else "0"


def _series(series: Profile | PriceSeries) -> dict[str, Any]:
    """A file of loads or prices by its own fingerprint, and by how many hours of a year it was taken to stand for."""
    content: dict[str, Any] = {"sha256": series.sha256, "hours": _hours(series.grid)}
    if isinstance(series, Profile):
        content["unit"] = series.unit
    return content


def _hours(grid: TimeGrid) -> dict[str, str]:
    """Hours of a year by day type; with twelve digits, since the last bits of a sum differ between processors."""
    sums: dict[str, float] = {}
    types = grid.day_types or ("all",) * len(grid.hours)
    for day_type, hours in zip(types, grid.hours, strict=True):
        sums[day_type] = sums.get(day_type, 0.0) + hours
    return {day_type: f"{hours:.12g}" for day_type, hours in sums.items()}


def _in_no_order(content: list[Any]) -> list[Any]:
    return sorted(content, key=lambda each: json.dumps(each, sort_keys=True))


def _refuse_floats(content: Any) -> None:
    for value in _values(content):
        if not (value is None or isinstance(value, (str, bool, int))):
            raise TypeError(f"canonical content has no place for {value!r}")


def _values(content: Any) -> Iterator[Any]:
    if isinstance(content, Mapping):
        for value in content.values():
            yield from _values(value)
    elif isinstance(content, (list, tuple)):
        for value in content:
            yield from _values(value)
    else:
        yield content
