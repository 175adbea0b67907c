"""Questions of planner, auditor and protest: payback, kilowatt-hours, sites, rounding, rejected bids."""

from __future__ import annotations

import math

import numpy as np
import numpy_financial as npf
import pytest

from lossworth.evaluation.evaluate import evaluate
from lossworth.records.tender import Method, Timing
from lossworth.sensitivity.break_even import break_even
from lossworth.sensitivity.questions import loss_draw, payback
from lossworth.sensitivity.questions_ranking import rank_dependence, rounding_effect
from lossworth.sensitivity.questions_sites import Site, spread_over_sites
from support import commercial, lot_models
from support import records as make

CHEAP, LEAN = ("4000", "0.130", "1.250"), ("4600", "0.060", "1.150")
NO_GROWTH = make.loading(peak_load_growth_percent=make.quantity("0"))
ANNUAL_NO_LOAD = 8760 * 0.085 + 55
LOSS_FACTOR = 0.15 * 0.55 + 0.85 * 0.55**2
ANNUAL_LOAD = 0.65**2 * (8760 * 0.085 * LOSS_FACTOR + 55 * 0.9**2)


def two(economics=None, loading=None, **derivation):
    """A cheap and a lean bid under derived rates."""
    return lot_models.model(CHEAP, LEAN, tender=lot_models.derived(economics, loading, **derivation))


def test_payback__by_hand():
    """600 more buys 0.070 kW and 0.100 kW less: saving, payback and return by the closed forms."""
    found = payback(two(loading=NO_GROWTH), "B", "A")
    saving = 0.070 * ANNUAL_NO_LOAD + 0.100 * ANNUAL_LOAD
    assert (found.extra_price, found.yearly_saving) == (600, pytest.approx(saving, rel=1e-11))
    assert found.payback_years == pytest.approx(600 / saving, rel=1e-11)
    rate = npf.rate(30, saving, -600, 0)
    assert found.rate_of_return_percent == pytest.approx(100 * rate, rel=1e-8)
    assert found.rate_of_return_by_year_percent == pytest.approx(found.rate_of_return_percent, rel=1e-11)
    assert found.discounted_payback_years == math.ceil(npf.nper(0.06, saving, -600))


def test_payback__year_by_year():
    """With growth and escalation the return by year is the discount rate at which the owning costs are equal."""
    money = make.economics(energy_price_escalation_percent=make.quantity("2"), timing=Timing.MID_YEAR)
    model = two(money)
    found = payback(model, "B", "A")
    assert found.rate_of_return_by_year_percent > found.rate_of_return_percent
    border = break_even(model, "discount_rate_percent").borders[-1]
    assert border.value == pytest.approx(found.rate_of_return_by_year_percent, rel=1e-11)
    assert found.net_present_value == pytest.approx(model.cost[1] - model.cost[0], rel=1e-12)
    assert found.bidder == model.bidders[0]


def test_payback__discounted_year_by_the_costs():
    """The discounted payback is the first period at which the lean bid is as cheap: the break-even period."""
    model = two()
    found = payback(model, "B", "A")
    assert found.discounted_payback_years == break_even(model, "evaluation_period_years").lower.value + 1


def test_payback__no_extra_price_and_no_saving():
    """A bid that is cheaper needs no payback; one that costs more and loses more never pays back."""
    model = lot_models.model(("4000", "0.1", "1"), ("4500", "0.2", "1"), tender=lot_models.derived())
    cheaper, worse = payback(model, "A", "B"), payback(model, "B", "A")
    assert (cheaper.payback_years, cheaper.discounted_payback_years, cheaper.rate_of_return_percent) == (0, 0, None)
    assert (worse.payback_years, worse.discounted_payback_years, worse.rate_of_return_percent) == (None, None, None)


def test_payback__loses_money_even_undiscounted():
    """Savings that do not add up to the extra price have a negative return."""
    model = lot_models.model(CHEAP, ("9000", "0.060", "1.150"), tender=lot_models.derived(loading=NO_GROWTH))
    found = payback(model, "B", "A")
    assert found.rate_of_return_percent < 0
    assert found.discounted_payback_years is None


