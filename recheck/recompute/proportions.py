"""Confidence intervals of one proportion, count / total, by the methods in use.

Each gives the lower and the upper end between 0 and 1, arguments broadcast; `level` runs from 0 to 1. nan of a
total of 0. The methods are compared in Brown, Cai & DasGupta (2001), Statistical Science 16:101-133, and Newcombe
(1998), Statistics in Medicine 17:857-872.
"""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
from numpy.typing import ArrayLike
from scipy import special

from recheck.recompute.arrays import Bounds, Floats, floats, quotient
from recheck.recompute.tails import z_quantile


def critical_z(level: ArrayLike) -> Floats:
    """The normal quantile of a two-sided interval."""
    (level,) = floats(level)
    return z_quantile((1 - level) / 2)


def wald(count: ArrayLike, total: ArrayLike, level: ArrayLike = 0.95) -> Bounds:
    """p ∓ z √(p(1 - p) / n), cut at 0 and 1. Source: Laplace (1812), Théorie analytique des probabilités."""
    count, total = floats(count, total)
    p = quotient(count, total)
    return _around(p, critical_z(level) * np.sqrt(quotient(p * (1 - p), total)))


def wald_corrected(count: ArrayLike, total: ArrayLike, level: ArrayLike = 0.95) -> Bounds:
    """Wald's interval, 1/(2n) wider on either side. Source: Newcombe (1998), method 2."""
    count, total = floats(count, total)
    p = quotient(count, total)
    half = critical_z(level) * np.sqrt(quotient(p * (1 - p), total)) + quotient(0.5, total)
    return _around(p, half)


def wilson(count: ArrayLike, total: ArrayLike, level: ArrayLike = 0.95) -> Bounds:
    """All p with |count/n - p| ≤ z √(p(1 - p) / n). Source: Wilson (1927), J. Am. Stat. Assoc. 22:209-212."""
    count, total = floats(count, total)
    z = critical_z(level)
    p, z2 = quotient(count, total), z**2
    centre = 2 * total * p + z2
    half = z * np.sqrt(z2 + 4 * total * p * (1 - p))
    low, high = quotient(centre - half, 2 * (total + z2)), quotient(centre + half, 2 * (total + z2))
    # The ends are exactly 0 and 1 there; rounding would leave 1e-18.
    empty = total <= 0
    low, high = np.where(count == 0, 0.0, low), np.where(count == total, 1.0, high)
    return np.where(empty, np.nan, low), np.where(empty, np.nan, high)


def wilson_corrected(count: ArrayLike, total: ArrayLike, level: ArrayLike = 0.95) -> Bounds:
    """Wilson's interval with the continuity correction 1/(2n), which R's prop.test leaves out of count = n/2.

    Source: Newcombe (1998), method 4; Fleiss (1981), Statistical Methods for Rates and Proportions, 1.14.
    """
    count, total = floats(count, total)
    z, p = critical_z(level), quotient(count, total)
    z2, q, bottom = z**2, 1 - p, 2 * (total + z**2)
    base = 2 * total * p + z2
    with np.errstate(invalid="ignore"):
        low_root = np.sqrt(z2 - 2 - quotient(1, total) + 4 * p * (total * q + 1))
        high_root = np.sqrt(z2 + 2 - quotient(1, total) + 4 * p * (total * q - 1))
    low = np.where(count == 0, 0.0, quotient(base - 1 - z * low_root, bottom))
    high = np.where(count == total, 1.0, quotient(base + 1 + z * high_root, bottom))
    empty = total <= 0
    return np.where(empty, np.nan, np.maximum(low, 0.0)), np.where(empty, np.nan, np.minimum(high, 1.0))


def clopper_pearson(count: ArrayLike, total: ArrayLike, level: ArrayLike = 0.95) -> Bounds:
    """Exact interval from both tails of the binomial. Source: Clopper & Pearson (1934), Biometrika 26:404-413."""
    count, total, level = floats(count, total, level)
    tail = (1 - level) / 2
    with np.errstate(invalid="ignore"):
        low = special.betaincinv(count, total - count + 1, tail)
        high = special.betainccinv(count + 1, total - count, tail)
    empty = total <= 0
    low, high = np.where(count == 0, 0.0, low), np.where(count == total, 1.0, high)
    return np.where(empty, np.nan, low), np.where(empty, np.nan, high)


