"""What test tolerances are worth on published and invented bids, with the sums beside them."""

from __future__ import annotations

from typing import Any

import numpy as np
import pytest

from lossworth.regulations.tolerances import tolerance
from lossworth.sensitivity.risk import ToleranceWorth, tolerance_worth

#: IEC 60076-1:1993+A1:1999, Table 1: +15 % of each component loss while the total keeps its +10 %.
_COMPONENT = tolerance("IEC 60076-1 Table 1", "each component loss (P0 or Pk)").high_percent
_TOTAL = tolerance("IEC 60076-1 Table 1", "total losses").high_percent
assert _COMPONENT is not None
assert _TOTAL is not None
IEC = {
    "no_load_tolerance": float(_COMPONENT) / 100,
    "load_tolerance": float(_COMPONENT) / 100,
    "total_tolerance": float(_TOTAL) / 100,
}


def worth(**changed: Any) -> ToleranceWorth:
    """Tolerance of a bid; by default bid B of the RUS example with the tolerances of IEC 60076-1."""
    bid = {"no_load_loss_kw": 53, "load_loss_kw": 218, "no_load_rate": 2450, "load_rate": 1304}
    return tolerance_worth(**(bid | IEC | changed))


def test_tolerance_worth__rus_example() -> None:
    """Bids of the example of the REA and RUS bulletins: margin 10,646, tolerance of the winner up to 44,449 (our sum).

    0.15 x 53 = 7.95 kW at 2,450: 19,477.50; of 0.10 x 271 = 27.1 kW are left 19.15 kW at 1,304: 24,971.60.
    """
    found = worth()
    assert round(float(found.no_load_excess_kw), 9) == 7.95
    assert round(float(found.load_excess_kw), 9) == 19.15
    assert (round(float(found.no_load_worth), 6), round(float(found.load_worth), 6)) == (19477.5, 24971.6)
    assert round(float(found.worth)) == 44449
    assert round(float(found.times(10646)), 2) == 4.18


def test_tolerance_worth__fourth_lot_of_the_demo() -> None:
    """Invented data. 2.28 kW at 11,600 and 12.64 kW at 2,010: 51,854.40, 24 times the margin of 2,164."""
    found = worth(no_load_loss_kw=15.2, load_loss_kw=134, no_load_rate=11600, load_rate=2010)
    assert round(float(found.worth), 6) == 51854.4
    assert round(float(found.times(2164.0))) == 24


def test_tolerance_worth__the_dearer_loss_comes_first() -> None:
    """With B above A the load loss takes all of the total: 0.15 x 218 = 32.7 kW is more than 27.1 kW."""
    found = worth(no_load_rate=1000, load_rate=2000)
    assert (float(found.no_load_excess_kw), round(float(found.load_excess_kw), 9)) == (0.0, 27.1)


def test_tolerance_worth__is_the_greatest() -> None:
    """Against a grid of all excesses that pass, for many bids at once."""
    random = np.random.default_rng(1)
    p0, pk, a, b = random.uniform(0, 10, (4, 200))
    limits = {name: random.uniform(0, 0.2, 200) for name in IEC}
    found = tolerance_worth(no_load_loss_kw=p0, load_loss_kw=pk, no_load_rate=a, load_rate=b, **limits)
    own = np.linspace(0, 1, 2001)[:, np.newaxis]
    no_load = own * limits["no_load_tolerance"] * p0
    room = limits["total_tolerance"] * (p0 + pk) - no_load
    load = np.minimum(limits["load_tolerance"] * pk, room)
    best = np.where(room >= 0, a * no_load + b * load, 0).max(axis=0)
    assert (found.worth >= best * (1 - 1e-12)).all()
    assert np.allclose(best, found.worth, rtol=0.01, atol=0.01)
    assert (found.no_load_excess_kw <= limits["no_load_tolerance"] * p0 * (1 + 1e-12)).all()
    assert (found.load_excess_kw <= limits["load_tolerance"] * pk * (1 + 1e-12)).all()
    assert (found.no_load_excess_kw + found.load_excess_kw <= limits["total_tolerance"] * (p0 + pk) * (1 + 1e-12)).all()


def test_tolerance_worth__no_tolerance_is_worth_nothing() -> None:
    """Zero plus tolerance, as many tenders state it; also against a margin of zero."""
    found = worth(no_load_tolerance=0, load_tolerance=0, total_tolerance=0)
    assert (float(found.worth), float(found.times(10646)), float(found.times(0))) == (0.0, 0.0, 0.0)
    assert np.isinf(worth().times(0))


def test_tolerance_worth__a_tolerance_of_the_total_alone() -> None:
    """IEEE C57.12.00 (from memory): +10 % no-load, +6 % total, none on the load loss by itself."""
    found = worth(no_load_tolerance=0.10, load_tolerance=np.inf, total_tolerance=0.06)
    assert (round(float(found.no_load_excess_kw), 9), round(float(found.load_excess_kw), 9)) == (5.3, 10.96)


@pytest.mark.parametrize(
    ("changed", "words"),
    [
        ({"total_tolerance": np.inf, "load_tolerance": np.inf}, "total_tolerance: must be set"),
        ({"load_loss_kw": -1}, "load_loss_kw: must be at least 0, got -1"),
        ({"total_tolerance": -0.1}, "total_tolerance: must be at least 0"),
    ],
)
def test_tolerance_worth__refuses(changed: dict[str, Any], words: str) -> None:
    """A loss without any bound, and values below zero."""
    with pytest.raises(ValueError, match=words):
        worth(**changed)
