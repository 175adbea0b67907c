r"""Closed forms of the year-by-year model with load growth: without a cap, and growing for some years, then constant.

Load growth acts squared on the load loss. The forms are exact where they are 0/0 as written,
(1 + e)(1 + g)^2 = 1 + r, and lose no digits near such a point.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from .arguments import AT_LEAST_0, RATE, Array, checked, finite, fitting_shape, refuse
from .geometric import geometric_sum, log_ratio, with_load_growth

__all__ = ["growing_load_factor", "growth_then_constant_factor"]


def growing_load_factor(
    discount_rate: ArrayLike,
    years: ArrayLike,
    *,
    peak_load_growth: ArrayLike,
    escalation: ArrayLike = 0.0,
    escalate_before_year_1: bool = False,
) -> Array:
    r"""Present value of an energy price times the growing square of a peak load, per unit of their first amounts.

    Parameters
    ----------
    discount_rate : array_like
        Rate :math:`r` as a fraction, above -1. [1/year]
    years : array_like
        Evaluation period :math:`n`, whole years. [year]
    peak_load_growth : array_like
        Growth :math:`g` of the peak load as a fraction, above -1, without a cap. [1/year]
    escalation : array_like
        Escalation :math:`e` of the energy price as a fraction, above -1. [1/year]
    escalate_before_year_1 : bool
        Whether the price is today's, and escalates before the first payment. The load of year 1 never grows before it.

    Returns
    -------
    ndarray
        Factor in the broadcast shape. [year]

    Raises
    ------
    ValueError
        If a rate, escalation or growth is -1 or less, or a period is negative.

    Notes
    -----
    The growing annuity with :math:`(1 + e)(1 + g)^2 - 1` in the place of its growth. An outer factor :math:`1 + e`
    for today's price stays :math:`1 + e`. The energy part of the load rate is
    :math:`8760\, c\, LsF\, \beta_1^2` times the factor.

    Not included: a cap of the load (`growth_then_constant_factor`), the demand charge, another timing than end of
    year.

    References
    ----------
    .. [1] Follows from the geometric series; no publication is claimed.

    Examples
    --------
    >>> round(float(growing_load_factor(0.06, 30, peak_load_growth=0.01)), 5)
    17.13521
    """
    r = checked("discount_rate", discount_rate, RATE)
    n = checked("years", years, AT_LEAST_0)
    g = checked("peak_load_growth", peak_load_growth, RATE)
    e = checked("escalation", escalation, RATE)
    fitting_shape(discount_rate=r, years=n, peak_load_growth=g, escalation=e)
    today = 1 + e if escalate_before_year_1 else np.float64(1)
    return finite(geometric_sum(r, with_load_growth(e, g), n) * today, "growing load factor")


def growth_then_constant_factor(
    discount_rate: ArrayLike,
    years: ArrayLike,
    *,
    growth_years: ArrayLike,
    peak_load_pu: ArrayLike,
    peak_load_growth: ArrayLike,
    constant_load_pu: ArrayLike,
    escalation: ArrayLike = 0.0,
) -> Array:
    r"""Present value of an energy price times the squared peak load, which grows for some years and then stays.

    Parameters
    ----------
    discount_rate : array_like
        Rate :math:`r` as a fraction, above -1. [1/year]
    years : array_like
        Evaluation period :math:`n`, whole years. [year]
    growth_years : array_like
        Years :math:`m` in which the load is :math:`\beta_1 (1 + g)^{t-1}`; whole, at most the period. [year]
    peak_load_pu : array_like
        Peak load of year 1 :math:`\beta_1`. [per unit of the rating]
    peak_load_growth : array_like
        Growth :math:`g` as a fraction, above -1. [1/year]
    constant_load_pu : array_like
        Peak load :math:`\beta_{cap}` of the years after. [per unit of the rating]
    escalation : array_like
        Escalation :math:`e` of the price, whose amount in year 1 is 1. [1/year]

    Returns
    -------
    ndarray
        Factor in the broadcast shape. [year]

    Raises
    ------
    ValueError
        If an argument is out of its bounds, or the years of growth exceed the period.

    Notes
    -----
    .. math:: \beta_1^2 \sum_{t=1}^{m} \frac{[(1 + e)(1 + g)^2]^{t-1}}{(1 + r)^t}
       + \beta_{cap}^2 \sum_{t=m+1}^{n} \frac{(1 + e)^{t-1}}{(1 + r)^t}

    Without escalation the second sum is :math:`a(r, n) - a(r, m)`. The energy part of the load rate is
    :math:`8760\, c\, LsF` times the factor. It equals the year-by-year model with a cap where m is the number of
    years in which the growing load does not exceed the cap.

    Not included: demand charge, another timing than end of year.

    References
    ----------
    .. [1] Follows from the geometric series; no publication is claimed.

    Examples
    --------
    >>> round(float(growth_then_constant_factor(0.06, 35, growth_years=29, peak_load_pu=0.60, peak_load_growth=0.01,
    ...                                         constant_load_pu=0.80)), 6)
    6.637864
    """
    r = checked("discount_rate", discount_rate, RATE)
    n = checked("years", years, AT_LEAST_0)
    m = checked("growth_years", growth_years, AT_LEAST_0)
    first = checked("peak_load_pu", peak_load_pu, AT_LEAST_0)
    g = checked("peak_load_growth", peak_load_growth, RATE)
    last = checked("constant_load_pu", constant_load_pu, AT_LEAST_0)
    e = checked("escalation", escalation, RATE)
    fitting_shape(
        discount_rate=r,
        years=n,
        growth_years=m,
        peak_load_pu=first,
        peak_load_growth=g,
        constant_load_pu=last,
        escalation=e,
    )
    refuse("growth_years", m, m > n, "at most years")
    with np.errstate(over="ignore", invalid="ignore"):
        growing = first**2 * geometric_sum(r, with_load_growth(e, g), m)
        postponed = np.exp(-m * log_ratio(r, e))
        constant = last**2 * postponed * geometric_sum(r, e, n - m)
        return finite(growing + constant, "growth then constant factor")
