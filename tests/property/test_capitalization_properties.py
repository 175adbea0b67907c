"""Closed forms and year-by-year engine against each other, exact fractions and 50-digit arithmetic.

The points where a closed form is 0/0 as written (r = 0, e = r, (1 + e)(1 + g)^2 = 1 + r) and their neighborhood are
drawn on purpose.
"""

from __future__ import annotations

from fractions import Fraction
from typing import Any

import mpmath
import numpy as np
from hypothesis import assume, given
from hypothesis import strategies as st

from lossworth.capitalization import fixed_charge, load, load_growth, present_value
from lossworth.capitalization.rates import loss_capitalization_rates, year_table
from support.capitalization_strategies import (
    brief,
    charges,
    distances,
    escalations,
    growths,
    loads,
    models,
    prices,
    rates,
    shares,
    thorough,
    years,
)
from support.year_model import CLOSE, digits50, exact, reference_rates, relative_error


def geometric(r: Fraction, n: int, growth: Fraction) -> Fraction:
    """Sum over t = 1..n of (1 + growth)^(t-1) / (1 + r)^t, exactly: the sum over a common denominator."""
    terms = sum((1 + growth) ** (t - 1) * (1 + r) ** (n - t) for t in range(1, n + 1))
    return Fraction(terms) / (1 + r) ** n


@thorough
@given(models)
def test_loss_capitalization_rates__exact_fractions(inputs: dict[str, Any]) -> None:
    """The recursion over the years equals the plain sum in exact fractions."""
    computed = loss_capitalization_rates(**inputs)
    expected = reference_rates(exact, **inputs)
    for rate, value in zip((computed.no_load, computed.load, computed.auxiliary), expected, strict=True):
        assert relative_error(rate, value) < CLOSE


@brief
@given(models, st.floats(0, 1), st.floats(0, 10), st.floats(0, 10))
def test_loss_capitalization_rates__fifty_digits_any_timing(
    inputs: dict[str, Any], phi: float, price_delay: float, discount_delay: float
) -> None:
    """With any timing and any dates the recursion equals the plain sum in 50 digits."""
    inputs = {**inputs, "years_before_end": phi}
    inputs |= {"price_delay_years": price_delay, "discount_delay_years": discount_delay}
    computed = loss_capitalization_rates(**inputs)
    expected = reference_rates(digits50, **inputs)
    for rate, value in zip((computed.no_load, computed.load, computed.auxiliary), expected, strict=True):
        assert relative_error(rate, value) < CLOSE


@thorough
@given(models)
def test_year_table__sums_to_the_rates(inputs: dict[str, Any]) -> None:
    """The table, each year from its closed form, sums to what the recursion gives."""
    table, computed = year_table(**inputs), loss_capitalization_rates(**inputs)
    for name in ("no_load", "load", "auxiliary"):
        rate = float(getattr(computed, name))
        assert abs(getattr(table, name).sum() - rate) <= CLOSE * rate


@thorough
@given(rates, years)
def test_annuity_factor__exact_fractions(r: float, n: int) -> None:
    """The closed form equals the sum, at r = 0 and near it too."""
    assert relative_error(present_value.annuity_factor(r, n), geometric(exact(r), n, Fraction(0))) < CLOSE


@thorough
@given(rates, years)
def test_annuity_factor__as_written_in_many_digits(r: float, n: int) -> None:
    """The form as printed, with as many digits as its cancellation takes near r = 0, equals ours in doubles."""
    assume(r != 0)
    with mpmath.workdps(700):
        expected = (1 - (1 + mpmath.mpf(r)) ** -n) / mpmath.mpf(r)
    assert relative_error(present_value.annuity_factor(r, n), expected) < CLOSE


@given(years)
def test_annuity_factor__zero_rate_is_the_number_of_years(n: int) -> None:
    """Without discounting, a year counts as a year, exactly."""
    assert float(present_value.annuity_factor(0, n)) == n


@thorough
@given(escalations, years, st.one_of(rates, distances.map(lambda d: ("near", d))), st.booleans())
def test_growing_annuity_factor__exact_fractions(e: float, n: int, rate: Any, today: bool) -> None:
    """The closed form equals the sum, at e = r and near it too, in both meanings of the price."""
    r = e + rate[1] if isinstance(rate, tuple) else rate
    expected = geometric(exact(r), n, exact(e)) * (1 + exact(e) if today else 1)
    computed = present_value.growing_annuity_factor(r, n, escalation=e, escalate_before_year_1=today)
    assert relative_error(computed, expected) < CLOSE


