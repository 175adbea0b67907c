"""Load and price over a year or over typical days, as read from a file, checked and complete."""

from __future__ import annotations

import datetime
from typing import Literal

from pydantic import Field

from ..findings import Place
from .quantity import AtLeast0, Entry, Record

__all__ = ["PriceBlock", "PriceSeries", "Profile", "TimeGrid"]


class TimeGrid(Record):
    """When the values of a profile hold.

    Parameters
    ----------
    kind : str
        ``"year"``: the steps of one whole year in order; ``"typical days"``: the steps of one day for each day type.
    step_hours : float
        Length of a step. [hour]
    hours : tuple of float
        Hours of a year that each step stands for; their sum is that of the year. [hour/year]
    day_types : tuple of str
        Day type of each step: ``"workday"``, ``"saturday"``, ``"sunday"``, or the name that a file of typical days
        gives. Empty where the file has plain steps without dates.
    months : tuple of int
        Month of each step, 1 to 12; empty where it is not known.
    starts : tuple of float
        Hour of the day at which each step begins, 0 to below 24; empty where it is not known. [hour]
    """

    kind: Literal["year", "typical days"]
    step_hours: float = Field(gt=0)
    hours: tuple[float, ...] = Field(min_length=1)
    day_types: tuple[str, ...] = ()
    months: tuple[int, ...] = ()
    starts: tuple[float, ...] = ()


class Profile(Record):
    """Load over time.

    Parameters
    ----------
    file : str
        Path relative to the tender's folder.
    unit : str
        ``"kVA"``, ``"kW"``, ``"A"`` or ``"pu"`` (per unit of the rating).
    loads : tuple of float
        One value a step, not negative. [unit]
    grid : TimeGrid
        When they hold.
    remarks : tuple of str
        What was recognized and accepted, in sentences: leap year, daylight-saving days, reverse flow as magnitude.
    sha256 : str
        Fingerprint of the file.
    place : Place
        The key of the tender file that names the profile.
    """

    file: str
    unit: Literal["kVA", "kW", "A", "pu"]
    loads: tuple[float, ...] = Field(min_length=1)
    grid: TimeGrid
    remarks: tuple[str, ...] = ()
    sha256: str
    place: Place


class PriceSeries(Record):
    """Energy price over time, one value a step of its own grid. [currency/kWh]"""

    file: str
    prices_per_kwh: tuple[float, ...] = Field(min_length=1)
    grid: TimeGrid
    remarks: tuple[str, ...] = ()
    sha256: str
    place: Place


class PriceBlock(Record):
    """One block of a time-of-use tariff; a block without conditions takes the hours that no other block has.

    Parameters
    ----------
    name : Entry
        As in the tariff.
    price_per_kwh : Quantity
        Price in the block. [currency/kWh]
    day_types : tuple of str
        Day types in which it holds; empty for all.
    months : tuple of int
        Months in which it holds; empty for all.
    starts, ends : datetime.time or None
        From and up to which time of day it holds; None for all day. A block may run over midnight.
    """

    name: Entry
    price_per_kwh: AtLeast0
    day_types: tuple[str, ...] = ()
    months: tuple[int, ...] = ()
    starts: datetime.time | None = None
    ends: datetime.time | None = None
    place: Place

    @property
    def is_rest(self) -> bool:
        """Whether the block takes the hours that no other block has."""
        return not (self.day_types or self.months) and self.starts is None and self.ends is None
