"""A year of time stamps: their step, their completeness, changes of the clock, and the calendar of each step."""

from __future__ import annotations

import datetime
import re
from collections.abc import Sequence
from dataclasses import dataclass
from itertools import pairwise

from ..records.profile import TimeGrid
from .file_findings import FileFindings
from .series_table import SeriesTable
from .step_order import Mark, check_order, usual_distance

__all__ = ["STEP_MINUTES", "Clock", "GridReading", "leap_year_remark", "read_year_of_stamps"]

#: Steps that are read: an hour, half an hour, a quarter of an hour.
STEP_MINUTES = (60, 30, 15)

_STAMP = re.compile(r"(?:19|20|21)\d\d-\d\d-\d\d[T ]\d\d:\d\d(?::\d\d)?(?:Z|[+-]\d\d:?\d\d)?")
_DAY_TYPES = ("workday",) * 5 + ("saturday", "sunday")
_HOUR = 60
#: Clocks change at night. Common practice, no source.
_NIGHT = range(5)


@dataclass(frozen=True, slots=True)
class Clock:
    """What the tender says of the clock behind time stamps.

    Parameters
    ----------
    key : str
        The key that says it.
    daylight_saving : bool
        Whether it is local time with daylight saving: then one hour is missing in spring and one stands twice in
        autumn. Else standard time.
    """

    key: str
    daylight_saving: bool = False


@dataclass(frozen=True, slots=True)
class GridReading:
    """When the steps of a file hold.

    Parameters
    ----------
    grid : TimeGrid or None
        None where something is wrong with it.
    remarks : tuple of str
        What was recognized and accepted.
    """

    grid: TimeGrid | None
    remarks: tuple[str, ...] = ()


def leap_year_remark(days: int) -> tuple[str, ...]:
    """Remark on a year of 366 days.

    Parameters
    ----------
    days : int
        Days of the year.

    Returns
    -------
    tuple of str
        Empty for 365.
    """
    return ("a leap year: 8,784 hours; its factors are those of the whole year",) if days == 366 else ()


def read_year_of_stamps(table: SeriesTable, findings: FileFindings, clock: Clock) -> GridReading:
    """Grid of a file whose steps have time stamps.

    Parameters
    ----------
    table : SeriesTable
        With a column of times, each at the beginning of its step.
    findings : FileFindings
        Takes what is wrong.
    clock : Clock
        As the tender declares it.

    Returns
    -------
    GridReading
        Over one year from the first stamp on, which begins a day.

    Notes
    -----
    With daylight saving each row still stands for one step of elapsed time. The hour that the clock skips is not there
    and the one that it repeats is there twice, so the rows make the hours of a year: 8,760 or 8,784. Day type, month
    and hour of the day are those of the clock.
    """
    stamps = _stamps(table, findings, clock)
    if stamps is None:
        return GridReading(None)
    marks = [
        Mark(row.number, table.text(row, "time"), (stamp.toordinal() * 24 + stamp.hour) * _HOUR + stamp.minute)
        for row, stamp in zip(table.rows, stamps, strict=True)
    ]
    step = usual_distance(marks)
    if step not in STEP_MINUTES:
        _refuse_step(marks, step, findings)
        return GridReading(None)
    before = findings.number
    accepted, remarks = _changes_of_the_clock(marks, step, findings, clock)
    check_order(marks, step, "time", findings, accepted)
    days = _days(stamps[0])
    if "profile-order" not in findings:
        _check_ends(marks, stamps, step, days, findings)
    if findings.number > before:
        return GridReading(None)
    return GridReading(_grid(stamps, step), (*leap_year_remark(days), *remarks))


def _stamps(table: SeriesTable, findings: FileFindings, clock: Clock) -> list[datetime.datetime] | None:
    """Stamps without their one offset; None where they do not make a row of times."""
    stamps = [_stamp(table.text(row, "time")) for row in table.rows]
    header = table.header("time")
    for row, stamp in zip(table.rows, stamps, strict=True):
        if stamp is None:
            rule = "must be a date with a time, such as 2025-01-31T13:00"
            findings.add("profile-time", "time", rule, row.number, table.text(row, "time"), column=header)
    read = [stamp for stamp in stamps if stamp is not None]
    if len(read) < len(stamps) or not table.complete:
        return None
    if not read:
        findings.add("profile-length", "rows", "must be there for each step of a year", None, "a header alone")
        return None
    for row, stamp in zip(table.rows, read, strict=True):
        if stamp.utcoffset() != read[0].utcoffset():
            rule = f"must have the offset of the first step, {table.text(table.rows[0], 'time')}"
            fix = f"Write local time without offset and declare {clock.key}, or write all stamps in one offset."
            findings.add("profile-time", "time", rule, row.number, table.text(row, "time"), column=header, fix=fix)
            return None
    return [stamp.replace(tzinfo=None) for stamp in read]


