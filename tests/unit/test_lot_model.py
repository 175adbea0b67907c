"""The lot as arrays: the same costs as the evaluation, at its own inputs and at any others."""

from __future__ import annotations

import datetime
from dataclasses import replace
from decimal import Decimal as D

import numpy as np
import pytest

from lossworth.evaluation.evaluate import evaluate
from lossworth.evaluation.lot_rates import lot_rates
from lossworth.money import Rounding, RoundingMode
from lossworth.records.tender import CoolingValuation, Method, PriceOfYear1, RoundingPoint, Rules, Timing
from lossworth.sensitivity.lot_model import lot_model
from support import commercial, lot_models
from support import records as make

FINE = Rounding(D("1e-20"), RoundingMode.HALF_AWAY_FROM_ZERO)
DAY = [0.3] * 7 + [0.7] * 9 + [1.0] * 4 + [0.5] * 4  # invented shape, hour by hour
PRICE_DAY = [0.05] * 7 + [0.08] * 9 + [0.16] * 4 + [0.07] * 4  # invented


def rich_tender(**changes):
    """A tender with everything that moves a price: two currencies, adders, a margin, items, a tolerance."""
    settings = {
        "unconditional_discounts": "deduct",
        "preference": "margin added to other prices",
        "loss_tolerance": "evaluate at guarantee plus tolerance",
        "loss_tolerance_percent": make.quantity("15"),
        "missing_item": "highest of the others",
        "missing_item_among": "all offers received",
    }
    lot = make.lot(
        rates=make.rates("11000", "660", "1500"),
        delivery_without_adder_weeks=make.quantity("20"),
        delivery_adder_percent_per_week=make.quantity("0.5"),
        delivery_adder_per_week=make.quantity("3"),
        latest_delivery_weeks=make.quantity("40"),
        items=(commercial.item("bushing", "4"),),
        site_costs=(commercial.site_cost("bund", "120"),),
    )
    rules = commercial.rules(**settings)
    fields = {
        "rules": rules.model_copy(update={"rounding": FINE}),
        "exchange": make.exchange(FCU="1.25"),
        "delivered_point": make.entry("DDP site"),
        "delivery_levels": (commercial.level("FCA", "4", "55"),),
        "preference": commercial.preference("7.5", "home"),
    }
    return make.tender(lot, **(fields | changes))


def rich_offers():
    """Three offers that differ in currency, delivery term, origin, weeks, discount, tolerance and items."""
    spare = {"bushing": make.quantity("30")}
    losses = {"auxiliary_loss_kw": make.quantity("0.02", "kW")}
    return [
        commercial.bid("Alder", "4000", origin=make.entry("home"), delivery_weeks=make.quantity("18"),
                       delivery_term=make.entry("DDP"), item_prices=spare, **losses),
        commercial.bid("Birch", "3100", currency=make.entry("FCU"), delivery_weeks=make.quantity("26"),
                       delivery_term=make.entry("FCA"), item_prices={"bushing": make.quantity("45")},
                       no_load_loss_kw=make.quantity("0.110", "kW"), **losses),
        commercial.bid("Cedar", "3900", delivery_weeks=make.quantity("24.5"), delivery_term=make.entry("FCA"),
                       unconditional_discount_percent=make.quantity("2"),
                       claimed_tolerance_percent=make.quantity("10"), **losses),
    ]  # fmt: skip


def unit_costs(tender, offers):
    """Total owning cost of a unit by name, as the evaluation gives it."""
    lot = evaluate(tender, offers).lots[0]
    return {offer.name: float(offer.lot.total_owning_cost.value / lot.quantity.value) for offer in lot.ranked}


def assert_same(model, costs, expected):
    """Costs of the model, bid by bid."""
    assert dict(zip(model.bidders, costs, strict=True)) == pytest.approx(expected, rel=1e-12)


def test_lot_model__costs_are_those_of_the_evaluation():
    """Adders, margins, items, tolerance, two currencies: the model has the evaluation's costs, in rank order."""
    tender, offers = rich_tender(), rich_offers()
    model = lot_models.model_of(tender, offers)
    assert_same(model, model.cost, unit_costs(tender, offers))
    assert list(model.cost) == sorted(model.cost)
    assert_same(model, model.costs_of({}), unit_costs(tender, offers))


