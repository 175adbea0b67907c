"""Commercial terms of one row: words, days, shares; from its columns, else from the labels of the bid."""

from __future__ import annotations

import datetime
import re
from collections.abc import Callable, Iterator, Mapping
from decimal import Decimal
from types import MappingProxyType
from typing import Any, TypeVar, get_args

from ..money import ARITHMETIC
from ..records.bid_columns import ITEM_HEADING
from ..records.commercial import Incoterm, OfferTerms, Payment
from ..records.quantity import Entry, Quantity
from .cells import Content, NoNumber
from .columns import AT_DELIVERY, PAYMENT
from .header_text import folded
from .offer_numbers import read_figure
from .offer_table import RowReading, Stated

__all__ = ["read_terms"]

T = TypeVar("T")

_YES_NO: Mapping[str, bool] = MappingProxyType({"yes": True, "no": False})
_TRUTHS: Mapping[str, bool] = MappingProxyType({"y": True, "true": True, "n": False, "false": False})
_BASES: Mapping[str, str] = MappingProxyType({"firm": "firm", "fixed": "firm", "variable": "variable"})
_TERMS: Mapping[str, str] = MappingProxyType({term.casefold(): term for term in get_args(Incoterm)})
#: Words by which a bidder says that there is no deviation.
_NONE = frozenset({"none", "no", "nil", "no deviations", "no deviation", "-", "\u2013", "\u2014"})
_NEGATIONS = frozenset({"not", "non", "neither", "nor", "un"})
_DAY = re.compile(r"[0-9]{4}-[0-9]{2}-[0-9]{2}")
_HUNDRED = Decimal(100)


def read_terms(reading: RowReading, currency: Entry | None, delivery: Quantity | None) -> OfferTerms:
    """Commercial terms of a row.

    Parameters
    ----------
    reading : RowReading
        The row with its lot; takes the findings.
    currency : Entry or None
        Currency of the bid.
    delivery : Quantity or None
        Time of delivery, at which a payment may fall due. [week]

    Returns
    -------
    OfferTerms
        What the row or a label states and can be read. Where a label speaks, the places of the row lead to it.
    """
    headings, labels = reading.table.header.headings, reading.table.labels.terms
    terms: dict[str, Any] = {}
    for name, read in _READERS.items():
        if name in headings or name in labels:
            stated = reading.stated(name)
            if stated is not None:
                reading.places[name] = stated.place
                terms[name] = read(reading, stated)
    for name in _FIGURES:
        if name in headings or name in labels:
            stated = reading.stated(name)
            if stated is not None:
                reading.places[name] = stated.place
                terms[name] = read_figure(reading, stated, currency)
    items = {name: heading for name, heading in headings.items() if name.startswith(ITEM_HEADING)}
    if items:
        terms["item_prices"] = dict(_item_prices(reading, items, currency))
    payments = _stated_payments(reading)
    if payments:
        reading.places["payments"] = payments[0].place
        terms["payments"] = _payments(reading, payments, delivery)
    return OfferTerms(**terms)


_FIGURES = (
    "total_price",
    "unconditional_discount_percent",
    "prompt_payment_discount_percent",
    "sound_level_db",
    "claimed_tolerance_percent",
    "declared_efficiency_percent",
)

# Words


def _words(reading: RowReading, stated: Stated) -> Entry | None:
    return reading.text(stated)


def _deviations(reading: RowReading, stated: Stated) -> Entry | None:
    entry = reading.text(stated)
    return None if entry is None or entry.value.casefold().rstrip(".") in _NONE else entry


def _one_word(stated: Stated, meanings: Mapping[str, T]) -> T | None:
    """The one meaning among the words of a text: "firm, delivered to site" is firm, "not firm" and "firm or variable"
    are neither.
    """
    words = re.findall(r"\w+", stated.cell.text.casefold()) if stated.cell.content is Content.TEXT else []
    found = {meanings[word] for word in words if word in meanings}
    return found.pop() if len(found) == 1 and not _NEGATIONS.intersection(words) else None


def _yes_or_no(reading: RowReading, stated: Stated) -> bool | None:
    """A word, or the truth value of a spreadsheet."""
    answer = _one_word(stated, _YES_NO)
    if answer is None and stated.cell.content in (Content.TEXT, Content.TRUTH):
        answer = _TRUTHS.get(stated.cell.text.casefold())
    if answer is None:
        reading.refuse(stated, NoNumber("value-unreadable", "must be yes or no"))
    return answer


