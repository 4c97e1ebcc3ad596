"""Linear regression: R², adjusted R², F, the change of R², standardised coefficients.

df1 is the number of predictors that F tests, df2 what n leaves, n - k - 1 for k predictors and an intercept.
R² runs from 0 to 1. Every function but that of Olkin and Pratt is monotone in each argument, so that
ranges have their ends at corners.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike
from scipy import special

from recheck.recompute.arrays import Bounds, Floats, floats, quotient


def F_from_r2(r2: ArrayLike, df1: ArrayLike, df2: ArrayLike) -> Floats:
    """F of a whole model, (R² / df1) / ((1 - R²) / df2); infinite where R² is 1.

    Source: Fisher (1924), Philosophical Transactions B 213:89-142; Draper & Smith (1998), Applied Regression
    Analysis, ch. 6.
    """
    r2, df1, df2 = floats(r2, df1, df2)
    return quotient(r2 * df2, (1 - r2) * df1)


def r2_from_F(F: ArrayLike, df1: ArrayLike, df2: ArrayLike) -> Floats:
    """R² of the model that F tests as a whole, df1 F / (df1 F + df2); 1 where F is infinite. The inverse of `F_from_r2`."""
    F, df1, df2 = floats(F, df1, df2)
    # Not 1 - df2 / (df1 F + df2), whose digits cancel for a small F.
    return quotient(1.0, 1 + quotient(df2, df1 * F))


def r2_from_F_bounds(
    F_low: ArrayLike, F_high: ArrayLike,
    df1_low: ArrayLike, df1_high: ArrayLike, df2_low: ArrayLike, df2_high: ArrayLike,
) -> Bounds:  # fmt: skip
    """Range of R² over a box of F >= 0 and df: it rises with F and df1 and falls with df2."""
    return r2_from_F(F_low, df1_low, df2_high), r2_from_F(F_high, df1_high, df2_low)


def adjusted_r2(r2: ArrayLike, df1: ArrayLike, df2: ArrayLike) -> Floats:
    """The usual adjusted R², 1 - (1 - R²) (n - 1) / (n - k - 1) = 1 - (1 - R²) (df1 + df2) / df2; may be negative.

    Rises with R² and df2, falls with df1. Source: Ezekiel (1930), Methods of Correlation Analysis; Yin & Fan
    (2001), Journal of Experimental Education 69:203-224, formula 2.
    """
    r2, df1, df2 = floats(r2, df1, df2)
    return np.asarray(1 - (1 - r2) * quotient(df1 + df2, df2))


def adjusted_r2_wherry(r2: ArrayLike, df1: ArrayLike, df2: ArrayLike) -> Floats:
    """The same with n - k below, 1 - (1 - R²) (n - 1) / (n - k), a little larger.

    Source: Wherry (1931), Annals of Mathematical Statistics 2:440-457; Yin & Fan (2001), formula 3.
    """
    r2, df1, df2 = floats(r2, df1, df2)
    return np.asarray(1 - (1 - r2) * quotient(df1 + df2, df2 + 1))


def adjusted_r2_olkin_pratt(r2: ArrayLike, df1: ArrayLike, df2: ArrayLike) -> Floats:
    """The unbiased estimate, 1 - (n - 3) / (n - k - 1) (1 - R²) ₂F₁(1, 1; (n - k + 1) / 2; 1 - R²).

    Rises with R², falls with df1; with one predictor and a high R² it lies above R² itself.
    Source: Olkin & Pratt (1958), Annals of Mathematical Statistics 29:201-211.
    """
    r2, df1, df2 = floats(r2, df1, df2)
    return np.asarray(1 - quotient(df1 + df2 - 2, df2) * (1 - r2) * _series(df2 / 2 + 1, 1 - r2))


LARGE_C, TERMS = 50.0, 32
"""From this c on the library's function is not always a number; so many terms of the series leave 1e-20 there."""


def _series(c: Floats, x: Floats) -> Floats:
    """₂F₁(1, 1; c; x) = sum over k of k! x**k / (c (c + 1) … (c + k - 1)), x from 0 to 1, c > 1."""
    far = c > LARGE_C
    value = np.asarray(
        special.hyp2f1(1.0, 1.0, np.where(far, 2.0, c), np.where(far, 0.0, x)), dtype=np.float64
    )
    if not np.any(far):
        return value
    total: Floats = np.ones(np.broadcast_shapes(c.shape, x.shape))
    for k in range(TERMS, 0, -1):
        total = 1 + total * x * (k / (c + k - 1))
    return np.asarray(np.where(far, total, value), dtype=np.float64)


def adjusted_r2_stein(r2: ArrayLike, df1: ArrayLike, df2: ArrayLike) -> Floats:
    """Stein's formula for new cases, 1 - (1 - R²) (n - 1) (n - 2) (n + 1) / ((n - k - 1) (n - k - 2) n).

    Source: Stein (1960), in Contributions to Probability and Statistics (Olkin et al.), 424-443; Yin & Fan (2001).
    """
    r2, df1, df2 = floats(r2, df1, df2)
    n = df1 + df2 + 1
    return np.asarray(1 - (1 - r2) * quotient((n - 1) * (n - 2) * (n + 1), df2 * (df2 - 1) * n))


def r2_from_adjusted(adjusted: ArrayLike, df1: ArrayLike, df2: ArrayLike) -> Floats:
    """R² of an adjusted one, the inverse of `adjusted_r2`."""
    adjusted, df1, df2 = floats(adjusted, df1, df2)
    return np.asarray(1 - (1 - adjusted) * quotient(df2, df1 + df2))


def r2_change_from_F(F: ArrayLike, df1: ArrayLike, df2: ArrayLike, r2: ArrayLike) -> Floats:
    """What df1 predictors add to R², (1 - R²) F df1 / df2, from F of the change and R² with them.

    At most df1 F / (df1 F + df2), since R² is no less than its change. Rises with F and df1, falls
    with df2 and R². Source: Cohen & Cohen (1983), Applied Multiple Regression/Correlation Analysis, 4.4.
    """
    F, df1, df2, r2 = floats(F, df1, df2, r2)
    return np.asarray((1 - r2) * quotient(F * df1, df2))


def beta_from_b(b: ArrayLike, sd_predictor: ArrayLike, sd_outcome: ArrayLike) -> Floats:
    """Standardised coefficient, b times the SD of its predictor over that of the outcome.

    Source: Cohen & Cohen (1983), as above, 3.5.
    """
    b, sd_predictor, sd_outcome = floats(b, sd_predictor, sd_outcome)
    return quotient(b * sd_predictor, sd_outcome)


def r2_from_betas(betas: ArrayLike, correlations: ArrayLike) -> Floats:
    """R² as the sum over predictors (the last axis) of β times the correlation with the outcome.

    Source: Cohen & Cohen (1983), as above, 3.5.
    """
    betas, correlations = floats(betas, correlations)
    return np.asarray(np.sum(betas * correlations, axis=-1))
