"""Every key of the tender file: how its value reads, its unit, and the record's field that it fills."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from decimal import Decimal
from enum import Enum, auto
from types import MappingProxyType

from ..money import RoundingMode
from ..records.tender import PriceOfYear1, RoundingPoint, Timing
from ..units import LOSS_UNITS, RATE_BASES, RATED_POWER_UNITS, factor

__all__ = ["TABLES", "Key", "Reads", "key_of_field"]


class Reads(Enum):
    """What a value must be."""

    NUMBER = auto()
    POWER_OF_TEN = auto()
    NUMBERS = auto()
    TEXT = auto()
    NAME = auto()  # a text that the record holds without its place
    WORD = auto()
    DATE = auto()


@dataclass(frozen=True, slots=True)
class Key:
    """One key of one table.

    Parameters
    ----------
    name : str
        As it stands in the file.
    reads : Reads
        What its value must be.
    unit : str
        Unit of a number; ``{currency}`` stands for the evaluation currency.
    field : str
        Field of the record, where it has another name.
    times : Decimal
        Factor to the unit of the field.
    words : tuple of str
        The texts allowed.
    """

    name: str
    reads: Reads = Reads.NUMBER
    unit: str = "1"
    field: str = ""
    times: Decimal = Decimal(1)
    words: tuple[str, ...] = ()

    @property
    def fills(self) -> str:
        """Field of the record."""
        return self.field or self.name


def _text(name: str) -> Key:
    return Key(name, Reads.TEXT)


def _word(name: str, *words: str) -> Key:
    return Key(name, Reads.WORD, words=words)


_DERIVATION = (_text("economics"), _text("loading"), Key("round_rates_to", Reads.POWER_OF_TEN, "{currency}/kW"))

#: By table; a table of the file that others stand in has a dot: ``lot.rates``.
TABLES: Mapping[str, tuple[Key, ...]] = MappingProxyType(
    {
        "tender": (
            _text("reference"),
            _text("title"),
            _text("buyer"),
            _text("currency"),
            Key("opening_date", Reads.DATE),
            _text("remark"),
        ),
        "rules": (
            Key("round_money_to", Reads.POWER_OF_TEN, "{currency}"),
            _word("rounding", *RoundingMode),
            _word("rounding_applies_to", *RoundingPoint),
        ),
        "bids": (_word("decimal_mark", ".", ","), _word("thousands_mark", "", ".", ",", "'", " ")),
        "exchange": (_text("source"), _text("kind"), Key("date", Reads.DATE), _text("evidence")),
        "economics": (
            Key("energy_price_per_kwh", unit="{currency}/kWh"),
            Key("energy_price_by_year_per_kwh", Reads.NUMBERS, unit="{currency}/kWh"),
            Key("energy_price_escalation_percent", unit="%/year"),
            _word("energy_price_meaning", *PriceOfYear1),
            Key("demand_charge_per_kw_year", unit="{currency}/(kW year)"),
            Key("demand_charge_escalation_percent", unit="%/year"),
            Key("discount_rate_percent", unit="%/year"),
            Key("evaluation_period_years", unit="years"),
            _word("timing", *Timing),
            Key("upstream_gross_up"),
            _text("source"),
        ),
        "loading": (
            Key("load_factor"),
            Key("loss_factor_coefficient"),
            Key("loss_factor"),
            Key("peak_load_pu"),
            Key("peak_load_growth_percent", unit="%/year"),
            Key("peak_load_cap_pu"),
            Key("peak_responsibility_factor"),
            Key("hours_energized", unit="h/year"),
            Key("cooling_hours", unit="h/year"),
            Key("cooling_share_at_peak"),
            _text("source"),
        ),
        "lot": (
            Key("id", Reads.NAME),
            _text("description"),
            Key("rated_power_kva", unit="kVA"),
            Key("rated_power_mva", unit="MVA", field="rated_power_kva", times=factor("MVA", RATED_POWER_UNITS)),
            Key("quantity", unit="units"),
            _text("cooling"),
            Key("maximum_no_load_loss_kw", unit="kW"),
            Key("maximum_no_load_loss_w", unit="W", field="maximum_no_load_loss_kw", times=factor("W", LOSS_UNITS)),
            Key("maximum_load_loss_kw", unit="kW"),
            Key("maximum_load_loss_w", unit="W", field="maximum_load_loss_kw", times=factor("W", LOSS_UNITS)),
            Key("minimum_peak_efficiency_index_percent", unit="%"),
            Key("impedance_percent", unit="%"),
            Key("impedance_tolerance_percentage_points", unit="percentage points"),
            Key("latest_delivery_weeks", unit="weeks"),
        ),
        "lot.rates": (
            Key("no_load", unit="{currency}/{per}"),
            Key("load", unit="{currency}/{per}"),
            Key("auxiliary", unit="{currency}/{per}"),
            _word("per", *RATE_BASES),
            _text("source"),
        ),
        "lot.derivation": _DERIVATION,
        "lot.study": _DERIVATION,
    }
)


def key_of_field(table: str, field: str) -> str:
    """Key, or the alternatives, by which a field of the record is given.

    Parameters
    ----------
    table : str
        Table of the file.
    field : str
        Field of the record.

    Returns
    -------
    str
        ``"rated_power_kva (or rated_power_mva)"``; the field's own name where no key fills it.
    """
    names = [key.name for key in TABLES.get(table, ()) if key.fills == field]
    if not names:
        return field
    return names[0] if len(names) == 1 else f"{names[0]} (or {', '.join(names[1:])})"
