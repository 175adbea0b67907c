"""Units and their factors."""

from decimal import Decimal

import pytest

from lossworth.units import LOSS_UNITS, PERCENT_UNITS, RATE_BASES, RATED_POWER_UNITS, WEEK_UNITS, factor

TABLES = [LOSS_UNITS, RATED_POWER_UNITS, RATE_BASES, PERCENT_UNITS, WEEK_UNITS]


def test_factor__watts_to_kilowatts() -> None:
    """58 W are 0.058 kW, exactly."""
    assert Decimal("0.058") == 58 * factor("W", LOSS_UNITS)


@pytest.mark.parametrize(("per", "expected"), [("kW", "61"), ("W", "61000"), ("0.1 kW", "610")])
def test_factor__a_rate_per_part_of_a_kilowatt(per: str, expected: str) -> None:
    """61 per 0.1 kW are 610 per kW, as in US Comptroller General decision B-147715 (1961)."""
    assert Decimal(expected) == 61 * factor(per, RATE_BASES)


@pytest.mark.parametrize("table", TABLES)
def test_tables__hold_the_internal_unit_with_factor_1(table: dict[str, Decimal]) -> None:
    """Every table has exactly one internal unit, and every factor is above zero."""
    assert list(table.values()).count(Decimal(1)) == 1
    assert all(value > 0 for value in table.values())


@pytest.mark.parametrize("unit", ["kw", "mW", "KW", "", "MVA"])
def test_factor__unknown_unit(unit: str) -> None:
    """Capitals count: a milliwatt is not a megawatt."""
    with pytest.raises(KeyError):
        factor(unit, LOSS_UNITS)
