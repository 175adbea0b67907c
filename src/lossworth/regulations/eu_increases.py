"""Increases of the EU loss limits: other voltages, dual voltages, tappings for operation while energized."""

from __future__ import annotations

import re
from dataclasses import dataclass
from decimal import Decimal

from .eu_transformer import Edition, EuTransformer
from .table_file import Row, table

__all__ = ["INCREASES", "Increase", "increases"]

#: Name of the table file.
INCREASES = "eu-548-2014-table-I3-voltage-factors"

_LOWEST_UM_KV, _MIDDLE_UM_KV, _HIGHEST_UM_KV = Decimal("1.1"), Decimal(24), Decimal(36)
_SUPERSEDED = "I.3_SUPERSEDED_2014"


@dataclass(frozen=True)
class Increase:
    """One row that raises the limits of a loss table.

    Parameters
    ----------
    table : str
        "I.3a", "I.3b", "1.3" or the superseded table.
    case : str
        The row in its words.
    no_load_loss_percent, load_loss_percent : Decimal
        Increase of the limits. [% of the level in the loss table]
    cautions : tuple of str
        Doubts about the row.
    """

    table: str
    case: str
    no_load_loss_percent: Decimal
    load_loss_percent: Decimal
    cautions: tuple[str, ...] = ()


def increases(unit: EuTransformer, loss_table: str, *, tier: int, edition: Edition) -> tuple[Increase, ...]:
    """All increases that a unit has, those of 0 % included.

    Parameters
    ----------
    unit : EuTransformer
        A unit that is not large.
    loss_table : str
        "I.1", "I.2" or "I.6".
    tier : int
        1 or 2.
    edition : Edition
        Text of the voltage factors.

    Returns
    -------
    tuple of Increase
        For the voltages, for two voltages on a winding, for tappings; empty where nothing applies.

    Raises
    ------
    LookupError
        If the voltages, or the case in this edition, are not covered.
    """
    name, case = _voltage_case(unit, edition)
    found = [] if case is None else [_increase(name, case, loss_table)]
    if unit.dual_voltage is not None:
        if edition == Edition.SUPERSEDED_2014:
            raise LookupError("dual voltage: the superseded text of 2014 is kept here without factors for it")
        found.append(_increase("I.3b", str(unit.dual_voltage), loss_table))
    if unit.has_on_load_tap_changer:
        found.append(_tap_changer_increase(loss_table, tier))
    return tuple(found)


def _voltage_case(unit: EuTransformer, edition: Edition) -> tuple[str, str | None]:
    """Table and row for the voltages; no row where the loss table holds as it stands."""
    higher, lower = unit.higher_um_kv, unit.lower_um_kv
    if higher <= _LOWEST_UM_KV or (higher > _MIDDLE_UM_KV and higher != _HIGHEST_UM_KV):
        raise LookupError(f"the loss tables cover 1.1 kV < Um <= 24 kV and Um = 36 kV, got Um = {higher} kV")
    if edition == Edition.SUPERSEDED_2014:
        side = "other Um > 1.1 kV" if lower > _LOWEST_UM_KV else "other Um <= 1.1 kV"
        band = "one winding Um = 36 kV" if higher == _HIGHEST_UM_KV else "one winding Um <= 24 kV"
        is_plain = higher <= _MIDDLE_UM_KV and lower <= _LOWEST_UM_KV
        return _SUPERSEDED, None if is_plain else f"{band}, {side}"
    side = "secondary Um > 3.6 kV" if lower > Decimal("3.6") else "secondary Um <= 3.6 kV"
    band = "primary Um = 36 kV" if higher == _HIGHEST_UM_KV else "primary Um <= 24 kV"
    is_plain = higher <= _MIDDLE_UM_KV and lower <= Decimal("3.6")
    return "I.3a", None if is_plain else f"{band}, {side}"


def _increase(name: str, case: str, loss_table: str) -> Increase:
    for row in table(INCREASES).rows:
        if row["table"] == name and row["case"] == case and loss_table in _applies_to(row):
            return Increase(
                name,
                case,
                Decimal(row["no_load_loss_increase_pct"]),
                Decimal(row["load_loss_increase_pct"]),
                _cautions(row),
            )
    raise LookupError(f"Table {name} has no increase of Table {loss_table} for: {case}")


def _tap_changer_increase(loss_table: str, tier: int) -> Increase:
    (case,) = (
        row["case"] for row in table(INCREASES).rows if row["table"] == "1.3" and row["case"].endswith(f"Tier {tier}")
    )
    try:
        return _increase("1.3", case, loss_table)
    except LookupError:
        caution = f"Point 1.3 raises Tables I.1 and I.2 only: no allowance for tappings in Table {loss_table}."
        return Increase("1.3", case, Decimal(0), Decimal(0), (caution,))


def _applies_to(row: Row) -> list[str]:
    return re.findall(r"I\.\d", row["applies_to"])


def _cautions(row: Row) -> tuple[str, ...]:
    if "inferred" not in row["provenance"]:
        return ()
    return (
        f"Table {row['table']}, {row['case']}: the pairing of this row with its percentages is inferred; "
        "check the printed table before relying on it.",
    )
