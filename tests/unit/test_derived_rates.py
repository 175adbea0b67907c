"""Rates derived from profiles, moving prices, cooling stages, dates, carbon and the fixed charge rate."""

from __future__ import annotations

import datetime
from decimal import Decimal as D

import pytest

from lossworth.errors import EvaluationStopped
from lossworth.evaluation.evaluate import evaluate
from lossworth.evaluation.load_and_price import block_of_each_step, check_load_and_price
from lossworth.evaluation.lot_rates import lot_rates
from lossworth.records.tender import Method, PresentValueDate
from lossworth.trail import walk
from support import records as make

DAY = [0.3] * 7 + [0.7] * 9 + [1.0] * 4 + [0.5] * 4  # invented shape, hour by hour
YEAR = DAY * 365
PRICE_DAY = [0.05] * 7 + [0.08] * 9 + [0.16] * 4 + [0.07] * 4  # invented


def rates(loading=None, economics=None, lot=None, **derivation):
    """Rates of a lot derived from changed economics and loading."""
    one = lot or make.lot(rates=None, derivation=make.derivation().model_copy(update=derivation))
    tender = make.tender(
        one, loading={"town": loading or make.loading()}, economics={"board": economics or make.economics()}
    )
    return lot_rates(tender, one)


def from_profile(loads=YEAR, **changes):
    """Loading condition with a profile in place of a load factor."""
    return make.loading(profile=make.profile(loads), load_factor=None, loss_factor_coefficient=None, **changes)


def moving(**changes):
    """Economics whose price moves within the day."""
    return make.economics(energy_price_per_kwh=None, **changes)


def test_derived_rates__profile_equals_its_loss_factor():
    """A profile gives the rates that its own loss factor gives."""
    loss_factor = sum(x * x for x in DAY) / 24
    stated = make.loading(load_factor=None, loss_factor_coefficient=None, loss_factor=make.quantity(str(loss_factor)))
    assert rates(from_profile()).load.value == rates(stated).load.value


def test_derived_rates__price_and_load_moving_together_cost_more():
    """Where load and price move together the loss factor by price exceeds that by time, by the weighted mean."""
    found = rates(from_profile(), moving(energy_price_series=make.series(PRICE_DAY * 365)))
    by_price = sum(p * x * x for p, x in zip(PRICE_DAY, DAY, strict=True)) / sum(PRICE_DAY)
    by_time = sum(x * x for x in DAY) / 24
    facts = found.load_facts.figures
    assert float(facts["loss_factor"].value) == pytest.approx(by_price, rel=1e-11)
    assert float(facts["loss_factor_by_time"].value) == pytest.approx(by_time, rel=1e-11)
    assert by_price > by_time


def test_derived_rates__blocks_equal_the_same_prices_by_hour():
    """A tariff in blocks gives the rates of the same prices hour by hour."""
    blocks = (
        make.block("night", "0.05", starts=datetime.time(20), ends=datetime.time(7)),
        make.block("rest", "0.12"),
    )
    hourly = [0.12 if 7 <= hour < 20 else 0.05 for hour in range(24)] * 365
    by_block = rates(from_profile(), moving(energy_price_blocks=blocks))
    by_hour = rates(from_profile(), moving(energy_price_series=make.series(hourly)))
    assert (by_block.no_load.value, by_block.load.value) == (by_hour.no_load.value, by_hour.load.value)


def test_derived_rates__finer_load_than_price():
    """Quarter-hours of load meet hours of price."""
    quarters = [x for x in YEAR for _ in range(4)]
    prices = moving(energy_price_series=make.series(PRICE_DAY * 365))
    assert rates(from_profile(quarters), prices).load.value == rates(from_profile(), prices).load.value


