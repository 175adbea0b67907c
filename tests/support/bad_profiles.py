"""Kinds of bad load profiles and prices: how each is made, and what must be said of it. Invented figures throughout.

Each case writes a whole tender folder, so that the same table can be driven through intake and through the command
line.
"""

from __future__ import annotations

from pathlib import Path

from .bad_input_cases import BadInput, Told
from .profile_texts import (
    CLOCK_LINE,
    LOADED,
    PRICED,
    PROFILE_LINE,
    TYPICAL,
    at,
    day_rows,
    daylight_saving_rows,
    step_rows,
    text_of,
    with_time,
    with_value,
    without,
    year_rows,
)
from .tender_folders import write_folder

__all__ = ["BAD_PROFILES"]

_YEAR = year_rows()
_LOCAL = LOADED.replace('"standard time"', '"local time with daylight saving"')
_FILE, _PRICES, _BY_YEAR = "profiles/town.csv", "profiles/prices.csv", "prices_by_year.csv"
_DAYS = "day type,time,load [kVA]"
_PRICE = "time,price [NCU/kWh]"
_STEPS_MISSING = "2025-03-01T13:00"


def profile_case(id: str, content: str | bytes, *told: Told, tender: str = LOADED) -> BadInput:
    """Case of a load profile."""
    return BadInput(id, lambda folder: write_folder(folder, tender=tender, more={_FILE: content}), told)


def price_case(id: str, content: str, *told: Told) -> BadInput:
    """Case of a price series beside a valid profile."""
    files = {_FILE: text_of(_YEAR), _PRICES: content}
    return BadInput(id, lambda folder: write_folder(folder, tender=PRICED, more=files), told)


def by_year_case(id: str, content: str, *told: Told) -> BadInput:
    """Case of prices by year beside a valid profile."""
    tender = LOADED.replace("energy_price_per_kwh = 0.08", f'energy_price_by_year = "{_BY_YEAR}"')
    files = {_FILE: text_of(_YEAR), _BY_YEAR: content}
    return BadInput(id, lambda folder: write_folder(folder, tender=tender, more=files), told)


def path_case(id: str, path: str, *told: Told) -> BadInput:
    """Case of a path to a profile; the file lies beside the tender's folder."""

    def make(folder: Path) -> None:
        write_folder(folder, tender=LOADED.replace(_FILE, path))
        (folder.parent / "town.csv").write_text(text_of(_YEAR))
        (folder / "link.csv").symlink_to(folder.parent / "town.csv")

    return BadInput(id, make, told)


def prices(rows: list[tuple[str, str]]) -> list[tuple[str, str]]:
    """Prices in place of loads: 0.04 to 0.07."""
    return [(time, f"0.0{4 + int(value) % 4}") for time, value in rows]


def in_all(kind: str, column: str, values: list[str], file: str = _FILE) -> tuple[Told, ...]:
    """What is said of a fault in every row: ten rows, and one that counts the others."""
    return tuple((kind, f"{file}:{line}{column}", value) for line, value in enumerate(values[:11], start=2))


