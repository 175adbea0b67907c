"""Rows of cells with their places, alike for worksheets and text tables."""

from __future__ import annotations

from dataclasses import dataclass

from ..findings import Place
from .cells import BLANK, Cell

__all__ = ["MOST_CELLS", "MOST_COLUMNS", "MOST_ROWS", "NO_LOOKS", "Area", "Looks", "Row", "Sheet", "column_letters"]

#: Bounds of one sheet or table; no tender has more lots and bidders.
MOST_ROWS = 20_000
MOST_COLUMNS = 200
#: Bound of the cells that are not empty, over a whole file.
MOST_CELLS = 500_000


@dataclass(frozen=True, slots=True)
class Row:
    """One row.

    Parameters
    ----------
    number : int
        Row of the worksheet, or first line of the record in a text file; from 1.
    cells : tuple of Cell
        From the first column on; what is blank at the end may be left out.
    """

    number: int
    cells: tuple[Cell, ...]

    def cell(self, column: int) -> Cell:
        """Cell of a column counted from 0; blank beyond the last."""
        return self.cells[column] if column < len(self.cells) else BLANK

    @property
    def is_blank(self) -> bool:
        """Whether no cell holds anything."""
        return all(cell.is_blank for cell in self.cells)


@dataclass(frozen=True, slots=True)
class Area:
    """Some merged cells.

    Parameters
    ----------
    top, bottom : int
        First and last row, from 1.
    left, right : int
        First and last column, from 0.
    """

    top: int
    left: int
    bottom: int
    right: int

    def __str__(self) -> str:
        return f"{column_letters(self.left)}{self.top}:{column_letters(self.right)}{self.bottom}"


@dataclass(frozen=True, slots=True)
class Looks:
    """What a worksheet hides or merges.

    Parameters
    ----------
    is_hidden : bool
        Whether the worksheet itself is hidden.
    hidden_rows, hidden_columns : frozenset of int
        Rows, from 1, and columns, from 0.
    merged : tuple of Area
        Merged cells.
    """

    is_hidden: bool = False
    hidden_rows: frozenset[int] = frozenset()
    hidden_columns: frozenset[int] = frozenset()
    merged: tuple[Area, ...] = ()


NO_LOOKS = Looks()


@dataclass(frozen=True, slots=True)
class Sheet:
    """A worksheet, or the one table of a text file.

    Parameters
    ----------
    file : str
        Name of the file in findings.
    name : str or None
        Name of the worksheet; None for a text file.
    rows : tuple of Row
        Rows that are not blank, in their order.
    looks : Looks
        What a worksheet hides or merges.
    """

    file: str
    name: str | None
    rows: tuple[Row, ...]
    looks: Looks = NO_LOOKS

    @property
    def place(self) -> Place:
        """The sheet as a whole."""
        return Place(self.file, sheet=self.name)

    def place_of_row(self, row: Row) -> Place:
        """Place of a row: of its first cell that is not blank in a worksheet, of its line in a text file."""
        if self.name is None:
            return Place(self.file, line=row.number)
        first = next((number for number, cell in enumerate(row.cells) if not cell.is_blank), 0)
        return self.place_of(row, first)

    def place_of(self, row: Row, column: int) -> Place:
        """Place of a cell; the column of a text file goes by the text of its header, the first row."""
        if self.name is not None:
            return Place(self.file, sheet=self.name, cell=f"{column_letters(column)}{row.number}")
        return Place(self.file, line=row.number, column=self.heading(column))

    def heading(self, column: int) -> str:
        """Text of the header of a column of a text file, which is its first row."""
        return self.rows[0].cell(column).text or f"column {column + 1}"


def column_letters(column: int) -> str:
    """Letters of a spreadsheet column.

    Parameters
    ----------
    column : int
        Counted from 0.

    Returns
    -------
    str
        ``"A"``, ``"Z"``, ``"AA"``.

    Examples
    --------
    >>> column_letters(0), column_letters(27)
    ('A', 'AB')
    """
    letters = ""
    column += 1
    while column:
        column, rest = divmod(column - 1, 26)
        letters = chr(ord("A") + rest) + letters
    return letters
