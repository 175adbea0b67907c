"""The one table of a csv file: UTF-8, comma or semicolon as the header has it, every row as long as the header."""

from __future__ import annotations

import csv
import io
from collections.abc import Callable, Iterable, Iterator
from dataclasses import dataclass, replace
from typing import Literal

from ..findings import Finding, Place
from .cells import text_cell
from .file_bytes import MEGABYTE, utf8_text
from .sheet import MOST_COLUMNS, MOST_ROWS, Row, Sheet

__all__ = ["LARGEST_CSV", "LONGEST_LINE", "CsvKind", "read_csv_table"]

#: Greatest size of a csv file. [byte]
LARGEST_CSV = 16 * MEGABYTE

_MARKS: tuple[Literal[",", ";"], ...] = (";", ",")
#: Bound of one line, which no row of so few columns needs. [character]
LONGEST_LINE = 256 * 1024
#: A decimal comma without quotes makes every row too long; ten of them say it.
_MOST_WRONG_ROWS = 10


@dataclass(frozen=True, slots=True)
class CsvKind:
    """What a csv file should hold.

    Parameters
    ----------
    example : str
        A header row, for findings.
    recognized : callable
        Columns that some header texts name; two of them make a header.
    header_missing : str
        Slug of the finding where there is no header.
    most_rows : int
        Bound of the rows.
    """

    example: str
    recognized: Callable[[Iterable[str]], set[str]]
    header_missing: str
    most_rows: int = MOST_ROWS


def read_csv_table(data: bytes, shown_as: str, kind: CsvKind) -> tuple[Sheet | None, tuple[Finding, ...]]:
    """Table of a csv file.

    Parameters
    ----------
    data : bytes
        The file.
    shown_as : str
        Its name in findings.
    kind : CsvKind
        What it should hold.

    Returns
    -------
    sheet : Sheet or None
        Header and rows that are as long as it; None where there is no table.
    findings : tuple of Finding
        What keeps the file, or a row of it, from being read.
    """
    text = utf8_text(data, shown_as)
    if isinstance(text, Finding):
        return None, (text,)
    try:
        mark = _separator(text, shown_as, kind)
    except OverflowError as error:
        return None, (Finding("file-too-large", "file", str(error), Place(shown_as)),)
    if isinstance(mark, Finding):
        return None, (mark,)
    rows: list[Row] = []
    findings: list[Finding] = []
    wrong = 0
    try:
        for row in _bounded(_records(text, mark), kind.most_rows):
            if not rows or len(row.cells) == len(rows[0].cells):
                rows.append(row)
                continue
            wrong += 1
            if wrong <= _MOST_WRONG_ROWS + 1:
                findings.append(_wrong_length(rows[0], row, shown_as, mark))
    except csv.Error as error:
        rule = f"must have every quotation mark closed, and no cell beyond all measure ({error})"
        findings.append(Finding("file-unreadable", "file", rule, Place(shown_as, line=_last_line(rows) + 1)))
    except OverflowError as error:
        findings.append(Finding("file-too-large", "file", str(error), Place(shown_as)))
    if wrong > _MOST_WRONG_ROWS:
        last = findings[_MOST_WRONG_ROWS]
        rule = f"{last.rule}; so in {wrong - _MOST_WRONG_ROWS:,} rows from here on"
        findings[_MOST_WRONG_ROWS] = replace(last, rule=rule)
    return (Sheet(shown_as, None, tuple(rows)) if rows else None), tuple(findings)


def _separator(text: str, shown_as: str, kind: CsvKind) -> Literal[",", ";"] | Finding:
    """Separating mark by the header alone: the one by which more of its columns are known."""
    known = {mark: len(kind.recognized(_header(text, mark))) for mark in _MARKS}
    best = max(_MARKS, key=lambda mark: known[mark])
    if known[best] >= 2:
        return best
    line, header = next(((n, h) for n, h in enumerate(text.split("\n"), start=1) if h.strip()), (1, ""))
    rule = f"must have a header row with its columns separated by commas or semicolons, such as: {kind.example}"
    if "\t" in header:
        rule = "must have its columns separated by commas or semicolons, not by tabs"
    return Finding(kind.header_missing, "header", rule, Place(shown_as, line=line), header.strip())


def _header(text: str, mark: str) -> list[str]:
    """Texts of the first record that is not blank, however many; none where the quotation marks are wrong."""
    try:
        records = csv.reader(_lines(text), delimiter=mark, strict=True)
        return next((texts for record in records if any(texts := [cell.strip() for cell in record])), [])
    except csv.Error:
        return []


def _records(text: str, mark: str) -> Iterator[Row]:
    reader = csv.reader(_lines(text), delimiter=mark, strict=True)
    line = 1
    for record in reader:
        if len(record) > MOST_COLUMNS:  # before a cell is made of each
            raise OverflowError(f"must have at most {MOST_COLUMNS} columns; line {reader.line_num:,} has more")
        row = Row(line, tuple(map(text_cell, record)))
        line = reader.line_num + 1
        if not row.is_blank:
            yield row


def _lines(text: str) -> Iterator[str]:
    """Lines of a bounded length, before they are taken apart."""
    for line in io.StringIO(text, newline=""):
        if len(line) > LONGEST_LINE:
            raise OverflowError(f"must have at most {LONGEST_LINE:,} characters in a line")
        yield line


def _bounded(rows: Iterator[Row], most_rows: int) -> Iterator[Row]:
    for number, row in enumerate(rows):
        if number > most_rows:
            raise OverflowError(f"must have at most {most_rows:,} rows")
        yield row


def _wrong_length(header: Row, row: Row, shown_as: str, mark: str) -> Finding:
    rule = f"must have {len(header.cells)} cells as the header has"
    fix = ""
    if mark == "," and len(row.cells) > len(header.cells):
        fix = "Put numbers with a decimal comma, and text with a comma, into quotes; or separate columns by semicolons."
    got = f"{len(row.cells)} cells: {f'{mark} '.join(cell.text for cell in row.cells)}"
    return Finding("row-length", "row", rule, Place(shown_as, line=row.number), got, fix=fix)


def _last_line(rows: list[Row]) -> int:
    return rows[-1].number if rows else 0
