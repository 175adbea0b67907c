"""Break-even values where costs step, stand still or are whole; weeks of delivery; inputs without effect."""

from __future__ import annotations

import math

import numpy as np
import pytest

from lossworth.records.tender import Method
from lossworth.sensitivity.break_even import break_even, break_evens
from lossworth.sensitivity.break_even_curves import curve_changes
from lossworth.sensitivity.break_even_map import break_even_map, rate_path
from support import commercial, lot_models
from support import records as make

DAY = [0.3] * 7 + [0.7] * 9 + [1.0] * 4 + [0.5] * 4  # invented shape, hour by hour


def test_break_even__cooling_sets_in_by_steps():
    """Where the fans' hours jump with the peak load costs step past one another: the border is said to be a step."""
    loading = make.loading(
        profile=make.profile(DAY * 365),
        load_factor=None,
        loss_factor_coefficient=None,
        peak_load_growth_percent=make.quantity("0"),
        peak_load_cap_pu=None,
        cooling_stages=(make.stage("0.63"),),
    )
    model = lot_models.model(
        ("4000", "0.1", "1", "1"), ("8000", "0.1", "1", "0"), tender=lot_models.derived(None, loading)
    )
    found = break_even(model, "peak_load_pu")
    (border,) = found.borders
    assert (border.below, border.above, border.is_step) == (("A",), ("B",), True)
    assert border.value == pytest.approx(0.9, abs=1e-12)  # 0.7 of the peak passes 0.63: 9 hours a day more
    beside = model.costs_of({"peak_load_pu": np.array([border.value - 1e-9, border.value + 1e-9])})
    assert beside.argmin(axis=0).tolist() == [model.bidders.index("A"), model.bidders.index("B")]
    assert found.is_certain


def test_break_even__an_input_that_stops_acting():
    """Above the greatest load a cap does nothing: one border below it, none above, where the costs stand still."""
    model = lot_models.model(("4000", "0.1", "1"), ("4200", "0.1", "0.9"), tender=lot_models.derived())
    found = break_even(model, "peak_load_cap_pu")
    assert (found.moves_costs, found.lower.below, found.upper, len(found.borders)) == (True, ("A",), None, 1)
    assert np.ptp(model.costs_of({"peak_load_cap_pu": np.array([0.9, 1.0, 2.0])}), axis=1).tolist() == [0, 0]
    no_charge = make.economics(demand_charge_per_kw_year=None)
    model = lot_models.model(("4000", "0.1", "1"), ("4200", "0.1", "0.9"), tender=lot_models.derived(no_charge))
    assert break_even(model, "demand_charge_escalation_percent").moves_costs is False


def test_break_even__fixed_charge_rate():
    """Rates by the fixed charge rate fall with it: A (SC + 8760 EC) / FCR, in closed form."""
    money = make.economics(fixed_charge_rate_percent=make.quantity("10"))
    load = make.loading(peak_load_growth_percent=make.quantity("0"))
    tender = lot_models.derived(money, load, method=Method.FIXED_CHARGE_RATE)
    model = lot_models.model(("4000", "0.12", "1"), ("4500", "0.04", "1"), tender=tender)
    found = break_even(model, "fixed_charge_rate_percent")
    charge = 100 * (55 + 8760 * 0.085) * 0.08 / 500
    assert (found.upper.value, found.upper.above) == (pytest.approx(charge, rel=1e-11), ("A",))
    assert break_even(model, "energy_price_per_kwh").lower.value == pytest.approx((500 / 0.8 - 55) / 8760, rel=1e-11)


def test_break_even__fixed_charge_rate_with_carbon_and_growth():
    """Growth weighs the years by price: still every border is found."""
    money = make.economics(
        fixed_charge_rate_percent=make.quantity("10"),
        carbon_cost_per_kwh=make.quantity("0.01"),
        carbon_cost_counts=True,
    )
    tender = lot_models.derived(money, method=Method.FIXED_CHARGE_RATE)
    model = lot_models.model(("4000", "0.12", "1"), ("4500", "0.04", "1"), tender=tender)
    for name in ("energy_price_per_kwh", "discount_rate_percent", "peak_load_growth_percent"):
        found = break_even(model, name)
        for border in found.borders:
            here = model.costs_of({name: border.value})
            assert here[0] == pytest.approx(here[1], rel=1e-9)
    assert len(break_even(model, "energy_price_per_kwh").borders) == 1


def weeks_tender(**changes):
    """A tender that adds 0.5 percent of the price a week after 20 weeks, up to 40."""
    lot = make.lot(
        delivery_without_adder_weeks=make.quantity("20"),
        delivery_adder_percent_per_week=make.quantity("0.5"),
        latest_delivery_weeks=make.quantity("40"),
        **changes,
    )
    return make.tender(lot)


