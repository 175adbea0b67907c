"""How long `lossworth --help` takes, against importing click alone: measured in pairs, in one run.

Run it with the interpreter in whose environment lossworth is installed. Exit code 1 if the ratio of the medians is
above the bar.
"""

from __future__ import annotations

import statistics
import subprocess
import sys
import sysconfig
import time
from pathlib import Path

BAR = 1.5
PAIRS = 40
WARM_UP = 3


def seconds(command: list[str]) -> float:
    """Wall time of one run."""
    start = time.perf_counter()
    subprocess.run(command, check=True, stdout=subprocess.DEVNULL)
    return time.perf_counter() - start


def measure(pairs: int = PAIRS) -> tuple[float, float, float]:
    """Medians of `lossworth --help` and of `import click`, and the ratio of the medians.

    Both are run one after the other and in changing order, so that whatever else the machine does meets both.
    """
    help_command = [str(Path(sysconfig.get_path("scripts")) / "lossworth"), "--help"]
    click_command = [sys.executable, "-c", "import click"]
    times: dict[str, list[float]] = {"help": [], "click": []}
    for number in range(pairs + WARM_UP):
        order = [("help", help_command), ("click", click_command)]
        for name, command in order if number % 2 else reversed(order):
            took = seconds(command)
            if number >= WARM_UP:
                times[name].append(took)
    medians = {name: statistics.median(values) for name, values in times.items()}
    return medians["help"], medians["click"], medians["help"] / medians["click"]


def main() -> int:
    """Print the medians and the ratio."""
    of_help, of_click, ratio = measure()
    print(f"lossworth --help          {1000 * of_help:6.1f} ms (median of {PAIRS})")
    print(f'python -c "import click"  {1000 * of_click:6.1f} ms (median of {PAIRS})')
    print(f"ratio {ratio:.2f}, bar {BAR}")
    return 0 if ratio <= BAR else 1


if __name__ == "__main__":
    raise SystemExit(main())
