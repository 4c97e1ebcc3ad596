"""Rows of tails, ranges of p, intervals, two groups, analysis of variance, contingency tables and ranks."""

import numpy as np
from scipy import special

from tests.benchmarks.formula_rows.row import Column, Row


def _pooled(s1: Column, n1: Column, s2: Column, n2: Column) -> Column:
    return np.asarray(np.sqrt(((n1 - 1) * s1**2 + (n2 - 1) * s2**2) / (n1 + n2 - 2)))


def _welch(s1: Column, n1: Column, s2: Column, n2: Column) -> Column:
    return np.asarray(np.sqrt(s1**2 / n1 + s2**2 / n2))


def _df(s1: Column, n1: Column, s2: Column, n2: Column) -> Column:
    share = s1**2 / n1 / (s1**2 / n1 + s2**2 / n2)
    return np.asarray(1 / (share**2 / (n1 - 1) + (1 - share) ** 2 / (n2 - 1)))


def _one_way(m: Column, s: Column, n: Column) -> Column:
    N, k = n.sum(-1), n.shape[-1]
    centre = (n * m).sum(-1, keepdims=True) / N[:, None]
    return np.asarray((n * (m - centre) ** 2).sum(-1) / (k - 1) / (((n - 1) * s * s).sum(-1) / (N - k)))


def _ss(m: Column, w: Column) -> Column:
    centre = (w * m).sum(-1, keepdims=True) / w.sum(-1, keepdims=True)
    return np.asarray((w * (m - centre) ** 2).sum(-1))


def _ss_corners(low: Column, high: Column, w: Column) -> Column:
    """The corners of the box, half of which can be left out by symmetry, and one sum for the least."""
    for _ in range(2 ** (low.shape[-1] - 1)):
        _ss(high, w)
    return _ss(low, w)


def _expected(n: Column) -> Column:
    total = n.sum((-1, -2), keepdims=True)
    return np.asarray(n.sum(-1, keepdims=True) * n.sum(-2, keepdims=True) / total)


