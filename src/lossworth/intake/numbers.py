"""Which numbers can mean anything at all, and a float as the decimal that a person typed."""

from __future__ import annotations

from decimal import Decimal

__all__ = ["LARGEST", "SMALLEST", "decimal_of_float", "is_beyond_meaning"]

#: No price, loss or rate of a transformer tender reaches this, in any currency. From common practice, no source.
LARGEST = Decimal(10) ** 15
#: Nothing but zero is nearer to zero than this.
SMALLEST = Decimal(10) ** -12
_MOST_DIGITS = 40


def is_beyond_meaning(number: Decimal) -> bool:
    """Whether a number is too large, too small, too long or no number at all.

    Parameters
    ----------
    number : Decimal
        Any decimal, also an infinite one.

    Returns
    -------
    bool
        True for what no figure of a tender can be. Asked before any arithmetic: the whole part of ``1e999999999``
        alone would fill the memory.
    """
    if not number.is_finite():
        return True
    if len(number.as_tuple().digits) > _MOST_DIGITS:
        return True
    # the exponent alone: abs() of such a number may overflow
    return bool(number) and not SMALLEST.adjusted() <= number.adjusted() < LARGEST.adjusted()


def decimal_of_float(value: float) -> Decimal:
    """Shortest decimal behind a binary number of a spreadsheet.

    Parameters
    ----------
    value : float
        As a workbook stores it.

    Returns
    -------
    Decimal
        With 15 significant digits, which is what a spreadsheet shows and keeps.

    Examples
    --------
    >>> decimal_of_float(0.1 + 0.2)
    Decimal('0.3')
    """
    return Decimal(format(value, ".15g"))
