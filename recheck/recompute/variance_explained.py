"""Correlations and shares of variance as effect sizes, and the ways between them and d.

A correlation r of a test with two groups keeps its sign; shares of variance have none.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from recheck.recompute.arrays import Floats, floats, quotient, together


def r_from_t(t: ArrayLike, df: ArrayLike) -> Floats:
    """r of a t with its sign, t / sqrt(t² + df); 1 in size where t is infinite. Source: Lakens (2013), Frontiers in Psychology 4:863."""
    t, df = floats(t, df)
    return np.asarray(np.sign(t) / np.hypot(1.0, quotient(np.sqrt(df), t)))


def partial_eta2_from_F(F: ArrayLike, df1: ArrayLike, df2: ArrayLike) -> Floats:
    """Partial eta squared, F df1 / (F df1 + df2); 1 where F is infinite.

    Source: Cohen (1973), Educ. Psychol. Meas. 33:107-112.
    """
    F, df1, df2 = floats(F, df1, df2)
    return quotient(1.0, 1 + quotient(df2, F * df1))


def omega2_from_F(F: ArrayLike, df1: ArrayLike, df2: ArrayLike, N: ArrayLike) -> Floats:
    """Partial omega squared of a factor between groups, df1 (F - 1) / (df1 (F - 1) + N); negative for F < 1.

    In a one-way design N = df1 + df2 + 1, which leaves nothing to df2 itself. Source: Keren & Lewis
    (1979), Educational and Psychological Measurement 39:119-128; Lakens (2013), as above.
    """
    F, df1, _, N = together(F, df1, df2, N)
    return quotient(1.0, 1 + quotient(N, df1 * (F - 1)))


def epsilon2_from_F(F: ArrayLike, df1: ArrayLike, df2: ArrayLike) -> Floats:
    """Partial epsilon squared, df1 (F - 1) / (df1 F + df2); negative for F < 1.

    Source: Kelley (1935), Proceedings of the National Academy of Sciences 21:554-559.
    """
    F, df1, df2 = floats(F, df1, df2)
    return quotient(df1 * (F - 1), df1 * F + df2)


def f_from_F(F: ArrayLike, df1: ArrayLike, df2: ArrayLike) -> Floats:
    """Cohen's f, sqrt(F df1 / df2). Source: Cohen (1988), Statistical Power Analysis, ch. 8."""
    F, df1, df2 = floats(F, df1, df2)
    return np.asarray(np.sqrt(quotient(F * df1, df2)))


def phi_from_chi2(chi2: ArrayLike, N: ArrayLike) -> Floats:
    """Size of phi of a 2 x 2 table, sqrt(chi2 / N), that is `cramers_v` with k = 2."""
    return cramers_v(chi2, N, 2)


def cramers_v(chi2: ArrayLike, N: ArrayLike, k: ArrayLike) -> Floats:
    """Cramér's V, sqrt(chi2 / (N (k - 1))), k the smaller of the numbers of rows and columns.

    Source: Cramér (1946), Mathematical Methods of Statistics, ch. 21.
    """
    chi2, N, k = floats(chi2, N, k)
    return np.asarray(np.sqrt(quotient(chi2, N * (k - 1))))


def eta2_from_ss(ss_effect: ArrayLike, ss_total: ArrayLike) -> Floats:
    """eta squared, the effect's share of the total sum of squares. Source: Fisher (1925), Statistical Methods."""
    return quotient(ss_effect, ss_total)


def partial_eta2_from_ss(ss_effect: ArrayLike, ss_error: ArrayLike) -> Floats:
    """Partial eta squared, ss_effect / (ss_effect + ss_error). Source: Cohen (1973), as above."""
    ss_effect, ss_error = floats(ss_effect, ss_error)
    return quotient(ss_effect, ss_effect + ss_error)


