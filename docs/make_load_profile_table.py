"""Write docs/load_profiles.md: what real load profiles say about the coefficient k of the loss factor.

Run it in an environment with the test dependencies: ``python docs/make_load_profile_table.py``. The profiles are the
standard load profiles of the BDEW of 1999 and 2025, whose csv files ship in the PyPI package demandlib.
"""

from __future__ import annotations

import csv
import datetime
from collections.abc import Callable
from dataclasses import dataclass
from functools import cache
from importlib.util import find_spec
from pathlib import Path

import numpy as np
from numpy.typing import NDArray

from lossworth.capitalization import load, profile

PAGE = Path(__file__).parent / "load_profiles.md"
Array = NDArray[np.float64]

YEAR = 2025
QUARTERS = 96
#: Code, who it stands for (from memory), and whether the daily function of the season applies.
PROFILES_OF_1999 = (
    ("H0", "households", True),
    ("G0", "trade, all kinds", False),
    ("G1", "trade, workdays 8 to 18", False),
    ("G2", "trade, mostly evenings", False),
    ("G3", "trade, day and night", False),
    ("G4", "shops", False),
    ("G5", "bakeries", False),
    ("G6", "weekend trade", False),
    ("L0", "farms, all kinds", False),
    ("L1", "farms with milk or part time", False),
    ("L2", "other farms", False),
)
PROFILES_OF_2025 = (
    ("H25", "households", True),
    ("G25", "trade", False),
    ("L25", "farms", False),
    ("P25", "households with solar power", True),
    ("S25", "the same with a battery", True),
)
#: Months as the files of 2025 name them, by their first letters.
_MONTHS = ("Jan", "Feb", "Mär", "Apr", "Mai", "Jun", "Jul", "Aug", "Sep", "Okt", "Nov", "Dez")
#: Nationwide public holidays of the profiles' country in 2025, as month and day: Sundays to the profiles.
HOLIDAYS = frozenset({(1, 1), (4, 18), (4, 21), (5, 1), (5, 29), (6, 9), (10, 3), (12, 25), (12, 26)})
#: Christmas Eve and New Year's Eve: Saturdays to the profiles, unless they are Sundays (from memory).
HALF_HOLIDAYS = frozenset({(12, 24), (12, 31)})
SATURDAY, SUNDAY = 6, 7


@dataclass(frozen=True)
class YearOfLoad:
    """One profile over a year.

    Parameters
    ----------
    code, users : str
        Name of the profile, and who it stands for.
    load : ndarray
        Mean power of each quarter-hour, 365 days by 96. [kW per 1,000 kWh of the year's consumption, nearly]
    day_kinds : tuple
        Kind of each day; days of one kind have the same load, the function of the season apart.
    """

    code: str
    users: str
    load: Array
    day_kinds: tuple[tuple[int | str, int], ...]

    @property
    def quarter_hours(self) -> Array:
        """All 35,040 quarter-hours."""
        return self.load.reshape(-1)

    @property
    def hours(self) -> Array:
        """Mean power of all 8,760 hours."""
        return np.asarray(self.load.reshape(-1, 4).mean(axis=1))


def days() -> tuple[datetime.date, ...]:
    """Every day of the year."""
    first = datetime.date(YEAR, 1, 1)
    return tuple(first + datetime.timedelta(days=number) for number in range(365))


def day_of_week(day: datetime.date) -> int:
    """Day as the profiles count it: 1 is Monday, 6 Saturday, 7 Sunday; a holiday is a Sunday."""
    stands_on = (day.month, day.day)
    if stands_on in HOLIDAYS:
        return SUNDAY
    if stands_on in HALF_HOLIDAYS and day.isoweekday() != SUNDAY:
        return SATURDAY
    return day.isoweekday()


def season(day: datetime.date) -> str:
    """Season of the profiles of 1999: summer 15 May to 14 September, winter 1 November to 20 March, else transition."""
    stands_on = (day.month, day.day)
    if (5, 15) <= stands_on <= (9, 14):
        return "summer"
    return "winter" if stands_on <= (3, 20) or stands_on >= (11, 1) else "transition"


def seasonal_function() -> Array:
    """Factor of each day for the profiles of households, a polynomial of the day of the year.

    Notes
    -----
    -3.92e-10 t^4 + 3.2e-7 t^3 - 7.02e-5 t^2 + 2.1e-3 t + 1.24, t = 1 to 365, as published with H0 of 1999 and kept for
    H25, P25 and S25 (BDEW; read as it stands in demandlib).
    """
    t = np.arange(1.0, 366.0)
    return np.asarray(-3.92e-10 * t**4 + 3.2e-7 * t**3 - 7.02e-5 * t**2 + 2.1e-3 * t + 1.24)


