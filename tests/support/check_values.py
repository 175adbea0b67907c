"""The published check values, with their printed digits, sources and tolerances."""

from __future__ import annotations

import csv
import re
from dataclasses import dataclass
from decimal import Decimal
from functools import cache
from pathlib import Path

_TABLE = Path(__file__).parents[1] / "published" / "check_values.csv"


@dataclass(frozen=True)
class Printed:
    """One printed number: its digits, and whether it was cut instead of rounded."""

    digits: str
    truncated: bool

    @property
    def unit(self) -> Decimal:
        """One unit of the last printed digit."""
        return Decimal(1).scaleb(int(Decimal(self.digits).as_tuple().exponent))

    def agrees(self, computed: float) -> bool:
        """Whether a computed value prints as these digits: within half a unit, or within one where truncated."""
        excess = Decimal(repr(float(computed))) - Decimal(self.digits)
        return 0 <= excess < self.unit if self.truncated else abs(excess) <= self.unit / 2


@dataclass(frozen=True)
class CheckValue:
    """One row of the table; a source of "same" is already replaced by the source that it repeats."""

    id: str
    source: str
    quantity: str
    unit: str
    inputs: str
    printed: str
    provenance: str

    @property
    def numbers(self) -> tuple[Printed, ...]:
        """The printed numbers, in order."""
        truncated = "truncated" in self.printed
        return tuple(Printed(digits, truncated) for digits in re.findall(r"\d+(?:\.\d+)?", self.printed))

    def __str__(self) -> str:
        return f"{self.id} ({self.source}; {self.provenance}): {self.quantity} {self.printed} {self.unit}"


@cache
def check_values() -> dict[str, CheckValue]:
    """All rows by id.

    Raises
    ------
    ValueError
        If the table has no title, or a row has no source or no provenance.
    """
    lines = _TABLE.read_text(encoding="utf-8").splitlines()
    if not lines[0].startswith("# title: "):
        raise ValueError(f"{_TABLE.name}: must begin with its title")
    values: dict[str, CheckValue] = {}
    source = ""
    for row in csv.DictReader(line for line in lines if not line.startswith("#")):
        if not row["source"] or not row["provenance"]:
            raise ValueError(f"{_TABLE.name}: {row['id']}: must have a source and a provenance")
        same, _, place = row["source"].partition(",")
        # "same, p. 254": the work named above, at another place in it
        work = source.partition(", sec.")[0] if place else source
        full = (work + ("," + place if place else "")) if same == "same" else row["source"]
        if same != "same":
            source = row["source"]
        values[row["id"]] = CheckValue(**{**row, "source": full})
    return values


def check_value(id: str) -> CheckValue:
    """The row with this id."""
    return check_values()[id]
