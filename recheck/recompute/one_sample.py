"""One sample against a fixed value, or the differences of pairs against 0: t, its p, the CI of the mean.

SDs are sample SDs (n - 1); n is exact, at least 2; df = n - 1. In a box mean, SD and fixed value each have a
low and a high end and vary by themselves; SDs are cut at 0.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from recheck.recompute.arrays import (
    Bounds,
    Floats,
    absolute_bounds,
    difference_bounds,
    floats,
    quotient,
    quotient_bounds,
    spread_bounds,
    where_known,
)
from recheck.recompute.tails import t_quantile, t_two_sided


def t_one_sample(mean: ArrayLike, sd: ArrayLike, n: ArrayLike, value: ArrayLike = 0.0) -> Floats:
    """t of one sample against a fixed value, (mean - value) / (sd / sqrt(n)); infinite where the SD is 0.

    With mean and SD of the differences of pairs it is the paired t. Source: Student (1908), Biometrika
    6:1-25.
    """
    sd, n = floats(sd, n)
    return quotient(np.subtract(mean, value), sd / np.sqrt(n))


def p_one_sample(mean: ArrayLike, sd: ArrayLike, n: ArrayLike, value: ArrayLike = 0.0) -> Floats:
    """Two-sided p of `t_one_sample` with n - 1 df."""
    return t_two_sided(t_one_sample(mean, sd, n, value), np.subtract(n, 1.0))


def mean_ci(mean: ArrayLike, sd: ArrayLike, n: ArrayLike, level: ArrayLike = 0.95) -> Bounds:
    """Interval of a mean, or of a paired mean difference, mean ∓ c sd / sqrt(n); `level` from 0 to 1.

    Source: Altman, Machin, Bryant & Gardner (2000), Statistics with Confidence, ch. 4.
    """
    mean, sd, n, level = floats(mean, sd, n, level)
    half = t_quantile((1 - level) / 2, n - 1) * sd / np.sqrt(n)
    return np.asarray(mean - half), np.asarray(mean + half)


def one_sample_t_bounds(
    mean_low: ArrayLike, mean_high: ArrayLike, sd_low: ArrayLike, sd_high: ArrayLike, n: ArrayLike,
    value_low: ArrayLike = 0.0, value_high: ArrayLike = 0.0,
) -> Bounds:  # fmt: skip
    """Range of `t_one_sample` over a box: both ends are corners (see `quotient_bounds`)."""
    sd_low, sd_high = spread_bounds(sd_low, sd_high)
    root = np.sqrt(floats(n)[0])
    difference = difference_bounds(mean_low, mean_high, value_low, value_high)
    return quotient_bounds(*difference, sd_low / root, sd_high / root)


def one_sample_p_bounds(
    mean_low: ArrayLike, mean_high: ArrayLike, sd_low: ArrayLike, sd_high: ArrayLike, n: ArrayLike,
    value_low: ArrayLike = 0.0, value_high: ArrayLike = 0.0,
) -> Bounds:  # fmt: skip
    """Range of `p_one_sample` over a box: it falls as |t| rises, and df are known.

    Where no difference may stand over no spread, t and so p are open on that side.
    """
    low, high = one_sample_t_bounds(mean_low, mean_high, sd_low, sd_high, n, value_low, value_high)
    near, far = absolute_bounds(np.where(np.isnan(low), -np.inf, low), np.where(np.isnan(high), np.inf, high))
    df = np.subtract(n, 1.0)
    bounds = t_two_sided(far, df), t_two_sided(near, df)
    return where_known(bounds, mean_low, mean_high, sd_low, sd_high, value_low, value_high)


def mean_ci_bounds(
    mean_low: ArrayLike, mean_high: ArrayLike, sd_low: ArrayLike, sd_high: ArrayLike, n: ArrayLike,
    level: ArrayLike = 0.95,
) -> tuple[Bounds, Bounds]:  # fmt: skip
    """Ranges of the lower and of the upper end of `mean_ci`: corners, as mean and SD vary by themselves."""
    sd_low, sd_high = spread_bounds(sd_low, sd_high)
    mean_low, mean_high, n, level = floats(mean_low, mean_high, n, level)
    factor = t_quantile((1 - level) / 2, n - 1) / np.sqrt(n)
    narrow, broad = factor * sd_low, factor * sd_high
    lower = np.asarray(mean_low - broad), np.asarray(mean_high - narrow)
    upper = np.asarray(mean_low + narrow), np.asarray(mean_high + broad)
    return lower, upper
