"""Sampling variances of effect sizes, each published formula by its own name; the SE is the square root.

ns are group sizes; differences are group 1 minus group 2; r is the correlation of paired measures where it stands
beside SDs or a d of pairs.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from recheck.recompute.arrays import Floats, floats, quotient
from recheck.recompute.effect_sizes import hedges_correction


def d_variance(d: ArrayLike, n1: ArrayLike, n2: ArrayLike) -> Floats:
    """Variance of d_s in large samples, 1/n1 + 1/n2 + d² / (2 (n1 + n2)); also of g with g for d.

    Source: Hedges & Olkin (1985), Statistical Methods for Meta-Analysis, ch. 5; Borenstein et al. (2009),
    Introduction to Meta-Analysis, formula 4.20 (number from memory).
    """
    d, n1, n2 = floats(d, n1, n2)
    return np.asarray(1 / n1 + 1 / n2 + d * d / (2 * (n1 + n2)))


def d_variance_by_df(d: ArrayLike, n1: ArrayLike, n2: ArrayLike) -> Floats:
    """Variance of d_s with df in the second term, 1/n1 + 1/n2 + d² / (2 (n1 + n2 - 2)).

    Source: Hunter & Schmidt (2004), Methods of Meta-Analysis, ch. 7; Cumming (2012), The New Statistics (both from memory).
    """
    d, n1, n2 = floats(d, n1, n2)
    return np.asarray(1 / n1 + 1 / n2 + d * d / (2 * (n1 + n2 - 2)))


def d_variance_exact(delta: ArrayLike, n1: ArrayLike, n2: ArrayLike) -> Floats:
    """Variance that d_s has where the true value is `delta`, df/(df - 2) (1/n1 + 1/n2 + delta²) - delta²/J²; nan for df <= 2.

    Source: Hedges (1981), Journal of Educational Statistics 6:107-128, formula 6b (number from memory).
    """
    delta, n1, n2 = floats(delta, n1, n2)
    df = n1 + n2 - 2
    with np.errstate(divide="ignore", invalid="ignore"):
        spread = df / (df - 2) * (1 / n1 + 1 / n2 + delta * delta) - (delta / hedges_correction(df)) ** 2
    return np.where(df > 2, spread, np.nan)


def g_variance(d: ArrayLike, n1: ArrayLike, n2: ArrayLike) -> Floats:
    """Variance of g = J d, J² times the large-sample variance of d. Source: Borenstein et al. (2009), formula 4.24."""
    n1, n2 = floats(n1, n2)
    return np.asarray(hedges_correction(n1 + n2 - 2) ** 2 * d_variance(d, n1, n2))


def g_variance_revised(g: ArrayLike, n1: ArrayLike, n2: ArrayLike) -> Floats:
    """Variance of g with a corrected total, 1/n1 + 1/n2 + g² / (2 (n1 + n2 - 3.94)).

    Source: Hedges & Olkin (1985), as above; Deeks & Higgins (2010), the statistical algorithms of the Cochrane Collaboration.
    """
    g, n1, n2 = floats(g, n1, n2)
    return np.asarray(1 / n1 + 1 / n2 + g * g / (2 * (n1 + n2 - 3.94)))


def g_variance_unbiased(g: ArrayLike, n1: ArrayLike, n2: ArrayLike) -> Floats:
    """Unbiased estimate of the variance of g, 1/n1 + 1/n2 + (1 - (df - 2) / (df J²)) g²; nan for df <= 1.

    Source: Hedges (1983), Psychological Bulletin 93:388-395; Viechtbauer (2007), Journal of Educational and Behavioral
    Statistics 32:39-60.
    """
    g, n1, n2 = floats(g, n1, n2)
    df = n1 + n2 - 2
    return np.asarray(1 / n1 + 1 / n2 + (1 - quotient(df - 2, df * hedges_correction(df) ** 2)) * g * g)


def glass_delta_variance(delta: ArrayLike, n_other: ArrayLike, n_control: ArrayLike) -> Floats:
    """Variance of Glass's delta for equal variances, 1/n_other + 1/n_control + delta² / (2 (n_control - 1)).

    Source: Hedges (1981), as above; Rosenthal (1994), in The Handbook of Research Synthesis, ch. 16.
    """
    delta, n_other, n_control = floats(delta, n_other, n_control)
    return np.asarray(1 / n_other + 1 / n_control + quotient(delta * delta, 2 * (n_control - 1)))


def glass_delta_variance_unequal(
    delta: ArrayLike, sd_other: ArrayLike, n_other: ArrayLike, sd_control: ArrayLike, n_control: ArrayLike
) -> Floats:
    """Variance of Glass's delta for unequal variances, sd_other² / (sd_control² (n_other - 1)) + 1/(n_control - 1) + delta² / (2 (n_control - 1)).

    Source: Bonett (2008), Psychological Methods 13:99-109 (from memory).
    """
    delta, sd_other, n_other, sd_control, n_control = floats(delta, sd_other, n_other, sd_control, n_control)
    ratio = quotient(sd_other, sd_control) ** 2
    return np.asarray(quotient(ratio, n_other - 1) + quotient(1 + delta * delta / 2, n_control - 1))


def d_average_variance(d: ArrayLike, sd1: ArrayLike, n1: ArrayLike, sd2: ArrayLike, n2: ArrayLike) -> Floats:
    """Variance of d by the root mean square SD s of two independent groups, variances unequal or not.

    d² (sd1⁴/df1 + sd2⁴/df2) / (8 s⁴) + (sd1²/df1 + sd2²/df2) / s², df = n - 1. Source: Bonett (2008), as above.
    """
    d, sd1, n1, sd2, n2 = floats(d, sd1, n1, sd2, n2)
    v1, v2 = sd1 * sd1, sd2 * sd2
    mean = (v1 + v2) / 2
    shape = d * d * (v1 * v1 / (n1 - 1) + v2 * v2 / (n2 - 1)) / (8 * mean * mean)
    return np.asarray(shape + (v1 / (n1 - 1) + v2 / (n2 - 1)) / mean)


def d_average_variance_paired(
    d: ArrayLike, sd1: ArrayLike, sd2: ArrayLike, r: ArrayLike, n: ArrayLike
) -> Floats:
    """Variance of d by the root mean square SD s of paired measures.

    d² (sd1⁴ + sd2⁴ + 2 r² sd1² sd2²) / (8 (n - 1) s⁴) + (sd1² + sd2² - 2 r sd1 sd2) / ((n - 1) s²). Source: Bonett (2008), as above.
    """
    d, sd1, sd2, r, n = floats(d, sd1, sd2, r, n)
    v1, v2 = sd1 * sd1, sd2 * sd2
    mean = (v1 + v2) / 2
    shape = d * d * (v1 * v1 + v2 * v2 + 2 * r * r * v1 * v2) / (8 * mean * mean)
    return np.asarray((shape + (v1 + v2 - 2 * r * sd1 * sd2) / mean) / (n - 1))


def d_z_variance(d: ArrayLike, n: ArrayLike) -> Floats:
    """Variance of d_z in large samples, 1/n + d² / (2 n). Source: Borenstein et al. (2009), as above, ch. 4."""
    d, n = floats(d, n)
    return np.asarray((1 + d * d / 2) / n)


def d_z_variance_by_df(d: ArrayLike, n: ArrayLike) -> Floats:
    """Variance of d_z with df in the second term, 1/n + d² / (2 (n - 1)).

    Source: Gibbons, Hedeker & Davis (1993), Journal of Educational Statistics 18:271-279 (from memory).
    """
    d, n = floats(d, n)
    return np.asarray(1 / n + d * d / (2 * (n - 1)))


def d_rm_variance(d: ArrayLike, r: ArrayLike, n: ArrayLike) -> Floats:
    """Variance of d_rm as published, (1/n + d² / (2 n)) 2 (1 - r); a little small, since d is d_rm and not d_z.

    Source: Borenstein et al. (2009), as above, formula 4.28 (number from memory).
    """
    d, r, n = floats(d, r, n)
    return np.asarray((1 + d * d / 2) / n * (2 * (1 - r)))


def d_change_variance(d: ArrayLike, r: ArrayLike, n: ArrayLike) -> Floats:
    """Variance of a mean change over the SD of one of the two measures, 2 (1 - r) / n + d² / (2 n).

    Source: Becker (1988), British Journal of Mathematical and Statistical Psychology 41:257-278.
    """
    d, r, n = floats(d, r, n)
    return np.asarray((2 * (1 - r) + d * d / 2) / n)


def r_variance(r: ArrayLike, n: ArrayLike) -> Floats:
    """Variance of a correlation in large samples, (1 - r²)² / (n - 1).

    Source: Pearson & Filon (1898), Phil. Trans. A 191:229-311, who have n; with n - 1 Borenstein et al. (2009), as above, formula 6.1.
    """
    r, n = floats(r, n)
    return np.asarray(((1 - r) * (1 + r)) ** 2 / (n - 1))


def fisher_z_variance(n: ArrayLike) -> Floats:
    """Variance of Fisher's z, 1 / (n - 3); nan for n <= 3. Source: Fisher (1921), Metron 1:3-32."""
    (n,) = floats(n)
    variance = np.array(quotient(1.0, n - 3))
    variance[variance <= 0] = np.nan
    return np.where(np.isinf(variance), np.nan, variance) if np.isinf(variance).any() else variance


