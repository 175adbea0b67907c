"""Present values at the points where they can be told without a computer, and near where the forms are 0/0."""

from __future__ import annotations

import numpy as np
import numpy_financial as npf
import pytest

from lossworth.capitalization import load_growth, present_value
from lossworth.capitalization.rates import loss_capitalization_rates
from support.year_model import CLOSE, year_inputs

RATES = [-0.02, 0.001, 0.03, 0.06, 0.1, 0.25]
PERIODS = [1, 2, 10, 30, 60]


def test_discount_factor__timing() -> None:
    """Year 1 is discounted by a whole year at its end, by half a year at its middle, not at all at its start."""
    factors = present_value.discount_factor(0.21, 1, years_before_end=[0, 0.5, 1])
    np.testing.assert_allclose(factors, [1 / 1.21, 1 / 1.1, 1], rtol=1e-15)


@pytest.mark.parametrize("rate", [0.0, 5e-324, -5e-324, 1e-300, -1e-17, 1e-17])
def test_annuity_factor__at_and_next_to_zero(rate: float) -> None:
    """At a rate of 0 and next to it, 30 years are 30."""
    assert float(present_value.annuity_factor(rate, 30)) == pytest.approx(30, rel=3e-16)


def test_annuity_factor__no_years() -> None:
    """No payments, no value, whatever the rate."""
    assert present_value.annuity_factor([-0.5, 0, 0.06], 0).tolist() == [0, 0, 0]


def test_annuity_factor__demo_settings() -> None:
    """The factors that the demo prints (invented data): 6 % over 30 and 35 years."""
    assert present_value.annuity_factor(0.06, [30, 35]).round(5).tolist() == [13.76483, 14.49825]


def test_annuity_factor__broadcasts() -> None:
    """Rates in rows and periods in columns make a table."""
    table = present_value.annuity_factor(np.array(RATES)[:, np.newaxis], PERIODS)
    assert table.shape == (len(RATES), len(PERIODS))
    assert float(present_value.annuity_factor(RATES[3], PERIODS[2])) == table[3, 2]


@pytest.mark.parametrize("rate", RATES)
@pytest.mark.parametrize("years", PERIODS)
def test_annuity_factor__numpy_financial(rate: float, years: int) -> None:
    """The independent package gives the same present value of payments of 1."""
    np.testing.assert_allclose(present_value.annuity_factor(rate, years), npf.pv(rate, years, -1), rtol=CLOSE)


@pytest.mark.parametrize("rate", RATES)
@pytest.mark.parametrize("years", PERIODS)
def test_capital_recovery_factor__numpy_financial(rate: float, years: int) -> None:
    """The independent package gives the same payment on a loan of 1."""
    np.testing.assert_allclose(present_value.capital_recovery_factor(rate, years), npf.pmt(rate, years, -1), rtol=CLOSE)


@pytest.mark.parametrize("escalation", [-0.03, 0.0, 0.02, 0.06, 0.1])
@pytest.mark.parametrize("rate", RATES)
def test_growing_annuity_factor__numpy_financial(rate: float, escalation: float) -> None:
    """The independent package gives the same; its npv counts the first flow at time zero, so a 0 goes first."""
    flows = [0, *((1 + escalation) ** np.arange(30))]
    computed = present_value.growing_annuity_factor(rate, 30, escalation=escalation)
    np.testing.assert_allclose(computed, npf.npv(rate, flows), rtol=CLOSE)


@pytest.mark.parametrize("timing", [0.0, 0.5, 1.0])
def test_loss_capitalization_rates__numpy_financial(timing: float) -> None:
    """A and C are the net present values of the yearly costs, moved by the timing."""
    inputs = year_inputs(years_before_end=timing)
    years = np.arange(30)
    price, charge = 0.085 * 1.02**years, 55 * 1.01**years
    load = np.minimum(0.65 * 1.015**years, 0.9)
    costs = {
        "no_load": price * 8700 + charge,
        "load": load**2 * (price * 8760 * 0.34 + charge * 0.9**2),
        "auxiliary": price * 600 + charge * 0.75,
    }
    computed = loss_capitalization_rates(**inputs)
    for name, cost in costs.items():
        expected = 1.04 * npf.npv(0.06, [0, *cost]) * 1.06**timing
        np.testing.assert_allclose(getattr(computed, name), expected, rtol=CLOSE)


