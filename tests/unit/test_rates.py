"""Rates A, B, C: the demo's printed rates, tables by year, timing, shapes, and refusals."""

from __future__ import annotations

from typing import Any

import numpy as np
import pytest

from lossworth.capitalization import inputs as engine_inputs
from lossworth.capitalization.load import loss_factor
from lossworth.capitalization.rates import Rates, YearTable, loss_capitalization_rates, year_table
from support.year_model import CLOSE, exact, reference_rates, relative_error, year_inputs

#: INVENTED DATA of the demo tender: lot, period, LF, LsF, peak, growth, cap, R, cooling hours, share, A, B, C.
DEMO = [
    ("1", 30, 0.30, "0.1215", 0.55, 0.015, 1.0, 0.65, 0, 0, "11006.36", "663.79", None),
    ("2", 30, 0.45, "0.2396", 0.60, 0.010, 1.0, 0.80, 0, 0, "11006.36", "1317.78", None),
    ("3", 30, 0.55, "0.3396", 0.65, 0.010, 1.0, 0.90, 0, 0, "11006.36", "2153.32", None),
    ("4", 35, 0.55, "0.3396", 0.60, 0.010, 0.8, 0.95, 600, 1, "11592.80", "2008.10", "1536.81"),
]

CARBON_AND_DATES = ("carbon_cost_per_kwh", "carbon_cost_escalation", "price_delay_years", "discount_delay_years")


def plain_inputs(**changes: Any) -> dict[str, Any]:
    """Constant price and load over three years without discount: sums that can be told at sight."""
    inputs: dict[str, Any] = {
        "discount_rate": 0,
        "evaluation_period_years": 3,
        "energy_price_per_kwh": 0.1,
        "loss_factor": 0.25,
        "peak_load_pu": 0.8,
    }
    return {name: value for name, value in {**inputs, **changes}.items() if value is not ...}


def values(rates: Rates) -> list[float]:
    """A, B and C of one scenario."""
    return [float(rates.no_load), float(rates.load), float(rates.auxiliary)]


@pytest.mark.parametrize("row", DEMO, ids=lambda row: f"lot {row[0]}")
def test_loss_capitalization_rates__demo(row: tuple[Any, ...]) -> None:
    """The computed rates of the demo's lots (invented data), to the printed cent."""
    _, period, load_factor, printed_factor, peak, growth, cap, responsibility, hours, share, *printed = row
    factor = loss_factor(load_factor, 0.15)
    rates = loss_capitalization_rates(
        discount_rate=0.06,
        evaluation_period_years=period,
        energy_price_per_kwh=0.085,
        demand_charge_per_kw_year=55,
        loss_factor=factor,
        peak_load_pu=peak,
        peak_load_growth=growth,
        peak_load_cap_pu=cap,
        peak_responsibility_factor=responsibility,
        cooling_hours=hours,
        cooling_share_at_peak=share,
    )
    assert printed_factor == f"{float(factor):.4f}"
    for expected, rate in zip(printed, values(rates), strict=True):
        assert expected is None or expected == f"{rate:.2f}"


def test_loss_capitalization_rates__at_sight() -> None:
    """Three years without discount: A = 3 x 876, B = A x 0.25 x 0.64, C = 0 without cooling."""
    np.testing.assert_allclose(values(loss_capitalization_rates(**plain_inputs())), [2628, 420.48, 0], rtol=1e-15)


def test_loss_capitalization_rates__peak_responsibility_is_squared() -> None:
    """The ratio of loads acts squared on the demand part of B, and on nothing else."""
    inputs = plain_inputs(energy_price_per_kwh=0, demand_charge_per_kw_year=100)
    full = values(loss_capitalization_rates(**inputs, peak_responsibility_factor=1))
    half = values(loss_capitalization_rates(**inputs, peak_responsibility_factor=0.5))
    assert [full[0], full[1] / 4, full[2]] == half