def fisher_z_variance_spearman(r: ArrayLike, n: ArrayLike) -> Floats:
    """Variance of the Fisher z of Spearman's rho, (1 + r²/2) / (n - 3). Source: Bonett & Wright (2000), Psychometrika 65:23-28."""
    r, n = floats(r, n)
    return np.asarray((1 + r * r / 2) * fisher_z_variance(n))


def r_variance_from_d(d: ArrayLike, variance: ArrayLike, n1: ArrayLike, n2: ArrayLike) -> Floats:
    """Variance of r = d / sqrt(d² + a) from that of d, a² variance / (d² + a)³, a = (n1 + n2)² / (n1 n2).

    Source: Borenstein et al. (2009), as above, formula 7.9.
    """
    d, variance, n1, n2 = floats(d, variance, n1, n2)
    a = (n1 + n2) ** 2 / (n1 * n2)
    return np.asarray(a * a * variance / (d * d + a) ** 3)


def d_variance_from_r(r: ArrayLike, variance: ArrayLike) -> Floats:
    """Variance of d = 2 r / sqrt(1 - r²) from that of r, 4 variance / (1 - r²)³. Source: ibidem, formula 7.6."""
    r, variance = floats(r, variance)
    return quotient(4 * variance, ((1 - r) * (1 + r)) ** 3)


