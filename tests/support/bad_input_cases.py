"""How a case of bad input is made: a whole tender folder with one fault, and what must be said of it."""

from __future__ import annotations

import zipfile
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from io import BytesIO
from pathlib import Path

from lossworth.findings import KINDS, Effect

from .tender_folders import HEADER, ROWS, TENDER, csv_text, with_cell, write_folder

Told = tuple[str, str, str | None]


@dataclass(frozen=True)
class BadInput:
    """One case.

    Parameters
    ----------
    id : str
        Name of the test.
    make : callable
        Writes the tender folder to a path.
    told : tuple
        Kind, place and value as read of every finding, in the order of reading.
    """

    id: str
    make: Callable[[Path], object]
    told: tuple[Told, ...]

    @property
    def stops(self) -> bool:
        """Whether the evaluation stops and writes no paper; else one offer or more stays unranked, or all is well."""
        return any(KINDS[kind].effect is Effect.STOPS for kind, _, _ in self.told)


def csv_case(id: str, content: str | bytes, *told: Told, name: str = "offers.csv") -> BadInput:
    """Case of one csv file."""
    return BadInput(id, lambda folder: write_folder(folder, bids={name: content}), told)


def xlsx_case(id: str, content: bytes, *told: Told, name: str = "offers.xlsx") -> BadInput:
    """Case of one workbook."""
    return BadInput(id, lambda folder: write_folder(folder, bids={name: content}), told)


def tender_case(id: str, content: str | bytes | None, *told: Told) -> BadInput:
    """Case of a tender file; None for none."""
    return BadInput(id, lambda folder: write_folder(folder, tender=content), told)


def bids_case(id: str, bids: Mapping[str, str | bytes], *told: Told) -> BadInput:
    """Case of several bid files."""
    return BadInput(id, lambda folder: write_folder(folder, bids=bids), told)


def table_with(column: str, value: object, row: int = 0) -> str:
    """Csv table in which one cell is another."""
    return csv_text(rows=with_cell(row, column, value))


def table_headed(old: str, new: str) -> str:
    """Csv table in which one passage, first of the header, reads otherwise."""
    text = csv_text()
    assert old in text
    return text.replace(old, new, 1)


def table_without(column: str) -> str:
    """Csv table without one of its columns."""
    at = HEADER.index(column)
    return csv_text([*HEADER[:at], *HEADER[at + 1 :]], [[*row[:at], *row[at + 1 :]] for row in ROWS])


def tender_with(old: str, new: str) -> str:
    """Tender in which one passage reads otherwise."""
    assert old in TENDER
    return TENDER.replace(old, new, 1)


def zip_bytes(members: Mapping[str, bytes]) -> bytes:
    """Zip file of some members."""
    stream = BytesIO()
    with zipfile.ZipFile(stream, "w", zipfile.ZIP_DEFLATED) as archive:
        for name, content in members.items():
            archive.writestr(zipfile.ZipInfo(name), content, zipfile.ZIP_DEFLATED)  # a time that does not move
    return stream.getvalue()


def random_bytes() -> bytes:
    """Bytes that are no text, the same in every run."""
    return bytes((number * number * 31 + number * 7) % 256 for number in range(4000))