def mid_p(count: ArrayLike, total: ArrayLike, level: ArrayLike = 0.95) -> Bounds:
    """Interval from both tails of the binomial, half of the observed count's probability left out of each.

    Source: Lancaster (1961), J. Am. Stat. Assoc. 56:223-234; Berry & Armitage (1995), The Statistician 44:417-423.
    """
    count, total, level = np.broadcast_arrays(*floats(count, total, level))
    tail = (1 - level) / 2

    def above(p: Floats) -> Floats:
        """P(X > count) + P(X = count) / 2, rising with p."""
        with np.errstate(invalid="ignore"):
            more = np.where(
                count == total, 0.0, special.betainc(count + 1, np.maximum(total - count, 0.5), p)
            )
            as_many = np.where(count == 0, 1.0, special.betainc(np.maximum(count, 0.5), total - count + 1, p))
        return np.asarray((more + as_many) / 2)

    low, high = _rising_to(above, tail), _rising_to(above, 1 - tail)
    empty = ~(total > 0) | np.isnan(count + tail)
    low, high = np.where(count == 0, 0.0, low), np.where(count == total, 1.0, high)
    return np.where(empty, np.nan, low), np.where(empty, np.nan, high)


def agresti_coull(count: ArrayLike, total: ArrayLike, level: ArrayLike = 0.95) -> Bounds:
    """Wald's interval of (count + z²/2) out of n + z², cut at 0 and 1. Source: Agresti & Coull (1998), American Statistician 52:119-126."""
    count, total = floats(count, total)
    z2 = critical_z(level) ** 2
    return wald(count + z2 / 2, np.where(total > 0, total + z2, np.nan), level)


def jeffreys(count: ArrayLike, total: ArrayLike, level: ArrayLike = 0.95) -> Bounds:
    """Equal tails of the beta distribution (count + ½, n - count + ½); 0 and n have an end of 0 and 1.

    Source: Brown, Cai & DasGupta (2001), Statistical Science 16:101-133.
    """
    count, total, level = floats(count, total, level)
    tail = (1 - level) / 2
    with np.errstate(invalid="ignore"):
        low = special.betaincinv(count + 0.5, total - count + 0.5, tail)
        high = special.betainccinv(count + 0.5, total - count + 0.5, tail)
    empty = total <= 0
    low, high = np.where(count == 0, 0.0, low), np.where(count == total, 1.0, high)
    return np.where(empty, np.nan, low), np.where(empty, np.nan, high)


def logit(count: ArrayLike, total: ArrayLike, level: ArrayLike = 0.95) -> Bounds:
    """ln(p / (1 - p)) ∓ z / √(n p (1 - p)), turned back; nan of counts of 0 and n.

    Source: Woolf (1955), Annals of Human Genetics 19:251-253; Stone (1995), A Course in Probability and Statistics.
    """
    count, total = floats(count, total)
    with np.errstate(divide="ignore", invalid="ignore"):
        middle = np.log(quotient(count, total - count))
        half = critical_z(level) * np.sqrt(quotient(total, count * (total - count)))
    inner = (count > 0) & (count < total)
    return np.where(inner, special.expit(middle - half), np.nan), np.where(
        inner, special.expit(middle + half), np.nan
    )


def _around(p: Floats, half: Floats) -> Bounds:
    return np.asarray(np.maximum(p - half, 0.0)), np.asarray(np.minimum(p + half, 1.0))


def _rising_to(function: Callable[[Floats], Floats], target: Floats) -> Floats:
    """The p between 0 and 1 at which a rising function has the target, by halving to the last bit."""
    low, high = np.zeros(np.shape(target)), np.ones(np.shape(target))
    for _ in range(80):
        middle = (low + high) / 2
        below = function(middle) < target
        low, high = np.where(below, middle, low), np.where(below, high, middle)
    return np.asarray((low + high) / 2)
