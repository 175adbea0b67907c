"""What files hold on purpose or by accident: formulas and markup, numbers of all kinds, sizes, damaged parts."""

from __future__ import annotations

import zipfile
from decimal import Decimal
from io import BytesIO
from pathlib import Path

import pytest

from lossworth.findings import Finding
from lossworth.intake.bid_workbook import Book, read_workbook
from lossworth.intake.cells import Marks, NoNumber, number_in, text_cell
from lossworth.records.bid import Offer
from support.commercial_texts import FULL
from support.tender_folders import TENDER, bids_of, told, valid_tender, with_member, with_sheet_xml, workbook_bytes

HEADER = (
    "Lot",
    "Alternative",
    "Bidder",
    "Currency",
    "Unit price",
    "No-load loss [kW]",
    "Load loss [kW]",
    "Delivery [weeks]",
    "Cooling",
    "Origin",
    "Insulating liquid",
    "Deviations",
    "Remarks",
)
TEXTS = (
    "=1+1",
    "=cmd|'/C calc'!A0",
    '=HYPERLINK("file:///etc/passwd","x")',
    "=WEBSERVICE(1)",
    "+1",
    "-2+3",
    "@SUM(A1)",
    "<script>alert(1)</script>",
    "<b onload='x'>&amp;</b>",
    "]]>",
    "{{ 7*7 }}",
    "{% raw %}",
    "../../../etc/passwd",
    "C:\\Windows\\win.ini",
    "\\\\server\\share",
    "https://example.invalid/?a=b&c",
    'a"b',
    "a'b",
    "%s%n",
    "\u202eredla",
    "1;DROP TABLE",
)
DATA = workbook_bytes()
SPREADSHEET = "http://schemas.openxmlformats.org/spreadsheetml/2006/main"
DAMAGED = (b"", b"<x/>", b"\xff\xfe", b"<a><b></a>", b"<!DOCTYPE x [<!ENTITY a 'b'>]><x>&a;</x>")


def offers_with(folder: Path, text: str, name: str) -> tuple[Offer, ...]:
    """Base offer and alternative with one text in every column of words, from a csv file or a workbook."""
    rows: list[tuple[object, ...]] = [
        ("1", alternative, text, "NCU", 4000, 0.12, 1.2, 30, text, text, text, text, text) for alternative in ("", text)
    ]
    if name.endswith(".csv"):
        quoted = [[f'"{str(cell).replace(chr(34), chr(34) * 2)}"' for cell in row] for row in (HEADER, *rows)]
        content: str | bytes = "\n".join(",".join(row) for row in quoted)
    else:
        content = as_text(workbook_bytes({"Offers": (HEADER, *rows)}), text)
    offers, findings = bids_of(folder, name, content, valid_tender(folder, TENDER))
    assert told(findings) == []
    return offers


def as_text(data: bytes, text: str) -> bytes:
    """Workbook in which texts that begin with an equals sign are texts and no formulas."""
    import openpyxl

    book = openpyxl.load_workbook(BytesIO(data))
    for row in book["Offers"].iter_rows():
        for cell in row:
            if cell.value == text:
                cell.data_type = "s"
    stream = BytesIO()
    book.save(stream)
    return stream.getvalue()


@pytest.mark.parametrize("name", ["a.csv", "a.xlsx"])
@pytest.mark.parametrize("text", TEXTS)
def test_read_bids__text_stays_text(text: str, name: str, tmp_path: Path) -> None:
    """Whatever a bidder writes into a name or remark is in the record letter by letter, and nothing else happens."""
    base, alternative = offers_with(tmp_path, text, name)
    texts = (base.bidder, base.cooling, base.remark, base.terms.origin, base.terms.insulating_liquid)
    assert [str(each) for each in (*texts, base.terms.deviations, alternative.alternative)] == [text] * 7
    assert alternative.name == f"{text}, alternative {text}"


@pytest.mark.parametrize("text", ["\t=1+1", " \u00a0=1+1\u200b", "\ufeff=1+1\r\n"])
def test_read_bids__white_space_around_a_text(text: str, tmp_path: Path) -> None:
    """What stands before an equals sign and has no ink hides nothing."""
    base, _ = offers_with(tmp_path, text, "a.csv")
    assert base.bidder.value == "=1+1"


def test_read_bids__formula_with_a_computed_text(tmp_path: Path) -> None:
    """A formula in a column of words counts by its computed value; its own text is nowhere."""
    made = workbook_bytes({"Offers": (HEADER, ("1", None, "Alder", "NCU", 4000, 0.12, 1.2, 30, None, "=DDE(1)"))})
    data = with_sheet_xml(made, '<c r="J2"><f>DDE(1)</f><v /></c>', '<c r="J2" t="str"><f>DDE(1)</f><v>home</v></c>')
    (offer,), _ = bids_of(tmp_path, "a.xlsx", data, valid_tender(tmp_path, FULL))
    assert str(offer.terms.origin) == "home"
    assert "DDE" not in repr(offer)


