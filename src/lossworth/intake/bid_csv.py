"""The one table of offers of a csv file."""

from __future__ import annotations

from ..findings import Finding
from .csv_table import LARGEST_CSV, CsvKind, read_csv_table
from .sheet import Sheet
from .table_header import recognized_columns

__all__ = ["LARGEST_CSV", "read_csv"]

_OFFERS = CsvKind("lot, bidder, unit price, no-load loss [kW], load loss [kW]", recognized_columns, "header-missing")


def read_csv(data: bytes, shown_as: str) -> tuple[Sheet | None, tuple[Finding, ...]]:
    """Table of offers of a csv file.

    Parameters
    ----------
    data : bytes
        The file.
    shown_as : str
        Its name in findings.

    Returns
    -------
    sheet : Sheet or None
        Header and rows that are as long as it; None where there is no table.
    findings : tuple of Finding
        What keeps the file, or a row of it, from being read.
    """
    return read_csv_table(data, shown_as, _OFFERS)
