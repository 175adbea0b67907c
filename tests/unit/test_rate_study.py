"""Sensitivity of derived rates to their inputs, and announced beside derived rates."""

from __future__ import annotations

from decimal import Decimal as D

import pytest

from lossworth.evaluation.lot_rates import derived_rates
from lossworth.evaluation.rate_study import percent_above, sensitivities
from lossworth.report.build_rates_report import build_rates_report
from support import records as make


def derived(economics=None, loading=None):
    """Unrounded rates of the demonstration's lot 3 with changed economics or loading."""
    one = make.lot(rates=None, derivation=make.derivation(None))
    tender = make.tender(
        one, economics={"board": economics or make.economics()}, loading={"town": loading or make.loading()}
    )
    return derived_rates(tender, one, one.derivation)


@pytest.mark.parametrize(
    ("label", "changed", "times"),
    [
        ("energy price", {"economics": make.economics(energy_price_per_kwh=make.quantity("0.0935"))}, 1),
        ("demand charge", {"economics": make.economics(demand_charge_per_kw_year=make.quantity("60.5"))}, 1),
        ("discount rate", {"economics": make.economics(discount_rate_percent=make.quantity("6.001"))}, 1000),
        ("load factor", {"loading": make.loading(load_factor=make.quantity("0.550001"))}, 50000),
        ("evaluation period", {"economics": make.economics(evaluation_period_years=make.quantity("31"))}, 1),
    ],
)
def test_sensitivities__equal_the_change_of_the_rates(label, changed, times):
    """The stated change of an input moves the rates by what is said: exactly, or to first order of a small change."""
    (found,) = (s for s in sensitivities(derived()) if s.figure.label == label)
    base, moved = derived(), derived(**changed)
    assert found.no_load == pytest.approx(float(moved.no_load.value - base.no_load.value) * times, rel=2e-3)
    assert found.load == pytest.approx(float(moved.load.value - base.load.value) * times, rel=2e-3)


def test_sensitivities__announced_rates_have_none():
    """Announced rates are inputs and depend on nothing."""
    report = build_rates_report(make.tender())
    assert (report.lots[0].sensitivity, report.lots[0].comparison) == ((), ())


def test_percent_above__of_the_derived_rate():
    """A rate of 112 against 100 is 12 percent above."""
    rates = derived()
    above = percent_above(rates.no_load, rates.no_load)
    assert above == 0


def test_build_rates_report__compares_announced_with_derived():
    """The announced A of 11,000 is 0.1 % below the derived 11,006.36; the announced B is far above."""
    one = make.lot(rates=make.rates("11000", "2500"), study=make.derivation())
    sentences = build_rates_report(make.tender(one)).lots[0].comparison
    assert sentences[0] == "The announced A is 0.1\u202f% below what these inputs give (11,006.36 NCU/kW)."
    assert sentences[1].startswith("The announced B is 16.1\u202f% above")
    assert round(D(100) * (D(2500) / D("2153.32") - 1), 1) == D("16.1")
