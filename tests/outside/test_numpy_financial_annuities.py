"""Every annuity and every present value of the engine against numpy-financial, an independent package.

Its closed forms (pv, pmt) lose digits near a rate of 0, so they are asked at 0 and from 0.1 % on; its npv is a plain
sum, asked anywhere. It counts the first flow at time zero, so a 0 goes before the payments of years 1 to n.
"""

from __future__ import annotations

from typing import Any

import numpy as np
import numpy_financial as npf
from hypothesis import given
from hypothesis import strategies as st

from lossworth.capitalization import cooling, duration, fixed_charge, load, load_growth, present_value, profile
from lossworth.capitalization.rates import loss_capitalization_rates, year_table
from support.capitalization_strategies import (
    brief,
    charges,
    escalations,
    growths,
    loads,
    models,
    prices,
    profiles,
    rates,
    shares,
    years,
)
from support.year_model import CLOSE

#: Rates at which the closed forms of numpy-financial keep twelve digits.
plain_rates = st.one_of(st.just(0.0), st.floats(0.001, 1.0), st.floats(-0.3, -0.001))


def pv(rate: float, years: int, payment: float, future: float = 0.0, when: str = "end") -> float:
    """Present value by the closed form, which divides by the rate and throws that away where the rate is 0."""
    with np.errstate(invalid="ignore"):
        return float(npf.pv(rate, years, payment, future, when))


def npv(rate: float, payments: Any) -> float:
    """Present value of payments at the ends of years 1 to n."""
    return float(npf.npv(rate, [0.0, *payments]))


def close(computed: Any, expected: Any) -> None:
    """Equal to twelve digits."""
    np.testing.assert_allclose(computed, expected, rtol=CLOSE, atol=0)


def given_or(inputs: dict[str, Any], name: str, default: float) -> float:
    """An input, or what the model takes where it is not stated."""
    return float(inputs.get(name, default))


@brief
@given(plain_rates, years)
def test_discount_factor__npf(r: float, n: int) -> None:
    """One payment after n years."""
    close(present_value.discount_factor(r, n), pv(r, n, 0, -1))


@brief
@given(plain_rates, years)
def test_annuity_factor__npf_both_forms(r: float, n: int) -> None:
    """The closed form and the sum, at the end and at the start of the year."""
    close(present_value.annuity_factor(r, n), pv(r, n, -1))
    close(present_value.annuity_factor(r, n), npv(r, np.ones(n)))
    at_start = present_value.annuity_factor(r, n) / present_value.discount_factor(r, 1)
    close(at_start, pv(r, n, -1, when="begin"))


@brief
@given(plain_rates, years)
def test_capital_recovery_factor__npf(r: float, n: int) -> None:
    """The payment on a loan of 1."""
    close(present_value.capital_recovery_factor(r, n), npf.pmt(r, n, -1))


@brief
@given(rates, escalations, years)
def test_growing_annuity_factor__npf_both_prices(r: float, e: float, n: int) -> None:
    """The price of year 1, and today's price that escalates before the first payment."""
    for today in (False, True):
        flows = (1 + e) ** (np.arange(n) + int(today))
        close(present_value.growing_annuity_factor(r, n, escalation=e, escalate_before_year_1=today), npv(r, flows))


@brief
@given(plain_rates, escalations, years)
def test_levelizing_factor__npf(r: float, e: float, n: int) -> None:
    """The level payment on a loan as large as the present value of the escalating cost."""
    close(present_value.levelizing_factor(r, n, escalation=e), npf.pmt(r, n, -npv(r, (1 + e) ** np.arange(1, n + 1))))


@brief
@given(rates, years)
def test_mid_year_factor__npf(r: float, n: int) -> None:
    """Payments half a year earlier: discounted by half-years, each second one empty."""
    half_years = np.zeros(2 * n)
    half_years[::2] = 1
    expected = npv(np.sqrt(1 + r) - 1, half_years) / npv(r, np.ones(n))
    close(present_value.mid_year_factor(r), expected)


@brief
@given(rates, st.floats(-0.05, 0.1), prices, escalations, years)
def test_nominal_rate__npf(r: float, inflation: float, price: float, e: float, n: int) -> None:
    """Prices that rise by the inflation from year 1 on, at the nominal rate, are worth the real ones at the real."""
    real = price * (1 + e) ** np.arange(n)
    nominal = real * (1 + inflation) ** np.arange(1, n + 1)
    close(npv(float(present_value.nominal_rate(r, inflation)), nominal), npv(r, real))


@brief
@given(rates, escalations, growths, years)
def test_growing_load_factor__npf_both_prices(r: float, e: float, g: float, n: int) -> None:
    """Price times the square of the growing load."""
    for today in (False, True):
        flows = (1 + e) ** (np.arange(n) + int(today)) * (1 + g) ** (2 * np.arange(n))
        computed = load_growth.growing_load_factor(r, n, peak_load_growth=g, escalation=e, escalate_before_year_1=today)
        close(computed, npv(r, flows))


@brief
@given(rates, escalations, growths, loads, loads, years, st.data())
def test_growth_then_constant_factor__npf(
    r: float, e: float, g: float, first: float, last: float, n: int, data: st.DataObject
) -> None:
    """The square of a load that grows for m years and then stays."""
    m = data.draw(st.integers(0, n))
    beta = np.where(np.arange(n) < m, first * (1 + g) ** np.arange(n), last)
    computed = load_growth.growth_then_constant_factor(
        r, n, growth_years=m, peak_load_pu=first, peak_load_growth=g, constant_load_pu=last, escalation=e
    )
    close(computed, npv(r, beta**2 * (1 + e) ** np.arange(n)))


