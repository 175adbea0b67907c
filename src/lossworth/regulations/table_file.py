"""The one loader of regulation tables: csv files with title, source and columns in their headers."""

from __future__ import annotations

import csv
from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache
from importlib.resources import files
from types import MappingProxyType

__all__ = ["RegulationTable", "Row", "read_table", "table", "table_names"]

Row = Mapping[str, str]

_REQUIRED = ("title", "source", "columns")
_KNOWN = (*_REQUIRED, "edition", "note")


@dataclass(frozen=True)
class RegulationTable:
    """One file of published values, every cell still as text.

    Parameters
    ----------
    name : str
        Name of the file without its ending.
    title, source, columns : str
        What the header says; none is empty.
    edition, note : str
        What the header says; empty where it does not.
    rows : tuple of mapping
        Cells by column name, in the order of the file.
    """

    name: str
    title: str
    source: str
    columns: str
    edition: str
    note: str
    rows: tuple[Row, ...]


def read_table(name: str, text: str) -> RegulationTable:
    """Read the text of a table file.

    Parameters
    ----------
    name : str
        What messages and the result call the file.
    text : str
        Lines ``# title: ...``, ``# source: ...``, ``# columns: ...``, where there is one ``# edition: ...`` and
        ``# note: ...``; then csv with a header row.

    Returns
    -------
    RegulationTable
        The table.

    Raises
    ------
    ValueError
        If title, source or columns are absent or empty, a header line is unknown or stands twice, or a row does not
        have one cell for each column.
    """
    lines = text.splitlines()
    count = next((i for i, line in enumerate(lines) if not line.startswith("#")), len(lines))
    header = _header(name, lines[:count])
    return RegulationTable(
        name=name,
        title=header["title"],
        source=header["source"],
        columns=header["columns"],
        edition=header.get("edition", ""),
        note=header.get("note", ""),
        rows=_rows(name, lines[count:]),
    )


@cache
def table(name: str) -> RegulationTable:
    """Table of the package.

    Parameters
    ----------
    name : str
        Name of the file without its ending, one of `table_names`.

    Returns
    -------
    RegulationTable
        The table; read once.

    Raises
    ------
    LookupError
        If the package has no such table.
    ValueError
        If the file lacks title, source or columns.
    """
    if name not in table_names():
        raise LookupError(f"no table {name!r}; there are: {', '.join(table_names())}")
    return read_table(name, files(__package__).joinpath("data", f"{name}.csv").read_text(encoding="utf-8"))


@cache
def table_names() -> tuple[str, ...]:
    """Names of all tables of the package, sorted.

    Returns
    -------
    tuple of str
        File names without their ending.
    """
    found = files(__package__).joinpath("data").iterdir()
    return tuple(sorted(file.name.removesuffix(".csv") for file in found if file.name.endswith(".csv")))


def _header(name: str, lines: list[str]) -> dict[str, str]:
    header: dict[str, str] = {}
    for line in lines:
        key, _, value = line.removeprefix("#").partition(":")
        key = key.strip()
        if key not in _KNOWN:
            raise ValueError(f"{name}: unknown header line {line!r}; known are {', '.join(_KNOWN)}")
        if key in header:
            raise ValueError(f"{name}: the header has two lines '# {key}: ...'")
        header[key] = value.strip()
    for key in _REQUIRED:
        if not header.get(key):
            raise ValueError(f"{name}: a table must have a header line '# {key}: ...'")
    return header


def _rows(name: str, lines: list[str]) -> tuple[Row, ...]:
    columns, *records = list(csv.reader(lines, strict=True)) or [[]]
    if not columns or not records:
        raise ValueError(f"{name}: a table must have a row of column names and at least one row of values")
    if len(set(columns)) < len(columns) or not all(columns):
        raise ValueError(f"{name}: every column must have a name of its own, got {columns}")
    for number, cells in enumerate(records, start=1):
        if len(cells) != len(columns):
            raise ValueError(f"{name}: row {number} of values has {len(cells)} cells for {len(columns)} columns")
    return tuple(MappingProxyType(dict(zip(columns, cells, strict=True))) for cells in records)
