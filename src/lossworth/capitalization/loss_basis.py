r"""Losses on one basis: another rating, another reference temperature, total loss against load loss.

A converted figure is an estimate that binds no bidder until the bidder confirms it. The references of the docstrings:

[IEC 60076-1] Power transformers, part 1, resistance and load loss at reference temperature. From memory.
[IEEE C57.12.90] IEEE test code for liquid-immersed transformers. From memory.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from .arguments import AT_LEAST_0, POSITIVE, Array, Bounds, checked, finite, fitting_shape, refuse

__all__ = [
    "ALUMINUM",
    "COPPER",
    "COPPER_IEEE",
    "impedance_at_rating",
    "load_loss_at_rating",
    "load_loss_at_temperature",
    "load_loss_at_temperature_unsplit",
    "load_loss_of_total",
]

#: T0: how far below 0 degrees Celsius the resistance of the metal, drawn on as a straight line, would be zero. [K]
COPPER = 235.0  # [IEC 60076-1], from memory
COPPER_IEEE = 234.5  # [IEEE C57.12.90], from memory
ALUMINUM = 225.0  # [IEC 60076-1] and [IEEE C57.12.90], from memory

_TEMPERATURE = Bounds(-50, 300)
_CONSTANT = Bounds(200, 260)


def load_loss_at_rating(load_loss_kw: ArrayLike, *, from_rating_kva: ArrayLike, to_rating_kva: ArrayLike) -> Array:
    r"""Load loss of the same windings at another rating.

    Parameters
    ----------
    load_loss_kw : array_like
        :math:`P_k` at the first rating, at least 0. [kW]
    from_rating_kva, to_rating_kva : array_like
        :math:`S_1` and :math:`S_2`, above 0. [kVA]

    Returns
    -------
    ndarray
        :math:`P_k` at the second rating, in the broadcast shape. [kW]

    Raises
    ------
    ValueError
        If a loss is negative or a rating is 0 or less.

    Notes
    -----
    .. math:: P_k(S_2) = P_k(S_1) \left(\frac{S_2}{S_1}\right)^2

    Not included: another reference temperature, which a unit with two cooling stages may have too.

    References
    ----------
    .. [1] [IEC 60076-1]; from memory.

    Examples
    --------
    Invented data: a unit of the demo, stated at 20 MVA.

    >>> round(float(load_loss_at_rating(57.2, from_rating_kva=20000, to_rating_kva=31500)), 3)
    141.892
    """
    loss = checked("load_loss_kw", load_loss_kw, AT_LEAST_0)
    ratio = _ratio(from_rating_kva, to_rating_kva)
    fitting_shape(load_loss_kw=loss, ratings=ratio)
    return finite(loss * ratio**2, "load loss")


def impedance_at_rating(impedance_percent: ArrayLike, *, from_rating_kva: ArrayLike, to_rating_kva: ArrayLike) -> Array:
    r"""Short-circuit impedance of the same windings, in percent of another rating.

    Parameters
    ----------
    impedance_percent : array_like
        :math:`Z` on the first rating, at least 0. [%]
    from_rating_kva, to_rating_kva : array_like
        :math:`S_1` and :math:`S_2`, above 0. [kVA]

    Returns
    -------
    ndarray
        :math:`Z` on the second rating, in the broadcast shape. [%]

    Raises
    ------
    ValueError
        If an impedance is negative or a rating is 0 or less.

    Notes
    -----
    .. math:: Z(S_2) = Z(S_1) \frac{S_2}{S_1}

    An impedance far from the specified one, which this brings near it, is the usual sign of a load loss on the wrong
    rating.

    References
    ----------
    .. [1] [IEC 60076-1]; from memory.

    Examples
    --------
    >>> round(float(impedance_at_rating(7.9, from_rating_kva=20000, to_rating_kva=31500)), 2)
    12.44
    """
    impedance = checked("impedance_percent", impedance_percent, AT_LEAST_0)
    ratio = _ratio(from_rating_kva, to_rating_kva)
    fitting_shape(impedance_percent=impedance, ratings=ratio)
    return finite(impedance * ratio, "impedance")


def load_loss_at_temperature(
    resistive_loss_kw: ArrayLike,
    stray_loss_kw: ArrayLike,
    *,
    from_temperature_c: ArrayLike,
    to_temperature_c: ArrayLike,
    metal_constant_c: ArrayLike,
) -> Array:
    r"""Load loss at another reference temperature, from its two parts.

    Parameters
    ----------
    resistive_loss_kw : array_like
        :math:`I^2R` part at the first temperature, at least 0. [kW]
    stray_loss_kw : array_like
        Stray part at the first temperature (eddy currents in windings and metal parts), at least 0. [kW]
    from_temperature_c, to_temperature_c : array_like
        :math:`T_1` and :math:`T_2`, -50 to 300. [degree Celsius]
    metal_constant_c : array_like
        :math:`T_0` of the winding metal: `COPPER`, `COPPER_IEEE` or `ALUMINUM`. [degree Celsius]

    Returns
    -------
    ndarray
        :math:`P_k` at the second temperature, in the broadcast shape. [kW]

    Raises
    ------
    ValueError
        If an argument is out of its bounds.

    Notes
    -----
    .. math:: P_k(T_2) = I^2R\, \frac{T_0 + T_2}{T_0 + T_1} + P_{stray}\, \frac{T_0 + T_1}{T_0 + T_2}

    Not included: windings of different metals, which are converted one by one.

    References
    ----------
    .. [1] [IEC 60076-1], [IEEE C57.12.90]; from memory.

    Examples
    --------
    >>> round(float(load_loss_at_temperature(6.6, 0.7, from_temperature_c=75, to_temperature_c=85,
    ...                                      metal_constant_c=COPPER)), 4)
    7.491
    """
    resistive = checked("resistive_loss_kw", resistive_loss_kw, AT_LEAST_0)
    stray = checked("stray_loss_kw", stray_loss_kw, AT_LEAST_0)
    first = checked("from_temperature_c", from_temperature_c, _TEMPERATURE)
    second = checked("to_temperature_c", to_temperature_c, _TEMPERATURE)
    constant = checked("metal_constant_c", metal_constant_c, _CONSTANT)
    fitting_shape(
        resistive_loss_kw=resistive,
        stray_loss_kw=stray,
        from_temperature_c=first,
        to_temperature_c=second,
        metal_constant_c=constant,
    )
    resistance_ratio = (constant + second) / (constant + first)
    return finite(resistive * resistance_ratio + stray / resistance_ratio, "load loss")


def load_loss_at_temperature_unsplit(
    load_loss_kw: ArrayLike,
    *,
    from_temperature_c: ArrayLike,
    to_temperature_c: ArrayLike,
    metal_constant_c: ArrayLike,
) -> Array:
    r"""Load loss at another reference temperature where its split is not known: an estimate.

    Parameters
    ----------
    load_loss_kw : array_like
        :math:`P_k` at the first temperature, at least 0. [kW]
    from_temperature_c, to_temperature_c : array_like
        :math:`T_1` and :math:`T_2`, -50 to 300. [degree Celsius]
    metal_constant_c : array_like
        :math:`T_0` of the winding metal: `COPPER`, `COPPER_IEEE` or `ALUMINUM`. [degree Celsius]

    Returns
    -------
    ndarray
        :math:`P_k` at the second temperature as if all of it were :math:`I^2R`, in the broadcast shape. [kW]

    Raises
    ------
    ValueError
        If an argument is out of its bounds.

    Notes
    -----
    .. math:: P_k(T_2) \approx P_k(T_1)\, \frac{T_0 + T_2}{T_0 + T_1}

    An upper bound when converting to a higher temperature, a lower bound to a lower one, since the stray part moves
    the other way. Whoever uses it marks the figure as an estimate.

    References
    ----------
    .. [1] [IEC 60076-1], [IEEE C57.12.90]; from memory.

    Examples
    --------
    >>> round(float(load_loss_at_temperature_unsplit(7.3, from_temperature_c=75, to_temperature_c=85,
    ...                                              metal_constant_c=COPPER)), 4)
    7.5355
    """
    loss = checked("load_loss_kw", load_loss_kw, AT_LEAST_0)
    return load_loss_at_temperature(
        loss,
        0.0,
        from_temperature_c=from_temperature_c,
        to_temperature_c=to_temperature_c,
        metal_constant_c=metal_constant_c,
    )


def load_loss_of_total(total_loss_kw: ArrayLike, no_load_loss_kw: ArrayLike) -> Array:
    r"""Load loss where the bidder states the total.

    Parameters
    ----------
    total_loss_kw : array_like
        No-load plus load loss, above the no-load loss. [kW]
    no_load_loss_kw : array_like
        :math:`P_0`, at least 0. [kW]

    Returns
    -------
    ndarray
        :math:`P_k`, in the broadcast shape. [kW]

    Raises
    ------
    ValueError
        If a loss is negative, or a total is not above its no-load loss.

    Notes
    -----
    .. math:: P_k = P_{total} - P_0

    References
    ----------
    .. [1] Definition of the total loss; no publication is claimed.

    Examples
    --------
    Invented data: a unit of the demo.

    >>> round(float(load_loss_of_total(8.040, 0.640)), 3)
    7.4
    """
    total = checked("total_loss_kw", total_loss_kw, POSITIVE)
    p0 = checked("no_load_loss_kw", no_load_loss_kw, AT_LEAST_0)
    fitting_shape(total_loss_kw=total, no_load_loss_kw=p0)
    refuse("total_loss_kw", total, total <= p0, "above no_load_loss_kw")
    return np.asarray(total - p0)


def _ratio(from_rating_kva: ArrayLike, to_rating_kva: ArrayLike) -> Array:
    first = checked("from_rating_kva", from_rating_kva, POSITIVE)
    second = checked("to_rating_kva", to_rating_kva, POSITIVE)
    fitting_shape(from_rating_kva=first, to_rating_kva=second)
    return np.asarray(second / first)
