"""One header cell or label: which column it names, and in which unit."""

from __future__ import annotations

import re
from collections.abc import Collection, Mapping
from dataclasses import dataclass
from decimal import Decimal
from types import MappingProxyType

from ..money import is_currency_code
from ..records.bid_columns import ITEM_HEADING
from .cells import collapsed
from .columns import AT_DELIVERY, COLUMNS, UNIT_SPELLINGS, Column, item_column, payment_column
from .header_text import folded, in_brackets, name_of, plain

__all__ = ["Heading", "heading_of"]

#: No header of a column is longer; a cell that is, is a text.
_LONGEST = 300
_PAYMENT = re.compile(
    r"payment (?:(?P<order>(?:at|with) order)|(?P<delivery>(?:at|on) delivery)|"
    r"(?P<weeks>[0-9]{1,4}(?:\.[0-9]{1,4})?) weeks? after order)"
)
#: The last brackets of a header.
_LAST_BRACKETS = re.compile(r"(?P<name>.*[^ ]) ?[\[(](?P<inside>[^\[\]()]*)[\])]")
_MACHINE_UNITS = {
    "_kw": "kW",
    "_w": "W",
    "_kva": "kVA",
    "_mva": "MVA",
    "_percent": "%",
    "_pu": "pu",
    "_weeks": "weeks",
    "_c": "°C",
    "_db": "dB",
}


@dataclass(frozen=True, slots=True)
class Heading:
    """One header cell that is understood.

    Parameters
    ----------
    column : Column
        What it means.
    at : int
        Its column in the sheet, from 0.
    text : str
        As it stands.
    unit : str
        As it stands, or by its usual spelling; the currency code of a price; empty where there is none.
    times : Decimal or None
        Factor to the unit of the field; None where the unit is missing or not known, so that no value can be taken.
    """

    column: Column
    at: int
    text: str
    unit: str
    times: Decimal | None


def heading_of(text: str, at: int = 0, items: Collection[str] | None = None) -> Heading | None:
    """Meaning and unit of a header.

    Parameters
    ----------
    text : str
        As it stands.
    at : int
        Its column in the sheet, from 0.
    items : collection of str, optional
        Names of the further items of the tender; None where they are not known, and then any name will do.

    Returns
    -------
    Heading or None
        None where it is not one of ours.
    """
    text = collapsed(text)
    if not text or len(text) > _LONGEST:
        return None
    return _machine(text, at) or _item(text, at, items) or _payment(text, at) or _named(text, at)


def _named(text: str, at: int) -> Heading | None:
    column = _COLUMN_BY_NAME.get(name_of(text))
    if column is None:
        return None
    inside = [group for group in in_brackets(text) if group and plain(group) not in column.symbols]
    return _with_unit(column, at, text, inside)


def _names(column: Column) -> set[str]:
    names = {plain(column.name), *(plain(other) for other in column.others)}
    beside = {f"{name} {symbol}" for name in names for symbol in column.symbols}
    return names | beside | set(column.symbols)


def _machine(text: str, at: int) -> Heading | None:
    """``no_load_loss_w``: the field's name with its unit, for tables that other programs write."""
    machine_name = text.casefold().removeprefix("guaranteed_")
    if "_" not in machine_name:
        return None
    for column in COLUMNS:
        if machine_name in (column.machine_name, column.field) and not column.units:
            return _with_unit(column, at, text, [])
        for ending, unit in _MACHINE_UNITS.items():
            if machine_name == column.machine_name + ending and unit in column.units:
                return Heading(column, at, text, unit, column.units[unit])
        if machine_name == column.machine_name:
            return _with_unit(column, at, text, [])
    return None


def _payment(text: str, at: int) -> Heading | None:
    """Share of the price at the order, at delivery, or some weeks after the order."""
    match = _PAYMENT.fullmatch(name_of(text))
    if match is None:
        return None
    weeks = Decimal(match["weeks"] or 0).normalize()
    column = payment_column(AT_DELIVERY if match["delivery"] else f"{weeks:f}")
    return _with_unit(column, at, text, in_brackets(text))


def _item(text: str, at: int, items: Collection[str] | None) -> Heading | None:
    """Price of a further item, whose name may have brackets of its own: the tender's names come before units."""
    if not text.casefold().startswith(ITEM_HEADING.strip()):
        return None
    name = text[len(ITEM_HEADING.strip()) :].strip()
    known = {folded(item): item for item in items or ()}
    if folded(name) in known:
        return _with_unit(item_column(known[folded(name)]), at, text, [])
    match = _LAST_BRACKETS.fullmatch(name)
    inside = [match["inside"].strip()] if match else []
    name = match["name"] if match else name
    if not name or (items is not None and folded(name) not in known):
        return None
    return _with_unit(item_column(known.get(folded(name), name)), at, text, inside)


def _with_unit(column: Column, at: int, text: str, stated: list[str]) -> Heading:
    unit = UNIT_SPELLINGS.get(stated[0], stated[0]) if len(stated) == 1 else ""
    if column.is_price:
        fits = not stated or is_currency_code(unit)
        return Heading(column, at, text, unit if fits else "", Decimal(1) if fits else None)
    if not column.units:
        return Heading(column, at, text, "", Decimal(1))
    if not stated and not column.needs_unit:
        return Heading(column, at, text, "", Decimal(1))
    return Heading(column, at, text, unit, column.units.get(unit))


_COLUMN_BY_NAME: Mapping[str, Column] = MappingProxyType(
    {name: column for column in COLUMNS for name in sorted(_names(column))}
)