def omega2_from_ss(ss_effect: ArrayLike, df1: ArrayLike, ms_error: ArrayLike, ss_total: ArrayLike) -> Floats:
    """omega squared of a design between groups, (ss_effect - df1 ms_error) / (ss_total + ms_error).

    Source: Hays (1963), Statistics for Psychologists, p. 382 (page from memory).
    """
    ss_effect, df1, ms_error, ss_total = floats(ss_effect, df1, ms_error, ss_total)
    return quotient(ss_effect - df1 * ms_error, ss_total + ms_error)


def f2_from_share(share: ArrayLike) -> Floats:
    """Cohen's f², share / (1 - share), of a partial eta squared or an R². Source: Cohen (1988), as above, 9.2."""
    (share,) = floats(share)
    return quotient(share, 1 - share)


def share_from_f2(f2: ArrayLike) -> Floats:
    """The share of variance of an f², f² / (1 + f²). Source: Cohen (1988), as above, 8.2."""
    (f2,) = floats(f2)
    return quotient(1.0, 1 + quotient(1.0, f2))


def fisher_z(r: ArrayLike) -> Floats:
    """Fisher's z of a correlation, atanh r; infinite at 1 and -1. Source: Fisher (1921), Metron 1:3-32."""
    (r,) = floats(r)
    with np.errstate(divide="ignore", invalid="ignore"):
        return np.asarray(np.arctanh(r))


def r_from_fisher_z(z: ArrayLike) -> Floats:
    """The correlation of a Fisher z, tanh z, the inverse of `fisher_z`."""
    (z,) = floats(z)
    return np.asarray(np.tanh(z))


def r_from_d(d: ArrayLike, n1: ArrayLike, n2: ArrayLike) -> Floats:
    """r of a standardized mean difference, d / sqrt(d² + (n1 + n2)² / (n1 n2)); falls short of r_pb by a hair.

    Source: Borenstein et al. (2009), Introduction to Meta-Analysis, ch. 7.
    """
    d, n1, n2 = floats(d, n1, n2)
    return quotient(d, np.sqrt(d * d + (n1 + n2) ** 2 / (n1 * n2)))


def r_pb_from_d(d: ArrayLike, n1: ArrayLike, n2: ArrayLike) -> Floats:
    """Point-biserial r of d_s, the correlation of score and group itself, d / sqrt(d² + (n1 + n2) (n1 + n2 - 2) / (n1 n2)).

    Source: McGrath & Meyer (2006), Psychological Methods 11:386-401.
    """
    d, n1, n2 = floats(d, n1, n2)
    total = n1 + n2
    return quotient(d, np.sqrt(d * d + total * (total - 2) / (n1 * n2)))


def d_from_r(r: ArrayLike) -> Floats:
    """d of a correlation for groups of equal size, 2 r / sqrt(1 - r²). Source: Borenstein et al. (2009), as above, ch. 7."""
    (r,) = floats(r)
    return quotient(2 * r, np.sqrt((1 - r) * (1 + r)))


def d_from_r_pb(r: ArrayLike, n1: ArrayLike, n2: ArrayLike) -> Floats:
    """d_s of a point-biserial r, r sqrt((n1 + n2) (n1 + n2 - 2) / (n1 n2)) / sqrt(1 - r²).

    Source: McGrath & Meyer (2006), as above.
    """
    r, n1, n2 = floats(r, n1, n2)
    total = n1 + n2
    return quotient(r * np.sqrt(total * (total - 2) / (n1 * n2)), np.sqrt((1 - r) * (1 + r)))


def epsilon2_from_share(share: ArrayLike, df1: ArrayLike, df2: ArrayLike) -> Floats:
    """epsilon squared of a design, 1 - (1 - share) (df1 + df2) / df2, as the adjusted R² is of R².

    Source: Kelley (1935), as above.
    """
    share, df1, df2 = floats(share, df1, df2)
    return np.asarray(1 - (1 - share) * quotient(df1 + df2, df2))
