"""What a range, quartiles or a median prove about the SD of the same n values: bounds that no data leave.

`a` and `b` are the smallest and the largest value that occurred, both attained. SDs are given as sums of
squares about the mean, for either denominator: sd = sqrt(ss / (n - 1)), population SD = sqrt(ss / n).
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from recheck.recompute.arrays import Bounds, Floats, floats, quotient


def ss_limits_of_range(spread: ArrayLike, n: ArrayLike) -> Bounds:
    """Least and greatest sum of squares of n >= 2 values with range `spread`, whatever their mean.

    Least: one value at either end, all others midway, spread² / 2. Greatest: half of the values at either
    end, spread² n / 4, for odd n (n² - 1) / (4 n). Source: Popoviciu (1935), Mathematica (Cluj) 9:129-145;
    Thomson (1955), Biometrika 42:268-269.
    """
    spread, n = floats(spread, n)
    odd = np.mod(n, 2)
    return np.asarray(spread**2 / 2), np.asarray(spread**2 * (n**2 - odd) / (4 * n))


def ss_limits_of_range_and_mean(
    a_low: ArrayLike, a_high: ArrayLike, b_low: ArrayLike, b_high: ArrayLike,
    mean_low: ArrayLike, mean_high: ArrayLike, n: ArrayLike,
) -> Bounds:  # fmt: skip
    """Range of the sum of squares of n >= 3 values with minimum a, maximum b and a mean, over a box of the three.

    Greatest: the values are at a and b but for one in between (a convex function on a polytope has its
    maximum at a vertex), so with R = b - a and u = n (mean - a) / R it is R² (k + f² - u²/n), k and f the
    whole and broken part of u. It grows as [a, b] widens, so the widest is taken; over an interval of u
    it is largest at an end or at the whole number nearest to n/2, as it is convex between whole numbers
    and R² u (n - u) / n at them. Least: one value at a, one at b, the others equal, which gives A² + B² +
    (A - B)² / (n - 2), A = mean - a, B = b - mean; it rises with A and B where such data exist (B <= (n - 1) A
    and A <= (n - 1) B), so the narrowest [a, b] is taken, and the mean nearest to its middle; where no data
    have that mean there, the last one that some have, which is a bound below. nan where no data exist for
    any point. Source: Bhatia & Davis (2000), Am. Math. Monthly 107:353-357, made exact for n.
    """
    a_low, a_high, b_low, b_high = floats(a_low, a_high, b_low, b_high)
    mean_low, mean_high, n = floats(mean_low, mean_high, n)
    lowest, highest = a_low + (b_low - a_low) / n, b_high - (b_high - a_high) / n
    # Means at the limit are attained; binary rounding may move them a hair beyond it.
    hair = 1e-12 * (np.abs(a_low) + np.abs(b_high))
    some = (np.maximum(mean_low, lowest) <= np.minimum(mean_high, highest) + hair) & (b_high >= a_low)
    least = _least(a_high, b_low, mean_low, mean_high, n)
    most = _greatest(a_low, b_high, mean_low, mean_high, n)
    return np.where(some, least, np.nan), np.where(some, most, np.nan)


def _least(a: Floats, b: Floats, mean_low: Floats, mean_high: Floats, n: Floats) -> Floats:
    spread = np.maximum(b - a, 0.0)
    mean = np.clip((a + b) / 2, mean_low, mean_high)
    off = np.minimum(np.abs(mean - (a + b) / 2), spread / 2 - quotient(spread, n))
    above, below = spread / 2 + off, spread / 2 - off
    return np.asarray(above**2 + below**2 + quotient((above - below) ** 2, n - 2))


def _greatest(a: Floats, b: Floats, mean_low: Floats, mean_high: Floats, n: Floats) -> Floats:
    spread = b - a
    low, high = (np.clip(quotient(n * (m - a), spread), 1.0, n - 1) for m in (mean_low, mean_high))
    whole = [np.clip(np.floor(n / 2), np.ceil(low), np.floor(high)), np.clip(np.ceil(n / 2), np.ceil(low), np.floor(high))]  # fmt: skip
    inside = [np.where((u >= low) & (u <= high), u, low) for u in whole]
    shares = [np.floor(u) + (u - np.floor(u)) ** 2 - u**2 / n for u in (low, high, *inside)]
    most = spread**2 * np.maximum.reduce(np.broadcast_arrays(*shares))
    return np.where(spread == 0, 0.0, most)


def ss_least_of_quartiles(iqr: ArrayLike, n: ArrayLike) -> Floats:
    """Least sum of squares of n values with that distance of the quartiles, floor(n / 4) iqr² / 2.

    By every definition of quartiles in use at least floor(n / 4) values are no larger than the first
    and as many no smaller than the third; the sum of squares about any point is then at least that of as
    many pairs a quartile distance apart. Source of the definitions: Hyndman & Fan (1996), The American
    Statistician 50:361-365.
    """
    iqr, n = floats(iqr, n)
    return np.asarray(np.floor(n / 4) * iqr**2 / 2)


def most_mean_less_median(sd: ArrayLike, n: ArrayLike) -> Floats:
    """The greatest |mean - median| of n values with that SD (n - 1), attained.

    mean - median is linear in the ordered values; over all ordered samples of one SD it is largest in the
    direction of the isotonic regression of its coefficients: h = floor(n / 2) + 1 values at the median, the
    others at one larger value. That gives sigma sqrt((n - h) / h), sigma the population SD: always less than
    sigma. Source: Hotelling & Solomons (1932), Ann. Math. Stat. 3:141-142, made exact for n.
    """
    sd, n = floats(sd, n)
    h = np.floor(n / 2) + 1
    return np.asarray(sd * np.sqrt((n - 1) / n * quotient(n - h, h)))
