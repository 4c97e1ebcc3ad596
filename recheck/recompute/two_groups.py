"""Two independent groups from means, SDs and ns, and their ranges over boxes of means and SDs.

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
    where_known,
)


def pooled_sd(sd1: ArrayLike, n1: ArrayLike, sd2: ArrayLike, n2: ArrayLike) -> Floats:
    """Pooled SD, sqrt(((n1 - 1) sd1² + (n2 - 1) sd2²) / (n1 + n2 - 2)); rises with either SD.

    Source: Student (1908), Biometrika 6:1-25; Cohen (1988), Statistical Power Analysis, 2.5.
    """
    sd1, n1, sd2, n2 = floats(sd1, n1, sd2, n2)
    return np.asarray(np.sqrt(quotient((n1 - 1) * sd1**2 + (n2 - 1) * sd2**2, n1 + n2 - 2)))


def pooled_se(sd1: ArrayLike, n1: ArrayLike, sd2: ArrayLike, n2: ArrayLike) -> Floats:
    """SE of the mean difference with the pooled SD, `pooled_sd` times sqrt(1/n1 + 1/n2)."""
    n1, n2 = floats(n1, n2)
    return np.asarray(pooled_sd(sd1, n1, sd2, n2) * np.sqrt(1 / n1 + 1 / n2))


def welch_se(sd1: ArrayLike, n1: ArrayLike, sd2: ArrayLike, n2: ArrayLike) -> Floats:
    """SE of the mean difference with separate variances, sqrt(sd1²/n1 + sd2²/n2); rises with either SD.

    Source: Welch (1938), Biometrika 29:350-362.
    """
    sd1, n1, sd2, n2 = floats(sd1, n1, sd2, n2)
    return np.asarray(np.sqrt(sd1**2 / n1 + sd2**2 / n2))


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
    """Student's t of two independent groups, by `pooled_se`, df = n1 + n2 - 2; infinite where both SDs are 0."""
    return quotient(np.subtract(mean1, mean2), pooled_se(sd1, n1, sd2, n2))


def t_welch(
    mean1: ArrayLike, sd1: ArrayLike, n1: ArrayLike, mean2: ArrayLike, sd2: ArrayLike, n2: ArrayLike
) -> Floats:
    """Welch's t of two independent groups, df by `satterthwaite_df`; infinite where both SDs are 0."""
    return quotient(np.subtract(mean1, mean2), welch_se(sd1, n1, sd2, n2))


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
    """Range of `satterthwaite_df` over a box of SDs.

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
    bounds = np.asarray(low), _df_of_share(best, n1, n2)
    return where_known(bounds, sd1_low, sd1_high, sd2_low, sd2_high)


def _share(sd1: Floats, n1: Floats, sd2: Floats, n2: Floats) -> Floats:
    """Share of group 1 in the squared SE of the difference; nan where both SDs are 0."""
    return quotient(sd1**2 / n1, sd1**2 / n1 + sd2**2 / n2)


def _df_of_share(share: Floats, n1: Floats, n2: Floats) -> Floats:
    """Satterthwaite's df where group 1 has that share of the squared SE."""
    return quotient(1.0, quotient(share**2, n1 - 1) + quotient((1 - share) ** 2, n2 - 1))


def binary_slope(
    mean1: ArrayLike, sd1: ArrayLike, n1: ArrayLike, mean2: ArrayLike, sd2: ArrayLike, n2: ArrayLike,
    code1: ArrayLike = 1.0, code2: ArrayLike = 0.0,
) -> tuple[Floats, Floats, Floats]:  # fmt: skip
    """Slope b, its SE and t of the regression on a predictor that is `code1` in group 1 and `code2` in group 2.

    b = (mean1 - mean2) / (code1 - code2), SE = pooled SE / |code1 - code2|: t is the pooled t with
    n1 + n2 - 2 df, its sign turned where code1 < code2. Source: Cohen (1968), Psychological Bulletin
    70:426-443.
    """
    step = np.subtract(code1, code2, dtype=np.float64)
    b, se = quotient(np.subtract(mean1, mean2), step), quotient(pooled_se(sd1, n1, sd2, n2), np.abs(step))
    return b, se, quotient(b, se)
