"""One value of the tender file: wrapped with its place and its characters, or why it cannot be."""

from __future__ import annotations

import datetime
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from decimal import Decimal
from enum import StrEnum
from types import MappingProxyType

from ..findings import Place
from ..money import ARITHMETIC, RoundingMode
from ..records.quantity import Entry, Quantity
from ..records.tender import CoolingValuation, Method, PresentValueDate, PriceOfYear1, RoundingPoint, Timing
from .numbers import LARGEST, is_beyond_meaning
from .suggestions import did_you_mean, one_of
from .tender_keys import Key, Reads

__all__ = ["LISTS", "Refusal", "Written", "read_value"]

#: Values that are lists, and what the list must be.
LISTS: Mapping[Reads, str] = MappingProxyType(
    {
        Reads.NUMBERS: "must be a list of numbers, one for each year",
        Reads.NAMES: 'must be a list of texts in quotes, such as ["one", "another"]',
        Reads.WORDS: "must be a list of texts",
        Reads.MONTHS: "must be a list of months, such as [11, 12, 1, 2]",
    }
)


@dataclass(frozen=True, slots=True)
class Written:
    """A value as the file has it.

    Parameters
    ----------
    value : object
        As the TOML parser gives it.
    text : str
        Its characters.
    place : Place
        Its line.
    """

    value: object
    text: str
    place: Place


@dataclass(frozen=True, slots=True)
class Refusal:
    """Why a value cannot be what its key wants."""

    rule: str
    fix: str = ""


def read_value(key: Key, written: Written, unit: str) -> object | Refusal:
    """Value of a key as the record wants it.

    Parameters
    ----------
    key : Key
        Which key.
    written : Written
        What the file has.
    unit : str
        Unit of a number.

    Returns
    -------
    object or Refusal
        A Quantity, an Entry, a text, a word's member, a date, a time, a flag; or what was expected instead.
    """
    return _READERS[key.reads](key, written, unit)


def _number(key: Key, written: Written, unit: str) -> Quantity | Refusal:
    value = written.value
    if isinstance(value, str):
        return Refusal("must be a number without quotes", "Take the quotes away; the decimal mark is a point.")
    if isinstance(value, bool) or not isinstance(value, (int, Decimal)):
        return Refusal("must be a number")
    number = Decimal(value)
    if is_beyond_meaning(number):
        return Refusal(f"must be a finite number below {LARGEST:,}, and not almost zero")
    number = number or abs(number)  # never a negative zero
    in_unit = ARITHMETIC.multiply(number, key.times)
    return Quantity(value=in_unit, stated=number, unit=unit, text=written.text, place=written.place)


def _one_of_numbers(key: Key, written: Written, _unit: str) -> int | Refusal:
    value = written.value
    if type(value) is int and value in key.numbers:
        return value
    return Refusal(f"must be {' or '.join(map(str, key.numbers))}, without quotes")


def _power_of_ten(key: Key, written: Written, unit: str) -> Quantity | Refusal:
    quantity = _number(key, written, unit)
    if isinstance(quantity, Quantity) and quantity.value.normalize().as_tuple()[:2] != (0, (1,)):
        return Refusal("must be a power of ten, such as 0.01 or 1")
    return quantity


def _text(_key: Key, written: Written, _unit: str) -> Entry | Refusal:
    if not isinstance(written.value, str):
        return Refusal("must be text in quotes", f'Write it in quotes: "{written.text}".')
    value = written.value.strip()
    return Entry(value=value, place=written.place) if value else Refusal("must not be empty")


def _name(key: Key, written: Written, unit: str) -> str | Refusal:
    entry = _text(key, written, unit)
    return entry.value if isinstance(entry, Entry) else entry


def _date(_key: Key, written: Written, _unit: str) -> datetime.date | Refusal:
    if type(written.value) is datetime.date:  # a date with a time is a subclass
        return written.value
    return Refusal("must be a date without quotes and without a time, such as 2026-09-15")


def _time(_key: Key, written: Written, _unit: str) -> datetime.time | Refusal:
    value = written.value
    if isinstance(value, datetime.time) and not value.second and not value.microsecond:
        return value
    return Refusal("must be a time of day without quotes, to the minute, such as 07:00:00")


def _month(_key: Key, written: Written, _unit: str) -> int | Refusal:
    value = written.value
    if type(value) is int and 1 <= value <= _MONTHS:
        return value
    return Refusal("must be the number of a month, 1 to 12")


def _flag(_key: Key, written: Written, _unit: str) -> bool | Refusal:
    if isinstance(written.value, bool):
        return written.value
    return Refusal("must be true or false, without quotes")


def _word(key: Key, written: Written, _unit: str) -> object | Refusal:
    value = written.value
    if isinstance(value, str) and value in key.words:
        members = _WORDS_OF.get(key.name)
        return members(value) if members else value
    return Refusal(
        f"must be {one_of(key.words)}", did_you_mean(str(value), key.words) if isinstance(value, str) else ""
    )


_MONTHS = 12
_WORDS_OF: Mapping[str, type[StrEnum]] = MappingProxyType(
    {
        "rounding": RoundingMode,
        "rounding_applies_to": RoundingPoint,
        "energy_price_meaning": PriceOfYear1,
        "timing": Timing,
        "method": Method,
        "present_value_at": PresentValueDate,
        "cooling_valuation": CoolingValuation,
    }
)

_READERS: Mapping[Reads, Callable[[Key, Written, str], object]] = MappingProxyType(
    {
        Reads.NUMBER: _number,
        Reads.ONE_OF_NUMBERS: _one_of_numbers,
        Reads.POWER_OF_TEN: _power_of_ten,
        Reads.TEXT: _text,
        Reads.FILE: _text,
        Reads.NAME: _name,
        Reads.WORD: _word,
        Reads.DATE: _date,
        Reads.TIME: _time,
        Reads.FLAG: _flag,
        # of lists, asked for each element
        Reads.NUMBERS: _number,
        Reads.NAMES: _name,
        Reads.WORDS: _word,
        Reads.MONTHS: _month,
    }
)
