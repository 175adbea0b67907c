"""A load profile: a csv file in, the load of each step of a year or of typical days out."""

from __future__ import annotations

import hashlib
from collections.abc import Sequence
from dataclasses import dataclass
from decimal import Decimal
from statistics import median
from types import MappingProxyType
from typing import Literal, cast

from ..findings import Finding, Place
from ..records.profile import Profile
from ..units import LOSS_UNITS, RATED_POWER_UNITS
from .calendar_year import Clock
from .cells import Marks
from .file_findings import FileFindings
from .series_table import SeriesKind, SeriesTable, read_series_table, read_values
from .time_grid import DayWeights, read_grid

__all__ = ["GREATEST_PU", "PROFILE", "ProfileRules", "question_peak", "read_profile"]

PROFILE = SeriesKind(
    "load",
    (("time",), ("step",), ("day type", "time")),
    MappingProxyType(
        {
            **{unit: ("kVA", RATED_POWER_UNITS[unit]) for unit in ("kVA", "MVA")},
            **{unit: ("kW", LOSS_UNITS[unit]) for unit in ("kW", "MW")},
            "A": ("A", Decimal(1)),
            "pu": ("pu", Decimal(1)),
        }
    ),
)
#: A value that many times the median of those above zero is questioned. Common practice, no source.
_MANY_TIMES = 20
#: A load beyond that many times the rating is questioned. Common practice, no source.
GREATEST_PU = 2
_KW_REMARK = "the load is given in kW: it has the shape of the current only at a constant power factor"


@dataclass(frozen=True, slots=True)
class ProfileRules:
    """How the tender says that a profile is to be read.

    Parameters
    ----------
    marks : sequence of Marks
        How numbers stand in it.
    clock : Clock
        The clock behind its time stamps.
    weights : DayWeights
        Days a year of its typical days.
    reverse_flow : bool
        Whether a negative load is reverse flow, which counts by its magnitude.
    key : str
        Key that says so.
    """

    marks: Sequence[Marks]
    clock: Clock
    weights: DayWeights
    reverse_flow: bool
    key: str


def read_profile(
    data: bytes, file: str, rules: ProfileRules, place: Place
) -> tuple[Profile | None, tuple[Finding, ...]]:
    """Load profile of a csv file.

    Parameters
    ----------
    data : bytes
        The file.
    file : str
        Its path relative to the tender's folder.
    rules : ProfileRules
        How it is to be read.
    place : Place
        The key that names it.

    Returns
    -------
    profile : Profile or None
        None where something is wrong with it: nothing is filled in.
    findings : tuple of Finding
        What is wrong, and remarks.
    """
    findings = FileFindings(file)
    table = read_series_table(data, PROFILE, findings)
    if table is None:
        return None, findings.found
    values = list(read_values(table, rules.marks, findings))
    reading = read_grid(table, findings, rules.clock, rules.weights)
    loads, reverse_flow = _magnitudes(table, values, rules, findings)
    if reading.grid is None or loads is None:
        return None, findings.found
    question_peak(table, loads, findings)
    remarks = [*reading.remarks, *reverse_flow]
    if table.unit == "kW":
        remarks.append(_KW_REMARK)
    for remark in remarks:
        findings.add("profile-remark", "load profile", remark)
    profile = Profile(
        file=file,
        unit=cast("Literal['kVA', 'kW', 'A', 'pu']", table.unit),
        loads=tuple(loads),
        grid=reading.grid,
        remarks=tuple(remarks),
        sha256=hashlib.sha256(data).hexdigest(),
        place=place,
    )
    return profile, findings.found


def _magnitudes(
    table: SeriesTable, values: Sequence[Decimal | None], rules: ProfileRules, findings: FileFindings
) -> tuple[list[float] | None, tuple[str, ...]]:
    """Loads as magnitudes, where all of them can be used, with the remark on reverse flow."""
    negative = [(row, value) for row, value in zip(table.rows, values, strict=True) if value is not None and value < 0]
    remarks: tuple[str, ...] = ()
    if negative and rules.reverse_flow:
        least = min(value for _, value in negative)
        remarks = (
            f"reverse flow in {len(negative):,} steps counts by its magnitude, as {rules.key} says; the greatest is "
            f"{-least.normalize():f} {table.unit}",
        )
    elif negative:
        header = table.header(table.value)
        for row, _ in negative:
            text = table.text(row, table.value)
            findings.add(
                "profile-value", "load", "must not be negative", row.number, text, column=header, fix=_FIX_SIGN
            )
    loads = [abs(float(value)) for value in values if value is not None]
    if len(loads) < len(values) or not loads or (negative and not rules.reverse_flow):
        return None, remarks
    if not any(loads):
        findings.add("profile-value", "load", "must be above 0 in a step", None, f"0 in all {len(loads):,} steps")
        return None, remarks
    return loads, remarks


_FIX_SIGN = (
    'If the sign means reverse flow, write profile_reverse_flow = "magnitude" beside the profile: losses do not ask '
    "which way the load flows. Else correct the value."
)


def question_peak(table: SeriesTable, values: Sequence[float], findings: FileFindings) -> None:
    """Question the greatest value where it stands far above the others.

    Parameters
    ----------
    table : SeriesTable
        The file.
    values : sequence of float
        One for each of its rows, not all 0.
    findings : FileFindings
        Takes the question.
    """
    usual = median(value for value in values if value > 0)
    above = [value for value in values if value > _MANY_TIMES * usual]
    if not above:
        return
    row = table.rows[max(range(len(values)), key=values.__getitem__)]
    others = f"; {len(above):,} steps are" if len(above) > 1 else ""
    rule = f"is more than {_MANY_TIMES} times the median of {usual:g} {table.unit}{others}"
    text = table.text(row, table.value)
    findings.add(
        "profile-questioned", f"greatest {table.value}", rule, row.number, text, column=table.header(table.value)
    )
