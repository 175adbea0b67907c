"""What a look-up answers with: a limit that names its table, row, source and dates; and the unrounded comparison."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date
from decimal import Decimal
from typing import Literal

__all__ = ["Check", "Limit", "check_guarantee"]


@dataclass(frozen=True, kw_only=True)
class Limit:
    """One limit of a regulation.

    Parameters
    ----------
    quantity : str
        "no-load loss", "load loss", "peak efficiency index" or "efficiency".
    bound : {"maximum", "minimum"}
        Which side is allowed.
    value : Decimal
        The limit, exact; to 50 digits where an interpolated value does not end. [unit]
    unit : {"kW", "%"}
        Unit of the value.
    table : str
        Table of the source, such as "I.1" or "US_LIQ_2016".
    row : str
        The row or rows that it was read from, and what was added.
    source : str
        Document with its edition and table.
    in_force_from : date
        First day.
    in_force_to : date or None
        Last day; None where no end is known.
    note : str
        What the header of the table says besides.
    cautions : tuple of str
        What to check before relying on it; empty where nothing is doubtful.
    """

    quantity: str
    bound: Literal["maximum", "minimum"]
    value: Decimal
    unit: Literal["kW", "%"]
    table: str
    row: str
    source: str
    in_force_from: date
    in_force_to: date | None
    note: str
    cautions: tuple[str, ...] = ()

    def is_kept_by(self, guaranteed: Decimal) -> bool:
        """Whether a guaranteed value keeps the limit; unrounded, with zero tolerance.

        Parameters
        ----------
        guaranteed : Decimal
            Guaranteed value, finite. [unit of the limit]

        Returns
        -------
        bool
            True at the limit, and on its allowed side.
        """
        return guaranteed <= self.value if self.bound == "maximum" else guaranteed >= self.value


@dataclass(frozen=True)
class Check:
    """A guaranteed value beside its limit.

    Parameters
    ----------
    limit : Limit
        With table, row, source, dates and cautions.
    guaranteed : Decimal
        As guaranteed. [unit of the limit]
    is_kept : bool
        Whether the guarantee keeps the limit.
    """

    limit: Limit
    guaranteed: Decimal
    is_kept: bool


def check_guarantee(limit: Limit, guaranteed: Decimal) -> Check:
    """Hold a guaranteed value against a limit.

    Parameters
    ----------
    limit : Limit
        The limit.
    guaranteed : Decimal
        Guaranteed value, finite and not negative. [unit of the limit]

    Returns
    -------
    Check
        Both, and whether the limit is kept.

    Raises
    ------
    ValueError
        If the guaranteed value is no finite Decimal, is negative, or is a percentage above 100.
    """
    known = isinstance(guaranteed, Decimal) and guaranteed.is_finite() and guaranteed >= 0
    if not known or (limit.unit == "%" and guaranteed > 100):
        highest = " and at most 100 %" if limit.unit == "%" else ""
        raise ValueError(f"{limit.quantity} must be a Decimal of at least 0 {limit.unit}{highest}, got {guaranteed!r}")
    return Check(limit, guaranteed, limit.is_kept_by(guaranteed))
