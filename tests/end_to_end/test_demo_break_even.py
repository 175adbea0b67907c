"""Break-even values of sample_bids (invented data), with the sums beside them."""

from __future__ import annotations

from fractions import Fraction as F
from pathlib import Path

import pytest

from lossworth.evaluation.evaluate import evaluate
from lossworth.intake.bid_files import read_bids
from lossworth.intake.tender_file import read_tender
from lossworth.intake.tender_folder import find_inputs
from lossworth.sensitivity.break_even import break_even, break_evens
from lossworth.sensitivity.break_even_map import break_even_map
from lossworth.sensitivity.lot_model import lot_model
from lossworth.sensitivity.questions import payback

SAMPLE = Path(__file__).resolve().parents[2] / "sample_bids"
ELDERQUILL, BIRCHLUNE, FIRTHWANE = "Elderquill Magnetics", "Birchlune Electric", "Firthwane Electric"
CEDARFELL, DAMSONBY, GORSEMERE = "Cedarfell Transformers", "Damsonby Power Apparatus", "Gorsemere Windings"


@pytest.fixture(scope="module")
def evaluation():
    """The sample, as the command evaluates it."""
    inputs, _ = find_inputs(SAMPLE)
    tender, *rest = read_tender(inputs.tender)
    offers, findings = read_bids(inputs.bids, tender)
    return evaluate(tender, offers, (*rest[-1], *findings))


def model(evaluation, lot, *, study=False):
    """One lot by its id."""
    return lot_model(evaluation, next(known for known in evaluation.lots if known.lot.id == lot), study=study)


def near(value):
    """Equal to a sum in fractions."""
    return pytest.approx(float(value), rel=1e-13)


def test_lot_1__no_load_rate(evaluation):
    """6,315.00 less 6,237.00 over 0.130 less 0.058 kW: A may fall by 1,083.33 to 9,916.67, to Birchlune."""
    found = break_even(model(evaluation, "1"), "no_load_rate")
    assert found.lower.value == near(11000 - F(78) / F("0.072"))
    assert round(found.lower.value, 2) == 9916.67
    assert (found.leaders, found.lower.below, found.upper) == ((ELDERQUILL,), (BIRCHLUNE,), None)


def test_lot_1__second_today_is_not_the_one_that_takes_over(evaluation):
    """Firthwane ranks second, yet both rates together at 780 / 858 = 90.91 % hand over to Birchlune."""
    lot = model(evaluation, "1")
    found = break_even(lot, "all_rates_percent")
    saved = 11000 * F("0.072") + 660 * F("0.100")
    assert (found.lower.value, found.lower.below) == (near(100 * F(780) / saved), (BIRCHLUNE,))
    assert round(found.lower.value, 2) == 90.91
    assert lot.bidders[1] == FIRTHWANE


def test_lot_1__study(evaluation):
    """If the rates followed the derivation: energy below 0.07653 or discount above 6.913 %, both to Birchlune."""
    study = model(evaluation, "1", study=True)
    energy, discount = break_even(study, "energy_price_per_kwh"), break_even(study, "discount_rate_percent")
    assert (round(energy.lower.value, 5), energy.lower.below) == (0.07653, (BIRCHLUNE,))
    assert (round(discount.upper.value, 3), discount.upper.above) == (6.913, (BIRCHLUNE,))
    returned = payback(study, ELDERQUILL, BIRCHLUNE).rate_of_return_by_year_percent
    assert discount.upper.value == pytest.approx(returned, rel=1e-12)  # the same question in other words


def test_lot_1__study_by_the_sum(evaluation):
    """At the two values the sums over the years are equal, in plain Python."""

    def cost(price, no_load, load, energy, discount):
        loss_factor, total = 0.15 * 0.30 + 0.85 * 0.30**2, price
        for year in range(1, 31):
            peak = min(0.55 * 1.015 ** (year - 1), 1.0)
            total += no_load * (8760 * energy + 55) / (1 + discount) ** year
            total += load * peak**2 * (8760 * energy * loss_factor + 55 * 0.65**2) / (1 + discount) ** year
        return total

    study = model(evaluation, "1", study=True)
    energy = break_even(study, "energy_price_per_kwh").lower.value
    discount = break_even(study, "discount_rate_percent").upper.value / 100
    for at in ((energy, 0.06), (0.085, discount)):
        assert cost(4840, 0.058, 1.150, *at) == pytest.approx(cost(4060, 0.130, 1.250, *at), rel=1e-13)


