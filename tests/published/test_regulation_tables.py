"""Every row of the regulation tables: a guarantee at the limit passes, one unit of the last digit beyond it fails.

Sources: Commission Regulation (EU) No 548/2014 as amended by Regulation (EU) 2019/1783, Annex I, Tables I.1, I.2, I.3,
I.6 to I.9; 10 CFR 431.196 (as published 89 FR 30040, 22 April 2024). Rows are read here by the csv reader alone.
"""

from __future__ import annotations

import hashlib
import itertools
from dataclasses import replace
from datetime import date, timedelta
from decimal import Decimal
from fractions import Fraction

import pytest

from lossworth.regulations.eu_losses import check_maximum_losses, maximum_losses
from lossworth.regulations.eu_peak_efficiency import check_peak_efficiency_index, minimum_peak_efficiency_index
from lossworth.regulations.eu_transformer import DualVoltage, Edition, EuTransformer, Insulation
from lossworth.regulations.us_efficiency import UsEquipment, check_minimum_efficiency, minimum_efficiency
from support.regulation_rows import (
    DATA,
    INDEX_TABLES,
    LOSS_TABLES,
    US_TABLES,
    Row,
    eu_unit,
    grouped,
    loss_rows,
    raw_rows,
    unit_of_index_table,
    unit_of_loss_table,
    unit_of_us_row,
    us_unit,
)

#: Far less than any rounding would keep.
HAIR = Decimal("1e-20")
LOSSES = loss_rows()
INDEXES = raw_rows(INDEX_TABLES)
EFFICIENCIES = raw_rows(US_TABLES)
LOSS_GROUPS = grouped(LOSSES, "table", "tier")
INDEX_GROUPS = grouped(INDEXES, "table", "tier")
US_GROUPS = grouped(EFFICIENCIES, "table", "phases", "voltage_class")
#: Every increase with each loss table that it names.
INCREASES = [
    {**row, "loss_table": table}
    for row in raw_rows("eu-548-2014-table-I3-voltage-factors")
    for table in LOSS_TABLES
    if table in row["applies_to"]
]
#: SHA-256 of each file, first 16 digits.
FINGERPRINTS = {
    "eu-548-2014-table-I1-liquid-medium": "0a9227ee6b48404b",
    "eu-548-2014-table-I2-dry-medium": "6a57fd56a145cbb8",
    "eu-548-2014-table-I3-voltage-factors": "055653efadd4f4c7",
    "eu-548-2014-table-I6-pole-mounted-replacement": "1664758fc0665ab7",
    "eu-548-2014-tables-I7-I9-peak-efficiency": "99be4c1a60fcf0b7",
    "eu-548-2014-tiers": "917d8a976274b3cd",
    "plausible-loss-bands": "9f1862a206a5b2e4",
    "reference-temperatures": "4f9174929d3b5bdc",
    "row-remarks": "f63684338c305f38",
    "test-tolerances": "c4ae76b8e5ea988b",
    "us-10cfr431-196-minimum-efficiency": "6dcd09f61c75b94e",
}


def name_of(value: Row | list[Row]) -> str:
    """A row or a group of rows in the name of a test."""
    row = value[0] if isinstance(value, list) else value
    parts = (row.get(key, "") for key in ("table", "tier", "phases", "voltage_class"))
    return "-".join(part for part in (*parts, "" if isinstance(value, list) else row["rated_power_kva"]) if part)


def rating(row: Row) -> Decimal:
    """Rated power of a row."""
    return Decimal(row["rated_power_kva"])


def halfway(lower: Row, upper: Row, column: str) -> tuple[Decimal, Fraction]:
    """Rating halfway between two rows, and the mean of their values."""
    return (rating(lower) + rating(upper)) / 2, (Fraction(lower[column]) + Fraction(upper[column])) / 2


# The files


def test_files__are_unchanged() -> None:
    """A corrected value belongs under "Changed results" of the changelog; then its fingerprint changes here."""
    assert {
        path.stem: hashlib.sha256(path.read_bytes()).hexdigest()[:16] for path in sorted(DATA.glob("*.csv"))
    } == FINGERPRINTS


