"""One sheet: its head, its columns, its print set-up, and safe ways to write into it."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass
from decimal import Decimal
from typing import Any

from .view import EvaluationView, ShownFigure
from .workbook_cells import ARITHMETIC, Addresses, Cell, column_name, formula_of
from .workbook_look import Look, decimals_of, number_format
from .workbook_text import lines_of

__all__ = ["NOTHING", "Book", "Column", "Sheet", "capital", "safe_text"]

#: Stands where a value does not exist, also as the result of a formula.
NOTHING = "–"

_LONGEST_TEXT = 32_000
_UNPRINTABLE = re.compile("[\x00-\x08\x0b\x0c\x0e-\x1f\ud800-\udfff\ufffe\uffff]")
_POINTS_A_LINE = 12.75
_HIGHEST = 409.0
#: Room at the sides of a cell, with its indent. [widths of a digit]
_SIDES = 2.0
_LONGEST_IN_FOOTER = 90


def safe_text(text: str) -> str:
    """Text that every spreadsheet program can hold: no control characters, not longer than a cell.

    Parameters
    ----------
    text : str
        Trusted or not.

    Returns
    -------
    str
        With the replacement character for what cannot be written.
    """
    text = _UNPRINTABLE.sub("\ufffd", text.replace("\r\n", "\n").replace("\r", "\n"))
    return text if len(text) <= _LONGEST_TEXT else text[:_LONGEST_TEXT] + " […]"


def capital(text: str) -> str:
    """Text that begins with a capital letter, as the first words of a row do.

    Parameters
    ----------
    text : str
        A label.

    Returns
    -------
    str
        ``"Energy price"`` for ``"energy price"``.
    """
    return text[:1].upper() + text[1:]


@dataclass(frozen=True, slots=True)
class Book:
    """What the sheets of one workbook share: the view, the file, its look, and where figures stand."""

    view: EvaluationView
    file: Any
    look: Look
    addresses: Addresses

    def figure(self, id: str) -> ShownFigure:
        """Figure of the view.

        Parameters
        ----------
        id : str
            Identity.

        Returns
        -------
        ShownFigure
            The figure.
        """
        return self.view.figures[id]


@dataclass(frozen=True, slots=True)
class Column:
    """A column: heading, width in digits, and whether it holds numbers; helpers stay outside the print."""

    heading: str
    width: float
    numeric: bool = False
    helper: bool = False


class Sheet:
    """A sheet with head, frozen and repeated heading row, footer, and a row on which the next thing is written.

    Parameters
    ----------
    book : Book
        The workbook.
    name : str
        Name of the sheet, which exists already.
    title : str
        First line.
    columns : sequence of Column
        All columns, helpers last.
    note : str
        A sentence for the reader, under the title.
    """

    def __init__(self, book: Book, name: str, title: str, columns: Sequence[Column], note: str = "") -> None:
        self.book = book
        self.name = name
        self.columns = tuple(columns)
        self.page: Any = book.file.get_worksheet_by_name(name)
        self.row = 0
        self._breaks: list[int] = []
        self._heights: dict[int, float] = {}
        self._printed = sum(not column.helper for column in columns)
        for index, column in enumerate(columns):
            self.page.set_column(index, index, column.width, book.look.style("paragraph"))
        self._head(title, note)
        self._set_up_print()

    @property
    def last(self) -> int:
        """Last printed column."""
        return self._printed - 1

    def _head(self, title: str, note: str) -> None:
        view = self.book.view
        self.text(0, 0, title, "title")
        self.row = 1
        self.paragraph(" · ".join(part for part in (view.reference, view.title, view.buyer) if part), "identity")
        if view.remark:
            self.paragraph(view.remark, "remark")
        if note:
            self.paragraph(note, "note")
        if any(column.heading for column in self.columns):
            self.headings([column.heading for column in self.columns])
        self._first = self.row
        self.page.freeze_panes(self.row, 0)
        self.page.repeat_rows(0, self.row - 1)

    def headings(self, texts: Sequence[str]) -> None:
        """Write a row of headings, and go on below it.

        Parameters
        ----------
        texts : sequence of str
            One for each column.
        """
        for index, (text, column) in enumerate(zip(texts, self.columns, strict=True)):
            style = "helper head" if column.helper else "head number" if column.numeric else "head"
            self.text(self.row, index, text, style)
        self.row += 1

    def _set_up_print(self) -> None:
        page, view = self.page, self.book.view
        page.set_landscape()
        page.set_paper(9)  # A4
        page.set_margins(left=0.5, right=0.5, top=0.55, bottom=0.7)
        page.fit_to_pages(1, 0)
        page.hide_gridlines(2)
        reference = safe_text(view.reference).replace("\n", " ")[:_LONGEST_IN_FOOTER].replace("&", "&&")
        sheet = self.name.replace("&", "&&")
        page.set_footer(f'&L&"Arial,Regular"&8 {reference} · {sheet}&R&"Arial,Regular"&8 Page &P of &N')

    def new_page(self) -> None:
        """Begin a page of the print with the next row, unless nothing stands before it."""
        if self.row > self._first:
            self._breaks.append(self.row)

    def finish(self) -> None:
        """Make rows high enough, bound the print to what was written, and break its pages; called last."""
        for row, height in self._heights.items():
            self.page.set_row(row, min(height, _HIGHEST))
        self.page.set_h_pagebreaks(self._breaks)
        self.page.ignore_errors({"number_stored_as_text": f"A1:{column_name(self.last)}{max(self.row, 1)}"})
        self.page.print_area(0, 0, max(self.row - 1, 0), self.last)

    def text(self, row: int, column: int, text: str, style: str = "text") -> None:
        """Write a text as text, whatever it begins with.

        Parameters
        ----------
        row, column : int
            Cell, counted from 0.
        text : str
            Trusted or not.
        style : str
            Name of a style.
        """
        text = safe_text(text)
        shown = self.book.look.style(style)
        if not text:
            self.page.write_blank(row, column, None, shown)
            return
        self.page.write_string(row, column, text, shown)
        if shown.text_wrap or row == 0:
            self._need(row, text, shown, column, column)

    def number(self, row: int, column: int, value: Decimal, style: str = "number", decimals: int | None = None) -> None:
        """Write a number with as many decimals as it has, or as are given.

        Parameters
        ----------
        row, column : int
            Cell, counted from 0.
        value : Decimal
            The number.
        style : str
            Name of a style.
        decimals : int, optional
            Digits shown behind the decimal mark.
        """
        shown = number_format(decimals_of(value) if decimals is None else decimals)
        self.page.write_number(row, column, float(value), self.book.look.style(style, shown))

    def formula(
        self,
        row: int,
        column: int,
        formula: str,
        computed: Decimal | float | str,
        style: str = "number",
        decimals: int | None = None,
    ) -> None:
        """Write a formula with the value that the engine computed.

        Parameters
        ----------
        row, column : int
            Cell, counted from 0.
        formula : str
            Beginning with an equals sign.
        computed : Decimal, float or str
            Shown by every reader that does not calculate.
        style : str
            Name of a style.
        decimals : int, optional
            Digits shown behind the decimal mark.
        """
        if isinstance(computed, str):
            shown = self.book.look.style(style)
            self.page.write_formula(row, column, formula, shown, safe_text(computed))
            if shown.text_wrap:
                self._need(row, safe_text(computed), shown, column, column)
            return
        if decimals is None:
            decimals = decimals_of(computed) if isinstance(computed, Decimal) else 0
        number = self.book.look.style(style, number_format(decimals))
        self.page.write_formula(row, column, formula, number, float(computed))

    def figure(
        self,
        row: int,
        column: int,
        id: str | None,
        style: str = "number",
        decimals: int | None = None,
        scopes: tuple[str, ...] = (),
    ) -> None:
        """Write a figure: as value or formula in its own cell, else as a reference to that cell.

        Parameters
        ----------
        row, column : int
            Cell, counted from 0.
        id : str or None
            Identity of the figure; None prints a dash.
        style : str
            Name of a style.
        decimals : int, optional
            Digits shown behind the decimal mark.
        scopes : tuple of str
            Rows and blocks whose repeated cells the formula prefers.
        """
        if id is None:
            self.text(row, column, NOTHING, "quiet number")
            return
        here = Cell(self.name, row, column)
        addresses, figure = self.book.addresses, self.book.figure(id)
        if id not in addresses:
            addresses.settle(id, here)
        home = addresses.find(id)
        if home != here:
            self.formula(row, column, f"={home.seen_from(self.name)}", figure.value, style, decimals)
        elif figure.operator in ARITHMETIC:
            formula = formula_of(figure, lambda operand: addresses.find(operand, *scopes).seen_from(self.name))
            self.formula(row, column, formula, figure.value, style, decimals)
        else:
            self.number(row, column, figure.value, style, decimals)

    def paragraph(self, text: str, style: str = "paragraph", first: int = 0, last: int | None = None) -> None:
        """Write a text over several columns, in a row of its own that is high enough, and go on below it.

        Parameters
        ----------
        text : str
            Trusted or not.
        style : str
            Name of a style.
        first, last : int
            Columns, the last printed one where none is given.
        """
        self.spread(self.row, text, style, first, self.last if last is None else last)
        self.row += 1

    def spread(self, row: int, text: str, style: str, first: int, last: int) -> None:
        """Write a text over several columns of a row and make the row high enough.

        Parameters
        ----------
        row : int
            Row, counted from 0.
        text : str
            Trusted or not.
        style : str
            Name of a style.
        first, last : int
            Columns.
        """
        text = safe_text(text)
        shown = self.book.look.style(style)
        if last > first:
            self.page.merge_range(row, first, row, last, "", shown)
        if text:
            self.page.write_string(row, first, text, shown)
        self._need(row, text, shown, first, last)

    def _need(self, row: int, text: str, shown: Any, first: int, last: int) -> None:
        """Make a row high enough for a text over some columns."""
        size = shown.font_size / 10
        width = (sum(column.width for column in self.columns[first : last + 1]) - _SIDES) / size
        lines = lines_of(text, width, bold=bool(shown.bold)) if shown.text_wrap else 1
        height = _POINTS_A_LINE * size * lines + 3.5
        self._heights[row] = max(height, self._heights.get(row, 0.0))

    def reserve(self, row: int, column: int, text: str, style: str) -> None:
        """Make a row high enough for a text that a formula may show there after a recalculation.

        Parameters
        ----------
        row, column : int
            Cell, counted from 0.
        text : str
            The longest such text.
        style : str
            Name of the cell's style.
        """
        self._need(row, safe_text(text), self.book.look.style(style), column, column)

    def height(self, row: int, points: float) -> None:
        """Fix the height of a row.

        Parameters
        ----------
        row : int
            Row, counted from 0.
        points : float
            Its height. [pt]
        """
        self._heights[row] = points
