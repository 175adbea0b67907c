"""Laws of reading loads: what is written is read back, every missing step is found, and no bytes make a traceback."""

from __future__ import annotations

import atexit
import math
import random
import shutil
import tempfile
from pathlib import Path

from hypothesis import HealthCheck, assume, given, settings
from hypothesis import strategies as st

from support.profile_texts import LOADED, TYPICAL, day_rows, profile_of, step_rows, text_of, year_rows
from support.tender_folders import told

FEW = settings(max_examples=15, deadline=None, suppress_health_check=[HealthCheck.too_slow])
MANY = settings(max_examples=150, deadline=None, suppress_health_check=[HealthCheck.too_slow])
FOLDER = Path(tempfile.mkdtemp(prefix="lossworth-profiles-"))
atexit.register(shutil.rmtree, FOLDER, ignore_errors=True)

COMMAS = LOADED.replace("[economics.board]", '[bids.decimal_mark_of]\n"town.csv" = ","\n[economics.board]')
HOURS = year_rows()
seeds = st.integers(0, 2**32)


def loads_of(random: random.Random, steps: int) -> list[str]:
    """Loads of random sizes, at most 12 digits, none of them zero."""
    return [
        f"{random.uniform(0.001, 10 ** random.randrange(1, 6)):.{random.randrange(4)}f}" for _ in range(steps - 1)
    ] + ["1"]


@FEW
@given(seeds, st.sampled_from([60, 30]), st.sampled_from([2023, 2024]), st.booleans(), st.booleans())
def test_read_profile__year_reads_back(seed: int, minutes: int, year: int, commas: bool, numbered: bool) -> None:
    """A written year of loads reads back exactly, by times or by numbers, with points or commas."""
    rows = year_rows(year, minutes)
    loads = loads_of(random.Random(seed), len(rows))
    when = [number for number, _ in step_rows(len(rows))] if numbered else [time for time, _ in rows]
    written = [load.replace(".", ",") if commas else load for load in loads]
    header = f"{'step' if numbered else 'time'},load [kVA]"
    text = text_of(list(zip(when, written, strict=True)), header, ";" if commas else ",")
    profile, _ = profile_of(FOLDER, text, COMMAS if commas else LOADED)
    assert profile is not None
    assert profile.loads == tuple(map(float, loads))
    assert sum(profile.grid.hours) == (8784 if year == 2024 else 8760)


@FEW
@given(
    seeds,
    st.sampled_from([60, 30, 15]),
    st.lists(st.text("abcdefgh", min_size=1, max_size=8), min_size=1, max_size=6, unique=True),
    st.sampled_from([365, 366]),
)
def test_read_profile__typical_days_read_back(seed: int, minutes: int, names: list[str], days: int) -> None:
    """Written typical days read back exactly, and stand for all the hours of a year."""
    rows = day_rows(minutes, names)
    loads = loads_of(random.Random(seed), len(rows))
    cuts = sorted(random.Random(seed).sample(range(1, days), len(names) - 1))
    counts = [after - before for before, after in zip([0, *cuts], [*cuts, days], strict=True)]
    weights = ", ".join(f"{name} = {count}" for name, count in zip(names, counts, strict=True))
    tender = TYPICAL.replace("workday = 251, saturday = 52, sunday = 62", weights)
    text = text_of([(*row[:2], load) for row, load in zip(rows, loads, strict=True)], "day type,time,load [kVA]")
    profile, findings = profile_of(FOLDER, text, tender)
    assert profile is not None, [str(finding) for finding in findings]
    assert profile.loads == tuple(map(float, loads))
    assert profile.grid.day_types == tuple(row[0] for row in rows)
    assert math.isclose(math.fsum(profile.grid.hours), days * 24)


@FEW
@given(st.integers(1, 8758), st.integers(1, 400))
def test_read_profile__every_gap_is_found(start: int, length: int) -> None:
    """Steps that are left out anywhere inside the year are found, with the line behind them and their number."""
    length = min(length, 8759 - start)
    assume(not (length == 1 and HOURS[start][0][11:] < "05:00"))  # that one may be a change of the clock
    _, findings = profile_of(FOLDER, text_of(HOURS[:start] + HOURS[start + length :]))
    assert told(findings) == [("profile-gap", f"profiles/town.csv:{start + 2}", HOURS[start + length][0])]
    missing = f"{length:,} steps are missing" if length > 1 else "1 step is missing"
    assert findings[0].rule.endswith(missing)


@FEW
@given(st.integers(0, 8759))
def test_read_profile__every_repetition_is_found(at: int) -> None:
    """A row that stands twice is found wherever it stands."""
    _, findings = profile_of(FOLDER, text_of(HOURS[: at + 1] + HOURS[at:]))
    assert told(findings) == [("profile-step-twice", f"profiles/town.csv:{at + 3}", HOURS[at][0])]


@FEW
@given(st.integers(0, 8758), st.integers(1, 8759))
def test_read_profile__every_disorder_is_found(one: int, other: int) -> None:
    """Two rows that have changed places are never read as they stand."""
    assume(one != other)
    rows = list(HOURS)
    rows[one], rows[other] = rows[other], rows[one]
    profile, findings = profile_of(FOLDER, text_of(rows))
    assert profile is None
    assert findings


@MANY
@given(st.one_of(st.binary(max_size=300), st.text(max_size=200).map(lambda text: text.encode("utf-8", "ignore"))))
def test_read_profile__any_bytes(data: bytes) -> None:
    """Any bytes, also behind a good header, make findings that can be printed."""
    for head in (b"", b"time,load [kVA]\n", b"step,load [kW]\n1,1\n", b"day type,time,load [A]\na,00:00,1\n"):
        profile, findings = profile_of(FOLDER, head + data, TYPICAL)
        assert profile is None
        assert findings
        assert all(str(finding) for finding in findings)


CELLS = '|1|0|-1|nan|1e400|12:00|24:00|workday|9999|1,5|"|\u00a05|1_0|\u0663|2025-01-01T00:00|2025-02-30T00:00'
MORE_CELLS = "2025-01-01T00:00+02:00|2025-01-01T01:00Z|0001-01-01T00:00"
cells = st.sampled_from([*CELLS.split("|"), *MORE_CELLS.split("|")])


@MANY
@given(st.lists(st.tuples(cells, cells, cells), max_size=5), st.sampled_from(["time", "step", "day type,time"]))
def test_read_profile__any_cells(rows: list[tuple[str, str, str]], axis: str) -> None:
    """Any cells below a good header make findings: a few rows are never a year or a day."""
    width = axis.count(",") + 2
    text = text_of([row[:width] for row in rows], f"{axis},load [kVA]")
    for tender in (LOADED, TYPICAL):
        profile, findings = profile_of(FOLDER, text, tender)
        assert profile is None
        assert findings
        assert all(str(finding) for finding in findings)
