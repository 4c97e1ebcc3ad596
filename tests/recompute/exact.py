"""Tails to 28 digits with mpmath, by continued fractions; `test_tails` holds them to mpmath's own functions."""

from __future__ import annotations

from mpmath import mp, mpf

mp.dps = 34
STOP = mpf(10) ** -28


def beta_tail(a: mpf, b: mpf, x: mpf) -> mpf:
    """Regularised incomplete beta function I_x(a, b). Source: Abramowitz & Stegun (1964), 26.5.8."""
    if x > (a + 1) / (a + b + 2):
        return 1 - beta_tail(b, a, 1 - x)
    log = a * mp.log(x) + b * mp.log1p(-x) - mp.log(a)
    log -= mp.loggamma(a) + mp.loggamma(b) - mp.loggamma(a + b)
    c, d = mpf(1), 1 / (1 - (a + b) * x / (a + 1))
    value, m = d, 1
    while True:
        change = mpf(1)
        even = m * (b - m) * x / ((a + 2 * m - 1) * (a + 2 * m))
        odd = -(a + m) * (a + b + m) * x / ((a + 2 * m) * (a + 2 * m + 1))
        for n in (even, odd):
            d, c = 1 / (1 + n * d), 1 + n / c
            change *= c * d
        value *= change
        if abs(change - 1) < STOP:
            return mp.exp(log) * value
        m += 1


def f_tail(F: float, df1: float, df2: float) -> mpf:
    """Upper tail of F."""
    F, df1, df2 = mpf(F), mpf(df1), mpf(df2)
    return beta_tail(df2 / 2, df1 / 2, df2 / (df2 + df1 * F))


def t_tail(t: float, df: float) -> mpf:
    """Upper tail of t >= 0."""
    t, df = mpf(t), mpf(df)
    if t * t < df:
        return (1 - beta_tail(mpf(1) / 2, df / 2, t * t / (df + t * t))) / 2
    return beta_tail(df / 2, mpf(1) / 2, df / (df + t * t)) / 2


def chi2_tail(x: float, df: float) -> mpf:
    """Upper tail of chi-square beyond its mean. Source: Abramowitz & Stegun (1964), 6.5.31."""
    a, x = mpf(df) / 2, mpf(x) / 2
    b, c = x + 1 - a, mpf(10) ** 60
    d = 1 / b
    value, i = d, 1
    while True:
        n = -i * (i - a)
        b += 2
        d, c = 1 / (n * d + b), b + n / c
        value *= c * d
        if abs(c * d - 1) < STOP:
            return value * mp.exp(-x + a * mp.log(x) - mp.loggamma(a))
        i += 1
