"""Laws of break-even values over drawn lots: equal costs at a border, the named bids beside it, no border missed."""

from __future__ import annotations

import math
from decimal import Decimal as D
from fractions import Fraction as F
from functools import cache
from itertools import pairwise

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from lossworth.sensitivity.break_even import break_even, break_evens
from lossworth.sensitivity.break_even_curves import curve_changes, whole_number_changes
from lossworth.sensitivity.break_even_lines import leaders, line_changes
from support import lot_models
from support import records as make
from support.break_even_strategies import economics, loading, rows, segments, several
from support.capitalization_strategies import brief, thorough

few = settings(thorough, max_examples=20)
CURVES = (
    "discount_rate_percent",
    "energy_price_escalation_percent",
    "demand_charge_escalation_percent",
    "load_factor",
    "peak_load_pu",
    "peak_load_growth_percent",
    "peak_load_cap_pu",
    "peak_responsibility_factor",
)
STRAIGHT = ("energy_price_per_kwh", "demand_charge_per_kw_year", "loss_factor", "hours_energized", "upstream_gross_up")


def exact_leaders(costs):
    """Positions of the lowest of some fractions."""
    return {bid for bid, cost in enumerate(costs) if cost == min(costs)}


def assert_leads(model, costs, names, tolerance=1e-9):
    """Each named bid is the cheapest, or as cheap but for rounding of the sums."""
    lowest = costs.min()
    for name in names:
        assert costs[model.bidders.index(name)] <= lowest * (1 + tolerance)


# Straight lines


@brief
@given(rows, st.sampled_from(["no_load_rate", "load_rate", "all_rates_percent"]))
def test_straight__leaders_between_borders_in_fractions(figures, name):
    """On every part between two borders exactly the named bids lead, in exact fractions; so no border is missed."""
    model = lot_models.model(*figures)
    found = break_even(model, name)
    exact = [
        [F(repr(float(x))) for x in (p, n, k)] for p, n, k in zip(model.price, model.no_load, model.load, strict=True)
    ]

    def costs(value):
        a = value if name == "no_load_rate" else F(11000) * (value / 100 if name == "all_rates_percent" else 1)
        b = value if name == "load_rate" else F(660) * (value / 100 if name == "all_rates_percent" else 1)
        return [p + a * n + b * k for p, n, k in exact]

    last = found.borders[-1].value if found.borders else found.now
    for low, high, names in segments(found, 3 * last + 1):
        for share in (F(1, 100), F(1, 2), F(99, 100)):
            at = F(low) + share * (F(high) - F(low))
            assert {model.bidders[bid] for bid in exact_leaders(costs(at))} == set(names)
    for border in found.borders:
        here = costs(F(border.value))
        one, other = (here[model.bidders.index(side[0])] for side in (border.below, border.above))
        assert abs(one - other) < F(1, 10**9)
        assert float(min(here)) == pytest.approx(border.cost, rel=1e-12)


@brief
@given(several)
def test_straight__nearest_borders_and_order(figures):
    """The nearest borders enclose the present value, and `nearness` is the least distance over it."""
    for found in break_evens(lot_models.model(*figures)):
        if found.bidder:
            continue
        below = [border.value for border in found.borders if border.value < found.now]
        above = [border.value for border in found.borders if border.value > found.now]
        assert (found.lower and found.lower.value) == (max(below) if below else None)
        assert (found.upper and found.upper.value) == (min(above) if above else None)
        distances = [abs(border.value - found.now) / found.now for border in found.borders]
        assert found.nearness == pytest.approx(min(distances, default=math.inf))


@thorough
@given(st.floats(0.1, 10), st.floats(1e-7, 0.9), st.integers(1, 7))
def test_straight__two_crossings_inside_one_step(where, part, times):
    """A bid that leads over a sliver alone, inside one step of a sweep of 1,000 steps, is found with both borders."""
    width = part * 0.01
    slopes = np.array([3.0, 2.0, 1.0]) * times
    cost = 1000 + slopes * (5 - where)  # at 5; all three meet at `where` …
    cost[1] -= width * times / 2  # … and the middle one is lowered a little
    found = line_changes(cost, slopes, now=5.0, lowest=0.0, highest=20.0)
    inside = [change for change in found if change.value > 0]
    assert [change.below + change.above for change in inside] == [(0, 1), (1, 2)][-len(inside) :]
    expected = [value for value in (where - width / 2, where + width / 2) if value > 0]
    assert [change.value for change in inside] == pytest.approx(expected, abs=1e-11)


