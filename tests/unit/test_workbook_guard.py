"""The guard before a workbook is opened: bounds, order, kinds of files."""

from __future__ import annotations

import zipfile
from io import BytesIO

import pytest

from lossworth.findings import Finding
from lossworth.intake import workbook_guard
from lossworth.intake.workbook_guard import Extent, guarded_extent
from support.tender_folders import table_workbook, with_sheet_xml, workbook_bytes

GOOD = workbook_bytes()


def refused(data: bytes) -> Finding:
    """Why a file is not opened."""
    found = guarded_extent(data, "a.xlsx")
    assert isinstance(found, Finding)
    return found


def test_guarded_extent__good() -> None:
    """The extent is that of the cells that hold something."""
    assert guarded_extent(GOOD, "a.xlsx") == Extent(5, 9, False)


def test_guarded_extent__formula_without_value() -> None:
    """Formulas without value are seen before anything is opened."""
    assert guarded_extent(table_workbook(0, "Load loss [kW]", "=1"), "a.xlsx") == Extent(5, 9, True)


@pytest.mark.parametrize(
    ("addition", "rule"),
    [
        ('<row r="5"><c r="A5"/></row>', "must have its rows in order; row 5 stands behind row 5"),
        ('<row r="6"><c r="B6"/><c r="A6"/></row>', "must have its cells in order; A6 stands in row 6"),
        ('<row r="6"><c r="A7"/></row>', "must have its cells in order; A7 stands in row 6"),
        ('<row r="x"/>', "must number its rows; it has x"),
        ('<row r="6"><c r="$A$6"/></row>', "must name its cells; it has $A$6"),
    ],
)
def test_guarded_extent__out_of_order(addition: str, rule: str) -> None:
    """Cells out of order would be dropped by the reader without a word; no spreadsheet program writes them."""
    assert refused(with_sheet_xml(GOOD, "</sheetData>", f"{addition}</sheetData>")).rule == rule


@pytest.mark.parametrize(
    ("bound", "value", "rule"),
    [
        ("MOST_ROWS", 4, "must have at most 4 rows"),
        ("MOST_COLUMNS", 8, "must have at most 8 columns"),
        ("MOST_CELLS", 44, "must have at most 44 cells that hold something"),
        ("MOST_MEMBERS", 3, "must unpack to at most 3 parts"),
        ("_MOST_ELEMENTS", 50, "must have fewer parts; formatted cells without content count too"),
        ("LARGEST_MEMBER", 1000, "must have no part that unpacks to more than 0 MB"),
        ("LARGEST_UNPACKED", 3000, "must unpack to at most 0 MB"),
    ],
)
def test_guarded_extent__bounds(monkeypatch: pytest.MonkeyPatch, bound: str, value: int, rule: str) -> None:
    """Each bound is kept, and the same file passes under the usual ones."""
    monkeypatch.setattr(workbook_guard, bound, value)
    finding = refused(GOOD)
    assert (finding.kind, finding.rule) == ("file-too-large", rule)


@pytest.mark.parametrize("share", [0.01, 0.3, 0.6, 0.9, 0.99])
def test_guarded_extent__cut_off(share: float) -> None:
    """A file cut off anywhere is refused."""
    assert refused(GOOD[: int(len(GOOD) * share)]).kind == "file-unreadable"


def test_guarded_extent__damaged_content() -> None:
    """A flipped byte in the packed content is noticed."""
    with zipfile.ZipFile(BytesIO(GOOD)) as archive:
        member = archive.getinfo("xl/worksheets/sheet1.xml")
    at = member.header_offset + 30 + len(member.filename) + member.compress_size // 2
    assert refused(GOOD[:at] + bytes([GOOD[at] ^ 0xFF]) + GOOD[at + 1 :]).kind == "file-unreadable"


def test_guarded_extent__password_of_the_zip() -> None:
    """A zip that is locked itself is refused."""
    locked = bytearray(GOOD)
    central = GOOD.index(b"PK\x01\x02")
    locked[6] |= 1
    locked[central + 8] |= 1
    assert refused(bytes(locked)).kind == "file-unreadable"


def test_guarded_extent__parts_of_one_name() -> None:
    """Two parts of one name would be read as one, and which is nobody's guess."""
    stream = BytesIO(GOOD)
    with zipfile.ZipFile(stream, "a") as archive, pytest.warns(UserWarning, match="Duplicate name"):
        archive.writestr("xl/workbook.xml", b"<x/>")
    assert refused(stream.getvalue()).rule == "must not have two parts of one name"
