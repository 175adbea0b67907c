"""Geometry of the year-by-year picture."""

from __future__ import annotations

from itertools import pairwise

import pytest

from lossworth.report.figures_years import year_bars


def test_year_bars__heights_are_proportional_to_values() -> None:
    """Every column stands on the axis, and twice the money is twice as high; a tenth of a pixel is all that differs."""
    drawing = year_bars([800.0, 400.0, 200.0, 0.0])
    full = drawing.bars[0].height
    assert [bar.height / full for bar in drawing.bars] == pytest.approx([1, 0.5, 0.25, 0], abs=0.001)
    assert all(bar.y + bar.height == pytest.approx(drawing.bottom) for bar in drawing.bars)


@pytest.mark.parametrize("years", [1, 2, 30, 35, 60])
def test_year_bars__columns_fill_the_width_without_touching(years: int) -> None:
    """One column a year, in order, inside the drawing."""
    bars = year_bars([1.0] * years).bars
    assert len(bars) == years
    assert bars[0].x >= 0
    assert bars[-1].x + bars[-1].width <= 100
    assert all(left.x + left.width < right.x for left, right in pairwise(bars))


@pytest.mark.parametrize(
    ("years", "marked"),
    [
        (1, ["1"]),
        (3, ["1", "2", "3"]),
        (12, ["1", "5", "10", "12"]),
        (30, ["1", "10", "20", "30"]),
        (31, ["1", "10", "20", "31"]),
        (35, ["1", "10", "20", "30", "35"]),
        (60, ["1", "20", "40", "60"]),
        (0, []),
    ],
)
def test_year_bars__first_last_and_round_years_are_marked(years: int, marked: list[str]) -> None:
    """Marks are few, and none stands so near to the first or last that their texts meet."""
    assert [mark.label for mark in year_bars([1.0] * years).marks] == marked


def test_year_bars__marks_stand_below_their_columns() -> None:
    """A mark is at the middle of its column; the last one ends with the drawing."""
    drawing = year_bars([1.0] * 30)
    for mark in drawing.marks[:-1]:
        bar = drawing.bars[int(mark.label) - 1]
        assert bar.x < mark.x < bar.x + bar.width
    assert (drawing.marks[-1].x, drawing.marks[-1].anchor) == (100.0, "end")


@pytest.mark.parametrize("values", [[], [0.0, 0.0]])
def test_year_bars__nothing_to_draw(values: list[float]) -> None:
    """No years, or costs of zero, make an empty scale and no division by zero."""
    drawing = year_bars(values)
    assert [tick.label for tick in drawing.y_ticks] == ["0"]
    assert all(bar.height == 0 for bar in drawing.bars)