def data_folder() -> Path:
    """Where demandlib keeps the csv files; the package itself is not imported."""
    found = find_spec("demandlib")
    if found is None or not found.submodule_search_locations:
        raise FileNotFoundError("demandlib is not installed: install the test dependencies")
    return Path(found.submodule_search_locations[0]) / "bdew" / "bdew_data"


def rows_of(name: str) -> list[list[str]]:
    """Cells of a csv file of the package, as text."""
    with (data_folder() / name).open(encoding="utf-8", newline="") as stream:
        return list(csv.reader(stream))


def typical_days_of_1999(code: str) -> dict[tuple[int | str, int], Array]:
    """Typical days of a profile of 1999, by season and day of the week. [kW per 1,000 kWh a year]"""
    header, *rows = rows_of("selp_series.csv")
    column = header.index(code.lower())
    kinds: dict[tuple[int | str, int], list[float]] = {}
    for row in rows:  # columns: time, season, day of the week, profiles
        kinds.setdefault((row[1], int(row[2])), []).append(float(row[column]))
    return {kind: np.array(values) for kind, values in kinds.items()}


def typical_days_of_2025(code: str) -> dict[tuple[int | str, int], Array]:
    """Typical days of a profile of 2025, by month and day of the week. [kW per 1,000 kWh a year]"""
    months, names, *rows = rows_of(f"{code.lower()}.csv")
    energy = np.array([[float(cell) for cell in row[1:]] for row in rows])  # kWh a quarter-hour, of 1 GWh a year
    power = energy * 4 / 1000
    of_name = {"WT": range(1, 6), "SA": (SATURDAY,), "FT": (SUNDAY,)}
    return {
        (_MONTHS.index(month[:3]) + 1, day): power[:, column]
        for column, (month, name) in enumerate(zip(months[1:], names[1:], strict=True))
        for day in of_name[name]
    }


@cache
def year_of(code: str) -> YearOfLoad:
    """A profile over the year, each day from its typical day."""
    of_1999 = code in {known for known, _, _ in PROFILES_OF_1999}
    users, by_season = next((u, s) for known, u, s in PROFILES_OF_1999 + PROFILES_OF_2025 if known == code)
    typical = typical_days_of_1999(code) if of_1999 else typical_days_of_2025(code)
    first: Callable[[datetime.date], int | str] = season if of_1999 else lambda day: day.month
    kinds = tuple((first(day), day_of_week(day)) for day in days())
    power = np.array([typical[kind] for kind in kinds])
    if power.shape != (365, QUARTERS):
        raise ValueError(f"{code}: must have 365 days of 96 quarter-hours, got {power.shape}")
    return YearOfLoad(code, users, power * seasonal_function()[:, np.newaxis] if by_season else power, kinds)


def all_years() -> tuple[YearOfLoad, ...]:
    """All profiles over the year, those of 1999 first."""
    return tuple(year_of(code) for code, _, _ in PROFILES_OF_1999 + PROFILES_OF_2025)


def coefficient(steps: Array) -> float:
    """Coefficient k that the load factor and the loss factor of a profile imply."""
    return float(profile.coefficient_implied(profile.load_factor(steps), profile.loss_factor(steps)))


def published_coefficients() -> tuple[float, ...]:
    """Coefficients in print, in rising order."""
    return tuple(sorted(value for value, _ in load.PUBLISHED_COEFFICIENTS))


def not_bracketed() -> tuple[YearOfLoad, ...]:
    """Profiles whose coefficient lies outside all of the published ones."""
    lowest, *_, highest = published_coefficients()
    return tuple(year for year in all_years() if not lowest <= coefficient(year.quarter_hours) <= highest)


def table() -> str:
    """The table of factors."""
    published = published_coefficients()
    head = ["profile", "stands for", "LF", "LsF", "k"] + [f"LsF if k = {k:.2f}" for k in published] + ["k hourly"]
    lines = [f"| {' | '.join(head)} |", "|---|---|" + "---:|" * (len(head) - 2)]
    for year in all_years():
        steps = year.quarter_hours
        lf, lsf = float(profile.load_factor(steps)), float(profile.loss_factor(steps))
        estimates = [f"{float(load.loss_factor(lf, k)):.4f}" for k in published]
        factors = [f"{lf:.4f}", f"{lsf:.4f}", f"{coefficient(steps):.3f}", *estimates, f"{coefficient(year.hours):.3f}"]
        lines.append(f"| {' | '.join([year.code, year.users, *factors])} |")
    return "\n".join(lines) + "\n"


