"""Published worked examples, computed by the engine and compared with the printed digits.

Inputs are written here as they stand in the sources; printed digits, sources and evidence stand in check_values.csv.
"""

from __future__ import annotations

import numpy as np
import pytest

from lossworth.capitalization.losses import efficiency_of_output, peak_efficiency_index
from lossworth.capitalization.owning_cost import LossCosts, loss_costs, total_owning_cost
from lossworth.capitalization.present_value import capital_recovery_factor, levelizing_factor
from lossworth.capitalization.rates import Rates, loss_capitalization_rates
from lossworth.regulations.table_file import table
from support.check_values import Printed, check_value, check_values

#: Rows that are about the reading and judging of bids, and are tested where that is done.
ABOUT_BIDS = {"GAO-B147715", "GAO-B234857"}
REACHED_HERE = {
    "REA-LOSS-A",
    "REA-LOSS-A-parts",
    "REA-LOSS-B",
    "REA-LOSS-B-parts",
    "REA-LOSS-rank",
    "MASTERS-CRF",
    "MASTERS-LEVEL-1",
    "MASTERS-LEVEL-2",
    "GONEN-2.2-a",
    "GONEN-2.2-b",
    "GONEN-2.8",
    "BIRD-20.16",
    "BIRD-20.17",
    "EU-I7-vs-I1",
}


def test_check_values__every_row_is_tested() -> None:
    """A row that is added to the table needs a test."""
    assert set(check_values()) == REACHED_HERE | ABOUT_BIDS


def test_check_values__same_means_the_source_above() -> None:
    """Every row names its source in full."""
    assert check_value("MASTERS-LEVEL-1").source == (
        "G. M. Masters, Renewable and Efficient Electric Power Systems (Wiley 2004), p. 254"
    )
    assert check_value("REA-LOSS-B").source == check_value("REA-LOSS-A").source
    assert check_value("GONEN-2.8").source.startswith("T. Gonen, ")


@pytest.mark.parametrize(
    ("computed", "agrees"), [(1.6275, False), (1.6279, False), (1.628, True), (1.6289, True), (1.629, False)]
)
def test_printed__truncated(computed: float, agrees: bool) -> None:
    """A value printed truncated may be larger by less than one unit, and not smaller."""
    assert agrees == Printed("1.628", truncated=True).agrees(computed)


@pytest.mark.parametrize(
    ("computed", "agrees"), [(0.135864, False), (0.135866, True), (0.135874, True), (0.135876, False)]
)
def test_printed__rounded(computed: float, agrees: bool) -> None:
    """A rounded value may differ by half a unit of its last digit."""
    assert agrees == Printed("0.13587", truncated=False).agrees(computed)


def assert_printed(id: str, *computed: float) -> None:
    """Compare with all numbers of a row."""
    row = check_value(id)
    assert len(row.numbers) == len(computed)
    for number, value in zip(row.numbers, computed, strict=True):
        assert number.agrees(float(value)), f"{row}: got {value}"


# Source: two-bid comparison of a 161/34.5 kV 30/40/50 MVA unit in the form of REA Bulletin 65-2 (1978) / RUS Bulletin
# 1724E-301 (1997), as printed in the article 'Take into account the losses when purchasing power transformer' of
# Electrical Engineering Portal; that it stems from the bulletin is inferred. Read.
PRICE = np.array([424500, 436000])


@pytest.fixture
def costs() -> LossCosts:
    """Capitalized losses of bids A and B."""
    rates = Rates(np.array(2450.0), np.array(1304.0), np.array(756.0))
    return loss_costs(rates, no_load_loss_kw=[59, 53], load_loss_kw=[224, 218], auxiliary_loss_kw=[2.0, 2.5])


def test_loss_costs__rea_two_bids(costs: LossCosts) -> None:
    """The parts of both bids."""
    for bid, row in enumerate(["REA-LOSS-A-parts", "REA-LOSS-B-parts"]):
        assert_printed(row, costs.no_load[bid], costs.load[bid], costs.auxiliary[bid])


def test_total_owning_cost__rea_two_bids(costs: LossCosts) -> None:
    """The evaluated cost of both bids, and the dearer price first."""
    bid_a, bid_b = total_owning_cost(PRICE, costs)
    assert_printed("REA-LOSS-A", bid_a)
    assert_printed("REA-LOSS-B", bid_b)
    assert_printed("REA-LOSS-rank", bid_a - bid_b)


