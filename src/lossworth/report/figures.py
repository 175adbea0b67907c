"""Plain geometry of the pictures: where bars, ticks and labels stand, so that a template only has to print it.

Across, everything is in percent of the drawing's width, and text keeps its own size: one drawing serves a telephone, a
wide screen and paper. Down, everything is in pixels.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from decimal import ROUND_HALF_UP, Decimal

from .formats import number

__all__ = ["Bar", "CostPart", "Segment", "StackedBars", "StackedCost", "Tick", "shortened", "stacked_bars", "ticks"]

#: Width of one digit of a segment's label, and of the space kept free around it. [px]
_DIGIT_PX = 6.4
_LABEL_MARGIN_PX = 10
#: Narrowest drawings on which labels are shown: a telephone, and a sheet of paper or a wider screen. [px]
_NARROW_PX = 300
_WIDE_PX = 620
#: Where in its row a bar's line of text stands, and the bar. [px]
_TEXT_Y = 14
_BAR_Y = 19
_HUNDRED = Decimal(100)


@dataclass(frozen=True, slots=True)
class CostPart:
    """One part of a cost: its name in code, the amount, and the amount as printed."""

    name: str
    amount: Decimal
    text: str


@dataclass(frozen=True, slots=True)
class StackedCost:
    """What one bar stands for: a short mark and a label, a total as printed, the parts from the axis outwards."""

    mark: str
    label: str
    total_text: str
    parts: tuple[CostPart, ...]


@dataclass(frozen=True, slots=True)
class Segment:
    """One part of a bar.

    Parameters
    ----------
    part : str
        Name of the part.
    x, width : Decimal
        Left end and width. [percent of the drawing's width]
    label : str
        Amount as printed; empty where it fits on no drawing.
    label_x : Decimal
        Middle of the label. [percent]
    fits : str
        ``"always"``, ``"wide"`` where only wide drawings have room, ``"never"``.
    """

    part: str
    x: Decimal
    width: Decimal
    label: str
    label_x: Decimal
    fits: str


@dataclass(frozen=True, slots=True)
class Bar:
    """One bar with the line of text above it, at `text_y`; the bar from `y` down, its labels at `label_y`. [px]"""

    mark: str
    label: str
    total_text: str
    text_y: int
    y: int
    height: int
    label_y: int
    segments: tuple[Segment, ...]


@dataclass(frozen=True, slots=True)
class Tick:
    """One mark of the scale: place in percent, text, and which end of the text the mark holds."""

    x: Decimal
    label: str
    anchor: str


@dataclass(frozen=True, slots=True)
class StackedBars:
    """A whole drawing of stacked bars, lengths in pixels; `label_dx` is how far labels stand behind their marks."""

    height: int
    label_dx: int
    bars: tuple[Bar, ...]
    ticks: tuple[Tick, ...]
    scale_top: int
    scale_bottom: int
    scale_text_y: int


def shortened(text: str, longest: int) -> str:
    """Text cut to what a column of labels can carry.

    Parameters
    ----------
    text : str
        Any text.
    longest : int
        Most characters, at least 2.

    Returns
    -------
    str
        The text, or its beginning with an ellipsis.
    """
    return text if len(text) <= longest else text[: longest - 1].rstrip() + "…"


def ticks(largest: Decimal, at_most: int = 4) -> tuple[Decimal, ...]:
    """Round amounts from zero to the largest, at even steps of 1, 2, 2.5 or 5 times a power of ten.

    Parameters
    ----------
    largest : Decimal
        End of the scale, not below zero.
    at_most : int
        Most steps.

    Returns
    -------
    tuple of Decimal
        Zero first; zero alone for an empty scale.
    """
    if largest <= 0:
        return (Decimal(0),)
    power = Decimal(1).scaleb((largest / at_most).adjusted())
    step = next(power * f for f in _STEPS if power * f * at_most >= largest)
    return tuple(step * count for count in range(int(largest / step) + 1))


_STEPS = (Decimal(1), Decimal(2), Decimal("2.5"), Decimal(5), Decimal(10))


def stacked_bars(
    costs: Sequence[StackedCost], *, longest_label: int = 34, bar_px: int = 18, row_px: int = 43
) -> StackedBars:
    """Horizontal bars from a common zero, one a cost, drawn to one scale that the largest total fills.

    Parameters
    ----------
    costs : sequence of StackedCost
        In the order of drawing, first on top; amounts not below zero.
    longest_label : int
        Most characters of a label.
    bar_px, row_px : int
        Height of a bar, and of a bar with its line of text and the gap below. [px]

    Returns
    -------
    StackedBars
        The geometry.
    """
    largest = max((sum((part.amount for part in cost.parts), Decimal(0)) for cost in costs), default=Decimal(0))
    bars = tuple(
        Bar(
            mark=cost.mark,
            label=shortened(cost.label, longest_label),
            total_text=cost.total_text,
            text_y=row_px * row + _TEXT_Y,
            y=row_px * row + _BAR_Y,
            height=bar_px,
            label_y=row_px * row + _BAR_Y + bar_px // 2 + 4,
            segments=_segments(cost.parts, largest),
        )
        for row, cost in enumerate(costs)
    )
    bottom = row_px * len(costs)
    return StackedBars(
        height=bottom + 22,
        label_dx=10 + round(max((len(cost.mark) for cost in costs), default=0) * 1.1 * _DIGIT_PX),
        bars=bars,
        ticks=tuple(_tick(value, largest) for value in ticks(largest)),
        scale_top=_BAR_Y,
        scale_bottom=bottom,
        scale_text_y=bottom + 15,
    )


def _segments(parts: Sequence[CostPart], largest: Decimal) -> tuple[Segment, ...]:
    segments = []
    reached = Decimal(0)
    for part in parts:
        start, reached = reached, reached + part.amount
        x, end = _percent(start, largest), _percent(reached, largest)
        fits = _fits(part.text, end - x)
        label = "" if fits == "never" else part.text
        segments.append(Segment(part.name, x, end - x, label, (x + end) / 2, fits))
    return tuple(segments)


def _fits(label: str, width: Decimal) -> str:
    needed_px = len(label) * _DIGIT_PX + _LABEL_MARGIN_PX
    share = float(width) / 100
    if share * _NARROW_PX >= needed_px:
        return "always"
    return "wide" if share * _WIDE_PX >= needed_px else "never"


def _tick(value: Decimal, largest: Decimal) -> Tick:
    x = _percent(value, largest)
    if x == 0:
        return Tick(x, number(value), "start")
    return Tick(x, number(value), "end" if x > 90 else "middle")


def _percent(value: Decimal, largest: Decimal) -> Decimal:
    """Place on the scale, to a thousandth of a percent: less than a pixel on any screen."""
    if largest <= 0:
        return Decimal("0.000")
    return (value / largest * _HUNDRED).quantize(Decimal("0.001"), rounding=ROUND_HALF_UP)
