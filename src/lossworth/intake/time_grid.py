"""When the steps of a file over time hold: a year of stamps, a year of numbered steps, or typical days."""

from __future__ import annotations

import re
from collections.abc import Mapping, Sequence
from decimal import Decimal
from itertools import groupby

from ..findings import Finding, Place
from ..records.profile import TimeGrid
from ..records.quantity import Quantity
from .calendar_year import STEP_MINUTES, Clock, GridReading, leap_year_remark, read_year_of_stamps
from .cells import collapsed
from .file_findings import FileFindings
from .series_table import SeriesTable
from .sheet import Row
from .step_order import Mark, check_order, usual_distance
from .suggestions import did_you_mean

__all__ = ["DayWeights", "read_grid"]

_NUMBER = re.compile(r"[0-9]{1,6}")
_TIME_OF_DAY = re.compile(r"([01]?[0-9]|2[0-3]):([0-5][0-9])(?::00)?")
_HOUR, _DAY = 60, 1440
_DAYS_OF_A_YEAR = (365, 366)
#: Steps of a year: days of the year and length of a step in hours.
_YEARS = {days * _DAY // minutes: (days, minutes / _HOUR) for days in _DAYS_OF_A_YEAR for minutes in STEP_MINUTES}


class DayWeights:
    """Days of a year that each typical day stands for, as the tender file states them.

    Parameters
    ----------
    stated : mapping of str to Quantity or None
        By day type in small letters; None where the tender file does not state any.
    place : Place
        The key, or that of the profile where there is none.
    """

    def __init__(self, stated: Mapping[str, Quantity] | None, place: Place) -> None:
        self.stated, self.place = stated, place

    def check(self, day_types: Sequence[str], file: str) -> tuple[Finding, ...]:
        """Findings on weights that do not fit the day types of a file."""
        kind, key = "profile-day-weights", self.place.key or "profile_day_weights"
        if self.stated is None:
            rule = f"must be given for the typical days of {file}: {', '.join(day_types)}"
            return (Finding(kind, "profile_day_weights", rule, self.place),)
        found = [
            Finding(kind, f"{key}.{name}", "must be above 0 days a year", number.place, number.text)
            for name, number in self.stated.items()
            if number.value <= 0
        ]
        if missing := [name for name in day_types if name not in self.stated]:
            rule = f"must have every day type of {file}; without {', '.join(missing)}"
            found.append(Finding(kind, key, rule, self.place))
        for name, number in self.stated.items():
            if name not in day_types:
                rule = f"must be a day type of {file} ({', '.join(day_types)})"
                fix = did_you_mean(name, [each for each in day_types if each not in self.stated])
                found.append(Finding(kind, f"{key}.{name}", rule, number.place, name, fix=fix))
        days = self.days
        if days not in _DAYS_OF_A_YEAR:
            found.append(Finding(kind, key, "must make 365 or 366 days in all", self.place, f"{days} days"))
        return tuple(found)

    @property
    def days(self) -> Decimal:
        """Days of all day types together."""
        return sum((number.value for number in (self.stated or {}).values()), Decimal(0))


def read_grid(table: SeriesTable, findings: FileFindings, clock: Clock, weights: DayWeights) -> GridReading:
    """Grid of a file over time.

    Parameters
    ----------
    table : SeriesTable
        The file.
    findings : FileFindings
        Takes what is wrong.
    clock : Clock
        What the tender says of time stamps.
    weights : DayWeights
        What it says of typical days.

    Returns
    -------
    GridReading
        Without a grid where something is wrong with it.
    """
    if table.axis == ("time",):
        return read_year_of_stamps(table, findings, clock)
    if table.axis == ("step",):
        return _year_of_steps(table, findings)
    return _typical_days(table, findings, weights)


def _year_of_steps(table: SeriesTable, findings: FileFindings) -> GridReading:
    """A year of steps with numbers and without dates: day types, months and hours of the day are not known."""
    marks = []
    before = findings.number
    for row in table.rows:
        text = table.text(row, "step")
        if _NUMBER.fullmatch(text):
            marks.append(Mark(row.number, text, int(text)))
        else:
            rule = "must be a whole number"
            findings.add("profile-time", "step", rule, row.number, text, column=table.header("step"), fix=_FIX_STEP)
    if findings.number > before or not table.complete:
        return GridReading(None)
    if not marks:
        findings.add("profile-length", "rows", "must be there for each step of a year", None, "a header alone")
        return GridReading(None)
    if marks[0].at != 1:
        findings.add("profile-time", "first step", "must be 1", marks[0].line, marks[0].text, fix=_FIX_STEP)
    check_order(marks, 1, "step", findings)
    if findings.number == before and len(marks) not in _YEARS:
        rule = "must be that of a year: 8,760, 17,520 or 35,040 steps, of a leap year 8,784, 17,568 or 35,136"
        findings.add("profile-length", "last step", rule, marks[-1].line, f"{len(marks):,} steps")
    if findings.number > before:
        return GridReading(None)
    days, hours = _YEARS[len(marks)]
    grid = TimeGrid(kind="year", step_hours=hours, hours=(hours,) * len(marks))
    return GridReading(grid, leap_year_remark(days))


_FIX_STEP = "Number the steps 1, 2, 3 ... from the beginning of the year."


def _typical_days(table: SeriesTable, findings: FileFindings, weights: DayWeights) -> GridReading:
    before = findings.number
    days = _days_of(table, findings)
    if findings.number > before or not table.complete:
        return GridReading(None)
    for finding in weights.check(list(days), findings.file):
        findings.put(finding)
    step = _check_days(days, findings)
    if findings.number > before or step is None or weights.stated is None:
        return GridReading(None)
    hours = step / _HOUR
    grid = TimeGrid(
        kind="typical days",
        step_hours=hours,
        hours=tuple(float(weights.stated[name].value) * hours for name, marks in days.items() for _ in marks),
        day_types=tuple(name for name, marks in days.items() for _ in marks),
        starts=tuple(mark.at / _HOUR for marks in days.values() for mark in marks),
    )
    return GridReading(grid, leap_year_remark(int(weights.days)))


def _days_of(table: SeriesTable, findings: FileFindings) -> Mapping[str, list[Mark]]:
    """Steps of each day type, which stand together."""
    days: dict[str, list[Mark]] = {}
    for name, rows in groupby(table.rows, key=lambda row: collapsed(table.text(row, "day type")).casefold()):
        marks = [mark for row in rows if (mark := _mark(table, row, name, findings)) is not None]
        if name in days and marks:
            rule = f"must stand together with the other steps of {name}, which end above"
            findings.add(
                "profile-order", "day type", rule, marks[0].line, name, fix="Sort the rows by day type and time."
            )
        days.setdefault(name, []).extend(marks)
    if not days:
        findings.add("profile-length", "rows", "must be there for each typical day", None, "a header alone")
    return days


def _mark(table: SeriesTable, row: Row, day_type: str, findings: FileFindings) -> Mark | None:
    text = table.text(row, "time")
    match = _TIME_OF_DAY.fullmatch(text)
    if not day_type:
        rule = "must be named, as the weights in the tender file name it"
        findings.add("profile-time", "day type", rule, row.number, "", column=table.header("day type"), fix=_FIX_DAY)
    elif match is None:
        rule = "must be a time of day from 00:00 to 23:59"
        findings.add("profile-time", "time", rule, row.number, text, column=table.header("time"), fix=_FIX_DAY)
    else:
        return Mark(row.number, f"{day_type} {text}", int(match[1]) * _HOUR + int(match[2]))
    return None


_FIX_DAY = "Write a row such as: workday, 07:00, 312."


def _check_days(days: Mapping[str, list[Mark]], findings: FileFindings) -> int | None:
    """Check that each day is whole; the step of all days in minutes."""
    distances = [usual_distance(marks) for marks in days.values()]
    step = next((distance for distance in distances if distance is not None), None)
    if step not in STEP_MINUTES:
        first = next(iter(days.values()))[0]
        got = "one step" if step is None else f"{step} minutes"
        findings.add(
            "profile-step-length", "time", "must follow each other after 60, 30 or 15 minutes", first.line, got
        )
        return None
    for marks in days.values():
        check_order(marks, step, "time", findings)
        first, last = marks[0], marks[-1]
        if first.at:
            rule = "must begin the day at 00:00: a time is that of the beginning of its step"
            findings.add("profile-time", "first step", rule, first.line, first.text, fix=_FIX_MIDNIGHT)
        elif "profile-order" not in findings and last.at != _DAY - step:
            rule = f"must be {(_DAY - step) // _HOUR}:{(_DAY - step) % _HOUR:02d}, the last of a whole day"
            findings.add("profile-length", "last step", rule, last.line, last.text)
    return step


_FIX_MIDNIGHT = "If the times are those of the ends of the steps, write each one step earlier."
