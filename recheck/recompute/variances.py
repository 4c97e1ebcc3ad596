"""Tests of equal variances from SDs and ns: the ratio of two variances, Bartlett's test of several.

SDs are sample SDs (n - 1); ns are exact, each at least 2. In a box each SD has a low and a high end and varies
by itself; SDs are cut at 0. Levene's and Brown and Forsythe's tests need the single scores.
"""

from __future__ import annotations

from itertools import product

import numpy as np
from numpy.typing import ArrayLike

from recheck.recompute.anova import MOST_GROUPS, nearest_to_their_mean
from recheck.recompute.arrays import (
    Bounds,
    Floats,
    floats,
    quotient,
    spread_bounds,
    together,
)
from recheck.recompute.tails import chi2_tail, f_tail


def variance_ratio(sd1: ArrayLike, sd2: ArrayLike) -> Floats:
    """F ratio of two variances, sd1² / sd2², with n1 - 1 and n2 - 1 df; infinite where sd2 is 0.

    Source: Fisher (1924), Proceedings of the International Congress of Mathematics, Toronto, 2:805-813.
    """
    return np.asarray(quotient(sd1, sd2) ** 2)


def variance_ratio_p(F: ArrayLike, n1: ArrayLike, n2: ArrayLike) -> Floats:
    """Two-sided p of a ratio of two variances (`variance_ratio`): twice the smaller of both tails of F, 1 at most."""
    F, df1, df2 = floats(F, np.subtract(n1, 1.0), np.subtract(n2, 1.0))
    upper, lower = f_tail(F, df1, df2), f_tail(quotient(1.0, F), df2, df1)
    return np.asarray(np.minimum(2 * np.minimum(upper, lower), 1.0))


def bartlett(sds: ArrayLike, ns: ArrayLike) -> tuple[Floats, Floats, Floats]:
    """Bartlett's K² of equal variances, its df k - 1 and its p; groups lie along the last axis.

    K² = ((N - k) ln sp² - sum (n - 1) ln sd²) / C with C = 1 + (sum 1/(n - 1) - 1/(N - k)) / (3 (k - 1)),
    sp² the pooled variance; infinite where one SD alone is 0. Source: Bartlett (1937), Proceedings of the
    Royal Society A 160:268-282.
    """
    sds, ns = together(sds, ns)
    k = float(sds.shape[-1])
    K2 = _bartlett_K2(sds**2, ns - 1)
    df = np.full_like(K2, k - 1)
    return K2, df, chi2_tail(K2, df)


def _bartlett_K2(variances: Floats, dfs: Floats) -> Floats:
    """K² from variances; terms are ratios to the pooled one, so that nothing of size cancels."""
    within = np.sum(dfs, axis=-1, keepdims=True)
    k = variances.shape[-1]
    pooled = np.sum(dfs * variances, axis=-1, keepdims=True) / within
    with np.errstate(divide="ignore", invalid="ignore"):
        # The deviations from the pooled variance sum to 0, so adding them changes nothing and no term is negative.
        excess = (variances - pooled) / pooled
        terms = dfs * (excess - np.log1p(excess))
    correction = 1 + (np.sum(1 / dfs, axis=-1) - 1 / within[..., 0]) / (3 * (k - 1))
    return np.asarray(np.sum(terms, axis=-1) / correction)


def variance_ratio_bounds(
    sd1_low: ArrayLike, sd1_high: ArrayLike, sd2_low: ArrayLike, sd2_high: ArrayLike
) -> Bounds:
    """Range of `variance_ratio` over a box of both SDs: it rises with the first and falls with the second."""
    (sd1_low, sd1_high), (sd2_low, sd2_high) = spread_bounds(sd1_low, sd1_high), spread_bounds(sd2_low, sd2_high)  # fmt: skip
    return variance_ratio(sd1_low, sd2_high), variance_ratio(sd1_high, sd2_low)


def p_of_ratio_bounds(F_low: ArrayLike, F_high: ArrayLike, n1: ArrayLike, n2: ArrayLike) -> Bounds:
    """Range of `variance_ratio_p` over an interval of F.

    p rises with F up to the median of its distribution, where it is 1, and falls from there: the least is
    at an end, and so is the greatest unless the median lies inside, where it is 1.
    """
    df1, df2 = floats(np.subtract(n1, 1.0), np.subtract(n2, 1.0))
    at_low, at_high = variance_ratio_p(F_low, n1, n2), variance_ratio_p(F_high, n1, n2)
    inside = (f_tail(F_low, df1, df2) >= 0.5) & (f_tail(F_high, df1, df2) <= 0.5)
    return np.minimum(at_low, at_high), np.where(inside, 1.0, np.maximum(at_low, at_high))


def variance_ratio_p_bounds(
    sd1_low: ArrayLike, sd1_high: ArrayLike, n1: ArrayLike,
    sd2_low: ArrayLike, sd2_high: ArrayLike, n2: ArrayLike,
) -> Bounds:  # fmt: skip
    """Range of `variance_ratio_p` over a box of both SDs, which fill an interval of F."""
    return p_of_ratio_bounds(*variance_ratio_bounds(sd1_low, sd1_high, sd2_low, sd2_high), n1, n2)


def bartlett_bounds(sd_low: ArrayLike, sd_high: ArrayLike, ns: ArrayLike) -> Bounds:
    """Range of Bartlett's K² over a box of SDs, both ends attained; p falls as K² rises.

    In u = ln sd² K² is a log-sum-exp less a linear form, so convex: its maximum is at a corner of the
    box, all 2^k of which are visited. Its slope in a u has the sign of sd² - sp², so at the minimum
    each variance is the point of its interval nearest to the pooled variance, which is their mean with
    weights n - 1 (`nearest_to_their_mean`). Raises ValueError for more than `MOST_GROUPS` groups.
    """
    sd_low, sd_high, ns = together(sd_low, sd_high, ns)
    k = ns.shape[-1]
    if k > MOST_GROUPS:
        raise ValueError(f"at most {MOST_GROUPS} groups (got {k})")
    low, high = (end**2 for end in spread_bounds(sd_low, sd_high))
    corners = np.array(list(product((False, True), repeat=k)))
    at_corners = _bartlett_K2(
        np.where(corners, high[..., None, :], low[..., None, :]), (ns - 1)[..., None, :]
    )
    least = _bartlett_K2(nearest_to_their_mean(low, high, ns - 1), ns - 1)
    meet = np.max(low, axis=-1) <= np.min(high, axis=-1)
    return np.where(meet, 0.0, np.maximum(least, 0.0)), np.asarray(np.max(at_corners, axis=-1))