def test_lot_2__the_tie_is_a_border(evaluation):
    """A above 11,000 favors Cedarfell, B above 1,320 Damsonby; both lines cross at the announced rates."""
    lot = model(evaluation, "2")
    no_load, load = break_even(lot, "no_load_rate"), break_even(lot, "load_rate")
    assert no_load.leaders == (CEDARFELL, DAMSONBY)
    assert (no_load.at_now.value, no_load.at_now.below, no_load.at_now.above) == (11000, (DAMSONBY,), (CEDARFELL,))
    assert (load.at_now.value, load.at_now.below, load.at_now.above) == (1320, (CEDARFELL,), (DAMSONBY,))
    assert no_load.nearness == load.nearness == 0
    assert no_load.lower.below == (GORSEMERE,)
    assert no_load.upper.above == load.upper.above == (ELDERQUILL,)


def test_lot_2__map(evaluation):
    """The tender's point lies on the side that both cells share."""
    found = break_even_map(model(evaluation, "2"))
    assert (found.leaders, found.nearest.distance) == ((CEDARFELL, DAMSONBY), 0)
    assert {bid.bidder.split()[0] for bid in found.nowhere} == {"Firthwane", "Aldermist", "Birchlune"}


def test_lot_4__rates(evaluation):
    """A above 12,682.00 (Firthwane), B above 2,678.33 (Cedarfell, not Firthwane), all rates above 107.77 %."""
    lot = model(evaluation, "4")
    no_load, load = break_even(lot, "no_load_rate"), break_even(lot, "load_rate")
    together = break_even(lot, "all_rates_percent")
    assert (no_load.upper.value, no_load.upper.above) == (near(11600 + F(2164) / 2), (FIRTHWANE,))
    assert (load.upper.value, load.upper.above) == (near(2010 + F(4010) / 6), (CEDARFELL,))
    saved = 2 * 11600 + 2 * 2010 + F("0.4") * 1540
    assert (together.upper.value, together.upper.above) == (near(100 * F(30000) / saved), (FIRTHWANE,))
    assert [round(of.upper.value, 2) for of in (no_load, load, together)] == [12682.00, 2678.33, 107.77]
    assert no_load.lower is load.lower is together.lower is None


def test_lot_4__exchange_rate(evaluation):
    """2,164.00 less on 548,000 FCU: the rate falls by 0.32 % to 1.24605."""
    found = break_even(model(evaluation, "4"), "exchange_rate FCU")
    assert (found.lower.value, found.lower.below) == (near(F("1.25") - F(2164, 548000)), (FIRTHWANE,))
    assert (round(found.lower.value, 5), round(100 * found.nearness, 2)) == (1.24605, 0.32)


def test_lot_4__load_loss_of_the_winner(evaluation):
    """2,164.00 / 2,010: Birchlune's load loss may be 1.077 kW higher."""
    found = break_even(model(evaluation, "4"), "load_loss_kw", BIRCHLUNE)
    assert (found.upper.value, found.upper.above) == (near(134 + F(2164, 2010)), (FIRTHWANE,))
    assert round(found.upper.value - found.now, 3) == 1.077
    assert (found.limit, found.highest > found.upper.value) == ("minimum peak efficiency index", True)


def test_break_evens__the_nearest_comes_first(evaluation):
    """All inputs of every lot, in the order of how near they are; those that never change first place last."""
    for lot in evaluation.lots:
        for study in (False, True):
            found = break_evens(lot_model(evaluation, lot, study=study))
            assert [one.nearness for one in found] == sorted(one.nearness for one in found)
            assert {one.input for one in found} >= {"no_load_rate", "load_rate", "all_rates_percent", "unit_price"}
            assert all(one.is_certain for one in found)
            assert study == ("discount_rate_percent" in {one.input for one in found}) or lot.lot.id == "3"
