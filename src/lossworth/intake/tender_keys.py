"""Every key of the tender file: how its value reads, its unit, and the record's field that it fills."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from decimal import Decimal
from enum import Enum, auto
from types import MappingProxyType
from typing import get_args

from ..money import RoundingMode
from ..records.commercial import Incoterm
from ..records.rules import RULE_KINDS
from ..records.tender import (
    CoolingValuation,
    Method,
    PresentValueDate,
    PriceOfYear1,
    RoundingPoint,
    Timing,
)
from ..units import LOSS_UNITS, RATE_BASES, RATED_POWER_UNITS, factor

__all__ = ["CLOCKS", "DAYLIGHT_SAVING", "INSIDE", "TABLES", "Inside", "Key", "Reads", "key_of_field"]

DAYLIGHT_SAVING = "local time with daylight saving"
CLOCKS = ("standard time", DAYLIGHT_SAVING)


class Reads(Enum):
    """What a value must be."""

    NUMBER = auto()
    ONE_OF_NUMBERS = auto()  # a whole number that the record holds as such
    POWER_OF_TEN = auto()
    NUMBERS = auto()
    TEXT = auto()
    NAME = auto()  # a text that the record holds without its place
    NAMES = auto()
    WORD = auto()
    WORDS = auto()
    DATE = auto()
    TIME = auto()
    MONTHS = auto()
    FLAG = auto()
    FILE = auto()


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
    numbers : tuple of int
        The whole numbers allowed.
    for_reading : bool
        Whether it says how a file is to be read, and fills no field of a record.
    """

    name: str
    reads: Reads = Reads.NUMBER
    unit: str = "1"
    field: str = ""
    times: Decimal = Decimal(1)
    words: tuple[str, ...] = ()
    numbers: tuple[int, ...] = ()
    for_reading: bool = False

    @property
    def fills(self) -> str:
        """Field of the record."""
        return self.field or self.name


@dataclass(frozen=True, slots=True)
class Inside:
    """A table that stands in another one.

    Parameters
    ----------
    name : str
        As it stands in the file, behind the name of the outer table.
    table : str
        Its row in `TABLES`; empty where its keys are names that the buyer chooses.
    field : str
        Field of the outer record; empty where it says how a file is to be read.
    many : bool
        Whether it may stand several times, in double brackets.
    any_name : Key or None
        What each value must be where the keys are names.
    """

    name: str
    table: str = ""
    field: str = ""
    many: bool = False
    any_name: Key | None = None


def _text(name: str) -> Key:
    return Key(name, Reads.TEXT)


def _word(name: str, *words: str) -> Key:
    return Key(name, Reads.WORD, words=words)


