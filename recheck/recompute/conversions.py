"""SDs and SEs from what a paper prints in their stead: SE and n, a confidence interval, t, F or p.

SDs are sample SDs (n - 1). A box has a low and a high end for each rounded number; ns, df and levels are
exact. `level` runs from 0 to 1; an infinite df means the normal distribution. Source of all, where no
other is named: Higgins, Li & Deeks, Cochrane Handbook for Systematic Reviews of Interventions, ch. 6.5.2.
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
)
from recheck.recompute.intervals import critical_t, se_from_ci
from recheck.recompute.tails import t_quantile


def se_from_sd(sd: ArrayLike, n: ArrayLike) -> Floats:
    """SE of a mean, sd / sqrt(n)."""
    sd, n = floats(sd, n)
    return quotient(sd, np.sqrt(n))


def sd_from_se(se: ArrayLike, n: ArrayLike) -> Floats:
    """SD of a group from the SE of its mean, se sqrt(n)."""
    se, n = floats(se, n)
    return np.asarray(se * np.sqrt(n))


def sd_from_ci(low: ArrayLike, high: ArrayLike, level: ArrayLike, n: ArrayLike, df: ArrayLike) -> Floats:
    """SD of a group from the interval of its mean, sqrt(n) (high - low) / (2 c).

    c is the critical value of t with `df`: n - 1, or infinity for an interval by the normal distribution.
    """
    return sd_from_se(se_from_ci(low, high, level, df), n)


def sd_from_ci_bounds(
    low_lo: ArrayLike, low_hi: ArrayLike, high_lo: ArrayLike, high_hi: ArrayLike,
    level: ArrayLike, n: ArrayLike, df: ArrayLike,
) -> Bounds:  # fmt: skip
    """Range of `sd_from_ci` over a box of both ends: linear in the width, so at its ends; cut at 0."""
    narrow, wide = spread_bounds(*difference_bounds(high_lo, high_hi, low_lo, low_hi))
    (n,) = floats(n)
    factor = np.sqrt(n) / (2 * critical_t(level, df))
    return np.asarray(factor * narrow), np.asarray(factor * wide)


def ci_of_mean_bounds(
    mean_low: ArrayLike, mean_high: ArrayLike, sd_low: ArrayLike, sd_high: ArrayLike,
    level: ArrayLike, n: ArrayLike, df: ArrayLike,
) -> tuple[Bounds, Bounds]:  # fmt: skip
    """Ranges of the lower and of the upper end of mean ∓ c sd / sqrt(n) over a box of mean and SD.

    Either end rises with the mean; the lower falls with the SD, the upper rises: corners. Ends attained.
    """
    mean_low, mean_high, n = floats(mean_low, mean_high, n)
    sd_low, sd_high = spread_bounds(sd_low, sd_high)
    factor = critical_t(level, df) / np.sqrt(n)
    near, far = factor * sd_low, factor * sd_high
    lower = np.asarray(mean_low - far), np.asarray(mean_high - near)
    return lower, (np.asarray(mean_low + near), np.asarray(mean_high + far))


def sd_from_t(difference: ArrayLike, t: ArrayLike, n1: ArrayLike, n2: ArrayLike) -> Floats:
    """Common SD of two groups from a mean difference and its pooled t, |difference / t| / sqrt(1/n1 + 1/n2).

    Both without their signs; infinite where t is 0 and the difference is not.
    """
    difference, t, n1, n2 = floats(difference, t, n1, n2)
    return np.asarray(quotient(np.abs(difference), np.abs(t)) / np.sqrt(1 / n1 + 1 / n2))


def sd_from_F(difference: ArrayLike, F: ArrayLike, n1: ArrayLike, n2: ArrayLike) -> Floats:
    """Common SD of two groups from a mean difference and its F with 1 and n1 + n2 - 2 df, as t = sqrt(F)."""
    (F,) = floats(F)
    return sd_from_t(difference, np.sqrt(F), n1, n2)


def sd_from_p(difference: ArrayLike, p: ArrayLike, n1: ArrayLike, n2: ArrayLike) -> Floats:
    """Common SD of two groups from a mean difference and its two-sided pooled p."""
    p, n1, n2 = floats(p, n1, n2)
    return sd_from_t(difference, t_quantile(p / 2, n1 + n2 - 2), n1, n2)


def sd_from_t_bounds(
    difference_low: ArrayLike, difference_high: ArrayLike, t_low: ArrayLike, t_high: ArrayLike,
    n1: ArrayLike, n2: ArrayLike,
) -> Bounds:  # fmt: skip
    """Range of `sd_from_t` over a box of difference and t: |difference| over |t|, with its ends at corners."""
    least, most = absolute_bounds(difference_low, difference_high)
    narrow, wide = absolute_bounds(t_low, t_high)
    n1, n2 = floats(n1, n2)
    factor = np.sqrt(1 / n1 + 1 / n2)
    low, high = quotient_bounds(least, most, narrow, wide)
    return np.asarray(low / factor), np.asarray(high / factor)


def sd_from_p_bounds(
    difference_low: ArrayLike, difference_high: ArrayLike, p_low: ArrayLike, p_high: ArrayLike,
    n1: ArrayLike, n2: ArrayLike,
) -> Bounds:  # fmt: skip
    """Range of `sd_from_p` over a box of difference and p (cut to 0 to 1): |t| falls as p rises."""
    p_low, p_high = (np.clip(p, 0.0, 1.0) for p in floats(p_low, p_high))
    n1, n2 = floats(n1, n2)
    df = n1 + n2 - 2
    t_low, t_high = t_quantile(p_high / 2, df), t_quantile(p_low / 2, df)
    return sd_from_t_bounds(difference_low, difference_high, t_low, t_high, n1, n2)


def correlation_from_change(sd1: ArrayLike, sd2: ArrayLike, sd_change: ArrayLike) -> Floats:
    """Correlation of two measures from their SDs and that of the change, (sd1² + sd2² - sdc²) / (2 sd1 sd2).

    Outside [-1, 1] no data give these three. Source: Cochrane Handbook, as above, 6.5.2.8.
    """
    sd1, sd2, sd_change = floats(sd1, sd2, sd_change)
    return quotient(sd1**2 + sd2**2 - sd_change**2, 2 * sd1 * sd2)


def coefficient_of_variation(mean: ArrayLike, sd: ArrayLike) -> Floats:
    """SD as a share of the mean, sd / |mean|. Source: Pearson (1896), Phil. Trans. A 187:253-318."""
    (mean,) = floats(mean)
    return quotient(sd, np.abs(mean))


def log_odds_ratio_from_d(d: ArrayLike) -> Floats:
    """Logarithm of the odds ratio that answers to d where both groups are logistic, d π / √3.

    Its variance is that of d times π²/3. Source: Hasselblad & Hedges (1995), Psychological Bulletin
    117:167-178; Borenstein, Hedges, Higgins & Rothstein (2009), Introduction to Meta-Analysis, ch. 7.
    """
    (d,) = floats(d)
    return np.asarray(d * np.pi / np.sqrt(3))


def d_from_log_odds_ratio(log_odds_ratio: ArrayLike) -> Floats:
    """The d that answers to a log odds ratio, its √3/π-fold. Source: as for `log_odds_ratio_from_d`."""
    (log_odds_ratio,) = floats(log_odds_ratio)
    return np.asarray(log_odds_ratio * np.sqrt(3) / np.pi)
