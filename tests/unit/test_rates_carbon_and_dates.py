"""Carbon cost beside the energy price, and a service date after the price date: at sight, and against plain sums."""

from __future__ import annotations

import tracemalloc
from typing import Any

import numpy as np
import pytest

from lossworth.capitalization import inputs as engine_inputs
from lossworth.capitalization.cooling import auxiliary_rate, cooling_hours_by_year
from lossworth.capitalization.duration import load_duration
from lossworth.capitalization.load import peak_load_by_year
from lossworth.capitalization.profile import loss_factor, price_weighted_loss_factor
from lossworth.capitalization.rates import Rates, loss_capitalization_rates, year_table
from lossworth.capitalization.rates_sensitivity import rate_derivatives
from support.year_model import year_inputs

CARBON: dict[str, Any] = {"carbon_cost_per_kwh": 0.02, "carbon_cost_escalation": 0.5}


def plain_inputs(**changes: Any) -> dict[str, Any]:
    """Constant price and load over three years without discount: sums that can be told at sight."""
    inputs: dict[str, Any] = {
        "discount_rate": 0,
        "evaluation_period_years": 3,
        "energy_price_per_kwh": 0.1,
        "loss_factor": 0.25,
        "peak_load_pu": 0.8,
        "cooling_hours": 100,
    }
    return {name: value for name, value in {**inputs, **changes}.items() if value is not ...}


def values(rates: Rates) -> np.ndarray:
    """A, B and C, last axis the scenarios."""
    return np.stack([rates.no_load, rates.load, rates.auxiliary])


def test_carbon_cost__is_added_to_the_price_of_all_three_rates() -> None:
    """Three years at 0.1 and 0.02: the energy of each loss costs 0.12."""
    rates = loss_capitalization_rates(**plain_inputs(carbon_cost_per_kwh=0.02))
    np.testing.assert_allclose(values(rates), 0.36 * np.array([8760, 8760 * 0.25 * 0.64, 100]), rtol=1e-15)


def test_carbon_cost__escalates_on_its_own() -> None:
    """0.02, 0.03 and 0.045 over the years, whatever the energy price does."""
    rates = loss_capitalization_rates(**plain_inputs(**CARBON, energy_price_escalation=0.1))
    np.testing.assert_allclose(rates.no_load, 8760 * (0.1 + 0.11 + 0.121 + 0.02 + 0.03 + 0.045), rtol=1e-15)


def test_carbon_cost__is_that_of_year_1_in_both_meanings_of_the_price() -> None:
    """Today's price escalates before the first payment; the carbon cost does not."""
    today = plain_inputs(**CARBON, energy_price_escalation=0.1, escalate_before_year_1=True)
    expected = 8760 * (0.11 + 0.121 + 0.1331 + 0.02 + 0.03 + 0.045)
    np.testing.assert_allclose(loss_capitalization_rates(**today).no_load, expected, rtol=1e-15)


def test_carbon_cost__beside_prices_by_year() -> None:
    """A table of energy prices has no carbon in it."""
    inputs = plain_inputs(**CARBON, energy_price_per_kwh=..., energy_price_by_year_per_kwh=[0.1, 0.2, 0.3])
    np.testing.assert_allclose(loss_capitalization_rates(**inputs).no_load, 8760 * (0.6 + 0.095), rtol=1e-15)


@pytest.mark.parametrize(
    "nothing",
    [
        {"carbon_cost_per_kwh": 0.0},
        {"carbon_cost_per_kwh": [0.0, 0.0]},
        {"carbon_cost_per_kwh": 0.0, "carbon_cost_escalation": 0.03},
        {"carbon_cost_per_kwh": 0.0, "price_delay_years": 0.0, "discount_delay_years": 0.0},
    ],
)
def test_carbon_cost__zero_counts_nothing(nothing: dict[str, Any]) -> None:
    """A carbon cost of 0 and delays of 0 give what their absence gives, to the last bit."""
    inputs = year_inputs(discount_rate=[0.05, 0.06])
    zero, absent = loss_capitalization_rates(**inputs, **nothing), loss_capitalization_rates(**inputs)
    assert values(zero).tobytes() == values(absent).tobytes()
    zero_table, table = year_table(**inputs, **nothing), year_table(**inputs)
    assert zero_table.load.tobytes() == table.load.tobytes()


def test_carbon_cost__zero_counts_nothing_whatever_its_escalation() -> None:
    """An escalation beyond all numbers does no harm to nothing."""
    inputs = year_inputs(evaluation_period_years=1000, carbon_cost_per_kwh=0.0, carbon_cost_escalation=1.5)
    table = year_table(**inputs)
    assert not table.carbon_cost_per_kwh.any()
    np.testing.assert_allclose(table.no_load.sum(), loss_capitalization_rates(**inputs).no_load, rtol=1e-12)


