"""Confidence intervals against SE and t.

`level` runs from 0 to 1; an infinite df means the normal distribution.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from recheck.recompute.arrays import Bounds, Floats, floats, quotient, together, where_known
from recheck.recompute.tails import t_quantile


def critical_t(level: ArrayLike, df: ArrayLike) -> Floats:
    """The t of a two-sided interval: the `t_quantile` with (1 - level) / 2 above it."""
    (level,) = floats(level)
    return t_quantile((1 - level) / 2, df)


def ci_from_estimate(estimate: ArrayLike, se: ArrayLike, level: ArrayLike, df: ArrayLike) -> Bounds:
    """Ends of the interval estimate ∓ t se. Source: Student (1908); Neyman (1937), Phil. Trans. A 236."""
    estimate, se = floats(estimate, se)
    half = critical_t(level, df) * se
    return np.asarray(estimate - half), np.asarray(estimate + half)


def se_from_ci(low: ArrayLike, high: ArrayLike, level: ArrayLike, df: ArrayLike) -> Floats:
    """SE of the estimate from its interval, width / (2 t).

    Source: Cochrane Handbook for Systematic Reviews of Interventions, 6.5.2.2.
    """
    low, high = floats(low, high)
    return quotient(high - low, 2 * critical_t(level, df))


def t_from_ci(low: ArrayLike, high: ArrayLike, level: ArrayLike, df: ArrayLike) -> Floats:
    """t against 0 of the estimate that is the middle of its interval, t_crit (low + high) / (high - low).

    Source: Altman & Bland (2011), BMJ 343:d2304, for the normal distribution.
    """
    low, high = floats(low, high)
    return quotient(critical_t(level, df) * (low + high), high - low)


def t_from_ci_bounds(
    low_lo: ArrayLike, low_hi: ArrayLike, high_lo: ArrayLike, high_hi: ArrayLike,
    level: ArrayLike, df: ArrayLike,
) -> Bounds:  # fmt: skip
    """Range of `t_from_ci` over a box of both ends of an interval, low < high.

    t rises with the low end where the high end is positive, falls where it is negative, and falls
    with the high end where the low end is positive, rises where it is negative: monotone along
    every line, so both ends are corners. Where the box holds points with low = high = v, t is
    unbounded on the side of v's sign; corners with low >= high are left out. nan where no point is left.
    """
    low_lo, low_hi, high_lo, high_hi = together(low_lo, low_hi, high_lo, high_hi)
    corners = [(a, b, a < b) for a in (low_lo, low_hi) for b in (high_lo, high_hi)]
    ratios = [np.where(valid, quotient(a + b, b - a), np.nan) for a, b, valid in corners]
    least, most = np.maximum(low_lo, high_lo), np.minimum(low_hi, high_hi)
    touching, some = least <= most, low_lo < high_hi
    low = np.where(touching & (least < 0), -np.inf, np.fmin.reduce(ratios))
    high = np.where(touching & (most > 0), np.inf, np.fmax.reduce(ratios))
    scale = critical_t(level, df)
    bounds = np.where(some, scale * low, np.nan), np.where(some, scale * high, np.nan)
    return where_known(bounds, low_lo, low_hi, high_lo, high_hi)
