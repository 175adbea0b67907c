"""Minimum efficiency of distribution transformers in the United States: 10 CFR 431.196."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass
from datetime import date
from decimal import Decimal
from enum import StrEnum
from typing import Literal

from .exact import Reading, as_day, as_decimal, measure, read_column, remarks_on
from .limits import Check, Limit, check_guarantee
from .table_file import Row, table

__all__ = ["EfficiencyLimit", "UsEquipment", "UsTransformer", "check_minimum_efficiency", "minimum_efficiency"]

PowerBase = Literal["input", "output"]

_FILE = "us-10cfr431-196-minimum-efficiency"
_COLUMN = "efficiency_pct"
#: Highest input and output voltage of a class, in kV, as the class says in words.
_VOLTAGES = {
    "<=600 V": (Decimal("0.6"), None),
    "<=34.5 kV in, <=600 V out, 60 Hz": (Decimal("34.5"), Decimal("0.6")),
}


class UsEquipment(StrEnum):
    """Classes of equipment."""

    LIQUID_IMMERSED = "liquid-immersed"
    SUBMERSIBLE = "submersible liquid-immersed"
    LOW_VOLTAGE_DRY_TYPE = "low-voltage dry-type"
    MEDIUM_VOLTAGE_DRY_TYPE = "medium-voltage dry-type"


@dataclass(frozen=True, kw_only=True)
class UsTransformer:
    """A distribution transformer of 60 Hz.

    Parameters
    ----------
    equipment : UsEquipment
        Class; a submersible unit is one of its own from 2029-04-23.
    rated_power_kva : Decimal
        Rated power. [kVA]
    phases : int
        1 or 3.
    bil_kv : Decimal, optional
        Basic impulse insulation level; needed for medium-voltage dry-type units, and used for them alone. [kV]
    input_voltage_kv, output_voltage_kv : Decimal, optional
        Rated voltages; where one is absent, a caution says that it was not checked. [kV]

    Raises
    ------
    ValueError
        If a number is out of its bounds, or the insulation level of a medium-voltage dry-type unit is absent.
    """

    equipment: UsEquipment
    rated_power_kva: Decimal
    phases: int
    bil_kv: Decimal | None = None
    input_voltage_kv: Decimal | None = None
    output_voltage_kv: Decimal | None = None

    def __post_init__(self) -> None:
        UsEquipment(self.equipment)
        measure("rated_power_kva", self.rated_power_kva, unit="kVA")
        for name in ("bil_kv", "input_voltage_kv", "output_voltage_kv"):
            if getattr(self, name) is not None:
                measure(name, getattr(self, name), unit="kV")
        if self.phases not in (1, 3):
            raise ValueError(f"phases must be 1 or 3, got {self.phases!r}")
        if self.equipment == UsEquipment.MEDIUM_VOLTAGE_DRY_TYPE and self.bil_kv is None:
            raise ValueError("bil_kv must be given: the tables of medium-voltage dry-type units differ by it")


@dataclass(frozen=True, kw_only=True)
class EfficiencyLimit(Limit):
    """A minimum efficiency with the point at which it holds.

    Parameters
    ----------
    load_percent : Decimal
        Load. [% of rated power]
    no_load_loss_temperature_c, load_loss_temperature_c : Decimal
        Temperatures to which the losses are referred. [°C]
    power_base : {"output"}
        Efficiency is output over input, that is output/(output + losses), at unity power factor.
    """

    load_percent: Decimal
    no_load_loss_temperature_c: Decimal
    load_loss_temperature_c: Decimal
    power_base: Literal["output"] = "output"


def minimum_efficiency(unit: UsTransformer, *, manufactured: date) -> EfficiencyLimit:
    """Minimum efficiency of a distribution transformer.

    Parameters
    ----------
    unit : UsTransformer
        The unit.
    manufactured : date
        Date of manufacture; it alone picks the table.

    Returns
    -------
    EfficiencyLimit
        With table, row, source, dates, cautions, load point, temperatures and power base. [percent]

    Raises
    ------
    ValueError
        If the date is none.
    LookupError
        If no table holds for the date, or the voltages, the insulation level or the rating are not covered.

    Notes
    -----
    Linear between rows; the first row at and below its rating.

    References
    ----------
    .. [1] 10 CFR 431.196 (as published 89 FR 30040, 22 April 2024); test points from Subpart K, Appendix A.

    Examples
    --------
    >>> unit = UsTransformer(equipment=UsEquipment.LIQUID_IMMERSED, rated_power_kva=Decimal(500), phases=3)
    >>> minimum_efficiency(unit, manufactured=date(2026, 1, 1)).value
    Decimal('99.35')
    """
    day = as_day("manufactured", manufactured)
    rows = _rows_for(unit, day)
    first = rows[0]
    covered = f"Table {first['table']}, {unit.phases}-phase, {first['voltage_class']}"
    reading = read_column(rows, _COLUMN, rated_power_kva=unit.rated_power_kva, covered=covered)
    efficiencies = table(_FILE)
    return EfficiencyLimit(
        quantity="efficiency",
        bound="minimum",
        value=as_decimal(reading.value),
        unit="%",
        table=first["table"],
        row=f"{first['equipment']}, {unit.phases}-phase, {first['voltage_class']}, {reading.text}",
        source=efficiencies.source,
        in_force_from=date.fromisoformat(first["effective_from"]),
        in_force_to=date.fromisoformat(first["effective_to"]) if first["effective_to"] else None,
        note=efficiencies.note,
        cautions=(*_cautions(unit, first, reading), *remarks_on(first["table"], _COLUMN, reading.rows)),
        load_percent=Decimal(first["load_pct"]),
        no_load_loss_temperature_c=Decimal(20),  # the note of the table
        load_loss_temperature_c=Decimal(first["load_loss_temperature_c"]),
    )


def check_minimum_efficiency(
    unit: UsTransformer, efficiency_percent: Decimal, *, power_base: PowerBase, manufactured: date
) -> Check:
    """Hold a declared efficiency against the minimum one; unrounded, with zero tolerance.

    Parameters
    ----------
    unit : UsTransformer
        The unit.
    efficiency_percent : Decimal
        Declared efficiency at the load and the temperatures of the limit. [percent]
    power_base : {"input", "output"}
        What the declared efficiency refers to; only "output" may be compared.
    manufactured : date
        Date of manufacture.

    Returns
    -------
    Check
        Limit (an EfficiencyLimit), efficiency, and whether the limit is kept.

    Raises
    ------
    ValueError
        If the efficiency has another power base, is negative, above 100 or not finite.
    LookupError
        As for `minimum_efficiency`.
    """
    if power_base != "output":
        raise ValueError(f"power_base must be output: 10 CFR 431.196 is output/(output + losses), got {power_base!r}")
    return check_guarantee(minimum_efficiency(unit, manufactured=manufactured), efficiency_percent)


def _rows_for(unit: UsTransformer, day: date) -> list[Row]:
    """Rows of the one table, number of phases and voltage class."""
    of_equipment = [row for row in table(_FILE).rows if _is_of(row["equipment"], unit.equipment)]
    rows = [row for row in of_equipment if row["effective_from"] <= day.isoformat() <= (row["effective_to"] or "9999")]
    if not rows:
        earliest = min(row["effective_from"] for row in of_equipment)
        raise LookupError(f"10 CFR 431.196, {unit.equipment}: the tables begin on {earliest}, got {day}")
    covered = f"Table {rows[0]['table']}"
    rows = [row for row in rows if row["phases"] == str(unit.phases) and _is_in_class(unit, row["voltage_class"])]
    if not rows:
        raise LookupError(f"{covered}, {unit.phases}-phase: no class for a BIL of {unit.bil_kv} kV")
    _refuse_voltages(unit, covered, rows[0]["voltage_class"])
    return rows


def _is_of(text: str, equipment: UsEquipment) -> bool:
    """Whether the words of a row mean the equipment; a submersible unit was a liquid-immersed one before 2029."""
    if equipment == UsEquipment.SUBMERSIBLE:
        return text.startswith("submersible") or (text.startswith("liquid-immersed") and "not submersible" not in text)
    return text.startswith(str(equipment))


def _is_in_class(unit: UsTransformer, voltage_class: str) -> bool:
    match = re.fullmatch(r"BIL (?:>=(\d+)|(\d+)-(\d+)) kV", voltage_class)
    if match is None or unit.bil_kv is None:
        return match is None
    open_ended, low, high = match.groups()
    if open_ended:
        return unit.bil_kv >= Decimal(open_ended)
    return Decimal(low) <= unit.bil_kv <= Decimal(high)


def _voltages(unit: UsTransformer, voltage_class: str) -> Sequence[tuple[str, Decimal | None, Decimal]]:
    """Side, stated voltage and highest voltage of the class, where the class has one."""
    highest_in, highest_out = _VOLTAGES.get(voltage_class, (None, None))
    sides = (("input", unit.input_voltage_kv, highest_in), ("output", unit.output_voltage_kv, highest_out))
    return [(side, stated, highest) for side, stated, highest in sides if highest is not None]


def _refuse_voltages(unit: UsTransformer, covered: str, voltage_class: str) -> None:
    for side, stated, highest in _voltages(unit, voltage_class):
        if stated is not None and stated > highest:
            raise LookupError(f"{covered} covers {voltage_class}, got an {side} voltage of {stated} kV")


def _cautions(unit: UsTransformer, row: Row, reading: Reading) -> tuple[str, ...]:
    found = [
        f"Table {row['table']} covers an {side} voltage of at most {highest} kV; it is not stated and was not checked."
        for side, stated, highest in _voltages(unit, row["voltage_class"])
        if stated is None
    ]
    if unit.equipment == UsEquipment.SUBMERSIBLE and "submersible" not in row["equipment"]:
        found.append(f"Table {row['table']} does not name submersible units; its liquid-immersed class was used.")
    if reading.is_below_first:
        found.append(
            f"The rating is below the first row of Table {row['table']}, which was used: the regulation may not cover "
            "so small a unit (10 CFR 431.192, from memory)."
        )
    return tuple(found)
