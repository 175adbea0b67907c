"""Checks of the engine's arguments: numbers only, within bounds, of shapes that fit together."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

__all__ = [
    "AT_LEAST_0",
    "POSITIVE",
    "RATE",
    "SHARE",
    "Array",
    "Bounds",
    "checked",
    "finite",
    "fitting_shape",
    "plain",
    "single_number",
]

Array = NDArray[np.float64]

#: Elements that a check looks at together, so that checks of many scenarios take no memory of their number.
_CHUNK = 65_536


@dataclass(frozen=True, slots=True)
class Bounds:
    """What an argument may be.

    Parameters
    ----------
    lowest : float
        Lower bound.
    highest : float
        Upper bound; infinite where there is none.
    lowest_included : bool
        Whether the lower bound itself is admissible.
    whole : bool
        Whether only whole numbers are admissible.
    infinity : bool
        Whether positive infinity is admissible, as "no cap".
    """

    lowest: float
    highest: float = np.inf
    lowest_included: bool = True
    whole: bool = False
    infinity: bool = False

    def __str__(self) -> str:
        kind = "a whole number, " if self.whole else ""
        lower = f"{'at least' if self.lowest_included else 'above'} {self.lowest:g}"
        upper = "" if np.isinf(self.highest) else f" and at most {self.highest:g}"
        return f"{kind}{lower}{upper}"

    def broken_by(self, values: Array) -> NDArray[np.bool_]:
        """Which of the values break the bounds.

        Parameters
        ----------
        values : ndarray
            Any shape.

        Returns
        -------
        ndarray of bool
            True where a value is not a number, not finite, not whole or out of bounds.
        """
        admissible = values >= self.lowest if self.lowest_included else values > self.lowest
        admissible &= values <= self.highest
        if not self.infinity:
            admissible &= np.isfinite(values)
        if self.whole:
            admissible &= values == np.floor(values)
        return ~admissible


#: A rate of interest, growth or escalation: a year may not take away everything.
RATE = Bounds(-1, lowest_included=False)
#: A share or a ratio of loads.
SHARE = Bounds(0, 1)
AT_LEAST_0 = Bounds(0)
POSITIVE = Bounds(0, lowest_included=False)


def checked(name: str, value: ArrayLike, bounds: Bounds) -> Array:
    """Argument as an array of floats, after a check of every element.

    Parameters
    ----------
    name : str
        Name of the argument; messages begin with it.
    value : array_like
        Number or array of numbers. Text, dates, truth values, decimals, masked arrays and missing values are refused.
    bounds : Bounds
        What the elements may be.

    Returns
    -------
    ndarray
        The same values; may share memory with the argument, so it is not to be changed in place.

    Raises
    ------
    ValueError
        If the argument is not numeric, is empty, or has an element out of bounds; the message names the argument,
        the value, its index and the bound.

    Examples
    --------
    >>> checked("discount_rate", [0.06, -1.5], RATE)
    Traceback (most recent call last):
        ...
    ValueError: discount_rate: must be above -1, got -1.5 at index 1
    """
    try:
        raw = np.asarray(value)
    except ValueError:
        raise ValueError(f"{name}: must be a number or an array of numbers, got rows of unequal length") from None
    if raw.dtype.kind not in "iuf" or isinstance(value, np.ma.MaskedArray):
        raise ValueError(f"{name}: must be a number or an array of numbers, got {_short(value)}")
    if raw.size == 0:
        raise ValueError(f"{name}: must have at least one value, got an empty array")
    values = raw.astype(np.float64, copy=False)
    if not _everywhere(lambda part: ~bounds.broken_by(part), values):
        refuse(name, values, bounds.broken_by(values), str(bounds))
    return values


def _everywhere(rule: Callable[[Array], NDArray[np.bool_]], values: Array) -> bool:
    """Whether a rule holds for every element, a part at a time."""
    flat = values.reshape(-1) if values.flags.c_contiguous else values.flat
    return all(rule(flat[start : start + _CHUNK]).all() for start in range(0, values.size, _CHUNK))


def refuse(name: str, values: Array, broken: NDArray[np.bool_], rule: str) -> None:
    """Stop at the first value that breaks a rule.

    Parameters
    ----------
    name : str
        Name of the argument.
    values : ndarray
        Its values.
    broken : ndarray of bool
        Where the rule is broken; may have a larger shape that the values broadcast to.
    rule : str
        What the values must be.

    Raises
    ------
    ValueError
        If it is broken anywhere; the message names the argument, the rule, the value and its index.
    """
    if not np.any(broken):
        return
    index = tuple(int(i) for i in np.argwhere(broken)[0])
    where = f" at index {', '.join(map(str, index))}" if index else ""
    value = float(np.broadcast_to(values, np.shape(broken))[index])
    raise ValueError(f"{name}: must be {rule}, got {plain(value)}{where}")


def plain(value: float) -> str:
    """Number as a message shows it: all its digits, and none more.

    Parameters
    ----------
    value : float
        Any number.

    Returns
    -------
    str
        ``"0.6"``, ``"-1"``.
    """
    return repr(value).removesuffix(".0")


def _short(value: object) -> str:
    text = repr(value)
    return text if len(text) <= 40 else text[:39] + "…"


def fitting_shape(**arrays: Array) -> tuple[int, ...]:
    """Common shape of several arguments.

    Parameters
    ----------
    **arrays : ndarray
        Arguments by name.

    Returns
    -------
    tuple of int
        Shape to which all of them broadcast.

    Raises
    ------
    ValueError
        If there is none; the message gives name and shape of every argument that is not a single number.

    Examples
    --------
    >>> fitting_shape(discount_rate=np.zeros((4, 1)), years=np.zeros(3))
    (4, 3)
    """
    try:
        return np.broadcast_shapes(*(array.shape for array in arrays.values()))
    except ValueError:
        shapes = ", ".join(f"{name} {array.shape}" for name, array in arrays.items() if array.ndim)
        raise ValueError(f"shapes do not fit together: {shapes}") from None


def finite(result: ArrayLike, what: str) -> Array:
    """Result as an array, refused where it left the range of floating point.

    Parameters
    ----------
    result : array_like
        Computed with overflow warnings off.
    what : str
        Name of the result.

    Returns
    -------
    ndarray
        The result, unchanged.

    Raises
    ------
    ValueError
        If an element is infinite or not a number.
    """
    values = np.asarray(result, dtype=np.float64)
    if not _everywhere(np.isfinite, values):
        raise ValueError(f"{what}: exceeds the range of floating-point numbers for these arguments")
    return values


def single_number(name: str, values: Array) -> int:
    """Whole number out of an argument that may not vary over scenarios.

    Parameters
    ----------
    name : str
        Name of the argument.
    values : ndarray
        Whole numbers, already checked.

    Returns
    -------
    int
        The number.

    Raises
    ------
    ValueError
        If there are several.
    """
    if values.size != 1:
        raise ValueError(f"{name}: must be a single number here, got an array of shape {values.shape}")
    return int(values.item())