_DERIVATION = (
    _text("economics"),
    _text("loading"),
    _word("method", *Method),
    Key("round_rates_to", Reads.POWER_OF_TEN, "{currency}/kW"),
)
_TERMS = ("real", "nominal")
_PER_HUNDRED = Decimal("0.01")
#: Rules of which several settings stand in an order.
_ORDERS = ("tie_order",)
#: One key for each rule on which regimes disagree.
_ANNOUNCED = tuple(
    Key(kind.key, Reads.WORDS if kind.key in _ORDERS else Reads.WORD, words=tuple(kind.sentences))
    for kind in RULE_KINDS
)

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
            _text("profile"),
            *_ANNOUNCED,
            Key("exchange_rate_days_before", unit="days"),
            Key("loss_tolerance_percent", unit="%"),
        ),
        "bids": (_word("decimal_mark", ".", ","), _word("thousands_mark", "", ".", ",", "'", " ")),
        "exchange": (_text("source"), _text("kind"), Key("date", Reads.DATE), _text("evidence")),
        "delivery": (Key("point", Reads.TEXT, field="delivered_point"),),
        "delivery.level": (
            _word("term", *get_args(Incoterm)),
            Key("percent_of_price", unit="%"),
            Key("amount_per_unit", unit="{currency}"),
        ),
        "taxes": (Key("rate_percent", unit="%"),),
        "payment": (Key("interest_rate_percent", unit="%/year"),),
        "payment.part": (
            Key("share_percent", unit="%", field="share", times=_PER_HUNDRED),
            Key("weeks_after_order", unit="weeks"),
        ),
        "preference": (_text("group"), Key("margin_percent", unit="%")),
        "award": (Key("planned", Reads.DATE, field="planned_award"),),
        "economics": (
            Key("energy_price_per_kwh", unit="{currency}/kWh"),
            Key("energy_price_by_year_per_kwh", Reads.NUMBERS, unit="{currency}/kWh"),
            Key("energy_price_by_year", Reads.FILE, field="energy_price_by_year_per_kwh"),
            Key("energy_price_series", Reads.FILE),
            Key("energy_price_clock", Reads.WORD, words=CLOCKS, for_reading=True),
            Key("energy_price_escalation_percent", unit="%/year"),
            _word("energy_price_meaning", *PriceOfYear1),
            Key("carbon_cost_per_kwh", unit="{currency}/kWh"),
            Key("carbon_cost_escalation_percent", unit="%/year"),
            Key("carbon_cost_counts", Reads.FLAG),
            Key("carbon_intensity_kg_per_kwh", unit="kg/kWh"),
            Key("demand_charge_per_kw_year", unit="{currency}/(kW year)"),
            Key("demand_charge_per_kw_month", unit="{currency}/(kW month)"),
            Key("demand_charge_escalation_percent", unit="%/year"),
            Key("discount_rate_percent", unit="%/year"),
            _word("discount_rate_terms", *_TERMS),
            _word("price_terms", *_TERMS),
            Key("fixed_charge_rate_percent", unit="%/year"),
            Key("price_date", Reads.DATE),
            Key("service_date", Reads.DATE),
            _word("present_value_at", *PresentValueDate),
            Key("evaluation_period_years", unit="years"),
            _word("timing", *Timing),
            Key("upstream_gross_up"),
            _text("source"),
        ),
        "economics.block": (
            _text("name"),
            Key("price_per_kwh", unit="{currency}/kWh"),
            Key("days", Reads.NAMES, field="day_types"),
            Key("months", Reads.MONTHS),
            Key("from", Reads.TIME, field="starts"),
            Key("to", Reads.TIME, field="ends"),
        ),
        "loading": (
            Key("profile", Reads.FILE),
            Key("profile_clock", Reads.WORD, words=CLOCKS, for_reading=True),
            Key("profile_reverse_flow", Reads.WORD, words=("magnitude",), for_reading=True),
            Key("load_factor"),
            Key("loss_factor_coefficient"),
            Key("loss_factor"),
            Key("peak_load_pu"),
            Key("peak_load_by_year_pu", Reads.NUMBERS),
            Key("peak_load_growth_percent", unit="%/year"),
            Key("peak_load_cap_pu"),
            Key("peak_responsibility_factor"),
            Key("hours_energized", unit="h/year"),
            Key("cooling_hours", unit="h/year"),
            Key("cooling_share_at_peak"),
            _text("source"),
        ),
        "loading.cooling_stage": (Key("above_load_pu"), Key("share_of_auxiliary_loss")),
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
            Key("delivery_without_adder_weeks", unit="weeks"),
            Key("delivery_adder_percent_per_week", unit="%/week"),
            Key("delivery_adder_per_week", unit="{currency}/week"),
            Key("maximum_sound_level_db", unit="dB"),
            Key("accepted_liquids", Reads.NAMES),
            Key("pcb_free_required", Reads.FLAG),
            Key("estimated_unit_price", unit="{currency}"),
            _word("cooling_valuation", *CoolingValuation),
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
        "lot.loss_basis": (
            Key("reference_temperature_c", unit="°C"),
            Key("load_loss_rating_kva", unit="kVA"),
            Key(
                "load_loss_rating_mva",
                unit="MVA",
                field="load_loss_rating_kva",
                times=factor("MVA", RATED_POWER_UNITS),
            ),
            _word("conductor", "copper", "aluminum"),
            Key("convert", Reads.WORDS, words=("rating", "temperature", "total loss")),
        ),
        "lot.regulation": (
            _word("regulation", "EU 548/2014", "US 10 CFR 431"),
            _text("equipment"),
            Key("tier", Reads.ONE_OF_NUMBERS, numbers=(1, 2)),
            Key("date", Reads.DATE),
            Key("primary_voltage_kv", unit="kV"),
            Key("secondary_voltage_kv", unit="kV"),
            Key("on_load_tap_changer", Reads.FLAG),
            Key("phases", Reads.ONE_OF_NUMBERS, numbers=(1, 3)),
        ),
        "lot.item": (_text("name"), Key("quantity", unit="pieces"), Key("counts", Reads.FLAG)),
        "lot.site_cost": (
            _text("name"),
            Key("amount_per_unit", unit="{currency}"),
            Key("liquids", Reads.NAMES),
            Key("sound_above_db", unit="dB"),
        ),
    }
)

_OF_LOT = ("rates", "derivation", "study", "loss_basis", "regulation")
#: Tables that stand in others, by the row of the outer table in `TABLES`.
INSIDE: Mapping[str, tuple[Inside, ...]] = MappingProxyType(
    {
        "delivery": (Inside("level", "delivery.level", "delivery_levels", many=True),),
        "payment": (Inside("part", "payment.part", "payments", many=True),),
        "economics": (Inside("block", "economics.block", "energy_price_blocks", many=True),),
        "loading": (
            Inside("profile_day_weights", any_name=Key("profile_day_weights", unit="days/year")),
            Inside("cooling_stage", "loading.cooling_stage", "cooling_stages", many=True),
        ),
        "lot": (
            *(Inside(name, f"lot.{name}", name) for name in _OF_LOT),
            Inside("item", "lot.item", "items", many=True),
            Inside("site_cost", "lot.site_cost", "site_costs", many=True),
        ),
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
