"""Capitalized losses and total owning cost on arrays, and the form of IEC for cooling power."""

from __future__ import annotations

import numpy as np
import pytest

from lossworth.capitalization.owning_cost import iec_total_cost_of_ownership, loss_costs, total_owning_cost
from lossworth.capitalization.rates import Rates


def rates(no_load: object = 11600.0, load: object = 2010.0, auxiliary: object = 1540.0) -> Rates:
    """Rates of the demo's fourth lot (invented data)."""
    return Rates(np.asarray(no_load), np.asarray(load), np.asarray(auxiliary))


def test_total_owning_cost__demo() -> None:
    """The six bids of the demo's fourth lot (invented data)."""
    costs = loss_costs(
        rates(),
        no_load_loss_kw=[15.2, 13.2, 12.6, 14.4, 14.4, 15.8],
        load_loss_kw=[134, 132, 128, 141, 57.2, 139],
        auxiliary_loss_kw=[2.0, 1.6, 1.5, 1.8, 2.2, 1.6],
    )
    total = total_owning_cost([655000, 685000, 702000, 668000, 661000, 628000], costs)
    assert total.round(2).tolist() == [1103740, 1105904, 1107750, 1121222, 946400, 1093134]


def test_loss_costs__scenarios_times_bids() -> None:
    """Rates of many scenarios in rows, bids in columns."""
    many = rates(np.full((5, 1), 11600.0), np.full((5, 1), 2010.0), np.full((5, 1), 1540.0))
    costs = loss_costs(many, no_load_loss_kw=[15.2, 13.2], load_loss_kw=[134, 132], auxiliary_loss_kw=[2, 1.6])
    assert total_owning_cost([655000, 685000], costs).shape == (5, 2)


@pytest.mark.parametrize("loss", [-0.1, np.nan, None])
def test_loss_costs__loss_not_stated(loss: float | None) -> None:
    """A blank or negative loss is refused, never taken for zero."""
    with pytest.raises(ValueError, match=r"^load_loss_kw: must be "):
        loss_costs(rates(), no_load_loss_kw=15.2, load_loss_kw=loss, auxiliary_loss_kw=2)  # type: ignore[arg-type]


def test_iec_total_cost_of_ownership__no_cooling_at_no_load() -> None:
    """With Pc0 = 0 cooling power counts like load loss."""
    total = iec_total_cost_of_ownership(
        655000,
        no_load_rate=11600,
        load_rate=2010,
        no_load_loss_kw=15.2,
        load_loss_kw=134,
        cooling_power_at_no_load_kw=0,
        cooling_power_at_rated_load_kw=2,
    )
    assert float(total) == 655000 + 11600 * 15.2 + 2010 * 136


def test_iec_total_cost_of_ownership__cooling_at_no_load_is_not_counted_twice() -> None:
    """Cooling that runs at no load counts by A, and only the rest by B."""
    total = iec_total_cost_of_ownership(
        0,
        no_load_rate=10,
        load_rate=1,
        no_load_loss_kw=0,
        load_loss_kw=0,
        cooling_power_at_no_load_kw=3,
        cooling_power_at_rated_load_kw=5,
    )
    assert float(total) == 32


def test_iec_total_cost_of_ownership__less_cooling_at_rated_load() -> None:
    """Less cooling at rated load than at no load is a swap of the two."""
    with pytest.raises(ValueError, match=r"^cooling_power_at_rated_load_kw: must be at least"):
        iec_total_cost_of_ownership(
            0,
            no_load_rate=10,
            load_rate=1,
            no_load_loss_kw=0,
            load_loss_kw=0,
            cooling_power_at_no_load_kw=5,
            cooling_power_at_rated_load_kw=3,
        )
