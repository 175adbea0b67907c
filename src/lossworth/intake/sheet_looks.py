"""What a reader of a worksheet does not see, or sees where it is not: hidden and merged cells in a table of offers."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from ..findings import Finding, Place
from .sheet import NO_LOOKS, Area, Row, Sheet
from .table_header import Header

__all__ = ["check_looks"]


def check_looks(sheet: Sheet, header: Header, rows: Sequence[Row]) -> Iterator[Finding]:
    """Hidden and merged cells of a table of offers.

    Parameters
    ----------
    sheet : Sheet
        The worksheet with its looks.
    header : Header
        Header of the table.
    rows : sequence of Row
        Rows of the table that are offers.

    Yields
    ------
    Finding
        A note on what is hidden and read all the same. Merged cells that swallow a cell of an offer stop the
        evaluation: a value that a reader sees in three rows is stored in the first, and spreading it would be a guess.
    """
    if rows and sheet.looks != NO_LOOKS:
        yield from _hidden(sheet, header, rows)
        yield from _merged(sheet, header, rows)


def _hidden(sheet: Sheet, header: Header, rows: Sequence[Row]) -> Iterator[Finding]:
    looks = sheet.looks
    if looks.is_hidden:
        held = "1 offer, which is read" if len(rows) == 1 else f"{len(rows)} offers, which are read"
        yield Finding("offers-hidden", "sheet", f"is hidden and holds {held}", sheet.place, sheet.name)
    hidden = [row for row in rows if row.number in looks.hidden_rows]
    if hidden:
        rule = "is hidden and holds an offer, which is read"
        if len(hidden) > 1:
            rule = f"is hidden, with {len(hidden) - 1} more, and holds an offer, which is read"
        numbers = ", ".join(str(row.number) for row in hidden)
        yield Finding("offers-hidden", "row", rule, sheet.place_of_row(hidden[0]), numbers)
    for heading in header.headings.values():
        if heading.at in looks.hidden_columns:
            field, place = f"column {heading.column.name}", sheet.place_of(header.row, heading.at)
            yield Finding("offers-hidden", field, "is hidden, and is read", place, heading.text)


def _merged(sheet: Sheet, header: Header, rows: Sequence[Row]) -> Iterator[Finding]:
    columns = {heading.at: heading.column.name for heading in header.headings.values()}
    for area in sheet.looks.merged:
        inside = [at for at in range(area.left, area.right + 1) if at in columns]
        names = ", ".join(columns[at] for at in inside)
        place = Place(sheet.file, sheet=sheet.name, cell=str(area))
        if inside and _swallows_value(area, rows, inside):
            rule = f"must not be merged in a table of offers ({names}): only the first cell holds the value"
            yield Finding("cells-merged", "cells", rule, place, str(area))
        elif area.top == header.row.number and area.left in columns and _hides_column(area, rows):
            rule = f"must not be merged ({names}): the columns behind it hold values without a header of their own"
            yield Finding("cells-merged", "header", rule, place, str(area))


def _swallows_value(area: Area, rows: Sequence[Row], columns: Sequence[int]) -> bool:
    """Whether a cell of an offer, in a column that is read, lies behind the first cell of the area."""
    inside = [row.number for row in rows if area.top <= row.number <= area.bottom]
    first = area.top in inside and area.left in columns
    return len(inside) * len(columns) > first


def _hides_column(area: Area, rows: Sequence[Row]) -> bool:
    """Whether offers have values under the merged header, in another column than its first."""
    return any(not row.cell(at).is_blank for row in rows for at in range(area.left + 1, area.right + 1))
