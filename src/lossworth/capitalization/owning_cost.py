r"""Cost of guaranteed losses at given rates, and total owning cost, for many scenarios at once.

Floating point, for studies and simulations. What ranks bids is computed elsewhere, in decimals, rounded as the
tender says. The references of the docstrings:

[IEEE C57.120] IEEE guide for loss evaluation of power transformers and reactors. From memory.
[RUS 1724E-301] Rural Utilities Service, Bulletin 1724E-301, 1997. Symbols read, equations from memory.
[IEC TS 60076-20] Power transformers, part 20: energy efficiency. From memory.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from .arguments import AT_LEAST_0, Array, checked, finite, fitting_shape, refuse
from .rates import Rates

__all__ = ["LossCosts", "iec_total_cost_of_ownership", "loss_costs", "total_owning_cost"]


@dataclass(frozen=True, slots=True)
class LossCosts:
    """Capitalized losses of one unit.

    Parameters
    ----------
    no_load, load, auxiliary : ndarray
        Present value of each loss. [currency]
    """

    no_load: Array
    load: Array
    auxiliary: Array


def loss_costs(
    rates: Rates, *, no_load_loss_kw: ArrayLike, load_loss_kw: ArrayLike, auxiliary_loss_kw: ArrayLike
) -> LossCosts:
    r"""Capitalized no-load, load and auxiliary loss.

    Parameters
    ----------
    rates : Rates
        A, B and C. [currency/kW]
    no_load_loss_kw : array_like
        Guaranteed :math:`P_0`, at least 0. [kW]
    load_loss_kw : array_like
        Guaranteed :math:`P_k` at the rating and reference temperature that the rate is meant for, at least 0. [kW]
    auxiliary_loss_kw : array_like
        Guaranteed :math:`P_{aux}`, at least 0. It has no default: a loss that is not stated is not zero. [kW]

    Returns
    -------
    LossCosts
        Each in the broadcast shape of rate and loss. [currency]

    Raises
    ------
    ValueError
        If a loss is negative or not finite, or shapes do not fit together.

    Notes
    -----
    .. math:: A\, P_0, \qquad B\, P_k, \qquad C\, P_{aux}

    References
    ----------
    .. [1] [IEEE C57.120], [RUS 1724E-301]; equations from memory.

    Examples
    --------
    >>> import numpy as np
    >>> rates = Rates(np.array(2450.0), np.array(1304.0), np.array(756.0))
    >>> costs = loss_costs(rates, no_load_loss_kw=59, load_loss_kw=224, auxiliary_loss_kw=2.0)
    >>> float(costs.no_load), float(costs.load), float(costs.auxiliary)
    (144550.0, 292096.0, 1512.0)
    """
    p0 = checked("no_load_loss_kw", no_load_loss_kw, AT_LEAST_0)
    pk = checked("load_loss_kw", load_loss_kw, AT_LEAST_0)
    aux = checked("auxiliary_loss_kw", auxiliary_loss_kw, AT_LEAST_0)
    fitting_shape(no_load_rate=rates.no_load, no_load_loss_kw=p0, load_loss_kw=pk, auxiliary_loss_kw=aux)
    with np.errstate(over="ignore"):
        return LossCosts(
            finite(rates.no_load * p0, "cost of the no-load loss"),
            finite(rates.load * pk, "cost of the load loss"),
            finite(rates.auxiliary * aux, "cost of the auxiliary loss"),
        )


def total_owning_cost(evaluated_price: ArrayLike, costs: LossCosts) -> Array:
    r"""Evaluated price plus capitalized losses.

    Parameters
    ----------
    evaluated_price : array_like
        Price of one unit in the currency of the rates, at least 0. [currency]
    costs : LossCosts
        Capitalized losses of one unit. [currency]

    Returns
    -------
    ndarray
        :math:`TOC`, in the broadcast shape. [currency]

    Raises
    ------
    ValueError
        If a price is negative or not finite, or shapes do not fit together.

    Notes
    -----
    .. math:: TOC = price + A\, P_0 + B\, P_k + C\, P_{aux}

    Not included: rounding.

    References
    ----------
    .. [1] [IEEE C57.120], [RUS 1724E-301]; equations from memory.

    Examples
    --------
    >>> import numpy as np
    >>> rates = Rates(np.array(2450.0), np.array(1304.0), np.array(756.0))
    >>> costs = loss_costs(rates, no_load_loss_kw=[59, 53], load_loss_kw=[224, 218], auxiliary_loss_kw=[2.0, 2.5])
    >>> total_owning_cost([424500, 436000], costs).tolist()
    [862658.0, 852012.0]
    """
    price = checked("evaluated_price", evaluated_price, AT_LEAST_0)
    fitting_shape(evaluated_price=price, losses=costs.no_load + costs.load + costs.auxiliary)
    return finite(price + costs.no_load + costs.load + costs.auxiliary, "total owning cost")


def iec_total_cost_of_ownership(
    evaluated_price: ArrayLike,
    *,
    no_load_rate: ArrayLike,
    load_rate: ArrayLike,
    no_load_loss_kw: ArrayLike,
    load_loss_kw: ArrayLike,
    cooling_power_at_no_load_kw: ArrayLike,
    cooling_power_at_rated_load_kw: ArrayLike,
) -> Array:
    r"""Total cost of ownership where the cooling power is valued through A and B, after IEC.

    Parameters
    ----------
    evaluated_price : array_like
        Price of one unit :math:`IC`, at least 0. [currency]
    no_load_rate, load_rate : array_like
        :math:`A` and :math:`B`, at least 0. [currency/kW]
    no_load_loss_kw, load_loss_kw : array_like
        :math:`P_0` and :math:`P_k`, at least 0. [kW]
    cooling_power_at_no_load_kw : array_like
        :math:`P_{c0}`, at least 0; 0 for ONAN and ONAN/ONAF. [kW]
    cooling_power_at_rated_load_kw : array_like
        :math:`P_{cs}`, at least the cooling power at no load. [kW]

    Returns
    -------
    ndarray
        :math:`TCO`, in the broadcast shape. [currency]

    Raises
    ------
    ValueError
        If an argument is negative, or less cooling runs at rated load than at no load.

    Notes
    -----
    .. math:: TCO = IC + A\,(P_0 + P_{c0}) + B\,(P_k + P_{cs} - P_{c0})

    There is no rate C beside this form: cooling is valued once.

    References
    ----------
    .. [1] [IEC TS 60076-20]; equation from memory.

    Examples
    --------
    >>> float(iec_total_cost_of_ownership(655000, no_load_rate=11600, load_rate=2010, no_load_loss_kw=15.2,
    ...     load_loss_kw=134, cooling_power_at_no_load_kw=0, cooling_power_at_rated_load_kw=2))
    1104680.0
    """
    price = checked("evaluated_price", evaluated_price, AT_LEAST_0)
    a = checked("no_load_rate", no_load_rate, AT_LEAST_0)
    b = checked("load_rate", load_rate, AT_LEAST_0)
    p0 = checked("no_load_loss_kw", no_load_loss_kw, AT_LEAST_0)
    pk = checked("load_loss_kw", load_loss_kw, AT_LEAST_0)
    pc0 = checked("cooling_power_at_no_load_kw", cooling_power_at_no_load_kw, AT_LEAST_0)
    pcs = checked("cooling_power_at_rated_load_kw", cooling_power_at_rated_load_kw, AT_LEAST_0)
    fitting_shape(
        evaluated_price=price,
        no_load_rate=a,
        load_rate=b,
        no_load_loss_kw=p0,
        load_loss_kw=pk,
        cooling_power_at_no_load_kw=pc0,
        cooling_power_at_rated_load_kw=pcs,
    )
    refuse("cooling_power_at_rated_load_kw", pcs, pcs < pc0, "at least cooling_power_at_no_load_kw")
    with np.errstate(over="ignore"):
        return finite(price + a * (p0 + pc0) + b * (pk + pcs - pc0), "total cost of ownership")
