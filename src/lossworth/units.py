"""Units as they come in files, and their factors to the one internal unit of each quantity."""

from __future__ import annotations

from decimal import Decimal

__all__ = [
    "ENERGY_UNITS",
    "LOSS_UNITS",
    "PERCENT_UNITS",
    "RATED_POWER_UNITS",
    "RATE_BASES",
    "TEMPERATURE_UNITS",
    "WEEK_UNITS",
    "factor",
]

#: Losses: factor to kW.
LOSS_UNITS = {"kW": Decimal(1), "W": Decimal("0.001"), "MW": Decimal(1000)}
#: Rated power: factor to kVA.
RATED_POWER_UNITS = {"kVA": Decimal(1), "MVA": Decimal(1000), "VA": Decimal("0.001")}
#: Loss capitalization rates: what a rate is quoted per, and the factor to a rate per kW.
RATE_BASES = {"kW": Decimal(1), "W": Decimal(1000), "0.1 kW": Decimal(10)}
#: Energy: factor to kWh; a price per unit of energy is divided by it.
ENERGY_UNITS = {"kWh": Decimal(1), "MWh": Decimal(1000)}
#: Impedance and efficiency: factor to percent.
PERCENT_UNITS = {"%": Decimal(1), "pu": Decimal(100)}
#: Delivery: factor to weeks.
WEEK_UNITS = {"weeks": Decimal(1)}
#: Temperatures.
TEMPERATURE_UNITS = {"°C": Decimal(1)}


def factor(unit: str, units: dict[str, Decimal]) -> Decimal:
    """Factor from a stated unit to the internal one.

    Parameters
    ----------
    unit : str
        Unit as stated; capitals count, since mW is not MW.
    units : dict of str to Decimal
        One of the tables of this module.

    Returns
    -------
    Decimal
        What a value in this unit is multiplied by.

    Raises
    ------
    KeyError
        If the table does not have the unit.

    Examples
    --------
    >>> str(factor("W", LOSS_UNITS))
    '0.001'
    """
    return units[unit]