@thorough
@given(escalations, growths, years, st.one_of(rates, distances.map(lambda d: ("near", d))), st.booleans())
def test_growing_load_factor__exact_fractions(e: float, g: float, n: int, rate: Any, today: bool) -> None:
    """The closed form equals the sum, at (1 + e)(1 + g)^2 = 1 + r and near it too."""
    r = (1 + e) * (1 + g) ** 2 - 1 + rate[1] if isinstance(rate, tuple) else rate
    growth = (1 + exact(e)) * (1 + exact(g)) ** 2 - 1
    expected = geometric(exact(r), n, growth) * (1 + exact(e) if today else 1)
    computed = load_growth.growing_load_factor(r, n, peak_load_growth=g, escalation=e, escalate_before_year_1=today)
    assert relative_error(computed, expected) < CLOSE


@thorough
@given(rates, escalations, growths, loads, years, years, loads)
def test_growth_then_constant_factor__exact_fractions(
    r: float, e: float, g: float, first: float, n: int, m: int, last: float
) -> None:
    """Growth for some years, then constant load: the closed form equals the sum."""
    m = min(m, n)
    expected = exact(first) ** 2 * geometric(exact(r), m, (1 + exact(e)) * (1 + exact(g)) ** 2 - 1)
    later = sum((1 + exact(e)) ** (t - 1) * (1 + exact(r)) ** (n - t) for t in range(m + 1, n + 1))
    expected += exact(last) ** 2 * later / (1 + exact(r)) ** n
    computed = load_growth.growth_then_constant_factor(
        r, n, growth_years=m, peak_load_pu=first, peak_load_growth=g, constant_load_pu=last, escalation=e
    )
    assert relative_error(computed, expected) < CLOSE


@thorough
@given(rates, escalations, st.floats(0.001, 0.08), loads, years, shares, st.floats(1, 3))
def test_growth_then_constant_factor__equals_the_engine_with_a_cap(
    r: float, e: float, g: float, first: float, n: int, loss_factor: float, room: float
) -> None:
    """With as many years of growth as the cap allows, the closed form is the energy part of B."""
    cap = first * room
    growing = int(np.sum(load.peak_load_by_year(first, n, peak_load_growth=g) <= cap))
    factor = load_growth.growth_then_constant_factor(
        r, n, growth_years=growing, peak_load_pu=first, peak_load_growth=g, constant_load_pu=cap, escalation=e
    )
    computed = loss_capitalization_rates(
        discount_rate=r,
        evaluation_period_years=n,
        energy_price_per_kwh=0.1,
        energy_price_escalation=e,
        loss_factor=loss_factor,
        peak_load_pu=first,
        peak_load_growth=g,
        peak_load_cap_pu=cap,
    )
    assert abs(float(computed.load) - 876 * loss_factor * float(factor)) <= 2 * CLOSE * float(computed.load)


@thorough
@given(rates, escalations, years, prices, shares, loads, st.booleans())
def test_closed_forms__equal_the_engine_without_growth(
    r: float, e: float, n: int, price: float, loss_factor: float, beta: float, today: bool
) -> None:
    """A = 8760 c times the growing annuity, B = A LsF beta^2, in both meanings of the price."""
    computed = loss_capitalization_rates(
        discount_rate=r,
        evaluation_period_years=n,
        energy_price_per_kwh=price,
        energy_price_escalation=e,
        escalate_before_year_1=today,
        loss_factor=loss_factor,
        peak_load_pu=beta,
    )
    a = 8760 * price * present_value.growing_annuity_factor(r, n, escalation=e, escalate_before_year_1=today)
    np.testing.assert_allclose(computed.no_load, a, rtol=CLOSE, atol=0)
    np.testing.assert_allclose(computed.load, a * loss_factor * beta**2, rtol=CLOSE, atol=0)


