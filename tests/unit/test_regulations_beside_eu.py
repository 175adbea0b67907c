"""Look-ups beside those of the European Union: United States, reference temperatures, tolerances, plausible losses."""

from __future__ import annotations

from collections.abc import Callable
from datetime import date
from decimal import Decimal
from typing import Any

import pytest

from lossworth.regulations.eu_losses import check_maximum_losses
from lossworth.regulations.eu_peak_efficiency import check_peak_efficiency_index
from lossworth.regulations.eu_transformer import Insulation
from lossworth.regulations.plausible_losses import plausible_losses
from lossworth.regulations.reference_temperatures import reference_temperature, reference_temperatures
from lossworth.regulations.table_file import table
from lossworth.regulations.tolerances import tolerance, tolerances
from lossworth.regulations.us_efficiency import UsEquipment, check_minimum_efficiency, minimum_efficiency
from support.regulation_rows import US_TABLES, eu_unit, raw_rows, us_unit

DAY = date(2026, 1, 1)
D = Decimal


# United States


@pytest.mark.parametrize(
    ("changes", "error", "message"),
    [
        ({"phases": 2}, ValueError, "phases"),
        ({"rated_power_kva": D(-1)}, ValueError, "rated_power_kva"),
        ({"equipment": "furnace"}, ValueError, "furnace"),
        ({"equipment": UsEquipment.MEDIUM_VOLTAGE_DRY_TYPE}, ValueError, "bil_kv must be given"),
        ({"equipment": UsEquipment.MEDIUM_VOLTAGE_DRY_TYPE, "bil_kv": D(10)}, LookupError, "BIL of 10 kV"),
        ({"equipment": UsEquipment.MEDIUM_VOLTAGE_DRY_TYPE, "bil_kv": D("45.5")}, LookupError, "BIL of 45.5 kV"),
        ({"input_voltage_kv": D("34.6")}, LookupError, "input voltage of 34.6 kV"),
        ({"output_voltage_kv": D("4.16")}, LookupError, "output voltage of 4.16 kV"),
        ({"equipment": UsEquipment.LOW_VOLTAGE_DRY_TYPE}, LookupError, "input voltage of 12.47 kV"),
        ({"rated_power_kva": D("1E+999999")}, LookupError, "ends at 2500 kVA"),
    ],
)
def test_minimum_efficiency__refuses(changes: dict[str, Any], error: type[Exception], message: str) -> None:
    """What the tables do not cover, and numbers that are none."""
    with pytest.raises(error, match=message):
        minimum_efficiency(us_unit(**changes), manufactured=DAY)


@pytest.mark.parametrize(
    ("bil_kv", "expected"), [(20, "99.28"), (45, "99.28"), (46, "99.20"), (95, "99.20"), (96, "99.11")]
)
def test_minimum_efficiency__class_by_insulation_level(bil_kv: int, expected: str) -> None:
    """Medium-voltage dry-type, 1000 kVA, three-phase, 2016 to 2029."""
    unit = us_unit(equipment=UsEquipment.MEDIUM_VOLTAGE_DRY_TYPE, rated_power_kva=D(1000), bil_kv=D(bil_kv))
    assert D(expected) == minimum_efficiency(unit, manufactured=DAY).value


@pytest.mark.parametrize(("day", "expected"), [("2029-04-22", "US_LIQ_2016"), ("2029-04-23", "US_SUBM_2029")])
def test_minimum_efficiency__submersible(day: str, expected: str) -> None:
    """A class of its own from 2029-04-23; the table of 2010 does not name it, which is a caution."""
    unit = us_unit(equipment=UsEquipment.SUBMERSIBLE)
    limit = minimum_efficiency(unit, manufactured=date.fromisoformat(day))
    assert (expected, ()) == (limit.table, limit.cautions)
    assert "does not name submersible" in minimum_efficiency(unit, manufactured=date(2012, 1, 1)).cautions[0]


def test_minimum_efficiency__voltages_not_stated() -> None:
    """A voltage that is not stated was not checked, and the result says so."""
    cautions = minimum_efficiency(us_unit(input_voltage_kv=None), manufactured=DAY).cautions
    assert ["input voltage of at most 34.5 kV" in caution for caution in cautions] == [True]


def test_minimum_efficiency__no_load_temperature_is_that_of_the_test_procedure() -> None:
    """20 °C stands in the note of the table and in the table of reference temperatures."""
    limit = minimum_efficiency(us_unit(), manufactured=DAY)
    row = reference_temperature("10 CFR 431 App. A", "liquid-immersed (at 50 % load)")
    assert (limit.no_load_loss_temperature_c, limit.load_loss_temperature_c) == (row.no_load_loss_c, row.load_loss_c)
    assert "no-load loss at 20 C" in table(US_TABLES).note


def test_check_minimum_efficiency__refuses_another_power_base() -> None:
    """An efficiency of input power is never compared."""
    with pytest.raises(ValueError, match="power_base must be output"):
        check_minimum_efficiency(us_unit(), D("99.5"), power_base="input", manufactured=DAY)