BOX = "mean1- mean1+ sd1- sd1+ n1 mean2- mean2+ sd2- sd2+ n2"
MEANS_BOX = "mean1- mean1+ sd1- sd1+ n1"
TAILS = {
    "tails.t_tail": Row("t df", lambda t, df: special.stdtr(df, -t)),
    "tails.z_tail": Row("z", special.ndtr),
    "tails.chi2_tail": Row("chi2 df1", lambda x, df: special.chdtrc(df, x)),
    "tails.f_tail": Row("F df1 df2", lambda F, a, b: special.fdtrc(a, b, F)),
    "tails.t_two_sided": Row("t df", lambda t, df: special.stdtr(df, -t)),
    "tails.z_two_sided": Row("z", special.ndtr),
    "tails.r_tail": Row("r df", lambda r, df: special.stdtr(df, -r)),
    "tails.r_two_sided": Row("r df", lambda r, df: special.stdtr(df, -np.abs(r))),
    "tails.t_quantile": Row("p df", lambda p, df: special.stdtrit(df, p)),
    "tails.z_quantile": Row("p", special.ndtri),
    "bounds.p_from_t_bounds": Row(
        "t- t+ df df", lambda a, b, c, d: (special.stdtr(c, -np.abs(a)), special.stdtr(c, -np.abs(b)))
    ),
    "bounds.p_from_z_bounds": Row("z- z+", lambda a, b: (special.ndtr(a), special.ndtr(b))),
    "bounds.p_from_chi2_bounds": Row(
        "chi2- chi2+ df1 df1", lambda a, b, c, d: (special.chdtrc(c, a), special.chdtrc(c, b))
    ),
    "bounds.p_from_r_bounds": Row(
        "r- r+ df df", lambda a, b, c, d: (special.stdtr(c, -np.abs(a)), special.stdtr(c, -np.abs(b)))
    ),
    "bounds.p_from_F_bounds": Row(
        "F- F+ df1 df1 df2 df2", lambda a, b, c, d, e, f: (special.fdtrc(c, e, a), special.fdtrc(c, e, b))
    ),
    "triples.check_t_triples": Row(
        "t- t+ df p- p+",
        lambda a, b, df, c, d: (special.stdtr(df, -np.abs(a)), special.stdtr(df, -np.abs(b))),
    ),
}
GOLDEN_STEPS = 44
"""Values that a golden section of 42 steps needs where an extremum may lie inside; rows are few as each takes so many."""
SHAPES = {
    "bounds.p_corrected_F_bounds": Row(
        "F- F+ df1 df2",
        lambda a, b, c, d: [special.fdtrc(c, d, a) for _ in range(GOLDEN_STEPS + 2)],
        size=10**4,
    ),
    "f_shape.least_over_df2": Row(
        "share df2 df1 df2",
        lambda F, a, b, c: [special.fdtrc(a, b, F) for _ in range(GOLDEN_STEPS)],
        size=10**4,
    ),
    "f_shape.greatest_over_df1": Row(
        "F df1 df2 n", lambda F, a, b, c: [special.fdtrc(a, c, F) for _ in range(GOLDEN_STEPS)], size=10**4
    ),
    "f_shape.least_over_epsilon": Row(
        "share df2 df1", lambda F, a, b: [special.fdtrc(a, b, F) for _ in range(GOLDEN_STEPS)], size=10**4
    ),
    "f_shape.greatest_over_epsilon": Row(
        "F df1 df2", lambda F, a, b: [special.fdtrc(a, b, F) for _ in range(GOLDEN_STEPS)], size=10**4
    ),
}
INTERVALS = {
    "intervals.critical_t": Row("level df", lambda c, df: special.stdtrit(df, (1 + c) / 2)),
    "intervals.ci_from_estimate": Row("d se level df", lambda d, s, c, df: special.stdtrit(df, (1 + c) / 2)),
    "intervals.se_from_ci": Row("low high level df", lambda a, b, c, df: special.stdtrit(df, (1 + c) / 2)),
    "intervals.t_from_ci": Row("low high level df", lambda a, b, c, df: special.stdtrit(df, (1 + c) / 2)),
    "intervals.t_from_ci_bounds": Row(
        "low- low+ high- high+ level df", lambda a, b, d, e, c, df: special.stdtrit(df, (1 + c) / 2)
    ),
}
TWO_GROUPS = {
    "two_groups.pooled_sd": Row("sd1 n1 sd2 n2", _pooled),
    "two_groups.pooled_se": Row(
        "sd1 n1 sd2 n2", lambda s, n, t, m: _pooled(s, n, t, m) * np.sqrt(1 / n + 1 / m)
    ),
    "two_groups.welch_se": Row("sd1 n1 sd2 n2", _welch),
    "two_groups.satterthwaite_df": Row("sd1 n1 sd2 n2", _df),
    "two_groups.t_pooled": Row(
        "mean1 sd1 n1 mean2 sd2 n2",
        lambda a, s, n, b, t, m: (a - b) / (_pooled(s, n, t, m) * np.sqrt(1 / n + 1 / m)),
    ),
    "two_groups.t_welch": Row(
        "mean1 sd1 n1 mean2 sd2 n2", lambda a, s, n, b, t, m: (a - b) / _welch(s, n, t, m)
    ),
    "two_groups.pooled_t_bounds": Row(
        BOX,
        lambda a, b, s, t, n, c, d, u, v, m: (
            (a - d) / (_pooled(t, n, v, m) * np.sqrt(1 / n + 1 / m)),
            (b - c) / (_pooled(s, n, u, m) * np.sqrt(1 / n + 1 / m)),
        ),
    ),
    "two_groups.welch_t_bounds": Row(
        BOX,
        lambda a, b, s, t, n, c, d, u, v, m: ((a - d) / _welch(t, n, v, m), (b - c) / _welch(s, n, u, m)),
    ),
    "two_groups.welch_df_bounds": Row(
        "sd1- sd1+ n1 sd2- sd2+ n2",
        lambda s, t, n, u, v, m: (_df(s, n, v, m), _df(t, n, u, m), _df(t, n, v, m)),
    ),
}
ANOVA = {
    "anova.ss_between": Row("mean1 n1", _ss, groups=4),
    "anova.f_one_way": Row("mean1 sd1 n1", _one_way, groups=4),
    "anova.f_welch": Row("mean1 sd1 n1", lambda m, s, n: (_one_way(m, s, n), _ss(m, n / s**2)), groups=4),
    "anova.f_brown_forsythe": Row("mean1 sd1 n1", lambda m, s, n: (_one_way(m, s, n), _ss(m, s)), groups=4),
    "anova.ss_between_bounds": Row("mean1- mean1+ n1", _ss_corners, groups=4, size=10**5),
    "anova.f_one_way_bounds": Row(
        "mean1- mean1+ sd1- sd1+ n1", lambda a, b, s, t, n: _ss_corners(a, b, n), groups=4, size=10**5
    ),
    "anova.f_brown_forsythe_bounds": Row(
        "mean1- mean1+ sd1- sd1+ n1", lambda a, b, s, t, n: _ss_corners(a, b, n), groups=4, size=10**5
    ),
    "anova.f_welch_bounds": Row(
        "mean1- mean1+ sd1- sd1+ n1",
        lambda a, b, s, t, n: [_ss_corners(low, high, n) for low, high in ((a, b), (a, b))], groups=4, size=10**5,
    ),
}  # fmt: skip
ROWS = {
    **TAILS, **SHAPES, **INTERVALS, **TWO_GROUPS, **ANOVA,
    "ranks.spearman_two_sided": Row("r N", lambda r, n: special.ndtr(r * np.sqrt(n - 1))),
}  # fmt: skip
EXEMPT = {
    "arrays.*": "what the formulas are made of, measured within each of them",
    "f_shape.valley_floor": "takes a curve, not arrays; measured within the extrema that it finds",
}
