"""The noncentral t distribution.

The library's own function depends on its version: in scipy 1.11 P = 0.00096 at t = 30, df = 50, delta = 40
is off by 7e-4 of itself; 1.17 is right there, but gives nan at t = -6, df = 1, delta = 9.7. The quadrature
here does not depend on it and takes t and delta of thousands.
"""

from __future__ import annotations

from functools import cache

import numpy as np
from numpy.typing import ArrayLike
from scipy import special

from recheck.recompute.arrays import Floats, together

NODES = 160
FRINGE = 1e-18
"""Probability left out on either side of a quadrature."""


@cache
def _legendre() -> tuple[Floats, Floats]:
    """Nodes and weights of Gauss and Legendre on [0, 1]."""
    nodes, weights = special.roots_legendre(NODES)
    return (nodes + 1) / 2, weights / 2


def noncentral_t_cdf(t: ArrayLike, df: ArrayLike, delta: ArrayLike) -> Floats:
    """P(T <= t) for T = (Z + delta) / U, Z standard normal, U² an independent chi-square(df) / df.

    Arguments broadcast; df >= 1, finite or not. Absolute error 1e-10. P is the mean of Φ(t U - delta)
    over U, and also the mean of P(U >= (Z + delta) / t) over Z; for each t the smoother is taken.
    Source: Johnson & Welch (1940), Biometrika 31:362-389.
    """
    t, df, delta = together(t, df, delta)
    mirror = t < 0
    size, shift = np.abs(t), np.where(mirror, -delta, delta)
    with np.errstate(invalid="ignore"):
        gentle = size * size <= 2 * df
    finite = np.where(np.isfinite(df), df, 1.0)
    below = np.where(gentle, _over_spread(size, finite, shift), _over_normal(size, finite, shift))
    below = np.where(np.isinf(df), special.ndtr(size - shift), below)
    return np.asarray(np.where(mirror, 1 - below, below))


def _over_spread(t: Floats, df: Floats, delta: Floats) -> Floats:
    """The mean over U, in v = sqrt(U), which smooths the density near 0."""
    nodes, weights = _legendre()
    least = (2 * special.gammaincinv(df / 2, FRINGE) / df) ** 0.25
    most = (2 * special.gammainccinv(df / 2, FRINGE) / df) ** 0.25
    v = least[..., None] + (most - least)[..., None] * nodes
    u, df = v * v, df[..., None]
    mass = weights * np.exp((2 * df - 1) * np.log(v) - df * (u * u - 1) / 2)
    inside = special.ndtr(t[..., None] * u - delta[..., None])
    return np.asarray((mass * inside).sum(-1) / mass.sum(-1))


def _over_normal(t: Floats, df: Floats, delta: Floats) -> Floats:
    """The mean over Z; where Z < -delta the event is certain."""
    nodes, weights = _legendre()
    least = np.clip(-delta, -9.0, 9.0)
    z = least[..., None] + (9.0 - least)[..., None] * nodes
    with np.errstate(divide="ignore", invalid="ignore", over="ignore"):
        ratio = (z + delta[..., None]) / t[..., None]
        inside = special.gammaincc(df[..., None] / 2, df[..., None] / 2 * ratio * ratio)
    density = np.exp(-z * z / 2) / np.sqrt(2 * np.pi)
    return np.asarray(special.ndtr(least) + (9.0 - least) * (weights * density * inside).sum(-1))


def noncentrality(t: ArrayLike, df: ArrayLike, probability: ArrayLike) -> Floats:
    """The delta for which P(T <= t) is `probability` (0 to 1), by bisection; infinite at 0 and 1.

    P falls as delta rises. With q = min(probability, 1 - probability) / 2, delta lies between
    t u - z and t u + z, where u are the quantiles of U and z that of Z with q beyond them: outside, either Z
    or U would have to be beyond its quantile, which has too little probability.
    """
    t, df, probability = together(t, df, probability)
    q = np.minimum(probability, 1 - probability) / 2
    finite = np.where(np.isfinite(df), df, 1.0)
    us = [np.sqrt(2 * f(finite / 2, q) / finite) for f in (special.gammaincinv, special.gammainccinv)]
    ends = [t * np.where(np.isinf(df), 1.0, u) for u in us]
    low, high = np.minimum(*ends) + special.ndtri(q), np.maximum(*ends) - special.ndtri(q)
    for _ in range(60):
        middle = (low + high) / 2
        below = noncentral_t_cdf(t, df, middle) > probability
        low, high = np.where(below, middle, low), np.where(below, high, middle)
    return np.asarray((low + high) / 2)