@pytest.mark.parametrize("value", [D("NaN"), D("sNaN"), D("Infinity"), D("-0.1"), D("100.1"), 99.5])
@pytest.mark.parametrize(
    "check",
    [
        lambda value: check_minimum_efficiency(us_unit(), value, power_base="output", manufactured=DAY),
        lambda value: check_peak_efficiency_index(eu_unit(rated_power_kva=D(5000)), value, tier=2),
    ],
)
def test_checks__refuse_what_is_no_percentage(check: Callable[[Any], Any], value: Any) -> None:
    """No number, or one below 0 or above 100 %."""
    with pytest.raises(ValueError, match="at most 100 %"):
        check(value)


@pytest.mark.parametrize("value", [D("NaN"), D("Infinity"), D("-0.1"), 0.6])
def test_check_maximum_losses__refuses_what_is_no_loss(value: Any) -> None:
    """No number, or a negative one."""
    with pytest.raises(ValueError, match="load loss must be a Decimal of at least 0 kW"):
        check_maximum_losses(eu_unit(), no_load_loss_kw=D("0.6"), load_loss_kw=value, tier=2)


# Reference temperatures, tolerances, plausible losses


def test_reference_temperature__typed_and_with_caution() -> None:
    """As measured is None; a row from memory says so."""
    iec = reference_temperature("IEC 60076-1", "liquid-immersed")
    ieee = reference_temperature("IEEE C57.12.00/.90", "liquid-immersed, 65 K average winding rise")
    assert (iec.no_load_loss_c, iec.load_loss_c, len(iec.cautions)) == (None, D(75), 1)
    assert (ieee.no_load_loss_c, ieee.load_loss_c, ieee.cautions) == (D(20), D(85), ())
    assert len(reference_temperatures()) == 12
    with pytest.raises(LookupError, match="there are: IEC 60076-1: liquid-immersed; "):
        reference_temperature("IEC 60076-1", "dry-type")


def test_tolerance__typed_and_with_caution() -> None:
    """10 % on the total, 15 % on a component only while the total keeps its 10 % (IEC 60076-1, Table 1)."""
    iec = "IEC 60076-1 Table 1"
    total, part = tolerance(iec, "total losses"), tolerance(iec, "each component loss (P0 or Pk)")
    assert (total.low_percent, total.high_percent, total.cautions) == (None, D(10), ())
    assert (part.high_percent, part.condition) == (D(15), "only if total-loss tolerance (+10 %) is also met")
    assert tolerance(iec, "no-load current").cautions != ()
    assert len(tolerances()) == len(raw_rows("test-tolerances")) == 20
    with pytest.raises(LookupError, match="total losses"):
        tolerance(iec, "sound level")


@pytest.mark.parametrize(
    ("loss_kw", "expected"),
    [
        ("0.243", "inside"),
        ("1.925", "inside"),
        ("0.242999", "outside the soft band"),
        ("1.925001", "outside the soft band"),
        ("0.069", "outside the soft band"),
        ("7.7", "outside the soft band"),
        ("0.068999", "outside the hard band"),
        ("7.700001", "outside the hard band"),
        ("0", "outside the hard band"),
        ("693", "outside the hard band"),
    ],
)
def test_plausible_losses__position(loss_kw: str, expected: str) -> None:
    """No-load loss of a liquid-immersed 1000 kVA unit, at the bounds of the bands and a hair beyond."""
    bands = plausible_losses(Insulation.LIQUID_IMMERSED, rated_power_kva=D(1000), phases=3)
    assert expected == bands.no_load_loss.position_of(D(loss_kw))


def test_plausible_losses__every_row_and_between() -> None:
    """The four bounds of both bands at each row; halfway between two rows their mean."""
    for row in raw_rows("plausible-loss-bands"):
        kind = next(kind for kind in Insulation if row["equipment"].startswith(kind))
        bands = plausible_losses(kind, rated_power_kva=D(row["rated_power_kva"]), phases=3)
        for loss, band in (("no_load", bands.no_load_loss), ("load", bands.load_loss)):
            names = ("soft_low", "soft_high", "hard_low", "hard_high")
            assert [D(row[f"{loss}_{name}_w"]) / 1000 for name in names] == [
                getattr(band, f"{name}_kw") for name in names
            ]
    bands = plausible_losses(Insulation.DRY_TYPE, rated_power_kva=D(900), phases=3)
    assert (bands.load_loss.soft_low_kw, bands.row) == (D("5.1"), "dry-type, 800 kVA and 1000 kVA")


@pytest.mark.parametrize(
    ("power", "phases", "message"),
    [("24", 3, "begins at 25 kVA"), ("3151", 3, "ends at 3150 kVA"), ("100", 1, "three-phase")],
)
def test_plausible_losses__not_covered(power: str, phases: int, message: str) -> None:
    """Beyond the rows, and single-phase."""
    with pytest.raises(LookupError, match=message):
        plausible_losses(Insulation.LIQUID_IMMERSED, rated_power_kva=D(power), phases=phases)


def test_position_of__refuses_what_is_no_number() -> None:
    """A loss that is no number has no position."""
    bands = plausible_losses(Insulation.DRY_TYPE, rated_power_kva=D(100), phases=3)
    with pytest.raises(ValueError, match="finite"):
        bands.load_loss.position_of(D("NaN"))
