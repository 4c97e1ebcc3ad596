"""Rows of the conversions of spreads, of groups put together, and of what a range says of an SD."""

import numpy as np
from scipy import special

from tests.benchmarks.formula_rows.row import Column, Row


def _c(share: Column, df: Column) -> Column:
    """The critical value of t that an interval cannot do without."""
    return special.stdtrit(df, (1 + share) / 2)


def _z(p: Column) -> Column:
    return special.ndtri(1 - p / 2)


def _extreme(n: Column) -> Column:
    return special.ndtri((n - 0.375) / (n + 0.25))


def _quartile(n: Column) -> Column:
    return special.ndtri((0.75 * n - 0.125) / (n + 0.25))


def _union(means: Column, sds: Column, ns: Column) -> Column:
    total = ns.sum(axis=-1)
    centre = (ns * means).sum(axis=-1, keepdims=True) / total[:, None]
    return np.sqrt(((ns - 1) * sds**2 + ns * (means - centre) ** 2).sum(axis=-1) / (total - 1))


def _mean(means: Column, ns: Column) -> Column:
    return (ns * means).sum(axis=-1) / ns.sum(axis=-1)


def _within(sds: Column, ns: Column) -> Column:
    return np.sqrt(((ns - 1) * sds**2).sum(axis=-1) / (ns.sum(axis=-1) - ns.shape[-1]))


def _rest(m: Column, s: Column, N: Column, a: Column, b: Column, n: Column) -> Column:
    return np.sqrt(((N - 1) * s**2 - (n - 1) * b**2 - N * n * (m - a) ** 2 / (N - n)) / (N - n - 1))


def _z_of_ends(low: Column, high: Column, level: Column) -> Column:
    return special.ndtr(-np.abs(special.ndtri((1 + level) / 2) * (low + high) / (high - low)))