@pytest.mark.parametrize(
    ("name", "value", "changed"),
    [
        ("exchange_rate FCU", 1.4, {"exchange": make.exchange(FCU="1.4")}),
        ("delivered_point_percent FCA", 6, {"delivery_levels": (commercial.level("FCA", "6", "55"),)}),
        ("delivered_point_amount FCA", 80, {"delivery_levels": (commercial.level("FCA", "4", "80"),)}),
        ("preference_margin_percent", 3, {"preference": commercial.preference("3", "home")}),
    ],
)
def test_lot_model__shared_input_equals_another_evaluation(name, value, changed):
    """A changed input of the tender gives the costs of a tender that states it, by slope and by the trail alike."""
    offers = rich_offers()
    if name.startswith("exchange"):
        offers[2] = offers[2].model_copy(update={"terms": offers[0].terms})  # nobody's price stands in
    model = lot_models.model_of(rich_tender(), offers)
    expected = unit_costs(rich_tender(**changed), offers)
    assert_same(model, model.costs_of({name: value}), expected)
    shared = model.shared[name]
    assert_same(model, model.cost + shared.slope * (value - shared.now), expected)


@pytest.mark.parametrize("field", ["delivery_adder_percent_per_week", "delivery_adder_per_week"])
def test_lot_model__adder_per_week(field):
    """Adders of the lot move those costs that have weeks to pay for."""
    tender, offers = rich_tender(), rich_offers()
    model = lot_models.model_of(tender, offers)
    lot = tender.lots[0].model_copy(update={field: make.quantity("1.25")})
    expected = unit_costs(tender.model_copy(update={"lots": (lot,)}), offers)
    assert_same(model, model.costs_of({field: 1.25}), expected)
    assert model.shared[field].slope[model.bidders.index("Alder")] == 0


def test_lot_model__two_inputs_together():
    """Exchange rate and margin act on one another; together they equal the evaluation with both."""
    model = lot_models.model_of(rich_tender(), rich_offers()[:2])
    changed = {"exchange": make.exchange(FCU="1.1"), "preference": commercial.preference("20", "home")}
    both = model.costs_of({"exchange_rate FCU": 1.1, "preference_margin_percent": 20})
    assert_same(model, both, unit_costs(rich_tender(**changed), rich_offers()[:2]))


@pytest.mark.parametrize(
    ("name", "field", "value"),
    [
        ("unit_price", "unit_price", "3333"),
        ("no_load_loss_kw", "no_load_loss_kw", "0.2"),
        ("load_loss_kw", "load_loss_kw", "0.9"),
        ("auxiliary_loss_kw", "auxiliary_loss_kw", "0.5"),
    ],
)
def test_lot_model__own_input_equals_another_bid(name, field, value):
    """A changed price or guarantee of one bid gives the costs of a bid that states it."""
    offers = rich_offers()
    model = lot_models.model_of(rich_tender(), offers)
    unit = "NCU" if field == "unit_price" else "kW"
    changed = [offers[0], offers[1], offers[2].model_copy(update={field: make.quantity(value, unit)})]
    expected = unit_costs(rich_tender(), changed)
    at = model.bidders.index("Cedar")
    assert_same(model, model.costs_of({f"{name} of Cedar": float(value)}), expected)
    own = model.own[name]
    assert model.cost[at] + own.slope[at] * (float(value) - own.now[at]) == pytest.approx(expected["Cedar"], rel=1e-12)


def test_lot_model__weeks_equal_another_bid():
    """Weeks cost above the free ones alone."""
    offers = rich_offers()
    own = lot_models.model_of(rich_tender(), offers).own["delivery_weeks"]
    model = lot_models.model_of(rich_tender(), offers)
    at = model.bidders.index("Alder")
    later = offers[0].model_copy(update={"delivery_weeks": make.quantity("30")})
    expected = unit_costs(rich_tender(), [later, *offers[1:]])["Alder"]
    assert model.cost[at] + own.slope[at] * (30 - own.above[at]) == pytest.approx(expected, rel=1e-12)
    assert (own.highest[at], own.limit[at], own.whole) == (40, "latest delivery", True)


def test_lot_model__says_what_it_holds():
    """A tax rate that is taken out bends the costs and is left out by name; a stand-in price is named."""
    settings = {"taxes": "excluded"}
    tender = commercial.tender(settings=settings, taxes=commercial.taxes())
    model = lot_models.model_of(tender, [commercial.bid(tax_included=True), commercial.bid("Birch", "4100")])
    assert model.not_examined == ("tax_rate_percent",)
    assert lot_models.model_of(rich_tender(), rich_offers()).held_prices == ("Cedar",)


