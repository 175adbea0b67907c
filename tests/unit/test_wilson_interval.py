"""Interval of a probability: against SciPy, at the ends, and what is refused."""

from __future__ import annotations

import numpy as np
import pytest
from scipy import stats

from lossworth.sensitivity.simulation_result import robust_choice, wilson_interval


@pytest.mark.parametrize("confidence", [0.5, 0.9, 0.95, 0.999])
@pytest.mark.parametrize(("wins", "draws"), [(0, 1), (1, 1), (3, 10), (499, 1000), (0, 10**6), (999_999, 10**6)])
def test_wilson_interval__agrees_with_scipy(wins: int, draws: int, confidence: float) -> None:
    """`binomtest(...).proportion_ci(method="wilson")`."""
    expected = stats.binomtest(wins, draws).proportion_ci(confidence, method="wilson")
    low, high = wilson_interval(wins, draws, confidence)
    assert np.allclose([expected.low, expected.high], [low, high], rtol=1e-12, atol=1e-15)


def test_wilson_interval__holds_the_share() -> None:
    """Also of shared draws, and at both ends."""
    wins = np.array([0.0, 1 / 3, 50.5, 99.75, 100.0])
    low, high = wilson_interval(wins, 100, 0.95)
    assert (low <= wins / 100).all()
    assert (high >= wins / 100).all()
    assert (low[0], high[-1]) == (0.0, 1.0)


@pytest.mark.parametrize(
    ("wins", "draws", "confidence", "words"),
    [
        (-1, 10, 0.95, "wins: must be at least 0"),
        (11, 10, 0.95, "wins: must not be more than draws"),
        (0, 0, 0.95, "draws: must be above 0"),
        (1, 10, 0.0, "confidence: must be between 0 and 1, got 0"),
        (1, 10, 95, "confidence: must be at least 0 and at most 1, got 95"),
    ],
)
def test_wilson_interval__refuses(wins: float, draws: float, confidence: float, words: str) -> None:
    """Numbers that are no share and no confidence."""
    with pytest.raises(ValueError, match=words):
        wilson_interval(wins, draws, confidence)


def test_robust_choice__least_and_as_good() -> None:
    """Differences within the width are none."""
    assert robust_choice(np.array([3.0, 1.0, 1.0 + 1e-9, 1.1]), 1e-8) == (1, 2)
