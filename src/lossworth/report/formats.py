"""Numbers and dates as the papers print them."""

from __future__ import annotations

from decimal import ROUND_HALF_UP, Context, Decimal

__all__ = ["MINUS", "THIN_SPACE", "amount", "as_stated", "number", "percent", "plain", "significant"]

#: Between groups of three digits; does not break.
THIN_SPACE = "\u202f"
MINUS = "\u2212"

# More digits than any figure of the trail has; never the caller's context, which may have fewer.
_PRINTING = Context(prec=60)


def amount(value: Decimal, places: int = 2) -> str:
    """Money with grouped thousands and a fixed number of places.

    Parameters
    ----------
    value : Decimal
        Amount. [currency]
    places : int
        Digits behind the decimal mark.

    Returns
    -------
    str
        ``"1,103,740.00"``.
    """
    rounded = value.quantize(Decimal(1).scaleb(-places), rounding=ROUND_HALF_UP, context=_PRINTING)
    return f"{rounded if rounded else abs(rounded):,f}".replace("-", MINUS)


def number(value: Decimal) -> str:
    """Number with grouped thousands and exactly the digits that it has.

    Parameters
    ----------
    value : Decimal
        Any number.

    Returns
    -------
    str
        ``"0.058"``, ``"31,500"``.
    """
    value = value.normalize(_PRINTING)
    return f"{value:,f}".replace("-", MINUS)


def as_stated(value: Decimal) -> str:
    """Number with grouped thousands and the digits with which it was stated, trailing zeros included.

    Parameters
    ----------
    value : Decimal
        Any number.

    Returns
    -------
    str
        ``"0.130"``, ``"1.2500"``.
    """
    return f"{value:,f}".replace("-", MINUS)


def significant(value: Decimal, digits: int) -> str:
    """Number with a fixed number of significant digits, trailing zeros cut.

    Parameters
    ----------
    value : Decimal
        Any number.
    digits : int
        Significant digits kept.

    Returns
    -------
    str
        ``"0.0068"``.
    """
    if not value:
        return "0"
    last = Decimal(1).scaleb(value.adjusted() - digits + 1)
    return number(value.quantize(last, rounding=ROUND_HALF_UP, context=_PRINTING))


def percent(value: Decimal, places: int = 2) -> str:
    """Percentage with a fixed number of places.

    Parameters
    ----------
    value : Decimal
        In percent.
    places : int
        Digits behind the decimal mark.

    Returns
    -------
    str
        ``"1.20 %"``.
    """
    return f"{amount(value, places)}{THIN_SPACE}%"


def plain(value: Decimal) -> str:
    """Decimal for JSON: no grouping, no exponent, at most 12 significant digits where the value never was money.

    Parameters
    ----------
    value : Decimal
        Any number.

    Returns
    -------
    str
        ``"3570036.00"``.
    """
    exponent = int(value.as_tuple().exponent)
    if len(value.as_tuple().digits) > 12 and exponent < -6:
        last = Decimal(1).scaleb(max(exponent, value.adjusted() - 11))
        value = value.quantize(last, rounding=ROUND_HALF_UP, context=_PRINTING).normalize(_PRINTING)
    return f"{value:f}"
