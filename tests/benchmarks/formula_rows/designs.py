"""Rows of one sample, pairs, mean differences, variances and tests of ranks."""

import numpy as np
from scipy import special

from tests.benchmarks.formula_rows.older import BOX, _df, _pooled, _welch
from tests.benchmarks.formula_rows.row import Column, Row


def _two_tails(t: Column, df: Column) -> tuple[Column, Column]:
    return special.stdtr(df, -np.abs(t)), special.stdtr(df, -np.abs(t))


def _sd_of_differences(s: Column, t: Column, r: Column) -> Column:
    return np.asarray(np.sqrt((s - t) ** 2 + 2 * (1 - r) * s * t))


def _bartlett(s: Column, n: Column) -> Column:
    pooled = ((n - 1) * s * s).sum(-1, keepdims=True) / (n - 1).sum(-1, keepdims=True)
    return np.asarray(((n - 1) * np.log(s * s / pooled)).sum(-1))


def _u_sd(n: Column, m: Column) -> Column:
    return np.asarray(np.sqrt(n * m / 12 * (n + m + 1)))


def _w_sd(n: Column) -> Column:
    return np.asarray(np.sqrt(n * (n + 1) * (2 * n + 1) / 24))


SHARE_BOX = "sd1- sd1+ sd2- sd2+ r- r+"
ONE = {
    "one_sample.t_one_sample": Row("mean1 sd1 n", lambda m, s, n: m / (s / np.sqrt(n))),
    "one_sample.p_one_sample": Row(
        "mean1 sd1 n", lambda m, s, n: special.stdtr(n - 1, -m / (s / np.sqrt(n)))
    ),
    "one_sample.mean_ci": Row("mean1 sd1 n", lambda m, s, n: special.stdtrit(n - 1, 0.975)),
    "one_sample.one_sample_t_bounds": Row(
        "mean1- mean1+ sd1- sd1+ n", lambda a, b, s, t, n: (a / (t / np.sqrt(n)), b / (s / np.sqrt(n)))
    ),
    "one_sample.one_sample_p_bounds": Row(
        "mean1- mean1+ sd1- sd1+ n",
        lambda a, b, s, t, n: (special.stdtr(n - 1, -a / t), special.stdtr(n - 1, -b / s)),
    ),
    "one_sample.mean_ci_bounds": Row(
        "mean1- mean1+ sd1- sd1+ n", lambda a, b, s, t, n: special.stdtrit(n - 1, 0.975)
    ),
}
PAIRED = {
    "paired.sd_of_differences": Row("sd1 sd2 r", _sd_of_differences),
    "paired.paired_se": Row("sd1 sd2 r n", lambda s, t, r, n: _sd_of_differences(s, t, r) / np.sqrt(n)),
    "paired.t_paired": Row(
        "mean1 sd1 mean2 sd2 r n", lambda a, s, b, t, r, n: (a - b) / (_sd_of_differences(s, t, r) / np.sqrt(n))
    ),
    "paired.sd_of_differences_bounds": Row(
        SHARE_BOX, lambda s, t, u, v, q, r: [_sd_of_differences(a, b, c) for a in (s, t) for b in (u, v) for c in (q, r)]
    ),
    "paired.implied_correlation": Row(
        "d sd1 sd2 n t", lambda d, s, u, n, t: (s * s + u * u - n * d * d / (t * t)) / (2 * s * u)
    ),
    "paired.paired_t_bounds": Row(
        "mean1- mean1+ sd1- sd1+ mean2- mean2+ sd2- sd2+ n",
        lambda a, b, s, t, c, d, u, v, n: (np.abs(a - d) / (t + v) * np.sqrt(n), np.abs(b - c) / np.abs(s - v) * np.sqrt(n)),
    ),
    "paired.implied_correlation_bounds": Row(
        "mean1- mean1+ sd1- sd1+ mean2- mean2+ sd2- sd2+ n t- t+",
        lambda a, b, s, t, c, d, u, v, n, x, y: [
            (e * e + f * f - n * (a - d) ** 2 / (x * x)) / (2 * e * f) for e in (s, t) for f in (u, v) for _ in range(2)
        ],
    ),
}  # fmt: skip
DIFFERENCES = {
    "two_groups.binary_slope": Row(
        "mean1 sd1 n1 mean2 sd2 n2",
        lambda a, s, n, b, t, m: (a - b, _pooled(s, n, t, m) * np.sqrt(1 / n + 1 / m), (a - b) / _pooled(s, n, t, m)),
    ),
    "mean_differences.pooled_ci": Row(
        "mean1 sd1 n1 mean2 sd2 n2", lambda a, s, n, b, t, m: special.stdtrit(n + m - 2, 0.975)
    ),
    "mean_differences.welch_ci": Row(
        "mean1 sd1 n1 mean2 sd2 n2", lambda a, s, n, b, t, m: special.stdtrit(_df(s, n, t, m), 0.975)
    ),
    "mean_differences.pooled_ci_bounds": Row(
        BOX, lambda a, b, s, t, n, c, d, u, v, m: special.stdtrit(n + m - 2, 0.975)
    ),
    "mean_differences.welch_ci_bounds": Row(
        # Three corners for either end; along both edges it is asked at two ends which way the curve goes.
        BOX,
        lambda a, b, s, t, n, c, d, u, v, m: [special.stdtrit(_df(s, n, u, m), 0.975) for _ in range(10)],
        size=10**5,
    ),
    "mean_differences.welch_p_bounds": Row(
        BOX,
        lambda a, b, s, t, n, c, d, u, v, m: [
            special.stdtr(_df(s, n, u, m), -np.abs(a - d) / _welch(s, n, u, m)) for _ in range(10)
        ],
        size=10**5,
    ),
}  # fmt: skip
VARIANCES = {
    "variances.variance_ratio": Row("sd1 sd2", lambda s, t: (s / t) ** 2),
    "variances.variance_ratio_p": Row("F n1 n2", lambda F, n, m: (special.fdtrc(n, m, F), special.fdtrc(m, n, 1 / F))),
    "variances.bartlett": Row("sd1 n1", lambda s, n: (_bartlett(s, n), special.chdtrc(n[..., 0], s[..., 0])), groups=4),
    "variances.variance_ratio_bounds": Row(
        "sd1- sd1+ sd2- sd2+", lambda s, t, u, v: ((s / v) ** 2, (t / u) ** 2)
    ),
    "variances.p_of_ratio_bounds": Row(
        "F- F+ n1 n2",
        lambda a, b, n, m: [special.fdtrc(n, m, x) for x in (a, b)] + [special.fdtrc(m, n, x) for x in (a, b)],
    ),
    "variances.variance_ratio_p_bounds": Row(
        "sd1- sd1+ n1 sd2- sd2+ n2",
        lambda s, t, n, u, v, m: [special.fdtrc(n, m, (x / u) ** 2) for x in (s, t)] + [special.fdtrc(m, n, (u / x) ** 2) for x in (s, t)],
    ),
    "variances.bartlett_bounds": Row(
        "sd1- sd1+ n1", lambda s, t, n: [_bartlett(s, n) for _ in range(17)], groups=4, size=10**5
    ),
}  # fmt: skip
RANKS = {
    "rank_tests.u_range": Row("n1 n2", lambda n, m: (np.zeros_like(n), n * m)),
    "rank_tests.rank_sum_range": Row("n1 n2", lambda n, m: (n * (n + 1) / 2, n * (n + 1) / 2 + n * m)),
    "rank_tests.signed_rank_range": Row("n", lambda n: (np.zeros_like(n), n * (n + 1) / 2)),
    "rank_tests.rank_sum_from_u": Row("df n1", lambda u, n: u + n * (n + 1) / 2),
    "rank_tests.u_from_rank_sum": Row("df n1", lambda u, n: u - n * (n + 1) / 2),
    "rank_tests.u_sd": Row("n1 n2", _u_sd),
    "rank_tests.signed_rank_sd": Row("n", _w_sd),
    "rank_tests.z_from_u": Row("df n1 n2", lambda u, n, m: (u - n * m / 2) / _u_sd(n, m)),
    "rank_tests.z_from_signed_rank": Row("df n", lambda w, n: (w - n * (n + 1) / 4) / _w_sd(n)),
    "rank_tests.u_from_z": Row("z n1 n2", lambda z, n, m: n * m / 2 + z * _u_sd(n, m)),
    "rank_tests.signed_rank_from_z": Row("z n", lambda z, n: n * (n + 1) / 4 + z * _w_sd(n)),
}
ROWS = {**ONE, **PAIRED, **DIFFERENCES, **VARIANCES, **RANKS}
EXEMPT = {
    "anova_box.*": "one box in plain floats, held to the array function by its test",
    "anova.nearest_to_their_mean": "measured within the bounds that are made of it",
    "rank_tests.u_exact_p": "counts all samples of a size once and looks the tail up",
    "rank_tests.signed_rank_exact_p": "counts all samples of a size once and looks the tail up",
}
