"""Present values of yearly payments: discounting, annuities, growth, levelizing, real and nominal rates.

Every closed form is exact where it is 0/0 as written (r = 0, e = r) and loses no digits near such a point. The
references of the docstrings:

[Masters 2004] G. M. Masters, Renewable and Efficient Electric Power Systems, Wiley, 2004, section 5.3. Read.
[Johnson] G. L. Johnson, Wind Energy Systems, chapter 8. Read.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from .arguments import AT_LEAST_0, POSITIVE, RATE, SHARE, Array, checked, finite, fitting_shape
from .geometric import geometric_sum

__all__ = [
    "annuity_factor",
    "capital_recovery_factor",
    "discount_factor",
    "growing_annuity_factor",
    "levelizing_factor",
    "mid_year_factor",
    "nominal_rate",
    "real_rate",
]


def discount_factor(discount_rate: ArrayLike, year: ArrayLike, *, years_before_end: ArrayLike = 0.0) -> Array:
    r"""Present value of 1 paid in a year.

    Parameters
    ----------
    discount_rate : array_like
        Rate :math:`r` as a fraction, above -1. [1/year]
    year : array_like
        Year :math:`t`, counted from 1; 0 is the date of valuation. [year]
    years_before_end : array_like
        Timing :math:`\varphi`: 0 end of year, 0.5 mid-year, 1 start of year. [year]

    Returns
    -------
    ndarray
        :math:`DF_t`, in the broadcast shape. [1]

    Raises
    ------
    ValueError
        If a rate is -1 or less, a year is negative, or the timing lies outside 0 to 1.

    Notes
    -----
    .. math:: DF_t = (1 + r)^{-(t - \varphi)}

    Not included: rates that differ from year to year, payments spread over the year.

    References
    ----------
    .. [1] [Masters 2004], present value of a future payment.

    Examples
    --------
    >>> round(float(discount_factor(0.06, 10)), 6)
    0.558395
    >>> bool(discount_factor(0.06, 1, years_before_end=1) == 1)
    True
    """
    r = checked("discount_rate", discount_rate, RATE)
    t = checked("year", year, AT_LEAST_0)
    phi = checked("years_before_end", years_before_end, SHARE)
    fitting_shape(discount_rate=r, year=t, years_before_end=phi)
    with np.errstate(over="ignore"):
        return finite(np.exp(-(t - phi) * np.log1p(r)), "discount factor")


def annuity_factor(discount_rate: ArrayLike, years: ArrayLike) -> Array:
    r"""Present value of 1 paid at the end of each year.

    Parameters
    ----------
    discount_rate : array_like
        Rate :math:`r` as a fraction, above -1. [1/year]
    years : array_like
        Evaluation period :math:`n`, broadcast against the rate. [year]

    Returns
    -------
    ndarray
        :math:`a(r, n)`, in the broadcast shape. [year]

    Raises
    ------
    ValueError
        If a rate is -1 or less, or a period is negative.

    Notes
    -----
    .. math:: a(r, n) = \frac{1 - (1 + r)^{-n}}{r}, \qquad a(0, n) = n

    A period that is not a whole number is taken through the same formula, which then is no sum of payments.

    Not included: escalation, growth, payments within the year.

    References
    ----------
    .. [1] [Masters 2004], capital recovery factor (its reciprocal).

    Examples
    --------
    >>> round(float(1 / annuity_factor(0.06, 10)), 5)
    0.13587
    >>> annuity_factor([0, 0.06], 30).round(5).tolist()
    [30.0, 13.76483]
    """
    r = checked("discount_rate", discount_rate, RATE)
    n = checked("years", years, AT_LEAST_0)
    fitting_shape(discount_rate=r, years=n)
    return finite(geometric_sum(r, np.float64(0), n), "annuity factor")


def capital_recovery_factor(discount_rate: ArrayLike, years: ArrayLike) -> Array:
    r"""Yearly payment, at the end of each year, that repays 1 with interest.

    Parameters
    ----------
    discount_rate : array_like
        Rate :math:`r` as a fraction, above -1. [1/year]
    years : array_like
        Period :math:`n`, above 0. [year]

    Returns
    -------
    ndarray
        :math:`CRF(r, n)`, in the broadcast shape. [1/year]

    Raises
    ------
    ValueError
        If a rate is -1 or less, or a period is 0 or less.

    Notes
    -----
    .. math:: CRF(r, n) = \frac{1}{a(r, n)}, \qquad CRF(0, n) = \frac{1}{n}

    Not included: taxes, insurance, replacements, salvage. A fixed charge rate contains them and so is not the capital
    recovery factor in general; see `fixed_charge`.

    References
    ----------
    .. [1] [Masters 2004], capital recovery factor.

    Examples
    --------
    >>> round(float(capital_recovery_factor(0.06, 10)), 5)
    0.13587
    """
    n = checked("years", years, POSITIVE)
    return finite(1 / annuity_factor(discount_rate, n), "capital recovery factor")


def growing_annuity_factor(
    discount_rate: ArrayLike, years: ArrayLike, *, escalation: ArrayLike, escalate_before_year_1: bool = False
) -> Array:
    r"""Present value of a yearly payment that grows geometrically, per unit of its first amount.

    Parameters
    ----------
    discount_rate : array_like
        Rate :math:`r` as a fraction, above -1. [1/year]
    years : array_like
        Number of payments :math:`n`, each at the end of its year. [year]
    escalation : array_like
        Growth :math:`e` of the payment as a fraction, above -1. [1/year]
    escalate_before_year_1 : bool
        False: the first payment is 1. True: 1 is today's price, and the first payment is already :math:`1 + e`.

    Returns
    -------
    ndarray
        Factor in the broadcast shape. [year]

    Raises
    ------
    ValueError
        If a rate or escalation is -1 or less, or a period is negative.

    Notes
    -----
    .. math:: \sum_{t=1}^{n} \frac{(1 + e)^{t-1}}{(1 + r)^t} = \frac{1 - q^n}{r - e}, \quad q = \frac{1 + e}{1 + r};
       \qquad \frac{n}{1 + r} \text{ at } e = r

    and :math:`1 + e` times as much where the price escalates before year 1. With an energy price of year 1 of
    :math:`c`, the no-load rate is 8760 c times the factor.

    Not included: load growth (`load_growth`), another timing than end of year (times
    :math:`(1 + r)^\varphi`).

    References
    ----------
    .. [1] [Johnson] and [Masters 2004]: present value of escalating costs, in the form with today's price.

    Examples
    --------
    >>> round(float(growing_annuity_factor(0.10, 20, escalation=0.04)), 6)
    11.238392
    >>> round(float(growing_annuity_factor(0.05, 20, escalation=0.05) * 1.05), 12)
    20.0
    """
    r = checked("discount_rate", discount_rate, RATE)
    n = checked("years", years, AT_LEAST_0)
    e = checked("escalation", escalation, RATE)
    fitting_shape(discount_rate=r, years=n, escalation=e)
    today = 1 + e if escalate_before_year_1 else np.float64(1)
    return finite(geometric_sum(r, e, n) * today, "growing annuity factor")


def levelizing_factor(discount_rate: ArrayLike, years: ArrayLike, *, escalation: ArrayLike) -> Array:
    r"""Constant yearly cost with the present value of an escalating one, per unit of today's cost.

    Parameters
    ----------
    discount_rate : array_like
        Rate :math:`d` as a fraction, above -1. [1/year]
    years : array_like
        Period :math:`n`, above 0. [year]
    escalation : array_like
        Escalation :math:`e` as a fraction, above -1. [1/year]

    Returns
    -------
    ndarray
        Factor in the broadcast shape. [1]

    Raises
    ------
    ValueError
        If a rate or escalation is -1 or less, or a period is 0 or less.

    Notes
    -----
    .. math:: a(d', n)\, CRF(d, n), \qquad d' = \frac{d - e}{1 + e}

    The cost is today's: it escalates before the first payment. For a cost paid in year 1 divide by :math:`1 + e`.

    Not included: another timing than end of year.

    References
    ----------
    .. [1] [Masters 2004], p. 254, levelizing factor.

    Examples
    --------
    >>> float(levelizing_factor(0.10, 20, escalation=0.06)) // 0.001 / 1000  # 1.628, truncated as printed
    1.628
    """
    annuity = growing_annuity_factor(discount_rate, years, escalation=escalation, escalate_before_year_1=True)
    return finite(annuity * capital_recovery_factor(discount_rate, years), "levelizing factor")


def nominal_rate(real_rate: ArrayLike, inflation: ArrayLike) -> Array:
    r"""Nominal rate that goes with a real rate.

    Parameters
    ----------
    real_rate : array_like
        Real rate :math:`r` as a fraction, above -1. [1/year]
    inflation : array_like
        Inflation :math:`f` as a fraction, above -1. [1/year]

    Returns
    -------
    ndarray
        :math:`r_n`, in the broadcast shape. [1/year]

    Raises
    ------
    ValueError
        If a rate or the inflation is -1 or less.

    Notes
    -----
    .. math:: r_n = (1 + r)(1 + f) - 1

    A real rate goes with prices of constant purchasing power, a nominal one with prices as they will be paid. The
    results are equal only if the price rises by the inflation from year 1 on, that is, escalates before year 1.

    References
    ----------
    .. [1] [Masters 2004], inflation-adjusted rates.

    Examples
    --------
    >>> round(float(nominal_rate(0.04, 0.02)), 6)
    0.0608
    """
    r = checked("real_rate", real_rate, RATE)
    f = checked("inflation", inflation, RATE)
    fitting_shape(real_rate=r, inflation=f)
    return finite(r + f + r * f, "nominal rate")


def real_rate(nominal_rate: ArrayLike, inflation: ArrayLike) -> Array:
    r"""Real rate that goes with a nominal rate.

    Parameters
    ----------
    nominal_rate : array_like
        Nominal rate :math:`r_n` as a fraction, above -1. [1/year]
    inflation : array_like
        Inflation :math:`f` as a fraction, above -1. [1/year]

    Returns
    -------
    ndarray
        :math:`r`, in the broadcast shape. [1/year]

    Raises
    ------
    ValueError
        If a rate or the inflation is -1 or less.

    Notes
    -----
    .. math:: r = \frac{r_n - f}{1 + f}

    References
    ----------
    .. [1] [Masters 2004], inflation-adjusted rates.

    Examples
    --------
    >>> round(float(real_rate(0.0608, 0.02)), 6)
    0.04
    """
    nominal = checked("nominal_rate", nominal_rate, RATE)
    f = checked("inflation", inflation, RATE)
    fitting_shape(nominal_rate=nominal, inflation=f)
    return finite((nominal - f) / (1 + f), "real rate")


def mid_year_factor(discount_rate: ArrayLike) -> Array:
    r"""Present value of mid-year payments over that of the same payments at the ends of the years.

    Parameters
    ----------
    discount_rate : array_like
        Rate :math:`r` as a fraction, above -1. [1/year]

    Returns
    -------
    ndarray
        :math:`\sqrt{1 + r}`, in the shape of the rate. [1]

    Raises
    ------
    ValueError
        If a rate is -1 or less.

    Notes
    -----
    .. math:: (1 + r)^{\varphi}, \qquad \varphi = \tfrac{1}{2}

    References
    ----------
    .. [1] Follows from the definition of the discount factor; no publication is claimed.

    Examples
    --------
    >>> round(float(mid_year_factor(0.06)), 6)
    1.029563
    """
    return np.asarray(np.sqrt(1 + checked("discount_rate", discount_rate, RATE)))
