"""One figure of the trail, ready to be shown, unfolded or written as a formula."""

from __future__ import annotations

from dataclasses import dataclass
from decimal import Decimal

__all__ = ["Fact", "ShownFigure"]


@dataclass(frozen=True, slots=True)
class ShownFigure:
    """One figure of the trail, ready to be shown, unfolded or written as a formula.

    Parameters
    ----------
    id : str
        Identity; operands refer to it.
    label : str
        What it is.
    value : Decimal
        Exact value, after rounding where there is one.
    unit : str
        Its unit; ``"1"`` for a pure number.
    operator : str
        ``"read"``, ``"rule"``, ``"constant"`` for leaves; ``"product"``, ``"quotient"``, ``"sum"``, ``"difference"``,
        ``"rounded"`` for arithmetic; ``"year table"`` for the sum of a column of a year table.
    operands : tuple of str
        Ids of the figures it was computed from, in writing order; for a year table its inputs.
    rounding_places : int or None
        Digits behind the decimal mark to which the result was rounded.
    rounding_mode : str or None
        ``"half away from zero"`` or ``"down"``.
    source : str
        Place, rule or definition in words; for arithmetic an empty text.
    text : str
        The value as printed, without unit.
    arithmetic : str
        One line that a clerk can follow with a calculator; for leaves the source in words.
    """

    id: str
    label: str
    value: Decimal
    unit: str
    operator: str
    operands: tuple[str, ...]
    rounding_places: int | None
    rounding_mode: str | None
    source: str
    text: str
    arithmetic: str


@dataclass(frozen=True, slots=True)
class Fact:
    """Information beside the money: never part of an amount.

    Parameters
    ----------
    label : str
        What it is.
    text : str
        The value as printed.
    unit : str
        Unit, empty for a pure number.
    value : Decimal
        The value.
    """

    label: str
    text: str
    unit: str
    value: Decimal
