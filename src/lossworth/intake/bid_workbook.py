"""Sheets of a bidder's workbook: what a person sees in each cell, formulas by their computed values."""

from __future__ import annotations

import datetime
import os
import re
import warnings
from collections.abc import Iterator
from decimal import Decimal
from io import BytesIO
from typing import Any

from ..findings import Finding, Place
from .cells import BLANK, Cell, Content, text_cell
from .numbers import decimal_of_float
from .sheet import Row, Sheet
from .workbook_guard import Extent, guarded_extent

__all__ = ["read_workbook"]

#: Quoted text, escaped characters and conditions in a number format, in which a percent sign means nothing.
_NOT_FORMAT = re.compile(r'"[^"]*"|\\.|_.|\[[^\]]*\]')


def read_workbook(data: bytes, shown_as: str) -> tuple[Sheet, ...] | Finding:
    """Sheets of a workbook.

    Parameters
    ----------
    data : bytes
        The file.
    shown_as : str
        Its name in findings.

    Returns
    -------
    tuple of Sheet or Finding
        Every worksheet in its order, also hidden ones; or why the file cannot be read.
    """
    extent = guarded_extent(data, shown_as)
    if isinstance(extent, Finding):
        return extent
    try:
        with warnings.catch_warnings():
            warnings.simplefilter("ignore")  # on styles, extensions, and dates out of range, which come as errors
            return _sheets(data, shown_as, extent)
    except Exception as error:  # noqa: BLE001 - a damaged workbook fails in the reader in any way it likes
        rule = f"must be a workbook that can be read ({type(error).__name__})"
        return Finding("file-unreadable", "file", rule, Place(shown_as))


def _sheets(data: bytes, shown_as: str, extent: Extent) -> tuple[Sheet, ...]:
    formulas = _formulas(data, extent) if extent.formulas_without_value else {}
    book = _open(data, data_only=True)
    try:
        return tuple(
            Sheet(shown_as, page.title, tuple(_rows(page, extent, formulas.get(page.title, {}))))
            for page in book.worksheets
        )
    finally:
        book.close()


def _open(data: bytes, *, data_only: bool) -> Any:
    os.environ["OPENPYXL_LXML"] = "False"  # else lxml, where it is installed, parses past defusedxml
    import openpyxl

    return openpyxl.load_workbook(BytesIO(data), read_only=True, data_only=data_only, keep_links=False)


def _cells(page: Any, extent: Extent) -> Iterator[tuple[int, tuple[Any, ...]]]:
    """Rows up to the extent, which the guard measured: the size that a sheet states of itself may be wrong."""
    if not extent.rows:
        return iter(())
    page.reset_dimensions()
    return enumerate(page.iter_rows(min_row=1, max_row=extent.rows, min_col=1, max_col=extent.columns), start=1)


def _rows(page: Any, extent: Extent, formulas: dict[tuple[int, int], str]) -> Iterator[Row]:
    for number, cells in _cells(page, extent):
        row = Row(number, tuple(_cell(cell, formulas.get((number, at))) for at, cell in enumerate(cells)))
        if not row.is_blank:
            yield row


def _formulas(data: bytes, extent: Extent) -> dict[str, dict[tuple[int, int], str]]:
    """Formulas by sheet, row and column, to tell one without a computed value from an empty cell."""
    book = _open(data, data_only=False)
    try:
        return {
            page.title: {
                (number, at): str(getattr(cell.value, "text", cell.value))
                for number, cells in _cells(page, extent)
                for at, cell in enumerate(cells)
                if cell.data_type == "f"
            }
            for page in book.worksheets
        }
    finally:
        book.close()


def _cell(cell: Any, formula: str | None) -> Cell:
    value = cell.value
    if value is None:
        # a formula whose result is an empty text has a type of its own
        return Cell(Content.FORMULA, formula) if formula is not None and cell.data_type != "str" else BLANK
    if cell.data_type == "e":
        return Cell(Content.ERROR, str(value))
    if isinstance(value, bool):
        return Cell(Content.TRUTH, str(value).upper())
    if isinstance(value, (int, float)):
        return _number_cell(value, cell.number_format)
    if isinstance(value, (datetime.date, datetime.time, datetime.timedelta)):
        return Cell(Content.DATE, _date_text(value))
    return text_cell(str(value))


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
