"""Figures of one row: the number by the declared marks, its unit, and bounds that hold whatever the lot."""

from __future__ import annotations

from decimal import Decimal

from ..money import ARITHMETIC
from ..records.bid_columns import ITEM_HEADING
from ..records.quantity import Entry, Quantity
from .cells import NoNumber, number_in
from .columns import PAYMENT
from .offer_table import RowReading, Stated

__all__ = ["FIGURES", "read_figure"]

#: Figures of an offer itself.
FIGURES = (
    "unit_price",
    "no_load_loss_kw",
    "load_loss_kw",
    "auxiliary_loss_kw",
    "total_loss_kw",
    "load_loss_rating_kva",
    "reference_temperature_c",
    "resistive_loss_kw",
    "stray_loss_kw",
    "cooling_power_no_load_kw",
    "cooling_power_rated_kw",
    "impedance_percent",
    "delivery_weeks",
    "quantity",
)
#: Figures of which zero is possible.
_MAY_BE_0 = frozenset(
    {
        "auxiliary_loss_kw",
        "stray_loss_kw",
        "cooling_power_no_load_kw",
        "cooling_power_rated_kw",
        "unconditional_discount_percent",
        "prompt_payment_discount_percent",
        "claimed_tolerance_percent",
    }
)
#: Shares of a whole.
_AT_MOST_100 = frozenset(
    {
        "unconditional_discount_percent",
        "prompt_payment_discount_percent",
        "claimed_tolerance_percent",
        "declared_efficiency_percent",
    }
)


def read_figure(reading: RowReading, stated: Stated, currency: Entry | None) -> Quantity | None:
    """Figure that a row states.

    Parameters
    ----------
    reading : RowReading
        The row, which takes the finding on a figure that cannot be used.
    stated : Stated
        What stands there.
    currency : Entry or None
        Currency of the bid, for prices.

    Returns
    -------
    Quantity or None
        In the unit of the field; None where it cannot be read, lies out of bounds, or its unit is not known, which was
        reported with the header.
    """
    heading, cell, place = stated
    times = heading.times
    if times is None:
        return None
    unit = heading.unit
    if heading.column.is_price and currency is not None:
        if unit and unit != currency.value:
            rule = f"must be in the currency of the bid, {currency.value}, as the unit price is"
            reading.refuse(stated, NoNumber("value-unreadable", rule))
            return None
        unit = currency.value
    number = number_in(cell, reading.table.marks, unit)
    if isinstance(number, NoNumber):
        reading.refuse(stated, number)
        return None
    value = number if times == 1 else ARITHMETIC.multiply(number, times)
    refusal = _out_of_bounds(heading.column.field, value, unit)
    if refusal is not None:
        reading.refuse(stated, refusal)
        return None
    return Quantity(value=value, stated=number, unit=unit, text=cell.text, place=place)


def _out_of_bounds(field: str, value: Decimal, unit: str) -> NoNumber | None:
    if value <= 0 and not (field in _MAY_BE_0 or field.startswith((PAYMENT, ITEM_HEADING))):
        return NoNumber("value-out-of-bounds", f"must be above 0 {unit}".rstrip())
    if value < 0:
        return NoNumber("value-out-of-bounds", "must not be negative")
    if value > 100 and (field in _AT_MOST_100 or field.startswith(PAYMENT)):
        return NoNumber("value-out-of-bounds", "must be at most 100 %")
    return None
