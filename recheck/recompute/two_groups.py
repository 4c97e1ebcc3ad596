"""Two independent or paired groups from means, SDs and ns, and their ranges over boxes of means and SDs.

Differences are group 1 minus group 2; SDs are sample SDs (n - 1); ns are exact. In a box each mean and
SD has a low and a high end and varies by itself; SDs are cut at 0.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from recheck.recompute.arrays import (
    Bounds,
    Floats,
    difference_bounds,
    floats,
    quotient,
    quotient_bounds,
    spread_bounds,
)


def pooled_sd(sd1: ArrayLike, n1: ArrayLike, sd2: ArrayLike, n2: ArrayLike) -> Floats:
    """Pooled SD, sqrt(((n1 - 1) sd1² + (n2 - 1) sd2²) / (n1 + n2 - 2)); rises with either SD.

    Source: Student (1908), Biometrika 6:1-25; Cohen (1988), Statistical Power Analysis, 2.5.
    """
    sd1, n1, sd2, n2 = floats(sd1, n1, sd2, n2)
    return np.asarray(np.sqrt(quotient((n1 - 1) * sd1**2 + (n2 - 1) * sd2**2, n1 + n2 - 2)))


def pooled_se(sd1: ArrayLike, n1: ArrayLike, sd2: ArrayLike, n2: ArrayLike) -> Floats:
    """SE of the mean difference with the pooled SD, pooled_sd sqrt(1/n1 + 1/n2)."""
    n1, n2 = floats(n1, n2)
    return np.asarray(pooled_sd(sd1, n1, sd2, n2) * np.sqrt(1 / n1 + 1 / n2))


def welch_se(sd1: ArrayLike, n1: ArrayLike, sd2: ArrayLike, n2: ArrayLike) -> Floats:
    """SE of the mean difference with separate variances, sqrt(sd1²/n1 + sd2²/n2); rises with either SD.

    Source: Welch (1938), Biometrika 29:350-362.
    """
    sd1, n1, sd2, n2 = floats(sd1, n1, sd2, n2)
    return np.asarray(np.hypot(sd1 / np.sqrt(n1), sd2 / np.sqrt(n2)))


def satterthwaite_df(sd1: ArrayLike, n1: ArrayLike, sd2: ArrayLike, n2: ArrayLike) -> Floats:
    """Satterthwaite's df of the Welch test, (v1 + v2)² / (v1²/(n1-1) + v2²/(n2-1)), v = sd²/n.

    nan where both SDs are 0. Source: Satterthwaite (1946), Biometrics Bulletin 2:110-114. (Welch's
    own df of 1947, with n + 1, is another one.)
    """
    sd1, n1, sd2, n2 = floats(sd1, n1, sd2, n2)
    return _df_of_share(_share(sd1, n1, sd2, n2), n1, n2)


def t_pooled(
    mean1: ArrayLike, sd1: ArrayLike, n1: ArrayLike, mean2: ArrayLike, sd2: ArrayLike, n2: ArrayLike
) -> Floats:
    """Student's t of two independent groups, df = n1 + n2 - 2; infinite where both SDs are 0."""
    return quotient(np.subtract(mean1, mean2), pooled_se(sd1, n1, sd2, n2))


def t_welch(
    mean1: ArrayLike, sd1: ArrayLike, n1: ArrayLike, mean2: ArrayLike, sd2: ArrayLike, n2: ArrayLike
) -> Floats:
    """Welch's t of two independent groups, df by `satterthwaite_df`; infinite where both SDs are 0."""
    return quotient(np.subtract(mean1, mean2), welch_se(sd1, n1, sd2, n2))


def paired_se(sd1: ArrayLike, sd2: ArrayLike, r: ArrayLike, n: ArrayLike) -> Floats:
    """SE of a paired mean difference, sqrt((sd1² + sd2² - 2 r sd1 sd2) / n).

    Written as (sd1 - sd2)² + 2 (1 - r) sd1 sd2, which keeps its digits for r near 1.
    """
    sd1, sd2, r, n = floats(sd1, sd2, r, n)
    return np.asarray(np.sqrt(((sd1 - sd2) ** 2 + 2 * (1 - r) * sd1 * sd2) / n))