def costs_by_year(inputs: dict[str, Any]) -> tuple[Any, Any, Any]:
    """Cost of 1 kW of no-load, load and auxiliary loss in every year, as paid."""
    t = np.arange(inputs["evaluation_period_years"])
    since_price_date = t + given_or(inputs, "price_delay_years", 0)

    def escalated(name: str, escalation: str, years: Any) -> Any:
        return given_or(inputs, name, 0) * (1 + given_or(inputs, escalation, 0)) ** years

    before_year_1 = int(inputs.get("escalate_before_year_1", False))
    energy = escalated("energy_price_per_kwh", "energy_price_escalation", since_price_date + before_year_1)
    energy = energy + escalated("carbon_cost_per_kwh", "carbon_cost_escalation", since_price_date)
    charge = escalated("demand_charge_per_kw_year", "demand_charge_escalation", since_price_date)
    grown = escalated("peak_load_pu", "peak_load_growth", t)
    beta = np.minimum(grown, given_or(inputs, "peak_load_cap_pu", np.inf))
    energy_hours = given_or(inputs, "hours_of_load", 8760) * inputs["loss_factor"]
    at_peak = given_or(inputs, "peak_responsibility_factor", 1) ** 2
    return (
        energy * given_or(inputs, "hours_energized", 8760) + charge,
        beta**2 * (energy * energy_hours + charge * at_peak),
        energy * given_or(inputs, "cooling_hours", 0) + charge * given_or(inputs, "cooling_share_at_peak", 0),
    )


@brief
@given(models)
def test_loss_capitalization_rates__npf(inputs: dict[str, Any]) -> None:
    """A, B and C are net present values of the yearly costs; years before the service date are years without one."""
    r, phi = inputs["discount_rate"], given_or(inputs, "years_before_end", 0)
    factor = given_or(inputs, "upstream_gross_up", 1) * (1 + r) ** phi
    waiting = [0.0] * inputs.get("discount_delay_years", 0)
    expected = [factor * npv(r, [*waiting, *cost]) for cost in costs_by_year(inputs)]
    computed, table = loss_capitalization_rates(**inputs), year_table(**inputs)
    close([computed.no_load, computed.load, computed.auxiliary], expected)
    close([table.no_load.sum(), table.load.sum(), table.auxiliary.sum()], expected)


@brief
@given(rates, st.lists(st.tuples(prices, charges, loads), min_size=1, max_size=40), shares, shares)
def test_loss_capitalization_rates__npf_tables_by_year(
    r: float, by_year: list[tuple[float, float, float]], loss_factor: float, responsibility: float
) -> None:
    """Prices, charges and peak loads that are given by year, in any pattern."""
    price, charge, beta = (np.array(column) for column in zip(*by_year, strict=True))
    computed = loss_capitalization_rates(
        discount_rate=r,
        evaluation_period_years=len(by_year),
        energy_price_by_year_per_kwh=price,
        demand_charge_by_year_per_kw=charge,
        peak_load_by_year_pu=beta,
        loss_factor=loss_factor,
        peak_responsibility_factor=responsibility,
    )
    close(computed.no_load, npv(r, 8760 * price + charge))
    close(computed.load, npv(r, beta**2 * (8760 * price * loss_factor + charge * responsibility**2)))


@brief
@given(profiles, rates, st.lists(loads, min_size=1, max_size=40), prices, charges, st.floats(0.1, 1.2), shares)
def test_auxiliary_rate__npf_cooling_follows_the_load(
    steps: list[float],
    r: float,
    by_year: list[float],
    price: float,
    charge: float,
    starts_above: float,
    responsibility: float,
) -> None:
    """Fans that start above a loading: the hours of every year counted one by one."""
    shape, beta = profile.load_shape(steps), np.array(by_year)
    computed = cooling.auxiliary_rate(
        duration.load_duration(shape),
        starts_above_pu=starts_above,
        peak_responsibility_factor=responsibility,
        discount_rate=r,
        evaluation_period_years=len(by_year),
        energy_price_per_kwh=price,
        demand_charge_per_kw_year=charge,
        peak_load_by_year_pu=beta,
    )
    hours = np.array([8760 * np.mean(shape > starts_above / peak) for peak in by_year])
    close(computed, npv(r, price * hours + charge * (beta * responsibility > starts_above)))


@brief
@given(rates, escalations, growths, loads, prices, years)
def test_equivalent_peak_load__npf(r: float, e: float, g: float, first: float, price: float, n: int) -> None:
    """The constant load whose squared cost has the same net present value."""
    t = np.arange(n)
    beta, paid = first * (1 + g) ** t, price * (1 + e) ** t
    equivalent = load.equivalent_peak_load(
        beta, discount_factor=present_value.discount_factor(r, t + 1), energy_price_per_kwh=paid
    )
    close(equivalent**2 * npv(r, paid), npv(r, beta**2 * paid))


@brief
@given(plain_rates, years, prices, st.floats(0.1, 500), shares, loads)
def test_annual_cost_rates__npf(r: float, n: int, price: float, charge: float, loss_factor: float, beta: float) -> None:
    """With the payment on a loan of 1 as fixed charge rate they are present values of constant yearly costs."""
    rate = npf.pmt(r, n, -1)
    no_load = fixed_charge.annual_cost_no_load_rate(charge, price, fixed_charge_rate=rate)
    close(no_load, pv(r, n, -(charge + 8760 * price)))
    of_load = fixed_charge.annual_cost_load_rate(
        charge,
        price,
        fixed_charge_rate=rate,
        loss_factor=loss_factor,
        peak_responsibility_factor=0.9,
        equivalent_peak_load_pu=beta,
    )
    close(of_load, pv(r, n, -(beta**2 * (charge * 0.9**2 + 8760 * price * loss_factor))))
