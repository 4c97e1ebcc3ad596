"""Rows of the effect sizes, their variances, bounds and intervals."""

import numpy as np
from scipy import special

from tests.benchmarks.formula_rows.row import Column, Row


def _gamma_ratio(df: Column) -> Column:
    return np.asarray(special.poch((df - 1) / 2, 0.5))


def _pooled(s1: Column, n1: Column, s2: Column, n2: Column) -> Column:
    return np.asarray(np.sqrt(((n1 - 1) * s1**2 + (n2 - 1) * s2**2) / (n1 + n2 - 2)))


def _per_d(d: Column, n1: Column, n2: Column) -> Column:
    return np.asarray(1 / n1 + 1 / n2 + d * d / (2 * (n1 + n2)))


GROUPS = "mean1 sd1 n1 mean2 sd2 n2"
D_BOX = "mean1- mean1+ sd1- sd1+ n1 mean2- mean2+ sd2- sd2+ n2"
FEW, MANY = 10**4, 40.0
"""Rows and ratio of what has to find roots of noncentral distributions: the ratio is to one value of the library's."""

SIZES = {
    "hedges_correction": Row("df", _gamma_ratio),
    "hedges_correction_approximate": Row("df", lambda df: 1 - 3 / (4 * df - 1)),
    "cohens_d": Row(GROUPS, lambda a, s, n, b, t, m: (a - b) / _pooled(s, n, t, m)),
    "hedges_g": Row(GROUPS, lambda a, s, n, b, t, m: _gamma_ratio(n + m - 2)),
    "glass_delta": Row("mean1 mean2 sd2", lambda a, b, s: (a - b) / s),
    "d_average_sd": Row("mean1 sd1 mean2 sd2", lambda a, s, b, t: (a - b) / ((s + t) / 2)),
    "d_root_mean_square_sd": Row(
        "mean1 sd1 mean2 sd2", lambda a, s, b, t: (a - b) / np.sqrt((s * s + t * t) / 2)
    ),
    "d_population_sd": Row(GROUPS, lambda a, s, n, b, t, m: (a - b) / _pooled(s, n, t, m)),
    "population_sd": Row("sd1 n1 sd2 n2", _pooled),
    "d_from_t": Row("t n1 n2", lambda t, n, m: t * np.sqrt(1 / n + 1 / m)),
    "d_z_from_t": Row("t n", lambda t, n: t / np.sqrt(n)),
    "d_rough": Row("t df", lambda t, df: 2 * t / np.sqrt(df)),
    "d_rough_total": Row("t N", lambda t, N: 2 * t / np.sqrt(N)),
    "d_from_F": Row("F n1 n2", lambda F, n, m: np.sqrt(F * (1 / n + 1 / m))),
    "d_from_p": Row("p n1 n2", lambda p, n, m: special.stdtrit(n + m - 2, p / 2)),
    "d_from_ci": Row("low high level n1 n2", lambda a, b, c, n, m: special.stdtrit(n + m - 2, 0.025 + 0 * a)),
    "d_z": Row("d sd1", lambda d, s: d / s),
    "d_rm": Row("d sd1 r", lambda d, s, r: d / s * np.sqrt(2 * (1 - r))),
    "d_z_from_p": Row("p n", lambda p, n: special.stdtrit(n - 1, p / 2)),
    "d_z_from_ci": Row("low high level n", lambda a, b, c, n: special.stdtrit(n - 1, 0.025 + 0 * a)),
}
SHARES = {
    "r_from_t": Row("t df", lambda t, df: t / np.hypot(t, np.sqrt(df))),
    "partial_eta2_from_F": Row("F df1 df2", lambda F, a, b: F * a / (F * a + b)),
    "omega2_from_F": Row("F df1 df2 N", lambda F, a, b, N: a * (F - 1) / (a * (F - 1) + N)),
    "epsilon2_from_F": Row("F df1 df2", lambda F, a, b: a * (F - 1) / (a * F + b)),
    "f_from_F": Row("F df1 df2", lambda F, a, b: np.sqrt(F * a / b)),
    "phi_from_chi2": Row("chi2 N", lambda x, N: np.sqrt(x / N)),
    "cramers_v": Row("chi2 N k", lambda x, N, k: np.sqrt(x / (N * (k - 1)))),
    "eta2_from_ss": Row("share N", lambda a, b: a / b),
    "partial_eta2_from_ss": Row("share N", lambda a, b: a / (a + b)),
    "omega2_from_ss": Row("N df1 share chi2", lambda a, df, m, s: (a - df * m) / (s + m)),
    "f2_from_share": Row("share", lambda x: x / (1 - x)),
    "share_from_f2": Row("share", lambda x: x / (1 + x)),
    "fisher_z": Row("r", np.arctanh),
    "r_from_fisher_z": Row("z", np.tanh),
    "r_from_d": Row("d n1 n2", lambda d, n, m: d / np.sqrt(d * d + (n + m) ** 2 / (n * m))),
    "r_pb_from_d": Row("d n1 n2", lambda d, n, m: d / np.sqrt(d * d + (n + m) * (n + m - 2) / (n * m))),
    "d_from_r": Row("r", lambda r: 2 * r / np.sqrt(1 - r * r)),
    "d_from_r_pb": Row(
        "r n1 n2", lambda r, n, m: r * np.sqrt((n + m) * (n + m - 2) / (n * m)) / np.sqrt(1 - r * r)
    ),
    "epsilon2_from_share": Row("share df1 df2", lambda x, a, b: 1 - (1 - x) * (a + b) / b),
}
VARIANCES = {
    "d_variance": Row("d n1 n2", _per_d),
    "d_variance_by_df": Row("d n1 n2", _per_d),
    "d_variance_exact": Row("d n1 n2", lambda d, n, m: _gamma_ratio(n + m - 2)),
    "g_variance": Row("d n1 n2", lambda d, n, m: _gamma_ratio(n + m - 2)),
    "g_variance_revised": Row("d n1 n2", _per_d),
    "g_variance_unbiased": Row("d n1 n2", lambda d, n, m: _gamma_ratio(n + m - 2)),
    "glass_delta_variance": Row("d n1 n2", _per_d),
    "glass_delta_variance_unequal": Row(
        "d sd1 n1 sd2 n2", lambda d, s, n, t, m: (s / t) ** 2 / (n - 1) + (1 + d * d / 2) / (m - 1)
    ),
    "d_average_variance": Row(
        "d sd1 n1 sd2 n2",
        lambda d, s, n, t, m: (
            d * d * (s**4 / (n - 1) + t**4 / (m - 1)) / (2 * (s * s + t * t) ** 2)
            + (s * s / (n - 1) + t * t / (m - 1)) / (s * s + t * t)
        ),
    ),
    "d_average_variance_paired": Row(
        "d sd1 sd2 r n",
        lambda d, s, t, r, n: (
            d * d * (s**4 + t**4 + 2 * r * r * s * s * t * t) / (2 * (n - 1) * (s * s + t * t) ** 2)
            + (s * s + t * t - 2 * r * s * t) / (n - 1)
        ),
    ),
    "d_z_variance": Row("d n", lambda d, n: 1 / n + d * d / (2 * n)),
    "d_z_variance_by_df": Row("d n", lambda d, n: 1 / n + d * d / (2 * (n - 1))),
    "d_rm_variance": Row("d r n", lambda d, r, n: (1 / n + d * d / (2 * n)) * 2 * (1 - r)),
    "d_change_variance": Row("d r n", lambda d, r, n: 2 * (1 - r) / n + d * d / (2 * n)),
    "r_variance": Row("r n", lambda r, n: (1 - r * r) ** 2 / (n - 1)),
    "fisher_z_variance": Row("n", lambda n: 1 / (n - 3)),
    "fisher_z_variance_spearman": Row("r n", lambda r, n: (1 + r * r / 2) / (n - 3)),
    "r_variance_from_d": Row(
        "d se n1 n2",
        lambda d, v, n, m: ((n + m) ** 2 / (n * m)) ** 2 * v / (d * d + (n + m) ** 2 / (n * m)) ** 3,
    ),
    "d_variance_from_r": Row("r se", lambda r, v: 4 * v / (1 - r * r) ** 3),
    "log_odds_ratio_variance_from_d": Row("se", lambda v: v * 3.29),
    "d_variance_from_log_odds_ratio": Row("se", lambda v: v * 0.304),
    "r2_variance": Row(
        "share n df1", lambda x, n, k: 4 * x * (1 - x) ** 2 * (n - k - 1) ** 2 / ((n * n - 1) * (n + 3))
    ),
}
INTERVALS = {
    "noncentral_t_ci": Row("t df", lambda t, df: special.nctdtr(df, t, t), size=FEW, at_most=MANY),
    "d_noncentral_ci": Row(
        "d n1 n2", lambda d, n, m: special.nctdtr(n + m - 2, d, d), size=FEW, at_most=MANY
    ),
    "g_noncentral_ci": Row(
        "d n1 n2", lambda d, n, m: special.nctdtr(n + m - 2, d, d), size=FEW, at_most=MANY
    ),
    "d_z_noncentral_ci": Row("d n", lambda d, n: special.nctdtr(n - 1, d, d), size=FEW, at_most=MANY),
    "glass_delta_noncentral_ci": Row(
        "d n1 n2", lambda d, n, m: special.nctdtr(m - 1, d, d), size=FEW, at_most=MANY
    ),
    "d_average_noncentral_ci": Row(
        "d sd1 sd2 r n", lambda d, s, t, r, n: special.nctdtr(n - 1, d, d), size=FEW, at_most=MANY
    ),
    "normal_ci": Row("d se", lambda d, v: (d - 1.96 * np.sqrt(v), d + 1.96 * np.sqrt(v))),
    "t_ci": Row("d se df", lambda d, v, df: special.stdtrit(df, 0.025 + 0 * d)),
    "noncentral_F_ci": Row(
        "F df1 df2", lambda F, a, b: special.ncfdtr(a, b, F * a, F), size=FEW, at_most=MANY
    ),
    "partial_eta2_ci": Row(
        "F df1 df2", lambda F, a, b: special.ncfdtr(a, b, F * a, F), size=FEW, at_most=MANY
    ),
    "partial_eta2_ci_by_df": Row(
        "F df1 df2", lambda F, a, b: special.ncfdtr(a, b, F * a, F), size=FEW, at_most=MANY
    ),
    "f_ci": Row("F df1 df2", lambda F, a, b: special.ncfdtr(a, b, F * a, F), size=FEW, at_most=MANY),
    "share_of_lambda": Row("F N", lambda x, N: x / (x + N)),
    "r_ci": Row(
        "r n",
        lambda r, n: (
            np.tanh(np.arctanh(r) - 2 / np.sqrt(n - 3)),
            np.tanh(np.arctanh(r) + 2 / np.sqrt(n - 3)),
        ),
    ),
    "cramers_v_ci": Row("chi2 df1 N k", lambda x, df, N, k: special.chndtr(x, df, x), size=FEW, at_most=MANY),
    "cramers_v_ci_shifted": Row(
        "chi2 df1 N k", lambda x, df, N, k: special.chndtr(x, df, x), size=FEW, at_most=MANY
    ),
}
NONCENTRAL = {
    "noncentral.noncentral_t_cdf": Row("t df d", lambda t, df, d: special.nctdtr(df, d, t), size=FEW),
    "noncentral.noncentrality": Row("t df p", lambda t, df, p: special.nctdtr(df, t, t), size=FEW, at_most=MANY / 2),
    "noncentral_f.noncentral_F_cdf": Row("F df1 df2 chi2", lambda F, a, b, x: special.ncfdtr(a, b, x, F), size=FEW),
    "noncentral_f.noncentral_F_lambda": Row("F df1 df2 p", lambda F, a, b, p: special.ncfdtr(a, b, F * a, F), size=FEW, at_most=MANY / 2),
    "noncentral_f.noncentral_chi2_cdf": Row("chi2 df1 F", lambda x, df, y: special.chndtr(x, df, y), size=FEW),
    "noncentral_f.noncentral_chi2_lambda": Row("chi2 df1 p", lambda x, df, p: special.chndtr(x, df, x), size=FEW, at_most=MANY / 2),
}  # fmt: skip
ROWS = {
    **{f"effect_sizes.{name}": row for name, row in SIZES.items()},
    **{f"variance_explained.{name}": row for name, row in SHARES.items()},
    **{f"effect_variances.{name}": row for name, row in VARIANCES.items()},
    **{f"effect_intervals.{name}": row for name, row in INTERVALS.items()},
    **NONCENTRAL,
    "effect_bounds.d_bounds": Row(
        D_BOX,
        lambda a, b, s, t, n, c, d, u, v, m: ((a - d) / _pooled(t, n, v, m), (b - c) / _pooled(s, n, u, m)),
    ),
}
EXEMPT = {
    "noncentral_rules.*": "the quadratures inside the noncentral t, measured with it",
    "poisson_rules.*": "the sums inside the noncentral F, measured with it",
}
