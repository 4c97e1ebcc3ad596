"""Confidence intervals of effect sizes: by the noncentral t, F and chi-square, and the usual normal approximations.

`level` runs from 0 to 1, both ends miss (1 - level) / 2. An interval by a noncentral distribution holds those true
values under which the observed statistic is in neither tail. Its ends rise with the statistic for fixed df: P(T <= t)
rises with t and falls as the noncentrality rises, and so with F and chi-square. So the ends over an interval
of t, F, chi-square, d or eta squared are those at its two ends.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from recheck.recompute.arrays import Bounds, Floats, floats, quotient, together
from recheck.recompute.effect_sizes import d_from_t, d_z_from_t, hedges_correction
from recheck.recompute.noncentral import noncentrality
from recheck.recompute.noncentral_f import noncentral_chi2_lambda, noncentral_F_lambda
from recheck.recompute.tails import t_quantile, z_quantile


def noncentral_t_ci(t: ArrayLike, df: ArrayLike, level: ArrayLike = 0.95) -> Bounds:
    """Interval of the noncentrality delta of which `t` is an observation, by inversion of two tests.

    Either end is good to 1e-8. Source: Steiger & Fouladi (1997), in What If There Were No Significance Tests?, ch. 9.
    """
    (level,) = floats(level)
    miss = (1 - level) / 2
    return noncentrality(t, df, 1 - miss), noncentrality(t, df, miss)


def d_noncentral_ci(d: ArrayLike, n1: ArrayLike, n2: ArrayLike, level: ArrayLike = 0.95) -> Bounds:
    """Exact interval of d_s of two independent groups. Source: Steiger & Fouladi (1997), as above."""
    d, n1, n2 = floats(d, n1, n2)
    low, high = noncentral_t_ci(quotient(d, np.sqrt(1 / n1 + 1 / n2)), n1 + n2 - 2, level)
    return d_from_t(low, n1, n2), d_from_t(high, n1, n2)


def g_noncentral_ci(d: ArrayLike, n1: ArrayLike, n2: ArrayLike, level: ArrayLike = 0.95) -> Bounds:
    """The exact interval of d_s times J, as it is mostly put beside g.

    Source: Hedges & Olkin (1985), Statistical Methods for Meta-Analysis, ch. 5, for J; as above.
    """
    n1, n2 = floats(n1, n2)
    low, high = d_noncentral_ci(d, n1, n2, level)
    factor = hedges_correction(n1 + n2 - 2)
    return np.asarray(factor * low), np.asarray(factor * high)


def d_z_noncentral_ci(d: ArrayLike, n: ArrayLike, level: ArrayLike = 0.95) -> Bounds:
    """Exact interval of d_z of n pairs, or of one sample. Source: Steiger & Fouladi (1997), as above."""
    d, n = floats(d, n)
    low, high = noncentral_t_ci(d * np.sqrt(n), n - 1, level)
    return d_z_from_t(low, n), d_z_from_t(high, n)


def glass_delta_noncentral_ci(
    delta: ArrayLike, n_other: ArrayLike, n_control: ArrayLike, level: ArrayLike = 0.95
) -> Bounds:
    """Interval of Glass's delta by the noncentral t with n_control - 1 df, exact for equal variances.

    Source: Hedges (1981), Journal of Educational Statistics 6:107-128.
    """
    delta, n_other, n_control = floats(delta, n_other, n_control)
    scale = np.sqrt(1 / n_other + 1 / n_control)
    low, high = noncentral_t_ci(quotient(delta, scale), n_control - 1, level)
    return np.asarray(low * scale), np.asarray(high * scale)


def d_average_noncentral_ci(
    d: ArrayLike, sd1: ArrayLike, sd2: ArrayLike, r: ArrayLike, n: ArrayLike, level: ArrayLike = 0.95
) -> Bounds:
    """Interval of d_av by the root mean square SD of pairs, the paired t's noncentrality rescaled.

    Source: Algina & Keselman (2003), Educational and Psychological Measurement 63:537-553.
    """
    d, sd1, sd2, r, n = floats(d, sd1, sd2, r, n)
    scale = np.sqrt(quotient(2 * (sd1**2 + sd2**2 - 2 * r * sd1 * sd2), n * (sd1**2 + sd2**2)))
    low, high = noncentral_t_ci(quotient(d, scale), n - 1, level)
    return np.asarray(low * scale), np.asarray(high * scale)


def normal_ci(estimate: ArrayLike, variance: ArrayLike, level: ArrayLike = 0.95) -> Bounds:
    """Interval by the normal approximation, estimate ∓ z sqrt(variance), with any variance of `effect_variances`.

    Source: Hedges & Olkin (1985), Statistical Methods for Meta-Analysis, ch. 5.
    """
    estimate, variance, level = floats(estimate, variance, level)
    half = z_quantile((1 - level) / 2) * np.sqrt(variance)
    return np.asarray(estimate - half), np.asarray(estimate + half)


def t_ci(estimate: ArrayLike, variance: ArrayLike, df: ArrayLike, level: ArrayLike = 0.95) -> Bounds:
    """The same with the quantile of t for that of the normal distribution, as some programs take it.

    Source: Cumming & Finch (2001), Educational and Psychological Measurement 61:532-574, who warn of it.
    """
    estimate, variance, level = floats(estimate, variance, level)
    half = t_quantile((1 - level) / 2, df) * np.sqrt(variance)
    return np.asarray(estimate - half), np.asarray(estimate + half)


def noncentral_F_ci(F: ArrayLike, df1: ArrayLike, df2: ArrayLike, level: ArrayLike = 0.95) -> Bounds:
    """Interval of the noncentrality lambda of which F is an observation; either end is 0 where F is too small for more.

    Source: Steiger & Fouladi (1997), as above; Steiger (2004), Psychological Methods 9:164-182.
    """
    (level,) = floats(level)
    miss = (1 - level) / 2
    return noncentral_F_lambda(F, df1, df2, 1 - miss), noncentral_F_lambda(F, df1, df2, miss)


def partial_eta2_ci(F: ArrayLike, df1: ArrayLike, df2: ArrayLike, level: ArrayLike = 0.90) -> Bounds:
    """Interval of the population share of variance of an effect, lambda / (lambda + df1 + df2 + 1); may be [0, 0].

    For a one-way design df1 + df2 + 1 = N. It is called that of eta², partial eta², omega² or R² alike; it may leave out
    its own estimate, which is biased upward. Source: Steiger (2004), as above; Smithson (2003), Confidence Intervals, ch. 5.
    """
    df1, df2 = floats(df1, df2)
    low, high = noncentral_F_ci(F, df1, df2, level)
    return share_of_lambda(low, df1 + df2 + 1), share_of_lambda(high, df1 + df2 + 1)


def partial_eta2_ci_by_df(F: ArrayLike, df1: ArrayLike, df2: ArrayLike, level: ArrayLike = 0.90) -> Bounds:
    """The same with the error df alone, lambda / (lambda + df2): partial eta² of the two F = lambda / df1.

    As programs print it; Kelley (2007), Journal of Statistical Software 20(8), divides by lambda + N, as `partial_eta2_ci` does
    in a one-way design. Source: Ben-Shachar, Lüdecke & Makowski (2020), Journal of Open Source Software 5(56):2815 (from memory).
    """
    (df2,) = floats(df2)
    low, high = noncentral_F_ci(F, df1, df2, level)
    return share_of_lambda(low, df2), share_of_lambda(high, df2)


def share_of_lambda(noncentrality: ArrayLike, total: ArrayLike) -> Floats:
    """Share of variance of a noncentrality, lambda / (lambda + total); 1 of an infinite one. Source: Steiger (2004), as above."""
    noncentrality, total = floats(noncentrality, total)
    return quotient(1.0, 1 + quotient(total, noncentrality))


def f_ci(F: ArrayLike, df1: ArrayLike, df2: ArrayLike, level: ArrayLike = 0.90) -> Bounds:
    """Interval of Cohen's f, sqrt(lambda / (df1 + df2 + 1)). Source: Steiger (2004), as above."""
    df1, df2 = floats(df1, df2)
    low, high = noncentral_F_ci(F, df1, df2, level)
    return np.sqrt(low / (df1 + df2 + 1)), np.sqrt(high / (df1 + df2 + 1))