def test_files__have_the_rows_of_the_regulations() -> None:
    """Numbers of rows: 16, 13 and 7 a tier; 34, 5 and 26 a tier; 360 of the United States in 30 classes."""
    assert [len(group) for group in LOSS_GROUPS] == [16, 16, 13, 13, 7, 7]
    assert [len(group) for group in INDEX_GROUPS] == [34, 34, 5, 5, 26, 26]
    assert (len(EFFICIENCIES), len(US_GROUPS)) == (360, 30)


def test_maximum_losses__known_values() -> None:
    """Table I.1, tier 2: 693 W and 7600 W at 1000 kVA; Table I.2, tier 1: 3800 W and 22,000 W at 3150 kVA."""
    wet = maximum_losses(eu_unit(), tier=2)
    dry = maximum_losses(eu_unit(insulation=Insulation.DRY_TYPE, rated_power_kva=Decimal(3150)), tier=1)
    assert [Decimal("0.693"), Decimal("7.6")] == [wet.no_load_loss.value, wet.load_loss.value]
    assert [Decimal("3.8"), Decimal(22)] == [dry.no_load_loss.value, dry.load_loss.value]


def test_minimum_values__known_values() -> None:
    """Table I.7, tier 2: 99.712 % at 31.5 MVA. 10 CFR 431.196: 99.35 % at 500 kVA, 99.38 % from 2029-04-23."""
    index = minimum_peak_efficiency_index(eu_unit(rated_power_kva=Decimal(31500)), tier=2)
    efficiencies = [
        minimum_efficiency(us_unit(), manufactured=day).value for day in (date(2029, 4, 22), date(2029, 4, 23))
    ]
    assert Decimal("99.712") == index.value
    assert [Decimal("99.35"), Decimal("99.38")] == efficiencies


# European Union, maximum losses


@pytest.mark.parametrize("row", LOSSES, ids=name_of)
def test_check_maximum_losses__every_row(row: Row) -> None:
    """At the limit both losses pass; one watt more, or a hair, fails for that loss alone."""
    unit, tier = unit_of_loss_table(row["table"], rating(row)), int(row["tier"])
    no_load, load = (Decimal(row[name]) / 1000 for name in ("no_load_loss_w", "load_loss_w"))

    def kept(more_no_load: Decimal, more_load: Decimal) -> list[bool]:
        checks = check_maximum_losses(
            unit, no_load_loss_kw=no_load + more_no_load, load_loss_kw=load + more_load, tier=tier
        )
        assert [(row["table"], "maximum", "kW")] * 2 == [(c.limit.table, c.limit.bound, c.limit.unit) for c in checks]
        return [check.is_kept for check in checks]

    nothing, watt = Decimal(0), Decimal("0.001")
    assert [True, True] == kept(nothing, nothing) == kept(-watt, -watt)
    assert [False, True] == kept(watt, nothing) == kept(HAIR, nothing)
    assert [True, False] == kept(nothing, watt) == kept(nothing, HAIR)


@pytest.mark.parametrize("group", LOSS_GROUPS, ids=name_of)
def test_maximum_losses__between_below_and_above(group: list[Row]) -> None:
    """Halfway between rows the mean, below the first row the first, above the last nothing."""
    table, tier = group[0]["table"], int(group[0]["tier"])
    for column in ("no_load_loss_w", "load_loss_w"):
        for lower, upper in itertools.pairwise(group):
            middle, mean = halfway(lower, upper, column)
            limit = getattr(maximum_losses(unit_of_loss_table(table, middle), tier=tier), column.removesuffix("_w"))
            assert mean / 1000 == Fraction(limit.value)
        small = maximum_losses(unit_of_loss_table(table, rating(group[0]) / 2), tier=tier)
        first = Decimal(group[0][column]) / 1000
        assert first == getattr(small, column.removesuffix("_w")).value
    above = "large power transformer" if rating(group[-1]) == 3150 else "ends at 315 kVA"
    with pytest.raises(LookupError, match=above):
        maximum_losses(unit_of_loss_table(table, rating(group[-1]) + 1), tier=tier)