def test_payback__fixed_charge_rate():
    """By the fixed charge rate a year costs the rate times that charge rate."""
    money = make.economics(fixed_charge_rate_percent=make.quantity("10"))
    model = two(money, NO_GROWTH, method=Method.FIXED_CHARGE_RATE)
    saving = 0.070 * ANNUAL_NO_LOAD + 0.100 * ANNUAL_LOAD
    assert payback(model, "B", "A").yearly_saving == pytest.approx(saving, rel=1e-11)


def test_payback__announced_rates_and_unknown_names():
    """Announced rates say nothing of the years; a name must be a ranked bid's."""
    with pytest.raises(ValueError, match="announced"):
        payback(lot_models.model(CHEAP, LEAN), "B", "A")
    with pytest.raises(ValueError, match="Nobody: not a ranked bid of lot 1"):
        payback(two(), "B", "Nobody")


def test_loss_draw__by_hand():
    """Kilowatt-hours and kilowatts of ten units in year 1."""
    loading = make.loading(cooling_hours=make.quantity("600"), cooling_share_at_peak=make.quantity("0.5"))
    model = lot_models.model(("4000", "0.1", "2", "0.3"), tender=lot_models.derived(None, loading))
    (found,) = loss_draw(model)
    assert found.kwh_per_year == pytest.approx(10 * (876 + 2 * 0.65**2 * LOSS_FACTOR * 8760 + 180), rel=1e-12)
    assert found.kw_at_system_peak == pytest.approx(10 * (0.1 + 2 * (0.65 * 0.9) ** 2 + 0.15), rel=1e-12)
    assert found.kw_at_own_peak == pytest.approx(10 * (0.1 + 2 * 0.65**2 + 0.3), rel=1e-12)


def test_loss_draw__profile_by_time():
    """With a price that moves, energy counts by the loss factor and the cooling hours of time, not of price."""
    day = [0.3] * 12 + [1.0] * 12
    money = make.economics(
        energy_price_per_kwh=None, energy_price_series=make.series([0.05] * 12 * 365 + [0.1] * 12 * 365)
    )
    loading = make.loading(
        profile=make.profile(day * 365),
        load_factor=None,
        loss_factor_coefficient=None,
        cooling_stages=(make.stage("0.5"),),
    )
    (found,) = loss_draw(lot_models.model(("4000", "0.1", "2", "0.3"), tender=lot_models.derived(money, loading)))
    by_time = (0.09 + 1) / 2
    assert found.kwh_per_year == pytest.approx(10 * (876 + 2 * 0.65**2 * by_time * 8760 + 0.3 * 4380), rel=1e-11)


def test_spread_over_sites__mean_rates_rank_as_the_sum():
    """Costs over all sites are those at the mean rates; not those at the mean peak load."""
    model = two()
    sites = [Site("light", 70, {"peak_load_pu": 0.3}), Site("heavy", 30, {"peak_load_pu": 0.9, "load_factor": 0.7})]
    found = spread_over_sites(model, sites)
    rates = np.array([found.no_load_rate, found.load_rate, found.auxiliary_rate])
    assert found.total == pytest.approx(100 * (model.price + model.losses @ rates), rel=1e-13)
    at_mean = float(model.rates_of(peak_load_pu=0.48, load_factor=0.61)[1])
    assert found.load_rate > at_mean
    by_site = [70 * site.cost[0] + 30 * other.cost[0] for site, other in [found.sites]]
    assert by_site == pytest.approx([found.total[0]])