def r_ci(r: ArrayLike, n: ArrayLike, level: ArrayLike = 0.95) -> Bounds:
    """Interval of a correlation, tanh(atanh r ∓ z / sqrt(n - 3)); nan where n < 3 or |r| > 1.

    Rises with r, as atanh and tanh do. Source: Fisher (1921), Metron 1:3-32.
    """
    r, n, level = floats(r, n, level)
    with np.errstate(divide="ignore", invalid="ignore"):
        middle, half = np.arctanh(r), z_quantile((1 - level) / 2) / np.sqrt(n - 3)
        return np.asarray(np.tanh(middle - half)), np.asarray(np.tanh(middle + half))


def cramers_v_ci(
    chi2: ArrayLike, df: ArrayLike, N: ArrayLike, k: ArrayLike, level: ArrayLike = 0.95
) -> Bounds:
    """Interval of Cramér's V (phi for k = 2), sqrt(lambda / (N (k - 1))), lambda by the noncentral chi-square; may be [0, 0].

    k is the smaller of the numbers of rows and columns. Source: Steiger (2004), as above; programs since.
    """
    low, high = _chi2_ends(chi2, df, level)
    N, k = floats(N, k)
    return np.sqrt(quotient(low, N * (k - 1))), np.sqrt(quotient(high, N * (k - 1)))


def cramers_v_ci_shifted(
    chi2: ArrayLike, df: ArrayLike, N: ArrayLike, k: ArrayLike, level: ArrayLike = 0.95
) -> Bounds:
    """The same with lambda + df for lambda, as chi-square itself exceeds lambda by df on average.

    Source: Smithson (2003), Confidence Intervals, ch. 4.
    """
    low, high = _chi2_ends(chi2, df, level)
    df, N, k = floats(df, N, k)
    return np.sqrt(quotient(low + df, N * (k - 1))), np.sqrt(quotient(high + df, N * (k - 1)))


def _chi2_ends(chi2: ArrayLike, df: ArrayLike, level: ArrayLike) -> Bounds:
    chi2, df, level = together(chi2, df, level)
    miss = (1 - level) / 2
    return noncentral_chi2_lambda(chi2, df, 1 - miss), noncentral_chi2_lambda(chi2, df, miss)