@pytest.mark.parametrize("row", INCREASES, ids=lambda row: f"{row['table']}-{row['loss_table']}-{row['case']}")
def test_maximum_losses__every_increase(row: Row) -> None:
    """Each increase raises the limits of the tables that it names; the raised limit is kept, a hair above is not."""
    tier = 1 if row["case"].endswith("Tier 1") else 2
    plain = maximum_losses(unit_of_loss_table(row["loss_table"], Decimal(250)), tier=tier)
    limits = maximum_losses(unit_of_increase(row), tier=tier, edition=edition_of(row))
    for name in ("no_load_loss", "load_loss"):
        raised = getattr(plain, name).value * (100 + Decimal(row[f"{name}_increase_pct"])) / 100
        limit = getattr(limits, name)
        assert [limit.is_kept_by(raised), limit.is_kept_by(raised + HAIR)] == [True, False]
        assert f"({row['table']}: {row['case']})" in limit.row
        assert ("inferred" in row["provenance"]) is any("inferred" in caution for caution in limit.cautions)
        assert ("superseded" in row["provenance"]) is any("superseded" in caution for caution in limit.cautions)


def edition_of(row: Row) -> Edition:
    """The text in which an increase stands."""
    return Edition.SUPERSEDED_2014 if "SUPERSEDED" in row["table"] else Edition.AMENDED_2019


def unit_of_increase(row: Row) -> EuTransformer:
    """A 250 kVA unit that an increase is for, at the bounds of its voltages."""
    plain = unit_of_loss_table(row["loss_table"], Decimal(250))
    if row["table"] == "1.3":
        return replace(plain, has_on_load_tap_changer=True)
    if row["table"] == "I.3b":
        return replace(plain, dual_voltage=DualVoltage(row["case"]))
    first, _, second = row["case"].partition(", ")
    bound = Decimal(second.split()[-2])
    lower = bound + HAIR if ">" in second else bound
    return replace(plain, higher_um_kv=Decimal(first.split()[-2]), lower_um_kv=lower)


# European Union, minimum peak efficiency index


@pytest.mark.parametrize("row", INDEXES, ids=name_of)
def test_check_peak_efficiency_index__every_row(row: Row) -> None:
    """At the limit an index passes; one unit of the last digit less, or a hair, fails."""
    unit, limit = unit_of_index_table(row["table"], rating(row)), Decimal(row["peak_efficiency_index_pct"])
    values = (limit, limit + Decimal("0.001"), limit - Decimal("0.001"), limit - HAIR)
    checks = [check_peak_efficiency_index(unit, value, tier=int(row["tier"])) for value in values]
    assert [check.is_kept for check in checks] == [True, True, False, False]
    assert {(row["table"], "minimum", "%")} == {(c.limit.table, c.limit.bound, c.limit.unit) for c in checks}


@pytest.mark.parametrize("group", INDEX_GROUPS, ids=name_of)
def test_minimum_peak_efficiency_index__between_below_and_above(group: list[Row]) -> None:
    """Halfway between rows the mean, below the first row the first, above the last nothing."""
    table, tier, column = group[0]["table"], int(group[0]["tier"]), "peak_efficiency_index_pct"
    for lower, upper in itertools.pairwise(group):
        middle, mean = halfway(lower, upper, column)
        limit = minimum_peak_efficiency_index(unit_of_index_table(table, middle), tier=tier)
        assert mean == Fraction(limit.value)
    # a dry-type unit up to Um = 36 kV is large above 3150 kVA alone
    small = Decimal("3150.1") if table == "I.8" else rating(group[0]) / 2
    first = minimum_peak_efficiency_index(unit_of_index_table(table, small), tier=tier)
    assert Decimal(group[0][column]) == first.value
    with pytest.raises(LookupError, match=f"ends at {group[-1]['rated_power_kva']} kVA"):
        minimum_peak_efficiency_index(unit_of_index_table(table, rating(group[-1]) + 1), tier=tier)