def test_spread_over_sites__worth_of_splitting():
    """Where each site has its own best bid, splitting saves what the wrong bid costs there."""
    model = lot_models.model(("4000", "0.1", "2"), ("4600", "0.1", "1.6"), tender=lot_models.derived())
    sites = [Site("light", 1, {"peak_load_pu": 0.3}), Site("heavy", 1, {"peak_load_pu": 0.9})]
    found = spread_over_sites(model, sites)
    light, heavy = found.sites
    assert (light.leaders, heavy.leaders) == (("A",), ("B",))
    best = min(light.cost) + min(heavy.cost)
    assert found.worth_of_splitting == pytest.approx(found.one_bid - best)
    assert found.worth_of_splitting > 0


def test_spread_over_sites__bad_sites():
    """No site, a site without units and an unknown input are refused."""
    for sites in ([], [Site("empty", 0, {})]):
        with pytest.raises(ValueError, match="units above 0"):
            spread_over_sites(two(), sites)
    with pytest.raises(KeyError, match="tap_position"):
        spread_over_sites(two(), [Site("odd", 1, {"tap_position": 1})])


def test_rounding_effect__a_tie_that_rounding_makes():
    """0.3 cents apart before rounding, equal after it: the effect is shown, with who leads without it."""
    model = lot_models.model(("4000.004", "0.1", "1"), ("4000.001", "0.1", "1"))
    found = rounding_effect(model)
    assert (found.bidders, found.changes_order, found.changes_first_place) == (("A", "B"), True, True)
    assert (found.leaders_unrounded, found.could_change_first_place) == (("B",), True)
    assert found.shift_of_lot == pytest.approx((-0.04, -0.01), abs=1e-9)
    assert found.evaluated == pytest.approx((5760, 5760))


def test_rounding_effect__cannot_matter():
    """A lead of 100 is more than rounding of three parts can move."""
    found = rounding_effect(lot_models.model(("4000", "0.1", "1"), ("4100", "0.1", "1")))
    assert (found.changes_order, found.changes_first_place, found.could_change_first_place) == (False, False, False)
    assert found.greatest_effect == pytest.approx(0.03)


def test_rounding_effect__not_of_a_study():
    """A study is not rounded."""
    tender = make.tender(make.lot(study=make.derivation(None)))
    with pytest.raises(ValueError, match="not rounded"):
        rounding_effect(lot_models.model(CHEAP, tender=tender, study=True))


def items_tender(among):
    """A tender in which the highest of other prices stands in for a missing item."""
    settings = {"missing_item": "highest of the others", "missing_item_among": among}
    lot = make.lot(items=(commercial.item("bushing", "4"),), maximum_load_loss_kw=make.quantity("1.5", "kW"))
    return commercial.tender(lot, settings=settings)


def items_offers():
    """Alder prices no bushing; Birch does; Cedar prices it highest and is beyond the maximum loss."""
    return [
        commercial.bid("Alder", "4000"),
        commercial.bid("Birch", "4050", item_prices={"bushing": make.quantity("100")}),
        commercial.bid("Cedar", "3000", item_prices={"bushing": make.quantity("900")},
                       load_loss_kw=make.quantity("2", "kW")),
    ]  # fmt: skip


def test_rank_dependence__a_rejected_price_that_stands_in():
    """A rejected bid's price stands in the cost of another: it is named, with the ranks that change without it."""
    tender, offers = items_tender("all offers received"), items_offers()
    lot = evaluate(tender, offers).lots[0]

    def without(name):
        rest = [offer for offer in offers if offer.name != name]
        return commercial.ranks(evaluate(tender, rest))

    (found,) = rank_dependence(lot, without)
    assert (found.offer, found.acts_on_costs, found.in_costs_of) == ("Cedar", True, ("Alder",))
    assert found.figures == ("bushing, price of a piece",)
    assert found.changed_ranks == {"Birch": (1, 2), "Alder": (2, 1)}
    assert rank_dependence(lot)[0].changed_ranks is None


def test_rank_dependence__responsive_offers_alone():
    """Where responsive offers alone count, nothing of a rejected bid acts on any cost."""
    (found,) = rank_dependence(evaluate(items_tender("responsive offers"), items_offers()).lots[0])
    assert (found.offer, found.acts_on_costs, found.changed_ranks) == ("Cedar", False, {})
