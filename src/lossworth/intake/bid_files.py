"""All bid files of a run: told apart by type, read one by one, and compared for offers given twice."""

from __future__ import annotations

import unicodedata
from collections.abc import Callable, Iterator, Mapping, Sequence
from dataclasses import dataclass
from pathlib import PurePath
from types import MappingProxyType

from ..findings import Finding, Place, any_stops
from ..records.bid import Offer
from ..records.tender import Tender
from .bid_csv import LARGEST_CSV, read_csv
from .bid_identities import check_identities
from .bid_workbook import Book, read_workbook
from .cells import Marks
from .columns import COLUMNS
from .file_bytes import bounded_bytes
from .labels import read_labels
from .linked_files import linked_names
from .offer_rows import Table, read_offers, rows_with_figures
from .sheet import Row, Sheet
from .sheet_looks import check_looks
from .table_header import find_header, is_header
from .tender_folder import BIDS, InputFile
from .workbook_guard import LARGEST_WORKBOOK

__all__ = ["read_bids"]

#: A header stands among the first rows of its sheet.
_DEEPEST_HEADER = 100
_SAVE_AS = "Open it in a spreadsheet program and save it as .xlsx, or as csv in UTF-8."
#: Tables in formats that are not read: a bid in one of them must not pass unnoticed.
_OTHER_TABLES = (".xls", ".xlsm", ".xlsb", ".xlt", ".xltx", ".xltm", ".ods", ".fods", ".tsv", ".numbers")


def read_bids(
    files: Sequence[InputFile], tender: Tender | None, progress: Callable[[InputFile], None] | None = None
) -> tuple[tuple[Offer, ...], tuple[Finding, ...]]:
    """Offers of all bid files.

    Parameters
    ----------
    files : sequence of InputFile
        The files.
    tender : Tender or None
        None where the tender file could not be read: then what does not need it is still found.
    progress : callable, optional
        Called with each file before it is read.

    Returns
    -------
    offers : tuple of Offer
        In the order of files and rows. A figure that is missing, unreadable or out of bounds is None there.
    findings : tuple of Finding
        Everything that is wrong, of all files.
    """
    offers: list[Offer] = []
    findings: list[Finding] = list(_unused_decimal_marks(files, tender))
    for file in files:
        if progress is not None:
            progress(file)
        of_file, about_file = _read_file(file, tender)
        offers += of_file
        findings += about_file
    if not offers and not any_stops(findings):
        findings.append(Finding("no-offers", "bids", "must hold at least one bid file", Place(BIDS)))
    # a label that two offers of one lot share is told once
    return tuple(offers), tuple(dict.fromkeys((*findings, *check_identities(offers))))


def _read_file(file: InputFile, tender: Tender | None) -> tuple[Sequence[Offer], Sequence[Finding]]:
    ending = PurePath(file.shown_as).suffix.lower()
    if ending == ".xlsx":
        return _read_workbook_file(file, tender)
    if ending == ".csv":
        return _read_csv_file(file, tender)
    place = Place(file.shown_as)
    if ending in _OTHER_TABLES:
        rule = "must be an .xlsx workbook or a csv file"
        return (), [Finding("file-unreadable", "file", rule, place, PurePath(file.shown_as).name, fix=_SAVE_AS)]
    return (), [Finding("file-not-read", "file", "is neither an .xlsx workbook nor a csv file", place)]


def _read_workbook_file(file: InputFile, tender: Tender | None) -> tuple[Sequence[Offer], Sequence[Finding]]:
    data = bounded_bytes(file.path, file.shown_as, LARGEST_WORKBOOK)
    if isinstance(data, Finding):
        return (), [data]
    book = read_workbook(data, file.shown_as)
    if isinstance(book, Finding):
        return (), [book]
    offers, findings = _read_sheets(file, book.sheets, tender)
    return offers, (*_links(file, book), *findings)


def _links(file: InputFile, book: Book) -> Iterator[Finding]:
    if book.has_links:
        rule = "leads to other files or data; what it took from them counts as it stands, and nothing is followed"
        yield Finding("workbook-links", "workbook", rule, Place(file.shown_as))