def test_lot_model__cooling_through_a_and_b():
    """Where cooling is valued through A and B the weights of the rates carry it."""
    lot = make.lot(cooling=make.entry("ONAN/ONAF"), cooling_valuation=CoolingValuation.THROUGH_A_AND_B)
    bid = make.priced("A", "100", "1", "10", cooling_power_no_load_kw=make.quantity("0.2", "kW"),
                      cooling_power_rated_kw=make.quantity("0.5", "kW"))  # fmt: skip
    model = lot_models.model_of(make.tender(lot), [bid])
    assert (model.no_load.tolist(), model.load.tolist()) == ([1.2], [10.3])


def test_lot_model__rounding_of_parts():
    """Rounded less unrounded parts, per unit and where the tender rounds per lot."""
    rows = (("4000.004", "0.1111111", "1.2345678"),)
    per_unit = lot_models.model(*rows)
    assert per_unit.rounding.of_parts[0] == pytest.approx([-0.004, -0.0021, -0.004748, 0], abs=1e-9)
    rules = Rules(rounding=make.CENT, rounding_applies_to=RoundingPoint.PART_PER_LOT, place=make.place())
    per_lot = lot_models.model(*rows, tender=make.tender(rules=rules))
    assert per_lot.rounding.step == pytest.approx(0.001)
    assert per_lot.rounding.of_parts[0] == pytest.approx([0, -0.0001, 0.000252, 0], abs=1e-9)


def test_lot_model__nothing_ranked():
    """A lot without a ranked offer has no model."""
    evaluation = evaluate(make.tender(), [make.offer(load_loss_kw=None)])
    with pytest.raises(ValueError, match="lot 1: no offer is ranked"):
        lot_model(evaluation, evaluation.lots[0])


def test_lot_model__announced_rates_follow_from_nothing():
    """Announced rates have no inputs; a study needs a stated derivation."""
    model = lot_models.model(("4000", "0.1", "1"))
    assert model.rate_inputs is None
    with pytest.raises(ValueError, match="announced"):
        model.rates_of(energy_price_per_kwh=0.1)
    with pytest.raises(KeyError, match="energy_price_per_kwh"):
        model.costs_of({"energy_price_per_kwh": 0.1})
    with pytest.raises(ValueError, match="no study"):
        lot_models.model(("4000", "0.1", "1"), study=True)


def test_lot_model__study_values_own_losses_by_its_own_rates():
    """In a study a kilowatt more costs the study's rate, not the announced one."""
    lot = make.lot(study=make.derivation(None))
    model = lot_models.model(("4000", "0.1", "1"), tender=make.tender(lot), study=True)
    assert model.basis == "study"
    assert model.own["no_load_loss_kw"].slope[0] == pytest.approx(model.a) != 11000


BLOCKS = (make.block("night", "0.05", starts=datetime.time(20), ends=datetime.time(7)), make.block("rest", "0.12"))
PROFILE = make.loading(
    profile=make.profile(DAY * 365),
    load_factor=None,
    loss_factor_coefficient=None,
    cooling_stages=(make.stage("0.55", "0.6"), make.stage("0.8", "0.4")),
)
SERIES = make.economics(
    energy_price_per_kwh=None,
    energy_price_series=make.series(PRICE_DAY * 365),
    carbon_cost_per_kwh=make.quantity("0.01"),
    carbon_cost_escalation_percent=make.quantity("2"),
    carbon_cost_counts=True,
)
PLAIN = make.economics(
    energy_price_escalation_percent=make.quantity("1.5"),
    energy_price_meaning=PriceOfYear1.TODAY,
    demand_charge_escalation_percent=make.quantity("0.5"),
    timing=Timing.MID_YEAR,
    upstream_gross_up=make.quantity("1.04"),
    carbon_cost_per_kwh=make.quantity("0.01"),
    carbon_cost_counts=True,
)
COOLED = make.loading(cooling_hours=make.quantity("600"), cooling_share_at_peak=make.quantity("1"))
BY_CHARGE = {"method": Method.FIXED_CHARGE_RATE}
CHARGE = make.economics(fixed_charge_rate_percent=make.quantity("9"))
TABLES = make.economics(energy_price_per_kwh=None, energy_price_by_year_per_kwh=(make.quantity("0.08"),) * 30)