def test_loss_capitalization_rates__growth_acts_squared_on_the_demand_part() -> None:
    """The demand part of B grows with the square of the load as well."""
    inputs = plain_inputs(energy_price_per_kwh=0, demand_charge_per_kw_year=100, peak_load_growth=0.5)
    expected = 100 * (0.8**2 + 1.2**2 + 1.8**2)
    np.testing.assert_allclose(loss_capitalization_rates(**inputs).load, expected, rtol=1e-15)


def test_loss_capitalization_rates__meaning_of_the_price() -> None:
    """Today's price is escalated before year 1: every year's price, and so A, is 1 + e times as much."""
    inputs = plain_inputs(energy_price_escalation=0.5)
    paid = loss_capitalization_rates(**inputs)
    today = loss_capitalization_rates(**inputs, escalate_before_year_1=True)
    np.testing.assert_allclose([876 * 4.75, 876 * 4.75 * 1.5], [paid.no_load, today.no_load], rtol=1e-15)


def test_loss_capitalization_rates__meaning_of_the_price_leaves_the_demand_charge() -> None:
    """The demand charge is that of year 1 in both meanings."""
    inputs = plain_inputs(energy_price_per_kwh=0, demand_charge_per_kw_year=100, demand_charge_escalation=0.5)
    today = loss_capitalization_rates(**inputs, energy_price_escalation=0.5, escalate_before_year_1=True)
    assert float(today.no_load) == 475


def test_loss_capitalization_rates__price_by_year() -> None:
    """A table of prices by year gives what the same prices give by escalation."""
    by_escalation = loss_capitalization_rates(**year_inputs())
    table = 0.085 * 1.02 ** np.arange(30)
    by_table = loss_capitalization_rates(
        **year_inputs(energy_price_per_kwh=..., energy_price_escalation=..., energy_price_by_year_per_kwh=table)
    )
    np.testing.assert_allclose(values(by_table), values(by_escalation), rtol=CLOSE)


def test_loss_capitalization_rates__everything_by_year() -> None:
    """Price, demand charge, peak load, cooling hours and share may all come by year, with a cap and without effect."""
    years = np.arange(30)
    inputs = year_inputs(
        energy_price_per_kwh=None,
        energy_price_escalation=0,
        energy_price_by_year_per_kwh=0.085 * 1.02**years,
        demand_charge_per_kw_year=None,
        demand_charge_escalation=0,
        demand_charge_by_year_per_kw=55 * 1.01**years,
        peak_load_pu=None,
        peak_load_growth=0,
        peak_load_by_year_pu=0.65 * 1.015**years,
        cooling_hours=None,
        cooling_hours_by_year=np.full(30, 600),
        cooling_share_at_peak=None,
        cooling_share_at_peak_by_year=np.full(30, 0.75),
    )
    np.testing.assert_allclose(
        values(loss_capitalization_rates(**inputs)), values(loss_capitalization_rates(**year_inputs())), rtol=CLOSE
    )


def test_loss_capitalization_rates__tables_of_several_scenarios() -> None:
    """Tables by year broadcast with the other inputs: scenarios on the axes before the years."""
    prices = np.array([[0.1, 0.2, 0.3], [0.3, 0.2, 0.1]])[:, np.newaxis, :]
    loads = np.array([[0.5, 0.6, 0.7], [0.7, 0.7, 0.7], [0.9, 0.8, 0.7]])
    inputs = plain_inputs(
        energy_price_per_kwh=..., energy_price_by_year_per_kwh=prices, peak_load_pu=..., peak_load_by_year_pu=loads
    )
    rates = loss_capitalization_rates(**inputs)
    expected = [[8760 * 0.25 * np.sum(prices[i, 0] * loads[j] ** 2) for j in range(3)] for i in range(2)]
    np.testing.assert_allclose(rates.load, expected, rtol=1e-14)
    assert rates.no_load.shape == (2, 3)


