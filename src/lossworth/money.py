"""Decimal amounts, currency codes and the rounding that a tender states."""

from __future__ import annotations

import re
from dataclasses import dataclass
from decimal import ROUND_DOWN, ROUND_HALF_UP, Context, Decimal
from enum import StrEnum

__all__ = ["ARITHMETIC", "Rounding", "RoundingMode", "is_currency_code"]

#: Context of every decimal operation: 50 digits, so that no product of stated figures is ever rounded in between.
ARITHMETIC = Context(prec=50)

#: A quotient times its divisor may miss the whole amount by the last of 50 digits; what is rounded to money is first
#: brought to 48, so that 100,000.00 does not become 99,999.99. Four factors of twelve digits stay exact.
_GUARD = Context(prec=48)

_CURRENCY_CODE = re.compile(r"[A-Z]{3}")


class RoundingMode(StrEnum):
    """How half a unit of the last place is treated."""

    HALF_AWAY_FROM_ZERO = "half away from zero"
    DOWN = "down"

    @property
    def decimal_constant(self) -> str:
        """Name of the mode in the `decimal` module."""
        return ROUND_HALF_UP if self is RoundingMode.HALF_AWAY_FROM_ZERO else ROUND_DOWN


@dataclass(frozen=True, slots=True)
class Rounding:
    """A stated rounding: to which smallest amount, and how.

    Parameters
    ----------
    quantum : Decimal
        Smallest amount, a power of ten (``0.01``). [currency]
    mode : RoundingMode
        Treatment of what lies between two amounts.

    Raises
    ------
    ValueError
        If the quantum is not a positive power of ten.

    Examples
    --------
    >>> str(Rounding(Decimal("0.01"), RoundingMode.HALF_AWAY_FROM_ZERO).apply(Decimal("2.345")))
    '2.35'
    """

    quantum: Decimal
    mode: RoundingMode

    def __post_init__(self) -> None:
        sign, digits, _ = self.quantum.normalize().as_tuple()
        if sign or digits != (1,):
            raise ValueError(f"a rounding goes to a power of ten, got {self.quantum}")

    @property
    def places(self) -> int:
        """Digits behind the decimal mark; negative above one."""
        exponent = self.quantum.normalize().as_tuple().exponent
        return -int(exponent)

    def apply(self, value: Decimal) -> Decimal:
        """Return the value rounded to the quantum.

        Parameters
        ----------
        value : Decimal
            Exact amount. [currency]

        Returns
        -------
        Decimal
            Rounded amount, with as many places as the quantum has.
        """
        exact, quantum = _GUARD.plus(value), self.quantum.normalize()
        rounded = exact.quantize(quantum, rounding=self.mode.decimal_constant, context=ARITHMETIC)
        return rounded if rounded else abs(rounded)  # never a negative zero

    def __str__(self) -> str:
        return f"rounded to {self.quantum.normalize():f}, {self.mode.value}"


def is_currency_code(text: str) -> bool:
    """Whether a text has the form of a currency code: three capital letters.

    Parameters
    ----------
    text : str
        Candidate, ``"NCU"``.

    Returns
    -------
    bool
        True for three letters A to Z.
    """
    return _CURRENCY_CODE.fullmatch(text) is not None
