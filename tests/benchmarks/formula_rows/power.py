"""Rows of the power of tests."""

import numpy as np
from scipy import special

from tests.benchmarks.formula_rows.row import Column, Row

SIZE = 10**5
"""A noncentral tail costs as much as a hundred central ones."""


def _two_tails(shift: Column, df: Column, p: Column) -> Column:
    critical = special.stdtrit(df, 1 - p / 2)
    return special.nctdtr(df, shift, critical) + special.nctdtr(df, shift, -critical)


def _t(d: Column, n: Column) -> Column:
    critical = special.stdtrit(n - 1, 0.975)
    return special.nctdtr(n - 1, np.abs(d) * np.sqrt(n), critical) + special.nctdtr(
        n - 1, np.abs(d) * np.sqrt(n), -critical
    )


def _two(d: Column, n1: Column, n2: Column) -> Column:
    return _two_tails(np.abs(d) * np.sqrt(n1 * n2 / (n1 + n2)), n1 + n2 - 2, np.full(n1.shape, 0.05))


def _F(shift: Column, df1: Column, df2: Column) -> Column:
    return special.ncfdtr(df1, df2, shift, special.fdtri(df1, df2, 0.95))


def _chi2(share: Column, N: Column, k: Column) -> Column:
    return special.chndtr(special.chdtri(k, 0.05), k, N * share**2)


def _z(shift: Column) -> Column:
    return special.ndtr(shift - special.ndtri(0.975)) + special.ndtr(-shift - special.ndtri(0.975))


def _quantiles(d: Column, share: Column) -> Column:
    return (special.ndtri(share) - special.ndtri(np.full(share.shape, 0.025))) ** 2 / d**2


def _r(r: Column, N: Column) -> Column:
    return _two_tails(r / np.sqrt(1 - r * r) * np.sqrt(N), N - 2, np.full(r.shape, 0.05))


def _proportions(p: Column, share: Column, n1: Column, n2: Column) -> Column:
    mean = (n1 * p + n2 * share) / (n1 + n2)
    null = np.sqrt(mean * (1 - mean) * (1 / n1 + 1 / n2))
    other = np.sqrt(p * (1 - p) / n1 + share * (1 - share) / n2)
    return special.ndtr((np.abs(p - share) + special.ndtri(np.full(p.shape, 0.025)) * null) / other)


def _proportions_n(p: Column, share: Column, p2: Column) -> Column:
    mean = (p + share) / 2
    null, other = np.sqrt(2 * mean * (1 - mean)), np.sqrt(p * (1 - p) + share * (1 - share))
    return ((special.ndtri(np.full(p.shape, 0.975)) * null + special.ndtri(p2) * other) / (p - share)) ** 2


ROWS = {
    "power.t_tests.t_power": Row("z df p", _two_tails, size=SIZE),
    "power.t_tests.one_sample_t_power": Row("d n", _t, size=SIZE),
    "power.t_tests.two_sample_t_power": Row("d n1 n2", _two, size=SIZE),
    "power.f_tests.f_power": Row("F df1 df2", _F, size=SIZE),
    "power.f_tests.anova_power": Row(
        "share n k", lambda f, n, k: _F(f * f * n * k, k - 1, n * k - k), size=SIZE
    ),
    "power.f_tests.fixed_effects_power": Row(
        "share N df1 k", lambda f2, N, df1, k: _F(f2 * N, df1, N - k), size=SIZE
    ),
    "power.chi2_tests.chi2_power": Row("share N k", _chi2, size=SIZE),
    "power.correlations.fixed_r_power": Row("r N", _r, size=SIZE),
    "power.correlations.fisher_r_power": Row("r N", lambda r, N: _z(np.arctanh(r) * np.sqrt(N - 3))),
    "power.normal.z_power": Row("z", _z),
    "power.normal.z_shift": Row("share p", lambda share, p: special.ndtri(share) - special.ndtri(p / 2)),
    "power.normal.normal_n": Row("d share", _quantiles),
    "power.normal.normal_n_one_sample": Row("d share", _quantiles),
    "power.normal.guenther_n": Row("d share", _quantiles),
    "power.proportions.cohens_h": Row("p share", lambda p, q: np.arcsin(np.sqrt(p)) - np.arcsin(np.sqrt(q))),
    "power.proportions.arcsine_power": Row(
        "d n1 n2", lambda h, n1, n2: _z(np.abs(h) * np.sqrt(n1 * n2 / (n1 + n2)))
    ),
    "power.proportions.arcsine_n": Row("d share", _quantiles),
    "power.proportions.proportions_power": Row("p share n1 n2", _proportions),
    "power.proportions.proportions_n": Row("p share share", _proportions_n),
    "power.proportions.continuity_corrected_n": Row("n share", lambda n, p: np.sqrt(1 + 4 / (n * p))),
}
_BISECTED = "a bisection of a function that stands in the table"
EXEMPT = {
    "power.search.*": "it runs the function that it is handed",
    "power.correlations.exact_r_power": "48 times the power of a fixed predictor, which stands in the table",
    **dict.fromkeys(
        (
            "power.t_tests.one_sample_t_n", "power.t_tests.two_sample_t_n", "power.t_tests.one_sample_t_detectable",
            "power.t_tests.two_sample_t_detectable", "power.f_tests.anova_n", "power.f_tests.fixed_effects_n",
            "power.f_tests.fixed_effects_detectable", "power.chi2_tests.chi2_n", "power.chi2_tests.chi2_detectable",
            "power.correlations.r_n", "power.correlations.r_detectable",
        ),
        _BISECTED,
    ),
}  # fmt: skip