def test_loss_capitalization_rates__cooling_by_year() -> None:
    """Hours and share at peak of each year count with the price and charge of their own year."""
    inputs = plain_inputs(
        demand_charge_per_kw_year=100, cooling_hours_by_year=[0, 100, 1000], cooling_share_at_peak_by_year=[0, 0, 1]
    )
    assert float(loss_capitalization_rates(**inputs).auxiliary) == pytest.approx(210, rel=1e-15)


def test_loss_capitalization_rates__periods_of_different_length() -> None:
    """Each scenario stops at its own period, tables by year included."""
    inputs = plain_inputs(
        evaluation_period_years=[1, 3, 2], energy_price_per_kwh=..., energy_price_by_year_per_kwh=[0.1, 0.2, 0.3]
    )
    np.testing.assert_allclose(loss_capitalization_rates(**inputs).no_load, [876, 5256, 2628], rtol=1e-15)


def test_loss_capitalization_rates__more_scenarios_than_a_block() -> None:
    """Blocks leave no seam: each of many scenarios is what it is alone, in a shape of two axes."""
    size = engine_inputs.BLOCK + 1
    rates = np.linspace(-0.02, 0.12, size)
    together = loss_capitalization_rates(**year_inputs(discount_rate=rates, peak_load_pu=[[0.5], [0.7]]))
    assert together.load.shape == (2, size)
    for row, column in [(0, 0), (0, engine_inputs.BLOCK - 1), (0, size - 1), (1, 0), (1, size - 1)]:
        alone = loss_capitalization_rates(**year_inputs(discount_rate=rates[column], peak_load_pu=[0.5, 0.7][row]))
        np.testing.assert_allclose(together.load[row, column], alone.load, rtol=1e-14)


def test_loss_capitalization_rates__table_by_year_over_a_block() -> None:
    """Tables of many scenarios are cut into blocks along the right axis."""
    size = engine_inputs.BLOCK + 1
    prices = np.linspace(0.01, 0.2, 3 * size).reshape(size, 3)
    inputs = plain_inputs(energy_price_per_kwh=..., energy_price_by_year_per_kwh=prices)
    np.testing.assert_allclose(loss_capitalization_rates(**inputs).no_load, 8760 * prices.sum(axis=1), rtol=1e-14)


def test_loss_capitalization_rates__results_do_not_share_memory() -> None:
    """Who changes one result changes no other."""
    rates = loss_capitalization_rates(**year_inputs(discount_rate=[0.05, 0.06]))
    assert not np.shares_memory(rates.no_load, rates.load)


def test_loss_capitalization_rates__zero_discount_gives_the_number_of_years() -> None:
    """Without discount and growth a rate is the yearly cost times the years, with any timing."""
    inputs = plain_inputs(evaluation_period_years=40, demand_charge_per_kw_year=55, years_before_end=0.5)
    assert float(loss_capitalization_rates(**inputs).no_load) == pytest.approx(40 * (876 + 55), rel=1e-15)


def test_loss_capitalization_rates__declining_load_above_its_cap() -> None:
    """A shrinking load is capped until its own course falls below the cap, as in the table of peak loads."""
    inputs = plain_inputs(peak_load_pu=1.0, peak_load_growth=-0.1, peak_load_cap_pu=0.95)
    expected = 876 * 0.25 * (0.95**2 + 0.9**2 + 0.81**2)
    np.testing.assert_allclose(loss_capitalization_rates(**inputs).load, expected, rtol=1e-15)
    np.testing.assert_allclose(year_table(**inputs).load.sum(), expected, rtol=1e-15)


def test_loss_capitalization_rates__long_period_with_growth_and_cap() -> None:
    """A thousand years of growth overflow nothing where a cap stands, and keep twelve digits."""
    inputs = year_inputs(evaluation_period_years=1000, years_before_end=0.0, peak_load_growth=1.5)
    reference = reference_rates(exact, **{**year_inputs(), "evaluation_period_years": 200, "years_before_end": 0.0})
    assert np.isfinite(values(loss_capitalization_rates(**inputs))).all()
    computed = loss_capitalization_rates(**year_inputs(evaluation_period_years=200, years_before_end=0.0))
    assert relative_error(computed.load, reference[1]) < CLOSE


