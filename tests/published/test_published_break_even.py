"""Break-even values of the published two-bid comparison, with the sums beside them.

Source of the figures: two-bid comparison of a 161/34.5 kV 30/40/50 MVA unit in the form of REA Bulletin 65-2 (1978) /
RUS Bulletin 1724E-301 (1997), as printed in the article 'Take into account the losses when purchasing power
transformer' of Electrical Engineering Portal; that it stems from the bulletin is inferred. The break-even values are
not printed there; they follow from the printed figures by the sums below.
"""

from __future__ import annotations

from fractions import Fraction as F

import pytest

from lossworth.sensitivity.break_even import break_even
from lossworth.sensitivity.break_even_map import break_even_map
from support import lot_models
from support import records as make

# Bid A: 424,500; 59 / 224 / 2.0 kW. Bid B: 436,000; 53 / 218 / 2.5 kW. Rates 2,450 / 1,304 / 756 $/kW.
DEARER = F(436000) - 424500  # 11,500: what Bid B costs more
SAVED_KW = F(59) - 53, F(224) - 218, F(2) - F("2.5")  # 6, 6 and -0.5 kW: what it saves
RATES = F(2450), F(1304), F(756)
WORTH = [kw * rate for kw, rate in zip(SAVED_KW, RATES, strict=True)]  # 14,700 + 7,824 - 378 = 22,146


@pytest.fixture(scope="module")
def model():
    """The comparison as a lot of one unit."""
    tender = lot_models.announced(2450, 1304, 756, quantity=make.quantity("1"), cooling=make.entry("ONAN/ONAF/ONAF"))
    return lot_models.model(("424500", "59", "224", "2.0"), ("436000", "53", "218", "2.5"), tender=tender)


def test_break_even__all_rates_together(model):
    """11,500 / 22,146 = 51.93 %: with all rates below that, Bid A (here A) wins."""
    share = DEARER / sum(WORTH)
    assert round(float(100 * share), 1) == 51.9
    found = break_even(model, "all_rates_percent")
    assert found.lower.value == pytest.approx(float(100 * share), rel=1e-14)
    assert (found.lower.below, found.lower.above, found.upper) == (("A",), ("B",), None)


def test_break_even__no_load_rate_alone(model):
    """(11,500 - 7,824 + 378) / 6 = 675.67 $/kW, from 2,450."""
    rate = (DEARER - WORTH[1] - WORTH[2]) / SAVED_KW[0]
    assert round(float(rate)) == 676
    found = break_even(model, "no_load_rate")
    assert found.lower.value == pytest.approx(float(rate), rel=1e-14)
    assert (found.now, found.lower.below, found.upper) == (2450, ("A",), None)


def test_break_even__load_rate_alone_never(model):
    """(11,500 - 14,700 + 378) / 6 = -470.33: no rate of zero or more lets Bid A win."""
    assert (DEARER - WORTH[0] - WORTH[2]) / SAVED_KW[1] == F(-2822, 6)
    found = break_even(model, "load_rate")
    assert (found.at_now, found.lower, found.upper, found.borders, found.moves_costs) == (None, None, None, (), True)


def test_break_even__auxiliary_rate_alone(model):
    """(14,700 + 7,824 - 11,500) / 0.5 = 22,048 $/kW: Bid B needs half a kilowatt more for its fans."""
    rate = (WORTH[0] + WORTH[1] - DEARER) / -SAVED_KW[2]
    found = break_even(model, "auxiliary_rate")
    assert (found.upper.value, found.upper.above) == (pytest.approx(float(rate), rel=1e-14), ("A",))


def test_break_even__price_and_guarantees_of_the_winner(model):
    """The margin of 10,646 is 4.345 kW of no-load loss, 8.164 kW of load loss, or 2.54 % of all losses of Bid B."""
    margin = sum(WORTH) - DEARER
    assert margin == 10646
    assert break_even(model, "unit_price", "B").upper.value == 436000 + 10646
    assert break_even(model, "no_load_loss_kw", "B").upper.value == pytest.approx(53 + 10646 / 2450, rel=1e-14)
    assert break_even(model, "load_loss_kw", "B").upper.value == pytest.approx(218 + 10646 / 1304, rel=1e-14)
    tolerance = 100 * margin / (53 * RATES[0] + 218 * RATES[1] + F("2.5") * RATES[2])
    assert break_even(model, "loss_tolerance_percent", "B").upper.value == pytest.approx(float(tolerance), rel=1e-13)


def test_break_even_map__one_straight_border(model):
    """6 A + 6 B = 11,500 + 378: A + B = 1,979.67 parts the two."""
    found = break_even_map(model)
    border = float((DEARER - WORTH[2]) / 6)
    regions = {region.bidders[0]: region for region in found.regions}
    assert sorted(map(tuple, regions["A"].corners.tolist())) == [(0, 0), (0, border), (border, 0)]
    assert (regions["A"].is_unbounded, regions["B"].is_unbounded) == (False, True)
    assert (found.leaders, found.nearest.rival) == (("B",), "A")
    assert found.nearest.no_load_rate + found.nearest.load_rate == pytest.approx(border, rel=1e-14)
