"""Percentages as figures: the stated percent, divided by a hundred where a reader can see it."""

from __future__ import annotations

from decimal import Decimal

from ..records.quantity import Quantity
from ..trail import Figure, constant, quotient, read, total

__all__ = ["one", "one_and", "percent_text", "share"]


def share(identity: str, label: str, percent: Quantity, unit: str = "%") -> Figure:
    """Share of one that a stated percentage is.

    Parameters
    ----------
    identity, label : str
        Identity and name of the percentage.
    percent : Quantity
        As stated. [percent]
    unit : str
        Unit of the percentage, ``"%"`` or ``"%/year"``.

    Returns
    -------
    Figure
        Percentage / 100. [1, or what the unit leaves]
    """
    stated = read(identity, label, percent.value, unit, percent.place)
    hundred = constant("percent in 1", "percent in 1", Decimal(100), "%", "1 = 100 %")
    left = unit.removeprefix("%").removeprefix("/")
    return quotient(f"{identity}/share", f"{label} as a share", f"1/{left}" if left else "1", stated, hundred)


def percent_text(percent: Quantity) -> str:
    """A percentage as it stands, with one sign behind it.

    Parameters
    ----------
    percent : Quantity
        As stated, with or without the sign in its cell.

    Returns
    -------
    str
        ``"5 %"``.
    """
    return f"{percent.text.strip().removesuffix('%').strip()} %"


def one() -> Figure:
    """The number one, as a figure.

    Returns
    -------
    Figure
        Of value 1. [1]
    """
    return constant("one", "one", Decimal(1), "1", "the price itself")


def one_and(identity: str, label: str, part: Figure) -> Figure:
    """One and a share: the factor that adds a share to an amount.

    Parameters
    ----------
    identity, label : str
        Identity and name of the factor.
    part : Figure
        The share. [1]

    Returns
    -------
    Figure
        1 + share. [1]
    """
    return total(identity, label, "1", one(), part)
