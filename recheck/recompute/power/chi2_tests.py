"""Power of χ² tests by Cohen's w, noncentral χ²."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike
from scipy import special

from recheck.recompute.arrays import Floats, together
from recheck.recompute.power.search import MOST, root, whole_from


def chi2_power(w: ArrayLike, N: ArrayLike, df: ArrayLike, alpha: ArrayLike = 0.05) -> Floats:
    """Power of a χ² test of a table or of goodness of fit: noncentrality N w². Increasing in w, N and alpha.

    Source: Patnaik (1949), Biometrika 36:202-232; Cohen (1988) Statistical Power Analysis, 2nd ed., ch. 7.
    """
    w, N, df, alpha = together(w, N, df, alpha)
    critical = special.chdtri(df, alpha)
    return np.asarray(1 - special.chndtr(critical, df, N * w * w))


def chi2_n(
    w: ArrayLike, power: ArrayLike, df: ArrayLike, alpha: ArrayLike = 0.05, *, whole: bool = False
) -> Floats:
    """The N of all cases that has the power, by `chi2_power`, for an effect w > 0."""
    w, power, df, alpha = together(w, power, df, alpha)

    def rises(N: Floats) -> Floats:
        return chi2_power(w, N, df, alpha)

    found = root(rises, power, np.ones(w.shape), np.full(w.shape, MOST))
    return whole_from(rises, power, found) if whole else found


def chi2_detectable(N: ArrayLike, power: ArrayLike, df: ArrayLike, alpha: ArrayLike = 0.05) -> Floats:
    """The smallest w that is detected with the power, by `chi2_power`."""
    N, power, df, alpha = together(N, power, df, alpha)

    def rises(w: Floats) -> Floats:
        return chi2_power(w, N, df, alpha)

    return root(rises, power, np.full(N.shape, 1e-9), np.full(N.shape, 1e4))