TIMES = (
    profile_case(
        "steps missing",
        text_of(without(_YEAR, "2025-03-01T05:00", 8)),
        ("profile-gap", f"{_FILE}:{at(_YEAR, '2025-03-01T05:00') + 2}", _STEPS_MISSING),
    ),
    profile_case(
        "29 February left out of a leap year",
        text_of(without(year_rows(2024), "2024-02-29T00:00", 24)),
        ("profile-gap", f"{_FILE}:1418", "2024-03-01T00:00"),
    ),
    profile_case(
        "a row of commas in place of a step",
        text_of([*_YEAR[:9], ("", ""), *_YEAR[10:]]),
        ("profile-gap", f"{_FILE}:12", "2025-01-01T10:00"),
    ),
    profile_case(
        "step twice",
        text_of([*_YEAR[:100], _YEAR[99], *_YEAR[100:]]),
        ("profile-step-twice", f"{_FILE}:102", "2025-01-05T03:00"),
    ),
    profile_case(
        "steps out of order",
        text_of([*_YEAR[:100], _YEAR[101], _YEAR[100], *_YEAR[102:]]),
        ("profile-order", f"{_FILE}:103", "2025-01-05T04:00"),
    ),
    profile_case(
        "latest step first",
        text_of(_YEAR[::-1]),
        ("profile-order", f"{_FILE}:8761", "2025-01-01T00:00"),
    ),
    profile_case(
        "one step of another length",
        text_of(with_time(_YEAR, 100, "2025-01-05T04:10")),
        ("profile-step-length", f"{_FILE}:102", "2025-01-05T04:10"),
        ("profile-step-length", f"{_FILE}:103", "2025-01-05T05:00"),
    ),
    profile_case(
        "steps of ten minutes",
        text_of(year_rows(minutes=10)[:30_000]),
        ("profile-step-length", f"{_FILE}:3", "10 minutes"),
    ),
    profile_case(
        "year cut short",
        text_of(_YEAR[:-10]),
        ("profile-length", f"{_FILE}:8751", "2025-12-31T13:00 (8,750 steps)"),
    ),
    profile_case(
        "year too long",
        text_of([*_YEAR, ("2026-01-01T00:00", "500")]),
        ("profile-length", f"{_FILE}:8762", "2026-01-01T00:00 (8,761 steps)"),
    ),
    profile_case(
        "times of the ends of the steps",
        text_of([*_YEAR[1:], ("2026-01-01T00:00", "500")]),
        ("profile-time", f"{_FILE}:2", "2025-01-01T01:00"),
    ),
    profile_case(
        "changes of the clock not declared",
        text_of(daylight_saving_rows()),
        ("profile-daylight-saving", f"{_FILE}:2116", None),
    ),
    profile_case(
        "changes of the clock not declared, quarter-hours",
        text_of(daylight_saving_rows(15)),
        ("profile-daylight-saving", f"{_FILE}:8458", None),
    ),
    profile_case(
        "changes of the clock declared and not there",
        text_of(_YEAR),
        ("profile-daylight-saving", _FILE, None),
        tender=_LOCAL,
    ),
    profile_case(
        "an hour missing in spring and none doubled in autumn",
        text_of(without(_YEAR, "2025-03-30T02:00")),
        ("profile-daylight-saving", f"{_FILE}:2116", None),
        tender=_LOCAL,
    ),
    profile_case(
        "offset that changes",
        text_of([(f"{time}+0{1 + (time > '2025-03-30T02')}:00", value) for time, value in _YEAR]),
        ("profile-time", f"{_FILE}:2116[time]", "2025-03-30T02:00+02:00"),
    ),
    profile_case(
        "dates in another form",
        text_of([(f"{time[8:10]}.{time[5:7]}.{time[:4]} {time[11:]}", value) for time, value in _YEAR]),
        *in_all("profile-time", "[time]", [f"01.01.2025 {hour:02d}:00" for hour in range(11)]),
    ),
    profile_case(
        "numbered steps, a leap day short",
        text_of(step_rows(8759), "step,load [kVA]"),
        ("profile-length", f"{_FILE}:8760", "8,759 steps"),
    ),
    profile_case(
        "numbered steps with a gap",
        text_of(step_rows()[:50] + step_rows(8761)[51:], "step,load [kVA]"),
        ("profile-gap", f"{_FILE}:52", "52"),
    ),
    profile_case(
        "numbered steps from 0",
        text_of([("0", "7"), *step_rows(8759)], "step,load [kVA]"),
        ("profile-time", f"{_FILE}:2", "0"),
    ),
    profile_case("a header alone", "time,load [kVA]\n", ("profile-length", _FILE, "a header alone")),
)