@pytest.mark.parametrize(
    ("text", "value"),
    [
        ("1\u00a0234.5", "1234.5"),
        ("1\u202f234", "1234"),
        ("\u200b12\u200e", "12"),
        ("\ufeff12", "12"),
        ("0.1234567890123456789", "0.1234567890123456789"),
        ("1e3", "1000"),
        ("1E-3", "0.001"),
        ("-0", "0"),
        *((f"{minus}5", "-5") for minus in "-\u2010\u2011\u2012\u2013\u2014\u2212\ufe63\uff0d"),
    ],
)
def test_number_in__read(text: str, value: str) -> None:
    """Spaces of all kinds, what has no width, minus signs of all kinds, exponents."""
    assert number_in(text_cell(text), [Marks(".")], "kW") == Decimal(value)


@pytest.mark.parametrize(
    ("text", "kind"),
    [
        ("\uff11\uff12", "value-unreadable"),
        ("\u0661\u0662", "value-unreadable"),
        ("1\u200b2", "value-unreadable"),
        ("\u00bd", "value-unreadable"),
        ("\u2460", "value-unreadable"),
        ("1_000", "value-unreadable"),
        ("NaN", "value-unreadable"),
        ("inf", "value-unreadable"),
        ("-Infinity", "value-unreadable"),
        ("0x1F", "value-unreadable"),
        ("1e9999", "value-unreadable"),
        ("(5)", "value-unreadable"),
        ("5-", "value-unreadable"),
        ("--5", "value-unreadable"),
        ("\u2013", "value-unreadable"),
        ("1e308", "value-out-of-bounds"),
        ("1e-308", "value-out-of-bounds"),
        ("1e999", "value-out-of-bounds"),
        ("9" * 30, "value-out-of-bounds"),
        ("0." + "1" * 60, "value-out-of-bounds"),
        ("9" * 100_000, "value-out-of-bounds"),
    ],
)
def test_number_in__refused(text: str, kind: str) -> None:
    """Digits of other scripts, words, and numbers that can mean nothing."""
    found = number_in(text_cell(text), [Marks(".")], "kW")
    assert isinstance(found, NoNumber)
    assert found.kind == kind


@pytest.mark.parametrize(
    ("cell", "told_of"),
    [
        ("<v>1e308</v>", ("value-out-of-bounds", "1E+308")),
        ("<v>1e-300</v>", ("value-out-of-bounds", "1E-300")),
        (f"<v>{'9' * 30}</v>", ("value-out-of-bounds", "9" * 30)),
        ("<v>1e999</v>", ("value-out-of-bounds", "Infinity")),
        ("<v>NaN</v>", ("file-unreadable", None)),
        (f"<v>{'9' * 5000}</v>", ("file-unreadable", None)),
        ("<v>1.2.3</v>", ("file-unreadable", None)),
    ],
)
def test_read_bids__numbers_of_a_worksheet(cell: str, told_of: tuple[str, str | None], tmp_path: Path) -> None:
    """Numbers that no spreadsheet program writes are out of bounds, or the file is damaged; never a traceback."""
    data = with_sheet_xml(DATA, '<c r="F2" t="n"><v>1.2</v></c>', f'<c r="F2">{cell}</c>')
    _, (finding,) = bids_of(tmp_path, "a.xlsx", data, valid_tender(tmp_path))
    assert told_of == (finding.kind, finding.got)


def test_read_workbook__a_million_rows_of_format() -> None:
    """Rows that have a format and nothing else cost time, and change nothing."""
    rows = "".join(f'<row r="{row}" s="1" customFormat="1"/>' for row in range(6, 1_048_577))
    book = read_workbook(with_sheet_xml(DATA, "</sheetData>", f"{rows}</sheetData>"), "a.xlsx")
    assert isinstance(book, Book)
    assert [len(sheet.rows) for sheet in book.sheets] == [5]


@pytest.mark.parametrize("part", ["xl/styles.xml", "xl/sharedStrings.xml", "xl/workbook.xml", "[Content_Types].xml"])
@pytest.mark.parametrize("content", DAMAGED)
def test_read_workbook__damaged_parts(part: str, content: bytes) -> None:
    """Whatever stands in a part of a workbook, it is read or refused with one finding."""
    found = read_workbook(with_member(DATA, part, lambda _: content), "a.xlsx")
    assert isinstance(found, (Book, Finding))
    if content.startswith(b"<!"):
        assert isinstance(found, Finding)


@pytest.mark.parametrize("name", ["../../evil.xml", "/etc/passwd", "C:\\evil", "xl/../../evil"])
def test_read_workbook__paths_of_parts(name: str, tmp_path: Path) -> None:
    """Nothing is unpacked to a path: a part with such a name is one that nobody asks for."""
    assert isinstance(read_workbook(with_member(DATA, name, lambda _: b"x"), "a.xlsx"), Book)
    assert list(tmp_path.iterdir()) == []


def test_read_workbook__stored_sizes_that_lie() -> None:
    """A part that says it is small and unpacks to more is refused by what it unpacks to."""
    stream = BytesIO()
    with zipfile.ZipFile(BytesIO(DATA)) as old, zipfile.ZipFile(stream, "w", zipfile.ZIP_DEFLATED) as new:
        for member in old.namelist():
            new.writestr(member, old.read(member))
        new.writestr("xl/media/a.bin", bytes(60 * 1024 * 1024))
    data = bytearray(stream.getvalue())
    at = data.rindex(b"PK\x01\x02")
    data[at + 24 : at + 28] = (100).to_bytes(4, "little")
    found = read_workbook(bytes(data), "a.xlsx")
    assert isinstance(found, Finding)