def implied_correlation(
    mean_difference: ArrayLike, sd1: ArrayLike, sd2: ArrayLike, n: ArrayLike, t: ArrayLike
) -> Floats:
    """The correlation with which a paired t follows, (sd1² + sd2² - n D²/t²) / (2 sd1 sd2).

    Outside [-1, 1] no data give that t. Source: Cochrane Handbook for Systematic Reviews of
    Interventions, 6.5.2.8, solved for r with sd_difference = D sqrt(n) / t.
    """
    difference, sd1, sd2, n, t = floats(mean_difference, sd1, sd2, n, t)
    return quotient(sd1**2 + sd2**2 - n * quotient(difference, t) ** 2, 2 * sd1 * sd2)


def pooled_t_bounds(
    mean1_low: ArrayLike, mean1_high: ArrayLike, sd1_low: ArrayLike, sd1_high: ArrayLike, n1: ArrayLike,
    mean2_low: ArrayLike, mean2_high: ArrayLike, sd2_low: ArrayLike, sd2_high: ArrayLike, n2: ArrayLike,
) -> Bounds:  # fmt: skip
    """Range of the signed pooled t: difference and SE vary by themselves and the SE rises with either SD.

    Both ends are corners (see `quotient_bounds`); infinite where both SDs may be 0.
    """
    (sd1_low, sd1_high), (sd2_low, sd2_high) = (
        spread_bounds(sd1_low, sd1_high),
        spread_bounds(sd2_low, sd2_high),
    )
    least, most = pooled_se(sd1_low, n1, sd2_low, n2), pooled_se(sd1_high, n1, sd2_high, n2)
    return quotient_bounds(*difference_bounds(mean1_low, mean1_high, mean2_low, mean2_high), least, most)


def welch_t_bounds(
    mean1_low: ArrayLike, mean1_high: ArrayLike, sd1_low: ArrayLike, sd1_high: ArrayLike, n1: ArrayLike,
    mean2_low: ArrayLike, mean2_high: ArrayLike, sd2_low: ArrayLike, sd2_high: ArrayLike, n2: ArrayLike,
) -> Bounds:  # fmt: skip
    """Range of the signed Welch t, with corners as in `pooled_t_bounds`."""
    (sd1_low, sd1_high), (sd2_low, sd2_high) = (
        spread_bounds(sd1_low, sd1_high),
        spread_bounds(sd2_low, sd2_high),
    )
    least, most = welch_se(sd1_low, n1, sd2_low, n2), welch_se(sd1_high, n1, sd2_high, n2)
    return quotient_bounds(*difference_bounds(mean1_low, mean1_high, mean2_low, mean2_high), least, most)


def welch_df_bounds(
    sd1_low: ArrayLike, sd1_high: ArrayLike, n1: ArrayLike,
    sd2_low: ArrayLike, sd2_high: ArrayLike, n2: ArrayLike,
) -> Bounds:  # fmt: skip
    """Range of Satterthwaite's df over a box of SDs.

    With w = v1 / (v1 + v2), v = sd²/n, 1/df = w²/(n1-1) + (1-w)²/(n2-1): a parabola in w with its
    least value 1/(n1+n2-2) at w = (n1-1)/(n1+n2-2), that is sd1²/sd2² = n1(n1-1) / (n2(n2-1)). w rises
    with sd1 and falls with sd2, so it takes every value between two corners of the box: the largest df
    is at the w nearest to the vertex, the smallest at one of the two corners. Where both SDs may be 0
    w is free.
    """
    (sd1_low, sd1_high), (sd2_low, sd2_high) = (
        spread_bounds(sd1_low, sd1_high),
        spread_bounds(sd2_low, sd2_high),
    )
    n1, n2 = floats(n1, n2)
    least, most = _share(sd1_low, n1, sd2_high, n2), _share(sd1_high, n1, sd2_low, n2)
    least, most = np.where(np.isnan(least), 0.0, least), np.where(np.isnan(most), 1.0, most)
    best = np.clip(quotient(n1 - 1, n1 + n2 - 2), least, most)
    low = np.minimum(_df_of_share(least, n1, n2), _df_of_share(most, n1, n2))
    return np.asarray(low), _df_of_share(best, n1, n2)


