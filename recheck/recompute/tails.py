"""Tail areas and quantiles of t, z, chi-square, F and r.

Relative error, guaranteed down to tails of 1e-300 for df up to 1e6 (tests compare with mpmath): t, z
and r 1e-12, chi-square and F 1e-10. The special functions themselves keep this nearly everywhere;
where they do not (t beyond 1e150 or with one df, F with one df or tails below 1e-10) the tail is computed here.
A statistic that is itself a double moves an extreme p by about 1e-16 times its square.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike
from scipy import special

from recheck.recompute.arrays import Floats, floats, together

HUGE_T = 1e150
MAX_LOG = 709.0
FAR_F_TAIL = 1e-10
"""Below this the finite sums behind the library's F tail lose digits: all of them near 1e-280."""


def t_tail(t: ArrayLike, df: ArrayLike) -> Floats:
    """Upper tail P(T > t) of Student's t; df > 0 may be fractional or infinite.

    Arguments broadcast; nan where df <= 0. Decreasing in t; decreasing in df where t > 0.
    Source: Student (1908), Biometrika 6:1-25; Abramowitz & Stegun (1964), 26.7.
    """
    t, df = floats(t, df)
    tail = np.asarray(special.stdtr(df, -t))
    odd = (df == 1) | (t > HUGE_T) & np.isfinite(df)
    if np.any(odd):
        tail, t, df = (np.array(part) for part in together(tail, t, df))
        tail[odd] = _odd_t_tail(t[odd], df[odd])
    return tail


def _odd_t_tail(t: Floats, df: Floats) -> Floats:
    """The Cauchy tail where df = 1; else, for huge t, (df / t²)^(df/2) / (df B(df/2, 1/2)).

    What the latter leaves out is smaller by the factor df / t².
    """
    with np.errstate(divide="ignore", invalid="ignore", over="ignore"):
        log_tail = df / 2 * (np.log(df) - 2 * np.log(t)) - np.log(df) - special.betaln(df / 2, 0.5)
        return np.where(df == 1, np.arctan2(1.0, t) / np.pi, np.exp(log_tail))


def z_tail(z: ArrayLike) -> Floats:
    """Upper tail P(Z > z) of the standard normal distribution. Source: Abramowitz & Stegun (1964), 26.2."""
    return np.asarray(special.ndtr(np.negative(z)), dtype=np.float64)


def chi2_tail(x: ArrayLike, df: ArrayLike) -> Floats:
    """Upper tail of chi-square; 1 where x <= 0, nan where df <= 0. Decreasing in x, increasing in df.

    Source: Pearson (1900), Philosophical Magazine 50:157-175; Abramowitz & Stegun (1964), 26.4.
    """
    x, df = floats(x, df)
    tail = np.asarray(special.chdtrc(df, np.maximum(x, 0.0)), dtype=np.float64)
    return np.where(df > 0, tail, np.nan)


def f_tail(F: ArrayLike, df1: ArrayLike, df2: ArrayLike) -> Floats:
    """Upper tail of F; df1, df2 > 0 may be fractional, df2 infinite; 1 where F <= 0, nan where a df is.

    Decreasing in F; not monotone in df1 or df2: see `f_shape`. Source: Fisher (1924), Proceedings of
    the International Congress of Mathematics, Toronto, 2:805-813; Abramowitz & Stegun (1964), 26.6.
    """
    F, df1, df2 = floats(F, df1, df2)
    F = np.maximum(F, 0.0)
    tail = np.asarray(special.fdtrc(df1, df2, F), dtype=np.float64)
    square, endless = df1 == 1, np.isinf(df2)
    if np.any(square):
        tail = np.where(square, t_two_sided(np.sqrt(F), df2), tail)
    if np.any(endless):
        tail = np.where(endless, chi2_tail(df1 * F, df1), tail)
    far = (tail < FAR_F_TAIL) & np.isfinite(F) & ~endless & ~square
    if np.any(far):
        tail, F, df1, df2 = (np.array(part) for part in together(tail, F, df1, df2))
        far = np.broadcast_to(far, tail.shape)
        tail[far] = _far_f_tail(F[far], df1[far], df2[far])
    return tail


def _far_f_tail(F: Floats, df1: Floats, df2: Floats) -> Floats:
    """Incomplete beta function far below its mean: saddle-point prefix over a continued fraction.

    Both are written in F - 1, so that no digits cancel. Prefix: Loader (2000), Fast and accurate
    computation of binomial probabilities. Fraction: Didonato & Morris (1992), ACM Transactions on
    Mathematical Software 18:360-373, formula 9.
    """
    a, b = df2 / 2, df1 / 2
    with np.errstate(over="ignore", under="ignore"):
        exponent = -a * np.log1p(b * (F - 1) / (a + b)) - b * np.log1p(a * (1 - F) / (F * (a + b)))
        correction = _stirling_error(a + b) - _stirling_error(a) - _stirling_error(b)
        prefix = np.exp(exponent + correction) * np.sqrt(a * b / (2 * np.pi * (a + b)))
        return np.asarray(prefix / _beta_fraction(a, b, F))