def test_derived_rates__peak_from_the_profile_in_kva():
    """A profile in kVA gives the peak load over the rated power, as a figure that shows the division."""
    loads = [60 * x for x in YEAR]
    in_kva = make.loading(
        profile=make.profile(loads, "kVA"), load_factor=None, loss_factor_coefficient=None, peak_load_pu=None
    )
    found = rates(in_kva)
    assert found.inputs["peak_load_pu"].value == D("0.6")
    assert {f.label for f in walk(found.inputs["peak_load_pu"])} >= {"rating of the guaranteed load loss"}


def test_derived_rates__peak_loads_by_year():
    """A table of peak loads gives the rates of the growth that made it."""
    table = tuple(make.quantity(f"{min(0.65 * 1.01**t, 1.0):.15f}") for t in range(30))
    by_table = make.loading(peak_load_pu=None, peak_load_growth_percent=None, peak_load_by_year_pu=table)
    assert rates(by_table).load.value == rates().load.value


def test_derived_rates__cooling_stage_follows_the_load():
    """A stage that starts above the first year's peak runs only in later years, and its hours grow."""
    loading = from_profile(cooling_stages=(make.stage("0.63"),))
    found = rates(loading)
    hours = found.table.columns["cooling_hours"]
    assert hours[0] == 4 * 365  # 0.65 at the four peak hours alone
    assert hours[0] <= hours[10] <= hours[-1]
    assert found.load_facts.stages[0].hours_by_year == hours
    assert found.auxiliary is not None


def test_derived_rates__demand_charge_by_month():
    """A charge per kW and month is twelve times as much a year."""
    monthly = make.economics(demand_charge_per_kw_year=None, demand_charge_per_kw_month=make.quantity("4.5"))
    yearly = make.economics(demand_charge_per_kw_year=make.quantity("54"))
    assert rates(economics=monthly).load.value == rates(economics=yearly).load.value


def test_derived_rates__carbon_only_where_it_counts():
    """A carbon cost that the tender does not count leaves the rates alone; one that counts adds to the price."""
    counted = make.economics(carbon_cost_per_kwh=make.quantity("0.02"), carbon_cost_counts=True)
    silent = make.economics(carbon_cost_per_kwh=make.quantity("0.02"), carbon_cost_counts=False)
    assert rates(economics=silent).no_load.value == rates().no_load.value
    dearer = make.economics(energy_price_per_kwh=make.quantity("0.105"))
    assert rates(economics=counted).no_load.value == rates(economics=dearer).no_load.value


def test_derived_rates__carbon_beside_a_moving_price_counts_by_time():
    """A carbon cost that is the same in every hour is weighted by time, not by price."""
    prices = {"energy_price_series": make.series(PRICE_DAY * 365)}
    counted = moving(carbon_cost_per_kwh=make.quantity("0.02"), carbon_cost_counts=True, **prices)
    shifted = moving(energy_price_series=make.series([p + 0.02 for p in PRICE_DAY] * 365))
    loading = from_profile(cooling_stages=(make.stage("0.63"),))
    one, other = rates(loading, counted), rates(loading, shifted)
    assert (one.no_load.value, one.load.value, one.auxiliary.value) == (
        other.no_load.value,
        other.load.value,
        other.auxiliary.value,
    )


def test_derived_rates__service_after_the_price_date():
    """Prices escalate from their date to the service; present values may be taken at either date."""
    dates = {"price_date": datetime.date(2026, 1, 1), "service_date": datetime.date(2028, 1, 1)}
    escalation = {
        "energy_price_escalation_percent": make.quantity("3"),
        "demand_charge_escalation_percent": make.quantity("3"),
    }
    plain = rates(economics=make.economics(**escalation), rounding=None).no_load.value
    late = rates(economics=make.economics(**escalation, **dates), rounding=None).no_load.value
    back = rates(
        economics=make.economics(**escalation, **dates, present_value_at=PresentValueDate.PRICE), rounding=None
    ).no_load.value
    years = 730 / 365.25
    assert float(late / plain) == pytest.approx(1.03**years, rel=1e-10)
    assert float(back / late) == pytest.approx(1.06**-years, rel=1e-10)


