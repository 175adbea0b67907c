"""Laws of the break-even map over drawn bids: polygons that cover the quadrant once, and agree with brute force."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from lossworth.sensitivity.break_even import break_even
from lossworth.sensitivity.break_even_map import break_even_map
from support import lot_models
from support.break_even_strategies import rows, several
from support.capitalization_strategies import brief
from support.polygons import inside

VIEW = (30_000.0, 6_000.0)
points = st.lists(st.tuples(st.floats(0, VIEW[0]), st.floats(0, VIEW[1])), min_size=1, max_size=20)


def costs(model, a, b):
    """Costs of all bids at one pair of rates."""
    return model.costs_of({"no_load_rate": a, "load_rate": b})


@brief
@given(rows, points)
def test_map__polygons_agree_with_brute_force(figures, drawn):
    """At random points the region that holds the point is that of the cheapest bid, and no other region does."""
    model = lot_models.model(*figures)
    found = break_even_map(model, VIEW)
    for a, b in drawn:
        all_costs = costs(model, a, b)
        lowest = all_costs.min()
        holding = [region for region in found.regions if inside(region.vertices, (a, b), 1e-6)]
        assert holding
        for region in holding:
            assert all(all_costs[model.bidders.index(name)] <= lowest + 1e-5 for name in region.bidders)
        firmly = [region for region in found.regions if inside(region.vertices, (a, b), -1e-6)]
        assert len(firmly) <= 1


@brief
@given(rows)
def test_map__polygons_cover_the_view_without_overlap(figures):
    """The areas of the polygons make the view, corner by corner inside of it; each polygon turns counterclockwise."""
    found = break_even_map(lot_models.model(*figures), VIEW)
    assert sum(region.share_of_view for region in found.regions) == pytest.approx(1, abs=1e-12)
    for region in found.regions:
        polygon = region.vertices
        if len(polygon):
            assert polygon.min() >= 0
            assert (polygon <= np.array(VIEW) * (1 + 1e-12)).all()
            a, b = polygon.T
            assert a @ np.roll(b, -1) - b @ np.roll(a, -1) > 0
            assert all(inside(polygon, corner, 1e-6) for corner in polygon)


@brief
@given(several)
def test_map__every_bid_is_either_on_it_or_wins_nowhere(figures):
    """Each bid has a region or stands among those that win nowhere; corners of a region tie with its neighbors."""
    model = lot_models.model(*figures)
    found = break_even_map(model, VIEW)
    placed = [name for region in found.regions for name in region.bidders]
    assert sorted(placed + [bid.bidder for bid in found.nowhere]) == sorted(model.bidders)
    for region in found.regions:
        own = model.bidders.index(region.bidders[0])
        for corner in region.corners:
            all_costs = costs(model, *corner)
            assert all_costs[own] <= all_costs.min() + 1e-9 * abs(all_costs).max()
        assert region.is_unbounded == bool(len(region.directions))
        for direction in region.directions:
            far = region.corners[0] + 1e7 * direction
            all_costs = costs(model, *far)
            assert all_costs[own] <= all_costs.min() + 1e-9 * abs(all_costs).max()


@brief
@given(several)
def test_map__nearest_border(figures):
    """At the nearest border both bids tie, and no border along one rate alone is nearer."""
    model = lot_models.model(*figures)
    found = break_even_map(model)
    nearest = found.nearest
    if nearest is None:
        assert len(found.regions) == 1
        return
    all_costs = costs(model, nearest.no_load_rate, nearest.load_rate)
    rival = all_costs[model.bidders.index(nearest.rival)]
    leader = min(all_costs[model.bidders.index(name)] for name in found.leaders)
    assert rival == pytest.approx(leader, rel=1e-9)
    assert rival == pytest.approx(all_costs.min(), rel=1e-9)
    for name in ("no_load_rate", "load_rate", "all_rates_percent"):
        scale = np.sqrt(2) if name == "all_rates_percent" else 1
        along = break_even(model, name)
        distances = [abs(border.value - along.now) / along.now * scale for border in along.borders]
        assert nearest.distance <= min(distances, default=np.inf) + 1e-9


@brief
@given(several)
def test_map__what_would_bring_in_a_bid_that_wins_nowhere(figures):
    """With a little more than the least reduction the bid has a region, with a little less it has none."""
    model = lot_models.model(*figures)
    for bid in break_even_map(model).nowhere:
        at = model.bidders.index(bid.bidder)
        asked = {"price": bid.least_price_cut, "no_load": bid.least_no_load_kw, "load": bid.least_load_kw}
        for field, least in asked.items():
            if least is None:
                continue
            for more, has_region in ((1.001, True), (0.999, False)):
                if least.amount < 1e-6:
                    continue
                values = np.array(getattr(model, field))
                values[at] -= least.amount * more
                changed = break_even_map(replace(model, **{field: values}))
                assert any(bid.bidder in region.bidders for region in changed.regions) is has_region


@brief
@given(several)
def test_map__what_would_bring_a_bid_in_here(figures):
    """At the tender's point the cut, or the kilowatts, make its cost equal to the lowest."""
    model = lot_models.model(*figures)
    for bid in break_even_map(model).nowhere:
        behind = model.cost[model.bidders.index(bid.bidder)] - model.cost.min()
        assert bid.price_cut.amount == pytest.approx(behind, abs=1e-9)
        for reduction, rate in ((bid.no_load_kw, model.a), (bid.load_kw, model.b)):
            if reduction is not None:
                assert reduction.amount * rate == pytest.approx(behind, abs=1e-9)


def test_map__single_bid():
    """One bid has the whole quadrant, and no border."""
    found = break_even_map(lot_models.model(("4000", "0.1", "1")))
    (region,) = found.regions
    assert (found.nearest, found.nowhere, region.share_of_view) == (None, (), 1)
    assert region.directions.tolist() == [[1, 0], [0, 1]]


def test_map__same_bid_twice():
    """Two bids with the same figures share one region."""
    same, other = ("4000", "0.1", "1"), ("4300", "0.05", "1")
    found = break_even_map(lot_models.model(same, same, other))
    assert [region.bidders for region in found.regions] == [("C",), ("A", "B")]


def test_map__three_borders_through_one_line():
    """Bids that tie along one line: beyond it the one that falls fastest leads, and the one between has no area."""
    found = break_even_map(lot_models.model(("4000", "0.3", "1"), ("5000", "0.2", "1"), ("6000", "0.1", "1")))
    assert [region.bidders for region in found.regions] == [("C",), ("A",)]
    (middle,) = found.nowhere
    assert (middle.bidder, middle.least_price_cut.amount) == ("B", 0)
