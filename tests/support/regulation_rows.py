"""Rows of the regulation tables read without the package's loader, and units valid by default that change one thing."""

from __future__ import annotations

import csv
import re
from collections import defaultdict
from decimal import Decimal
from pathlib import Path
from typing import Any

import lossworth.regulations
from lossworth.regulations.eu_transformer import EuTransformer, Insulation
from lossworth.regulations.us_efficiency import UsEquipment, UsTransformer

DATA = Path(lossworth.regulations.__file__).parent / "data"
LOSS_TABLES = {
    "I.1": "eu-548-2014-table-I1-liquid-medium",
    "I.2": "eu-548-2014-table-I2-dry-medium",
    "I.6": "eu-548-2014-table-I6-pole-mounted-replacement",
}
INDEX_TABLES = "eu-548-2014-tables-I7-I9-peak-efficiency"
US_TABLES = "us-10cfr431-196-minimum-efficiency"

Row = dict[str, str]


def raw_rows(name: str) -> list[Row]:
    """Rows of a table file, by the csv reader alone."""
    lines = (DATA / f"{name}.csv").read_text(encoding="utf-8").splitlines()
    return list(csv.DictReader(line for line in lines if not line.startswith("#")))


def grouped(rows: list[Row], *keys: str) -> list[list[Row]]:
    """Rows of one class each, in the order of the ratings."""
    groups = defaultdict(list)
    for row in rows:
        groups[tuple(row[key] for key in keys)].append(row)
    return [sorted(group, key=lambda row: Decimal(row["rated_power_kva"])) for group in groups.values()]


def loss_rows() -> list[Row]:
    """Rows of all loss tables, each with its table."""
    return [{"table": table, **row} for table, name in LOSS_TABLES.items() for row in raw_rows(name)]


def eu_unit(**changes: Any) -> EuTransformer:
    """A 1000 kVA liquid-immersed unit, 11/0.4 kV."""
    values: dict[str, Any] = {
        "insulation": Insulation.LIQUID_IMMERSED,
        "rated_power_kva": Decimal(1000),
        "phases": 3,
        "higher_um_kv": Decimal(12),
        "lower_um_kv": Decimal("1.1"),
    }
    return EuTransformer(**{**values, **changes})


def us_unit(**changes: Any) -> UsTransformer:
    """A 500 kVA liquid-immersed unit, 12.47/0.48 kV."""
    values: dict[str, Any] = {
        "equipment": UsEquipment.LIQUID_IMMERSED,
        "rated_power_kva": Decimal(500),
        "phases": 3,
        "input_voltage_kv": Decimal("12.47"),
        "output_voltage_kv": Decimal("0.48"),
    }
    return UsTransformer(**{**values, **changes})


def unit_of_loss_table(table: str, rated_power_kva: Decimal) -> EuTransformer:
    """A unit for which a loss table holds as it stands."""
    return eu_unit(
        insulation=Insulation.DRY_TYPE if table == "I.2" else Insulation.LIQUID_IMMERSED,
        rated_power_kva=rated_power_kva,
        is_pole_mounted_replacement=table == "I.6",
    )


def unit_of_index_table(table: str, rated_power_kva: Decimal) -> EuTransformer:
    """A large power transformer of a table of indexes."""
    return eu_unit(
        insulation=Insulation.LIQUID_IMMERSED if table == "I.7" else Insulation.DRY_TYPE,
        rated_power_kva=rated_power_kva,
        higher_um_kv=Decimal(36) if table == "I.8" else Decimal("72.5"),
    )


def unit_of_us_row(row: Row, rated_power_kva: Decimal) -> UsTransformer:
    """A unit of the class of a row."""
    equipment = {
        "US_LVDT": UsEquipment.LOW_VOLTAGE_DRY_TYPE,
        "US_LIQ": UsEquipment.LIQUID_IMMERSED,
        "US_SUBM": UsEquipment.SUBMERSIBLE,
        "US_MVDT": UsEquipment.MEDIUM_VOLTAGE_DRY_TYPE,
    }[row["table"].rpartition("_")[0]]
    level = re.search(r"BIL \D*(\d+)", row["voltage_class"])
    return us_unit(
        equipment=equipment,
        rated_power_kva=rated_power_kva,
        phases=int(row["phases"]),
        bil_kv=Decimal(level.group(1)) if level else None,
        input_voltage_kv=Decimal("0.48") if equipment == UsEquipment.LOW_VOLTAGE_DRY_TYPE else Decimal("12.47"),
    )
