"""Geometric sums of discounted, growing payments, without loss of digits at or near their removable singularity."""

from __future__ import annotations

import numpy as np

from .arguments import Array

__all__ = ["geometric_sum", "log_ratio", "with_load_growth"]

#: Below this distance of (1 + r)/(1 + e) from 1 the logarithm of the ratio is taken through log1p.
_NEAR = 0.5


def with_load_growth(escalation: Array, load_growth: Array) -> Array:
    """(1 + e)(1 + g)^2 - 1 without the cancellation of the written form.

    Parameters
    ----------
    escalation, load_growth : ndarray
        e and g, above -1. [1/year]

    Returns
    -------
    ndarray
        Growth of the price times the squared load. [1/year]
    """
    return np.asarray(escalation + (1 + escalation) * load_growth * (2 + load_growth))


def log_ratio(discount_rate: Array, growth: Array | np.float64) -> Array:
    """ln((1 + r)/(1 + e)): relatively exact near 0, where r and e meet, and far from it.

    Parameters
    ----------
    discount_rate, growth : ndarray
        r and e, above -1. [1/year]

    Returns
    -------
    ndarray
        The logarithm. [1/year]
    """
    ratio_less_1 = (discount_rate - growth) / (1 + growth)
    near = np.abs(ratio_less_1) < _NEAR
    close = np.log1p(np.where(near, ratio_less_1, 0.0))
    return np.asarray(np.where(near, close, np.log1p(discount_rate) - np.log1p(growth)))


def geometric_sum(discount_rate: Array, growth: Array | np.float64, years: Array) -> Array:
    """Sum over t = 1..n of (1 + e)^(t-1) / (1 + r)^t.

    Parameters
    ----------
    discount_rate, growth : ndarray
        r and e, above -1. [1/year]
    years : ndarray
        n, at least 0. [year]

    Returns
    -------
    ndarray
        The sum, n/(1 + r) where r and e are equal; infinite where it overflows. [year]
    """
    difference = discount_rate - growth
    equal = difference == 0
    with np.errstate(over="ignore", invalid="ignore"):
        closed = -np.expm1(-years * log_ratio(discount_rate, growth)) / np.where(equal, 1.0, difference)
    return np.asarray(np.where(equal, years / (1 + discount_rate), closed))