# Source: G. M. Masters, Renewable and Efficient Electric Power Systems (Wiley 2004), sec. 5.3 and p. 254. Read.


def test_capital_recovery_factor__masters() -> None:
    """6 % over 10 years."""
    assert_printed("MASTERS-CRF", capital_recovery_factor(0.06, 10))


def test_levelizing_factor__masters() -> None:
    """Discount rate 10 %, escalation 6 %, 20 years; the printed d' = 0.037736 is 0.04/1.06."""
    assert_printed("MASTERS-LEVEL-1", levelizing_factor(0.10, 20, escalation=0.06))
    assert f"{0.04 / 1.06:.6f}" in check_value("MASTERS-LEVEL-1").inputs


def test_levelizing_factor__masters_levelized_cost() -> None:
    """0.052 USD/kWh of today."""
    assert_printed("MASTERS-LEVEL-2", 0.052 * levelizing_factor(0.10, 20, escalation=0.06))


# Source: T. Gonen, Electric Power Distribution System Engineering, Ex. 2.2 and 2.8. Inputs read, answers from memory.


def test_loss_capitalization_rates__gonen_energy_of_a_feeder_loss() -> None:
    """Loss factor 0.15 and 80 kW at peak: with a price of 1 a kWh and one year, B counts kWh."""
    rates = loss_capitalization_rates(
        discount_rate=0, evaluation_period_years=1, energy_price_per_kwh=1, loss_factor=0.15, peak_load_pu=1
    )
    energy_kwh = 80 * rates.load
    assert_printed("GONEN-2.2-a", energy_kwh / 8760)
    assert_printed("GONEN-2.2-b", energy_kwh)


def test_loss_capitalization_rates__gonen_annual_cost() -> None:
    """A constant 100 kW at 3 USD/(kW month), which is 36 USD/(kW year), and 0.03 USD/kWh: both A and B give it."""
    rates = loss_capitalization_rates(
        discount_rate=0,
        evaluation_period_years=1,
        energy_price_per_kwh=0.03,
        demand_charge_per_kw_year=12 * 3,
        loss_factor=1,
        peak_load_pu=1,
    )
    assert_printed("GONEN-2.8", 100 * rates.no_load)
    assert_printed("GONEN-2.8", 100 * rates.load)


# Source: J. Bird, Electrical Circuit Theory and Technology, Problems 20.16 and 20.17. Inputs read, answers from memory.


def test_efficiency_of_output__bird() -> None:
    """200 kVA, copper 1.5 kW, iron 1 kW, power factor 0.85, at full and at half load."""
    full, half = 100 * efficiency_of_output(1, 1.5, rated_power_kva=200, load_pu=[1, 0.5], power_factor=0.85)
    assert_printed("BIRD-20.16", full)
    assert_printed("BIRD-20.17", half)


# Source: Commission Regulation (EU) No 548/2014 as amended by Regulation (EU) 2019/1783, Annex I, Tables I.1, I.3a and
# I.7. Read.
def test_peak_efficiency_index__eu_table_7_from_table_1() -> None:
    """The 32 indices up to 3.15 MVA follow from the maximum losses with the factors of 36 kV."""
    printed = {
        (row["tier"], row["rated_power_kva"]): float(row["peak_efficiency_index_pct"])
        for row in table("eu-548-2014-tables-I7-I9-peak-efficiency").rows
        if row["table"] == "I.7"
    }
    losses = table("eu-548-2014-table-I1-liquid-medium").rows
    assert len(losses) == 32
    for row in losses:
        computed = 100 * peak_efficiency_index(
            float(row["no_load_loss_w"]) / 1000 * 1.15,
            float(row["load_loss_w"]) / 1000 * 1.10,
            rated_power_kva=float(row["rated_power_kva"]),
        )
        difference = abs(float(computed) - printed[row["tier"], row["rated_power_kva"]])
        assert difference <= 0.00075, f"{check_value('EU-I7-vs-I1')}: tier {row['tier']}, {row['rated_power_kva']} kVA"
    assert "within 0.00075 points" in check_value("EU-I7-vs-I1").printed