def test_loss_capitalization_rates__overflow() -> None:
    """Growth without a cap beyond all numbers is refused by name."""
    with pytest.raises(ValueError, match=r"^load loss rate: exceeds the range"):
        loss_capitalization_rates(
            **year_inputs(evaluation_period_years=1000, peak_load_growth=1.5, peak_load_cap_pu=np.inf)
        )


def test_year_table__columns() -> None:
    """The table shows the year's factor, price, charge and load, and what each adds to the rates."""
    table = year_table(**year_inputs(evaluation_period_years=3, years_before_end=0.0, peak_load_cap_pu=0.655))
    assert table.year.tolist() == [1, 2, 3]
    np.testing.assert_allclose(table.discount_factor, 1.06 ** -np.arange(1.0, 4), rtol=1e-15)
    np.testing.assert_allclose(table.energy_price_per_kwh, 0.085 * 1.02 ** np.arange(3), rtol=1e-15)
    np.testing.assert_allclose(table.demand_charge_per_kw_year, 55 * 1.01 ** np.arange(3), rtol=1e-15)
    np.testing.assert_allclose(table.peak_load_pu, [0.65, 0.655, 0.655], rtol=1e-15)
    yearly = 0.085 * 1.02 * 8700 + 55 * 1.01
    assert float(table.no_load[1]) == pytest.approx(1.04 * yearly / 1.06**2, rel=1e-15)


def test_year_table__year_1_is_exact() -> None:
    """The first year's price, charge and load are the stated ones, to the last bit."""
    table = year_table(**year_inputs())
    first = (table.energy_price_per_kwh[0], table.demand_charge_per_kw_year[0], table.peak_load_pu[0])
    assert first == (0.085, 55.0, 0.65)


def test_year_table__several_scenarios() -> None:
    """All columns but the year have the scenarios first and the years last."""
    table = year_table(**year_inputs(discount_rate=[[0.04], [0.06]], peak_load_pu=[0.5, 0.6, 0.7]))
    shapes = {name: getattr(table, name).shape for name in YearTable.__slots__}
    assert shapes.pop("year") == (30,)
    assert set(shapes.values()) == {(2, 3, 30)}
    rates = loss_capitalization_rates(**year_inputs(discount_rate=[[0.04], [0.06]], peak_load_pu=[0.5, 0.6, 0.7]))
    np.testing.assert_allclose(table.load.sum(axis=-1), rates.load, rtol=CLOSE)


def test_year_table__one_period_only() -> None:
    """A table has one length."""
    with pytest.raises(ValueError, match=r"^evaluation_period_years: must be a single number here"):
        year_table(**year_inputs(evaluation_period_years=[20, 30]))


@pytest.mark.parametrize(
    ("name", "value", "bound"),
    [
        ("discount_rate", -1, "above -1"),
        ("evaluation_period_years", 0, "a whole number, at least 1 and at most 1000"),
        ("evaluation_period_years", 2.5, "a whole number, at least 1 and at most 1000"),
        ("evaluation_period_years", 2056, "a whole number, at least 1 and at most 1000"),
        ("years_before_end", 1.1, "at least 0 and at most 1"),
        ("energy_price_per_kwh", -0.01, "at least 0"),
        ("energy_price_escalation", -1, "above -1"),
        ("escalate_before_year_1", 2, "a whole number, at least 0 and at most 1"),
        ("carbon_cost_per_kwh", -0.01, "at least 0"),
        ("carbon_cost_escalation", -1, "above -1"),
        ("demand_charge_per_kw_year", -1, "at least 0"),
        ("demand_charge_escalation", -1, "above -1"),
        ("loss_factor", 1.01, "at least 0 and at most 1"),
        ("peak_load_pu", -0.1, "at least 0"),
        ("peak_load_growth", -1, "above -1"),
        ("peak_load_cap_pu", 0, "above 0"),
        ("peak_responsibility_factor", 1.5, "at least 0 and at most 1"),
        ("hours_energized", 8785, "at least 0 and at most 8784"),
        ("hours_of_load", -1, "at least 0 and at most 8784"),
        ("cooling_hours", 8785, "at least 0 and at most 8784"),
        ("cooling_share_at_peak", -0.5, "at least 0 and at most 1"),
        ("upstream_gross_up", 0.9, "at least 1"),
        ("price_delay_years", -0.5, "at least 0 and at most 100"),
        ("discount_delay_years", 2028, "at least 0 and at most 100"),
    ],
)
@pytest.mark.parametrize("function", [loss_capitalization_rates, year_table])
def test_inputs__out_of_bounds(function: Any, name: str, value: float, bound: str) -> None:
    """Each input is refused beyond its bound, with its name, the bound and the value."""
    with pytest.raises(ValueError) as refusal:  # noqa: PT011 - the message is compared below
        function(**year_inputs(**{name: value}))
    assert str(refusal.value) == f"{name}: must be {bound}, got {value:g}"


