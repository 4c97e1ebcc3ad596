"""Groups put together and taken apart again: mean and SD of a union, and of what is left of a total.

Groups lie along the last axis. SDs are sample SDs (n - 1); ns are exact. In a box each mean and SD has a
low and a high end and varies by itself; SDs are cut at 0.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from recheck.recompute.anova import ss_between, ss_between_bounds
from recheck.recompute.arrays import Bounds, Floats, floats, quotient, spread_bounds, together, where_known


def union_mean(means: ArrayLike, ns: ArrayLike) -> Floats:
    """Mean of all cases of several groups, sum n m / sum n. By definition."""
    means, ns = together(means, ns)
    return quotient(np.sum(ns * means, axis=-1), np.sum(ns, axis=-1))


def union_sd(means: ArrayLike, sds: ArrayLike, ns: ArrayLike) -> Floats:
    """SD of all cases of several groups, sqrt((sum (n - 1) sd² + sum n (m - m̄)²) / (N - 1)).

    Source: Higgins, Li & Deeks, Cochrane Handbook for Systematic Reviews of Interventions, 6.5.2.10, for
    two groups; the sums of squares of Fisher (1925), Statistical Methods for Research Workers, for more.
    """
    means, sds, ns = together(means, sds, ns)
    squares = np.sum((ns - 1) * sds**2, axis=-1) + ss_between(means, ns)
    return np.asarray(np.sqrt(quotient(squares, np.sum(ns, axis=-1) - 1)))


def pooled_sd_of(sds: ArrayLike, ns: ArrayLike) -> Floats:
    """SD within several groups, sqrt(sum (n - 1) sd² / (N - k)). Source: Fisher (1925), as above."""
    sds, ns = together(sds, ns)
    df = np.sum(ns, axis=-1) - ns.shape[-1]
    return np.asarray(np.sqrt(quotient(np.sum((ns - 1) * sds**2, axis=-1), df)))


def union_mean_bounds(mean_low: ArrayLike, mean_high: ArrayLike, ns: ArrayLike) -> Bounds:
    """Range of `union_mean` over a box of means: it rises with each, so all lows and all highs."""
    return union_mean(mean_low, ns), union_mean(mean_high, ns)


def union_sd_bounds(
    mean_low: ArrayLike, mean_high: ArrayLike, sd_low: ArrayLike, sd_high: ArrayLike, ns: ArrayLike
) -> Bounds:
    """Range of `union_sd` over a box of means and SDs, both ends attained.

    Its square is a sum of a part that rises with each SD and of one of the means alone, so each part has
    its own ends; for the means see `ss_between_bounds`. Raises ValueError for more groups than that takes.
    """
    mean_low, mean_high, sd_low, sd_high, ns = together(mean_low, mean_high, sd_low, sd_high, ns)
    sd_low, sd_high = spread_bounds(sd_low, sd_high)
    least, most = ss_between_bounds(mean_low, mean_high, ns)
    df = np.sum(ns, axis=-1) - 1
    low = np.sqrt(quotient(np.sum((ns - 1) * sd_low**2, axis=-1) + least, df))
    high = np.sqrt(quotient(np.sum((ns - 1) * sd_high**2, axis=-1) + most, df))
    return np.asarray(low), np.asarray(high)


def pooled_sd_of_bounds(sd_low: ArrayLike, sd_high: ArrayLike, ns: ArrayLike) -> Bounds:
    """Range of `pooled_sd_of` over a box of SDs: it rises with each."""
    sd_low, sd_high = spread_bounds(sd_low, sd_high)
    return pooled_sd_of(sd_low, ns), pooled_sd_of(sd_high, ns)


def rest_mean(mean: ArrayLike, n: ArrayLike, mean_part: ArrayLike, n_part: ArrayLike) -> Floats:
    """Mean of the cases of a total that are not in a part of it, from `union_mean`; nan where the part is all."""
    mean, n, mean_part, n_part = floats(mean, n, mean_part, n_part)
    # As the total's mean and what the part takes from it, which keeps digits for means that are far from 0.
    return np.asarray(mean + quotient(n_part * (mean - mean_part), n - n_part))


def rest_sd(
    mean: ArrayLike, sd: ArrayLike, n: ArrayLike, mean_part: ArrayLike, sd_part: ArrayLike, n_part: ArrayLike
) -> Floats:
    """SD of the cases of a total that are not in a part of it: `union_sd` solved for one of two groups.

    nan where fewer than two cases are left, or where the part has more spread than the total allows.
    """
    mean, sd, n, mean_part, sd_part, n_part = floats(mean, sd, n, mean_part, sd_part, n_part)
    left = n - n_part
    between = quotient(n * n_part * (mean - mean_part) ** 2, left)
    squares = (n - 1) * sd**2 - (n_part - 1) * sd_part**2 - between
    with np.errstate(invalid="ignore"):
        return np.where(left >= 2, np.sqrt(quotient(squares, left - 1)), np.nan)


def rest_mean_bounds(
    mean_low: ArrayLike, mean_high: ArrayLike, n: ArrayLike,
    part_low: ArrayLike, part_high: ArrayLike, n_part: ArrayLike,
) -> Bounds:  # fmt: skip
    """Range of `rest_mean` over a box of both means: it rises with the total's and falls with the part's."""
    return rest_mean(mean_low, n, part_high, n_part), rest_mean(mean_high, n, part_low, n_part)


def rest_sd_bounds(
    mean_low: ArrayLike, mean_high: ArrayLike, sd_low: ArrayLike, sd_high: ArrayLike, n: ArrayLike,
    part_mean_low: ArrayLike, part_mean_high: ArrayLike, part_sd_low: ArrayLike, part_sd_high: ArrayLike,
    n_part: ArrayLike,
) -> Bounds:  # fmt: skip
    """Range of `rest_sd` over a box of both means and SDs, as far as there is a rest: corners.

    Its square rises with the total's SD, falls with the part's and with the distance of the two means. The
    low end is 0 where some points of the box leave no spread; nan where none leaves any.
    """
    sd_low, sd_high = spread_bounds(sd_low, sd_high)
    part_sd_low, part_sd_high = spread_bounds(part_sd_low, part_sd_high)
    mean_low, mean_high, part_mean_low, part_mean_high = floats(mean_low, mean_high, part_mean_low, part_mean_high)  # fmt: skip
    near = np.maximum(np.maximum(mean_low - part_mean_high, part_mean_low - mean_high), 0.0)
    far = np.maximum(mean_high - part_mean_low, part_mean_high - mean_low)
    low = rest_sd(far, sd_low, n, 0.0, part_sd_high, n_part)
    high = rest_sd(near, sd_high, n, 0.0, part_sd_low, n_part)
    bounds = np.where(np.isnan(low) & ~np.isnan(high), 0.0, low), high
    return where_known(bounds, near, far, sd_low, sd_high, part_sd_low, part_sd_high)
