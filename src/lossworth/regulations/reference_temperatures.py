"""Reference temperatures of no-load and load loss by standard."""

from __future__ import annotations

from dataclasses import dataclass
from decimal import Decimal

from .table_file import Row, table

__all__ = ["ReferenceTemperature", "reference_temperature", "reference_temperatures"]

_FILE = "reference-temperatures"


@dataclass(frozen=True, kw_only=True)
class ReferenceTemperature:
    """Temperatures to which a standard refers the losses.

    Parameters
    ----------
    standard, equipment : str
        In the words of the table.
    no_load_loss_c : Decimal or None
        Temperature of the no-load loss; None where it counts as measured. [°C]
    load_loss_c : Decimal
        Temperature of the load loss. [°C]
    rule : str
        Rule behind the number; may be empty.
    source : str
        The standard.
    cautions : tuple of str
        Says where the row is from memory.
    """

    standard: str
    equipment: str
    no_load_loss_c: Decimal | None
    load_loss_c: Decimal
    rule: str
    source: str
    cautions: tuple[str, ...]


def reference_temperatures() -> tuple[ReferenceTemperature, ...]:
    """All reference temperatures.

    Returns
    -------
    tuple of ReferenceTemperature
        In the order of the table.
    """
    return tuple(_from_row(row) for row in table(_FILE).rows)


def reference_temperature(standard: str, equipment: str) -> ReferenceTemperature:
    """Reference temperature by standard and equipment.

    Parameters
    ----------
    standard, equipment : str
        In the words of the table.

    Returns
    -------
    ReferenceTemperature
        The row.

    Raises
    ------
    LookupError
        If the table does not have the pair; the message lists what it has.

    Examples
    --------
    >>> reference_temperature("IEC 60076-1", "liquid-immersed").load_loss_c
    Decimal('75')
    """
    rows = reference_temperatures()
    for row in rows:
        if (row.standard, row.equipment) == (standard, equipment):
            return row
    known = "; ".join(f"{row.standard}: {row.equipment}" for row in rows)
    raise LookupError(f"no reference temperature for {standard!r}, {equipment!r}; there are: {known}")


def _from_row(row: Row) -> ReferenceTemperature:
    measured = row["no_load_c"].startswith("as measured")
    remembered = row["provenance"] == "from memory"
    return ReferenceTemperature(
        standard=row["standard"],
        equipment=row["equipment"],
        no_load_loss_c=None if measured else Decimal(row["no_load_c"]),
        load_loss_c=Decimal(row["load_loss_c"]),
        rule=row["rule"],
        source=row["standard"],
        cautions=("From memory: check before relying on it.",) if remembered else (),
    )
