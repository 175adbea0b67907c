"""Cells of a workbook as its readers see them, and a cell changed in the file as it was delivered."""

from __future__ import annotations

import re
import zipfile
from pathlib import Path
from typing import Any

import openpyxl

__all__ = ["Cells", "cells", "formulas", "row_of", "with_cell"]

Cells = dict[tuple[str, str], Any]


def cells(path: Path) -> Cells:
    """Values by sheet and cell, for formulas the cached ones."""
    return _cells(path, data_only=True)


def formulas(path: Path) -> dict[tuple[str, str], str]:
    """Formulas by sheet and cell."""
    found = _cells(path, data_only=False)
    return {place: cell for place, cell in found.items() if isinstance(cell, str) and cell.startswith("\0")}


def _cells(path: Path, *, data_only: bool) -> Cells:
    book = openpyxl.load_workbook(path, data_only=data_only)
    return {
        (sheet.title, cell.coordinate): f"\0{cell.value}" if cell.data_type == "f" else cell.value
        for sheet in book
        for row in sheet.iter_rows()
        for cell in row
        if cell.value is not None
    }


def row_of(path: Path, sheet: str, column: str, text: str, nth: int = 0) -> int:
    """Row in which a text stands, the nth time that it does."""
    places = [place for (name, place), value in cells(path).items() if name == sheet and value == text]
    rows = sorted(int(place.removeprefix(column)) for place in places if re.fullmatch(rf"{column}\d+", place))
    return rows[nth]


def with_cell(path: Path, target: Path, sheet: str, cell: str, value: str) -> Path:
    """Copy of a workbook in which the value of one cell is another one; nothing else changes, cached values stay."""
    position = openpyxl.load_workbook(path, read_only=True).sheetnames.index(sheet) + 1
    member = f"xl/worksheets/sheet{position}.xml"
    with zipfile.ZipFile(path) as source, zipfile.ZipFile(target, "w", zipfile.ZIP_DEFLATED) as copy:
        for name in source.namelist():
            data = source.read(name)
            if name == member:
                pattern = rf'(<c r="{cell}"[^>]*>(?:<f>[^<]*</f>)?<v>)[^<]*(</v>)'
                text, count = re.subn(pattern, rf"\g<1>{value}\g<2>", data.decode())
                assert count == 1, f"{sheet}!{cell} has no value"
                data = text.encode()
            copy.writestr(name, data)
    return target
