"""Plain geometry of the year-by-year picture: one column a year, with marks at the side and below."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from decimal import Decimal

from .figures import ticks
from .figures_load import YTick
from .formats import number

__all__ = ["YearBar", "YearBars", "YearMark", "year_bars"]

_TOP, _BOTTOM, _HEIGHT = 6.0, 116.0, 134
#: Share of its room that a column fills.
_FILLED = 0.78
_MOST_MARKS = 5
#: Least distance between the last year and the mark before it. [share of the width]
_LEAST_DISTANCE = 0.1


@dataclass(frozen=True, slots=True)
class YearBar:
    """The column of one year: left end and width [percent of the drawing's width], top and height [px]."""

    x: float
    width: float
    y: float
    height: float


@dataclass(frozen=True, slots=True)
class YearMark:
    """A year written below its column: place in percent, text, and which end of the text the place holds."""

    x: float
    label: str
    anchor: str


@dataclass(frozen=True, slots=True)
class YearBars:
    """A whole drawing of one column a year, lengths in pixels."""

    height: int
    bottom: float
    text_y: int
    bars: tuple[YearBar, ...]
    marks: tuple[YearMark, ...]
    y_ticks: tuple[YTick, ...]


def year_bars(values: Sequence[float]) -> YearBars:
    """Columns from a common zero, one a year, on a scale that the largest fills.

    Parameters
    ----------
    values : sequence of float
        One a year, year 1 first, not below zero.

    Returns
    -------
    YearBars
        The geometry.
    """
    largest = max(values, default=0.0)
    room = 100 / max(len(values), 1)
    bars = tuple(_bar(position, value, largest, room) for position, value in enumerate(values))
    return YearBars(
        height=_HEIGHT,
        bottom=_BOTTOM,
        text_y=_HEIGHT - 4,
        bars=bars,
        marks=tuple(_mark(year, len(values), room) for year in _marked(len(values))),
        y_ticks=tuple(
            YTick(_y(float(value), largest), number(value)) for value in ticks(Decimal(repr(largest)), at_most=3)
        ),
    )


def _bar(position: int, value: float, largest: float, room: float) -> YearBar:
    y = _y(value, largest)
    return YearBar(
        x=round((position + (1 - _FILLED) / 2) * room, 3),
        width=round(room * _FILLED, 3),
        y=y,
        height=round(_BOTTOM - y, 1),
    )


def _y(value: float, largest: float) -> float:
    share = value / largest if largest > 0 else 0.0
    return round(_BOTTOM - (_BOTTOM - _TOP) * share, 1)


def _mark(year: int, years: int, room: float) -> YearMark:
    """At the middle of the column; the last of many ends with the drawing."""
    if year == years and years > _MOST_MARKS:
        return YearMark(100.0, str(year), "end")
    return YearMark(round((year - 0.5) * room, 3), str(year), "middle")


def _marked(years: int) -> tuple[int, ...]:
    """The first year, the last, and round ones between them that stand clear of both."""
    step = next(s for s in _steps() if years <= s * _MOST_MARKS)
    apart = _LEAST_DISTANCE * years
    between = [year for year in range(step, years, step) if year - 1 >= apart and years - year >= apart]
    return tuple(sorted({1, *between, years})) if years else ()


def _steps() -> Sequence[int]:
    return [factor * 10**power for power in range(4) for factor in (1, 2, 5)]