# Curves


@few
@given(several, economics(), loading())
def test_curves__leaders_between_borders(figures, money, load):
    """Between borders of every input behind derived rates the named bids lead, and a dense sweep finds nothing else."""
    model = lot_models.model(*figures, tender=lot_models.derived(money, load))
    for name in CURVES + STRAIGHT:
        found = break_even(model, name)
        highest = found.highest if math.isfinite(found.highest) else 3 * (found.now + 1)
        parts = segments(found, max(highest, found.borders[-1].value if found.borders else 0))
        sweep = np.unique(np.concatenate([np.linspace(low, high, 40)[1:-1] for low, high, _ in parts]))
        costs = model.costs_of({name: sweep})
        for at, of in zip(sweep, costs.T, strict=True):
            names = next(who for low, high, who in parts if low <= at <= high)
            assert_leads(model, of, names)
        assert found.is_certain


@few
@given(several, economics(), loading())
def test_curves__costs_are_equal_at_a_border(figures, money, load):
    """At every border the two costs before rounding agree to 1e-9, and just beside it the named bids lead."""
    model = lot_models.model(*figures, tender=lot_models.derived(money, load))
    for name in CURVES + STRAIGHT:
        for border in break_even(model, name).borders:
            one, other = (model.bidders.index(side[0]) for side in (border.below, border.above))
            here = model.costs_of({name: border.value})
            assert abs(here[one] - here[other]) < 1e-9 * max(1, abs(here[one]) / 10_000)
            assert here[one] == pytest.approx(border.cost, rel=1e-12)


@cache
def growing():
    """A lot whose load rate falls faster with the discount rate than its no-load rate: load grows, nothing caps it."""
    money = make.economics(demand_charge_per_kw_year=make.quantity("0"))
    load = make.loading(peak_load_growth_percent=make.quantity("4"), peak_load_cap_pu=make.quantity("5"))
    return lot_models.model(("4000", "1", "1"), tender=lot_models.derived(money, load))


@few
@given(st.floats(0.5, 12), st.floats(1e-6, 0.4), st.floats(0.01, 3), st.booleans())
def test_curves__two_crossings_inside_one_step(first, apart, no_load_change, turned):
    """Two planted roots of a cost difference in the discount rate, inside one step of a sweep, are both found."""
    model, roots = growing(), np.array([first, first + apart])
    a, b, _ = model.rates_of(discount_rate_percent=roots)
    load_change = -no_load_change * (a[0] - a[1]) / (b[0] - b[1])
    price_change = -(no_load_change * a[0] + load_change * b[0])
    sign = -1 if turned else 1
    fixed = np.array([1e5, 1e5 + sign * price_change])
    weight = np.array([[4.0, 30.0], [4.0 + sign * no_load_change, 30.0 + sign * load_change]])

    def terms(values):
        return np.array(model.rates_of(discount_rate_percent=100 * np.expm1(values))[:2])

    span = (0.0, math.log1p(0.5))
    found, certain = curve_changes(fixed, weight, terms, lowest=span[0], highest=span[1], convex=True)
    inside = np.log1p((roots.mean()) / 100)
    depth = abs(np.diff(fixed + weight @ terms(np.array([inside]))[:, 0]))[0]
    assert certain
    if depth > 1e-5:  # else rounding of costs of half a million blurs where they are equal
        assert [100 * math.expm1(change.value) for change in found] == pytest.approx(roots, abs=1e-3 * apart)
        assert found[0].below == found[1].above != found[0].above == found[1].below


@given(st.integers(2, 6), st.integers(0, 10**6))
@brief
def test_curves__without_convexity_the_same_borders(bids, seed):
    """The bounds by monotonicity alone find the borders that the bounds by convexity find."""
    random = np.random.default_rng(seed)
    fixed, weight = random.uniform(100, 110, bids), random.uniform(1, 3, (bids, 2))

    def terms(values):
        return np.array([10 * np.exp(-values), 4 * np.exp(-2 * values)])

    answers = [
        curve_changes(fixed, weight, terms, lowest=0.0, highest=3.0, convex=convex)[0] for convex in (True, False)
    ]
    assert [(c.below, c.above) for c in answers[0]] == [(c.below, c.above) for c in answers[1]]
    assert [c.value for c in answers[0]] == pytest.approx([c.value for c in answers[1]], abs=1e-11)
    sweep = np.linspace(0, 3, 2001)
    who = (fixed[:, np.newaxis] + weight @ terms(sweep)).argmin(axis=0)
    crossed = [(sweep[at], sweep[at + 1]) for at in np.flatnonzero(np.diff(who))]
    assert all(any(low <= c.value <= high for c in answers[0]) for low, high in crossed)