OF_ECONOMICS = {
    "energy_price_per_kwh": "0.11",
    "energy_price_escalation_percent": "2.5",
    "carbon_cost_per_kwh": "0.03",
    "carbon_cost_escalation_percent": "4",
    "demand_charge_per_kw_year": "70",
    "demand_charge_escalation_percent": "-1",
    "discount_rate_percent": "7.25",
    "evaluation_period_years": "21",
    "upstream_gross_up": "1.1",
    "fixed_charge_rate_percent": "11",
}
OF_LOADING = {
    "load_factor": "0.4",
    "loss_factor_coefficient": "0.3",
    "peak_load_pu": "0.8",
    "peak_load_growth_percent": "2.2",
    "peak_load_cap_pu": "0.85",
    "peak_responsibility_factor": "0.7",
    "hours_energized": "8000",
    "cooling_hours": "900",
    "cooling_share_at_peak": "0.5",
}


@pytest.mark.parametrize(
    ("economics", "loading", "derivation"),
    [(PLAIN, COOLED, {}), (SERIES, PROFILE, {}), (CHARGE, make.loading(), BY_CHARGE), (TABLES, COOLED, {})],
    ids=["plain", "profile with stages, prices by hour, carbon", "fixed charge rate", "prices by year"],
)
def test_rates_of__equal_those_of_a_tender_that_states_the_value(economics, loading, derivation):
    """Every input of a derivation, changed in the model and changed in the tender, gives the same rates."""
    tender = lot_models.derived(economics, loading, **derivation)
    model = lot_models.model(("4000", "0.1", "1", "0.01"), tender=tender)
    tried = set()
    for stated, values in (("economics", OF_ECONOMICS), ("loading", OF_LOADING)):
        for name, text in values.items():
            if name not in model.rate_inputs or (name, economics) == ("energy_price_per_kwh", SERIES):
                continue
            if economics is TABLES and name == "evaluation_period_years":
                continue
            record = {"economics": economics, "loading": loading}
            record[stated] = record[stated].model_copy(update={name: make.quantity(text)})
            expected = stated_rates(lot_models.derived(**record, **derivation))
            rates = [float(rate) for rate in model.rates_of(**{name: float(text)})]
            assert rates == pytest.approx(expected, rel=1e-11), name
            tried.add(name)
    levels = {"energy_price_level_percent", "loss_factor", "energy_price_per_kwh", "evaluation_period_years"}
    assert model.rate_inputs.keys() - tried <= levels


def stated_rates(tender):
    """A, B and C as the evaluation derives them, to twelve digits."""
    found = lot_rates(tender, tender.lots[0])
    return [0 if figure is None else float(figure.value) for figure in (found.no_load, found.load, found.auxiliary)]


def test_rates_of__price_level_and_shorter_table():
    """All prices of a table together, and the first years of it."""
    model = lot_models.model(("4000", "0.1", "1"), tender=lot_models.derived(TABLES))
    plain = lot_models.model(("4000", "0.1", "1"), tender=lot_models.derived())
    level = np.array(model.rates_of(energy_price_level_percent=150.0, evaluation_period_years=12))
    assert level == pytest.approx(np.array(plain.rates_of(energy_price_per_kwh=0.12, evaluation_period_years=12)))
    assert model.rates.inputs["evaluation_period_years"].highest == 30


def test_rates_of__arrays_equal_single_values():
    """Arrays broadcast, and give what each value gives alone."""
    model = lot_models.model(("4000", "0.1", "1", "0.1"), tender=lot_models.derived(SERIES, PROFILE))
    peaks, rates = np.array([0.5, 0.7, 0.9]), np.array([[4.0], [6.0]])
    found = model.rates_of(peak_load_pu=peaks, discount_rate_percent=rates)
    for row, rate in enumerate(rates[:, 0]):
        for column, peak in enumerate(peaks):
            alone = model.rates_of(peak_load_pu=peak, discount_rate_percent=rate)
            assert [float(of[row, column]) for of in found] == pytest.approx([float(of) for of in alone], rel=1e-14)


def test_rates_of__unknown_input():
    """A name that the derivation does not know is refused."""
    model = lot_models.model(("4000", "0.1", "1"), tender=lot_models.derived())
    with pytest.raises(KeyError, match="carbon_cost_per_kwh"):
        model.rates_of(carbon_cost_per_kwh=0.1)
    with pytest.raises(KeyError, match="unit_price of Nobody"):
        model.costs_of({"unit_price of Nobody": 1.0})


def test_lot_model__is_not_equal_by_accident():
    """Models hold arrays: they are themselves, and a changed copy is another."""
    model = lot_models.model(("4000", "0.1", "1"))
    assert replace(model, a=1.0) != model
