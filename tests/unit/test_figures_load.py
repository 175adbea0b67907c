"""Geometry of the load duration picture."""

from __future__ import annotations

import re
from itertools import pairwise

import pytest

from lossworth.report.figures_load import LoadCurve, LoadOfYear, LoadPicture, StageMark, load_picture

#: Four loads of a year: the greatest for an hour, then steps of about a quarter of the year. Invented.
DURATION = ((1.0, 1.0), (2190.0, 0.75), (4380.0, 0.5), (8760.0, 0.25))
TWO_YEARS = (LoadOfYear("year 1, peak 0.6", 0.6), LoadOfYear("year 30, peak 0.8", 0.8))


def corners(curve: LoadCurve) -> list[tuple[float, float]]:
    """Corners of a curve that is written in steps."""
    x, y = 0.0, 0.0
    found = []
    for letter, first, second in re.findall(r"([MVH])([\d.]+)(?: ([\d.]+))?", curve.line):
        x, y = {"M": (float(first), float(second or 0)), "V": (x, float(first)), "H": (float(first), y)}[letter]
        found.append((x, y))
    return found


def load_at(picture: LoadPicture, curve: LoadCurve, hours: float, largest: float) -> float:
    """Load that the curve shows at so many hours."""
    place = picture.width * hours / 8760
    y = next(y for x, y in corners(curve) if x >= place)
    return largest * (picture.bottom - y) / (picture.bottom - picture.top)


def stage(above: float, *hours: float) -> StageMark:
    return StageMark(above, f"cooling above {above}", "", hours)


def curve_of(picture: LoadPicture, name: str) -> LoadCurve:
    return next(curve for curve in picture.curves if curve.name == name)


def test_load_picture__curves_are_duration_times_peak() -> None:
    """At any hour each curve shows the load of the year: its peak times the curve of the profile, in steps."""
    picture = load_picture(DURATION, TWO_YEARS)
    for name, peak in (("first", 0.6), ("last", 0.8)):
        for hours, share in ((0.5, 1.0), (1000, 0.75), (3000, 0.5), (8000, 0.25)):
            shown = load_at(picture, curve_of(picture, name), hours, largest=0.8)
            assert shown == pytest.approx(peak * share, abs=0.001)


def test_load_picture__curves_fall_and_stay_inside() -> None:
    """No curve rises, and none leaves the drawing."""
    picture = load_picture(DURATION, TWO_YEARS, (stage(1.2),))
    for curve in picture.curves:
        points = corners(curve)
        assert all(right[0] >= left[0] and right[1] >= left[1] for left, right in pairwise(points))
        assert all(0 <= x <= picture.width and picture.top <= y <= picture.bottom for x, y in points)


def test_load_picture__larger_area_is_drawn_first() -> None:
    """The curve of the greater peak comes first, so that its area does not cover the other one."""
    assert [curve.name for curve in load_picture(DURATION, TWO_YEARS).curves] == ["last", "first"]
    assert [curve.name for curve in load_picture(DURATION, TWO_YEARS[::-1]).curves] == ["first", "last"]


def test_load_picture__one_year() -> None:
    """A load that stays is one curve."""
    (curve,) = load_picture(DURATION, TWO_YEARS[:1]).curves
    assert (curve.name, curve.anchor, curve.is_inside) == ("every", "start", False)


def test_load_picture__thresholds_stand_at_their_load() -> None:
    """A threshold at half of the greatest load lies half-way up; its crossing lies at its hours."""
    picture = load_picture(DURATION, TWO_YEARS, (stage(0.4, 2190.0, 4380.0),))
    (line,) = picture.stages
    assert line.y == pytest.approx((picture.top + picture.bottom) / 2, abs=0.05)
    assert [dot.x for dot in line.dots] == [25.0, 50.0]


def test_load_picture__stage_that_never_runs_has_no_crossing() -> None:
    """No hours, no dot; equal hours in both years are one dot."""
    picture = load_picture(DURATION, TWO_YEARS, (stage(0.9, 0.0, 0.0), stage(0.1, 8760.0, 8760.0)))
    assert [len(line.dots) for line in picture.stages] == [0, 1]


def test_load_picture__labels_of_near_thresholds_do_not_overlap() -> None:
    """Labels keep the height of a line apart, from the top downwards."""
    picture = load_picture(DURATION, TWO_YEARS, [stage(above) for above in (0.6, 0.61, 0.62, 0.3)])
    labels = [line.label_y for line in picture.stages]
    assert picture.stages[0].label == "cooling above 0.62"
    assert all(lower - upper >= 15 for upper, lower in pairwise(labels))


@pytest.mark.parametrize("thresholds", [(), (0.8,), (0.7, 0.6), (0.45, 0.3), (0.75, 0.55, 0.35)])
def test_load_picture__labels_of_curves_stand_clear_of_thresholds(thresholds: tuple[float, ...]) -> None:
    """The label of a curve lies above or below every line of a threshold and its label, and inside the drawing."""
    picture = load_picture(DURATION, TWO_YEARS, [stage(above) for above in thresholds])
    for curve in picture.curves:
        top, bottom = curve.label_y - 11, curve.label_y + 4
        assert top > 0
        assert bottom < picture.height
        for line in picture.stages:
            for above, below in ((line.y, line.y), (line.label_y - 11, line.label_y + 4)):
                assert bottom < above or top > below


def test_load_picture__labels_stand_on_their_side_of_the_curve() -> None:
    """The label of the upper curve is above it, that of the lower one below it."""
    picture = load_picture(DURATION, TWO_YEARS)
    for curve in picture.curves:
        y = next(y for x, y in corners(curve) if x >= 10 * curve.label_x)
        assert (curve.label_y > y) == curve.is_inside


def test_load_picture__load_that_stands_still_half_the_year() -> None:
    """A curve that falls to the axis leaves no room below it: the label moves to the axis."""
    picture = load_picture(((4380.0, 1.0), (8760.0, 0.0)), TWO_YEARS)
    curve = curve_of(picture, "first")
    assert (curve.label_x, curve.anchor) == (2.0, "start")
    assert picture.top < curve.label_y < picture.bottom


def test_load_picture__no_load_at_all() -> None:
    """Peaks of zero make an empty scale and no division by zero."""
    picture = load_picture(((8760.0, 1.0),), (LoadOfYear("every year", 0.0),))
    assert [tick.label for tick in picture.y_ticks] == ["0"]
    assert all(y == picture.bottom for _, y in corners(picture.curves[0]))


def test_load_picture__hours_of_a_leap_year() -> None:
    """The scale ends with the hours of the profile's year."""
    picture = load_picture(((8784.0, 1.0),), TWO_YEARS)
    assert corners(picture.curves[0])[-1][0] == picture.width
    assert [tick.label for tick in picture.x_ticks] == ["0", "2,500", "5,000", "7,500"]


@pytest.mark.parametrize(("duration", "years"), [((), TWO_YEARS), (DURATION, ()), (DURATION, TWO_YEARS * 2)])
def test_load_picture__refuses_what_it_cannot_draw(duration: tuple[tuple[float, float], ...], years: tuple) -> None:
    """No point, no year, or more than two years."""
    with pytest.raises(ValueError, match="one or two years"):
        load_picture(duration, years)
