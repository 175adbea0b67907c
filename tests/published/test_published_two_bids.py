"""The published two-bid comparison, evaluated as a tender.

Source: two-bid comparison of a 161/34.5 kV 30/40/50 MVA unit in the form of REA Bulletin 65-2 (1978) / RUS Bulletin
1724E-301 (1997), as printed in the article 'Take into account the losses when purchasing power transformer' of
Electrical Engineering Portal; that it stems from the bulletin is inferred.
"""

from __future__ import annotations

import pytest

from lossworth.evaluation.evaluate import evaluate
from support import records as make

PRINTED = {
    "Bid A": ("424500.00", "144550.00", "292096.00", "1512.00", "862658.00"),
    "Bid B": ("436000.00", "129850.00", "284272.00", "1890.00", "852012.00"),
}


@pytest.fixture
def result():
    """The comparison as a tender of one unit, USD."""
    lot = make.lot(
        quantity=make.quantity("1"), rates=make.rates("2450", "1304", "756"), cooling=make.entry("ONAN/ONAF/ONAF")
    )
    bids = [
        make.priced("Bid A", "424500", "59", "224", auxiliary_loss_kw=make.quantity("2.0", "kW")),
        make.priced("Bid B", "436000", "53", "218", auxiliary_loss_kw=make.quantity("2.5", "kW")),
    ]
    return evaluate(make.tender(lot), bids).lots[0]


def test_two_bids__printed_amounts(result):
    """All parts and totals equal the printed dollars."""
    for offer in result.offers:
        cost = offer.lot
        parts = (cost.evaluated_price, cost.no_load_cost, cost.load_cost, cost.auxiliary_cost, cost.total_owning_cost)
        assert tuple(str(part.value) for part in parts) == PRINTED[offer.bidder]


def test_two_bids__dearer_price_first(result):
    """Bid B, dearer by 11,500, comes first by 10,646."""
    first, second = result.offers
    assert (first.bidder, first.rank, second.rank) == ("Bid B", 1, 2)
    assert str(first.margin.amount.value) == "10646.00"
