"""Tolerances between the guaranteed and the tested value. They never stand between a guarantee and a limit."""

from __future__ import annotations

from dataclasses import dataclass
from decimal import Decimal

from .exact import decimal_or_none
from .table_file import Row, table

__all__ = ["Tolerance", "tolerance", "tolerances"]

_FILE = "test-tolerances"


@dataclass(frozen=True, kw_only=True)
class Tolerance:
    """What a standard allows between guarantee and test.

    Parameters
    ----------
    standard, quantity : str
        In the words of the table.
    low_percent, high_percent : Decimal or None
        Allowed deviation down and up; None where the standard sets none or leaves it to agreement, as the condition
        says. [%]
    condition, used_by : str
        Of what, when, and by whom.
    source : str
        Documents behind the table, and the clause of this row.
    cautions : tuple of str
        Says where the row is from memory.
    """

    standard: str
    quantity: str
    low_percent: Decimal | None
    high_percent: Decimal | None
    condition: str
    used_by: str
    source: str
    cautions: tuple[str, ...]


def tolerances() -> tuple[Tolerance, ...]:
    """All tolerances.

    Returns
    -------
    tuple of Tolerance
        In the order of the table.
    """
    return tuple(_from_row(row) for row in table(_FILE).rows)


def tolerance(standard: str, quantity: str) -> Tolerance:
    """Tolerance by standard and quantity.

    Parameters
    ----------
    standard, quantity : str
        In the words of the table.

    Returns
    -------
    Tolerance
        The row.

    Raises
    ------
    LookupError
        If the table does not have the pair; the message lists what it has.

    Examples
    --------
    >>> tolerance("IEC 60076-1 Table 1", "total losses").high_percent
    Decimal('10')
    """
    rows = tolerances()
    for row in rows:
        if (row.standard, row.quantity) == (standard, quantity):
            return row
    known = "; ".join(f"{row.standard}: {row.quantity}" for row in rows)
    raise LookupError(f"no tolerance for {standard!r}, {quantity!r}; there are: {known}")


def _from_row(row: Row) -> Tolerance:
    remembered = row["provenance"] == "from memory"
    return Tolerance(
        standard=row["standard"],
        quantity=row["quantity"],
        low_percent=decimal_or_none(row["low_pct"]),
        high_percent=decimal_or_none(row["high_pct"]),
        condition=row["condition"],
        used_by=row["used_by"],
        source=f"{row['standard']} ({table(_FILE).source})",
        cautions=("From memory: check before relying on it.",) if remembered else (),
    )