def errors_table() -> str:
    """How far each published coefficient leads astray: the estimate over the computed loss factor, less 1."""
    lines = ["| k | too low by at most | too high by at most | source |", "|---:|---|---|---|"]
    for k, source in sorted(load.PUBLISHED_COEFFICIENTS):
        errors = {}
        for year in all_years():
            lf, lsf = profile.load_factor(year.quarter_hours), profile.loss_factor(year.quarter_hours)
            errors[year.code] = float(load.loss_factor(lf, k) / lsf) - 1
        low, high = (pick(errors, key=errors.__getitem__) for pick in (min, max))
        lines.append(f"| {k:.2f} | {_error(low, -errors[low])} | {_error(high, errors[high])} | {source} |")
    return "\n".join(lines) + "\n"


def _error(code: str, size: float) -> str:
    return f"{100 * size:.0f} % ({code})" if size > 0 else "never"


def findings() -> str:
    """What the table shows, in sentences with its own figures."""
    coefficients = {year.code: coefficient(year.quarter_hours) for year in all_years()}
    low, high = (pick(coefficients, key=coefficients.__getitem__) for pick in (min, max))
    lowest, *_, highest = published_coefficients()
    outside = ", ".join(f"{year.code} ({coefficients[year.code]:.3f})" for year in not_bracketed())
    peaks = {year.code: 1 - float(year.hours.max() / year.quarter_hours.max()) for year in all_years()}
    peak = max(peaks, key=peaks.__getitem__)
    return (
        f"- The coefficient runs from {coefficients[low]:.3f} ({low}) to {coefficients[high]:.3f} ({high}).\n"
        f"- Not between {lowest:.2f} and {highest:.2f}, the least and the greatest in print: {outside or 'none'}.\n"
        f"- Hourly means hide the peak: up to {100 * peaks[peak]:.1f} % of it ({peak}). Load factor, loss factor and\n"
        "  peak load must come from steps of one length.\n"
    )


_HEAD = """# Load profiles, and what a fixed coefficient k misses

Where a tender has no load profile, the loss factor is estimated from the load factor: LsF = k LF + (1 − k) LF². This
page holds that against real profiles. It is written by `docs/make_load_profile_table.py`; a test compares the two.

"""

_MEANING = """
LF is the mean load over the peak load, LsF the mean squared load over the squared peak, both of quarter-hours; k is
the coefficient that the two imply, (LsF − LF²)/(LF − LF²). The columns after it are what published coefficients make
of the same LF. *k hourly* is k from hourly means of the same profile.

"""

_FOOT = """
The estimate over the computed loss factor, less 1, over all profiles:

{errors}
With a profile, `lossworth` computes the loss factor and estimates nothing. Without one, k is an assumption, and the
papers print it.

## How a year is made of a profile

- **Profiles:** the standard load profiles of the BDEW, H0 to L2 of 1999 and H25 to S25 of 2025, from the csv files in
  the PyPI package demandlib (release 0.2.2 read), `bdew/bdew_data/selp_series.csv`, `h25.csv`, `g25.csv`, `l25.csv`,
  `p25.csv`, `s25.csv`. What each stands for: from memory.
- **Year:** the calendar of 2025, 365 days of 96 quarter-hours, without a change of clocks.
- **Kinds of days:** those of 1999 by season and day of the week, those of 2025 by month and workday, Saturday or
  Sunday. The nine nationwide public holidays count as Sundays, 24 and 31 December as Saturdays (from memory).
- **Seasons of 1999:** summer 15 May to 14 September, winter 1 November to 20 March, transition between them (read in
  demandlib).
- **Households** (H0, H25, P25, S25): each day times −3.92·10⁻¹⁰ t⁴ + 3.2·10⁻⁷ t³ − 7.02·10⁻⁵ t² + 2.1·10⁻³ t + 1.24,
  t the day of the year (read in demandlib).
- **Check of all this:** the profiles are published for a fixed consumption a year, 1,000 kWh in 1999 and 1 GWh in 2025
  (from memory). The years made here give it within 1 % and within 0.05 %; a test holds them to it.

## What the table does not say

These are means over many customers, of active power, at a constant power factor. A transformer that feeds a few of them
has a sharper peak and lower factors. P25 and S25 are what is drawn from the network, without what is fed back. Load
factors and loss factors of a lot come from its own measurements.
"""


def page() -> str:
    """The whole page."""
    return _HEAD + table() + _MEANING + findings() + _FOOT.format(errors=errors_table())


if __name__ == "__main__":
    PAGE.write_text(page(), encoding="utf-8")
