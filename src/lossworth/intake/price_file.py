"""Energy prices over time: csv files in, a price for each step of a year or for each year out."""

from __future__ import annotations

import hashlib
import re
from collections.abc import Sequence
from decimal import Decimal
from types import MappingProxyType

from ..findings import Finding, Place
from ..records.profile import PriceSeries
from ..records.quantity import Quantity
from ..units import ENERGY_UNITS
from .calendar_year import Clock
from .cells import Marks
from .file_findings import FileFindings
from .profile_file import question_peak
from .series_table import SeriesKind, SeriesTable, read_series_table, read_values
from .step_order import Mark, check_order
from .time_grid import DayWeights, read_grid

__all__ = ["read_price_series", "read_prices_by_year"]

_YEAR = re.compile(r"[0-9]{1,4}")
_FIX_NEGATIVE = (
    "A price below 0 in some hours is for the buyer to decide on before the tender is published, for instance as 0; "
    "write the price that the tender announces."
)


def _kind(currency: str, *axes: tuple[str, ...]) -> SeriesKind:
    prices = {f"{currency}/{unit}": (f"{currency}/kWh", 1 / factor) for unit, factor in ENERGY_UNITS.items()}
    return SeriesKind("price", axes, MappingProxyType(prices))


def read_price_series(
    data: bytes, file: str, marks: Sequence[Marks], clock: Clock, currency: str, place: Place
) -> tuple[PriceSeries | None, tuple[Finding, ...]]:
    """Energy price of each step of a year.

    Parameters
    ----------
    data : bytes
        The file.
    file : str
        Its path relative to the tender's folder.
    marks : sequence of Marks
        How numbers stand in it.
    clock : Clock
        The clock behind its time stamps.
    currency : str
        Evaluation currency, in which the prices must be.
    place : Place
        The key that names the file.

    Returns
    -------
    series : PriceSeries or None
        None where something is wrong with it: nothing is filled in.
    findings : tuple of Finding
        What is wrong, and remarks.
    """
    findings = FileFindings(file)
    table = read_series_table(data, _kind(currency, ("time",), ("step",)), findings)
    if table is None:
        return None, findings.found
    values = list(read_values(table, marks, findings))
    reading = read_grid(table, findings, clock, DayWeights(None, place))
    prices = _prices(table, values, findings)
    if reading.grid is None or prices is None:
        return None, findings.found
    question_peak(table, prices, findings)
    for remark in reading.remarks:
        findings.add("profile-remark", "price series", remark)
    series = PriceSeries(
        file=file,
        prices_per_kwh=tuple(prices),
        grid=reading.grid,
        remarks=reading.remarks,
        sha256=hashlib.sha256(data).hexdigest(),
        place=place,
    )
    return series, findings.found


def _prices(table: SeriesTable, values: Sequence[Decimal | None], findings: FileFindings) -> list[float] | None:
    _check_not_negative(table, values, findings)
    if any(value is None or value < 0 for value in values) or not values:
        return None
    prices = [float(value) for value in values if value is not None]
    if not any(prices):
        findings.add("profile-value", "price", "must be above 0 in a step", None, f"0 in all {len(prices):,} steps")
        return None
    return prices


def _check_not_negative(table: SeriesTable, values: Sequence[Decimal | None], findings: FileFindings) -> None:
    for row, value in zip(table.rows, values, strict=True):
        if value is not None and value < 0:
            text, header = table.text(row, "price"), table.header("price")
            findings.add(
                "profile-value", "price", "must not be negative", row.number, text, column=header, fix=_FIX_NEGATIVE
            )


def read_prices_by_year(
    data: bytes, file: str, marks: Sequence[Marks], currency: str
) -> tuple[tuple[Quantity, ...] | None, tuple[Finding, ...]]:
    """Energy price of each year of the evaluation period.

    Parameters
    ----------
    data : bytes
        The file, with columns year and price; years count from 1.
    file : str
        Its path relative to the tender's folder.
    marks : sequence of Marks
        How numbers stand in it.
    currency : str
        Evaluation currency, in which the prices must be.

    Returns
    -------
    prices : tuple of Quantity or None
        One for each year, with its line; None where something is wrong with them. [currency/kWh]
    findings : tuple of Finding
        What is wrong.
    """
    findings = FileFindings(file)
    table = read_series_table(data, _kind(currency, ("year",)), findings)
    if table is None:
        return None, findings.found
    values = list(read_values(table, marks, findings))
    _check_not_negative(table, values, findings)
    _check_years(table, findings)
    if any(kind in findings for kind in _STOP) or not table.complete:
        return None, findings.found
    header = table.header("price")
    prices = tuple(
        Quantity(
            value=value,
            stated=value / table.times,
            unit=table.stated_unit,
            text=table.text(row, "price"),
            place=Place(file, line=row.number, column=header),
        )
        for row, value in zip(table.rows, values, strict=True)
        if value is not None
    )
    return prices, findings.found


_STOP = ("profile-value", "profile-value-missing", "profile-time", "profile-gap", "profile-step-twice", "profile-order")


def _check_years(table: SeriesTable, findings: FileFindings) -> None:
    marks = []
    for row in table.rows:
        text = table.text(row, "year")
        if _YEAR.fullmatch(text):
            marks.append(Mark(row.number, text, int(text)))
        else:
            findings.add("profile-time", "year", "must be a whole number", row.number, text, fix=_FIX_YEARS)
    if marks and marks[0].at != 1:
        findings.add("profile-time", "first year", "must be 1", marks[0].line, marks[0].text, fix=_FIX_YEARS)
    if len(marks) == len(table.rows):
        check_order(marks, 1, "year", findings)


_FIX_YEARS = "Number the years of the evaluation period 1, 2, 3 ..., the first year of service being 1."