def _stamp(text: str) -> datetime.datetime | None:
    if not _STAMP.fullmatch(text):
        return None
    try:
        stamp = datetime.datetime.fromisoformat(text)
    except ValueError:
        return None
    return None if stamp.second else stamp


def _refuse_step(marks: Sequence[Mark], step: int | None, findings: FileFindings) -> None:
    if step is None:
        rule = "must rise from row to row"
        findings.add("profile-order", "time", rule, marks[-1].line, marks[-1].text)
        return
    rule = "must follow each other after 60, 30 or 15 minutes"
    fix = (
        "Bring the values to quarter-hours: means hide the peak, so take the peak load from the finer steps and state "
        "it as peak_load_pu."
    )
    findings.add("profile-step-length", "steps", rule, marks[1].line, f"{step} minutes", fix=fix)


def _changes_of_the_clock(
    marks: Sequence[Mark], step: int, findings: FileFindings, clock: Clock
) -> tuple[frozenset[int], tuple[str, ...]]:
    """Lines behind an hour that the clock skips or repeats, where that is accepted or reported, and the remark."""
    skips = [
        (a, b) for a, b in pairwise(marks) if b.at - a.at == step + _HOUR and (a.at + step) // _HOUR % 24 in _NIGHT
    ]
    repeats = [(a, b) for a, b in pairwise(marks) if b.at - a.at == step - _HOUR and b.at // _HOUR % 24 in _NIGHT]
    missing = [f"the hour before {b.text} is missing (line {b.line})" for _, b in skips]
    doubled = [f"the hour from {b.text} stands twice (line {b.line})" for _, b in repeats]
    found = ", ".join((*missing, *doubled)) or "no hour of the night is missing or doubled"
    lines = frozenset(b.line for _, b in (*skips, *repeats))
    in_pair = len(skips) == len(repeats) == 1
    if in_pair and clock.daylight_saving:
        return lines, (f"local time with daylight saving: {found}; the rows make the hours of a year",)
    if not in_pair and not clock.daylight_saving:
        return frozenset(), ()  # gaps and repetitions like all others
    if clock.daylight_saving:
        rule = f"must have one missing and one doubled hour, as {clock.key} declares: {found}"
        fix = (
            f'Write {clock.key} = "standard time" if the clock was not changed; else another program has filled or '
            "cut the file: get it as it was measured."
        )
    else:
        rule = f"must run in standard time, where {clock.key} declares nothing else: {found}"
        fix = f'Write {clock.key} = "local time with daylight saving" if the clock was changed; else mend the file.'
    findings.add("profile-daylight-saving", "time", rule, min(lines, default=None), fix=fix)
    return lines, ()


def _days(first: datetime.datetime) -> int:
    """Days from a stamp to the same day of the next year."""
    if (first.month, first.day) == (2, 29):
        return 366
    return (first.replace(year=first.year + 1) - first).days


def _check_ends(
    marks: Sequence[Mark], stamps: Sequence[datetime.datetime], step: int, days: int, findings: FileFindings
) -> None:
    first, last = marks[0], marks[-1]
    if stamps[0].time() != datetime.time(0):
        rule = "must begin a day at 00:00: a time is that of the beginning of its step"
        fix = "If the times are those of the ends of the steps, write each one step earlier; else begin at midnight."
        findings.add("profile-time", "first step", rule, first.line, first.text, fix=fix)
        return
    end = first.at + days * 24 * _HOUR - step
    if last.at != end:
        day, minute = divmod(end, 24 * _HOUR)
        expected = f"{datetime.date.fromordinal(day)}T{minute // _HOUR:02d}:{minute % _HOUR:02d}"
        rule = f"must be {expected}, a year after the first, {first.text}"
        findings.add("profile-length", "last step", rule, last.line, f"{last.text} ({len(marks):,} steps)")


def _grid(stamps: Sequence[datetime.datetime], step: int) -> TimeGrid:
    return TimeGrid(
        kind="year",
        step_hours=step / _HOUR,
        hours=(step / _HOUR,) * len(stamps),
        day_types=tuple(_DAY_TYPES[stamp.weekday()] for stamp in stamps),
        months=tuple(stamp.month for stamp in stamps),
        starts=tuple(stamp.hour + stamp.minute / _HOUR for stamp in stamps),
    )
