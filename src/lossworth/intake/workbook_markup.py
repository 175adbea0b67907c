"""The markup of one part of a workbook, streamed: counts, bounds, the order of cells, and what is hidden or merged."""

from __future__ import annotations

import re
from dataclasses import dataclass, field
from xml.parsers import expat

from .sheet import MOST_CELLS, MOST_COLUMNS, MOST_ROWS, Area

__all__ = [
    "DEEPEST",
    "LONGEST_DEFINITION",
    "MOST_AREA",
    "MOST_ELEMENTS",
    "MOST_MERGED",
    "MOST_SHEETS",
    "Damaged",
    "Part",
    "Scan",
    "SheetExtent",
    "TooLarge",
]

#: Every element costs memory in the parser, whatever it is for: over the file, for shared texts, for all but cells.
MOST_ELEMENTS = {"worksheet": 3_000_000, "sst": 1_000_000, "": 150_000}
MOST_SHEETS = 200
#: Bound of the cells that the worksheets span, empty ones included: rows times columns, over a file.
MOST_AREA = 5_000_000
MOST_MERGED = 10_000
#: Elements inside each other.
DEEPEST = 200
_LONGEST_SHEET_NAME = 255
#: Bound of a text in the definitions of a workbook and its styles; number formats and names are far shorter.
LONGEST_DEFINITION = 8_192
_DEFINITIONS = ("workbook", "styleSheet")
#: What a finding may quote of a formula.
_SHOWN_OF_FORMULA = 200
_REFERENCE = re.compile(r"([A-Z]{1,3})([1-9][0-9]{0,6})")
_TRUE = ("1", "true")


class TooLarge(Exception):
    """A bound is exceeded; the message says which."""


class Damaged(Exception):
    """The content contradicts itself, or is none of a workbook; the message says how."""

    def __init__(self, rule: str, got: str | None = None) -> None:
        super().__init__(rule)
        self.got = got


@dataclass(slots=True)
class SheetExtent:
    """What a worksheet spans.

    Parameters
    ----------
    rows, columns : int
        The last with a cell that holds something, from 1; 0 where all are empty.
    hidden_rows, hidden_columns : set of int
        Rows, from 1, and columns, from 0, inside the bounds of a sheet.
    merged : list of Area
        Merged cells.
    formulas : dict of tuple to str
        Formulas without a computed value, by row, from 1, and column, from 0: their beginning.
    """

    rows: int = 0
    columns: int = 0
    hidden_rows: set[int] = field(default_factory=set)
    hidden_columns: set[int] = field(default_factory=set)
    merged: list[Area] = field(default_factory=list)
    formulas: dict[tuple[int, int], str] = field(default_factory=dict)


@dataclass(slots=True)
class Scan:
    """Counts over all parts of a file."""

    cells: int = 0
    sheets: int = 0
    merged: int = 0
    area: int = 0
    elements: dict[str, int] = field(default_factory=dict)