def test_break_even__first_whole_week():
    """5 NCU a week: the leader, 12 cheaper, may come 2 weeks late and loses with 3; its rival must come by week 23."""
    offers = [
        make.priced("A", "1000", "0.1", "1", delivery_weeks=make.quantity("18")),
        make.priced("B", "985", "0.1", "1", delivery_weeks=make.quantity("26")),
    ]
    model = lot_models.model_of(weeks_tender(), offers)
    first = break_even(model, "delivery_weeks", "A")
    late = 985 * 0.005
    assert model.cost == pytest.approx([1000 + 1760, 985 + 6 * late + 1760])
    assert (first.is_whole, first.upper.value, first.upper.above, first.lower) == (True, 23, ("B",), None)
    second = break_even(model, "delivery_weeks", "B")
    assert (second.lower.value, second.lower.below) == (20 + math.floor(15 / late), ("B",))


def test_break_even__weeks_that_cannot_help():
    """A bid that is too dear even on time has no week that helps, nor one that would have to pass the latest week."""
    offers = [
        make.priced("A", "900", "0.1", "1", delivery_weeks=make.quantity("30")),
        make.priced("B", "1200", "0.1", "1", delivery_weeks=make.quantity("25")),
    ]
    model = lot_models.model_of(weeks_tender(), offers)
    for bidder in "AB":
        found = break_even(model, "delivery_weeks", bidder)
        assert (found.lower, found.upper, found.limit) == (None, None, "latest delivery")


def test_break_even__preference_margin():
    """A margin of 2 percent on 1,000 is what keeps the dearer home bid first: below 1.5 percent it loses."""
    tender = commercial.tender(
        settings={"preference": "margin added to other prices"}, preference=commercial.preference("2", "home")
    )
    offers = [commercial.bid("Home", "1015", origin=make.entry("home")), commercial.bid("Far", "1000")]
    found = break_even(lot_models.model_of(tender, offers), "preference_margin_percent")
    assert (found.lower.value, found.lower.below) == (pytest.approx(1.5, rel=1e-13), ("Far",))


def test_break_even__unknown_input():
    """A name that the lot does not have is refused, with the lot."""
    model = lot_models.model(("4000", "0.1", "1"))
    with pytest.raises(KeyError, match="discount_rate_percent: not an input of lot 1"):
        break_even(model, "discount_rate_percent")
    with pytest.raises(KeyError, match="unit_price of B"):
        break_even(model, "unit_price", "B")


def test_break_evens__loss_limits_of_the_tender():
    """The greatest admissible loss is the tender's maximum: beyond it the bid would not be ranked at all."""
    lot = make.lot(maximum_load_loss_kw=make.quantity("1.01", "kW"))
    model = lot_models.model(("4000", "0.1", "1"), ("4100", "0.1", "1"), tender=make.tender(lot))
    found = break_even(model, "load_loss_kw", "A")
    assert (found.highest, found.limit, found.upper) == (1.01, "maximum load loss", None)
    assert break_even(model, "no_load_loss_kw", "A").upper.value == pytest.approx(0.1 + 100 / 11000)


def test_break_evens__every_input_has_words():
    """Each break-even value carries label, unit and bounds that enclose the present value."""
    for found in break_evens(
        lot_models.model(("4000", "0.1", "1"), ("4100", "0.08", "1"), tender=lot_models.derived())
    ):
        assert found.label
        assert found.unit
        assert found.lowest <= found.now <= found.highest


def test_curve_changes__says_when_it_is_cut_off():
    """Costs that stay closer than any bound over the whole range end the search, and it says so."""

    def terms(values):
        return np.array([values, 1e6 - values])

    fixed, weight = np.array([0.0, 1e-4]), np.array([[1e3, 1e3], [1e3 + 1e-3, 1e3 + 1e-3]])
    fixed[1] -= 1e-3 * 1e6 - 1e-4
    found, certain = curve_changes(fixed, weight, terms, lowest=0.0, highest=1e6, convex=False)
    assert (found, certain) == ((), False)


def test_curve_changes__no_range():
    """A range of one value has no border."""
    found = curve_changes(np.zeros(2), np.ones((2, 1)), lambda x: x[np.newaxis], lowest=1.0, highest=1.0, convex=True)
    assert found == ((), True)


def test_break_even_map__view_without_extent():
    """A view that shows nothing is refused."""
    with pytest.raises(ValueError, match="must reach above zero"):
        break_even_map(lot_models.model(("4000", "0.1", "1")), (0, 100))


def test_rate_path__moves_on_a_straight_line_with_the_energy_price():
    """A and B grow linearly with the energy price; the leaders along the way are those of the break-even values."""
    model = lot_models.model(("4000", "0.12", "1"), ("4300", "0.08", "1"), tender=lot_models.derived())
    path = rate_path(model, "energy_price_per_kwh", [0.02, 0.06, 0.10])
    assert np.diff(path.no_load_rate, 2) == pytest.approx([0], abs=1e-8)
    assert np.diff(path.load_rate, 2) == pytest.approx([0], abs=1e-8)
    border = break_even(model, "energy_price_per_kwh").borders[0]
    assert 0.02 < border.value < 0.06
    assert path.leaders == ("A", "B", "B")
