"""Power of the comparison of two independent proportions, by the approximations in use."""

from __future__ import annotations

from typing import Literal

import numpy as np
from numpy.typing import ArrayLike
from scipy import special

from recheck.recompute.arrays import Floats, quotient, together
from recheck.recompute.power.normal import z_power, z_shift

Spread = Literal["mixed", "unpooled", "pooled"]
"""Which variance: pooled under the null and unpooled under the alternative, unpooled in both, or pooled in both."""

SPREADS: tuple[Spread, ...] = ("mixed", "unpooled", "pooled")


def cohens_h(p1: ArrayLike, p2: ArrayLike) -> Floats:
    """Cohen's h, 2 asin √p1 − 2 asin √p2. Source: Cohen (1988) Statistical Power Analysis, 2nd ed., 6.2."""
    p1, p2 = together(p1, p2)
    with np.errstate(invalid="ignore"):
        return np.asarray(2 * np.arcsin(np.sqrt(p1)) - 2 * np.arcsin(np.sqrt(p2)))


def arcsine_power(
    h: ArrayLike,
    n1: ArrayLike,
    n2: ArrayLike,
    alpha: ArrayLike = 0.05,
    *,
    tails: int = 2,
    far_tail: bool = True,
) -> Floats:
    """Power by the arcsine transformation: shift h √(n1 n2 / (n1 + n2)). Source: Cohen (1988), 6.2-6.3."""
    h, n1, n2, alpha = together(h, n1, n2, alpha)
    return z_power(h * np.sqrt(quotient(n1 * n2, n1 + n2)), alpha, tails=tails, far_tail=far_tail)


def arcsine_n(
    h: ArrayLike, power: ArrayLike, alpha: ArrayLike = 0.05, *, ratio: ArrayLike = 1.0, tails: int = 2
) -> Floats:
    """The n of the first group, (1 + 1 / ratio) ((z_alpha + z_power) / h)²; infinite for h = 0. Source: Cohen (1988), 6.4."""
    h, power, alpha, ratio = together(h, power, alpha, ratio)
    return np.asarray((1 + 1 / ratio) * quotient(z_shift(power, alpha, tails=tails), h) ** 2)


def _spreads(p1: Floats, p2: Floats, ratio: Floats, spread: Spread) -> tuple[Floats, Floats]:
    """√n1 times the standard error under the null and under the alternative."""
    mean = (p1 + ratio * p2) / (1 + ratio)
    with np.errstate(invalid="ignore"):
        pooled = np.sqrt(mean * (1 - mean) * (1 + 1 / ratio))
        unpooled = np.sqrt(p1 * (1 - p1) + p2 * (1 - p2) / ratio)
    return (unpooled if spread == "unpooled" else pooled), (pooled if spread == "pooled" else unpooled)


def proportions_power(
    p1: ArrayLike, p2: ArrayLike, n1: ArrayLike, n2: ArrayLike, alpha: ArrayLike = 0.05, *,
    spread: Spread = "mixed", tails: int = 2, far_tail: bool = False,
) -> Floats:  # fmt: skip
    """Power of the z test of two proportions without continuity correction; 0 <= p <= 1.

    Source: Fleiss (1981) Statistical Methods for Rates and Proportions, 2nd ed., 3.2 (from memory).
    """
    p1, p2, n1, n2, alpha = together(p1, p2, n1, n2, alpha)
    null, other = _spreads(p1, p2, n2 / n1, spread)
    critical, gap = -special.ndtri(alpha / tails) * null, np.abs(p1 - p2) * np.sqrt(n1)
    power = special.ndtr(quotient(gap - critical, other))
    return np.asarray(
        power + special.ndtr(quotient(-gap - critical, other)) if far_tail and tails == 2 else power
    )


def proportions_n(
    p1: ArrayLike, p2: ArrayLike, power: ArrayLike, alpha: ArrayLike = 0.05, *,
    ratio: ArrayLike = 1.0, spread: Spread = "mixed", tails: int = 2,
) -> Floats:  # fmt: skip
    """The n of the first group: ((z_alpha SE_null + z_power SE_alternative) / (p1 − p2))²; infinite for p1 = p2.

    Source: Fleiss (1981) Statistical Methods for Rates and Proportions, 2nd ed., 3.2; unpooled: Pocock (1983)
    Clinical Trials, 9.2 (from memory).
    """
    p1, p2, power, alpha, ratio = together(p1, p2, power, alpha, ratio)
    null, other = _spreads(p1, p2, ratio, spread)
    top = -special.ndtri(alpha / tails) * null + special.ndtri(power) * other
    return np.asarray(quotient(np.maximum(top, 0.0), p1 - p2) ** 2)


def continuity_corrected_n(n: ArrayLike, difference: ArrayLike, *, ratio: ArrayLike = 1.0) -> Floats:
    """The n of the first group with continuity correction, from the n without it and |p1 − p2|.

    n / 4 (1 + √(1 + 2 (1 + ratio) / (n ratio |p1 − p2|)))². Source: Casagrande, Pike & Smith (1978), Biometrics
    34:483-486; Fleiss, Tytun & Ury (1980), Biometrics 36:343-346.
    """
    n, difference, ratio = together(n, np.abs(difference), ratio)
    with np.errstate(invalid="ignore"):
        return np.asarray(n / 4 * (1 + np.sqrt(1 + quotient(2 * (1 + ratio), n * ratio * difference))) ** 2)
