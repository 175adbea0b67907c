"""The guard before a workbook is opened: bounds, order, kinds of files."""

from __future__ import annotations

import zipfile
from io import BytesIO
from types import ModuleType

import pytest

from lossworth.findings import Finding
from lossworth.intake import bid_workbook, workbook_guard, workbook_markup
from lossworth.intake.bid_workbook import read_workbook
from lossworth.intake.sheet import Area
from lossworth.intake.workbook_guard import Extent, guarded_extent
from lossworth.intake.workbook_markup import SheetExtent
from support.tender_folders import table_workbook, with_member, with_sheet_xml, workbook_bytes

GOOD = workbook_bytes()
SHEET = "xl/worksheets/sheet1.xml"


def refused(data: bytes) -> Finding:
    """Why a file is not opened."""
    found = guarded_extent(data, "a.xlsx")
    assert isinstance(found, Finding)
    return found


def extent(data: bytes) -> Extent:
    """Extent of a workbook that keeps all bounds."""
    found = guarded_extent(data, "a.xlsx")
    assert isinstance(found, Extent)
    return found


def with_styles(addition: str) -> bytes:
    """Workbook with more in its styles."""
    return with_member(
        GOOD, "xl/styles.xml", lambda content: content.replace(b"</styleSheet>", f"{addition}</styleSheet>".encode())
    )


def test_guarded_extent__good() -> None:
    """The extent is that of the cells that hold something."""
    assert extent(GOOD) == Extent({SHEET: SheetExtent(5, 9)}, has_links=False)


def test_guarded_extent__formula_without_value() -> None:
    """Formulas without value are seen before anything is opened."""
    found = extent(table_workbook(0, "Load loss [kW]", "=E2*10")).sheets[SHEET]
    assert found.formulas == {(2, 5): "=E2*10"}


def test_guarded_extent__two_sheets() -> None:
    """Each worksheet has an extent of its own: a far cell of one costs nothing in another."""
    sheets = extent(workbook_bytes({"One": [["a"]], "Two": [[], ["", "", "b"]]})).sheets
    assert [(each.rows, each.columns) for each in sheets.values()] == [(1, 1), (2, 3)]


def test_guarded_extent__hidden_and_merged() -> None:
    """Hidden rows and columns, and merged cells, are seen on the way."""
    data = with_sheet_xml(GOOD, '<row r="3"', '<row hidden="1" r="3"')
    data = with_sheet_xml(data, "<sheetData>", '<cols><col min="2" max="16384" hidden="true"/></cols><sheetData>')
    data = with_sheet_xml(data, "</sheetData>", '</sheetData><mergeCells><mergeCell ref="B2:C4"/></mergeCells>')
    found = extent(data).sheets[SHEET]
    assert (found.hidden_rows, found.merged) == ({3}, [Area(2, 1, 4, 2)])
    assert (min(found.hidden_columns), max(found.hidden_columns)) == (1, 199)


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
    ("module", "bound", "value", "rule"),
    [
        (workbook_markup, "MOST_ROWS", 4, "must have at most 4 rows"),
        (workbook_markup, "MOST_COLUMNS", 8, "must have at most 8 columns"),
        (workbook_markup, "MOST_CELLS", 44, "must have at most 44 cells that hold something"),
        (workbook_markup, "MOST_AREA", 44, "must span at most 44 cells, rows times columns"),
        (workbook_markup, "MOST_SHEETS", 0, "must have at most 0 sheets"),
        (workbook_markup, "DEEPEST", 3, "must have at most 3 elements inside each other"),
        (
            workbook_markup,
            "MOST_ELEMENTS",
            {"worksheet": 50, "sst": 1000, "": 1000},
            "must have fewer parts; formatted cells without content count too",
        ),
        (workbook_guard, "MOST_MEMBERS", 3, "must unpack to at most 3 parts"),
        (workbook_guard, "LARGEST_MEMBER", 1000, "must have no part that unpacks to more than 0 MB"),
        (workbook_guard, "LARGEST_UNPACKED", 3000, "must unpack to at most 0 MB"),
        (bid_workbook, "MOST_CHARACTERS", 100, "must hold at most 100 characters in its cells"),
        (bid_workbook, "LONGEST_TEXT", 10, "must have at most 10 characters in a cell"),
    ],
)
def test_read_workbook__bounds(
    monkeypatch: pytest.MonkeyPatch, module: ModuleType, bound: str, value: object, rule: str
) -> None:
    """Each bound is kept, and the same file passes under the usual ones."""
    assert not isinstance(read_workbook(GOOD, "a.xlsx"), Finding)
    monkeypatch.setattr(module, bound, value)
    finding = read_workbook(GOOD, "a.xlsx")
    assert isinstance(finding, Finding)
    assert (finding.kind, finding.rule) == ("file-too-large", rule)


def test_guarded_extent__merged_cells_bounded(monkeypatch: pytest.MonkeyPatch) -> None:
    """Merged cells are counted over the file."""
    monkeypatch.setattr(workbook_markup, "MOST_MERGED", 1)
    merged = '<mergeCells><mergeCell ref="A7:B7"/><mergeCell ref="A8:B8"/></mergeCells>'
    assert refused(with_sheet_xml(GOOD, "</sheetData>", f"</sheetData>{merged}")).kind == "file-too-large"


@pytest.mark.parametrize(
    ("addition", "kind"),
    [
        (f'<numFmts><numFmt numFmtId="200" formatCode="{"[" * 9000}"/></numFmts>', "file-unreadable"),
        (f"<x>{'a' * 9000}</x>", "file-unreadable"),
        (f"<x>{'<y>' * 300}{'</y>' * 300}</x>", "file-too-large"),
        ("<xf/>" * 150_001, "file-too-large"),
    ],
    ids=["number format", "text", "depth", "elements"],
)
def test_guarded_extent__styles(addition: str, kind: str) -> None:
    """Definitions on which a reader would spend minutes are refused before it sees them."""
    assert refused(with_styles(addition)).kind == kind


def test_guarded_extent__sheets_of_one_part() -> None:
    """A workbook that shows one part as a thousand sheets is refused."""
    sheets = "".join(f'<sheet name="s{n}" sheetId="{n}" r:id="rId1"/>' for n in range(2, 1000)).encode()
    data = with_member(GOOD, "xl/workbook.xml", lambda content: content.replace(b"</sheets>", sheets + b"</sheets>"))
    assert refused(data).rule == "must have at most 200 sheets"


@pytest.mark.parametrize("part", ["xl/vbaProject.bin", "xl/VBAPROJECT.bin", "xl/macrosheets/sheet1.xml"])
def test_guarded_extent__macros(part: str) -> None:
    """A workbook with macros is refused under whatever name, and never run."""
    finding = refused(with_member(GOOD, part, lambda _: b"x"))
    assert (finding.kind, finding.got) == ("file-unreadable", part)


@pytest.mark.parametrize("part", ["xl/externalLinks/externalLink1.xml", "xl/connections.xml"])
def test_guarded_extent__links(part: str) -> None:
    """Links to other files are seen; they are not followed."""
    assert extent(with_member(GOOD, part, lambda _: b"<x/>")).has_links


def test_guarded_extent__password() -> None:
    """A workbook with a password says so."""
    locked = b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1" + bytes(500) + "EncryptedPackage".encode("utf-16-le") + bytes(500)
    assert refused(locked).got == "a password"


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
