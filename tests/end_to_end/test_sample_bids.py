"""The committed bids of the demo are what their script writes."""

from __future__ import annotations

import importlib.util
import io
import zipfile
from functools import cache
from pathlib import Path
from types import ModuleType
from typing import Any

import openpyxl
import pytest

FOLDER = Path(__file__).resolve().parents[2] / "sample_bids"
FILES = (
    "aldermist.xlsx",
    "birchlune.xlsx",
    "cedarfell.xlsx",
    "damsonby.xlsx",
    "elderquill.xlsx",
    "firthwane.xlsx",
    "gorsemere.csv",
)


@cache
def script() -> ModuleType:
    """The script, imported from its file."""
    spec = importlib.util.spec_from_file_location("make_sample_bids", FOLDER / "make_sample_bids.py")
    assert spec is not None
    assert spec.loader is not None
    module = importlib.util.module_from_spec(spec)
    import sys

    sys.modules[spec.name] = module  # dataclasses look their module up
    spec.loader.exec_module(module)
    return module


@cache
def written() -> dict[str, bytes]:
    """What the script writes now."""
    files: dict[str, bytes] = script().all_files()
    return files


def content(workbook: bytes) -> dict[str, Any]:
    """Cells with value and format, column widths and frozen panes, by sheet."""
    book = openpyxl.load_workbook(io.BytesIO(workbook))
    return {
        sheet.title: (
            [
                (cell.coordinate, cell.value, cell.number_format, cell.font.bold)
                for row in sheet.iter_rows()
                for cell in row
            ],
            {name: column.width for name, column in sheet.column_dimensions.items()},
            sheet.freeze_panes,
        )
        for sheet in book.worksheets
    }


def test_all_files__are_the_committed_ones() -> None:
    """No file is missing, none is left over."""
    assert sorted(written()) == sorted(FILES) == sorted(path.name for path in (FOLDER / "bids").iterdir())


@pytest.mark.parametrize("name", [name for name in FILES if name.endswith(".xlsx")])
def test_all_files__workbook_as_committed(name: str) -> None:
    """Same sheets, cells, formats and widths; bytes depend on the versions of the libraries that compress them."""
    assert content(written()[name]) == content((FOLDER / "bids" / name).read_bytes())


def test_all_files__csv_as_committed() -> None:
    """The csv is the same, byte by byte."""
    assert written()["gorsemere.csv"] == (FOLDER / "bids" / "gorsemere.csv").read_bytes()


def test_all_files__twice_the_same_bytes() -> None:
    """No clock and no chance goes into the workbooks."""
    assert written() == script().all_files()


def test_all_files__invented_and_said_so() -> None:
    """Every bid says that it is invented."""
    for name, data in written().items():
        text = data if name.endswith(".csv") else zipfile.ZipFile(io.BytesIO(data)).read("xl/sharedStrings.xml")
        assert b"INVENTED DATA" in text, name
    assert "INVENTED DATA" in (FOLDER / "tender.toml").read_text(encoding="utf-8")


def test_gorsemere__as_a_spreadsheet_with_decimal_commas_writes_it() -> None:
    """Byte order mark, semicolons, decimal commas and CRLF."""
    text = (FOLDER / "bids" / "gorsemere.csv").read_bytes()
    assert text.startswith(b"\xef\xbb\xbfBidder;Lot;")
    assert b";0,126;1,350;" in text
    assert text.count(b"\r\n") == text.count(b"\n") == 5


def test_cedarfell__total_loss_repeated_as_load_loss() -> None:
    """Lot 3 states 8.040 kW twice beside a no-load loss of 0.640; the other totals are sums of their parts."""
    sheet = openpyxl.load_workbook(FOLDER / "bids" / "cedarfell.xlsx")["Offers"]
    header, *rows = sheet.iter_rows(values_only=True)
    offers = [dict(zip(header, row, strict=True)) for row in rows]
    sums = {
        offer["Lot"]: round(offer["Total loss [kW]"] - offer["No-load loss [kW]"] - offer["Load loss [kW]"], 6)
        for offer in offers
    }
    assert sums == {1: 0, 2: 0, 3: -0.64, 4: 0}
