"""Plain geometry of the load duration picture: curves of two years, thresholds of the cooling stages, labels.

As in `figures`, places across are in percent of the drawing's width and places down in pixels. Paths cannot be written
in percent: they have a width of `LoadPicture.width` units and are stretched to that of the drawing.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from decimal import Decimal

from .figures import Tick, ticks
from .formats import number

__all__ = ["Dot", "LoadCurve", "LoadOfYear", "LoadPicture", "StageLine", "StageMark", "YTick", "load_picture"]

_UNITS = 1000
_TOP, _BOTTOM, _HEIGHT = 30.0, 238.0, 258
#: Room that a line of text needs above and below its baseline. [px]
_ABOVE, _BELOW = 14.0, 5.0
_LINE = 15.0
_LABEL_DX = 6
#: Where a curve's label may begin, if it stands above the curve, or end, if below. [percent]
_STARTS = (3, 10, 18, 26, 34, 40)
_ENDS = (74, 66, 82, 90, 97, 58)

_Span = tuple[float, float]


@dataclass(frozen=True, slots=True)
class LoadOfYear:
    """One year whose load is drawn: the label of its curve and its peak load. [per unit of the rating]"""

    label: str
    peak_pu: float


@dataclass(frozen=True, slots=True)
class StageMark:
    """A cooling stage to be drawn.

    Parameters
    ----------
    above_pu : float
        Load above which it runs. [per unit of the rating]
    label, hours_text : str
        Its name with its threshold; its hours in words, shown where there is room.
    hours : tuple of float
        Hours that it runs in each of the years drawn. [hour/year]
    """

    above_pu: float
    label: str
    hours_text: str
    hours: tuple[float, ...]


@dataclass(frozen=True, slots=True)
class LoadCurve:
    """The curve of one year.

    Parameters
    ----------
    name : str
        ``"first"``, ``"last"`` or, where the load stays, ``"every"``.
    line, area : str
        Path of the curve, and of the area between it and the axis.
    label : str
        Which year it is.
    label_x : float
        Place of the label. [percent]
    label_dx : int
        How far it is moved from there. [px]
    label_y : float
        Its baseline. [px]
    anchor : str
        Which end of the label stands there: ``"start"`` or ``"end"``.
    is_inside : bool
        Whether the label stands on the area below the curve.
    """

    name: str
    line: str
    area: str
    label: str
    label_x: float
    label_dx: int
    label_y: float
    anchor: str
    is_inside: bool


@dataclass(frozen=True, slots=True)
class Dot:
    """Where a curve crosses a threshold, in percent of the width."""

    x: float


@dataclass(frozen=True, slots=True)
class StageLine:
    """The threshold of a cooling stage: its line at `y`, the baseline of its label, and the crossings. [px]"""

    y: float
    label: str
    hours_text: str
    label_y: float
    dots: tuple[Dot, ...]


@dataclass(frozen=True, slots=True)
class YTick:
    """One mark of the scale at the side: place and text. [px]"""

    y: float
    label: str


@dataclass(frozen=True, slots=True)
class LoadPicture:
    """A whole load duration picture; larger areas come first, so that smaller ones are drawn over them."""

    width: int
    height: int
    top: float
    bottom: float
    curves: tuple[LoadCurve, ...]
    stages: tuple[StageLine, ...]
    x_ticks: tuple[Tick, ...]
    y_ticks: tuple[YTick, ...]


def load_picture(
    duration: Sequence[tuple[float, float]], years: Sequence[LoadOfYear], stages: Sequence[StageMark] = ()
) -> LoadPicture:
    """Load duration curves of one or two years, with the thresholds of cooling stages.

    Parameters
    ----------
    duration : sequence of (float, float)
        Hours a year at or above a load, and that load over the peak load; falling, at least one point. [hour/year, 1]
    years : sequence of LoadOfYear
        One or two years, the earlier first.
    stages : sequence of StageMark
        Cooling stages.

    Returns
    -------
    LoadPicture
        The geometry.

    Raises
    ------
    ValueError
        If there is no point, or not one or two years.
    """
    if not duration or len(years) not in (1, 2):
        raise ValueError(f"a picture needs points and one or two years, got {len(duration)} and {len(years)}")
    largest = max(*(year.peak_pu for year in years), *(stage.above_pu for stage in stages), 0.0)
    total = duration[-1][0]
    lines = _stage_lines(stages, total, largest)
    blocked = [(min(line.y, line.label_y - _ABOVE), max(line.y, line.label_y + _BELOW)) for line in lines]
    names = ("first", "last") if len(years) == 2 else ("every",)
    upper = max(range(len(years)), key=lambda position: years[position].peak_pu)
    curves = {
        position: _curve(duration, year, names[position], largest, blocked, above=position == upper)
        for position, year in enumerate(years)
    }
    return LoadPicture(
        width=_UNITS,
        height=_HEIGHT,
        top=_TOP,
        bottom=_BOTTOM,
        curves=(curves.pop(upper), *curves.values()),
        stages=lines,
        x_ticks=tuple(_x_tick(value, total) for value in ticks(Decimal(repr(total)))),
        y_ticks=tuple(
            YTick(_y(float(value), largest), number(value)) for value in ticks(Decimal(repr(largest)), at_most=5)
        ),
    )


def _y(load: float, largest: float) -> float:
    share = load / largest if largest > 0 else 0.0
    return round(_BOTTOM - (_BOTTOM - _TOP) * share, 1)


def _percent(hours: float, total: float) -> float:
    return round(100 * hours / total, 3) if total > 0 else 0.0


def _x_tick(hours: Decimal, total: float) -> Tick:
    x = Decimal(repr(_percent(float(hours), total)))
    return Tick(x, number(hours), "start" if x == 0 else "end" if x > 90 else "middle")


def _curve(
    duration: Sequence[tuple[float, float]],
    year: LoadOfYear,
    name: str,
    largest: float,
    blocked: Sequence[_Span],
    *,
    above: bool,
) -> LoadCurve:
    """Curve in steps: each load holds for the hours between its point and the one before."""
    total = duration[-1][0]
    heights = [_y(level * year.peak_pu, largest) for _, level in duration]
    steps = "".join(
        f"V{y:g}H{_UNITS * _percent(hours, total) / 100:.5g}" for y, (hours, _) in zip(heights, duration, strict=True)
    )
    line = f"M0 {heights[0]:g}{steps}"
    places = [_percent(hours, total) for hours, _ in duration]
    x, y, anchor = _label_above(places, heights, blocked) if above else _label_below(places, heights, blocked)
    dx = _LABEL_DX if anchor == "start" else -_LABEL_DX
    return LoadCurve(name, line, f"{line}V{_BOTTOM:g}H0Z", year.label, x, dx, y, anchor, is_inside=not above)


def _height_at(x: float, places: Sequence[float], heights: Sequence[float]) -> float:
    return next((y for place, y in zip(places, heights, strict=True) if place >= x), heights[-1])


def _label_above(
    places: Sequence[float], heights: Sequence[float], blocked: Sequence[_Span]
) -> tuple[float, float, str]:
    """Above a falling curve everything to the right of a place is free."""
    choices = [(float(x), round(_height_at(x, places, heights) - 8, 1), "start") for x in _STARTS]
    return next((choice for choice in choices if _is_free(choice[1], blocked)), choices[0])


def _label_below(
    places: Sequence[float], heights: Sequence[float], blocked: Sequence[_Span]
) -> tuple[float, float, str]:
    """Below a falling curve everything to the left of a place is free; at last just above the axis."""
    choices = [(float(x), round(_height_at(x, places, heights) + 18, 1), "end") for x in _ENDS]
    free = (choice for choice in choices if choice[1] + _BELOW < _BOTTOM and _is_free(choice[1], blocked))
    return next(free, (2.0, _BOTTOM - 8, "start"))


def _is_free(baseline: float, blocked: Iterable[_Span]) -> bool:
    return all(baseline + _BELOW < top or baseline - _ABOVE > bottom for top, bottom in blocked)


def _stage_lines(stages: Sequence[StageMark], total: float, largest: float) -> tuple[StageLine, ...]:
    """Thresholds from the top; labels stand above their lines, and make room for each other downwards."""
    lines: list[StageLine] = []
    lowest = 0.0
    for stage in sorted(stages, key=lambda stage: -stage.above_pu):
        y = _y(stage.above_pu, largest)
        lowest = max(y - 5, lowest + _LINE)
        dots = tuple(Dot(_percent(hours, total)) for hours in dict.fromkeys(stage.hours) if hours > 0)
        lines.append(StageLine(y, stage.label, stage.hours_text, round(lowest, 1), dots))
    return tuple(lines)