def log_odds_ratio_variance_from_d(variance: ArrayLike) -> Floats:
    """Variance of the log odds ratio d pi / sqrt 3 from that of d, variance pi² / 3.

    Source: Hasselblad & Hedges (1995), Psychological Bulletin 117:167-178; Borenstein et al. (2009), as above, formula 7.4.
    """
    (variance,) = floats(variance)
    return np.asarray(variance * (np.pi**2 / 3))


def d_variance_from_log_odds_ratio(variance: ArrayLike) -> Floats:
    """Variance of d = log odds ratio sqrt 3 / pi from that of the log odds ratio, 3 variance / pi². Source: ibidem, formula 7.2."""
    (variance,) = floats(variance)
    return np.asarray(variance * (3 / np.pi**2))


def r2_variance(r2: ArrayLike, n: ArrayLike, predictors: ArrayLike) -> Floats:
    """Variance of R² (or eta squared, with its df for predictors) in large samples.

    4 R² (1 - R²)² (n - k - 1)² / ((n² - 1) (n + 3)). Source: Olkin & Finn (1995), Psychological Bulletin 118:155-164.
    """
    r2, n, k = floats(r2, n, predictors)
    return np.asarray(4 * r2 * (1 - r2) ** 2 * (n - k - 1) ** 2 / ((n * n - 1) * (n + 3)))