VALUES = (
    profile_case(
        "empty cell", text_of(with_value(_YEAR, 5, "")), ("profile-value-missing", f"{_FILE}:7[load [kVA]]", "")
    ),
    profile_case(
        "text in a load", text_of(with_value(_YEAR, 5, "off")), ("profile-value", f"{_FILE}:7[load [kVA]]", "off")
    ),
    profile_case(
        "NaN in a load", text_of(with_value(_YEAR, 5, "NaN")), ("profile-value", f"{_FILE}:7[load [kVA]]", "NaN")
    ),
    profile_case(
        "error in a load", text_of(with_value(_YEAR, 5, "#REF!")), ("profile-value", f"{_FILE}:7[load [kVA]]", "#REF!")
    ),
    profile_case(
        "1e300 in a load", text_of(with_value(_YEAR, 5, "1e300")), ("profile-value", f"{_FILE}:7[load [kVA]]", "1e300")
    ),
    profile_case(
        "negative load", text_of(with_value(_YEAR, 5, "-3")), ("profile-value", f"{_FILE}:7[load [kVA]]", "-3")
    ),
    profile_case(
        "no load at all",
        text_of([(time, "0") for time, _ in _YEAR]),
        ("profile-value", _FILE, "0 in all 8,760 steps"),
    ),
    profile_case(
        "a spike of the meter",
        text_of(with_value(_YEAR, 5, "65535")),
        ("profile-questioned", f"{_FILE}:7[load [kVA]]", "65535"),
    ),
    profile_case(
        "percent for per unit",
        text_of([(time, f"{int(value) % 97}") for time, value in _YEAR], "time,load [pu]"),
        *(("profile-questioned", f"tender.toml:{PROFILE_LINE}", "a peak of 95 per unit"),) * 2,
        tender=LOADED.replace("peak_load_pu = 0.6\n", ""),
    ),
    profile_case(
        "decimal comma not declared",
        text_of([(time, f"{value},5") for time, value in _YEAR], separator=";"),
        *in_all("profile-value", "[load [kVA]]", [f"{value},5" for _, value in _YEAR]),
    ),
    profile_case(
        "decimal comma without quotes",
        text_of([(time, f"{value},5") for time, value in _YEAR]),
        *in_all("row-length", "", [f"3 cells: {time}, {value}, 5" for time, value in _YEAR]),
    ),
)

COLUMNS = (
    profile_case(
        "unit of reactive power",
        text_of(_YEAR, "time,load [kvar]"),
        ("profile-columns", f"{_FILE}:1[load [kvar]]", "load [kvar]"),
    ),
    profile_case("unit missing", text_of(_YEAR, "time,load"), ("profile-columns", f"{_FILE}:1[load]", "load")),
    profile_case(
        "column of the load missing",
        text_of(_YEAR, "time,step"),
        ("profile-columns", f"{_FILE}:1", "step, time"),
        ("profile-columns", f"{_FILE}:1", "time, step"),
    ),
    profile_case(
        "times and numbers both",
        text_of([(time, str(n), value) for n, (time, value) in enumerate(_YEAR, start=1)], "time,step,load [kVA]"),
        ("profile-columns", f"{_FILE}:1", "step, time"),
    ),
    profile_case(
        "column of the load twice",
        text_of([(*row, "1") for row in _YEAR], "time,load [kVA],load [kW]"),
        ("profile-columns", f"{_FILE}:1[load [kW]]", "load [kW]"),
    ),
    profile_case(
        "a column that nothing reads",
        text_of([(*row, "ok") for row in _YEAR], "time,load [kVA],quality"),
        ("column-not-read", f"{_FILE}:1[quality]", "quality"),
    ),
    profile_case(
        "no header",
        text_of(_YEAR[1:], "2025-01-01T00:00,430"),
        ("profile-columns", f"{_FILE}:1", "2025-01-01T00:00,430"),
    ),
)

DAYS = (
    profile_case(
        "typical days without weights",
        text_of(day_rows(), _DAYS),
        ("profile-day-weights", f"tender.toml:{PROFILE_LINE}", None),
    ),
    profile_case(
        "weights of 364 days",
        text_of(day_rows(), _DAYS),
        ("profile-day-weights", f"tender.toml:{CLOCK_LINE}", "364 days"),
        tender=TYPICAL.replace("251", "250"),
    ),
    profile_case(
        "typical day without weight",
        text_of(day_rows(day_types=("workday", "saturday", "sunday", "holiday")), _DAYS),
        ("profile-day-weights", f"tender.toml:{CLOCK_LINE}", None),
        tender=TYPICAL,
    ),
    profile_case(
        "weight without typical day",
        text_of(day_rows(day_types=("workday", "sunday")), _DAYS),
        ("profile-day-weights", f"tender.toml:{CLOCK_LINE}", "saturday"),
        tender=TYPICAL,
    ),
    profile_case(
        "negative weight",
        text_of(day_rows(), _DAYS),
        ("profile-day-weights", f"tender.toml:{CLOCK_LINE}", "-52"),
        tender=TYPICAL.replace("251", "355").replace("= 52", "= -52"),
    ),
    profile_case(
        "typical day cut short",
        text_of(day_rows()[:-2], _DAYS),
        ("profile-length", f"{_FILE}:71", "sunday 21:00"),
        tender=TYPICAL,
    ),
    profile_case(
        "typical day in two parts",
        text_of([*day_rows()[:12], *day_rows()[24:], *day_rows()[12:24]], _DAYS),
        ("profile-order", f"{_FILE}:62", "workday"),
        tender=TYPICAL,
    ),
    profile_case(
        "time of day 24:00",
        text_of([*day_rows()[:-1], ("sunday", "24:00", "1")], _DAYS),
        ("profile-time", f"{_FILE}:73[time]", "24:00"),
        tender=TYPICAL,
    ),
    profile_case(
        "weights for a year of stamps",
        text_of(_YEAR),
        ("tender-conflict", f"tender.toml:{CLOCK_LINE}", None),
        tender=TYPICAL,
    ),
)