def test_carbon_cost__scenarios_with_and_without() -> None:
    """Many scenarios, with carbon cost and without, periods of different length: each as it is alone."""
    size = engine_inputs.BLOCK + 2
    costs = np.where(np.arange(size) % 2, 0.02, 0.0)
    periods = 20 + np.arange(size) % 3
    together = loss_capitalization_rates(
        **year_inputs(
            evaluation_period_years=periods,
            carbon_cost_per_kwh=costs,
            carbon_cost_escalation=0.01,
            price_delay_years=[[0.0], [2.5]],
        )
    )
    for row, column in [(0, 0), (0, 1), (1, 2), (1, size - 2), (0, size - 1)]:
        alone = loss_capitalization_rates(
            **year_inputs(
                evaluation_period_years=periods[column],
                carbon_cost_per_kwh=costs[column],
                carbon_cost_escalation=0.01,
                price_delay_years=[0.0, 2.5][row],
            )
        )
        np.testing.assert_allclose(values(together)[:, row, column], values(alone), rtol=1e-14)


def test_carbon_cost__flat_beside_a_price_by_hour() -> None:
    """With a price by hour, two calls that add up equal the sum over years and hours written out."""
    shape, prices = np.array([0.2, 0.5, 0.8, 1.0]), np.array([0.05, 0.08, 0.12, 0.2])
    growth = 1.02 ** np.arange(3)[:, np.newaxis]
    hourly = prices * 1.03 ** np.arange(3)[:, np.newaxis] + 0.02 * 1.5 ** np.arange(3)[:, np.newaxis]
    expected = np.sum((0.8 * growth * shape) ** 2 * hourly * 2190)
    common = plain_inputs(peak_load_growth=0.02, energy_price_per_kwh=..., loss_factor=...)
    energy = loss_capitalization_rates(
        **common,
        energy_price_per_kwh=prices.mean(),
        energy_price_escalation=0.03,
        loss_factor=price_weighted_loss_factor(shape, prices),
    )
    carbon = loss_capitalization_rates(
        **common, energy_price_per_kwh=0.02, energy_price_escalation=0.5, loss_factor=loss_factor(shape)
    )
    np.testing.assert_allclose(energy.load + carbon.load, expected, rtol=1e-14)


def test_price_delay__escalates_each_amount_by_its_own_rate() -> None:
    """Two years before year 1: the price rises by 1.1 twice, the carbon cost by 1.5, the demand charge by 1.2."""
    inputs = plain_inputs(**CARBON, evaluation_period_years=1, energy_price_escalation=0.1, price_delay_years=2)
    rates = loss_capitalization_rates(**inputs, demand_charge_per_kw_year=50, demand_charge_escalation=0.2)
    energy, demand = 0.1 * 1.21 + 0.02 * 2.25, 50 * 1.44
    expected = [8760 * energy + demand, (2190 * energy + demand) * 0.64, 100 * energy]
    np.testing.assert_allclose(values(rates), expected, rtol=1e-14)


def test_price_delay__comes_on_top_of_the_meaning_of_the_price() -> None:
    """Today's price escalates once more before the first payment."""
    inputs = plain_inputs(evaluation_period_years=1, energy_price_escalation=0.1, escalate_before_year_1=True)
    rates = loss_capitalization_rates(**inputs, price_delay_years=1.5)
    np.testing.assert_allclose(rates.no_load, 876 * 1.1**2.5, rtol=1e-14)


def test_price_delay__leaves_what_does_not_escalate() -> None:
    """Constant prices, tables by year, and the peak load of year 1 with its growth stay as stated."""
    constant = plain_inputs(peak_load_growth=0.1, demand_charge_per_kw_year=50, carbon_cost_per_kwh=0.02)
    by_year = {
        **constant,
        "energy_price_per_kwh": None,
        "energy_price_by_year_per_kwh": [0.1, 0.2, 0.3],
        "demand_charge_per_kw_year": None,
        "demand_charge_by_year_per_kw": [50, 60, 70],
    }
    for inputs in (constant, by_year):
        delayed = loss_capitalization_rates(**inputs, price_delay_years=3)
        assert values(delayed).tobytes() == values(loss_capitalization_rates(**inputs)).tobytes()


def test_discount_delay__discounts_every_cost_on() -> None:
    """At a rate of 25 percent, costs are worth 0.64 two years before the service date."""
    inputs = year_inputs(discount_rate=0.25, carbon_cost_per_kwh=0.02)
    now, before = loss_capitalization_rates(**inputs), loss_capitalization_rates(**inputs, discount_delay_years=2)
    np.testing.assert_allclose(values(before), 0.64 * values(now), rtol=1e-14)


def test_discount_delay__without_discount() -> None:
    """At a rate of 0 the date of the present values is without effect."""
    inputs = year_inputs(discount_rate=0.0)
    before = loss_capitalization_rates(**inputs, discount_delay_years=2.5)
    assert values(before).tobytes() == values(loss_capitalization_rates(**inputs)).tobytes()