def _read_csv_file(file: InputFile, tender: Tender | None) -> tuple[Sequence[Offer], Sequence[Finding]]:
    data = bounded_bytes(file.path, file.shown_as, LARGEST_CSV)
    if isinstance(data, Finding):
        return (), [data]
    sheet, findings = read_csv(data, file.shown_as)
    if sheet is None:
        return (), findings
    offers, more = _read_sheets(file, (sheet,), tender, rows_are_missing=bool(findings))
    return offers, (*findings, *more)


@dataclass(frozen=True, slots=True)
class _Parts:
    """A sheet divided: what stands above the header, the header, what stands below."""

    sheet: Sheet
    above: tuple[Row, ...]
    header: Row | None
    below: tuple[Row, ...]


def _read_sheets(
    file: InputFile, sheets: Sequence[Sheet], tender: Tender | None, *, rows_are_missing: bool = False
) -> tuple[Sequence[Offer], Sequence[Finding]]:
    parts = [_divided(sheet) for sheet in sheets]
    labels, label_findings = read_labels((part.sheet, row) for part in parts for row in part.above)
    findings = list(label_findings)
    offers: list[Offer] = []
    for part in parts:
        if part.header is None:
            continue
        header, about_header = find_header(part.sheet, part.header, _items(tender))
        table = Table(part.sheet, header, part.below, labels, _marks(file, tender), tender)
        of_table, about_rows = read_offers(table)
        offers += of_table
        findings += (*about_header, *check_looks(part.sheet, header, rows_with_figures(table)), *about_rows)
    findings += _nothing_found(file, parts, rows_are_missing=rows_are_missing)
    return offers, findings


def _items(tender: Tender | None) -> tuple[str, ...] | None:
    """Names of the further items of all lots."""
    return None if tender is None else tuple(item.name.value for lot in tender.lots for item in lot.items)


def _divided(sheet: Sheet) -> _Parts:
    for number, row in enumerate(sheet.rows[:_DEEPEST_HEADER]):
        if is_header(row):
            return _Parts(sheet, sheet.rows[:number], row, sheet.rows[number + 1 :])
    return _Parts(sheet, sheet.rows, None, ())


def _nothing_found(file: InputFile, parts: Sequence[_Parts], *, rows_are_missing: bool) -> Iterator[Finding]:
    tables = [part for part in parts if part.header is not None]
    if not tables:
        yield _header_missing(file, [part.sheet for part in parts])
    elif not rows_are_missing and not any(part.below for part in tables):
        yield Finding("no-offers", "table", "must have at least one row below its header", tables[0].sheet.place)


def _header_missing(file: InputFile, sheets: Sequence[Sheet]) -> Finding:
    needed = ", ".join(column.example for column in COLUMNS if column.is_needed)
    if len(sheets) == 1 and sheets[0].rows:
        first = sheets[0].rows[0]
        place, got = sheets[0].place_of_row(first), "; ".join(cell.text for cell in first.cells if not cell.is_blank)
    else:
        place, got = Place(file.shown_as), ", ".join(sheet.name or "" for sheet in sheets) or "no sheet"
    rule = f"must stand among the first {_DEEPEST_HEADER} rows of a sheet, with at least: {needed}"
    return Finding("header-missing", "header", rule, place, got)


def _marks(file: InputFile, tender: Tender | None) -> tuple[Marks, ...]:
    """Declared marks; any, where the declaration could not be read, so that no fault is invented."""
    if tender is None:
        return (Marks("."), Marks(","))
    rules = tender.bid_files
    return (Marks(_decimal_marks(tender).get(_name(file), rules.decimal_mark), rules.thousands_mark),)


def _decimal_marks(tender: Tender) -> Mapping[str, str]:
    marks = tender.bid_files.decimal_mark_of
    return MappingProxyType({unicodedata.normalize("NFC", name): mark for name, mark in marks.items()})


def _name(file: InputFile) -> str:
    return unicodedata.normalize("NFC", file.path.name)


def _unused_decimal_marks(files: Sequence[InputFile], tender: Tender | None) -> Iterator[Finding]:
    if tender is None:
        return
    linked = (unicodedata.normalize("NFC", PurePath(name).name) for name in linked_names(tender))
    names = {*(_name(file) for file in files), *linked}
    for name in _decimal_marks(tender):
        if name not in names:
            key = f"bids.decimal_mark_of.{name}"
            yield Finding(
                "tender-key-not-used", key, "names no file of this run", Place(tender.rules.place.file, key=key)
            )