def test_derived_rates__fixed_charge_rate_by_hand():
    """Annual cost over the fixed charge rate, as figures: A = (55 + 8760 x 0.085) / 0.12."""
    economics = make.economics(fixed_charge_rate_percent=make.quantity("12"))
    loading = make.loading(peak_load_growth_percent=None)
    found = rates(loading, economics, method=Method.FIXED_CHARGE_RATE)
    assert found.no_load.value == D("6663.33")
    loss_factor = 0.15 * 0.55 + 0.85 * 0.55**2
    by_hand = (55 * 0.81 + 8760 * 0.085 * loss_factor) * 0.65**2 / 0.12
    assert float(found.load.value) == pytest.approx(by_hand, abs=0.005)
    assert found.table is None


def test_derived_rates__fixed_charge_rate_with_growth_uses_the_equivalent_peak():
    """With growing load the equivalent annual peak load takes the place of the first year's."""
    economics = make.economics(fixed_charge_rate_percent=make.quantity("12"))
    found = rates(make.loading(), economics, method=Method.FIXED_CHARGE_RATE)
    peaks = [min(0.65 * 1.01**t, 1) for t in range(30)]
    weights = [1.06 ** -(t + 1) for t in range(30)]
    squared = sum(w * b * b for w, b in zip(weights, peaks, strict=True)) / sum(weights)
    loss_factor = 0.15 * 0.55 + 0.85 * 0.55**2
    by_hand = (55 * 0.81 + 8760 * 0.085 * loss_factor) * squared / 0.12
    assert float(found.load.value) == pytest.approx(by_hand, abs=0.005)


def test_block_of_each_step__over_midnight_and_rest():
    """A block may run over midnight; the block without conditions takes the rest."""
    blocks = (
        make.block("rest", "1"),
        make.block("night", "2", starts=datetime.time(22), ends=datetime.time(6)),
    )
    chosen = block_of_each_step(make.grid(8760), blocks)
    assert chosen[:24].tolist() == [1] * 6 + [0] * 16 + [1] * 2


@pytest.mark.parametrize(
    ("blocks", "rule"),
    [
        ((make.block("a", "1", day_types=("workday",)),), "every hour must lie in a block"),
        (
            (make.block("a", "1", day_types=("workday",)), make.block("b", "2", months=(1,)), make.block("c", "3")),
            "no hour may lie in two blocks",
        ),
    ],
)
def test_check_load_and_price__blocks(blocks, rule):
    """Gaps and overlaps of a tariff are found, with a first hour in which they are."""
    lot = make.lot(rates=None, derivation=make.derivation())
    tender = make.tender(lot, loading={"town": from_profile()}, economics={"board": moving(energy_price_blocks=blocks)})
    (finding,) = check_load_and_price(tender)
    assert finding.rule == rule
    assert "steps in all" in finding.got
    with pytest.raises(EvaluationStopped):
        evaluate(tender, [])


def test_check_load_and_price__grids_that_do_not_fit():
    """A load over 8760 hours and a price over 8784 do not fit, and the finding says so."""
    leap = make.series([0.1] * 8784, grid=make.grid(8784, hours=(1.0,) * 8784))
    lot = make.lot(rates=None, derivation=make.derivation())
    tender = make.tender(lot, loading={"town": from_profile()}, economics={"board": moving(energy_price_series=leap)})
    assert [f.got for f in check_load_and_price(tender)] == ["8760 steps of load, 8784 steps of price"]


def test_check_load_and_price__moving_price_needs_a_profile():
    """A load factor alone cannot be joined with a price by hour."""
    economics = moving(energy_price_series=make.series(PRICE_DAY * 365))
    tender = make.tender(make.lot(rates=None, derivation=make.derivation()), economics={"board": economics})
    assert [f.kind for f in check_load_and_price(tender)] == ["tender-conflict"]
