"""Write the load profile of the example: a substation's year of hours. INVENTED DATA.

Run it from anywhere: ``python docs/example_power_tender/make_profile.py``. The same program gives the same bytes.
"""

from __future__ import annotations

import datetime
import math
import random
from pathlib import Path

PROFILE = Path(__file__).parent / "profiles" / "substation.csv"
FIRST = datetime.datetime(2025, 1, 1)  # noqa: DTZ001 - standard time, as the tender file says
HOURS = 8760

#: Share of the daily peak in each hour, from midnight.
WORKDAY = (48, 45, 43, 42, 43, 48, 60, 76, 86, 89, 90, 91, 92, 90, 88, 87, 89, 95, 100, 98, 90, 79, 66, 55)
WEEKEND = (50, 46, 43, 42, 41, 42, 46, 53, 62, 69, 73, 76, 77, 74, 70, 68, 70, 77, 84, 84, 79, 71, 62, 54)


def loads() -> list[int]:
    """Load of each hour: season, day, and a weather that forgets slowly. [kVA]"""
    chance, weather, found = random.Random(31), 0.0, []  # noqa: S311 - no secret
    for hour in range(HOURS):
        time = FIRST + datetime.timedelta(hours=hour)
        if time.hour == 0:
            weather = 0.7 * weather + 0.05 * (chance.random() - 0.5)
        season = 0.84 + 0.16 * math.cos(2 * math.pi * (hour / 24 - 15) / 365)
        shape = (WEEKEND if time.weekday() > 4 else WORKDAY)[time.hour] / 100
        found.append(round(23_500 * season * shape * (1 + weather) * (1 + 0.02 * (chance.random() - 0.5))))
    return found


def text() -> str:
    """The whole file."""
    rows = (
        f"{(FIRST + datetime.timedelta(hours=hour)).isoformat(timespec='minutes')},{load}\n"
        for hour, load in enumerate(loads())
    )
    return "".join(["time,load [kVA]\n", *rows])


if __name__ == "__main__":
    PROFILE.parent.mkdir(exist_ok=True)
    PROFILE.write_text(text(), encoding="utf-8")
