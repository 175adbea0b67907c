"""Load profiles and prices as csv for tests: a valid year by default, invented figures, one change a builder."""

from __future__ import annotations

import datetime
from collections.abc import Sequence
from pathlib import Path

from lossworth.findings import Finding
from lossworth.records.profile import PriceSeries, Profile

from .tender_folders import TENDER, tender_of

Row = tuple[str, str]

LOADED = TENDER.replace(
    "load_factor = 0.5\nloss_factor_coefficient = 0.15\n",
    'profile = "profiles/town.csv"\nprofile_clock = "standard time"\n',
)
#: Lines of the two keys in it.
PROFILE_LINE, CLOCK_LINE = 31, 32
PRICED = LOADED.replace("energy_price_per_kwh = 0.08", 'energy_price_series = "profiles/prices.csv"')
TYPICAL = LOADED.replace(
    'profile_clock = "standard time"', "profile_day_weights = { workday = 251, saturday = 52, sunday = 62 }"
)


def value_at(time: datetime.datetime) -> str:
    """An invented load that moves with hour, weekday and month."""
    return str(400 + 20 * (12 - abs(12 - time.hour)) - 60 * (time.weekday() > 4) + 5 * abs(7 - time.month))


def year_rows(year: int = 2025, minutes: int = 60, first: datetime.date | None = None) -> list[Row]:
    """Rows of a year in standard time, stamped at the beginnings of steps."""
    begin = datetime.datetime.combine(first or datetime.date(year, 1, 1), datetime.time())
    steps = (begin.replace(year=begin.year + 1) - begin) // datetime.timedelta(minutes=minutes)
    times = (begin + number * datetime.timedelta(minutes=minutes) for number in range(steps))
    return [(time.isoformat(timespec="minutes"), value_at(time)) for time in times]


def daylight_saving_rows(minutes: int = 60) -> list[Row]:
    """Rows of 2025 in local time that goes forward on 30 March at 02:00 and back on 26 October at 03:00."""

    def local(stamp: str) -> str:
        summer = "2025-03-30T02:00" <= stamp < "2025-10-26T02:00"
        time = datetime.datetime.fromisoformat(stamp) + datetime.timedelta(hours=summer)
        return time.isoformat(timespec="minutes")

    return [(local(stamp), value) for stamp, value in year_rows(2025, minutes)]


def step_rows(steps: int = 8760) -> list[Row]:
    """Rows of numbered steps."""
    return [(str(number), str(300 + number % 97)) for number in range(1, steps + 1)]


def day_rows(minutes: int = 60, day_types: Sequence[str] = ("workday", "saturday", "sunday")) -> list[tuple[str, ...]]:
    """Rows of typical days."""
    times = [f"{minute // 60:02d}:{minute % 60:02d}" for minute in range(0, 1440, minutes)]
    return [
        (name, time, str(100 + 30 * number + position % 11))
        for number, name in enumerate(day_types)
        for position, time in enumerate(times)
    ]


def text_of(rows: Sequence[Sequence[str]], header: str = "time,load [kVA]", separator: str = ",") -> str:
    """Csv text of some rows."""
    return "".join(separator.join(row) + "\n" for row in (header.split(","), *rows))


def at(rows: list[Row], stamp: str) -> int:
    """Position of the first row of a time."""
    return next(number for number, (time, _) in enumerate(rows) if time == stamp)


def without(rows: list[Row], first: str, steps: int = 1) -> list[Row]:
    """Rows in which some are missing."""
    start = at(rows, first)
    return rows[:start] + rows[start + steps :]


def with_value(rows: list[Row], position: int, value: str) -> list[Row]:
    """Rows in which one value is another; the position counts from 0, and the line is 2 more."""
    return [*rows[:position], (rows[position][0], value), *rows[position + 1 :]]


def with_time(rows: list[Row], position: int, time: str) -> list[Row]:
    """Rows in which one time is another."""
    return [*rows[:position], (time, rows[position][1]), *rows[position + 1 :]]


def profile_of(folder: Path, text: str | bytes, tender: str = LOADED) -> tuple[Profile | None, tuple[Finding, ...]]:
    """Profile of the loading condition of a tender whose profile has this text."""
    _write(folder, "profiles/town.csv", text)
    read, findings = tender_of(folder, tender)
    return (read.loading["town"].profile if read else None), findings


def series_of(folder: Path, text: str | bytes, tender: str = PRICED) -> tuple[PriceSeries | None, tuple[Finding, ...]]:
    """Price series of a tender whose load is that of a valid year."""
    _write(folder, "profiles/town.csv", text_of(year_rows()))
    _write(folder, "profiles/prices.csv", text)
    read, findings = tender_of(folder, tender)
    return (read.economics["board"].energy_price_series if read else None), findings


def _write(folder: Path, name: str, text: str | bytes) -> None:
    path = folder / name
    path.parent.mkdir(parents=True, exist_ok=True)
    path.write_bytes(text.encode() if isinstance(text, str) else text)
