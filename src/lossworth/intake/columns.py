"""The columns of a table of offers: what they are called, their units, and the field of an offer that they fill."""

from __future__ import annotations

import dataclasses
from collections.abc import Mapping
from dataclasses import dataclass
from decimal import Decimal
from types import MappingProxyType

from ..records.bid_columns import ITEM_HEADING
from ..units import LOSS_UNITS, PERCENT_UNITS, RATED_POWER_UNITS, TEMPERATURE_UNITS, WEEK_UNITS

__all__ = [
    "AT_DELIVERY",
    "COLUMNS",
    "COLUMN_OF",
    "PAYMENT",
    "UNIT_SPELLINGS",
    "Column",
    "item_column",
    "payment_column",
]

#: Before the week of a payment, in the field of its column; and in place of the week, for one that is due at delivery.
PAYMENT, AT_DELIVERY = "payment: ", "at delivery"

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
        "dBA": "dB(A)",
        "db(A)": "dB(A)",
        "dB (A)": "dB(A)",
        "week": "weeks",
        "Weeks": "weeks",
    }
)
_PIECES: Mapping[str, Decimal] = MappingProxyType(
    {word: Decimal(1) for word in ("units", "unit", "pcs", "pieces", "no.")}
)
_SOUND: Mapping[str, Decimal] = MappingProxyType({word: Decimal(1) for word in ("dB(A)", "dB")})


@dataclass(frozen=True, slots=True)
class Column:
    """One column of the vocabulary.

    Parameters
    ----------
    field : str
        Field of an offer or of its terms; also its machine name, to which a unit may be added.
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
    is_price : bool
        Whether a currency code may stand as its unit.
    """

    field: str
    name: str
    others: tuple[str, ...] = ()
    symbols: tuple[str, ...] = ()
    units: Mapping[str, Decimal] = dataclasses.field(default_factory=dict)
    needs_unit: bool = False
    is_needed: bool = False
    is_price: bool = False

    @property
    def machine_name(self) -> str:
        """Name of the field without its unit: ``no_load_loss``."""
        for ending in ("_kw", "_kva", "_percent", "_weeks", "_c", "_db"):
            if self.field.endswith(ending):
                return self.field.removesuffix(ending)
        return self.field

    @property
    def example(self) -> str:
        """Header as this project writes it."""
        if self.is_price:
            return f"{self.name} [NCU]"
        return f"{self.name} [{next(iter(self.units))}]" if self.needs_unit else self.name


def _loss(field: str, name: str, *others: str, symbols: tuple[str, ...] = (), is_needed: bool = False) -> Column:
    plurals = (f"{each}es" for each in (name, *others) if each.endswith("loss"))
    return Column(field, name, (*others, *plurals), symbols, LOSS_UNITS, needs_unit=True, is_needed=is_needed)


def _percent(field: str, name: str, *others: str) -> Column:
    return Column(field, name, others, (), PERCENT_UNITS, needs_unit=True)


COLUMNS: tuple[Column, ...] = (
    Column("lot", "lot", ("lot no", "lot no.", "lot number", "lot id"), is_needed=True),
    Column("bidder", "bidder", ("bidder name", "name of bidder", "tenderer")),
    Column("alternative", "alternative", ("name of alternative", "alternative offer")),
    Column("currency", "currency", ("currency code", "price currency", "currency of prices")),
    Column("unit_price", "unit price", ("price per unit",), is_needed=True, is_price=True),
    Column("total_price", "total price", ("total price of the lot", "price of the lot"), is_price=True),
    _percent("unconditional_discount_percent", "discount", "unconditional discount"),
    _percent("prompt_payment_discount_percent", "prompt payment discount"),
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
    Column("delivery_term", "price terms", ("delivery terms", "delivery term", "incoterm", "incoterms")),
    Column("price_basis", "price basis", ("basis of prices", "basis of price")),
    Column("tax_included", "tax included", ("taxes included", "price includes tax")),
    Column("valid_until", "valid until", ("bid valid until", "validity")),
    Column("origin", "origin", ("country of origin",)),
    Column("insulating_liquid", "insulating liquid", ("insulating fluid", "liquid")),
    Column("pcb_free", "PCB free", ("free of PCB",)),
    Column("sound_level_db", "sound level", units=_SOUND),
    _percent("claimed_tolerance_percent", "claimed tolerance", "tolerance on losses"),
    _percent("declared_efficiency_percent", "declared efficiency"),
    Column("deviations", "deviations", ("deviation", "deviations from the tender")),
    Column("remark", "remarks", ("remark", "comments", "comment", "notes", "note")),
)

COLUMN_OF: Mapping[str, Column] = MappingProxyType({column.field: column for column in COLUMNS})


def payment_column(weeks_after_order: str) -> Column:
    """Column of one payment of a bidder's own schedule.

    Parameters
    ----------
    weeks_after_order : str
        Number of weeks, or `AT_DELIVERY`.

    Returns
    -------
    Column
        Of shares of the price in percent.
    """
    when = weeks_after_order if weeks_after_order == AT_DELIVERY else f"{weeks_after_order} weeks after order"
    return _percent(PAYMENT + weeks_after_order, f"payment {when}")


def item_column(name: str) -> Column:
    """Column of the prices of one further item.

    Parameters
    ----------
    name : str
        Name of the item.

    Returns
    -------
    Column
        Of prices by the piece.
    """
    return Column(ITEM_HEADING + name, ITEM_HEADING + name, is_price=True)