ROWS = {
    "conversions.se_from_sd": Row("sd1 n", lambda sd, n: sd / np.sqrt(n)),
    "conversions.sd_from_se": Row("se n", lambda se, n: se * np.sqrt(n)),
    "conversions.sd_from_ci": Row(
        "low high share n df", lambda a, b, level, n, df: (b - a) * np.sqrt(n) / _c(level, df)
    ),
    "conversions.sd_from_ci_bounds": Row("low- low+ high- high+ share n df", lambda a, b, c, d, level, n, df: _c(level, df)),
    "conversions.ci_of_mean_bounds": Row("mean1- mean1+ sd1- sd1+ share n df", lambda a, b, c, d, level, n, df: _c(level, df)),
    "conversions.sd_from_t": Row("d t n1 n2", lambda d, t, n1, n2: np.abs(d / t) / np.sqrt(1 / n1 + 1 / n2)),
    "conversions.sd_from_F": Row("d F n1 n2", lambda d, F, n1, n2: np.abs(d) / np.sqrt(F * (1 / n1 + 1 / n2))),
    "conversions.sd_from_p": Row("d p n1 n2", lambda d, p, n1, n2: special.stdtrit(n1 + n2 - 2, 1 - p / 2)),
    "conversions.sd_from_t_bounds": Row(
        "d- d+ t- t+ n1 n2",
        lambda a, b, c, d, n1, n2: (np.abs(a / d), np.abs(b / c), np.sqrt(1 / n1 + 1 / n2), np.sign(a * b), np.sign(c * d)),
    ),
    "conversions.sd_from_p_bounds": Row(
        "d- d+ p p+ n1 n2",
        lambda a, b, p, q, n1, n2: (special.stdtrit(n1 + n2 - 2, 1 - p / 2), special.stdtrit(n1 + n2 - 2, 1 - q / 2)),
    ),
    "conversions.correlation_from_change": Row(
        "sd1 sd2 se", lambda a, b, c: (a**2 + b**2 - c**2) / (2 * a * b)
    ),
    "conversions.coefficient_of_variation": Row("mean1 sd1", lambda m, s: s / np.abs(m)),
    "conversions.log_odds_ratio_from_d": Row("d", lambda d: d * 1.8137993642342178),
    "conversions.d_from_log_odds_ratio": Row("d", lambda d: d * 0.5513288954217920),
    "ci_and_p.z_from_p_approximate": Row("p", lambda p: np.sqrt(0.743 - 2.404 * np.log(p)) - 0.862),
    "ci_and_p.p_from_z_approximate": Row("z", lambda z: np.exp(-0.717 * np.abs(z) - 0.416 * z**2)),
    "ci_and_p.se_from_p": Row("d p", lambda d, p: np.abs(d) / _z(p)),
    "ci_and_p.ci_from_p": Row("d p share", lambda d, p, level: (_z(p), _z(1 - level))),
    "ci_and_p.ci_from_p_ratio": Row("ratio p share", lambda r, p, level: (np.log(r), np.exp(r), np.exp(r), _z(p), _z(1 - level))),
    "ci_and_p.ci_from_p_bounds": Row("d- d+ p p+ share", lambda a, b, p, q, level: (_z(p), _z(q), _z(1 - level))),
    "ci_and_p.p_from_ci": Row("low high share", _z_of_ends),
    "ci_and_p.p_from_ci_ratio": Row("ratio ratio+ share", lambda a, b, level: _z_of_ends(np.log(a), np.log(b), level)),
    "ci_and_p.p_from_ci_bounds": Row(
        "low- low+ high- high+ share", lambda a, b, c, d, level: (_z_of_ends(a, c, level), _z_of_ends(b, d, level))
    ),
    "quantile_estimates.mean_from_range_hozo": Row("low mean1 high", lambda a, m, b: (a + 2 * m + b) / 4),
    "quantile_estimates.sd_from_range_hozo": Row(
        "low mean1 high n",
        lambda a, m, b, n: np.where(n <= 15, np.sqrt(((a - 2 * m + b) ** 2 / 4 + (b - a) ** 2) / 12), (b - a) / np.where(n <= 70, 4, 6)),
    ),
    "quantile_estimates.mean_from_five_bland": Row(
        "low low+ mean1 high high+", lambda a, q, m, r, b: (a + 2 * q + 2 * m + 2 * r + b) / 8
    ),
    "quantile_estimates.mean_from_quartiles_wan": Row("low mean1 high", lambda q, m, r: (q + m + r) / 3),
    "quantile_estimates.sd_from_range_wan": Row("low high n", lambda a, b, n: (b - a) / (2 * _extreme(n))),
    "quantile_estimates.sd_from_quartiles_wan": Row("low high n", lambda a, b, n: (b - a) / (2 * _quartile(n))),
    "quantile_estimates.sd_from_five_wan": Row("low low+ high high+ n", lambda a, q, r, b, n: (_extreme(n), _quartile(n))),
    "quantile_estimates.sd_from_iqr": Row("sd1", lambda iqr: iqr / 1.35),
    "quantile_estimates.mean_from_range_luo": Row(
        "low mean1 high n", lambda a, m, b, n: m + 4 / (4 + n**0.75) * ((a + b) / 2 - m)
    ),
    "quantile_estimates.mean_from_quartiles_luo": Row(
        "low mean1 high n", lambda a, m, b, n: m + (0.7 + 0.39 / n) * ((a + b) / 2 - m)
    ),
    "quantile_estimates.mean_from_five_luo": Row(
        "low low+ mean1 high high+ n", lambda a, q, m, r, b, n: (n**0.75, n**0.55, a + q + m + r + b)
    ),
    "quantile_estimates.sd_from_five_shi": Row(
        "low low+ high high+ n", lambda a, q, r, b, n: (_extreme(n), _quartile(n), n**0.6)
    ),
    "combining.union_mean": Row("mean1 n1", _mean, groups=3),
    "combining.union_sd": Row("mean1 sd1 n1", _union, groups=3),
    "combining.pooled_sd_of": Row("sd1 n1", _within, groups=3),
    "combining.union_mean_bounds": Row("mean1- mean1+ n1", lambda a, b, n: (_mean(a, n), _mean(b, n)), groups=3),
    "combining.pooled_sd_of_bounds": Row("sd1- sd1+ n1", lambda a, b, n: (_within(a, n), _within(b, n)), groups=3),
    "combining.rest_mean": Row("mean1 N mean2 n", lambda m, N, a, n: (N * m - n * a) / (N - n)),
    "combining.rest_sd": Row("mean1 sd1 N mean2 sd2 n", _rest),
    "combining.rest_mean_bounds": Row(
        "mean1- mean1+ N mean2- mean2+ n",
        lambda m, o, N, a, b, n: ((N * m - n * a) / (N - n), (N * o - n * b) / (N - n)),
    ),
    "combining.rest_sd_bounds": Row(
        "mean1- mean1+ sd1- sd1+ N mean2- mean2+ sd2- sd2+ n",
        lambda m, o, s, r, N, a, b, c, d, n: (_rest(m, s, N, b, d, n), _rest(o, r, N, a, c, n)),
    ),
    "spread_limits.ss_limits_of_range": Row("sd1 n", lambda r, n: (r**2 / 2, r**2 * (n**2 - np.mod(n, 2)) / (4 * n))),
    "spread_limits.ss_least_of_quartiles": Row("sd1 n", lambda r, n: np.floor(n / 4) * r**2 / 2),
    "spread_limits.most_mean_less_median": Row(
        "sd1 n", lambda s, n: s * np.sqrt((n - 1) / n * (n / (np.floor(n / 2) + 1) - 1))
    ),
}  # fmt: skip

EXEMPT = {
    "combining.union_sd_bounds": "visits every corner of the box of means",
    "spread_limits.ss_limits_of_range_and_mean": "an extremum with several candidates; no special function",
}
