"""From the draft to the record of the tender: bounds and missing keys, told with the line of the file."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from typing import Any

from pydantic import ValidationError
from pydantic_core import ErrorDetails

from ..findings import Finding, Place
from ..money import Rounding, RoundingMode
from ..records.quantity import Quantity
from ..records.tender import Tender
from .tender_draft import Draft, DraftLot, DraftTable, Loc
from .tender_keys import INSIDE, TABLES, key_of_field
from .tender_values import Written

__all__ = ["record_of"]

_TABLES_WITHOUT_PLACE = ("tender", "bids", "exchange", "delivery", "payment.part", "award")
#: Fields of the tender itself that stand in a table of the file.
_HOME_OF: Mapping[str, str] = {"delivered_point": "delivery", "delivery_levels": "delivery", "planned_award": "award"}
_ROUNDING = ("round_money_to", "rounding", "rounding_applies_to")


def record_of(draft: Draft) -> tuple[Tender | None, tuple[Finding, ...]]:
    """Record of a tender.

    Parameters
    ----------
    draft : Draft
        The tender as far as it could be read.

    Returns
    -------
    tender : Tender or None
        None where a value is missing, unreadable or out of bounds.
    findings : tuple of Finding
        What the record does not admit, except what was reported when the draft was read.
    """
    try:
        return Tender.model_validate(_raw(draft)), ()
    except ValidationError as error:
        details = error.errors(include_url=False, include_input=False)
        return None, tuple(finding for detail in details for finding in _findings(draft, detail))


def _raw(draft: Draft) -> dict[str, Any]:
    mode = draft.rules.values.get("rounding") if draft.rules else None
    raw: dict[str, Any] = {
        "format_version": _whole_number(draft.format_version),
        "bid_files": _with_inside(draft.bid_files, decimal_mark_of=draft.decimal_mark_of),
        "economics": {name: _fields(table) for name, table in draft.economics.items()},
        "loading": {name: _fields(table) for name, table in draft.loading.items()},
        "lots": tuple(_lot(lot, mode) for lot in draft.lots),
    }
    if draft.identity is not None:
        raw["identity"] = _fields(draft.identity)
    if draft.rules is not None:
        raw["rules"] = _rules(draft.rules, mode)
    raw |= _commercial(draft)
    if draft.exchange is not None:
        raw["exchange"] = _with_inside(draft.exchange, rates=draft.exchange_rates)
    return raw


def _whole_number(written: Written | None) -> int | None:
    """Whole number; `true` equals 1 in this language, but not in a tender."""
    return written.value if written is not None and type(written.value) is int else None


def _fields(table: DraftTable) -> dict[str, Any]:
    """Fields of the record, those of the tables inside included."""
    for_reading = {key.fills for key in TABLES.get(table.table, ()) if key.for_reading}
    fields: dict[str, Any] = {name: value for name, value in table.values.items() if name not in for_reading}
    if table.table not in _TABLES_WITHOUT_PLACE:
        fields["place"] = table.place
    for inside in INSIDE.get(table.table, ()):
        tables = table.inside.get(inside.name, ())
        if tables and inside.field:
            fields[inside.field] = tuple(map(_fields, tables)) if inside.many else _fields(tables[0])
    return fields


def _with_inside(table: DraftTable | None, **inside: DraftTable | None) -> dict[str, Any]:
    tables = {name: dict(inner.values) for name, inner in inside.items() if inner is not None}
    return {**(_fields(table) if table else {}), **tables}


def _rounded_by(table: DraftTable, quantum_field: str, mode: object) -> dict[str, Any]:
    """Fields in which the smallest amount and the mode stand as one rounding."""
    fields = _fields(table)
    quantum = fields.get(quantum_field)
    fields.pop("rounding", None)
    if table.table == "rules":
        fields.pop(quantum_field, None)
    if isinstance(quantum, Quantity) and isinstance(mode, RoundingMode):
        fields["rounding"] = Rounding(quantum.value, mode)
    return fields


def _rules(table: DraftTable, mode: object) -> dict[str, Any]:
    """Fields of the rounding, and the announced rules in a record of their own, with the line of each."""
    fields = _rounded_by(table, "round_money_to", mode)
    own = {name: fields.pop(name) for name in (*_ROUNDING, "place") if name in fields}
    places = {name: place for name, (_, place) in table.given.items() if name not in _ROUNDING}
    return {**own, "announced": {**fields, "places": places}}


def _commercial(draft: Draft) -> dict[str, Any]:
    tables = {name: _fields(table) for name, table in draft.commercial.items()}
    raw: dict[str, Any] = {name: tables[name] for name in ("taxes", "preference") if name in tables}
    raw |= tables.get("delivery", {}) | tables.get("award", {})
    if "payment" in tables:
        raw["payment_terms"] = {"payments": (), **tables["payment"]}
    return raw


def _lot(lot: DraftLot, mode: object) -> dict[str, Any]:
    fields = _fields(lot.own)
    for name, table in (("derivation", lot.derivation), ("study", lot.study)):
        if table is not None:
            fields[name] = _rounded_by(table, "round_rates_to", mode)
    return fields


def _findings(draft: Draft, detail: ErrorDetails) -> Iterator[Finding]:
    loc = _loc_in_file(detail["loc"])
    reported = any(loc[:n] in draft.failed for n in range(1, len(loc) + 1))
    if reported or loc == ("lots",):  # a lot that does not fit makes the list of lots too short
        return
    table = _table_of(draft, loc)
    if table is None:
        yield _format_version(draft)
    elif loc == ("rules", "rounding"):
        yield from _missing_of_rounding(table)
    else:
        yield _in_table(table, loc[len(table.loc) :], detail)


def _loc_in_file(loc: Loc) -> Loc:
    """Place in the draft of a field of the record."""
    if loc[:2] == ("rules", "announced"):
        return ("rules", *loc[2:])
    return (_HOME_OF[str(loc[0])], *loc) if loc[0] in _HOME_OF else loc


def _table_of(draft: Draft, loc: Loc) -> DraftTable | None:
    by_loc: Mapping[Loc, DraftTable] = {table.loc: table for table in draft.tables()}
    return next((by_loc[loc[:n]] for n in range(len(loc), 0, -1) if loc[:n] in by_loc), None)


def _missing_of_rounding(table: DraftTable) -> Iterator[Finding]:
    for name in ("round_money_to", "rounding"):
        if not table.has(name):
            yield table.finding("tender-key-missing", name, "must be given")


def _format_version(draft: Draft) -> Finding:
    name, written = "format_version", draft.format_version
    if written is None:
        rule = "must be given, as the first line: format_version = 1"
        return Finding("tender-key-missing", name, rule, Place(draft.file, key=name))
    return Finding("tender-value", name, "must be 1", written.place, written.text)


def _in_table(table: DraftTable, inside: Loc, detail: ErrorDetails) -> Finding:
    field = str(inside[0]) if inside else ""
    if detail["type"] == "missing":
        return table.finding("tender-key-missing", key_of_field(table.table, field), "must be given")
    value = table.values.get(field)
    if (table.table, field) == ("payment.part", "share"):  # a share in the record, percent in the file
        return table.finding("tender-value", field, "must lie between 0 and 100 percent")
    if len(inside) > 1 and isinstance(value, tuple):  # one element of a list of numbers
        element = value[int(inside[1])]
        key = f"{table.key}.{field}[{int(inside[1]) + 1}]"
        return Finding("tender-value", key, _rule(detail), element.place, element.text)
    return table.finding("tender-value", field, _rule(detail))


def _rule(detail: ErrorDetails) -> str:
    return str(detail.get("ctx", {}).get("rule", detail["msg"]))