def test_delays__meet_where_price_and_discount_rate_do() -> None:
    """A price that escalates by the discount rate is worth the same at every date."""
    inputs = plain_inputs(discount_rate=0.06, energy_price_escalation=0.06)
    delayed = loss_capitalization_rates(**inputs, price_delay_years=1.75, discount_delay_years=1.75)
    np.testing.assert_allclose(values(delayed), values(loss_capitalization_rates(**inputs)), rtol=1e-14)


def test_delays__overflow() -> None:
    """Escalation beyond all numbers before year 1 is refused by name."""
    with pytest.raises(ValueError, match=r"^no-load loss rate: exceeds the range"):
        loss_capitalization_rates(**plain_inputs(energy_price_escalation=1e6, price_delay_years=100))


def test_year_table__carbon_and_dates() -> None:
    """Price without carbon, carbon cost and charge of the year, and factors at the price date."""
    table = year_table(
        **plain_inputs(
            **CARBON,
            discount_rate=0.25,
            energy_price_escalation=0.1,
            demand_charge_per_kw_year=50,
            price_delay_years=2,
            discount_delay_years=2,
        )
    )
    years = np.arange(3)
    np.testing.assert_allclose(table.energy_price_per_kwh, 0.121 * 1.1**years, rtol=1e-14)
    np.testing.assert_allclose(table.carbon_cost_per_kwh, 0.045 * 1.5**years, rtol=1e-14)
    np.testing.assert_allclose(table.discount_factor, 0.64 * 0.8 ** (years + 1), rtol=1e-14)
    energy = table.energy_price_per_kwh + table.carbon_cost_per_kwh
    np.testing.assert_allclose(table.no_load, table.discount_factor * (8760 * energy + 50), rtol=1e-14)
    np.testing.assert_allclose(table.auxiliary, table.discount_factor * 100 * energy, rtol=1e-14)


def test_year_table__cooling() -> None:
    """Hours and share of the cooling stand in the table, constant or by year."""
    constant = year_table(**plain_inputs(cooling_share_at_peak=0.5, discount_rate=[0.05, 0.06]))
    assert constant.cooling_hours.tolist() == [[100] * 3] * 2
    assert constant.cooling_share_at_peak.tolist() == [[0.5] * 3] * 2
    varying = year_table(
        **plain_inputs(cooling_hours=..., cooling_hours_by_year=[0, 50, 700], cooling_share_at_peak_by_year=[0, 0.5, 1])
    )
    assert varying.cooling_hours.tolist() == [0, 50, 700]
    assert varying.cooling_share_at_peak.tolist() == [0, 0.5, 1]


def test_auxiliary_rate__carbon_and_dates() -> None:
    """Cooling that follows the load is valued like the hours of each year put into the plain engine."""
    shape = load_duration([0.25, 0.5, 0.75, 1.0])
    common: dict[str, Any] = {
        **CARBON,
        "discount_rate": 0.06,
        "evaluation_period_years": 10,
        "energy_price_per_kwh": 0.1,
        "energy_price_escalation": 0.02,
        "peak_load_pu": 0.6,
        "peak_load_growth": 0.05,
        "price_delay_years": 1.5,
        "discount_delay_years": 0.75,
    }
    hours = cooling_hours_by_year(
        shape, peak_load_by_year_pu=peak_load_by_year(0.6, 10, peak_load_growth=0.05), starts_above_pu=0.63
    )
    plain = loss_capitalization_rates(**common, loss_factor=0.3, cooling_hours_by_year=hours)
    np.testing.assert_allclose(auxiliary_rate(shape, starts_above_pu=0.63, **common), plain.auxiliary, rtol=1e-13)


def test_rate_derivatives__price_delay_beside_prices_by_year() -> None:
    """Only what escalates moves with the price date: here the demand charge."""
    inputs = year_inputs(energy_price_per_kwh=..., energy_price_escalation=..., energy_price_by_year_per_kwh=[0.1] * 30)
    demand = year_inputs(energy_price_per_kwh=0.0, price_delay_years=2.0)
    slopes = rate_derivatives(**inputs, price_delay_years=2.0)
    expected = np.log(1.01) * values(loss_capitalization_rates(**demand))
    np.testing.assert_allclose(values(slopes["price_delay_years"]), expected, rtol=1e-12)
    assert {"carbon_cost_per_kwh", "carbon_cost_escalation"} < set(slopes)


def test_loss_capitalization_rates__memory_does_not_grow_with_the_scenarios() -> None:
    """Beyond inputs and result, four times the scenarios take no more memory, carbon cost included."""

    def beyond_the_result(scenarios: int) -> int:
        inputs = year_inputs(discount_rate=np.linspace(0.02, 0.1, scenarios), **CARBON)
        tracemalloc.start()
        try:
            rates = loss_capitalization_rates(**inputs)
            return tracemalloc.get_traced_memory()[1] - 3 * rates.load.nbytes
        finally:
            tracemalloc.stop()

    few, many = beyond_the_result(100_000), beyond_the_result(400_000)
    assert abs(many - few) < 0.05 * few
    assert many < 2_000_000