class Part:
    """One part of the workbook.

    Parameters
    ----------
    scan : Scan
        Counts of all parts.
    """

    def __init__(self, scan: Scan) -> None:
        self.scan = scan
        self.extent = SheetExtent()
        self.is_worksheet = False
        self.kind = ""
        self.depth = self.row = self.column = self.elements = 0
        self.inside = ""
        self.has_value = self.has_formula = self.is_text_result = False
        self.formula = ""
        self.characters = 0
        self.parser = expat.ParserCreate()
        self.parser.buffer_text = True
        self.parser.StartElementHandler = self.start
        self.parser.EndElementHandler = self.end
        self.parser.CharacterDataHandler = self.text
        self.parser.StartDoctypeDeclHandler = self.doctype

    def feed(self, chunk: bytes) -> None:
        """Look through some more; nothing at the end.

        Parameters
        ----------
        chunk : bytes
            The next bytes; none where the part is complete.

        Raises
        ------
        TooLarge, Damaged, xml.parsers.expat.ExpatError
            If a bound is exceeded, the content contradicts itself, or it is no markup.
        """
        self.parser.Parse(chunk, not chunk)

    def doctype(self, *_: object) -> None:
        """Refuse document types."""
        raise Damaged("must not declare document types, which no workbook does")

    def start(self, tag: str, attributes: dict[str, str]) -> None:
        """Count an element, and enter it."""
        name = tag.rpartition(":")[2] if ":" in tag else tag
        if not self.depth:
            self.is_worksheet = name == "worksheet"
            self.kind = name
            self.elements = self.scan.elements.get(self.group, 0)
        self.depth += 1
        self.elements += 1
        self.scan.elements[self.group] = self.elements
        if self.elements > MOST_ELEMENTS[self.group]:
            raise TooLarge("must have fewer parts; formatted cells without content count too")
        if self.depth > DEEPEST:
            raise TooLarge(f"must have at most {DEEPEST} elements inside each other")
        if self.is_worksheet:
            self.inside = name
            if name == "c":
                self.enter_cell(attributes.get("r"), attributes.get("t"))
            elif name == "f":
                self.has_formula = True
            elif name in _OF_WORKSHEET:
                _OF_WORKSHEET[name](self, attributes)
        elif self.kind in _DEFINITIONS:
            self.characters = 0
            self.check_length(max(map(len, attributes.values()), default=0))
            if name == "sheet":
                self.count_sheet(attributes.get("name", ""))

    @property
    def group(self) -> str:
        """Kind of the part for the bounds of elements."""
        return self.kind if self.kind in MOST_ELEMENTS else ""

    def text(self, text: str) -> None:
        """Note that a cell has a value, or how its formula begins."""
        if self.is_worksheet:
            if self.inside in ("v", "t"):
                self.has_value = True
            elif self.inside == "f" and len(self.formula) < _SHOWN_OF_FORMULA:
                self.formula += text[:_SHOWN_OF_FORMULA]
        elif self.kind in _DEFINITIONS:
            self.characters += len(text)
            self.check_length(self.characters)

    def check_length(self, characters: int) -> None:
        """Refuse a text on which a reader would spend its time."""
        if characters > LONGEST_DEFINITION:
            raise Damaged(f"must have no name or format of more than {LONGEST_DEFINITION:,} characters")

    def end(self, tag: str) -> None:
        """Leave an element."""
        self.depth -= 1
        self.inside = ""
        if self.is_worksheet and (tag == "c" or tag.endswith(":c")):
            self.leave_cell()
        if not self.depth and self.is_worksheet:
            self.leave_worksheet()

    def count_sheet(self, name: str) -> None:
        """One sheet of the workbook, several of which may be the same part."""
        self.scan.sheets += 1
        if self.scan.sheets > MOST_SHEETS:
            raise TooLarge(f"must have at most {MOST_SHEETS} sheets")
        if len(name) > _LONGEST_SHEET_NAME:
            raise Damaged(f"must name its sheets in at most {_LONGEST_SHEET_NAME} characters", name)

    def enter_row(self, attributes: dict[str, str]) -> None:
        """Begin a row, which comes behind the one before."""
        number = attributes.get("r")
        row = self.row + 1 if number is None else _whole(number)
        if row <= self.row:
            raise Damaged(f"must have its rows in order; row {row} stands behind row {self.row}")
        self.row, self.column = row, 0
        if row <= MOST_ROWS and attributes.get("hidden") in _TRUE:
            self.extent.hidden_rows.add(row)

    def enter_columns(self, attributes: dict[str, str]) -> None:
        """Look of some columns."""
        if attributes.get("hidden") in _TRUE:
            first, last = (_whole(attributes.get(end, ""), "columns") for end in ("min", "max"))
            self.extent.hidden_columns.update(range(first - 1, min(last, MOST_COLUMNS)))

    def enter_merged(self, attributes: dict[str, str]) -> None:
        """Some cells that are one."""
        self.scan.merged += 1
        if self.scan.merged > MOST_MERGED:
            raise TooLarge(f"must have at most {MOST_MERGED:,} merged cells")
        first, _, last = attributes.get("ref", "").partition(":")
        top, left = _row_and_column(first)
        bottom, right = _row_and_column(last or first)
        self.extent.merged.append(Area(top, left - 1, bottom, right - 1))

    def enter_cell(self, reference: str | None, kind: str | None) -> None:
        """Begin a cell, which comes behind the one before."""
        row, column = (self.row, self.column + 1) if reference is None else _row_and_column(reference)
        if row != self.row or column <= self.column:
            raise Damaged(f"must have its cells in order; {reference} stands in row {self.row}")
        self.column = column
        self.has_value = self.has_formula = False
        self.formula = ""
        self.is_text_result = kind == "str"

    def leave_cell(self) -> None:
        """Count a cell that holds something."""
        if not (self.has_value or self.has_formula):
            return
        scan, extent = self.scan, self.extent
        scan.cells += 1
        extent.rows, extent.columns = max(extent.rows, self.row), max(extent.columns, self.column)
        if self.has_formula and not self.has_value and not self.is_text_result:
            extent.formulas[self.row, self.column - 1] = f"={self.formula}"
        for count, bound, what in (
            (scan.cells, MOST_CELLS, "cells that hold something"),
            (extent.rows, MOST_ROWS, "rows"),
            (extent.columns, MOST_COLUMNS, "columns"),
        ):
            if count > bound:
                raise TooLarge(f"must have at most {bound:,} {what}")

    def leave_worksheet(self) -> None:
        """Count what the worksheet spans."""
        self.scan.area += self.extent.rows * self.extent.columns
        if self.scan.area > MOST_AREA:
            raise TooLarge(f"must span at most {MOST_AREA:,} cells, rows times columns")


_OF_WORKSHEET = {"row": Part.enter_row, "col": Part.enter_columns, "mergeCell": Part.enter_merged}


def _whole(number: str, what: str = "rows") -> int:
    if not (number.isascii() and number.isdigit() and len(number) < 10):
        raise Damaged(f"must number its {what}; it has {number[:20]}")
    return int(number)


def _row_and_column(reference: str) -> tuple[int, int]:
    match = _REFERENCE.fullmatch(reference)
    if match is None:
        raise Damaged(f"must name its cells; it has {reference[:20]}")
    column = 0
    for letter in match[1]:
        column = column * 26 + ord(letter) - ord("A") + 1
    return int(match[2]), column
