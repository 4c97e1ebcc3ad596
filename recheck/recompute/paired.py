"""The same units measured twice: from the SD of the differences, or from both SDs and their correlation.

Differences are measure 1 minus measure 2; SDs are sample SDs (n - 1); n, the number of pairs, is exact.
A paired test is the one-sample test of the differences, so t, its p and its interval from their mean and
SD are those of `one_sample`. In a box each mean, SD and correlation has a low and a high end and varies by
itself; SDs are cut at 0, correlations to [-1, 1].
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
    spread_bounds,
    where_known,
)


def sd_of_differences(sd1: ArrayLike, sd2: ArrayLike, r: ArrayLike) -> Floats:
    """SD of the differences of two measures, sqrt(sd1² + sd2² - 2 r sd1 sd2).

    Written as (sd1 - sd2)² + 2 (1 - r) sd1 sd2, which keeps its digits for r near 1. Source: Cochrane
    Handbook for Systematic Reviews of Interventions, 6.5.2.8.
    """
    sd1, sd2, r = floats(sd1, sd2, r)
    return np.asarray(np.sqrt((sd1 - sd2) ** 2 + 2 * (1 - r) * sd1 * sd2))


def paired_se(sd1: ArrayLike, sd2: ArrayLike, r: ArrayLike, n: ArrayLike) -> Floats:
    """SE of a paired mean difference, `sd_of_differences` / sqrt(n)."""
    (n,) = floats(n)
    return np.asarray(sd_of_differences(sd1, sd2, r) / np.sqrt(n))


def t_paired(
    mean1: ArrayLike, sd1: ArrayLike, mean2: ArrayLike, sd2: ArrayLike, r: ArrayLike, n: ArrayLike
) -> Floats:
    """t of a paired test with n - 1 df from both measures and their correlation; infinite where the SE is 0.

    Source: Student (1908), Biometrika 6:1-25.
    """
    return quotient(np.subtract(mean1, mean2), paired_se(sd1, sd2, r, n))


def sd_of_differences_bounds(
    sd1_low: ArrayLike, sd1_high: ArrayLike, sd2_low: ArrayLike, sd2_high: ArrayLike,
    r_low: ArrayLike, r_high: ArrayLike,
) -> Bounds:  # fmt: skip
    """Range of `sd_of_differences` over a box of both SDs and r.

    Its square falls with r, so the largest has the lowest r and the smallest the highest. For a fixed r it
    is a convex quadratic form in the two SDs (its matrix has the eigenvalues 1 - r and 1 + r): largest at a
    corner; its only stationary points are the origin and, for r = 1, the line sd1 = sd2, which leaves a
    box through its edges: so smallest on an edge, at sd1 = r sd2 (or sd2 = r sd1) or the end nearest to it.
    """
    (sd1_low, sd1_high), (sd2_low, sd2_high) = spread_bounds(sd1_low, sd1_high), spread_bounds(sd2_low, sd2_high)  # fmt: skip
    r_low, r_high = (np.clip(r, -1.0, 1.0) for r in floats(r_low, r_high))
    corners = [sd_of_differences(a, b, r_low) for a in (sd1_low, sd1_high) for b in (sd2_low, sd2_high)]
    edges = [
        sd_of_differences(np.clip(r_high * b, sd1_low, sd1_high), b, r_high) for b in (sd2_low, sd2_high)
    ]
    edges += [
        sd_of_differences(a, np.clip(r_high * a, sd2_low, sd2_high), r_high) for a in (sd1_low, sd1_high)
    ]
    return np.minimum.reduce(np.broadcast_arrays(*edges)), np.maximum.reduce(np.broadcast_arrays(*corners))


def implied_correlation(
    mean_difference: ArrayLike, sd1: ArrayLike, sd2: ArrayLike, n: ArrayLike, t: ArrayLike
) -> Floats:
    """The correlation with which a paired t follows, (sd1² + sd2² - n D²/t²) / (2 sd1 sd2).

    Outside [-1, 1] no data give that t. Source: Cochrane Handbook for Systematic Reviews of
    Interventions, 6.5.2.8, solved for r with sd_difference = D sqrt(n) / t.
    """
    difference, sd1, sd2, n, t = floats(mean_difference, sd1, sd2, n, t)
    return quotient(sd1**2 + sd2**2 - n * quotient(difference, t) ** 2, 2 * sd1 * sd2)


def paired_t_bounds(
    mean1_low: ArrayLike, mean1_high: ArrayLike, sd1_low: ArrayLike, sd1_high: ArrayLike,
    mean2_low: ArrayLike, mean2_high: ArrayLike, sd2_low: ArrayLike, sd2_high: ArrayLike, n: ArrayLike,
) -> Bounds:  # fmt: skip
    """Range of the size of `t_paired` over a box of means and SDs and every correlation from -1 to 1.

    The SD of the differences takes all values from |sd1 - sd2| (r = 1) to sd1 + sd2 (r = -1), so over
    the box from the distance of the two SD intervals, 0 where they meet, to the sum of the high
    ends; |t| is |D| sqrt(n) over it. A spread that may be 0 gives an infinite end; nan where D and it can be nothing but 0.
    """
    (sd1_low, sd1_high), (sd2_low, sd2_high) = (
        spread_bounds(sd1_low, sd1_high),
        spread_bounds(sd2_low, sd2_high),
    )
    (n,) = floats(n)
    least, most = absolute_bounds(*difference_bounds(mean1_low, mean1_high, mean2_low, mean2_high))
    narrow, _ = absolute_bounds(*difference_bounds(sd1_low, sd1_high, sd2_low, sd2_high))
    broad, root = sd1_high + sd2_high, np.sqrt(n)
    return quotient(least * root, broad), quotient(most * root, np.where(most > 0, narrow, broad))


def implied_correlation_bounds(
    mean1_low: ArrayLike, mean1_high: ArrayLike, sd1_low: ArrayLike, sd1_high: ArrayLike,
    mean2_low: ArrayLike, mean2_high: ArrayLike, sd2_low: ArrayLike, sd2_high: ArrayLike,
    n: ArrayLike, t_low: ArrayLike, t_high: ArrayLike,
) -> Bounds:  # fmt: skip
    """Range of `implied_correlation` over a box of means, SDs and |t|, not cut to [-1, 1].

    With K = n D²/t², r = (sd1² + sd2² - K) / (2 sd1 sd2) falls as K rises. In sd1 it falls up to
    sd1² = sd2² - K and rises from there (likewise in sd2): the largest r is at a corner, the smallest
    on an edge, at that point or the end nearest to it; inside, both slopes vanish only for
    K = 0, sd1 = sd2, where r = 1 all along a line that meets the edges. |D| = |t| = 0 leaves K free.
    """
    (sd1_low, sd1_high), (sd2_low, sd2_high) = (
        spread_bounds(sd1_low, sd1_high),
        spread_bounds(sd2_low, sd2_high),
    )
    (n,) = floats(n)
    t_low, t_high = absolute_bounds(*floats(t_low, t_high))
    D_low, D_high = absolute_bounds(*difference_bounds(mean1_low, mean1_high, mean2_low, mean2_high))
    small = np.where(D_low == 0, 0.0, n * quotient(D_low, t_high) ** 2)
    large = np.where(t_low == 0, np.inf, n * quotient(D_high, t_low) ** 2)
    edges = [(_nearest(sd2, large, sd1_low, sd1_high), sd2) for sd2 in (sd2_low, sd2_high)]
    edges += [(sd1, _nearest(sd1, large, sd2_low, sd2_high)) for sd1 in (sd1_low, sd1_high)]
    corners = [(sd1, sd2) for sd1 in (sd1_low, sd1_high) for sd2 in (sd2_low, sd2_high)]
    low = [quotient(sd1**2 + sd2**2 - large, 2 * sd1 * sd2) for sd1, sd2 in edges]
    high = [quotient(sd1**2 + sd2**2 - small, 2 * sd1 * sd2) for sd1, sd2 in corners]
    bounds = np.fmin.reduce(np.broadcast_arrays(*low)), np.fmax.reduce(np.broadcast_arrays(*high))
    return where_known(bounds, sd1_low, sd1_high, sd2_low, sd2_high)


def _nearest(other: Floats, K: Floats, low: Floats, high: Floats) -> Floats:
    """The SD from `low` to `high` with the least implied r beside the `other` SD."""
    return np.asarray(np.clip(np.sqrt(np.maximum(other**2 - K, 0.0)), low, high))
