"""Geometry of the pictures."""

from __future__ import annotations

from decimal import Decimal

import pytest

from lossworth.report.figures import CostPart, StackedBars, StackedCost, shortened, stacked_bars, ticks


def a_cost(*amounts: str, label: str = "Alder Works", mark: str = "1") -> StackedCost:
    """Cost of the given parts, in the order price, no-load, load, auxiliary."""
    names = ("evaluated_price", "no_load_cost", "load_cost", "auxiliary_cost")
    parts = tuple(CostPart(n, Decimal(a), a) for n, a in zip(names, amounts, strict=False))
    return StackedCost(mark, label, str(sum(map(Decimal, amounts))), parts)


def ends(bars: StackedBars) -> list[Decimal]:
    """Right end of each bar, in percent."""
    return [bar.segments[-1].x + bar.segments[-1].width for bar in bars.bars]


def test_stacked_bars__widths_are_proportional_to_amounts() -> None:
    """Equal money has equal width in every bar: the rounding of places is all that differs."""
    drawing = stacked_bars([a_cost("4840", "638", "759"), a_cost("3900", "1386", "891"), a_cost("7000", "0", "0")])
    for bar, amounts in zip(drawing.bars, [(4840, 638, 759), (3900, 1386, 891), (7000, 0, 0)], strict=True):
        widths = [float(segment.width) for segment in bar.segments]
        assert widths == pytest.approx([100 * amount / 7000 for amount in amounts], abs=0.0011)


def test_stacked_bars__segments_join_without_gap_and_start_at_zero() -> None:
    """Each part begins where the one before it ends."""
    (bar,) = stacked_bars([a_cost("655000", "176320", "269340", "3080")]).bars
    assert bar.segments[0].x == 0
    for left, right in zip(bar.segments, bar.segments[1:], strict=False):
        assert left.x + left.width == right.x


def test_stacked_bars__stay_inside_the_drawing() -> None:
    """The largest total ends at the edge, nothing goes beyond it, and rows stay above the scale."""
    drawing = stacked_bars([a_cost("1", "2", "3"), a_cost("0.1", "0.1", "99999999.99")])
    assert max(ends(drawing)) == 100
    assert all(0 <= tick.x <= 100 for tick in drawing.ticks)
    assert all(bar.y + bar.height <= drawing.scale_bottom for bar in drawing.bars)
    assert drawing.scale_text_y < drawing.height


def test_stacked_bars__rows_do_not_overlap() -> None:
    """A bar ends above the text of the next."""
    drawing = stacked_bars([a_cost("1", "2", "3")] * 7)
    for upper, lower in zip(drawing.bars, drawing.bars[1:], strict=False):
        assert upper.y + upper.height < lower.text_y - 10
        assert upper.text_y < upper.y


def test_stacked_bars__label_that_does_not_fit_is_left_out() -> None:
    """A sliver carries no number; a wide part carries it even on a telephone; one between only where there is room."""
    (bar,) = stacked_bars([a_cost("655000.00", "136320.00", "309340.00", "3080.00")]).bars
    assert [segment.fits for segment in bar.segments] == ["always", "wide", "always", "never"]
    assert [segment.label for segment in bar.segments] == ["655000.00", "136320.00", "309340.00", ""]


def test_stacked_bars__long_label_is_shortened() -> None:
    """Text cannot be measured here: a label has a greatest length."""
    (bar,) = stacked_bars([a_cost("1", "1", "1", label="x" * 120)]).bars
    assert bar.label == "x" * 33 + "…"


@pytest.mark.parametrize("costs", [[], [a_cost("0", "0", "0")]])
def test_stacked_bars__nothing_to_draw(costs: list[StackedCost]) -> None:
    """No offers, or amounts of zero, make an empty scale and no division by zero."""
    drawing = stacked_bars(costs)
    assert [tick.label for tick in drawing.ticks] == ["0"]
    assert all(segment.width == 0 for bar in drawing.bars for segment in bar.segments)


@pytest.mark.parametrize(
    ("largest", "expected"),
    [
        ("6406.40", ["0", "2000", "4000", "6000"]),
        ("19491.80", ["0", "5000", "10000", "15000"]),
        ("1121222", ["0", "500000", "1000000"]),
        ("8", ["0", "2", "4", "6", "8"]),
        ("10", ["0", "2.5", "5", "7.5", "10"]),
        ("0.04", ["0", "0.01", "0.02", "0.03", "0.04"]),
        ("0", ["0"]),
    ],
)
def test_ticks__round_steps(largest: str, expected: list[str]) -> None:
    """Steps are 1, 2, 2.5 or 5 times a power of ten, at most four of them, none beyond the largest amount."""
    assert list(ticks(Decimal(largest))) == [Decimal(value) for value in expected]


def test_shortened__keeps_what_fits() -> None:
    """A text of just the length stays whole, one more character costs the last one."""
    assert shortened("Alder", 5) == "Alder"
    assert shortened("Alders", 5) == "Alde…"
    assert shortened("Alder Works", 7) == "Alder…"
