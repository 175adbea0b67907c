"""The columns of a table of offers: what they are called, their units, and the field of an offer that they fill."""

from __future__ import annotations

import dataclasses
from collections.abc import Mapping
from dataclasses import dataclass
from decimal import Decimal
from types import MappingProxyType

from ..units import LOSS_UNITS, PERCENT_UNITS, RATED_POWER_UNITS, TEMPERATURE_UNITS, WEEK_UNITS

__all__ = ["COLUMNS", "COLUMN_OF", "UNIT_SPELLINGS", "Column"]

#: Other spellings of a unit that leave no doubt. Milli and mega differ by their capital alone, so `mW` is none.
UNIT_SPELLINGS: Mapping[str, str] = MappingProxyType(
    {
        "KW": "kW",
        "Kw": "kW",
        "kw": "kW",
        "w": "W",
        "KVA": "kVA",
        "kva": "kVA",
        "percent": "%",
        "p.u.": "pu",
        "° C": "°C",
        "º C": "°C",
        "ºC": "°C",
        "\u2103": "°C",
        "C": "°C",
        "degC": "°C",
        "deg C": "°C",
        "week": "weeks",
        "Weeks": "weeks",
    }
)
_PIECES: Mapping[str, Decimal] = MappingProxyType(
    {word: Decimal(1) for word in ("units", "unit", "pcs", "pieces", "no.")}
)


@dataclass(frozen=True, slots=True)
class Column:
    """One column of the vocabulary.

    Parameters
    ----------
    field : str
        Field of an offer; also its machine name, to which a unit may be added.
    name : str
        In the trade's words, as findings call it.
    others : tuple of str
        Other names, in small letters, hyphens as spaces.
    symbols : tuple of str
        Symbols that may stand beside the name, or alone.
    units : mapping of str to Decimal
        Units and their factors to the one of the field; empty where there is none.
    needs_unit : bool
        Whether the header must state one of them.
    is_needed : bool
        Whether a table of offers must have the column.
    """

    field: str
    name: str
    others: tuple[str, ...] = ()
    symbols: tuple[str, ...] = ()
    units: Mapping[str, Decimal] = dataclasses.field(default_factory=dict)
    needs_unit: bool = False
    is_needed: bool = False

    @property
    def machine_name(self) -> str:
        """Name of the field without its unit: ``no_load_loss``."""
        for ending in ("_kw", "_kva", "_percent", "_weeks", "_c"):
            if self.field.endswith(ending):
                return self.field.removesuffix(ending)
        return self.field

    @property
    def example(self) -> str:
        """Header as this project writes it."""
        if self.field == "unit_price":
            return "unit price [NCU]"
        return f"{self.name} [{next(iter(self.units))}]" if self.needs_unit else self.name


def _loss(field: str, name: str, *others: str, symbols: tuple[str, ...] = (), is_needed: bool = False) -> Column:
    plurals = (f"{each}es" for each in (name, *others) if each.endswith("loss"))
    return Column(field, name, (*others, *plurals), symbols, LOSS_UNITS, needs_unit=True, is_needed=is_needed)


COLUMNS: tuple[Column, ...] = (
    Column("lot", "lot", ("lot no", "lot no.", "lot number", "lot id"), is_needed=True),
    Column("bidder", "bidder", ("bidder name", "name of bidder", "tenderer")),
    Column("currency", "currency", ("currency code", "price currency")),
    Column("unit_price", "unit price", ("price per unit",), is_needed=True),
    _loss("no_load_loss_kw", "no-load loss", symbols=("p0", "po"), is_needed=True),
    _loss("load_loss_kw", "load loss", symbols=("pk",), is_needed=True),
    _loss("auxiliary_loss_kw", "auxiliary loss", symbols=("paux",)),
    _loss("total_loss_kw", "total loss"),
    Column(
        "load_loss_rating_kva",
        "load loss rating",
        ("rating of the load loss", "rating of load loss"),
        (),
        RATED_POWER_UNITS,
        needs_unit=True,
    ),
    Column("reference_temperature_c", "reference temperature", (), (), TEMPERATURE_UNITS, needs_unit=True),
    _loss("resistive_loss_kw", "resistive loss", "I²R loss", "I2R loss"),
    _loss("stray_loss_kw", "stray loss"),
    _loss("cooling_power_no_load_kw", "cooling power at no load", symbols=("pc0",)),
    _loss("cooling_power_rated_kw", "cooling power at rated load", symbols=("pcs",)),
    Column(
        "impedance_percent",
        "impedance",
        ("short circuit impedance", "impedance voltage"),
        ("z", "uk"),
        PERCENT_UNITS,
        needs_unit=True,
    ),
    Column("delivery_weeks", "delivery", ("delivery time", "time of delivery"), (), WEEK_UNITS, needs_unit=True),
    Column("quantity", "quantity", ("qty", "number of units"), (), _PIECES),
    Column("cooling", "cooling", ("cooling type", "cooling designation")),
    Column("remark", "remarks", ("remark", "comments", "comment", "notes", "note")),
)

COLUMN_OF: Mapping[str, Column] = MappingProxyType({column.field: column for column in COLUMNS})
