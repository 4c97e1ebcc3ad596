"""From p to a confidence interval and back, for differences and, in logarithms, for ratios.

By the normal distribution, two-sided, for the Wald test that goes with the interval. Beside the exact
quantiles stand the approximations that authors compute by hand. `level` runs from 0 to 1.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike

from recheck.recompute.arrays import Bounds, Floats, floats, quotient, where_known
from recheck.recompute.intervals import t_from_ci, t_from_ci_bounds
from recheck.recompute.tails import z_quantile, z_two_sided


def z_from_p_approximate(p: ArrayLike) -> Floats:
    """z of a two-sided p, -0.862 + sqrt(0.743 - 2.404 ln p).

    Within 0.013 of the exact one from p = 0.001 to 0.1, 0.04 at 0.0001. Source: Altman & Bland (2011), BMJ 343:d2090.
    """
    (p,) = floats(p)
    return np.asarray(-0.862 + np.sqrt(0.743 - 2.404 * np.log(p)))


def p_from_z_approximate(z: ArrayLike) -> Floats:
    """Two-sided p of z, exp(-0.717 |z| - 0.416 z²). Source: Altman & Bland (2011), BMJ 343:d2304."""
    (z,) = floats(z)
    return np.asarray(np.exp(-0.717 * np.abs(z) - 0.416 * z**2))


def se_from_p(estimate: ArrayLike, p: ArrayLike) -> Floats:
    """SE of an estimate from its two-sided p against 0, |estimate| / z; of a ratio, that of its logarithm.

    Source: Altman & Bland (2011), BMJ 343:d2090.
    """
    estimate, p = floats(estimate, p)
    return quotient(np.abs(estimate), z_quantile(p / 2))


def ci_from_p(estimate: ArrayLike, p: ArrayLike, level: ArrayLike) -> Bounds:
    """Interval of a difference from its two-sided p, estimate ∓ c |estimate| / z.

    Source: Altman & Bland (2011), BMJ 343:d2090.
    """
    estimate, level = floats(estimate, level)
    half = z_quantile((1 - level) / 2) * se_from_p(estimate, p)
    return np.asarray(estimate - half), np.asarray(estimate + half)


def ci_from_p_ratio(ratio: ArrayLike, p: ArrayLike, level: ArrayLike) -> Bounds:
    """Interval of a ratio from its two-sided p, made in logarithms. Source: as for `ci_from_p`."""
    (ratio,) = floats(ratio)
    low, high = ci_from_p(np.log(ratio), p, level)
    with np.errstate(over="ignore"):
        return np.exp(low), np.exp(high)


def ci_from_p_bounds(
    estimate_low: ArrayLike, estimate_high: ArrayLike, p_low: ArrayLike, p_high: ArrayLike, level: ArrayLike
) -> tuple[Bounds, Bounds]:
    """Ranges of the lower and of the upper end of `ci_from_p` over a box of estimate and p.

    With k = c / z(p) the ends are estimate ∓ k |estimate|: k rises with p and moves each end its own way,
    and for a fixed k an end is linear in the estimate on either side of 0. So the extremes are at corners,
    or at 0 where the box holds it.
    """
    estimate_low, estimate_high, p_low, p_high, level = floats(
        estimate_low, estimate_high, p_low, p_high, level
    )
    c = z_quantile((1 - level) / 2)
    near, far = quotient(c, z_quantile(p_low / 2)), quotient(c, z_quantile(p_high / 2))
    inside = np.where((estimate_low <= 0) & (estimate_high >= 0), 0.0, np.nan)

    def extreme(pick: np.ufunc, factor: Floats) -> Floats:
        with np.errstate(invalid="ignore"):
            ends = [estimate + factor * np.abs(estimate) for estimate in (estimate_low, estimate_high)]
        return np.asarray(pick(pick(ends[0], ends[1]), inside))

    box = estimate_low, estimate_high, p_low, p_high
    lower = where_known((extreme(np.fmin, -far), extreme(np.fmax, -near)), *box)
    return lower, where_known((extreme(np.fmin, near), extreme(np.fmax, far)), *box)


def p_from_ci(low: ArrayLike, high: ArrayLike, level: ArrayLike) -> Floats:
    """Two-sided p of a difference from its interval, z = c (low + high) / (high - low).

    Source: Altman & Bland (2011), BMJ 343:d2304, with the exact tail.
    """
    return z_two_sided(t_from_ci(low, high, level, np.inf))


def p_from_ci_ratio(low: ArrayLike, high: ArrayLike, level: ArrayLike) -> Floats:
    """Two-sided p of a ratio from its interval, in logarithms. Source: as for `p_from_ci`."""
    low, high = floats(low, high)
    return p_from_ci(np.log(low), np.log(high), level)


def p_from_ci_bounds(
    low_lo: ArrayLike, low_hi: ArrayLike, high_lo: ArrayLike, high_hi: ArrayLike, level: ArrayLike
) -> Bounds:
    """Range of `p_from_ci` over a box of both ends: p falls as |z| rises, z as in `t_from_ci_bounds`."""
    z_low, z_high = t_from_ci_bounds(low_lo, low_hi, high_lo, high_hi, level, np.inf)
    nearest = np.where((z_low <= 0) & (z_high >= 0), 0.0, np.minimum(np.abs(z_low), np.abs(z_high)))
    return z_two_sided(np.maximum(np.abs(z_low), np.abs(z_high))), z_two_sided(nearest)