@pytest.mark.parametrize("name", sorted({*year_inputs(), *CARBON_AND_DATES}))
@pytest.mark.parametrize("value", [np.nan, -np.inf, "1", None, [0.5, np.nan]])
def test_inputs__not_a_number(name: str, value: Any) -> None:
    """nan, infinity, text and missing values are refused by the name of the input, for every input."""
    optional = {"energy_price_per_kwh", "demand_charge_per_kw_year", "peak_load_pu", "cooling_hours"}
    if value is None and name in optional | {"cooling_share_at_peak"}:
        value = [None]
    with pytest.raises(ValueError, match=f"^{name}: must be "):
        loss_capitalization_rates(**year_inputs(**{name: value}))


@pytest.mark.parametrize(
    ("changes", "message"),
    [
        ({"energy_price_by_year_per_kwh": [0.1] * 30}, "must not be given together with energy_price_per_kwh"),
        (
            {"energy_price_per_kwh": ..., "energy_price_by_year_per_kwh": [0.1] * 30},
            "must not be given together with energy_price_escalation",
        ),
        (
            {
                "energy_price_per_kwh": ...,
                "energy_price_by_year_per_kwh": [0.1] * 30,
                "energy_price_escalation": 0,
                "escalate_before_year_1": True,
            },
            "must not be given together with escalate_before_year_1",
        ),
        (
            {"peak_load_pu": ..., "peak_load_by_year_pu": [0.5] * 30},
            "must not be given together with peak_load_growth",
        ),
        (
            {"energy_price_per_kwh": ..., "energy_price_by_year_per_kwh": [0.1] * 29, "energy_price_escalation": 0},
            "must have 30 years on its last axis, got shape (29,)",
        ),
        ({"discount_rate": [0.05, 0.06], "loss_factor": [0.1, 0.2, 0.3]}, "shapes do not fit together: "),
    ],
)
def test_inputs__contradictions(changes: dict[str, Any], message: str) -> None:
    """A quantity given twice, a table that would escalate again or is too short, shapes that do not fit."""
    with pytest.raises(ValueError) as refusal:  # noqa: PT011 - the message is compared below
        loss_capitalization_rates(**year_inputs(**changes))
    assert message in str(refusal.value)


@pytest.mark.parametrize(
    ("changes", "message"),
    [
        ({"discount_rate": ...}, "input missing: discount_rate"),
        ({"energy_price_per_kwh": ...}, "input missing: energy_price_per_kwh or energy_price_by_year_per_kwh"),
        ({"discount_rte": 0.06}, "unknown input: discount_rte"),
    ],
)
def test_inputs__missing_or_unknown(changes: dict[str, Any], message: str) -> None:
    """Names are checked as for any function."""
    with pytest.raises(TypeError, match=f"^{message}$"):
        loss_capitalization_rates(**year_inputs(**changes))