@thorough
@given(escalations, years, st.one_of(rates, distances.map(lambda d: ("near", d))), prices, st.integers(0, 10))
def test_carbon_cost__has_a_closed_form_of_its_own(e: float, n: int, rate: Any, cost: float, delay: int) -> None:
    """The carbon part is 8760 k times its own growing annuity, at its escalation e = r and near it too."""
    r = e + rate[1] if isinstance(rate, tuple) else rate
    computed = loss_capitalization_rates(
        discount_rate=r,
        evaluation_period_years=n,
        energy_price_per_kwh=0,
        energy_price_escalation=0.05,
        carbon_cost_per_kwh=cost,
        carbon_cost_escalation=e,
        price_delay_years=delay,
        loss_factor=0.25,
        peak_load_pu=0.5,
    )
    growth = (1 + exact(e)) ** delay * geometric(exact(r), n, exact(e))
    assert relative_error(computed.no_load, 8760 * exact(cost) * growth) < CLOSE
    assert relative_error(computed.load, 8760 * exact(cost) * growth / 16) < CLOSE


@thorough
@given(models, st.floats(0, 10), st.floats(0, 10))
def test_delays__are_factors_before_the_sum(inputs: dict[str, Any], price_delay: float, discount_delay: float) -> None:
    """Escalating before year 1 is the same as stating the escalated amounts, and discounting on is one factor."""
    plain = {**inputs, "price_delay_years": 0, "discount_delay_years": 0}
    delayed = {**inputs, "price_delay_years": price_delay, "discount_delay_years": discount_delay}
    amounts = {
        "energy_price_per_kwh": "energy_price_escalation",
        "carbon_cost_per_kwh": "carbon_cost_escalation",
        "demand_charge_per_kw_year": "demand_charge_escalation",
    }
    for name, escalation in amounts.items():
        plain[name] = inputs.get(name, 0.0) * (1 + inputs.get(escalation, 0.0)) ** price_delay
    factor = (1 + inputs["discount_rate"]) ** -discount_delay
    computed, expected = loss_capitalization_rates(**delayed), loss_capitalization_rates(**plain)
    for name in ("no_load", "load", "auxiliary"):
        np.testing.assert_allclose(getattr(computed, name), factor * getattr(expected, name), rtol=CLOSE, atol=0)


@thorough
@given(rates, escalations, growths, years, prices, loads)
def test_growing_load_factor__equals_the_engine(
    r: float, e: float, g: float, n: int, price: float, beta: float
) -> None:
    """The energy part of B with growing load and price is the closed form."""
    computed = loss_capitalization_rates(
        discount_rate=r,
        evaluation_period_years=n,
        energy_price_per_kwh=price,
        energy_price_escalation=e,
        loss_factor=0.3,
        peak_load_pu=beta,
        peak_load_growth=g,
    )
    factor = load_growth.growing_load_factor(r, n, peak_load_growth=g, escalation=e)
    np.testing.assert_allclose(computed.load, 8760 * price * 0.3 * beta**2 * factor, rtol=CLOSE, atol=0)


@thorough
@given(rates, escalations, years)
def test_levelizing_factor__constant_cost_of_equal_present_value(d: float, e: float, n: int) -> None:
    """The levelized cost has the present value of the escalating one."""
    with mpmath.workdps(50):
        present = sum((1 + mpmath.mpf(e)) ** t / (1 + mpmath.mpf(d)) ** t for t in range(1, n + 1))
        annuity = sum((1 + mpmath.mpf(d)) ** -t for t in range(1, n + 1))
        expected = present / annuity
    assert relative_error(present_value.levelizing_factor(d, n, escalation=e), expected) < CLOSE


@thorough
@given(st.floats(-0.05, 0.3), st.floats(-0.05, 0.3), years, prices, charges, loads, shares, st.floats(0, 5))
def test_real_and_nominal__equal_rates(
    real: float, inflation: float, n: int, price: float, charge: float, beta: float, loss_factor: float, delay: float
) -> None:
    """Real rate with constant prices equals nominal rate with prices that rise by the inflation from the price date."""
    common = {"evaluation_period_years": n, "loss_factor": loss_factor, "peak_load_pu": beta}
    common |= {"price_delay_years": delay, "discount_delay_years": delay}
    constant = loss_capitalization_rates(
        discount_rate=real, energy_price_per_kwh=price, demand_charge_per_kw_year=charge, **common
    )
    rising = loss_capitalization_rates(
        discount_rate=present_value.nominal_rate(real, inflation),
        energy_price_per_kwh=price,
        energy_price_escalation=inflation,
        escalate_before_year_1=True,
        demand_charge_per_kw_year=charge * (1 + inflation),
        demand_charge_escalation=inflation,
        **common,
    )
    np.testing.assert_allclose(rising.no_load, constant.no_load, rtol=CLOSE, atol=0)
    np.testing.assert_allclose(rising.load, constant.load, rtol=CLOSE, atol=0)


