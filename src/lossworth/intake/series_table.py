"""Rows of a load profile, a price series or a table of prices: which column says when, and the values."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass, replace
from decimal import Decimal
from types import MappingProxyType

from ..money import ARITHMETIC
from .cells import Marks, NoNumber, number_in
from .columns import UNIT_SPELLINGS
from .csv_table import CsvKind, read_csv_table
from .file_findings import FileFindings
from .header_text import in_brackets, name_of
from .sheet import Row, Sheet
from .suggestions import nearest

__all__ = ["MOST_STEPS", "SeriesKind", "SeriesTable", "read_series_table", "read_values"]

#: A leap year of quarter-hours has 35,136 steps.
MOST_STEPS = 40_000

_AXES = ("time", "step", "day type", "year")
_OTHER_NAMES: Mapping[str, str] = MappingProxyType(
    {
        "timestamp": "time",
        "time stamp": "time",
        "date and time": "time",
        "datetime": "time",
        "apparent power": "load",
        "energy price": "price",
    }
)


@dataclass(frozen=True, slots=True)
class SeriesKind:
    """One kind of file over time.

    Parameters
    ----------
    value : str
        Name of the column of values.
    axes : tuple of tuple of str
        Columns that say when, in each of the forms that the file may have.
    units : mapping of str to tuple of str and Decimal
        By unit as stated: the unit of the record and the factor to it.
    """

    value: str
    axes: tuple[tuple[str, ...], ...]
    units: Mapping[str, tuple[str, Decimal]]

    @property
    def names(self) -> frozenset[str]:
        """Columns that are known in such a file, also those of a form that it cannot have."""
        return frozenset({self.value, *_AXES})

    @property
    def value_example(self) -> str:
        """Header of the values."""
        return f"{self.value} [{next(iter(self.units))}]"

    @property
    def examples(self) -> str:
        """Header rows in all forms."""
        return "; or ".join(", ".join((*axis, self.value_example)) for axis in self.axes)


@dataclass(frozen=True, slots=True)
class SeriesTable:
    """A file over time with a header that is understood.

    Parameters
    ----------
    sheet : Sheet
        With the header as its first row.
    axis : tuple of str
        Columns that say when.
    at : mapping of str to int
        Position of each column.
    value : str
        Name of the column of values.
    stated_unit, unit : str
        Unit of the values as stated, and in the record.
    times : Decimal
        Factor to it.
    complete : bool
        False where rows of the file could not be read.
    """

    sheet: Sheet
    axis: tuple[str, ...]
    at: Mapping[str, int]
    value: str
    stated_unit: str
    unit: str
    times: Decimal
    complete: bool

    @property
    def rows(self) -> tuple[Row, ...]:
        """Rows below the header."""
        return self.sheet.rows[1:]

    def header(self, name: str) -> str:
        """Header of a column as it stands."""
        return self.sheet.rows[0].cell(self.at[name]).text

    def text(self, row: Row, name: str) -> str:
        """What stands in a column."""
        return row.cell(self.at[name]).text


def read_series_table(data: bytes, kind: SeriesKind, findings: FileFindings) -> SeriesTable | None:
    """Table of a csv file over time.

    Parameters
    ----------
    data : bytes
        The file.
    kind : SeriesKind
        What it should hold.
    findings : FileFindings
        Takes what is wrong.

    Returns
    -------
    SeriesTable or None
        None where there is no header that can be understood.
    """
    csv_kind = CsvKind(kind.examples, lambda texts: _known(texts, kind), "profile-columns", MOST_STEPS)
    sheet, wrong = read_csv_table(data, findings.file, csv_kind)
    for each in wrong:
        findings.put(each if each.fix or each.kind not in _OF_THE_BUYER else replace(each, fix=_FIX_FILE))
    if sheet is None:
        return None
    at = _columns(sheet.rows[0], kind, findings)
    axis = _axis(at, kind, findings, sheet.rows[0].number)
    unit = _unit(sheet.rows[0], at, kind, findings)
    if axis is None or unit is None:
        return None
    return SeriesTable(sheet, axis, at, kind.value, *unit, complete=not wrong)


_OF_THE_BUYER = ("file-unreadable", "file-too-large")  # kinds whose own remedy is to ask the bidder
_FIX_FILE = "Save the file anew as csv in UTF-8, with only the columns that it needs."


def _name(text: str, kind: SeriesKind) -> str | None:
    name = name_of(text).replace("_", " ")
    name = _OTHER_NAMES.get(name, name)
    return name if name in kind.names else None


def _known(texts: Iterable[str], kind: SeriesKind) -> set[str]:
    return {name for text in texts if (name := _name(text, kind)) is not None}


def _columns(header: Row, kind: SeriesKind, findings: FileFindings) -> Mapping[str, int]:
    at: dict[str, int] = {}
    for position, cell in enumerate(header.cells):
        name = _name(cell.text, kind)
        if name in at:
            rule = f'must be given once; "{header.cell(at[name]).text}" means the same'
            findings.add("profile-columns", f"column {name}", rule, header.number, cell.text, column=cell.text,
                         fix="Remove or rename one of them.")  # fmt: skip
        elif name is not None:
            at[name] = position
        elif not cell.is_blank:
            near = nearest(name_of(cell.text), kind.names)
            fix = f'Is "{near}" meant? Then write it so.' if near else ""
            findings.add(
                "column-not-read", "column", "is not used", header.number, cell.text, column=cell.text, fix=fix
            )
    return at


def _axis(at: Mapping[str, int], kind: SeriesKind, findings: FileFindings, line: int) -> tuple[str, ...] | None:
    given = {name for name in at if name != kind.value}
    axis = next((axis for axis in kind.axes if set(axis) == given), None)
    if axis is None:
        rule = f"must be those of one form: {kind.examples}"
        findings.add("profile-columns", "columns", rule, line, ", ".join(sorted(given)) or "none that says when")
    return axis


def _unit(
    header: Row, at: Mapping[str, int], kind: SeriesKind, findings: FileFindings
) -> tuple[str, str, Decimal] | None:
    column = f"column {kind.value}"
    if kind.value not in at:
        rule = f"must be there, with its unit, such as: {kind.value_example}"
        got = ", ".join(cell.text for cell in header.cells if not cell.is_blank)
        findings.add("profile-columns", column, rule, header.number, got)
        return None
    text = header.cell(at[kind.value]).text
    stated = [UNIT_SPELLINGS.get(unit, unit) for unit in in_brackets(text)]
    unit = kind.units.get(stated[0]) if len(stated) == 1 else None
    if unit is None:
        rule = f"must state its unit in brackets: {' or '.join(kind.units)}"
        fix = f"Write the header as: {kind.value_example}."
        findings.add("profile-columns", column, rule, header.number, text, column=text, fix=fix)
        return None
    return stated[0], *unit


def read_values(table: SeriesTable, marks: Sequence[Marks], findings: FileFindings) -> Iterator[Decimal | None]:
    """Value of each row in the unit of the record.

    Parameters
    ----------
    table : SeriesTable
        The table.
    marks : sequence of Marks
        How numbers stand in it.
    findings : FileFindings
        Takes what is wrong.

    Yields
    ------
    Decimal or None
        None where there is no number.
    """
    at, header = table.at[table.value], table.header(table.value)
    for row in table.rows:
        cell = row.cell(at)
        if cell.is_blank:
            findings.add("profile-value-missing", table.value, "must be stated", row.number, "", column=header)
            yield None
            continue
        number = number_in(cell, marks, table.unit)
        if isinstance(number, NoNumber):
            findings.add("profile-value", table.value, number.rule, row.number, cell.text, column=header,
                         fix=number.fix)  # fmt: skip
            yield None
        else:
            yield ARITHMETIC.multiply(number, table.times)