def test_growing_annuity_factor__escalation_equals_the_rate() -> None:
    """At e = r every payment is worth the same: n/(1 + r); with today's price exactly n."""
    assert float(present_value.growing_annuity_factor(0.25, 20, escalation=0.25)) == 16.0
    today = present_value.growing_annuity_factor(0.25, 20, escalation=0.25, escalate_before_year_1=True)
    assert float(today) == 20.0


def test_growing_annuity_factor__continuous_through_the_singular_point() -> None:
    """From either side the value runs into that of e = r, without a jump or noise."""
    steps = np.array([-1e-9, -1e-12, -1e-15, 0.0, 1e-15, 1e-12, 1e-9])
    values = present_value.growing_annuity_factor(0.06 + steps, 40, escalation=0.06)
    slope = -40 * 41 / 2 / 1.06**2  # of the sum by r, at e = r
    np.testing.assert_allclose(values, 40 / 1.06 + slope * ((0.06 + steps) - 0.06), rtol=2e-15)


def test_growing_annuity_factor__no_escalation_is_the_annuity() -> None:
    """Without escalation nothing grows."""
    np.testing.assert_array_equal(
        present_value.growing_annuity_factor(RATES, 30, escalation=0), present_value.annuity_factor(RATES, 30)
    )


def test_growing_load_factor__singular_point() -> None:
    """At (1 + e)(1 + g)^2 = 1 + r every year is worth the same: n/(1 + r)."""
    factor = load_growth.growing_load_factor(1.25 * 1.5**2 - 1, 20, peak_load_growth=0.5, escalation=0.25)
    assert float(factor) == 20 / (1.25 * 1.5**2)


def test_growing_load_factor__todays_price_keeps_its_own_factor() -> None:
    """An outer factor for today's price is 1 + e, not (1 + e)(1 + g)^2."""
    arguments = {"peak_load_growth": 0.02, "escalation": 0.03}
    first = load_growth.growing_load_factor(0.06, 30, **arguments)
    today = load_growth.growing_load_factor(0.06, 30, escalate_before_year_1=True, **arguments)
    np.testing.assert_allclose(today, first * 1.03, rtol=1e-15)


def test_growth_then_constant_factor__without_escalation_is_a_difference_of_annuities() -> None:
    """After the growth the sum is beta^2 (a(r, n) - a(r, m))."""
    factor = load_growth.growth_then_constant_factor(
        0.06, 30, growth_years=10, peak_load_pu=0, peak_load_growth=0.05, constant_load_pu=0.8
    )
    annuities = present_value.annuity_factor(0.06, [10, 30])
    np.testing.assert_allclose(factor, 0.64 * (annuities[1] - annuities[0]), rtol=1e-14)


def test_growth_then_constant_factor__nothing_but_growth_or_constant() -> None:
    """With m = n it is the growing load, with m = 0 the constant one."""
    common = {"peak_load_pu": 0.5, "peak_load_growth": 0.02, "constant_load_pu": 0.9, "escalation": 0.01}
    growing, constant = load_growth.growth_then_constant_factor(0.06, 30, growth_years=[30, 0], **common)
    expected = 0.25 * load_growth.growing_load_factor(0.06, 30, peak_load_growth=0.02, escalation=0.01)
    np.testing.assert_allclose(growing, expected, rtol=1e-15)
    np.testing.assert_allclose(
        constant, 0.81 * present_value.growing_annuity_factor(0.06, 30, escalation=0.01), rtol=1e-15
    )


def test_levelizing_factor__no_escalation_is_one() -> None:
    """A cost that does not escalate is level already."""
    np.testing.assert_allclose(present_value.levelizing_factor(RATES, 30, escalation=0), 1, rtol=1e-15)


def test_real_rate__wrong_pair_is_not_equal() -> None:
    """A real rate with an escalating nominal price counts inflation twice, and is not what the right pairs give."""
    inputs = {"evaluation_period_years": 30, "energy_price_per_kwh": 0.085, "loss_factor": 0.3, "peak_load_pu": 0.6}
    right = loss_capitalization_rates(discount_rate=0.04, **inputs)
    wrong = loss_capitalization_rates(discount_rate=0.04, energy_price_escalation=0.02, **inputs)
    assert float(wrong.no_load) > 1.2 * float(right.no_load)
