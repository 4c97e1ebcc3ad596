"""Power of F tests of fixed effects: analysis of variance by Cohen's f, regression by f², noncentral F."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike
from scipy import special

from recheck.recompute.arrays import Floats, together
from recheck.recompute.power.search import MOST, root, whole_from

LARGEST_EFFECT = 1e4


def f_power(noncentrality: ArrayLike, df1: ArrayLike, df2: ArrayLike, alpha: ArrayLike = 0.05) -> Floats:
    """Power of an F test: P(F > F_crit), F noncentral with the noncentrality λ >= 0.

    Arguments broadcast; nan where a df is not above 0. Increasing in λ and alpha.
    Source: Patnaik (1949), Biometrika 36:202-232; Cohen (1988) Statistical Power Analysis, 2nd ed., ch. 8-9.
    """
    shift, df1, df2, alpha = together(noncentrality, df1, df2, alpha)
    with np.errstate(invalid="ignore"):
        critical = special.fdtri(df1, df2, 1 - alpha)
        power = 1 - special.ncfdtr(df1, df2, shift, critical)
    return np.asarray(np.where((df1 > 0) & (df2 > 0), power, np.nan))


def fixed_effects_power(
    f2: ArrayLike, N: ArrayLike, df1: ArrayLike, parameters: ArrayLike, alpha: ArrayLike = 0.05
) -> Floats:
    """Power of an F test in a linear model: λ = f² N, df2 = N − parameters.

    `f2` is Cohen's f² (the square of f), N the number of all cases, `parameters` the number of groups (cells) of an
    analysis of variance, or of predictors of a regression plus 1. Source: Cohen (1988), ch. 8-9; for all predictors
    together his λ = f² (df1 + df2 + 1) is the same.
    """
    f2, N, df1, parameters, alpha = together(f2, N, df1, parameters, alpha)
    return f_power(f2 * N, df1, N - parameters, alpha)


def fixed_effects_n(
    f2: ArrayLike,
    power: ArrayLike,
    df1: ArrayLike,
    parameters: ArrayLike,
    alpha: ArrayLike = 0.05,
    *,
    whole: bool = False,
) -> Floats:
    """The N of all cases that has the power, by `fixed_effects_power`, for an effect f² > 0; at least parameters + 1."""
    f2, power, df1, parameters, alpha = together(f2, power, df1, parameters, alpha)

    def rises(N: Floats) -> Floats:
        return fixed_effects_power(f2, N, df1, parameters, alpha)

    found = root(rises, power, parameters + 1, np.full(f2.shape, MOST))
    return whole_from(rises, power, found) if whole else found


def fixed_effects_detectable(
    N: ArrayLike, power: ArrayLike, df1: ArrayLike, parameters: ArrayLike, alpha: ArrayLike = 0.05
) -> Floats:
    """The smallest f² that is detected with the power, by `fixed_effects_power`."""
    N, power, df1, parameters, alpha = together(N, power, df1, parameters, alpha)

    def rises(f2: Floats) -> Floats:
        return fixed_effects_power(f2, N, df1, parameters, alpha)

    return root(rises, power, np.full(N.shape, 1e-12), np.full(N.shape, LARGEST_EFFECT))


def anova_power(f: ArrayLike, n: ArrayLike, groups: ArrayLike, alpha: ArrayLike = 0.05) -> Floats:
    """Power of a one-way analysis of variance of `groups` groups of n each, Cohen's f: λ = f² n groups.

    Source: Cohen (1988) Statistical Power Analysis, 2nd ed., 8.2.
    """
    f, n, groups, alpha = together(f, n, groups, alpha)
    return fixed_effects_power(f * f, n * groups, groups - 1, groups, alpha)


def anova_n(
    f: ArrayLike, power: ArrayLike, groups: ArrayLike, alpha: ArrayLike = 0.05, *, whole: bool = False
) -> Floats:
    """The n of each of `groups` groups that has the power, by `anova_power`, for Cohen's f > 0; at least 2 where whole."""
    f, power, groups, alpha = together(f, power, groups, alpha)

    def rises(n: Floats) -> Floats:
        return anova_power(f, n, groups, alpha)

    found = root(rises, power, 1 + 1 / groups, np.full(f.shape, MOST))
    return whole_from(rises, power, found) if whole else found