def _price_basis(reading: RowReading, stated: Stated) -> str | None:
    basis = _one_word(stated, _BASES)
    if basis is None:
        reading.refuse(stated, NoNumber("value-unreadable", "must be firm or variable"))
    return basis


def _delivery_term(reading: RowReading, stated: Stated) -> Entry | None:
    term = _one_word(stated, _TERMS)
    if term is None:
        rule = f"must name one rule of Incoterms 2020 ({', '.join(_TERMS.values())})"
        reading.refuse(stated, NoNumber("value-unreadable", rule))
        return None
    return Entry(value=term, place=stated.place)


def _day(reading: RowReading, stated: Stated) -> datetime.date | None:
    """A date cell, or its text from year to day; any other order of the three could be read two ways."""
    text = stated.cell.text.strip()
    if stated.cell.content in (Content.TEXT, Content.DATE) and _DAY.fullmatch(text):
        try:
            return datetime.date.fromisoformat(text)
        except ValueError:  # a 31 February
            pass
    rule = "must be a day: a cell with a date, or a text such as 2026-12-31"
    reading.refuse(stated, NoNumber("value-unreadable", rule))
    return None


_READERS: Mapping[str, Callable[[RowReading, Stated], object]] = MappingProxyType(
    {
        "delivery_term": _delivery_term,
        "tax_included": _yes_or_no,
        "origin": _words,
        "price_basis": _price_basis,
        "valid_until": _day,
        "insulating_liquid": _words,
        "pcb_free": _yes_or_no,
        "deviations": _deviations,
    }
)

# Further items


def _item_prices(
    reading: RowReading, items: Mapping[str, object], currency: Entry | None
) -> Iterator[tuple[str, Quantity]]:
    """Prices by the names that the tender gives to the items of the lot."""
    own = None if reading.lot is None else {folded(i.name.value): i.name.value for i in reading.lot.items}
    for field in items:
        stated = reading.stated(field)
        name = field.removeprefix(ITEM_HEADING)
        if own is not None and folded(name) in own:
            name = own[folded(name)]
            reading.places[ITEM_HEADING + name] = reading.places[field]
        elif own is not None and stated is not None:
            reading.refuse(stated, NoNumber("value-not-read", "is no item of the lot"))
            continue
        price = None if stated is None else read_figure(reading, stated, currency)
        if price is not None:
            yield name, price


# Payments


def _stated_payments(reading: RowReading) -> list[Stated]:
    """Payments of the row; those of the labels where the row states none."""
    in_table = [name for name in reading.table.header.headings if name.startswith(PAYMENT)]
    own = [name for name in in_table if not reading.cell(name).is_blank]
    names = own or [name for name in reading.table.labels.terms if name.startswith(PAYMENT)]
    return [stated for name in names if (stated := reading.stated(name)) is not None]


def _payments(reading: RowReading, stated: list[Stated], delivery: Quantity | None) -> tuple[Payment, ...]:
    """All payments in the order of their columns; none where one of them cannot be read, and that is reported."""
    read = [_payment(reading, each, delivery) for each in stated]
    return tuple(payment for payment in read if payment is not None) if None not in read else ()


def _payment(reading: RowReading, stated: Stated, delivery: Quantity | None) -> Payment | None:
    percent = read_figure(reading, stated, None)
    weeks = _due(reading, stated, delivery)
    if percent is None or weeks is None:
        return None
    share = ARITHMETIC.divide(percent.value, _HUNDRED)
    return Payment(share=percent.model_copy(update={"value": share}), weeks_after_order=weeks)


def _due(reading: RowReading, stated: Stated, delivery: Quantity | None) -> Quantity | None:
    when = stated.heading.column.field.removeprefix(PAYMENT)
    if when == AT_DELIVERY:
        if delivery is None and reading.cell("delivery_weeks").is_blank:
            reading.refuse_payment(stated)
        return delivery
    in_table = reading.table.header.headings.get(stated.heading.column.field) is stated.heading
    place = reading.table.header_place(stated.heading) if in_table else stated.place
    return Quantity(value=Decimal(when), stated=Decimal(when), unit="weeks", text=when, place=place)
