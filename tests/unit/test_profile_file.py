"""Load profiles: years of stamps, numbered steps and typical days, read as they stand or not at all."""

from __future__ import annotations

import hashlib
import math
from collections import Counter
from datetime import date
from pathlib import Path

import pytest

from lossworth.findings import Place
from lossworth.records.profile import Profile
from support.profile_texts import (
    LOADED,
    PROFILE_LINE,
    TYPICAL,
    day_rows,
    daylight_saving_rows,
    profile_of,
    step_rows,
    text_of,
    with_value,
    without,
    year_rows,
)
from support.tender_folders import told

LOCAL = LOADED.replace('"standard time"', '"local time with daylight saving"')
MAGNITUDE = LOADED.replace("peak_load_pu", 'profile_reverse_flow = "magnitude"\npeak_load_pu', 1)
COMMA = '\n[bids.decimal_mark_of]\n"town.csv" = ","\n[economics.board]'


def read(folder: Path, text: str | bytes, tender: str = LOADED) -> Profile:
    """Profile that has no faults; remarks are no faults."""
    profile, findings = profile_of(folder, text, tender)
    assert {finding.kind for finding in findings} <= {"profile-remark"}, [str(finding) for finding in findings]
    assert profile is not None
    return profile


@pytest.mark.parametrize(("minutes", "steps"), [(60, 8760), (30, 17520), (15, 35040)])
def test_read_profile__year(tmp_path: Path, minutes: int, steps: int) -> None:
    """A year of hours, half hours or quarter-hours has a value, a month, a day type and an hour for each step."""
    rows = year_rows(minutes=minutes)
    profile = read(tmp_path, text_of(rows))
    grid = profile.grid
    assert profile.loads == tuple(float(value) for _, value in rows)
    assert (profile.unit, grid.kind, grid.step_hours, len(grid.hours)) == ("kVA", "year", minutes / 60, steps)
    assert sum(grid.hours) == 8760
    assert Counter(grid.months)[2] == 28 * 24 * 60 // minutes
    # 2025 began on a Wednesday: 52 Saturdays, 52 Sundays
    assert Counter(grid.day_types) == {
        "workday": 261 * 1440 // minutes,
        "saturday": 52 * 1440 // minutes,
        "sunday": 52 * 1440 // minutes,
    }
    assert grid.day_types[3 * 1440 // minutes] == "saturday"
    assert grid.starts[: 1440 // minutes] == tuple(n * minutes / 60 for n in range(1440 // minutes))


def test_read_profile__file_and_place(tmp_path: Path) -> None:
    """A profile knows its file, the fingerprint of its bytes and the key that names it."""
    text = text_of(year_rows())
    profile = read(tmp_path, text)
    assert (profile.file, profile.remarks) == ("profiles/town.csv", ())
    assert profile.sha256 == hashlib.sha256(text.encode()).hexdigest()
    assert profile.place == Place("tender.toml", line=PROFILE_LINE, key="loading.town.profile")


def test_read_profile__leap_year(tmp_path: Path) -> None:
    """A leap year has its own hours, and says so."""
    profile, findings = profile_of(tmp_path, text_of(year_rows(2024, 30)))
    assert profile is not None
    assert (len(profile.loads), sum(profile.grid.hours)) == (17568, 8784)
    assert "leap year" in profile.remarks[0]
    assert told(findings) == [("profile-remark", "profiles/town.csv", None)]


@pytest.mark.parametrize(
    ("first", "hours"),
    [(date(2023, 7, 1), 8784), (date(2024, 2, 29), 8784), (date(2024, 3, 1), 8760), (date(2022, 10, 1), 8760)],
)
def test_read_profile__year_from_any_day(tmp_path: Path, first: date, hours: int) -> None:
    """A year may begin on any day; it is a leap year where it holds 29 February."""
    if (first.month, first.day) == (2, 29):
        rows = [row for row in year_rows(2024) + year_rows(2025) if "2024-02-29" <= row[0] < "2025-03-01"]
    else:
        rows = year_rows(first=first)
    assert sum(read(tmp_path, text_of(rows)).grid.hours) == hours


@pytest.mark.parametrize("minutes", [60, 30, 15])
def test_read_profile__daylight_saving(tmp_path: Path, minutes: int) -> None:
    """The hour that the clock skips is not there, the one that it repeats is there twice: 8,760 hours, once each."""
    rows = daylight_saving_rows(minutes)
    profile = read(tmp_path, text_of(rows), LOCAL)
    standard = read(tmp_path, text_of(year_rows(minutes=minutes)))
    assert profile.loads == standard.loads
    assert (sum(profile.grid.hours), len(profile.loads)) == (8760, 525600 // minutes)
    by_hour = Counter(int(start) for start in profile.grid.starts)
    assert all(by_hour[hour] == 365 * 60 // minutes for hour in range(24) if hour != 2)
    assert by_hour[2] == 365 * 60 // minutes  # one less in spring, one more in autumn
    assert "2025-03-30T03:00" in profile.remarks[0]
    assert "2025-10-26T02:00" in profile.remarks[0]


def test_read_profile__daylight_saving_of_the_other_hemisphere(tmp_path: Path) -> None:
    """The doubled hour may come first."""
    rows = daylight_saving_rows()
    half = next(n for n, (time, _) in enumerate(rows) if time == "2025-07-01T00:00")
    shifted = [(f"2026{time[4:]}", value) for time, value in rows[:half]]
    profile = read(tmp_path, text_of(rows[half:] + shifted), LOCAL)
    assert sum(profile.grid.hours) == 8760


def test_read_profile__numbered_steps(tmp_path: Path) -> None:
    """Steps with numbers have loads and hours, and nothing is known of the calendar."""
    profile = read(tmp_path, text_of(step_rows(35040), "step,load [A]"))
    grid = profile.grid
    assert (profile.unit, grid.kind, grid.step_hours, sum(grid.hours)) == ("A", "year", 0.25, 8760)
    assert (grid.day_types, grid.months, grid.starts) == ((), (), ())


@pytest.mark.parametrize("minutes", [60, 30, 15])
def test_read_profile__typical_days(tmp_path: Path, minutes: int) -> None:
    """Each step of a typical day stands for as many hours as the day has days a year."""
    profile = read(tmp_path, text_of(day_rows(minutes), "day type,time,load [kVA]"), TYPICAL)
    grid = profile.grid
    steps = 1440 // minutes
    assert (grid.kind, len(grid.hours), math.fsum(grid.hours)) == ("typical days", 3 * steps, 8760)
    assert grid.hours[0] == 251 * minutes / 60
    assert grid.hours[-1] == 62 * minutes / 60
    assert grid.day_types == ("workday",) * steps + ("saturday",) * steps + ("sunday",) * steps
    assert (grid.months, grid.starts[steps - 1]) == ((), 24 - minutes / 60)


def test_read_profile__typical_days_by_names_of_the_buyer(tmp_path: Path) -> None:
    """Day types may have any names, without regard to capitals; weights may be fractions, and make a leap year."""
    weights = '{ "Winter  workday" = 100.5, rest = 265.5 }'
    tender = TYPICAL.replace("{ workday = 251, saturday = 52, sunday = 62 }", weights.replace("  ", " "))
    text = text_of(day_rows(day_types=("WINTER workday", "Rest")), "day type,time,load [kVA]")
    profile = read(tmp_path, text, tender)
    assert set(profile.grid.day_types) == {"winter workday", "rest"}
    assert sum(profile.grid.hours) == pytest.approx(8784)
    assert "leap year" in profile.remarks[0]


@pytest.mark.parametrize(
    ("unit", "of_record", "times"),
    [("kVA", "kVA", 1), ("MVA", "kVA", 1000), ("kW", "kW", 1), ("MW", "kW", 1000), ("A", "A", 1), ("pu", "pu", 1)],
)
def test_read_profile__units(tmp_path: Path, unit: str, of_record: str, times: int) -> None:
    """Megavoltamperes become kilovoltamperes; a unit of the record stays."""
    rows = [(time, f"0.{value}") for time, value in year_rows()]
    profile = read(tmp_path, text_of(rows, f"time,load [{unit}]"))
    assert profile.unit == of_record
    assert profile.loads[0] == float(rows[0][1]) * times


def test_read_profile__kilowatts_are_remarked(tmp_path: Path) -> None:
    """Active power has the shape of the current only at a constant power factor."""
    assert "power factor" in read(tmp_path, text_of(year_rows(), "time,load [kW]")).remarks[0]


def test_read_profile__reverse_flow(tmp_path: Path) -> None:
    """Declared reverse flow counts by its magnitude, and is remarked with how often and how much."""
    rows = with_value(with_value(year_rows(), 5, "-3"), 6, "-4.50")
    profile = read(tmp_path, text_of(rows), MAGNITUDE)
    assert profile.loads[5:7] == (3, 4.5)
    assert profile.remarks == (
        "reverse flow in 2 steps counts by its magnitude, as profile_reverse_flow says; the greatest is 4.5 kVA",
    )


@pytest.mark.parametrize(
    "text",
    [
        text_of(year_rows()).replace("\n", "\r\n"),
        "\ufeff" + text_of(year_rows()),
        text_of(year_rows(), separator=";"),
        "\n" + text_of(year_rows(), " Time , LOAD (kva) ") + "\n\n",
        text_of([(time.replace("T", " "), value) for time, value in year_rows()]),
        text_of([(f"{time}:00", value) for time, value in year_rows()]),
        text_of([(f"{time}Z", value) for time, value in year_rows()]),
        text_of([(f"{time}+01:00", value) for time, value in year_rows()], "time stamp,load [kVA]"),
        text_of([(value, time) for time, value in year_rows()], "load [kVA],time"),
        text_of([(f'"{time}"', f'" {value} "') for time, value in year_rows()], 'time,"load [kVA]"'),
    ],
    ids=["windows", "byte order mark", "semicolons", "blanks", "space", "seconds", "utc", "offset", "order", "quotes"],
)
def test_read_profile__ways_to_write_it(tmp_path: Path, text: str) -> None:
    """What the file looks like does not matter."""
    profile = read(tmp_path, text)
    assert profile.loads == tuple(float(value) for _, value in year_rows())
    assert profile.grid == read(tmp_path, text_of(year_rows())).grid


def test_read_profile__decimal_comma(tmp_path: Path) -> None:
    """The decimal mark is declared by the name of the file, or for all files."""
    text = text_of([(time, f"{value},25") for time, value in year_rows()], separator=";")
    by_name = LOADED.replace("\n[economics.board]", COMMA)
    for_all = LOADED.replace("[economics.board]", '[bids]\ndecimal_mark = ","\n[economics.board]')
    for tender in (by_name, for_all):
        assert read(tmp_path, text, tender).loads[0] == float(year_rows()[0][1]) + 0.25


def test_read_profile__line_of_a_finding(tmp_path: Path) -> None:
    """Blank lines and line ends of Windows do not move the line that a finding names."""
    text = "\r\n\r\n" + text_of(with_value(year_rows(), 5, "x")).replace("\n", "\r\n")
    _, findings = profile_of(tmp_path, text)
    assert told(findings) == [("profile-value", "profiles/town.csv:9[load [kVA]]", "x")]


def test_read_profile__all_faults_at_once(tmp_path: Path) -> None:
    """A value and a gap are told in one run, beside a fault of the tender file."""
    text = text_of(without(with_value(year_rows(), 5, "x"), "2025-06-01T00:00"))
    _, findings = profile_of(tmp_path, text, LOADED.replace("load = 660", "load = -660"))
    assert told(findings) == [
        ("tender-value", "tender.toml:45", "-660"),
        ("profile-value", "profiles/town.csv:7[load [kVA]]", "x"),
        ("profile-gap", "profiles/town.csv:3626", "2025-06-01T01:00"),
    ]


def test_read_profile__many_faults_are_counted(tmp_path: Path) -> None:
    """Of faults in every row ten are listed, and the next says how many there are."""
    _, findings = profile_of(tmp_path, text_of([(time, "") for time, _ in year_rows()]))
    assert len(findings) == 11
    assert findings[-1].rule == "must be stated; so in 8,750 rows from here on"


def test_read_profile__two_of_one_file(tmp_path: Path) -> None:
    """Several loading conditions may rest on one file, and each on its own."""
    second = '[loading.city]\nprofile = "profiles/town.csv"\nprofile_clock = "standard time"\n'
    text = LOADED.replace("[[lot]]", second + "[[lot]]", 1)
    profile, findings = profile_of(tmp_path, text_of(year_rows()), text)
    assert profile is not None
    assert told(findings) == [("tender-key-not-used", "tender.toml:36", None)]
    in_kw, findings = profile_of(tmp_path, text_of(year_rows(), "time,load [kW]"), text)
    assert in_kw is not None
    assert ("tender-key-missing", "tender.toml:36", "a profile in kW") in told(findings)
