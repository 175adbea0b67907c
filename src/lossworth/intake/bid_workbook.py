"""Sheets of a bidder's workbook: what a person sees in each cell, formulas by their computed values."""

from __future__ import annotations

import datetime
import os
import re
import warnings
from collections.abc import Iterator
from dataclasses import dataclass
from decimal import Decimal
from io import BytesIO
from typing import Any

from ..findings import Finding, Place
from .cells import BLANK, Cell, Content, text_cell
from .numbers import decimal_of_float
from .sheet import Looks, Row, Sheet
from .workbook_guard import Extent, guarded_extent
from .workbook_markup import SheetExtent

__all__ = ["LONGEST_TEXT", "MOST_CHARACTERS", "Book", "read_workbook"]

#: Bounds of the characters in one cell, which are those of spreadsheet programs, and in all cells of a file.
LONGEST_TEXT = 32_767
MOST_CHARACTERS = 16_000_000

#: Quoted text, escaped characters and conditions in a number format, in which a percent sign means nothing.
_NOT_FORMAT = re.compile(r'"[^"]*"|\\.|_.|\[[^\]]*\]')


@dataclass(frozen=True, slots=True)
class Book:
    """What a workbook holds.

    Parameters
    ----------
    sheets : tuple of Sheet
        Every worksheet in its order, also hidden ones.
    has_links : bool
        Whether it leads to other files, which are never followed.
    """

    sheets: tuple[Sheet, ...]
    has_links: bool


def read_workbook(data: bytes, shown_as: str) -> Book | Finding:
    """Sheets of a workbook.

    Parameters
    ----------
    data : bytes
        The file.
    shown_as : str
        Its name in findings.

    Returns
    -------
    Book or Finding
        Or why the file cannot be read.
    """
    extent = guarded_extent(data, shown_as)
    if isinstance(extent, Finding):
        return extent
    try:
        with warnings.catch_warnings():
            warnings.simplefilter("ignore")  # on styles, extensions, and dates out of range, which come as errors
            return Book(_sheets(data, shown_as, extent), extent.has_links)
    except OverflowError as error:
        return Finding("file-too-large", "file", str(error), Place(shown_as))
    except Exception as error:  # noqa: BLE001 - a damaged workbook fails in the reader in any way it likes
        rule = f"must be a workbook that can be read ({type(error).__name__})"
        return Finding("file-unreadable", "file", rule, Place(shown_as))


def _sheets(data: bytes, shown_as: str, extent: Extent) -> tuple[Sheet, ...]:
    os.environ["OPENPYXL_LXML"] = "False"  # else lxml, where it is installed, parses past defusedxml
    import openpyxl

    book = openpyxl.load_workbook(BytesIO(data), read_only=True, data_only=True, keep_links=False)
    try:
        sheets, characters = [], 0
        for page in book.worksheets:
            own = _extent(page, extent)
            rows = []
            for row in _rows(page, own):
                rows.append(row)
                characters += sum(len(cell.text) for cell in row.cells)
                if characters > MOST_CHARACTERS:  # one shared text may stand in a hundred thousand cells
                    raise OverflowError(f"must hold at most {MOST_CHARACTERS:,} characters in its cells")
            sheets.append(Sheet(shown_as, page.title, tuple(rows), _looks(page, own)))
        return tuple(sheets)
    finally:
        book.close()


def _extent(page: Any, extent: Extent) -> SheetExtent:
    """What the guard measured of the part behind a sheet; nothing where it found no worksheet there."""
    return extent.sheets.get(str(page._worksheet_path), SheetExtent())


def _looks(page: Any, extent: SheetExtent) -> Looks:
    rows, columns = frozenset(extent.hidden_rows), frozenset(extent.hidden_columns)
    return Looks(page.sheet_state != "visible", rows, columns, tuple(extent.merged))


def _rows(page: Any, extent: SheetExtent) -> Iterator[Row]:
    """Rows up to the extent, which the guard measured: the size that a sheet states of itself may be wrong."""
    if not extent.rows:
        return
    page.reset_dimensions()
    formulas = extent.formulas
    cells_by_row = page.iter_rows(min_row=1, max_row=extent.rows, min_col=1, max_col=extent.columns)
    for number, cells in enumerate(cells_by_row, start=1):
        row = tuple(
            BLANK if cell.value is None and (number, at) not in formulas else _cell(cell, formulas.get((number, at)))
            for at, cell in enumerate(cells)
        )
        if any(cell is not BLANK for cell in row):
            yield Row(number, row)


def _cell(cell: Any, formula: str | None) -> Cell:
    value = cell.value
    if value is None:
        return BLANK if formula is None else Cell(Content.FORMULA, formula)
    if cell.data_type == "e":
        return Cell(Content.ERROR, str(value))
    if isinstance(value, bool):
        return Cell(Content.TRUTH, str(value).upper())
    if isinstance(value, (int, float)):
        return _number_cell(value, cell.number_format)
    if isinstance(value, (datetime.date, datetime.time, datetime.timedelta)):
        return Cell(Content.DATE, _date_text(value))
    text = str(value)
    if len(text) > LONGEST_TEXT:
        raise OverflowError(f"must have at most {LONGEST_TEXT:,} characters in a cell")
    return text_cell(text)


def _number_cell(value: float, number_format: str) -> Cell:
    number = Decimal(value) if isinstance(value, int) else decimal_of_float(value)
    if "%" in _NOT_FORMAT.sub("", number_format or ""):
        percent = number.scaleb(2) if number.is_finite() else number
        return Cell(Content.PERCENTAGE, f"{_plain(percent)} %", percent)
    return Cell(Content.NUMBER, _plain(number), number)


def _plain(number: Decimal) -> str:
    """Digits without exponent where that stays short."""
    return f"{number:f}" if number.is_finite() and -15 <= number.adjusted() <= 15 else str(number)


def _date_text(value: datetime.date | datetime.time | datetime.timedelta) -> str:
    if isinstance(value, datetime.datetime) and value.time() == datetime.time():
        return value.date().isoformat()
    return str(value)
