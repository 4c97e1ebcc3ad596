"""Power of the t tests of one mean, of paired differences and of two means, by the noncentral t distribution."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike
from scipy import special

from recheck.recompute.arrays import Floats, together
from recheck.recompute.noncentral import noncentral_t_cdf
from recheck.recompute.power.search import MOST, root, whole_from

LARGEST_EFFECT = 1e6


def t_power(
    noncentrality: ArrayLike, df: ArrayLike, alpha: ArrayLike = 0.05, *, tails: int = 2, far_tail: bool = True
) -> Floats:
    """Power of a t test: P(T > t_crit), with `far_tail` plus P(T < −t_crit), T noncentral t.

    Arguments broadcast; df > 0, 0 < alpha < 1; a noncentrality below 0 counts as its size in a two-sided test.
    Increasing in the noncentrality (>= 0) and in alpha. nan where df <= 0. Absolute error 1e-9.
    Source: Johnson & Welch (1940), Biometrika 31:362-389; Cohen (1988) Statistical Power Analysis, 2nd ed., ch. 2.
    """
    shift, df, alpha = together(noncentrality, df, alpha)
    if tails == 2:
        shift = np.abs(shift)
    critical = special.stdtrit(df, 1 - alpha / tails)
    near = 1 - _cdf(critical, df, shift)
    power = near + _cdf(-critical, df, shift) if tails == 2 and far_tail else near
    return np.asarray(np.where(df > 0, power, np.nan))


def _cdf(t: Floats, df: Floats, shift: Floats) -> Floats:
    """The library's noncentral t; where it gives nan (far tails), the quadrature."""
    below = np.asarray(special.nctdtr(df, shift, t))
    odd = np.isnan(below) & (df >= 1) & np.isfinite(shift)
    if np.any(odd):
        below = np.array(below)
        below[odd] = noncentral_t_cdf(t[odd], df[odd], shift[odd])
    return np.asarray(below, dtype=np.float64)


def one_sample_t_power(
    d: ArrayLike, n: ArrayLike, alpha: ArrayLike = 0.05, *, tails: int = 2, far_tail: bool = True
) -> Floats:
    """Power of a one-sample t test, or of a paired one with d_z and n pairs: noncentrality d √n, df n − 1.

    Source: Cohen (1988) Statistical Power Analysis, 2nd ed., 2.3.
    """
    d, n, alpha = together(d, n, alpha)
    with np.errstate(invalid="ignore"):
        return t_power(d * np.sqrt(n), n - 1, alpha, tails=tails, far_tail=far_tail)


def two_sample_t_power(
    d: ArrayLike,
    n1: ArrayLike,
    n2: ArrayLike,
    alpha: ArrayLike = 0.05,
    *,
    tails: int = 2,
    far_tail: bool = True,
) -> Floats:
    """Power of a pooled two-sample t test: noncentrality d √(n1 n2 / (n1 + n2)), df n1 + n2 − 2.

    Source: Cohen (1988) Statistical Power Analysis, 2nd ed., 2.2-2.3.
    """
    d, n1, n2, alpha = together(d, n1, n2, alpha)
    with np.errstate(invalid="ignore", divide="ignore"):
        shift = d * np.sqrt(n1 * n2 / (n1 + n2))
    return t_power(shift, n1 + n2 - 2, alpha, tails=tails, far_tail=far_tail)


def one_sample_t_n(
    d: ArrayLike,
    power: ArrayLike,
    alpha: ArrayLike = 0.05,
    *,
    tails: int = 2,
    far_tail: bool = True,
    whole: bool = False,
) -> Floats:
    """The n of a one-sample (pairs of a paired) t test that has the power for an effect d > 0 (d_z).

    By `one_sample_t_power`. At least 2; nan for d = 0.
    """
    d, power, alpha = together(d, power, alpha)

    def rises(n: Floats) -> Floats:
        return one_sample_t_power(d, n, alpha, tails=tails, far_tail=far_tail)

    found = root(rises, power, np.full(d.shape, 2.0), np.full(d.shape, MOST))
    return whole_from(rises, power, found) if whole else found


def two_sample_t_n(
    d: ArrayLike, power: ArrayLike, alpha: ArrayLike = 0.05, *, ratio: ArrayLike = 1.0,
    tails: int = 2, far_tail: bool = True, whole: bool = False,
) -> Floats:  # fmt: skip
    """The n of the first group that has the power for an effect d > 0; the second group has `ratio` times as many.

    By `two_sample_t_power`. At least 2 with equal groups (3 / (1 + ratio) otherwise, so that df >= 1); nan for d = 0.
    """
    d, power, alpha, ratio = together(d, power, alpha, ratio)

    def rises(n: Floats) -> Floats:
        return two_sample_t_power(d, n, ratio * n, alpha, tails=tails, far_tail=far_tail)

    least = np.where(ratio == 1, 2.0, 3 / (1 + ratio))
    found = root(rises, power, least, np.full(d.shape, MOST))
    return whole_from(rises, power, found) if whole else found


def one_sample_t_detectable(
    n: ArrayLike, power: ArrayLike, alpha: ArrayLike = 0.05, *, tails: int = 2, far_tail: bool = True
) -> Floats:
    """The smallest effect d (d_z) that a one-sample (paired) t test of n (pairs) detects with the power of `one_sample_t_power`."""
    n, power, alpha = together(n, power, alpha)

    def rises(d: Floats) -> Floats:
        return one_sample_t_power(d, n, alpha, tails=tails, far_tail=far_tail)

    return root(rises, power, np.full(n.shape, 1 / LARGEST_EFFECT), np.full(n.shape, LARGEST_EFFECT))


def two_sample_t_detectable(
    n1: ArrayLike,
    n2: ArrayLike,
    power: ArrayLike,
    alpha: ArrayLike = 0.05,
    *,
    tails: int = 2,
    far_tail: bool = True,
) -> Floats:
    """The smallest effect d that a pooled two-sample t test detects with the power of `two_sample_t_power`."""
    n1, n2, power, alpha = together(n1, n2, power, alpha)

    def rises(d: Floats) -> Floats:
        return two_sample_t_power(d, n1, n2, alpha, tails=tails, far_tail=far_tail)

    return root(rises, power, np.full(n1.shape, 1 / LARGEST_EFFECT), np.full(n1.shape, LARGEST_EFFECT))
