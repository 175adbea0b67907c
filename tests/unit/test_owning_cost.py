"""Costs of one offer: parts, rounding, conversions, and what cannot be computed."""

from __future__ import annotations

from decimal import Decimal as D

import pytest

from lossworth.evaluation.evaluate import evaluate
from lossworth.evaluation.result import EvaluatedOffer
from lossworth.money import Rounding, RoundingMode
from lossworth.records.tender import RoundingPoint, Rules
from lossworth.trail import Operation, Rule, walk
from support import records as make


def only(tender, *offers) -> EvaluatedOffer:
    """The first evaluated offer of the first lot."""
    return evaluate(tender, offers).lots[0].offers[0]


def amounts(cost) -> list[str]:
    """The five amounts as texts."""
    figures = (cost.evaluated_price, cost.no_load_cost, cost.load_cost, cost.auxiliary_cost, cost.total_owning_cost)
    return [str(figure.value) for figure in figures if figure is not None]


def rules(point: RoundingPoint, quantum: str = "0.01", mode: RoundingMode = RoundingMode.HALF_AWAY_FROM_ZERO) -> Rules:
    """Rules of rounding."""
    return Rules(rounding=Rounding(D(quantum), mode), rounding_applies_to=point, place=make.place())


def test_owning_cost__parts_and_total():
    """Each part is rate times loss, the total their sum, the lot quantity times unit."""
    offer = only(make.tender(), make.offer())
    assert amounts(offer.per_unit) == ["4000.00", "1320.00", "792.00", "0.00", "6112.00"]
    assert amounts(offer.lot) == ["40000.00", "13200.00", "7920.00", "0.00", "61120.00"]


def test_owning_cost__watts_equal_kilowatts():
    """A loss in W costs the same as in kW, and its trail shows the division by 1000."""
    in_watts = only(make.tender(), make.offer(no_load_loss_kw=make.quantity("0.120", "W", "120")))
    assert amounts(in_watts.per_unit) == ["4000.00", "1320.00", "792.00", "0.00", "6112.00"]
    texts = [(f.label, str(f.value), f.unit) for f in walk(in_watts.per_unit.no_load_cost)]
    assert ("no-load loss as read", "120", "W") in texts
    assert ("W in 1 kW", "1000", "W/kW") in texts


def test_owning_cost__only_price_is_converted():
    """The exchange rate multiplies the price and nothing else."""
    tender = make.tender(exchange=make.exchange(FCU="1.2500"))
    offer = only(tender, make.offer(currency=make.entry("FCU"), unit_price=make.quantity("3300", "FCU")))
    assert amounts(offer.per_unit) == ["4125.00", "1320.00", "792.00", "0.00", "6237.00"]


def test_owning_cost__rounds_each_part_half_away_from_zero():
    """A half cent goes up in each part, before the parts are added."""
    tender = make.tender(make.lot(rates=make.rates("1", "1")))
    offer = only(tender, make.priced("Alder", "10.005", "0.005", "0.015"))
    assert amounts(offer.per_unit) == ["10.01", "0.01", "0.02", "0.00", "10.04"]


def test_owning_cost__rounding_down():
    """The mode "down" cuts."""
    tender = make.tender(
        make.lot(rates=make.rates("1", "1")), rules=rules(RoundingPoint.PART_PER_UNIT, mode=RoundingMode.DOWN)
    )
    offer = only(tender, make.priced("Alder", "10.005", "0.009", "0.015"))
    assert amounts(offer.per_unit) == ["10.00", "0.00", "0.01", "0.00", "10.01"]


def test_owning_cost__rounding_per_lot():
    """Rounded per lot, the parts of one unit stay exact and the lot is the sum of its rounded parts."""
    tender = make.tender(make.lot(rates=make.rates("1", "1")), rules=rules(RoundingPoint.PART_PER_LOT))
    offer = only(tender, make.priced("Alder", "10.0041", "0.0044", "0.0152"))
    assert amounts(offer.per_unit)[:3] == ["10.0041", "0.0044", "0.0152"]
    assert amounts(offer.lot) == ["100.04", "0.04", "0.15", "0.00", "100.23"]


@pytest.mark.parametrize(("per", "value"), [("kW", "11000"), ("W", "11"), ("0.1 kW", "1100")])
def test_owning_cost__unit_of_the_rate(per, value):
    """A rate per W or per 0.1 kW gives the same cost as the same rate per kW."""
    stated = {"kW": "660", "W": "0.66", "0.1 kW": "66"}[per]
    offer = only(make.tender(make.lot(rates=make.rates(value, stated, per=per))), make.offer())
    assert amounts(offer.per_unit) == ["4000.00", "1320.00", "792.00", "0.00", "6112.00"]


def test_owning_cost__auxiliary_zero_by_rule_for_natural_cooling():
    """A blank auxiliary loss of an ONAN unit is zero, and the figure says by which rule."""
    offer = only(make.tender(make.lot(rates=make.rates(auxiliary="1540"))), make.offer())
    assert offer.status == "ranked"
    leaves = [f for f in walk(offer.per_unit.auxiliary_cost) if isinstance(f.source, Rule)]
    assert [str(f.value) for f in leaves] == ["0"]
    assert "auxiliary-loss-zero-by-rule" in {f.kind for f in offer.findings}


def test_owning_cost__auxiliary_missing_for_fans():
    """A blank auxiliary loss of a fan-cooled unit is missing, and no total is made up."""
    lot = make.lot(rates=make.rates(auxiliary="1540"), cooling=make.entry("ONAN/ONAF"))
    offer = only(make.tender(lot), make.offer())
    assert offer.status == "not evaluated"
    assert offer.lot.total_owning_cost is None
    assert [f.kind for f in offer.findings] == ["value-missing"]


def test_owning_cost__trail_recomputes():
    """Every operation of the trail, recomputed from its operands, gives its value."""
    offer = only(make.tender(exchange=make.exchange(FCU="1.25")), make.offer(currency=make.entry("FCU")))
    for figure in walk(offer.lot.total_owning_cost):
        if isinstance(figure.source, Operation):
            values = [operand.value for operand in figure.source.operands]
            result = {
                "product": lambda v: D(1) if not v else v[0] * (v[1] if len(v) > 1 else 1),
                "sum": sum,
                "rounded": lambda v: v[0],
                "quotient": lambda v: v[0] / v[1],
            }[figure.source.operator](values)
            assert figure.value == (figure.rounding.apply(result) if figure.rounding else result)