def _stirling_error(x: Floats) -> Floats:
    """ln gamma(x + 1) less Stirling's formula; the series is good to 1e-16 from 15 on."""
    with np.errstate(divide="ignore", over="ignore"):
        w = 1 / x**2
        series = (1 / 12 - w * (1 / 360 - w * (1 / 1260 - w * (1 / 1680 - w / 1188)))) / x
        direct = special.gammaln(x + 1) - (x + 0.5) * np.log(x) + x - np.log(2 * np.pi) / 2
    return np.where(x < 15, direct, series)


def _beta_fraction(a: Floats, b: Floats, F: Floats) -> Floats:
    """Didonato & Morris' fraction at x = a / (a + b F) by Lentz's method; 300 terms are ample far out."""
    x = a / (a + b * F)
    surplus = b * (F - 1) * x + 1
    fraction = a / (a + 1) * surplus
    c, d = fraction, np.zeros_like(fraction)
    for m in range(1, 300):
        top = (a + m - 1) * (a + b + m - 1) * m * (b - m) * (x / (a + 2 * m - 1)) ** 2
        bottom = m + m * (b - m) * x / (a + 2 * m - 1) + (a + m) * (surplus + m * (2 - x)) / (a + 2 * m + 1)
        d, c = 1 / (bottom + top * d), bottom + top / c
        fraction = fraction * c * d
        if np.all(np.abs(c * d - 1) < 1e-15):
            break
    return fraction


def t_two_sided(t: ArrayLike, df: ArrayLike) -> Floats:
    """Two-sided P(|T| > |t|), twice `t_tail`."""
    return np.asarray(2 * t_tail(np.abs(t), df))


def z_two_sided(z: ArrayLike) -> Floats:
    """Two-sided P(|Z| > |z|), twice `z_tail`."""
    return np.asarray(2 * z_tail(np.abs(z)))


def r_tail(r: ArrayLike, df: ArrayLike) -> Floats:
    """Upper tail of a correlation, df = n - 2, where none is expected; nan where |r| > 1.

    By t = r sqrt(df / (1 - r²)), with 1 - r² as (1 - r)(1 + r), which keeps its digits near 1.
    Source: Fisher (1915), Biometrika 10:507-521.
    """
    r, df = floats(r, df)
    with np.errstate(divide="ignore", invalid="ignore"):
        return t_tail(r * np.sqrt(df / ((1 - r) * (1 + r))), df)


def r_two_sided(r: ArrayLike, df: ArrayLike) -> Floats:
    """Two-sided p of a correlation, twice `r_tail`, df = n - 2; 0 where |r| = 1, nan beyond."""
    return np.asarray(2 * r_tail(np.abs(r), df))


def t_quantile(upper_p: ArrayLike, df: ArrayLike) -> Floats:
    """The t with `upper_p` (0 to 1) above it, the inverse of `t_tail`, to 1e-12 relative in its tail; df may be infinite."""
    p, df = together(upper_p, df)
    tail = np.minimum(p, 1 - p)
    with np.errstate(invalid="ignore", divide="ignore"):
        t = np.where(np.isinf(df), -special.ndtri(tail), -special.stdtrit(df, tail))
        t = np.where(tail == 0, np.inf, np.where(tail == 0.5, 0.0, t))
        inexact = (
            ~(np.abs(t_tail(t, df) - tail) <= 1e-13 * tail)
            & (tail > 0)
            & (tail < 0.5)
            & (df > 0)
            & np.isfinite(df)
        )
    if np.any(inexact):
        t[inexact] = _polished(t[inexact], tail[inexact], df[inexact])
    return np.asarray(np.where(p > 0.5, -t, t))


def _polished(t: Floats, tail: Floats, df: Floats) -> Floats:
    """Newton's method on log tail against log t, from the normal quantile where `t` is no good.

    The log tail falls ever more steeply, so after one step every iterate is beyond the root and
    comes back to it: the method cannot diverge. A t too large for a double is infinite.
    """
    with np.errstate(divide="ignore", invalid="ignore", over="ignore"):
        good = (t > 0) & (np.abs(t_tail(t, df) / tail - 1) < 0.01)
        x = np.log(np.where(good, t, -special.ndtri(tail)))
        constant = -np.log(df) / 2 - special.betaln(df / 2, 0.5) - np.log(tail)
        for _ in range(80):
            ratio = t_tail(np.exp(x), df) / tail
            slope = np.exp(constant - (df + 1) / 2 * np.logaddexp(0, 2 * x - np.log(df)) + x) / ratio
            step = np.log(ratio) / slope
            x = np.minimum(x + step, MAX_LOG)
            if np.all(np.abs(step) < 1e-15) or np.all(np.abs(ratio - 1) < 1e-15):
                break
    return np.asarray(np.where(x < MAX_LOG, np.exp(x), np.inf))


def z_quantile(upper_p: ArrayLike) -> Floats:
    """The z with `upper_p` (0 to 1) above it, the inverse of `z_tail`."""
    return np.asarray(-special.ndtri(np.asarray(upper_p, dtype=np.float64)))
