"""Exact reading of a table between its rows, and checks of the numbers asked with."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import date, datetime
from decimal import Context, Decimal
from fractions import Fraction

from ..units import LOSS_UNITS, factor
from .table_file import Row, table

__all__ = [
    "Reading",
    "as_day",
    "as_decimal",
    "decimal_or_none",
    "fraction_of_kilowatt",
    "measure",
    "read_column",
    "remarks_on",
]

#: A third of a watt has no last digit. Fifty digits are far more than any guarantee is written with, so that the last
#: of them decides no comparison.
_CONTEXT = Context(prec=50)
_RATING = "rated_power_kva"
_SYMBOLS = {"w": "W", "pct": "%"}


@dataclass(frozen=True)
class Reading:
    """One column of a table at one rating.

    Parameters
    ----------
    value : Fraction
        The exact value in the unit of the column.
    text : str
        The row or the two rows that it was read from, with their printed digits.
    rows : tuple of mapping
        These rows: one, or two that it lies between.
    is_below_first : bool
        Whether the rating is below that of the first row.
    """

    value: Fraction
    text: str
    rows: tuple[Row, ...]
    is_below_first: bool


def measure(name: str, value: Decimal, *, unit: str) -> Decimal:
    """Check a number that a look-up is asked with.

    Parameters
    ----------
    name, unit : str
        What the message calls it.
    value : Decimal
        The number.

    Returns
    -------
    Decimal
        The same number.

    Raises
    ------
    ValueError
        If it is no Decimal, not finite, or 0 or less.
    """
    if not isinstance(value, Decimal) or not value.is_finite() or value <= 0:
        raise ValueError(f"{name} must be a finite Decimal above 0 {unit}, got {value!r}")
    return value


def as_day(name: str, value: date) -> date:
    """Calendar day of a date, with or without a time of day.

    Parameters
    ----------
    name : str
        What the message calls it.
    value : date
        Date or datetime.

    Returns
    -------
    date
        The day.

    Raises
    ------
    ValueError
        If it is no date.
    """
    if isinstance(value, datetime):
        return value.date()
    if not isinstance(value, date):
        raise ValueError(f"{name} must be a date, got {value!r}")  # noqa: TRY004  a caller catches one kind of error
    return value


def as_decimal(value: Fraction) -> Decimal:
    """Decimal of a fraction: exact where it ends within 50 digits, else rounded to 50.

    Parameters
    ----------
    value : Fraction
        The exact value.

    Returns
    -------
    Decimal
        The same as a decimal number.

    Examples
    --------
    >>> as_decimal(Fraction(693, 1000))
    Decimal('0.693')
    """
    return _CONTEXT.divide(Decimal(value.numerator), Decimal(value.denominator))


def decimal_or_none(text: str) -> Decimal | None:
    """Value of a cell that may be empty.

    Parameters
    ----------
    text : str
        The cell.

    Returns
    -------
    Decimal or None
        None where the cell is empty.
    """
    return Decimal(text) if text else None


def fraction_of_kilowatt(watts: Fraction) -> Fraction:
    """Loss in kW of a loss in W, exactly.

    Parameters
    ----------
    watts : Fraction
        Loss. [W]

    Returns
    -------
    Fraction
        The same loss. [kW]
    """
    return watts * Fraction(factor("W", LOSS_UNITS))


def read_column(rows: Sequence[Row], column: str, *, rated_power_kva: Decimal, covered: str) -> Reading:
    """Read a column at a rating: linearly between rows, and from the first row below it.

    Parameters
    ----------
    rows : sequence of mapping
        Rows of one table and class, at least one.
    column : str
        Column with its unit as ending, ``_w`` or ``_pct``.
    rated_power_kva : Decimal
        Rating asked for. [kVA]
    covered : str
        What the rows are for, in the message.

    Returns
    -------
    Reading
        Exact value and the rows behind it.

    Raises
    ------
    LookupError
        If the rating is above that of the last row.
    """
    ordered = sorted(rows, key=_rating)
    first, last = ordered[0], ordered[-1]
    if rated_power_kva > _rating(last):
        raise LookupError(f"{covered}: the table ends at {last[_RATING]} kVA, got {rated_power_kva} kVA")
    upper = next(row for row in ordered if rated_power_kva <= _rating(row))
    if upper is first or rated_power_kva == _rating(upper):
        is_below = rated_power_kva < _rating(first)
        text = f"{'at or below ' if upper is first else ''}{_printed(upper, column)}"
        return Reading(Fraction(upper[column]), text, (upper,), is_below_first=is_below)
    lower = ordered[ordered.index(upper) - 1]
    text = f"between {_printed(lower, column)} and {_printed(upper, column)}"
    return Reading(_between(lower, upper, column, rated_power_kva), text, (lower, upper), is_below_first=False)


def remarks_on(table_id: str, column: str, rows: Sequence[Row]) -> tuple[str, ...]:
    """Remarks on the rows that a limit rests on.

    Parameters
    ----------
    table_id : str
        As ``row-remarks.csv`` names the table.
    column : str
        Column that was read.
    rows : sequence of mapping
        Rows that were read.

    Returns
    -------
    tuple of str
        One caution for each remark.
    """
    return tuple(
        f"Table {table_id}, row of {row[_RATING]} kVA: {remark['remark']}."
        for row in rows
        for remark in table("row-remarks").rows
        if remark["table"] == table_id
        and remark["column"] == column
        and all(remark[key] in ("", row.get(key)) for key in ("tier", "phases", "voltage_class", _RATING))
    )


def _rating(row: Row) -> Decimal:
    return Decimal(row[_RATING])


def _printed(row: Row, column: str) -> str:
    return f"{row[_RATING]} kVA: {row[column]} {_SYMBOLS[column.rpartition('_')[2]]}"


def _between(lower: Row, upper: Row, column: str, rated_power_kva: Decimal) -> Fraction:
    x0, x1 = Fraction(lower[_RATING]), Fraction(upper[_RATING])
    y0, y1 = Fraction(lower[column]), Fraction(upper[column])
    return y0 + (y1 - y0) * (Fraction(rated_power_kva) - x0) / (x1 - x0)