@given(st.floats(-0.5, 1), st.floats(-0.2, 0.5))
def test_real_rate__inverse_of_nominal_rate(real: float, inflation: float) -> None:
    """There and back again."""
    back = present_value.real_rate(present_value.nominal_rate(real, inflation), inflation)
    np.testing.assert_allclose(back, real, rtol=1e-12, atol=1e-15)


@thorough
@given(models)
def test_mid_year_factor__mid_year_over_end_of_year(inputs: dict[str, Any]) -> None:
    """Mid-year rates are those of the end of the year times the square root of 1 + r."""
    end = loss_capitalization_rates(**{**inputs, "years_before_end": 0.0})
    middle = loss_capitalization_rates(**{**inputs, "years_before_end": 0.5})
    factor = present_value.mid_year_factor(inputs["discount_rate"])
    np.testing.assert_allclose(middle.no_load, end.no_load * factor, rtol=CLOSE, atol=0)
    np.testing.assert_allclose(middle.load, end.load * factor, rtol=CLOSE, atol=0)


@thorough
@given(rates, years, charges, prices, shares, shares, loads)
def test_fixed_charge_forms__equal_the_engine_where_the_rate_is_the_capital_recovery_factor(
    r: float, n: int, charge: float, price: float, loss_factor: float, responsibility: float, beta: float
) -> None:
    """With FCR = CRF and constant price, charge and load, the IEEE, EEI and RUS forms are the year-by-year model."""
    fcr = present_value.capital_recovery_factor(r, n)
    investment = charge / fcr
    engine = loss_capitalization_rates(
        discount_rate=r,
        evaluation_period_years=n,
        energy_price_per_kwh=price,
        demand_charge_per_kw_year=charge,
        loss_factor=loss_factor,
        peak_load_pu=beta,
        peak_responsibility_factor=responsibility,
        cooling_hours=1000,
        cooling_share_at_peak=0.5,
    )
    load_side = {"loss_factor": loss_factor, "peak_responsibility_factor": responsibility, "fixed_charge_rate": fcr}
    forms = [
        (fixed_charge.annual_cost_no_load_rate(charge, price, fixed_charge_rate=fcr), engine.no_load),
        (fixed_charge.investment_no_load_rate(investment, price, fixed_charge_rate=fcr), engine.no_load),
        (fixed_charge.annual_cost_load_rate(charge, price, equivalent_peak_load_pu=beta, **load_side), engine.load),
        (fixed_charge.investment_load_rate(investment, price, peak_load_pu=beta, **load_side), engine.load),
        (
            fixed_charge.investment_auxiliary_rate(
                investment, price, fixed_charge_rate=fcr, cooling_hours=1000, cooling_share_at_peak=0.5
            ),
            engine.auxiliary,
        ),
    ]
    for form, rate in forms:
        np.testing.assert_allclose(form, rate, rtol=CLOSE, atol=0)


@brief
@given(models)
def test_equivalent_peak_load__gives_the_energy_part_of_the_load_rate(inputs: dict[str, Any]) -> None:
    """A constant load of the equivalent size, weighted by discounted prices, costs as much energy."""
    inputs = {**inputs, "demand_charge_per_kw_year": 0.0}
    table = year_table(**inputs)
    equivalent = load.equivalent_peak_load(
        table.peak_load_pu,
        discount_factor=table.discount_factor,
        energy_price_per_kwh=table.energy_price_per_kwh + table.carbon_cost_per_kwh,
    )
    constant = {**inputs, "peak_load_pu": equivalent, "peak_load_growth": 0.0, "peak_load_cap_pu": np.inf}
    np.testing.assert_allclose(
        loss_capitalization_rates(**constant).load, loss_capitalization_rates(**inputs).load, rtol=CLOSE, atol=0
    )
