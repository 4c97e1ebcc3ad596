"""Standardised effect sizes, their conversions from test statistics, and the range of d over a box.

Differences are group 1 minus group 2; SDs are sample SDs (n - 1).
"""

from __future__ import annotations

from collections.abc import Callable
from typing import Literal

import numpy as np
from numpy.typing import ArrayLike
from scipy import special

from recheck.recompute.arrays import (
    Bounds,
    Floats,
    difference_bounds,
    floats,
    quotient,
    quotient_bounds,
    spread_bounds,
    together,
)
from recheck.recompute.two_groups import pooled_sd

Denominator = Literal["pooled", "sd1", "sd2", "mean", "rms", "population", "welch-average"]


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
    return quotient(np.subtract(mean1, mean2), np.hypot(sd1, sd2) / np.sqrt(2))


def d_population_sd(
    mean1: ArrayLike, sd1: ArrayLike, n1: ArrayLike, mean2: ArrayLike, sd2: ArrayLike, n2: ArrayLike
) -> Floats:
    """d with N = n1 + n2 in place of N - 2 in the pooled SD, the maximum likelihood estimate.

    Source: Hedges & Olkin (1985), Statistical Methods for Meta-Analysis, ch. 5.
    """
    return quotient(np.subtract(mean1, mean2), _population_sd(*floats(sd1, n1, sd2, n2)))


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
    """2 t / sqrt(N), which is d_s where both groups have N / 2."""
    return d_rough(t, n_total)


def r_from_t(t: ArrayLike, df: ArrayLike) -> Floats:
    """r of a t with its sign, t / sqrt(t² + df). Source: Lakens (2013), as above."""
    t, df = floats(t, df)
    return quotient(t, np.hypot(t, np.sqrt(df)))


def partial_eta2_from_F(F: ArrayLike, df1: ArrayLike, df2: ArrayLike) -> Floats:
    """Partial eta squared, F df1 / (F df1 + df2). Source: Cohen (1973), Educ. Psychol. Meas. 33:107-112."""
    F, df1, df2 = floats(F, df1, df2)
    return quotient(F * df1, F * df1 + df2)


def omega2_from_F(F: ArrayLike, df1: ArrayLike, df2: ArrayLike, N: ArrayLike) -> Floats:
    """Partial omega squared of a factor between groups, df1 (F - 1) / (df1 (F - 1) + N); negative for F < 1.

    In a one-way design N = df1 + df2 + 1, which leaves nothing to df2 itself. Source: Keren & Lewis
    (1979), Educational and Psychological Measurement 39:119-128; Lakens (2013), as above.
    """
    F, df1, _, N = together(F, df1, df2, N)
    return quotient(df1 * (F - 1), df1 * (F - 1) + N)


def epsilon2_from_F(F: ArrayLike, df1: ArrayLike, df2: ArrayLike) -> Floats:
    """Partial epsilon squared, df1 (F - 1) / (df1 F + df2); negative for F < 1.

    Source: Kelley (1935), Proceedings of the National Academy of Sciences 21:554-559.
    """
    F, df1, df2 = floats(F, df1, df2)
    return quotient(df1 * (F - 1), df1 * F + df2)


def f_from_F(F: ArrayLike, df1: ArrayLike, df2: ArrayLike) -> Floats:
    """Cohen's f, sqrt(F df1 / df2). Source: Cohen (1988), as above, ch. 8."""
    F, df1, df2 = floats(F, df1, df2)
    return np.asarray(np.sqrt(quotient(F * df1, df2)))


def phi_from_chi2(chi2: ArrayLike, N: ArrayLike) -> Floats:
    """Size of phi of a 2 x 2 table, sqrt(chi2 / N)."""
    return cramers_v(chi2, N, 2)


def cramers_v(chi2: ArrayLike, N: ArrayLike, k: ArrayLike) -> Floats:
    """Cramér's V, sqrt(chi2 / (N (k - 1))), k the smaller of the numbers of rows and columns.

    Source: Cramér (1946), Mathematical Methods of Statistics, ch. 21.
    """
    chi2, N, k = floats(chi2, N, k)
    return np.asarray(np.sqrt(quotient(chi2, N * (k - 1))))


def d_bounds(
    mean1_low: ArrayLike, mean1_high: ArrayLike, sd1_low: ArrayLike, sd1_high: ArrayLike, n1: ArrayLike,
    mean2_low: ArrayLike, mean2_high: ArrayLike, sd2_low: ArrayLike, sd2_high: ArrayLike, n2: ArrayLike,
    denominator: Denominator = "pooled",
) -> Bounds:  # fmt: skip
    """Range of d over a box of means and SDs, with one of the denominators of `DENOMINATORS`.

    The difference and the denominator vary by themselves and each denominator rises with either SD,
    so both ends are corners (see `quotient_bounds`); infinite where the denominator may be 0.
    """
    (sd1_low, sd1_high), (sd2_low, sd2_high) = (
        spread_bounds(sd1_low, sd1_high),
        spread_bounds(sd2_low, sd2_high),
    )
    spread = DENOMINATORS[denominator]
    least, most = spread(*floats(sd1_low, n1, sd2_low, n2)), spread(*floats(sd1_high, n1, sd2_high, n2))
    return quotient_bounds(*difference_bounds(mean1_low, mean1_high, mean2_low, mean2_high), least, most)


def _population_sd(sd1: Floats, n1: Floats, sd2: Floats, n2: Floats) -> Floats:
    return np.asarray(np.sqrt(((n1 - 1) * sd1**2 + (n2 - 1) * sd2**2) / (n1 + n2)))


def _crossed_sd(sd1: Floats, n1: Floats, sd2: Floats, n2: Floats) -> Floats:
    return np.asarray(np.sqrt((n2 * sd1**2 + n1 * sd2**2) / (n1 + n2)))


DENOMINATORS: dict[Denominator, Callable[[Floats, Floats, Floats, Floats], Floats]] = {
    "pooled": pooled_sd,
    "sd1": lambda sd1, n1, sd2, n2: sd1,
    "sd2": lambda sd1, n1, sd2, n2: sd2,
    "mean": lambda sd1, n1, sd2, n2: np.asarray((sd1 + sd2) / 2),
    "rms": lambda sd1, n1, sd2, n2: np.asarray(np.hypot(sd1, sd2) / np.sqrt(2)),
    "population": _population_sd,
    "welch-average": _crossed_sd,
}
"""What d is divided by, from sd1, n1, sd2, n2. `welch-average` is the Welch SE over sqrt(1/n1 + 1/n2),
sqrt((n2 sd1² + n1 sd2²) / (n1 + n2)): what `d_from_t` of a Welch t amounts to."""