FILES = (
    path_case("path out of the folder", "../town.csv", ("file-outside", f"tender.toml:{PROFILE_LINE}", "../town.csv")),
    path_case("absolute path", "/etc/hostname", ("file-outside", f"tender.toml:{PROFILE_LINE}", "/etc/hostname")),
    path_case(
        "path of another system",
        r"profiles\\town.csv",
        ("file-outside", f"tender.toml:{PROFILE_LINE}", r"profiles\town.csv"),
    ),
    path_case("link out of the folder", "link.csv", ("file-outside", f"tender.toml:{PROFILE_LINE}", "link.csv")),
    path_case(
        "file missing", "profiles/city.csv", ("file-missing", f"tender.toml:{PROFILE_LINE}", "profiles/city.csv")
    ),
    path_case("folder in place of a file", "bids", ("file-missing", f"tender.toml:{PROFILE_LINE}", "bids")),
    profile_case("profile of no bytes", b"", ("file-unreadable", _FILE, "0 bytes")),
    profile_case(
        "profile in UTF-16",
        text_of(_YEAR).encode("utf-16"),
        ("file-unreadable", f"{_FILE}:1", "a byte order mark of UTF-16 at byte 0"),
    ),
    profile_case(
        "profile of a million rows",
        text_of([("2025-01-01T00:00", "1")] * 50_000),
        ("file-too-large", _FILE, None),
    ),
)

PRICES = (
    price_case(
        "negative price",
        text_of(with_value(prices(_YEAR), 5, "-0.01"), _PRICE),
        ("profile-value", f"{_PRICES}:7[price [NCU/kWh]]", "-0.01"),
    ),
    price_case(
        "no price at all",
        text_of([(time, "0") for time, _ in _YEAR], _PRICE),
        ("profile-value", _PRICES, "0 in all 8,760 steps"),
    ),
    price_case(
        "price in another currency",
        text_of(prices(_YEAR), "time,price [FCU/kWh]"),
        ("profile-columns", f"{_PRICES}:1[price [FCU/kWh]]", "price [FCU/kWh]"),
    ),
    price_case(
        "price per kW",
        text_of(prices(_YEAR), "time,price [NCU/kW]"),
        ("profile-columns", f"{_PRICES}:1[price [NCU/kW]]", "price [NCU/kW]"),
    ),
    price_case(
        "price of another year",
        text_of(prices(year_rows(2023)), _PRICE),
        ("tender-conflict", "tender.toml:23", _PRICES),
    ),
    price_case(
        "price of typical days",
        text_of(day_rows(), "day type,time,price [NCU/kWh]"),
        ("profile-columns", f"{_PRICES}:1", "day type, time"),
    ),
    price_case(
        "price with a gap",
        text_of(without(prices(_YEAR), "2025-03-01T05:00", 8), _PRICE),
        ("profile-gap", f"{_PRICES}:{at(_YEAR, '2025-03-01T05:00') + 2}", _STEPS_MISSING),
    ),
    by_year_case(
        "prices of too few years",
        "year,price [NCU/kWh]\n1,0.08\n2,0.09\n",
        ("tender-conflict", "tender.toml:23", "2 prices"),
    ),
    by_year_case(
        "a year without price", "year,price [NCU/kWh]\n1,0.08\n3,0.09\n", ("profile-gap", f"{_BY_YEAR}:3", "3")
    ),
    by_year_case(
        "calendar years", "year,price [NCU/kWh]\n2026,0.08\n2027,0.09\n", ("profile-time", f"{_BY_YEAR}:2", "2026")
    ),
)

BAD_PROFILES: tuple[BadInput, ...] = (*TIMES, *VALUES, *COLUMNS, *DAYS, *FILES, *PRICES)
