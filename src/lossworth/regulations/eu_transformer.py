"""What the tables of Regulation (EU) No 548/2014 need to know of a transformer, and which tier holds."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date
from decimal import Decimal
from enum import StrEnum

from .exact import as_day, measure
from .table_file import table

__all__ = ["DualVoltage", "Edition", "EuTransformer", "Insulation", "Tier", "tier_for"]

_LARGE_ABOVE_KVA = Decimal(3150)
_LARGE_ABOVE_UM_KV = Decimal(36)


class Insulation(StrEnum):
    """What insulates the windings."""

    LIQUID_IMMERSED = "liquid-immersed"
    DRY_TYPE = "dry-type"


class DualVoltage(StrEnum):
    """The cases of Table I.3b, in its words."""

    REDUCED_OUTPUT_ON_LOWER_LV = "dual voltage on one winding, reduced output on lower LV (<= 0.85 of rated)"
    REDUCED_OUTPUT_ON_LOWER_HV = "dual voltage on one winding, reduced output on lower HV (<= 0.85 of rated)"
    FULL_POWER_ON_BOTH = "dual voltage on one winding, full rated power on both"
    BOTH_WINDINGS = "dual voltage on both windings, rated power on all combinations"


class Edition(StrEnum):
    """Text of the voltage factors. The superseded one is for old tenders and must be asked for."""

    AMENDED_2019 = "as amended by Regulation (EU) 2019/1783"
    SUPERSEDED_2014 = "superseded text of 2014"


@dataclass(frozen=True, kw_only=True)
class EuTransformer:
    """A three-phase transformer of 50 Hz.

    Parameters
    ----------
    insulation : Insulation
        Liquid-immersed or dry-type.
    rated_power_kva : Decimal
        Rated power; the top rating of a unit with several cooling stages. [kVA]
    phases : int
        3; the tables do not cover single-phase units.
    higher_um_kv, lower_um_kv : Decimal
        Highest voltage for equipment Um of the winding of the higher and of the lower voltage. [kV]
    is_pole_mounted_replacement : bool
        One-to-one replacement of a pole-mounted liquid-immersed unit: Table I.6.
    has_on_load_tap_changer : bool
        Tappings for operation while energized, on-load tap-changer, or voltage regulation transformer: point 1.3.
    dual_voltage : DualVoltage, optional
        Case of Table I.3b; None where no winding has two voltages.

    Raises
    ------
    ValueError
        If a number is out of its bounds, the voltages are interchanged, or a dry-type unit is pole-mounted.
    LookupError
        If the unit is single-phase.
    """

    insulation: Insulation
    rated_power_kva: Decimal
    phases: int
    higher_um_kv: Decimal
    lower_um_kv: Decimal
    is_pole_mounted_replacement: bool = False
    has_on_load_tap_changer: bool = False
    dual_voltage: DualVoltage | None = None

    def __post_init__(self) -> None:
        Insulation(self.insulation)
        if self.dual_voltage is not None:
            DualVoltage(self.dual_voltage)
        measure("rated_power_kva", self.rated_power_kva, unit="kVA")
        measure("higher_um_kv", self.higher_um_kv, unit="kV")
        measure("lower_um_kv", self.lower_um_kv, unit="kV")
        if self.lower_um_kv > self.higher_um_kv:
            raise ValueError(f"lower_um_kv {self.lower_um_kv} kV exceeds higher_um_kv {self.higher_um_kv} kV")
        if self.is_pole_mounted_replacement and self.insulation == Insulation.DRY_TYPE:
            raise ValueError("Table I.6 is for pole-mounted liquid-immersed transformers, got a dry-type one")
        if self.phases == 1:
            raise LookupError("the tables of Regulation (EU) No 548/2014 kept here do not cover single-phase units")
        if self.phases != 3:
            raise ValueError(f"phases must be 1 or 3, got {self.phases!r}")

    @property
    def is_large(self) -> bool:
        """Whether it is a large power transformer: above 3150 kVA or Um above 36 kV.

        Such a unit has a minimum peak efficiency index, every other one maximum losses.
        """
        return self.rated_power_kva > _LARGE_ABOVE_KVA or self.higher_um_kv > _LARGE_ABOVE_UM_KV


@dataclass(frozen=True)
class Tier:
    """A tier of the regulation.

    Parameters
    ----------
    number : int
        1 or 2.
    effective_from : date
        First day.
    effective_to : date or None
        Last day; None where the tier is still in force.
    """

    number: int
    effective_from: date
    effective_to: date | None


def tier_for(*, tier: int | None = None, on: date | None = None) -> Tier:
    """Tier by its number or by a date, exactly one of them.

    Parameters
    ----------
    tier : int, optional
        1 or 2.
    on : date, optional
        Day of placing on the market or putting into service.

    Returns
    -------
    Tier
        The tier with its dates.

    Raises
    ------
    ValueError
        If neither or both are given.
    LookupError
        If there is no such tier, or none was in force on the day.

    Examples
    --------
    >>> tier_for(on=date(2021, 6, 30)).number
    1
    """
    if (tier is None) == (on is None):
        raise ValueError("exactly one of tier and on (a date) must be given")
    day = None if on is None else as_day("on", on)
    for found in _tiers():
        if found.number == tier or (day is not None and _holds(found, day)):
            return found
    asked = f"tier {tier}" if day is None else f"tier in force on {day}"
    known = ", ".join(f"tier {found.number} from {found.effective_from}" for found in _tiers())
    raise LookupError(f"Regulation (EU) No 548/2014 has no {asked}; there are: {known}")


def _holds(tier: Tier, day: date) -> bool:
    return tier.effective_from <= day and (tier.effective_to is None or day <= tier.effective_to)


def _tiers() -> tuple[Tier, ...]:
    return tuple(
        Tier(
            int(row["tier"]),
            date.fromisoformat(row["effective_from"]),
            date.fromisoformat(row["effective_to"]) if row["effective_to"] else None,
        )
        for row in table("eu-548-2014-tiers").rows
    )
