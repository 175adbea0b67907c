"""Load factor, loss factor and coefficient k of real load profiles.

Source: standard load profiles of the BDEW, 1999 (H0 to L2) and 2025 (H25 to S25), csv files in the PyPI package
demandlib, read directly. How a year is made of them stands in docs/load_profiles.md.
"""

from __future__ import annotations

import math
import re
from collections import Counter
from pathlib import Path

import numpy as np
import pytest

from lossworth.capitalization import duration, load, profile
from support.standard_load_profiles import codes, script

PAGE = Path(__file__).resolve().parents[2] / "docs" / "load_profiles.md"


def plain_factors(steps: list[float]) -> tuple[float, float]:
    """Load factor and loss factor by two plain sums, each correctly rounded."""
    peak, count = max(steps), len(steps)
    return math.fsum(steps) / count / peak, math.fsum(step * step for step in steps) / count / peak**2


def printed_rows() -> dict[str, list[str]]:
    """Printed figures of the committed table, by profile."""
    rows = re.findall(r"^\| ([A-Z]\d+) \| [^|]* \|(.*)\|$", PAGE.read_text(encoding="utf-8"), re.MULTILINE)
    return {code: [cell.strip() for cell in cells.split("|")] for code, cells in rows}


def half_unit(digits: str) -> float:
    """Half a unit of the last printed digit, and room for the representation of the number."""
    return 0.5 * 10.0 ** -len(digits.partition(".")[2]) + 1e-12


@pytest.mark.parametrize("code", codes())
@pytest.mark.parametrize("steps", ["quarter_hours", "hours"])
def test_loss_factor__between_square_and_load_factor(code: str, steps: str) -> None:
    """LF^2 <= LsF <= LF, for quarter-hours and for hourly means."""
    power = getattr(script().year_of(code), steps)
    load_factor, loss_factor = profile.load_factor(power), profile.loss_factor(power)
    lowest, highest = load.loss_factor_bounds(load_factor)
    assert lowest <= loss_factor <= highest


@pytest.mark.parametrize("code", codes())
def test_profile__factors_by_plain_sums(code: str) -> None:
    """35,040 quarter-hours summed by the standard library give the same factors."""
    steps = script().year_of(code).quarter_hours
    assert steps.size == 35_040
    expected = plain_factors(steps.tolist())
    np.testing.assert_allclose((profile.load_factor(steps), profile.loss_factor(steps)), expected, rtol=1e-12)


@pytest.mark.parametrize("code", ["G0", "G1", "G3", "L1", "G25", "L25"])
def test_profile__typical_days_with_weights_equal_the_year(code: str) -> None:
    """Each kind of day once, weighted by how often it comes, gives the factors of the whole year."""
    year = script().year_of(code)
    often = Counter(year.day_kinds)
    once = [year.day_kinds.index(kind) for kind in often]
    steps, weights = year.load[once].reshape(-1), np.repeat(list(often.values()), 96)
    assert weights.sum() == 35_040
    for factor in (profile.load_factor, profile.loss_factor):
        np.testing.assert_allclose(factor(steps, weights=weights), factor(year.quarter_hours), rtol=1e-12)


@pytest.mark.parametrize("code", codes())
def test_load_duration__holds_the_energy_and_the_loss_of_the_year(code: str) -> None:
    """Areas under the duration curve, of the load and of its square, are load factor and loss factor."""
    shape = profile.load_shape(script().year_of(code).quarter_hours)
    curve = duration.load_duration(shape)
    np.testing.assert_allclose((curve.hours[:-1] - curve.hours[1:]), 0.25, rtol=1e-9)
    levels = np.concatenate([[0.0], curve.levels])
    for power, factor in ((1, profile.load_factor), (2, profile.loss_factor)):
        area = (np.diff(levels**power) * curve.hours_above(levels[:-1])).sum() / 8760
        np.testing.assert_allclose(area, factor(shape), rtol=1e-11)


@pytest.mark.parametrize(
    ("code", "tolerance"),
    [(code, 0.01) for code in codes(of_2025=False)] + [(code, 0.0005) for code in codes(of_1999=False)],
)
def test_year_of__published_consumption(code: str, tolerance: float) -> None:
    """The mapping of days and seasons gives the consumption that the profiles are published for (from memory).

    1,000 kWh a year, those of 2025 divided by 1000; those of 1999 were made for another year's calendar. Holidays taken
    as workdays, or the function of the season left out, miss it: G25 by 1.8 %, P25 by 5 %, S25 by 11 %.
    """
    assert float(script().year_of(code).quarter_hours.sum() / 4) == pytest.approx(1000, rel=tolerance)


def test_coefficient_implied__published_coefficients_do_not_bracket_every_profile() -> None:
    """From 0.08 to 0.30 in print, from 0.103 (G3) to 0.453 (G1, trade on workdays) here; G1 alone lies outside."""
    implied = {code: script().coefficient(script().year_of(code).quarter_hours) for code in codes()}
    assert (min(implied, key=implied.__getitem__), max(implied, key=implied.__getitem__)) == ("G3", "G1")
    assert (round(min(implied.values()), 3), round(max(implied.values()), 3)) == (0.103, 0.453)
    published = [value for value, _ in load.PUBLISHED_COEFFICIENTS]
    outside = [code for code, k in implied.items() if not min(published) <= k <= max(published)]
    assert outside == ["G1"] == [year.code for year in script().not_bracketed()]


@pytest.mark.parametrize("code", codes())
def test_table__printed_digits(code: str) -> None:
    """The committed figures are those of plain sums, to the last printed digit."""
    year = script().year_of(code)
    load_factor, loss_factor = plain_factors(year.quarter_hours.tolist())
    hourly_load_factor, hourly_loss_factor = plain_factors(year.hours.tolist())
    square = load_factor**2
    expected = [
        load_factor,
        loss_factor,
        (loss_factor - square) / (load_factor - square),
        *(k * load_factor + (1 - k) * square for k in (0.08, 0.15, 0.20, 0.30)),
        (hourly_loss_factor - hourly_load_factor**2) / (hourly_load_factor - hourly_load_factor**2),
    ]
    printed = printed_rows()[code]
    errors = [abs(float(digits) - value) for digits, value in zip(printed, expected, strict=True)]
    assert [error <= half_unit(digits) for error, digits in zip(errors, printed, strict=True)] == [True] * 8


def test_table__has_every_profile() -> None:
    """No profile is left out."""
    assert list(printed_rows()) == codes()


def test_load_profile_page__is_what_its_script_writes() -> None:
    """The page is written from the profiles."""
    assert script().page() == PAGE.read_text(encoding="utf-8")
