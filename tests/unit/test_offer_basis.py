"""Losses on one basis: converted where the tender allows, else a question to the bidder; cooling through A and B."""

from __future__ import annotations

from decimal import Decimal as D

import pytest

from lossworth.evaluation.evaluate import evaluate
from lossworth.evaluation.loss_basis import on_basis
from lossworth.records.tender import CoolingValuation
from lossworth.trail import walk
from support import records as make

POWER = {"rated_power_kva": make.quantity("31500", "kVA"), "cooling": make.entry("ONAN/ONAF")}


def only(lot, offer):
    """The evaluated offer of a tender of one lot."""
    return evaluate(make.tender(lot), [offer]).lots[0].offers[0]


def kw(value):
    """A loss in kW."""
    return make.quantity(value, "kW")


def test_on_basis__rating_by_the_square():
    """57.2 kW and 7.9 % at 20 MVA are 141.8919 kW and 12.4425 % at 31.5 MVA."""
    offer = make.offer(
        load_loss_kw=kw("57.2"),
        impedance_percent=make.quantity("7.9", "%"),
        load_loss_rating_kva=make.quantity("20000", "kVA"),
    )
    judged = on_basis(offer, make.lot(**POWER, loss_basis=make.loss_basis()))
    assert judged.load_loss.value == D("57.2") * D("2.480625")
    assert judged.impedance.value == D("12.4425")
    assert [f.kind for f in judged.findings] == ["loss-converted"]
    assert "binds nobody" in judged.assumptions[0]


def test_on_basis__not_allowed_is_a_question():
    """Where the tender allows no conversion the offer is not evaluated, and the question is drafted."""
    offer = make.offer(load_loss_rating_kva=make.quantity("20000", "kVA"))
    found = only(make.lot(**POWER), offer)
    (finding,) = found.findings
    assert (found.status, finding.kind) == ("not evaluated", "loss-basis-differs")
    assert "please state them at 31500 kVA" in finding.remedy


def test_on_basis__temperature_split():
    """Resistive part times the ratio of resistances, stray part divided by it (IEC 60076-1, from memory)."""
    offer = make.offer(
        load_loss_kw=kw("10"),
        resistive_loss_kw=kw("8"),
        stray_loss_kw=kw("2"),
        reference_temperature_c=make.quantity("85", "°C"),
    )
    judged = on_basis(offer, make.lot(loss_basis=make.loss_basis()))
    ratio = 310 / 320
    assert float(judged.load_loss.value) == pytest.approx(8 * ratio + 2 / ratio, rel=1e-15)


def test_on_basis__temperature_unsplit_is_an_estimate():
    """Without the split all of the loss is taken as resistive, and the assumption says that it is an estimate."""
    offer = make.offer(load_loss_kw=kw("10"), reference_temperature_c=make.quantity("85", "°C"))
    judged = on_basis(offer, make.lot(loss_basis=make.loss_basis(conductor="aluminum")))
    assert float(judged.load_loss.value) == pytest.approx(10 * 300 / 310, rel=1e-15)
    assert "an estimate" in judged.assumptions[0]


def test_on_basis__total_loss_less_no_load_loss():
    """A total loss is never counted as load loss: Pk = total - P0 where the tender allows it."""
    offer = make.offer(load_loss_kw=None, total_loss_kw=kw("1.32"))
    allowed = only(make.lot(loss_basis=make.loss_basis()), offer)
    assert (allowed.status, allowed.on_basis.load_loss.value) == ("ranked", D("1.200"))
    refused = only(make.lot(), offer)
    assert refused.status == "not evaluated"
    assert [f.kind for f in refused.findings] == ["loss-basis-differs"]


def test_on_basis__same_basis_changes_nothing():
    """A bid on the tender's own basis is taken as it stands."""
    offer = make.offer(
        reference_temperature_c=make.quantity("75", "°C"), load_loss_rating_kva=make.quantity("100", "kVA")
    )
    judged = on_basis(offer, make.lot(loss_basis=make.loss_basis()))
    assert (judged.load_loss.value, judged.assumptions, judged.findings) == (D("1.200"), (), ())


def test_check_offer__limits_see_the_converted_value():
    """A limit is compared with the loss on the tender's basis, and the finding shows both."""
    lot = make.lot(**POWER, loss_basis=make.loss_basis(), maximum_load_loss_kw=kw("100"))
    offer = make.offer(load_loss_kw=kw("57.2"), load_loss_rating_kva=make.quantity("20000", "kVA"))
    found = only(lot, offer)
    assert found.status == "non-responsive"
    assert "57.2 kW = 141.89175 kW" in next(f for f in found.findings if f.kind == "load-loss-above-maximum").got


def through_a_and_b(**offer):
    """An offer whose cooling is valued through A and B."""
    lot = make.lot(**POWER, rates=make.rates("1000", "100"), cooling_valuation=CoolingValuation.THROUGH_A_AND_B)
    return only(lot, make.offer(no_load_loss_kw=kw("15"), load_loss_kw=kw("130"), **offer))


def test_owning_cost__two_stages_of_cooling():
    """IC + A (P0 + Pc0) + B (Pk + Pcs - Pc0) (IEC TS 60076-20, from memory)."""
    found = through_a_and_b(cooling_power_no_load_kw=kw("0.5"), cooling_power_rated_kw=kw("2"))
    unit = found.per_unit
    assert (unit.no_load_cost.value, unit.load_cost.value) == (D("15500.00"), D("13150.00"))
    assert unit.total_owning_cost.value == D("32650.00")
    assert "load loss with cooling, Pk + Pcs - Pc0" in {f.label for f in walk(unit.load_cost)}


def test_owning_cost__cooling_power_missing():
    """A fan-cooled unit that does not state its cooling power is not evaluated."""
    found = through_a_and_b(cooling_power_no_load_kw=kw("0.5"))
    assert [(f.kind, f.field) for f in found.findings] == [("value-missing", "cooling power at rated load")]
    assert found.per_unit.total_owning_cost is None


def test_owning_cost__cooling_power_zero_by_rule():
    """A naturally cooled unit needs no cooling power."""
    assert through_a_and_b(cooling=make.entry("ONAN")).per_unit.no_load_cost.value == D("15000.00")


def test_information__beside_the_money():
    """Efficiencies in both power bases, and energy where the tender announces a loading."""
    lot = make.lot(rates=None, derivation=make.derivation())
    facts = {fact.label: fact.value for fact in only(lot, make.offer()).information}
    assert facts["efficiency at 100 % load, of the input (IEC)"] == D("98.6800")
    assert facts["efficiency at 100 % load, of the output (IEEE)"] == D("98.6972")
    loss_factor = 0.15 * 0.55 + 0.85 * 0.55**2
    assert float(facts["energy lost in year 1"]) == round(8760 * (0.12 + 1.2 * loss_factor * 0.65**2))


def test_information__absurd_losses_have_no_efficiency():
    """A loss beyond the rated power gives no efficiency and no failure."""
    offer = make.offer(no_load_loss_kw=kw("120"), load_loss_kw=kw("1200"))
    assert only(make.lot(), offer).information == ()
