"""The header row of a table of offers: which column means what, and in which unit."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass
from decimal import Decimal
from types import MappingProxyType

from ..findings import Finding
from ..money import is_currency_code
from .cells import collapsed
from .columns import COLUMNS, UNIT_SPELLINGS, Column
from .header_text import in_brackets, name_of, plain
from .sheet import Row, Sheet
from .suggestions import nearest

__all__ = ["Header", "Heading", "find_header", "is_header", "recognized_columns"]

_TELLING = ("unit_price", "no_load_loss_kw", "load_loss_kw")


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


@dataclass(frozen=True, slots=True)
class Header:
    """Header of a table of offers.

    Parameters
    ----------
    row : Row
        The header row.
    headings : mapping of str to Heading
        By field of an offer.
    twice : frozenset of str
        Fields whose column is given twice, so that neither can be taken.
    """

    row: Row
    headings: Mapping[str, Heading]
    twice: frozenset[str]


def is_header(row: Row) -> bool:
    """Whether a row is the header of a table of offers.

    Parameters
    ----------
    row : Row
        Any row.

    Returns
    -------
    bool
        True if two columns are known, one of them the price or a loss.
    """
    known = recognized_columns(cell.text for cell in row.cells)
    return len(known) >= 2 and any(field in known for field in _TELLING)


def recognized_columns(headers: Iterable[str]) -> set[str]:
    """Fields of an offer that some headers name.

    Parameters
    ----------
    headers : iterable of str
        Texts of header cells.

    Returns
    -------
    set of str
        Fields, each once.
    """
    return {found.column.field for text in headers if (found := _heading(text, 0)) is not None}


def find_header(sheet: Sheet, row: Row) -> tuple[Header, tuple[Finding, ...]]:
    """Header of a table of offers with everything that is wrong with it.

    Parameters
    ----------
    sheet : Sheet
        The sheet, for places.
    row : Row
        The header row.

    Returns
    -------
    header : Header
        Columns that are understood; of two with one meaning, neither.
    findings : tuple of Finding
        Columns missing, given twice, without unit, or not read.
    """
    found: dict[str, list[Heading]] = {}
    unread: list[Finding] = []
    for at, cell in enumerate(row.cells):
        heading = _heading(cell.text, at)
        if heading is not None:
            found.setdefault(heading.column.field, []).append(heading)
        elif not cell.is_blank:
            unread.append(_not_read(sheet, row, at, cell.text))
    twice = {field: headings for field, headings in found.items() if len(headings) > 1}
    once = {field: headings[0] for field, headings in found.items() if len(headings) == 1}
    findings = [
        *_missing(sheet, row, found),
        *(_twice(sheet, row, headings) for headings in twice.values()),
        *_unit_findings(sheet, row, once.values()),
        *unread,
    ]
    return Header(row, MappingProxyType(once), frozenset(twice)), tuple(findings)


def _missing(sheet: Sheet, row: Row, found: Mapping[str, object]) -> Iterator[Finding]:
    headers = [cell.text for cell in row.cells if not cell.is_blank and _heading(cell.text, 0) is None]
    for column in COLUMNS:
        if column.is_needed and column.field not in found:
            folded = {name_of(header): header for header in headers}
            near = nearest(column.name, folded)
            fix = f'Did the bidder mean this by "{folded[near]}"? Then write: {column.example}.' if near else ""
            rule = f"must be there, with a header such as: {column.example}"
            yield Finding("column-missing", f"column {column.name}", rule, sheet.place_of_row(row), fix=fix)


def _twice(sheet: Sheet, row: Row, headings: list[Heading]) -> Finding:
    first, second = headings[:2]
    rule = f'must be given once; "{first.text}" means the same'
    return Finding("column-twice", f"column {first.column.name}", rule, sheet.place_of(row, second.at), got=second.text)


def _unit_findings(sheet: Sheet, row: Row, headings: Iterable[Heading]) -> Iterator[Finding]:
    for heading in headings:
        if heading.times is not None:
            continue
        column, place = heading.column, sheet.place_of(row, heading.at)
        if column.field == "unit_price":
            rule = "must have a currency code of three capital letters for its unit, or none"
        else:
            rule = f"must state its unit: {' or '.join(column.units)}"
        fix = f"Write the header as: {column.example}." if column.needs_unit else ""
        yield Finding("column-unit", f"column {column.name}", rule, place, got=heading.text, fix=fix)


def _not_read(sheet: Sheet, row: Row, at: int, text: str) -> Finding:
    near = nearest(name_of(text), (column.name for column in COLUMNS))
    fix = f'Did the bidder mean "{near}"?' if near else ""
    return Finding(
        "column-not-read", "column", "is not used by the evaluation", sheet.place_of(row, at), got=text, fix=fix
    )


def _heading(text: str, at: int) -> Heading | None:
    """Meaning and unit of a header; None where it is not one of ours."""
    text = collapsed(text)
    machine = _machine_heading(text, at)
    if machine is not None:
        return machine
    name = name_of(text)
    inside = in_brackets(text)
    column = _COLUMN_BY_NAME.get(name)
    if column is None:
        return None
    return _with_unit(column, at, text, [group for group in inside if group and plain(group) not in column.symbols])


def _names(column: Column) -> set[str]:
    names = {plain(column.name), *(plain(other) for other in column.others)}
    beside = {f"{name} {symbol}" for name in names for symbol in column.symbols}
    return names | beside | set(column.symbols)


def _machine_heading(text: str, at: int) -> Heading | None:
    """``no_load_loss_w``: the field's name with its unit, for tables that other programs write."""
    folded = text.casefold().removeprefix("guaranteed_")
    if "_" not in folded:
        return None
    endings = {
        "_kw": "kW",
        "_w": "W",
        "_kva": "kVA",
        "_mva": "MVA",
        "_percent": "%",
        "_pu": "pu",
        "_weeks": "weeks",
        "_c": "°C",
    }
    for column in COLUMNS:
        if folded in (column.machine_name, column.field) and not column.units:
            return _with_unit(column, at, text, [])
        for ending, unit in endings.items():
            if folded == column.machine_name + ending and unit in column.units:
                return Heading(column, at, text, unit, column.units[unit])
        if folded == column.machine_name:
            return _with_unit(column, at, text, [])
    return None


def _with_unit(column: Column, at: int, text: str, stated: list[str]) -> Heading:
    unit = UNIT_SPELLINGS.get(stated[0], stated[0]) if len(stated) == 1 else ""
    if column.field == "unit_price":
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
