"""Power of the test that a correlation is 0: exact for two normal variables, by Fisher's z, by the t of a fixed predictor."""

from __future__ import annotations

from collections.abc import Callable
from functools import cache
from typing import Literal

import numpy as np
from numpy.typing import ArrayLike
from scipy import special

from recheck.recompute.arrays import Floats, together
from recheck.recompute.power.normal import z_power
from recheck.recompute.power.search import MOST, root, whole_from
from recheck.recompute.power.t_tests import t_power

Method = Literal["exact", "fisher", "fixed"]
NODES = 48
FRINGE = 1e-14
"""Probability left out on either side of the quadrature."""


@cache
def _legendre() -> tuple[Floats, Floats]:
    nodes, weights = special.roots_legendre(NODES)
    return (nodes + 1) / 2, weights / 2


def _fixed_effect(rho: Floats) -> Floats:
    """rho / √(1 − rho²); nan beyond 1."""
    with np.errstate(invalid="ignore", divide="ignore"):
        return np.asarray(rho / np.sqrt(1 - rho * rho))


def exact_r_power(
    rho: ArrayLike, n: ArrayLike, alpha: ArrayLike = 0.05, *, tails: int = 2, far_tail: bool = True
) -> Floats:
    """Power of the t test of r = 0 where both variables are normal; n > 3, |rho| < 1.

    Given the first variable, T is noncentral t with rho / √(1 − rho²) √S, where S, its sum of squares, is χ²(n − 1):
    the power is the mean of that of a fixed predictor over S. Absolute error 1e-8.
    Source: Sampson (1974), JASA 69:682-689; the same as the density of Hotelling (1953), JRSS B 15:193-232.
    """
    rho, n, alpha = together(rho, n, alpha)
    nodes, weights = _legendre()
    half = (n - 1)[..., None] / 2
    low, high = special.gammaincinv(half, FRINGE), special.gammainccinv(half, FRINGE)
    # In the square root the density of S is nearly normal: few nodes do.
    v = np.sqrt(low) + (np.sqrt(high) - np.sqrt(low)) * nodes
    mass = weights * np.exp((2 * half - 1) * np.log(v / np.sqrt(half)) - v * v + half)
    effect = _fixed_effect(rho)[..., None]
    power = t_power(
        effect * np.sqrt(2) * v, (n - 2)[..., None], alpha[..., None], tails=tails, far_tail=far_tail
    )
    return np.asarray((mass * power).sum(-1) / mass.sum(-1))


def fixed_r_power(
    rho: ArrayLike, n: ArrayLike, alpha: ArrayLike = 0.05, *, tails: int = 2, far_tail: bool = True
) -> Floats:
    """Power of the t test of r = 0 where one variable is fixed: noncentrality rho / √(1 − rho²) √n, df n − 2.

    Source: Cohen (1988) Statistical Power Analysis, 2nd ed., 9.3, for one predictor: f² = rho² / (1 − rho²), λ = f² n.
    """
    rho, n, alpha = together(rho, n, alpha)
    with np.errstate(invalid="ignore"):
        shift = _fixed_effect(rho) * np.sqrt(n)
    return t_power(shift, n - 2, alpha, tails=tails, far_tail=far_tail)


def fisher_r_power(
    rho: ArrayLike, n: ArrayLike, alpha: ArrayLike = 0.05, *, tails: int = 2, far_tail: bool = True
) -> Floats:
    """Power by Fisher's z: shift atanh(rho) √(n − 3); n > 3. Source: Fisher (1921), Metron 1:3-32."""
    rho, n, alpha = together(rho, n, alpha)
    with np.errstate(invalid="ignore"):
        return z_power(np.arctanh(rho) * np.sqrt(n - 3), alpha, tails=tails, far_tail=far_tail)


_POWERS: dict[Method, Callable[..., Floats]] = {
    "exact": exact_r_power,
    "fisher": fisher_r_power,
    "fixed": fixed_r_power,
}


def r_n(
    rho: ArrayLike, power: ArrayLike, alpha: ArrayLike = 0.05, *, method: Method = "exact",
    tails: int = 2, far_tail: bool = True, whole: bool = False,
) -> Floats:  # fmt: skip
    """The n that has the power, by `exact_r_power` or another `method`, for a correlation rho > 0; at least 4."""
    rho, power, alpha = together(rho, power, alpha)

    def rises(n: Floats) -> Floats:
        return _POWERS[method](rho, n, alpha, tails=tails, far_tail=far_tail)

    found = root(
        rises, power, np.full(rho.shape, 4.0), np.full(rho.shape, MOST if method != "exact" else 1e7)
    )
    return whole_from(rises, power, found) if whole else found


def r_detectable(
    n: ArrayLike,
    power: ArrayLike,
    alpha: ArrayLike = 0.05,
    *,
    method: Method = "exact",
    tails: int = 2,
    far_tail: bool = True,
) -> Floats:
    """The smallest correlation that is detected with the power, as for `r_n`; between 1e-6 and 1 − 1e-9."""
    n, power, alpha = together(n, power, alpha)

    def rises(rho: Floats) -> Floats:
        return _POWERS[method](rho, n, alpha, tails=tails, far_tail=far_tail)

    return root(rises, power, np.full(n.shape, 1e-6), np.full(n.shape, 1 - 1e-9))
