"""The two-way map: leaders on the grid by brute force, borders where costs are equal."""

from __future__ import annotations

import numpy as np
import pytest

from lossworth.sensitivity.break_even_map import break_even_map
from lossworth.sensitivity.break_even_map_grid import Axis, two_input_map
from support import lot_models
from support import records as make
from support.polygons import inside

ROWS = (("4000", "0.13", "1.2"), ("4300", "0.09", "1.1"), ("4900", "0.05", "0.9"))


@pytest.fixture(scope="module")
def model():
    """Three invented bids with derived rates; the second in another currency."""
    tender = lot_models.derived().model_copy(update={"exchange": make.exchange(FCU="1.25")})
    offers = lot_models.bids(*ROWS)
    changed = {"currency": make.entry("FCU"), "unit_price": make.quantity("3440", "FCU")}
    offers[1] = offers[1].model_copy(update=changed)
    return lot_models.model_of(tender, offers)


@pytest.mark.parametrize(
    ("across", "up"),
    [
        (Axis("energy_price_per_kwh", 0.02, 0.12, 9), Axis("discount_rate_percent", 2, 12, 7)),
        (Axis("exchange_rate FCU", 1.0, 1.5, 8), Axis("peak_load_pu", 0.3, 1.0, 6)),
        (Axis("unit_price of A", 3500, 4500, 6), Axis("exchange_rate FCU", 1.1, 1.4, 5)),
        (Axis("evaluation_period_years", 5, 25.5), Axis("energy_price_per_kwh", 0.02, 0.12, 5)),
    ],
    ids=["energy price, discount rate", "exchange rate, peak load", "a price, exchange rate", "years, energy price"],
)
def test_two_input_map__leaders_and_borders(model, across, up):
    """Each cell has the cheapest bid of its own costs; at each border point, but between whole years, two costs tie."""
    found = two_input_map(model, across, up)
    for row, y in enumerate(up.values):
        for column, x in enumerate(across.values):
            costs = model.costs_of({across.input: x, up.input: y})
            assert found.leader[row, column] == costs.argmin()
            assert found.cost[row, column] == pytest.approx(costs.min(), rel=1e-14)
    assert found.borders
    for border in found.borders:
        one, other = (model.bidders.index(name) for name in border.between)
        for x, y in border.points:
            if across.input != "evaluation_period_years" or x == int(x):
                costs = model.costs_of({across.input: x, up.input: y})
                assert costs[one] == pytest.approx(costs[other], rel=1e-10)
                assert costs[one] == pytest.approx(costs.min(), rel=1e-10)
            else:
                sides = [model.costs_of({across.input: x + side, up.input: y}).argmin() for side in (-0.5, 0.5)]
                assert sorted(sides) == [one, other]


def test_two_input_map__agrees_with_the_exact_map(model):
    """Borders of the grid in A and B lie on the sides of the exact polygons, a bid between two grid lines included."""
    exact = {region.bidders[0]: region.vertices for region in break_even_map(model, (20_000, 6_000)).regions}
    found = two_input_map(model, Axis("no_load_rate", 0, 20_000, 2), Axis("load_rate", 0, 6_000, 4))
    assert {frozenset(border.between) for border in found.borders} >= {frozenset("AB"), frozenset("BC")}
    assert not any(found.leader.ravel() == model.bidders.index("B"))
    for border in found.borders:
        for point in border.points:
            assert all(inside(exact[name], point, 1e-6) for name in border.between)
            assert not any(inside(exact[name], point, -1e-6) for name in exact)


def test_two_input_map__needs_two_inputs(model):
    """The same input twice, or a range of one value, is refused."""
    price = Axis("energy_price_per_kwh", 0.02, 0.12, 9)
    with pytest.raises(ValueError, match="two different inputs"):
        two_input_map(model, price, price)
    with pytest.raises(ValueError, match="two different inputs"):
        two_input_map(model, price, Axis("discount_rate_percent", 2, 12, 1))


def test_two_input_map__same_bytes(model):
    """The same map twice has the same points in the same order."""
    axes = Axis("energy_price_per_kwh", 0.02, 0.12, 9), Axis("discount_rate_percent", 2, 12, 7)
    one, other = two_input_map(model, *axes), two_input_map(model, *axes)
    assert [border.between for border in one.borders] == [border.between for border in other.borders]
    assert all(np.array_equal(a.points, b.points) for a, b in zip(one.borders, other.borders, strict=True))
