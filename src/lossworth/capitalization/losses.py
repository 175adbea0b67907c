r"""Losses and efficiency at a load: part-load loss, efficiency in both power bases, peak efficiency index.

The references of the docstrings:

[EU 548/2014] Commission Regulation (EU) No 548/2014, peak efficiency index. Formula from memory; its Tables I.1 and
I.7, read, agree with it.
[Bird] J. Bird, Electrical Circuit Theory and Technology, Problems 20.16 and 20.17. Inputs read, answers from memory.
[10 CFR 431] United States, Code of Federal Regulations, Title 10, Part 431. From memory.
[IEC 60076] Power transformers. From memory.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from .arguments import AT_LEAST_0, POSITIVE, Array, Bounds, checked, finite, fitting_shape, refuse

__all__ = [
    "efficiency_of_input",
    "efficiency_of_output",
    "load_of_greatest_efficiency",
    "part_load_loss",
    "peak_efficiency_index",
]

_POWER_FACTOR = Bounds(0, 1, lowest_included=False)


def part_load_loss(no_load_loss_kw: ArrayLike, load_loss_kw: ArrayLike, load_pu: ArrayLike) -> Array:
    r"""Loss at a load.

    Parameters
    ----------
    no_load_loss_kw : array_like
        :math:`P_0`, at least 0. [kW]
    load_loss_kw : array_like
        :math:`P_k` at rated current, at least 0. [kW]
    load_pu : array_like
        Current over rated current :math:`x`, at least 0. [per unit of the rating of the load loss]

    Returns
    -------
    ndarray
        :math:`P(x)`, in the broadcast shape. [kW]

    Raises
    ------
    ValueError
        If an argument is negative or not finite.

    Notes
    -----
    .. math:: P(x) = P_0 + x^2 P_k

    Not included: fans and pumps, the voltage's effect on the no-load loss, winding temperature at part load.

    References
    ----------
    .. [1] [IEC 60076]; from memory.

    Examples
    --------
    >>> float(part_load_loss(1.0, 1.5, 0.5))
    1.375
    """
    p0 = checked("no_load_loss_kw", no_load_loss_kw, AT_LEAST_0)
    pk = checked("load_loss_kw", load_loss_kw, AT_LEAST_0)
    x = checked("load_pu", load_pu, AT_LEAST_0)
    fitting_shape(no_load_loss_kw=p0, load_loss_kw=pk, load_pu=x)
    with np.errstate(over="ignore"):
        return finite(p0 + x**2 * pk, "loss")


def efficiency_of_output(
    no_load_loss_kw: ArrayLike,
    load_loss_kw: ArrayLike,
    *,
    rated_power_kva: ArrayLike,
    load_pu: ArrayLike = 1.0,
    power_factor: ArrayLike = 1.0,
) -> Array:
    r"""Efficiency where rated power counts as output: the American base.

    Parameters
    ----------
    no_load_loss_kw : array_like
        :math:`P_0`, at least 0. [kW]
    load_loss_kw : array_like
        :math:`P_k` at rated current, at least 0. [kW]
    rated_power_kva : array_like
        :math:`S_r`, above 0: the rating on which the load loss is based. [kVA]
    load_pu : array_like
        Load :math:`x`, above 0. [per unit of the rating]
    power_factor : array_like
        :math:`\cos\varphi`, above 0 and at most 1. [1]

    Returns
    -------
    ndarray
        Efficiency as a fraction, in the broadcast shape. [1]

    Raises
    ------
    ValueError
        If an argument is out of its bounds.

    Notes
    -----
    .. math:: \eta = \frac{P_{out}}{P_{out} + P(x)}, \qquad P_{out} = x\, S_r \cos\varphi

    Not included: reference conditions; the limits of [1]_ hold at 50 % load and 55 degrees Celsius, and are checked on
    the efficiency that the bidder declares.

    References
    ----------
    .. [1] [10 CFR 431], liquid-immersed distribution transformers; from memory.
    .. [2] [Bird], Problems 20.16 and 20.17.

    Examples
    --------
    >>> eta = efficiency_of_output(1.0, 1.5, rated_power_kva=200, load_pu=[1, 0.5], power_factor=0.85)
    >>> (100 * eta).round(2).tolist()
    [98.55, 98.41]
    """
    power, loss = _power_and_loss(no_load_loss_kw, load_loss_kw, rated_power_kva, load_pu, power_factor)
    return np.asarray(power / (power + loss))


def efficiency_of_input(
    no_load_loss_kw: ArrayLike,
    load_loss_kw: ArrayLike,
    *,
    rated_power_kva: ArrayLike,
    load_pu: ArrayLike = 1.0,
    power_factor: ArrayLike = 1.0,
) -> Array:
    r"""Efficiency where rated power counts as input: the IEC base.

    Parameters
    ----------
    no_load_loss_kw : array_like
        :math:`P_0`, at least 0. [kW]
    load_loss_kw : array_like
        :math:`P_k` at rated current, at least 0. [kW]
    rated_power_kva : array_like
        :math:`S_r`, above 0: the rating on which the load loss is based. [kVA]
    load_pu : array_like
        Load :math:`x`, above 0. [per unit of the rating]
    power_factor : array_like
        :math:`\cos\varphi`, above 0 and at most 1. [1]

    Returns
    -------
    ndarray
        Efficiency as a fraction, in the broadcast shape. [1]

    Raises
    ------
    ValueError
        If an argument is out of its bounds, or the loss exceeds the input.

    Notes
    -----
    .. math:: \eta = 1 - \frac{P(x)}{P_{in}}, \qquad P_{in} = x\, S_r \cos\varphi

    Below the American base by about the square of the relative loss: never mix the two.

    References
    ----------
    .. [1] [IEC 60076]; from memory.

    Examples
    --------
    >>> round(100 * float(efficiency_of_input(1.0, 1.5, rated_power_kva=200, power_factor=0.85)), 2)
    98.53
    """
    power, loss = _power_and_loss(no_load_loss_kw, load_loss_kw, rated_power_kva, load_pu, power_factor)
    refuse("loss of no_load_loss_kw and load_loss_kw", loss, loss > power, "at most the input")
    return np.asarray(1 - loss / power)


def load_of_greatest_efficiency(no_load_loss_kw: ArrayLike, load_loss_kw: ArrayLike) -> Array:
    r"""Load at which the efficiency is greatest.

    Parameters
    ----------
    no_load_loss_kw : array_like
        :math:`P_0`, at least 0. [kW]
    load_loss_kw : array_like
        :math:`P_k`, above 0. [kW]

    Returns
    -------
    ndarray
        :math:`x`, in the broadcast shape; may exceed 1. [per unit of the rating of the load loss]

    Raises
    ------
    ValueError
        If the no-load loss is negative or the load loss is 0 or less.

    Notes
    -----
    .. math:: x = \sqrt{P_0 / P_k}

    where no-load loss and load loss at that load are equal. It is the same in both power bases.

    References
    ----------
    .. [1] [EU 548/2014], the load k_PEI without cooling power.

    Examples
    --------
    >>> float(load_of_greatest_efficiency(0.25, 1.0))
    0.5
    """
    p0 = checked("no_load_loss_kw", no_load_loss_kw, AT_LEAST_0)
    pk = checked("load_loss_kw", load_loss_kw, POSITIVE)
    fitting_shape(no_load_loss_kw=p0, load_loss_kw=pk)
    return finite(np.sqrt(p0 / pk), "load of greatest efficiency")


def peak_efficiency_index(
    no_load_loss_kw: ArrayLike,
    load_loss_kw: ArrayLike,
    *,
    rated_power_kva: ArrayLike,
    cooling_power_at_no_load_kw: ArrayLike = 0.0,
) -> Array:
    r"""Peak efficiency index.

    Parameters
    ----------
    no_load_loss_kw : array_like
        :math:`P_0`, at least 0. [kW]
    load_loss_kw : array_like
        :math:`P_k` at reference temperature, above 0. [kW]
    rated_power_kva : array_like
        :math:`S_r`, above 0: the rating on which the load loss is based. [kVA]
    cooling_power_at_no_load_kw : array_like
        :math:`P_{c0}`, at least 0: power of the cooling that no-load operation needs, 0 for ONAN and ONAN/ONAF. [kW]

    Returns
    -------
    ndarray
        :math:`PEI` as a fraction, in the broadcast shape. [1]

    Raises
    ------
    ValueError
        If an argument is out of its bounds.

    Notes
    -----
    .. math:: PEI = 1 - \frac{2 \sqrt{(P_0 + P_{c0})\, P_k}}{S_r}

    reached at the load :math:`\sqrt{(P_0 + P_{c0}) / P_k}`. The fan power of an ONAN/ONAF unit is no part of
    :math:`P_{c0}`.

    Not included: the cooling power needed at the load of the index, which the amended form of 2019 adds by iteration.

    References
    ----------
    .. [1] [EU 548/2014].

    Examples
    --------
    Invented data: a unit of 31.5 MVA of the demo.

    >>> round(100 * float(peak_efficiency_index(15.8, 139, rated_power_kva=31500)), 4)
    99.7025
    """
    p0 = checked("no_load_loss_kw", no_load_loss_kw, AT_LEAST_0)
    pk = checked("load_loss_kw", load_loss_kw, POSITIVE)
    sr = checked("rated_power_kva", rated_power_kva, POSITIVE)
    pc0 = checked("cooling_power_at_no_load_kw", cooling_power_at_no_load_kw, AT_LEAST_0)
    fitting_shape(no_load_loss_kw=p0, load_loss_kw=pk, rated_power_kva=sr, cooling_power_at_no_load_kw=pc0)
    with np.errstate(over="ignore"):
        return finite(1 - 2 * np.sqrt((p0 + pc0) * pk) / sr, "peak efficiency index")


def _power_and_loss(
    no_load_loss_kw: ArrayLike,
    load_loss_kw: ArrayLike,
    rated_power_kva: ArrayLike,
    load_pu: ArrayLike,
    power_factor: ArrayLike,
) -> tuple[Array, Array]:
    """Power x Sr cos(phi) and loss at the load, whichever side of the unit the power is then taken for."""
    sr = checked("rated_power_kva", rated_power_kva, POSITIVE)
    x = checked("load_pu", load_pu, POSITIVE)
    cosine = checked("power_factor", power_factor, _POWER_FACTOR)
    loss = part_load_loss(no_load_loss_kw, load_loss_kw, x)
    fitting_shape(rated_power_kva=sr, load_pu=x, power_factor=cosine, losses=loss)
    return finite(x * sr * cosine, "power"), loss
