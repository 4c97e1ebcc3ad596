"""Standardized mean differences from groups, test statistics, p and intervals.

Differences are group 1 minus group 2; SDs are sample SDs (n - 1). A d from p or F has no sign of its own: it is
given the sign of the test where that is known, else it is the size of d.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike
from scipy import special

from recheck.recompute.arrays import Floats, floats, quotient
from recheck.recompute.intervals import t_from_ci
from recheck.recompute.tails import t_quantile
from recheck.recompute.two_groups import pooled_sd


def population_sd(sd1: ArrayLike, n1: ArrayLike, sd2: ArrayLike, n2: ArrayLike) -> Floats:
    """Pooled SD with N = n1 + n2 in place of N - 2; rises with either SD. Source: as for `d_population_sd`."""
    sd1, n1, sd2, n2 = floats(sd1, n1, sd2, n2)
    return np.asarray(np.sqrt(((n1 - 1) * sd1**2 + (n2 - 1) * sd2**2) / (n1 + n2)))


def hedges_correction(df: ArrayLike) -> Floats:
    """Exact factor that makes d unbiased, J = gamma(df/2) / (sqrt(df/2) gamma((df-1)/2)).

    nan where df <= 1, 1 where df is infinite; 1e-12 relative.
    Source: Hedges (1981), Journal of Educational Statistics 6:107-128.
    """
    (df,) = floats(df)
    inner = np.where((df > 1) & np.isfinite(df), df, 2.0)
    factor = special.poch((inner - 1) / 2, 0.5) / np.sqrt(inner / 2)
    return np.where(df == inner, factor, np.where(df > 1, 1.0, np.nan))


def hedges_correction_approximate(df: ArrayLike) -> Floats:
    """The usual approximation of that factor, 1 - 3 / (4 df - 1). Source: Hedges (1981), ibidem."""
    (df,) = floats(df)
    return 1 - quotient(3.0, 4 * df - 1)


def cohens_d(
    mean1: ArrayLike, sd1: ArrayLike, n1: ArrayLike, mean2: ArrayLike, sd2: ArrayLike, n2: ArrayLike
) -> Floats:
    """d_s, the mean difference over the pooled SD. Source: Cohen (1988), Statistical Power Analysis, 2.5."""
    return quotient(np.subtract(mean1, mean2), pooled_sd(sd1, n1, sd2, n2))


def hedges_g(
    mean1: ArrayLike, sd1: ArrayLike, n1: ArrayLike, mean2: ArrayLike, sd2: ArrayLike, n2: ArrayLike
) -> Floats:
    """g, that is d_s times the exact J of df = n1 + n2 - 2. Source: Hedges (1981), as above."""
    n1, n2 = floats(n1, n2)
    return np.asarray(hedges_correction(n1 + n2 - 2) * cohens_d(mean1, sd1, n1, mean2, sd2, n2))


def glass_delta(mean1: ArrayLike, mean2: ArrayLike, sd_control: ArrayLike) -> Floats:
    """The mean difference over the SD of the control group.

    Source: Glass (1976), Educational Researcher 5(10):3-8.
    """
    return quotient(np.subtract(mean1, mean2), sd_control)


def d_average_sd(mean1: ArrayLike, sd1: ArrayLike, mean2: ArrayLike, sd2: ArrayLike) -> Floats:
    """d_av with the mean of both SDs. Source: Lakens (2013), Frontiers in Psychology 4:863, formula 10."""
    return quotient(np.subtract(mean1, mean2), np.add(sd1, sd2) / 2)


def d_root_mean_square_sd(mean1: ArrayLike, sd1: ArrayLike, mean2: ArrayLike, sd2: ArrayLike) -> Floats:
    """d_av with the root mean square of both SDs. Source: Cumming (2012), The New Statistics, ch. 11."""
    sd1, sd2 = floats(sd1, sd2)
    return quotient(np.subtract(mean1, mean2), np.sqrt((sd1 * sd1 + sd2 * sd2) / 2))


def d_population_sd(
    mean1: ArrayLike, sd1: ArrayLike, n1: ArrayLike, mean2: ArrayLike, sd2: ArrayLike, n2: ArrayLike
) -> Floats:
    """d with N = n1 + n2 in place of N - 2 in the pooled SD, the maximum likelihood estimate.

    Source: Hedges & Olkin (1985), Statistical Methods for Meta-Analysis, ch. 5.
    """
    return quotient(np.subtract(mean1, mean2), population_sd(sd1, n1, sd2, n2))


def d_from_t(t: ArrayLike, n1: ArrayLike, n2: ArrayLike) -> Floats:
    """d_s from the pooled t, t sqrt(1/n1 + 1/n2). Source: Lakens (2013), as above, formula 2."""
    t, n1, n2 = floats(t, n1, n2)
    return np.asarray(t * np.sqrt(1 / n1 + 1 / n2))


def d_z_from_t(t: ArrayLike, n: ArrayLike) -> Floats:
    """d_z from a paired or one-sample t, t / sqrt(n). Source: Lakens (2013), as above, formula 7."""
    t, n = floats(t, n)
    return np.asarray(t / np.sqrt(n))


def d_rough(t: ArrayLike, df: ArrayLike) -> Floats:
    """2 t / sqrt(df), for groups of about equal size.

    Source: Rosenthal & Rosnow (1991), Essentials of Behavioral Research (from memory).
    """
    t, df = floats(t, df)
    return quotient(2 * t, np.sqrt(df))


def d_rough_total(t: ArrayLike, n_total: ArrayLike) -> Floats:
    """2 t / sqrt(N), which is d_s where both groups have N / 2. Source: as for `d_rough`."""
    return d_rough(t, n_total)


def d_from_F(F: ArrayLike, n1: ArrayLike, n2: ArrayLike) -> Floats:
    """Size of d_s from the F(1, n1 + n2 - 2) of two groups, sqrt(F (1/n1 + 1/n2)). Source: as for `d_from_t`."""
    (F,) = floats(F)
    return d_from_t(np.sqrt(F), n1, n2)


def d_from_p(p: ArrayLike, n1: ArrayLike, n2: ArrayLike, tails: ArrayLike = 2) -> Floats:
    """Size of d_s from the exact p of a pooled t, `tails` 2, or 1 in the direction of the difference.

    Source: Cooper, Hedges & Valentine (2009), Handbook of Research Synthesis, ch. 12 (Borenstein).
    """
    p, n1, n2, tails = floats(p, n1, n2, tails)
    return d_from_t(t_quantile(p / tails, n1 + n2 - 2), n1, n2)


def d_from_ci(low: ArrayLike, high: ArrayLike, level: ArrayLike, n1: ArrayLike, n2: ArrayLike) -> Floats:
    """d_s from the pooled t interval of the mean difference, by t = c (low + high) / (high - low).

    Source: Cochrane Handbook for Systematic Reviews of Interventions, 6.5.2.3, carried on to d.
    """
    n1, n2 = floats(n1, n2)
    return d_from_t(t_from_ci(low, high, level, n1 + n2 - 2), n1, n2)


def d_z(mean_difference: ArrayLike, sd_difference: ArrayLike) -> Floats:
    """d_z, the mean difference over the SD of the differences. Source: Cohen (1988), as above, 2.3."""
    return quotient(mean_difference, sd_difference)


def d_rm(mean_difference: ArrayLike, sd_difference: ArrayLike, r: ArrayLike) -> Floats:
    """d_rm, d_z sqrt(2 (1 - r)), r the correlation of both measures.

    Source: Lakens (2013), as above, formula 9; Borenstein et al. (2009), Introduction to Meta-Analysis, ch. 4.
    """
    (r,) = floats(r)
    return np.asarray(d_z(mean_difference, sd_difference) * np.sqrt(2 * (1 - r)))


def d_z_from_p(p: ArrayLike, n: ArrayLike, tails: ArrayLike = 2) -> Floats:
    """Size of d_z from the exact p of a paired or one-sample t. Source: as for `d_from_p`."""
    p, n, tails = floats(p, n, tails)
    return d_z_from_t(t_quantile(p / tails, n - 1), n)


def d_z_from_ci(low: ArrayLike, high: ArrayLike, level: ArrayLike, n: ArrayLike) -> Floats:
    """d_z from the t interval of the mean of the differences. Source: as for `d_from_ci`."""
    (n,) = floats(n)
    return d_z_from_t(t_from_ci(low, high, level, n - 1), n)