def test_eu_table_7_from_table_1() -> None:
    """The 32 indexes up to 3.15 MVA follow from the maximum losses at 36 kV through PEI = 1 - 2 sqrt(P0 Pk) / Sr."""
    differences = []
    for row in LOSS_GROUPS[0] + LOSS_GROUPS[1]:
        tier, power = int(row["tier"]), rating(row)
        limits = maximum_losses(eu_unit(rated_power_kva=power, higher_um_kv=Decimal(36)), tier=tier)
        index = 100 - 200 * (limits.no_load_loss.value * limits.load_loss.value).sqrt() / power
        printed = minimum_peak_efficiency_index(unit_of_index_table("I.7", power), tier=tier)
        differences.append(abs(index - printed.value))
    assert len(differences) == 32
    assert max(differences) <= Decimal("0.00075")


# United States


@pytest.mark.parametrize("row", EFFICIENCIES, ids=name_of)
def test_check_minimum_efficiency__every_row(row: Row) -> None:
    """On the first and the last day, at the limit an efficiency passes; one unit of the last digit less fails."""
    unit, limit = unit_of_us_row(row, rating(row)), Decimal(row["efficiency_pct"])
    values = (limit, limit + Decimal("0.01"), limit - Decimal("0.01"), limit - HAIR)
    for day in (row["effective_from"], row["effective_to"] or "2040-01-01"):
        checks = [
            check_minimum_efficiency(unit, value, power_base="output", manufactured=date.fromisoformat(day))
            for value in values
        ]
        assert [check.is_kept for check in checks] == [True, True, False, False]
        assert {row["table"]} == {check.limit.table for check in checks}


@pytest.mark.parametrize("group", US_GROUPS, ids=name_of)
def test_minimum_efficiency__between_below_and_above(group: list[Row]) -> None:
    """Halfway between rows the mean, below the first row the first with a caution, above the last nothing."""
    day = date.fromisoformat(group[0]["effective_from"])
    for lower, upper in itertools.pairwise(group):
        middle, mean = halfway(lower, upper, "efficiency_pct")
        assert mean == Fraction(minimum_efficiency(unit_of_us_row(lower, middle), manufactured=day).value)
    small = minimum_efficiency(unit_of_us_row(group[0], rating(group[0]) / 2), manufactured=day)
    assert Decimal(group[0]["efficiency_pct"]) == small.value
    assert any("below the first row" in caution for caution in small.cautions)
    with pytest.raises(LookupError, match=f"ends at {group[-1]['rated_power_kva']} kVA"):
        minimum_efficiency(unit_of_us_row(group[0], rating(group[-1]) + 1), manufactured=day)


@pytest.mark.parametrize("group", US_GROUPS, ids=name_of)
def test_minimum_efficiency__point_of_the_limit(group: list[Row]) -> None:
    """Load, temperatures and power base stand in the result: 35 % and 75 °C, 50 % and 55 °C, 50 % and 75 °C."""
    row = group[0]
    expected = {"US_LV": (35, 75), "US_LI": (50, 55), "US_SU": (50, 55), "US_MV": (50, 75)}[row["table"][:5]]
    limit = minimum_efficiency(unit_of_us_row(row, rating(row)), manufactured=date.fromisoformat(row["effective_from"]))
    assert expected == (limit.load_percent, limit.load_loss_temperature_c)
    assert (limit.no_load_loss_temperature_c, limit.power_base) == (20, "output")


@pytest.mark.parametrize("equipment", UsEquipment)
def test_minimum_efficiency__no_gap_between_tables(equipment: UsEquipment) -> None:
    """From its first day on every class has a table; the day before has none."""
    first = date(2016, 1, 1) if equipment == UsEquipment.LOW_VOLTAGE_DRY_TYPE else date(2010, 1, 1)
    unit = us_unit(equipment=equipment, bil_kv=Decimal(95), input_voltage_kv=Decimal("0.48"))
    days = (first, date(2015, 12, 31), date(2016, 1, 1), date(2029, 4, 22), date(2029, 4, 23), date(2040, 1, 1))
    limits = [minimum_efficiency(unit, manufactured=day) for day in days if day >= first]
    assert all(a.in_force_to is None or b.in_force_from >= a.in_force_from for a, b in itertools.pairwise(limits))
    with pytest.raises(LookupError, match=f"begin on {first}"):
        minimum_efficiency(unit, manufactured=first - timedelta(days=1))