# Whole values


@few
@given(several, economics(), loading())
def test_whole__first_year_at_which_the_winner_changes(figures, money, load):
    """Every period from 1 to 100 years, tried one by one."""
    model = lot_models.model(*figures, tender=lot_models.derived(money, load))
    found = break_even(model, "evaluation_period_years")
    who = {}
    for years in range(1, 101):
        costs = model.costs_of({"evaluation_period_years": years})
        who[years] = tuple(model.bidders[bid] for bid in leaders(costs))
    now = int(found.now)
    longer = next((years for years in range(now, 101) if who[years] != who[now]), None)
    shorter = next((years for years in range(now, 0, -1) if who[years] != who[now]), None)
    assert (found.upper and found.upper.value, found.upper and found.upper.above) == (longer, longer and who[longer])
    assert (found.lower and found.lower.value, found.lower and found.lower.below) == (shorter, shorter and who[shorter])
    assert len(found.borders) == sum(a != b for a, b in pairwise(who.values()))


def test_whole__tie_at_a_whole_value_counts():
    """A tie at a whole value is a first place of its own, before and after it."""
    found = whole_number_changes(np.array([[1.0, 2.0, 3.0], [3.0, 2.0, 1.0]]), (4, 5, 6))
    assert [(change.value, change.below, change.above) for change in found] == [(5, (0,), (0, 1)), (6, (0, 1), (1,))]


# Rounded costs


@few
@given(several, st.sampled_from(["no_load_rate", "load_rate"]))
def test_rounding__the_evaluation_changes_outside_the_interval(figures, name):
    """Outside the stated interval the evaluation, rounded as announced, ranks the named bids first."""
    offers = lot_models.bids(*figures)
    found = break_even(lot_models.model_of(make.tender(), offers), name)
    for border in found.borders:
        low, high = (D(repr(edge)) for edge in border.rounded_tie)
        assert low <= D(repr(border.value)) <= high
        others = [D(repr(other.value)) for other in found.borders if other is not border]
        for value, names in ((low - D("1e-7"), border.below), (high + D("1e-7"), border.above)):
            if value < 0 or any(low - 1 < other < high + 1 for other in others):
                continue
            rates = {"no_load_rate": (value, 660), "load_rate": (11000, value)}[name]
            assert lot_models.first_place(lot_models.announced(*rates), offers) == set(names)


@few
@given(several, st.sampled_from(["unit_price", "no_load_loss_kw", "load_loss_kw"]))
def test_own__the_evaluation_changes_at_the_value(figures, name):
    """A bid changed to just beyond its break-even value takes, or loses, first place in the evaluation itself."""
    offers = lot_models.bids(*figures)
    model = lot_models.model_of(make.tender(), offers)
    for bidder in model.bidders:
        found = break_even(model, name, bidder)
        border = found.lower or found.upper
        if border is None:
            continue
        at = next(number for number, offer in enumerate(offers) if offer.name == bidder)
        beyond = D("1e-9")
        low, high = (D(repr(edge)) for edge in border.rounded_tie)
        for value, names in ((low - beyond, border.below), (high + beyond, border.above)):
            stated = make.quantity(f"{value:f}", "NCU" if name == "unit_price" else "kW")
            changed = [*offers[:at], offers[at].model_copy(update={name: stated}), *offers[at + 1 :]]
            first = lot_models.first_place(make.tender(), changed)
            assert first <= set(names)


def test_single_bid__nothing_changes_first_place():
    """With one bid no value of any input has a border."""
    model = lot_models.model(("4000", "0.1", "1"), tender=lot_models.derived())
    assert {one.nearness for one in break_evens(model)} == {math.inf}
    assert {one.leaders for one in break_evens(model)} == {("A",)}


def test_same_bid_twice__leads_together():
    """Two bids with the same figures share first place everywhere, and no border lies between them."""
    same = ("4000", "0.1", "1")
    model = lot_models.model(same, same, ("4300", "0.05", "1"), tender=lot_models.derived())
    for name in ("no_load_rate", "discount_rate_percent", "energy_price_per_kwh", "evaluation_period_years"):
        found = break_even(model, name)
        sides = {side for border in found.borders for side in (border.below, border.above)}
        assert sides == {("A", "B"), ("C",)}
        assert len(found.borders) == 1