def paired_t_bounds(
    mean1_low: ArrayLike, mean1_high: ArrayLike, sd1_low: ArrayLike, sd1_high: ArrayLike,
    mean2_low: ArrayLike, mean2_high: ArrayLike, sd2_low: ArrayLike, sd2_high: ArrayLike, n: ArrayLike,
) -> Bounds:  # fmt: skip
    """Range of |t| of a paired test over a box of means and SDs and every correlation from -1 to 1.

    The SD of the differences takes all values from |sd1 - sd2| (r = 1) to sd1 + sd2 (r = -1), so over
    the box from the distance of the two SD intervals, 0 where they meet, to the sum of the high
    ends; |t| is |D| sqrt(n) over it, with corners as in `quotient_bounds`.
    """
    (sd1_low, sd1_high), (sd2_low, sd2_high) = (
        spread_bounds(sd1_low, sd1_high),
        spread_bounds(sd2_low, sd2_high),
    )
    (n,) = floats(n)
    least, most = _absolute(*difference_bounds(mean1_low, mean1_high, mean2_low, mean2_high))
    narrow, _ = _absolute(*difference_bounds(sd1_low, sd1_high, sd2_low, sd2_high))
    return quotient_bounds(least, most, narrow / np.sqrt(n), (sd1_high + sd2_high) / np.sqrt(n))


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
    t_low, t_high = _absolute(*floats(t_low, t_high))
    D_low, D_high = _absolute(*difference_bounds(mean1_low, mean1_high, mean2_low, mean2_high))
    small = np.where(D_low == 0, 0.0, n * quotient(D_low, t_high) ** 2)
    large = np.where(t_low == 0, np.inf, n * quotient(D_high, t_low) ** 2)
    edges = [(_nearest(sd2, large, sd1_low, sd1_high), sd2) for sd2 in (sd2_low, sd2_high)]
    edges += [(sd1, _nearest(sd1, large, sd2_low, sd2_high)) for sd1 in (sd1_low, sd1_high)]
    corners = [(sd1, sd2) for sd1 in (sd1_low, sd1_high) for sd2 in (sd2_low, sd2_high)]
    low = [quotient(sd1**2 + sd2**2 - large, 2 * sd1 * sd2) for sd1, sd2 in edges]
    high = [quotient(sd1**2 + sd2**2 - small, 2 * sd1 * sd2) for sd1, sd2 in corners]
    return np.fmin.reduce(np.broadcast_arrays(*low)), np.fmax.reduce(np.broadcast_arrays(*high))


def _nearest(other: Floats, K: Floats, low: Floats, high: Floats) -> Floats:
    """The SD from `low` to `high` with the least implied r beside the `other` SD."""
    return np.asarray(np.clip(np.sqrt(np.maximum(other**2 - K, 0.0)), low, high))


def _absolute(low: Floats, high: Floats) -> Bounds:
    """Range of |x| where x runs from `low` to `high`."""
    return np.maximum(np.maximum(low, -high), 0.0), np.asarray(np.maximum(-low, high))


def _share(sd1: Floats, n1: Floats, sd2: Floats, n2: Floats) -> Floats:
    """Share of group 1 in the squared SE of the difference; nan where both SDs are 0."""
    return quotient(sd1**2 / n1, sd1**2 / n1 + sd2**2 / n2)


def _df_of_share(share: Floats, n1: Floats, n2: Floats) -> Floats:
    """Satterthwaite's df where group 1 has that share of the squared SE."""
    return quotient(1.0, quotient(share**2, n1 - 1) + quotient((1 - share) ** 2, n2 - 1))
